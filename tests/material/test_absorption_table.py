"""Media made from measured absorption: quantities, anchors, orders, ceilings, refusals. Data invented."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.material.absorption_density import Tails
from pulseprop.material.absorption_table import absorption_table
from pulseprop.material.kramers_kronig import Anchor

C = 299792458.0
CENTRE, WIDTH, HEIGHT = 3.4e15, 1.5e14, 1e-4
"""An invented dye band: k = HEIGHT exp(-((w - CENTRE)/WIDTH)^2) and its mirror."""
OMEGA = np.linspace(2.6e15, 4.2e15, 321)
LENGTH, CONCENTRATION, BACKGROUND = 1e-3, 0.2, 1.36


def k_of(omega):
    return HEIGHT * (np.exp(-(((omega - CENTRE) / WIDTH) ** 2)) - np.exp(-(((omega + CENTRE) / WIDTH) ** 2)))


def n_of(omega):
    """The Gaussian's partner in Dawson functions (as in tests/published), minus one."""
    from scipy.special import dawsn

    return HEIGHT * 2 / np.sqrt(np.pi) * (dawsn((omega + CENTRE) / WIDTH) - dawsn((omega - CENTRE) / WIDTH))


def background(omega):
    return np.full_like(omega, BACKGROUND)


ALPHA = 2 * OMEGA * k_of(OMEGA) / C


def plate(omega, index, length=LENGTH):
    """Incoherent sum over echoes in a plate, written as the geometric series itself."""
    r = np.abs((index - 1) / (index + 1)) ** 2
    a = np.exp(-2 * omega * index.imag / C * length)
    return sum((1 - r) ** 2 * a * (r * a) ** (2 * m) for m in range(12))


MEASURED = {
    "absorbance": ALPHA * LENGTH / np.log(10),
    "napierian": ALPHA * LENGTH,
    "alpha": ALPHA,
    "k": k_of(OMEGA),
    "molar": ALPHA / (np.log(10) * CONCENTRATION),
    "internal_transmittance": np.exp(-ALPHA * LENGTH),
    "transmittance": plate(OMEGA, BACKGROUND + n_of(OMEGA) + 1j * k_of(OMEGA)),
}


@pytest.mark.parametrize("quantity", MEASURED)
def test_every_quantity_gives_the_same_index(quantity):
    table = absorption_table(
        OMEGA,
        MEASURED[quantity],
        quantity=quantity,
        path_length=LENGTH,
        concentration=CONCENTRATION,
        background=background,
    )
    places = np.array([2.0e15, 3.0e15, 3.37e15, 3.4e15, 3.5e15, 4.0e15])
    expected = n_of(places) + 1j * k_of(places)
    assert table.refraction_series(places, 1)[0] == pytest.approx(expected, abs=1e-6 * HEIGHT)
    assert table.cautions[0][0] == "no-anchor"
    assert table.band.low == 0
    assert table.band.high == np.inf


def test_a_table_by_wavelength_descends_in_frequency_and_is_turned_round():
    turned = absorption_table(OMEGA[::-1], k_of(OMEGA)[::-1], quantity="k")
    assert np.all(np.diff(turned.omega) > 0)
    assert turned.k == pytest.approx(k_of(OMEGA))


def test_orders_follow_the_closed_form_inside_the_band_and_outside_the_rows():
    """Derivatives of the Dawson form by its own equation D' = 1 - 2 x D, taken with mpmath."""
    import mpmath

    table = absorption_table(OMEGA, k_of(OMEGA), quantity="k")

    def exact(place, order):
        with mpmath.workdps(30):

            def faddeeva(x):
                z = (x - CENTRE / 1e15) / (WIDTH / 1e15)
                m = (x + CENTRE / 1e15) / (WIDTH / 1e15)
                wofz = lambda q: mpmath.exp(-q * q) * mpmath.erfc(-1j * q)  # noqa: E731
                return HEIGHT * 1j * (wofz(z) - wofz(m))

            return complex(mpmath.diff(faddeeva, place / 1e15, order) / mpmath.factorial(order))

    places = np.array([1.5e15, 3.3e15, 3.4e15, 3.45e15])
    series = table.refraction_series(places, 5)
    for place, column in zip(places, series.T, strict=True):
        for order, (coefficient, accuracy) in enumerate(
            zip(column, (1e-6, 1e-5, 1e-3, 1e-2, 3e-2), strict=True)
        ):
            scale = HEIGHT / (WIDTH / 1e15) ** order if place > 2e15 else abs(exact(place, order))
            assert abs(coefficient * 1e15**order - exact(place, order)) < accuracy * scale


def test_one_anchor_is_met_and_adds_a_constant():
    anchor = Anchor(omega=2.8e15, value=1.39, uncertainty=1e-4)
    table = absorption_table(OMEGA, k_of(OMEGA), quantity="k", background=background, anchors=[anchor])
    free = absorption_table(OMEGA, k_of(OMEGA), quantity="k")
    places = np.array([2.8e15, 3.6e15])
    found = table.refraction_series(places, 1)[0]
    assert BACKGROUND + found[0].real == pytest.approx(1.39, abs=1e-12)
    assert found - free.refraction_series(places, 1)[0] == pytest.approx(
        np.full(2, table.model.constant), abs=1e-12
    )
    assert table.model.constant > 0
    assert not table.cautions


