"""Coatings and Gires-Tournois mirrors against textbook formulas and characteristic matrices of their own.

Characteristic matrices and the quarter-wave stack: M. Born, E. Wolf, Principles of Optics, section 1.6 (from
memory). The matrices are multiplied with mpmath at 50 digits and differentiated by it.
"""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.elements.coating import Coating, Film
from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.gires_tournois import GiresTournois
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium
from pulseprop.material.response import Constant, Sum
from tests.elements.ray_trace import C as LIGHT
from tests.elements.ray_trace import silica

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
QUIET = settings(max_examples=25, deadline=None, derandomize=True)
SILICA = catalogue_medium("fused silica")
HIGH, LOW = 2.25, 1.45


def of_index(n: float) -> Medium:
    return Medium(name=f"index {n}", response=Constant(n * n - 1))


def quarter(n: float, omega: float = CENTRE) -> Film:
    return Film(of_index(n), 2 * np.pi * C / omega / (4 * n))


def coating(**changed) -> Coating:
    return Coating(name="coating", centre=CENTRE, **changed)


def stack(pairs: int, last: tuple[float, ...] = (HIGH,)) -> tuple[Film, ...]:
    return tuple(quarter(n) for n in (HIGH, LOW) * pairs + last)


@pytest.mark.parametrize("pairs", [0, 1, 3, 8])
def test_a_quarter_wave_stack_reflects_what_the_textbook_says(pairs):
    """((1 - Y)/(1 + Y))^2 with Y = (n_high/n_low)^(2 pairs) n_high^2/n_substrate."""
    y = (HIGH / LOW) ** (2 * pairs) * HIGH**2 / 1.52
    found = coating(films=stack(pairs), substrate=of_index(1.52)).share(np.array(CENTRE))
    assert found == pytest.approx(((1 - y) / (1 + y)) ** 2, rel=1e-12)


def test_a_quarter_wave_of_the_root_of_the_index_reflects_nothing():
    films = (quarter(np.sqrt(1.52)),)
    assert coating(films=films, substrate=of_index(1.52)).share(np.array(CENTRE)) < 1e-28
    through = coating(films=films, substrate=of_index(1.52), side="transmission")
    assert through.share(np.array(CENTRE)) == pytest.approx(1, rel=1e-13)


@QUIET
@given(
    st.lists(st.tuples(st.floats(1.2, 3.5), st.floats(1e-8, 1e-6)), max_size=6),
    st.floats(0.0, 1.4),
    st.sampled_from(["s", "p"]),
    st.floats(1.0, 3.0),
)
def test_clear_films_keep_the_energy(films, angle, polarisation, substrate):
    common = {
        "films": tuple(Film(of_index(n), d) for n, d in films),
        "incidence": angle,
        "polarisation": polarisation,
        "substrate": of_index(substrate),
    }
    omega = CENTRE * np.linspace(0.7, 1.4, 5)
    back, through = coating(**common), coating(side="transmission", **common)
    assert back.share(omega) + through.share(omega) == pytest.approx(np.ones(5), abs=1e-12)


@QUIET
@given(st.floats(0.0, 1.4), st.sampled_from(["s", "p"]), st.floats(1e-7, 1e-4))
def test_films_that_absorb_take_energy_and_never_give(angle, polarisation, thickness):
    line = LorentzLine(strength=2e29, centre=CENTRE, width=2e14)
    tinted = Medium(name="tinted", response=Sum((Constant(1.1), line)))
    common = {
        "films": (quarter(HIGH), Film(tinted, thickness), quarter(LOW)),
        "incidence": angle,
        "polarisation": polarisation,
        "substrate": of_index(1.5),
    }
    omega = CENTRE * np.linspace(0.9, 1.1, 9)
    total = coating(**common).share(omega) + coating(side="transmission", **common).share(omega)
    assert np.all(total <= 1 + 1e-12)
    assert total[4] < 1 - 1e-6


