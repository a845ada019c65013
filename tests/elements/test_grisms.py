"""Grism pairs against a ray trace of their own, and in the limits of bare gratings and bare prisms."""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest

from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.gratings import GratingPair
from pulseprop.elements.grisms import GrismPair
from pulseprop.elements.prisms import PrismPair
from pulseprop.errors import InputError, RangeError
from pulseprop.material.catalogue_media import VACUUM, catalogue_medium
from tests.elements.ray_trace import C as LIGHT
from tests.elements.ray_trace import Face, dot, orders, silica, trace, unit

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
SILICA = catalogue_medium("fused silica")
SETTINGS = {
    "grooves": 600e3,
    "apex_angle": np.radians(35),
    "incidence": np.radians(10),
    "separation": 8e-3,
    "insertion": 6e-3,
    "second_insertion": 9e-3,
}


def pair(**changed) -> GrismPair:
    return GrismPair(name="grisms", centre=CENTRE, **{"medium": SILICA, "passes": 1, **SETTINGS, **changed})


class Bench:
    """Gratings upright, the first at x = 0; the first prism's edge at its top, glass to the left."""

    def __init__(self, *, grooves, apex_angle, incidence, separation, insertion, second_insertion, order=-1):
        self.momentum = order * 2 * mp.pi * mp.mpf(grooves)
        self.apex = mp.mpf(apex_angle)
        # The carrier meets the first grating at the origin; the second where it meets that one.
        carrier = mp.mpf(CENTRE)
        inside = self.apex - mp.asin(mp.sin(incidence) / silica(carrier))
        leaving = silica(carrier) * mp.sin(inside) + self.momentum * LIGHT / carrier
        down = separation * leaving / mp.sqrt(1 - leaving**2)
        edges = [mp.matrix([0, insertion]), mp.matrix([separation, -down - second_insertion])]
        entry = unit(-mp.pi / 2 - self.apex)
        self.faces = [
            Face(edges[0], entry, True),
            Face(edges[0], unit(-mp.pi / 2), False, self.momentum),
            Face(edges[1], unit(-mp.pi / 2), True, -self.momentum),
            Face(edges[1], entry, False),
        ]
        # Normal of the entry face into the glass lies at -apex; inside, the beam goes down by `inside`.
        self.direction = unit(-self.apex + mp.mpf(incidence))
        self.start = self._entry_point(inside) - mp.mpf("0.05") * self.direction

    def _entry_point(self, inside):
        """Back from the origin along the ray inside to the entry face."""
        back = -unit(-inside)
        points, _, _ = trace(
            mp.mpf(CENTRE),
            mp.matrix([0, 0]),
            back,
            [Face(self.faces[0].point, self.faces[0].along, False)],
            silica,
        )
        return points[0]

    def phase(self, omega):
        points, wave, phase = trace(omega, self.start, self.direction, self.faces, silica)
        return phase + dot(wave, mp.matrix([1, 0]) - points[-1])

    def points(self, omega):
        return trace(omega, self.start, self.direction, self.faces, silica)[0]


@pytest.mark.parametrize(
    "changed",
    [
        {},
        {"incidence": np.radians(-20), "apex_angle": np.radians(15)},
        {"grooves": 1200e3, "apex_angle": np.radians(40), "incidence": np.radians(25)},
        {"order": 1, "grooves": 200e3, "apex_angle": np.radians(20)},
        {"order": -2, "grooves": 300e3},
    ],
)
def test_orders_and_glass_against_a_ray_trace(changed):
    with mp.workdps(50):
        bench = Bench(**{**SETTINGS, **changed})
        expected = orders(bench.phase, CENTRE)
        points = bench.points(mp.mpf(CENTRE))
        glass = float(mp.norm(points[1] - points[0]) + mp.norm(points[3] - points[2]))
    found = orders_of_element(pair(**changed), CENTRE)
    assert found[0] == 0.0
    assert found[1:] == pytest.approx(expected, rel=1e-9)
    assert pair(**changed).length == pytest.approx(glass, rel=1e-12)


def test_light_lands_where_the_rays_do():
    omega = CENTRE * np.linspace(0.9, 1.1, 5)
    with mp.workdps(40):
        bench = Bench(**SETTINGS)
        heights = [float(bench.points(mp.mpf(w))[2][1]) for w in (*omega, CENTRE)]
    # The edge of the second prism lies below: towards it is down.
    expected = [heights[-1] - height for height in heights[:-1]]
    assert pair().landing(omega) == pytest.approx(expected, rel=1e-9, abs=1e-15)