def test_several_anchors_are_explained_by_absorption_outside_that_is_never_negative():
    """Over vacuum, the index of an ultraviolet band at 1.6e16 rad/s, known at four wavelengths."""

    def host(omega):
        return 0.36 * 2.56e32 / (2.56e32 - omega**2)

    places = np.array([1.8e15, 2.4e15, 3.0e15, 4.1e15])
    anchors = [Anchor(omega=p, value=1 + float(host(p) + n_of(p)), uncertainty=1e-5) for p in places]
    table = absorption_table(OMEGA, k_of(OMEGA), quantity="k", anchors=anchors)
    between = np.linspace(2.6e15, 4.1e15, 30)
    found = table.refraction_series(between, 3)
    assert found[0].real == pytest.approx(host(between) + n_of(between), abs=5e-5)
    assert np.min(found[0].imag) > -1e-9 * HEIGHT
    everywhere = np.geomspace(1e13, 1e18, 500)
    assert np.min(table.refraction_series(everywhere, 1)[0].imag) > -1e-12


def test_anchors_that_no_absorption_explains_are_refused():
    falling = [
        Anchor(omega=p, value=v, uncertainty=1e-4) for p, v in ((2.7e15, 1.5), (3.0e15, 1.3), (4.0e15, 1.6))
    ]
    with pytest.raises(InputError, match="all the anchors' indices"):
        absorption_table(OMEGA, k_of(OMEGA), quantity="k", anchors=falling)


def test_an_anchor_below_the_background_is_refused_unless_within_its_uncertainty():
    low = Anchor(omega=2.8e15, value=1.35, uncertainty=1e-3)
    with pytest.raises(InputError, match="lies below what background"):
        absorption_table(OMEGA, k_of(OMEGA), quantity="k", background=background, anchors=[low])
    near = Anchor(omega=2.8e15, value=1.36, uncertainty=1e-3)
    table = absorption_table(OMEGA, k_of(OMEGA), quantity="k", background=background, anchors=[near])
    assert table.model.constant == 0


def test_rows_above_the_ceiling_are_left_out_and_named():
    absorbance = MEASURED["absorbance"].copy()
    ceiling = 0.9 * absorbance.max()
    clipped = np.minimum(absorbance, ceiling * 1.02)
    table = absorption_table(OMEGA, clipped, quantity="absorbance", path_length=LENGTH, ceiling=ceiling)
    assert len(table.omega) == np.sum(absorbance <= ceiling)
    assert table.k.max() < 0.91 * HEIGHT
    assert any("lower limits" in note and "ceiling" in note for note in table.notes)


def test_the_tails_are_told():
    table = absorption_table(OMEGA, k_of(OMEGA), quantity="k", tails=Tails(below="none", above="matched"))
    assert any("index zero assumed" in note for note in table.notes)
    assert any("inverse cube" in note for note in table.notes)
    assert table.band.low == OMEGA[0]


def test_noise_below_zero_is_set_to_zero_and_told():
    noisy = k_of(OMEGA) + 1e-7 * np.random.default_rng(2).standard_normal(OMEGA.size)
    table = absorption_table(OMEGA, noisy, quantity="k")
    assert table.k.min() == 0
    assert any("taken as zero" in note for note in table.notes)


def spoiled(change):
    omega, k = OMEGA.copy(), k_of(OMEGA)
    change(omega, k)
    return omega, k


def gain(omega, k):
    k[40] = -0.1 * HEIGHT


def missing(omega, k):
    k[12] = np.nan


def disorder(omega, k):
    omega[[9, 10]] = omega[[10, 9]]


def twice(omega, k):
    omega[10] = omega[9]


@pytest.mark.parametrize(
    ("change", "text"),
    [
        (gain, "row 41: absorption is negative beyond noise"),
        (missing, "row 13: a value is missing"),
        (disorder, "row 11: rows are out of order"),
        (twice, "row 11: a wavelength or frequency stands twice"),
    ],
)
def test_bad_rows_are_refused_with_their_numbers(change, text):
    with pytest.raises(InputError, match=text):
        absorption_table(*spoiled(change), quantity="k")


def test_swapped_columns_are_guessed():
    with pytest.raises(InputError, match="are the two columns swapped"):
        absorption_table(MEASURED["absorbance"] + 1, OMEGA, quantity="alpha")


def test_row_numbers_of_the_file_are_used():
    with pytest.raises(InputError, match="row 57"):
        absorption_table(*spoiled(missing), quantity="k", numbers=range(45, 45 + OMEGA.size))


@pytest.mark.parametrize(
    ("quantity", "options", "text"),
    [
        ("absorbance", {}, "absorbance needs a path_length"),
        ("molar", {}, "molar needs a concentration"),
        ("transmittance", {"path_length": 1e-3}, "needs the index of the background"),
        ("dimness", {}, "unknown kind of absorption"),
    ],
)
def test_what_is_missing_is_asked_for(quantity, options, text):
    with pytest.raises(InputError, match=text):
        absorption_table(OMEGA, np.full_like(OMEGA, 0.5), quantity=quantity, **options)


def test_a_transmittance_of_zero_asks_for_a_ceiling():
    values = MEASURED["internal_transmittance"].copy()
    values[100] = 0.0
    with pytest.raises(InputError, match="row 101"):
        absorption_table(OMEGA, values, quantity="internal_transmittance", path_length=LENGTH)
    table = absorption_table(
        OMEGA, values, quantity="internal_transmittance", path_length=LENGTH, ceiling=4.0
    )
    assert len(table.omega) == OMEGA.size - 1
