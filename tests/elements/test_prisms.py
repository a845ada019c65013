"""Prism pairs: exact rays against a ray trace of their own, Brewster's angle, tips and faces.

Closed form: R. L. Fork, O. E. Martinez, J. P. Gordon, Opt. Lett. 9, 150 (1984).
"""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest

from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.prisms import PrismPair
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium
from pulseprop.material.response import Constant, Sum
from tests.elements.ray_trace import Face, dot, orders, silica, trace, unit

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
SILICA = catalogue_medium("fused silica")


def pair(**changed) -> PrismPair:
    settings = {"medium": SILICA, "apex_separation": 0.6, "passes": 1}
    return PrismPair(name="prisms", centre=CENTRE, **{**settings, **changed})


class Bench:
    """Two prisms whose bisectors stand upright, the second upside down; the beam comes from the left.

    Built from words alone: with both insertions 0 the carrier meets both tips, `separation` apart; then each
    prism is pushed along its bisector until the carrier crosses it at the insertion.
    """

    def __init__(self, separation, insertions, apex):
        self.apex, self.half = apex, apex / 2
        self.upward = mp.asin(silica(CENTRE) * mp.sin(self.half)) - self.half
        self.start = -mp.mpf("0.1") * unit(self.upward)
        tips = [mp.matrix([0, 0]), separation * unit(-self.upward)]
        for number, insertion in enumerate(insertions):
            pushed = list(tips)
            pushed[number] = tips[number] + self.up(number)
            tips[number] = tips[number] + insertion / self.crossing(pushed, number) * self.up(number)
        self.tips = tips

    @staticmethod
    def up(number):
        """From base to tip."""
        return unit(mp.pi / 2 if number == 0 else -mp.pi / 2)

    def faces(self, tips):
        left, right = unit(mp.pi / 2 - self.half), unit(mp.pi / 2 + self.half)
        return [
            Face(tips[0], left, True),
            Face(tips[0], right, False),
            Face(tips[1], right, True),
            Face(tips[1], left, False),
        ]

    def rays(self, omega, tips=None):
        return trace(omega, self.start, unit(self.upward), self.faces(tips or self.tips), silica)

    def crossing(self, tips, number):
        """Where the carrier crosses the bisector of a prism, from its tip."""
        points, _, _ = self.rays(mp.mpf(CENTRE), tips)
        entry, leaving = points[2 * number], points[2 * number + 1]
        share = (tips[number][0] - entry[0]) / (leaving[0] - entry[0]) if leaving[0] != entry[0] else 0
        return dot(tips[number] - (entry + share * (leaving - entry)), self.up(number))

    def glass(self):
        points, _, _ = self.rays(mp.mpf(CENTRE))
        return sum(mp.norm(points[i + 1] - points[i]) for i in (0, 2))

    def phase(self, omega):
        """To the wavefront of the outgoing beam through a fixed point."""
        points, wave, phase = self.rays(omega)
        return phase + dot(wave, mp.matrix([1, 0]) - points[-1])


def brewster():
    return 2 * mp.atan(1 / silica(mp.mpf(CENTRE)))


@pytest.mark.parametrize(
    ("insertions", "apex"),
    [((0.0, 0.0), None), ((3e-3, 3e-3), None), ((2e-3, 9e-3), None), ((5e-3, 4e-3), 60.0)],
)
def test_orders_and_glass_against_a_ray_trace(insertions, apex):
    with mp.workdps(50):
        angle = brewster() if apex is None else mp.radians(apex)
        bench = Bench(mp.mpf("0.6"), [mp.mpf(x) for x in insertions], angle)
        expected, glass = orders(bench.phase, CENTRE), float(bench.glass())
    element = pair(
        insertion=insertions[0],
        second_insertion=insertions[1],
        apex_angle=None if apex is None else np.radians(apex),
    )
    found = orders_of_element(element, CENTRE)
    assert found[0] == 0.0
    assert found[1:] == pytest.approx(expected, rel=1e-9)
    assert element.length == pytest.approx(glass, rel=1e-12, abs=1e-18)


def test_the_phase_itself_over_the_spectrum_and_where_rays_cross_the_second_prism():
    omega = CENTRE * np.linspace(0.85, 1.1, 6)
    with mp.workdps(40):
        bench = Bench(mp.mpf("0.6"), [mp.mpf("4e-3"), mp.mpf("12e-3")], brewster())
        slope = mp.diff(bench.phase, mp.mpf(CENTRE))
        expected = [
            float(bench.phase(mp.mpf(w)) - bench.phase(mp.mpf(CENTRE)) - slope * (w - CENTRE)) for w in omega
        ]
        crossings = [float(mp.norm(bench.rays(mp.mpf(w))[0][2] - bench.tips[1])) for w in omega]
    element = pair(insertion=4e-3, second_insertion=12e-3)
    assert element.exponent(omega, 1)[0].imag == pytest.approx(expected, abs=1e-7)
    assert element.wedges.second_crossing(omega)[0] == pytest.approx(crossings, rel=1e-9)