@pytest.mark.parametrize("polarisation", ["s", "p"])
@pytest.mark.parametrize("angle", [0.0, 0.7])
def test_one_film_in_air_is_a_slab_with_echoes(polarisation, angle):
    omega = CENTRE * np.linspace(0.7, 1.3, 41)
    film = coating(
        films=(Film(SILICA, 12e-6),), side="transmission", incidence=angle, polarisation=polarisation
    )
    slab = Slab(
        name="s", medium=SILICA, thickness=12e-6, angle=angle, polarisation=polarisation, faces="echoes"
    )
    assert transfer_of(film, omega) == pytest.approx(transfer_of(slab, omega), abs=1e-12)


def characteristic(omega, films, substrate, angle, polarisation):
    """Reflected amplitude from the product of characteristic matrices; films: (index(omega), thickness)."""
    sine = mp.sin(angle)

    def admittance(index):
        normal = mp.sqrt(index**2 - sine**2)
        return normal if polarisation == "s" else index**2 / normal

    total = mp.eye(2)
    for index, thickness in films:
        n = index(omega)
        phase, y = omega / LIGHT * thickness * mp.sqrt(n**2 - sine**2), admittance(n)
        total = total * mp.matrix(
            [[mp.cos(phase), -1j * mp.sin(phase) / y], [-1j * y * mp.sin(phase), mp.cos(phase)]]
        )
    outside, inside = admittance(mp.mpf(1)), admittance(substrate)
    b, c = total[0, 0] + total[0, 1] * inside, total[1, 0] + total[1, 1] * inside
    return (outside * b - c) / (outside * b + c)


@pytest.mark.parametrize("polarisation", ["s", "p"])
def test_orders_against_derivatives_of_characteristic_matrices(polarisation):
    """A dispersive stack of silica and a constant index at 40 deg, off its centre."""
    thicknesses = [95e-9, 140e-9, 110e-9, 150e-9, 180e-9, 160e-9]
    films = tuple(Film(of_index(HIGH) if i % 2 == 0 else SILICA, d) for i, d in enumerate(thicknesses))
    element = coating(
        films=films, substrate=of_index(1.52), incidence=np.radians(40), polarisation=polarisation, bounces=3
    )
    with mp.workdps(50):
        described = [
            ((lambda w: mp.mpf(HIGH)) if i % 2 == 0 else silica, mp.mpf(d)) for i, d in enumerate(thicknesses)
        ]

        def phase(omega):
            angle = mp.mpf(np.radians(40))
            return mp.im(mp.log(characteristic(omega, described, mp.mpf(1.52), angle, polarisation)))

        expected = [3 * float(mp.diff(phase, mp.mpf(CENTRE), m)) for m in (2, 3, 4)]
        share = float(
            abs(characteristic(mp.mpf(CENTRE), described, mp.mpf(1.52), mp.mpf(np.radians(40)), polarisation))
            ** 2
        )
    found = orders_of_element(element, CENTRE)
    assert found[0] == pytest.approx(0, abs=1e-25)
    assert found[1:] == pytest.approx(expected, rel=1e-8)
    assert element.share(np.array(CENTRE)) == pytest.approx(share, rel=1e-11)


def test_a_thick_absorber_hides_what_lies_behind():
    line = LorentzLine(strength=2e31, centre=CENTRE, width=2e14)
    black = Medium(name="black", response=Sum((Constant(1.1), line)))
    hidden = [
        coating(films=(Film(black, 1e-3),), substrate=of_index(n)).share(np.array(CENTRE)) for n in (1.0, 3.0)
    ]
    n = complex(black.index(np.array(CENTRE)))
    assert hidden == pytest.approx([abs((n - 1) / (n + 1)) ** 2] * 2, rel=1e-12)


