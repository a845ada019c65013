"""Options of reading: names of columns, uncertainties, lengths."""

from __future__ import annotations

import pytest

from pulseprop.errors import InputError
from pulseprop.vetting.read_options import Named, ReadOptions, named_columns
from pulseprop.vetting.uncertainty_text import uncertainties_in


@pytest.mark.parametrize(
    ("text", "named"),
    [
        ("wavelength,n,k", (Named("wavelength"), Named("n"), Named("k"))),
        ("wavelength/nm, alpha/cm^-1", (Named("wavelength", "nm"), Named("alpha", "cm^-1"))),
        ("wavenumber,-,absorbance", (Named("wavenumber"), Named(None), Named("absorbance"))),
        ("wavelength,R,GDD", (Named("wavelength"), Named("reflectance"), Named("gdd"))),
        ("photon_energy,alpha/1/cm", (Named("photon_energy"), Named("alpha", "cm^-1"))),
        ("frequency,internal_transmittance/%", (Named("frequency"), Named("internal_transmittance", "%"))),
        ("wavelength,group_index,gvd,tod", tuple(map(Named, ("wavelength", "group_index", "gvd", "tod")))),
    ],
)
def test_columns_are_named_by_the_words_of_the_contract(text: str, named: tuple[Named, ...]) -> None:
    assert named_columns(text) == named


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("wavelength,extinction", ["extinction has several meanings", "'extinction'"]),
        ("wavelength,nonsense", ["no such column", "'nonsense'", "wavelength, frequency"]),
        ("n,k", ["no column is the spectral axis"]),
        ("wavelength,wavenumber,n", ["more than one column is a spectral axis"]),
        ("wavelength,-", ["no column holds a quantity"]),
        ("wavelength,n,n", ["a quantity stands twice"]),
        ("wavelength,alpha/furlong^", ["not a unit"]),
    ],
)
def test_names_that_cannot_be_are_refused(text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        named_columns(text)
    for part in parts:
        assert part in str(caught.value)


def test_molar_columns_ask_for_the_concentration() -> None:
    with pytest.raises(InputError, match=r"with the concentration .*2\.302585"):
        named_columns("wavelength,molar")


@pytest.mark.parametrize(
    ("text", "quantity", "absolute", "relative"),
    [
        ("n=1e-4", "n", 1e-4, 0.0),
        ("k=2%", "k", 0.0, 0.02),
        ("k=1e-5+1%", "k", 1e-5, 0.01),
        ("k=1e+2", "k", 100.0, 0.0),
        ("transmittance=0.3%", "transmittance", 0.003, 0.0),
        ("T=0.003", "transmittance", 0.003, 0.0),
        ("reflectance = 0.05 %", "reflectance", 0.0005, 0.0),
        ("alpha=0.1 cm^-1", "alpha", 10.0, 0.0),
        ("alpha=0.1 cm^-1 + 1%", "alpha", 10.0, 0.01),
        ("gvd=0.5 fs^2/mm", "gvd", 0.5e-27, 0.0),
        ("gdd=2 fs^2", "gdd", 2e-30, 0.0),
        ("absorbance=0.01", "absorbance", 0.01, 0.0),
    ],
)
def test_uncertainties_are_absolute_or_relative(
    text: str, quantity: str, absolute: float, relative: float
) -> None:
    ((name, stated),) = uncertainties_in(text).items()
    assert name == quantity
    assert (stated.absolute, stated.relative) == pytest.approx((absolute, relative))


def test_several_uncertainties_stand_in_a_list() -> None:
    found = uncertainties_in("n=1e-4, k=2%")
    assert (found["n"].absolute, found["k"].relative) == (1e-4, 0.02)


@pytest.mark.parametrize(
    "text",
    ["", "n", "n=", "n=x", "n=-1", "n=0", "n=1e-4 nm", "n=1e-4,n=2e-4", "alpha=0.1", "alpha=0.1 nm", "q=1",
     "extinction=1", "n=1e-4;k=2%", "n=1,5e-4", "n=1e999", "n=nan"],
)  # fmt: skip
def test_uncertainties_that_cannot_be_are_refused(text: str) -> None:
    with pytest.raises(InputError):
        uncertainties_in(text)


def test_a_thickness_is_a_length_above_zero() -> None:
    assert ReadOptions(thickness="2 mm").length() == 0.002
    assert ReadOptions(thickness=0.002).length() == 0.002
    assert ReadOptions().length() is None
    for wrong in ("0 mm", "-1 mm", "2", "2 nm^2", -1.0):
        with pytest.raises(InputError):
            ReadOptions(thickness=wrong).length()