def test_the_gdd_from_tip_to_tip_in_closed_form():
    """-4 n'^2 L^3 l/(2 pi c^2), n' by wavelength: Fork et al. 1984, Brewster prisms at minimum deviation."""
    with mp.workdps(40):
        slope = float(mp.diff(lambda x: silica(2 * mp.pi * C / x), mp.mpf("800e-9")))
    expected = -4 * slope**2 * 800e-9**3 * 0.6 / (2 * np.pi * C**2)
    assert orders_of_element(pair(), CENTRE)[1] == pytest.approx(expected, rel=1e-10)


def test_brewsters_angle_is_the_default():
    """tan(incidence) = n."""
    assert np.tan(pair().incidence) == pytest.approx(1.4533172549, rel=1e-9)


def test_passes_double():
    assert orders_of_element(pair(passes=2), CENTRE) == pytest.approx(
        [2 * order for order in orders_of_element(pair(), CENTRE)], rel=1e-13
    )


def test_glass_that_absorbs_takes_its_share_along_the_carrier():
    """Lambert and Beer along 2 x tan(apex/2) of each prism."""
    line = LorentzLine(strength=1e24, centre=CENTRE, width=3e13)
    tinted = Medium(name="tinted", response=Sum((Constant(1.25), line)))
    element = pair(medium=tinted, insertion=2e-3, second_insertion=5e-3)
    alpha = float(tinted.absorption(np.array(CENTRE)))
    passed = abs(transfer_of(element, np.array(CENTRE))) ** 2
    assert 0.05 < alpha * element.length < 2
    assert passed == pytest.approx(np.exp(-alpha * element.length), rel=1e-4)


def test_no_light_is_gained_beside_the_tip():
    line = LorentzLine(strength=2e25, centre=CENTRE, width=3e13)
    tinted = Medium(name="tinted", response=Sum((Constant(1.25), line)))
    omega = CENTRE * np.linspace(0.5, 1.8, 501)
    assert np.all(pair(medium=tinted).exponent(omega, 1)[0].real <= 0)


def test_tips_cut_the_beam():
    """Carrier on both tips: each cuts half. One radius inside both: each takes (1 - erf(sqrt 2))/2."""
    assert abs(pair(beam_radius=1e-3).factor(np.array(CENTRE))) ** 2 == pytest.approx(0.25, rel=1e-12)
    scale = np.cos(pair().incidence) / np.cos(0.5 * pair().apex)
    inside = pair(beam_radius=1e-3, insertion=1e-3 / scale)
    assert inside.clearance == pytest.approx((1e-3, 1e-3), rel=1e-12)
    assert abs(complex(inside.factor(np.array(CENTRE)))) ** 2 == pytest.approx((1 - 0.0227501) ** 2, abs=1e-6)
    assert pair(insertion=5e-3, beam_radius=1e-3).remarks == ()
    assert "needs an insertion of 1.45 mm" in pair(beam_radius=1e-3).remarks[0]


def test_blue_light_misses_the_second_tip_first():
    element = pair(insertion=4e-3, beam_radius=0.5e-3)
    red, blue = np.abs(element.factor(CENTRE * np.array([0.8, 1.25]))) ** 2
    assert red > 0.999
    assert blue < 1e-3


def test_p_light_loses_nothing_at_brewsters_angle_and_s_light_what_fresnel_says():
    """s at Brewster: r = (n^2 - 1)/(n^2 + 1); four faces a pass."""
    n2 = 1.4533172549**2
    at = np.array(CENTRE)
    assert abs(complex(pair(faces="fresnel").factor(at))) == pytest.approx(1, abs=1e-14)
    lost = ((n2 - 1) / (n2 + 1)) ** 2
    for passes in (1, 2):
        element = pair(faces="fresnel", polarisation="s", passes=passes)
        assert abs(complex(element.factor(at))) ** 2 == pytest.approx((1 - lost) ** (4 * passes), rel=1e-9)
    assert f"{100 * lost:.3g} % of s-polarised" in pair().stray_beams[0]


def test_total_reflection_ends_the_band():
    """SF10, apex 70.6 deg: n sin(apex - asin(sin i / n)) = 1 at the end."""
    element = pair(medium=catalogue_medium("SF10"), apex_angle=np.radians(70.6))
    end = element.band.high
    assert CENTRE < end < catalogue_medium("SF10").band.high
    n = float(np.real(catalogue_medium("SF10").index(np.array(end))))
    assert n * np.sin(element.apex - np.arcsin(np.sin(element.incidence) / n)) == pytest.approx(1, abs=1e-12)
    assert abs(transfer_of(element, np.array(end * 1.001))) < 1e-80
    assert "totally reflected" in element.remedy_beyond(0.9 * CENTRE, 1.5 * end)


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"passes": 0}, "passes"),
        ({"insertion": -1e-3}, "below 0"),
        ({"apex_separation": 1e-3, "insertion": 10e-3}, "overlap"),
        ({"apex_angle": np.radians(90)}, r"below 86\.9"),
    ],
)
def test_settings_outside_are_refused(changed, words):
    with pytest.raises(InputError, match=words):
        pair(**changed)