def test_what_a_coating_says_of_itself():
    element = coating(films=stack(4), substrate=of_index(1.52), bounces=2)
    assert "9 films on index 1.52, reflection: " in element.detail
    assert element.detail.endswith("a bounce at 800 nm; 2 bounces")
    assert {medium.name for medium in element.media} == {"index 2.25", "index 1.45", "index 1.52"}
    assert "passes or is absorbed" in element.stray_beams[0]
    assert element.phase_only


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"films": ()}, "nothing is there"),
        ({"films": (Film(SILICA, -1e-9),)}, "thickness"),
        ({"films": (Film(SILICA, 1e-7),), "incidence": 1.6}, "below 90 deg"),
        ({"films": (Film(SILICA, 1e-7),), "bounces": -1}, "bounces"),
    ],
)
def test_coatings_outside_are_refused(changed, words):
    with pytest.raises(InputError, match=words):
        coating(**changed)


SPACER = of_index(1.45)


def mirror(**changed) -> GiresTournois:
    settings_ = {"medium": SPACER, "thickness": 3e-6, "front": 0.1}
    return GiresTournois(name="gti", centre=CENTRE, **{**settings_, **changed})


@QUIET
@given(st.floats(0.0, 0.9), st.floats(5e-7, 2e-5), st.floats(0.0, 1.2))
def test_group_delay_and_gdd_of_a_gires_tournois_mirror(front, thickness, angle):
    """With t the round trip and x = omega t: t_g = t (1 - R)/(1 + R - 2 sqrt(R) cos x), GDD = its derivative,
    -2 t^2 (1 - R) sqrt(R) sin x/(1 + R - 2 sqrt(R) cos x)^2 (a constant spacer)."""
    trip = 2 * thickness / C * np.sqrt(1.45**2 - np.sin(angle) ** 2)
    x, root = CENTRE * trip, np.sqrt(front)
    below = 1 + front - 2 * root * np.cos(x)
    gdd = -2 * trip**2 * (1 - front) * root * np.sin(x) / below**2
    element = mirror(front=front, thickness=thickness, incidence=angle)
    assert orders_of_element(element, CENTRE)[1] == pytest.approx(gdd, rel=1e-7, abs=1e-9 * trip**2)
    omega = CENTRE * np.array([1.0, 1.01])
    found = np.imag(element.exponent(omega, 2)[1])
    delay = [trip * (1 - front) / (1 + front - 2 * root * np.cos(w * trip)) for w in omega]
    assert found[1] - found[0] == pytest.approx(delay[1] - delay[0], rel=1e-6, abs=1e-9 * trip)


def test_a_whole_back_reflects_all_and_a_partial_one_less():
    omega = CENTRE * np.linspace(0.8, 1.2, 101)
    assert np.abs(transfer_of(mirror(bounces=4), omega)) == pytest.approx(np.ones(101), abs=1e-13)
    assert np.all(np.abs(transfer_of(mirror(back=0.99), omega)) < 1)


def test_the_closed_form_is_a_film_on_a_mirror():
    """A spacer between its bare face, r = -(n - 1)/(n + 1), and a substrate of index 1e9, r = -1: both turn
    the phase by pi against the formula, whose orders are found half a free spectral range away."""
    trip = 2 * 1.45 * 3e-6 / C
    film = coating(films=(Film(SPACER, 3e-6),), substrate=of_index(1e9))
    closed = mirror(front=(0.45 / 2.45) ** 2)
    assert orders_of_element(film, CENTRE)[1:] == pytest.approx(
        orders_of_element(closed, CENTRE + np.pi / trip)[1:], rel=1e-6
    )


def test_ringing_follows_the_round_trips():
    """sqrt(0.1) a trip: 1.1513 nepers, 19 trips to exp(-21), each of 2 n d/c."""
    assert mirror().ringing(0.9 * CENTRE, 1.1 * CENTRE) == pytest.approx(19 * 2 * 1.45 * 3e-6 / C, rel=1e-9)
    assert mirror(front=0.0).ringing(0.9 * CENTRE, 1.1 * CENTRE) == 0.0


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"front": 1.0}, "front"),
        ({"back": 0.0}, "back"),
        ({"back": 0.05}, "more than the back"),
        ({"thickness": 0.0}, "thickness"),
        ({"incidence": 1.6}, "below 90 deg"),
    ],
)
def test_mirrors_outside_are_refused(changed, words):
    with pytest.raises(InputError, match=words):
        mirror(**changed)
