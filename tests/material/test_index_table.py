"""Index tables as causal media: printed digits, published silica, absorbing rows, refusals."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from pulseprop.errors import InputError, RangeError
from pulseprop.material.index_table import index_table
from pulseprop.material.orders import orders_of
from pulseprop.material.printed_digits import half_unit, index_uncertainty

C = 299792458.0
AT_800 = 2 * np.pi * C / 800e-9


def omega_of(micrometres):
    return 2 * np.pi * C / (micrometres * 1e-6)


def silica(micrometres):
    """I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965)."""
    square = micrometres**2
    terms = ((0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161))
    return np.sqrt(1 + sum(strength * square / (square - place**2) for strength, place in terms))


WAVELENGTHS = np.linspace(0.4, 1.6, 61)


def gvd(table, omega=AT_800):
    """fs^2/mm."""
    return orders_of(table.refraction_series(np.array(omega), 5), omega).gvd * 1e27


@pytest.mark.parametrize(("decimals", "bracket"), [(5, (35.77, 36.59)), (6, (36.11, 36.21))])
def test_rounded_silica_gives_its_dispersion_back(decimals, bracket):
    """True GVD at 800 nm: 36.16. The bracket: what causality leaves at +-1e-5, +-1e-6 (computed apart)."""
    table = index_table(
        omega_of(WAVELENGTHS), np.round(silica(WAVELENGTHS), decimals), printed_axis=WAVELENGTHS
    )
    assert table.causal
    assert table.uncertainty_factor <= 1
    assert bracket[0] < gvd(table) < bracket[1]
    assert gvd(table) == pytest.approx(36.16, abs=0.05)


def test_silica_between_its_rows_and_above_the_axis():
    table = index_table(omega_of(WAVELENGTHS), np.round(silica(WAVELENGTHS), 5))
    places = np.linspace(0.41, 1.59, 200)
    assert table.refraction_series(omega_of(places), 1)[0] + 1 == pytest.approx(silica(places), abs=1e-5)
    assert table.refraction_series(np.array([1j * AT_800]), 1)[0].imag == pytest.approx([0.0], abs=1e-9)


def test_a_table_is_passive_everywhere():
    table = index_table(omega_of(WAVELENGTHS), np.round(silica(WAVELENGTHS), 4))
    everywhere = np.geomspace(1e12, 1e18, 2000)
    values = table.refraction_series(everywhere, 1)[0]
    assert np.min(values.imag) > -1e-12
    inside = (everywhere > omega_of(1.6)) & (everywhere < omega_of(0.4))
    assert np.max(np.abs(values.imag[inside])) < 1e-12


def test_a_reversed_index_column_is_refused_with_its_factor():
    """Reversed order asks for hundreds of times the uncertainty (267 for a glass, computed apart)."""
    with pytest.raises(InputError, match="no passive causal medium") as caught:
        index_table(omega_of(WAVELENGTHS), np.round(silica(WAVELENGTHS), 5)[::-1])
    assert "as_printed = true" in str(caught.value)
    used = index_table(omega_of(WAVELENGTHS), np.round(silica(WAVELENGTHS), 5)[::-1], as_printed=True)
    assert used.uncertainty_factor > 200


def test_a_bump_of_ten_uncertainties_is_refused_and_usable_as_printed():
    index = np.round(silica(WAVELENGTHS), 5)
    index[30] += 1e-3
    with pytest.raises(InputError, match="no passive causal medium"):
        index_table(omega_of(WAVELENGTHS), index, index_error=5e-5)
    table = index_table(omega_of(WAVELENGTHS), index, index_error=5e-5, as_printed=True)
    assert not table.causal
    assert 5 < table.uncertainty_factor < 20
    assert any("as printed" in note for note in table.notes)
    rows = omega_of(WAVELENGTHS)
    assert table.refraction_series(rows, 1)[0] + 1 == pytest.approx(index, abs=1e-12)
    assert table.refraction_series(-rows, 2)[1] == pytest.approx(
        -np.conj(table.refraction_series(rows, 2)[1])
    )
    with pytest.raises(RangeError, match="nothing off its rows"):
        table.refraction_series(np.array([omega_of(0.39)]), 1)


CENTRE, WIDTH = 3e15, 1.5e14


def absorber(omega):
    """An invented crystal: an ultraviolet band and a weak line, on the principal root."""
    chi = 0.8 * 36e30 / (36e30 - omega**2 - 1e13j * omega) + 9e27 / (
        CENTRE**2 - omega**2 - 1j * WIDTH * omega
    )
    return chi / (1 + np.sqrt(1 + chi))


def test_a_table_of_n_and_k_keeps_both_within_their_uncertainty():
    rows = np.linspace(2e15, 4e15, 80)
    index, k = np.round(1 + absorber(rows).real, 5), np.round(absorber(rows).imag, 5)
    table = index_table(rows, index, k)
    assert table.causal
    between = (rows[1:] + rows[:-1]) / 2
    found = table.refraction_series(between, 1)[0]
    assert np.max(np.abs(found - absorber(between))) < 5e-5
    contour = 2.2e15 + 3e13 * np.exp(2j * np.pi * np.arange(64) / 64)
    exact = np.stack([np.mean(absorber(contour) * (contour - 2.2e15) ** -m) for m in range(5)])
    # +-5e-6 on rows 0.025 rad/fs apart: a few per cent in the wing of the line
    assert gvd(table, 2.2e15) == pytest.approx(orders_of(exact, 2.2e15).gvd * 1e27, rel=0.1)


def test_absorption_too_large_by_the_wrong_logarithm_is_refused():
    rows = np.linspace(2e15, 4e15, 80)
    with pytest.raises(InputError, match="no passive causal medium"):
        index_table(
            rows,
            np.round(1 + absorber(rows).real, 5),
            np.log(10) * np.round(absorber(rows).imag, 5),
            k_error=1e-4,
        )


def test_water_of_hale_and_querry_is_consistent_at_one_per_cent():
    """G. M. Hale and M. R. Querry, Appl. Opt. 12, 555 (1973): 1 % of n and of k (0.38 with hats, apart)."""
    shared = Path(__file__).parents[2] / "shared" / "water_hale_querry_1973.csv"
    wavelength, index, k = np.loadtxt(shared, delimiter=",", skiprows=6).T
    table = index_table(omega_of(wavelength), index, k, index_error=0.01 * index, k_error=0.01 * k)
    assert table.uncertainty_factor < 1


def test_printed_digits():
    assert half_unit(np.array([1.45, 1.453, 1.4])) == pytest.approx([5e-4] * 3)
    assert half_unit(np.array([0.298, 0.0272, 1.10e-7, 4.9e-8])) == pytest.approx([5e-4, 5e-5, 5e-10, 5e-11])
    assert half_unit(np.array([0.0, 0.00123, 0.00001])) == pytest.approx([5e-6] * 3)
    assert half_unit(np.array([1 / 3, 1.5])) == pytest.approx([5e-8] * 2)
    even, uneven = np.array([0.4, 0.5, 0.6]), np.array([0.4, 0.5, 0.7])
    index = np.array([1.50, 1.49, 1.48])
    assert index_uncertainty(index, even) == pytest.approx([5e-3] * 3)
    assert index_uncertainty(index, uneven)[0] == pytest.approx(5e-3 + 0.1 * 0.05)


@pytest.mark.parametrize(
    ("index", "k", "text"),
    [
        ([1.5, 1.5, np.nan, 1.5, 1.5], None, "row 3"),
        ([1.5, 1.5, 1.5, -1.5, 1.5], None, "row 4"),
        ([1.5, 1.5, 1.5, 1.5, 1.5], [0.1, -0.1, 0.1, 0.1, 0.1], "row 2"),
        ([1.5, 1.5, 1.5], None, "too few rows"),
    ],
)
def test_bad_rows_are_refused(index, k, text):
    rows = np.linspace(2e15, 3e15, len(index))
    with pytest.raises(InputError, match=text):
        index_table(rows, np.array(index), None if k is None else np.array(k), index_error=0.1, k_error=0.1)


def test_an_uncertainty_of_zero_is_refused():
    with pytest.raises(InputError, match="uncertainty must be above 0"):
        index_table(omega_of(WAVELENGTHS), silica(WAVELENGTHS), index_error=0.0)