def test_prisms_of_nothing_leave_the_grating_pair():
    """Vacuum, apex 0: Treacy's pair."""
    bare = pair(medium=VACUUM, apex_angle=0.0, incidence=np.radians(-20))
    gratings = GratingPair(
        name="g", centre=CENTRE, grooves=600e3, incidence=np.radians(20), separation=8e-3, passes=1
    )
    assert orders_of_element(bare, CENTRE) == pytest.approx(orders_of_element(gratings, CENTRE), rel=1e-10)


def test_hardly_any_grooves_leave_the_prism_pair():
    prisms = PrismPair(name="p", centre=CENTRE, medium=SILICA, apex_separation=0.3, insertion=4e-3, passes=1)
    scale = np.cos(0.5 * prisms.apex)
    grisms = pair(
        grooves=1e-6,
        apex_angle=prisms.apex,
        incidence=prisms.incidence,
        separation=prisms.wedges.gap,
        insertion=4e-3 / scale,
        second_insertion=4e-3 / scale,
    )
    assert orders_of_element(grisms, CENTRE) == pytest.approx(orders_of_element(prisms, CENTRE), rel=1e-8)


def test_grisms_can_undo_the_third_order_of_glass_which_gratings_cannot():
    """Glass: GDD and TOD of one sign. Gratings: opposite signs, always. Grisms: both negative, so that one
    setting takes both off 40 mm of silica (common practice, no source)."""
    ratios = []
    for degrees in range(-60, 60, 5):
        for apex in (5, 15, 25, 35, 45):
            try:
                element = pair(
                    apex_angle=np.radians(apex),
                    incidence=np.radians(degrees),
                    separation=30e-3,
                    insertion=5e-3,
                    second_insertion=5e-3,
                )
            except InputError:
                continue
            _, gdd, tod, _ = orders_of_element(element, CENTRE)
            if gdd < 0:
                ratios.append(tod / gdd * 1e15)
    silica_ratio = 27.49726 / 36.162
    assert min(ratios) < silica_ratio < max(ratios)


def test_diffraction_stops_and_that_is_known():
    element = pair(grooves=1200e3, apex_angle=np.radians(10), incidence=0.0)
    for end in (element.band.low, element.band.high):
        if 0 < end < np.inf:
            n = float(np.real(SILICA.index(np.array(end))))
            sine = n * np.sin(element.apex_angle) - 2 * np.pi * C * 1200e3 / end
            assert abs(sine) == pytest.approx(1, abs=1e-9)
    assert 0 < element.band.low < CENTRE
    assert abs(transfer_of(element, np.array(0.99 * element.band.low))) < 1e-80


def test_losses():
    """0.9 a diffraction, four of them; a grating's edge on the carrier's axis would take half."""
    assert abs(transfer_of(pair(efficiency=0.9, passes=2), np.array(CENTRE))) ** 2 == pytest.approx(
        0.9**4, rel=1e-12
    )
    element = pair(width=4e-3, beam_radius=0.3e-3, separation=40e-3, insertion=20e-3, second_insertion=20e-3)
    omega = CENTRE * np.linspace(0.8, 1.0, 4001)
    edge = int(np.argmin(np.abs(np.abs(element.landing(omega)) - 2e-3)))
    assert abs(element.factor(omega)[edge]) ** 2 == pytest.approx(0.5, abs=5e-3)
    assert "4 times" not in pair().stray_beams[0]


def test_edges_of_the_prisms_cut_the_beam():
    """On the edge of either, half of the beam; a radius inside (on the grating), all but 2.275 %."""
    at = np.array(CENTRE)
    for key in ("insertion", "second_insertion"):
        on_edge = pair(**{"beam_radius": 0.3e-3, key: 0.0})
        assert abs(complex(on_edge.factor(at))) ** 2 == pytest.approx(0.5, rel=1e-9)
        assert "an edge of the prisms cuts into the beam" in on_edge.remarks[0]
        inside = pair(**{"beam_radius": 0.3e-3, key: on_edge.spot})
        assert abs(complex(inside.factor(at))) ** 2 == pytest.approx(1 - 0.0227501, abs=1e-6)
        assert inside.remarks == ()
    assert pair().factor(at) is None


@pytest.mark.parametrize(
    ("changed", "words", "error"),
    [
        ({"order": 0}, "order 0 is not", InputError),
        ({"passes": 0}, "passes", InputError),
        ({"insertion": -1e-3}, "below 0", InputError),
        ({"incidence": 1.6}, "below 90 deg", InputError),
        ({"width": 1e-2}, "beam_radius", InputError),
        ({"grooves": 3000e3}, "do not diffract", RangeError),
    ],
)
def test_settings_outside_are_refused(changed, words, error):
    with pytest.raises(error, match=words):
        pair(**changed)
