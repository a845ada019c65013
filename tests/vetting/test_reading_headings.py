"""Headings in the words of several languages and trades."""

from __future__ import annotations

import pytest

from pulseprop.vetting.heading_units import unit_named
from pulseprop.vetting.headings import heading_of, is_heading


@pytest.mark.parametrize(
    ("text", "meaning", "unit"),
    [
        ("Wellenlänge [nm]", "wavelength", "nm"),
        ("longueur d'onde (nm)", "wavelength", "nm"),
        ("longitud de onda / µm", "wavelength", "um"),
        ("lunghezza d'onda", "wavelength", None),
        ("λ/µm", "wavelength", "um"),
        ("λ [μm]", "wavelength", "um"),
        ("lambda (micron)", "wavelength", "um"),
        ("lambda", "wavelength", None),
        ("WAVELENGTH(NM)", "wavelength", "nm"),
        ("wavelength_nm", "wavelength", "nm"),
        ("Wavelength in air (nm)", "wavelength", "nm"),
        ("wavelength, micron", "wavelength", "um"),
        ("Wavelength (Å)", "wavelength", "angstrom"),
        ("wl", "wavelength", None),
        ("nm", "wavelength", "nm"),
        ("µm", "wavelength", "um"),
        ("cm-1", "wavenumber", "cm^-1"),
        ("1/cm", "wavenumber", "cm^-1"),
        ("Wellenzahl (cm⁻¹)", "wavenumber", "cm^-1"),
        ("Wavenumber (cm^-1)", "wavenumber", "cm^-1"),
        ("Frequency, THz", "frequency", "THz"),
        ("Frequenz in THz", "frequency", "THz"),
        ("ω (rad/fs)", "frequency", "rad/fs"),
        ("Energy (eV)", "photon_energy", "eV"),
        ("photon energy / eV", "photon_energy", "eV"),
        ("E [eV]", "photon_energy", "eV"),
        ("n", "n", None),
        ("N", "n", None),
        ("n(λ)", "n", None),
        ("n_o", "n", None),
        ("n (ordinary)", "n", None),
        ("n at 20 °C", "n", None),
        ("n (20 °C)", "n", None),
        ("dn/dT [1e-6/K]", None, None),
        ("Brechungsindex n", "n", None),
        ("Brechzahl", "n", None),
        ("indice de réfraction", "n", None),
        ("índice de refracción", "n", None),
        ("refractive index", "n", None),
        ("index of refraction", "n", None),
        ("k", "k", None),
        ("κ", "k", None),
        ("alpha/cm^-1", "alpha", "cm^-1"),
        ("α [cm⁻¹]", "alpha", "cm^-1"),
        ("absorption coefficient (1/mm)", "alpha", "mm^-1"),
        ("Absorptionskoeffizient [mm^-1]", "alpha", "mm^-1"),
        ("coefficient d'absorption (cm-1)", "alpha", "cm^-1"),
        ("absorption (1/cm)", "alpha", "cm^-1"),
        ("attenuation dB/km", "alpha", "dB/km"),
        ("Dämpfung [dB/m]", "alpha", "dB/m"),
        ("loss (dB/cm)", "alpha", "dB/cm"),
        ("A", "absorbance", None),
        ("Abs", "absorbance", None),
        ("Abs.", "absorbance", None),
        ("OD", "absorbance", None),
        ("optical density", "absorbance", None),
        ("Absorbance (AU)", "absorbance", ""),
        ("ln(1/T)", "napierian", None),
        ("optical depth", "napierian", None),
        ("T", "transmittance", None),
        ("%T", "transmittance", "%"),
        ("T(%)", "transmittance", "%"),
        ("T [%]", "transmittance", "%"),
        ("Transmission %", "transmittance", "%"),
        ("Transmissionsgrad", "transmittance", None),
        ("PERCENT TRANSMITTANCE", "transmittance", None),
        ("Internal transmittance", "internal_transmittance", None),
        ("Reintransmissionsgrad", "internal_transmittance", None),
        ("τi (10 mm)", "internal_transmittance", None),
        ("R (%)", "reflectance", "%"),
        ("Reflectivity", "reflectance", None),
        ("n_g", "group_index", None),
        ("Gruppenindex", "group_index", None),
        ("GVD [fs²/mm]", "gvd", "fs^2/mm"),
        ("GD (fs)", "group_delay", "fs"),
        ("GDD (fs^2)", "gdd", "fs^2"),
        ("GDD fs2", "gdd", "fs^2"),
        ("TOD [fs^3]", "tod", "fs^3"),
        ("Phase (rad)", "phase", "rad"),
        ("T (°C)", None, None),
        ("T [K]", None, None),
        ("No.", None, None),
        ("sample", None, None),
        ("absorption", None, None),
        ("x", None, None),
    ],
)
def test_what_headings_say(text: str, meaning: str | None, unit: str | None) -> None:
    head = heading_of(text)
    assert head.meaning == meaning
    if meaning is not None:
        assert head.unit == unit
    assert not head.extinction
    assert not head.scaled


@pytest.mark.parametrize(
    "text",
    ["Extinktion", "extinction coefficient", "Extinction coefficient k", "coefficient d'extinction",
     "coeficiente de extinción", "estinzione", "molar extinction", "ext. coeff."],
)  # fmt: skip
def test_extinction_is_known_as_ambiguous_in_every_language(text: str) -> None:
    assert heading_of(text).extinction


@pytest.mark.parametrize("text", ["k x 1e6", "k (10^-6)", "k×10⁻⁶", "alpha*10^3", "k [1e-6]", "10^6 k"])
def test_powers_of_ten_in_a_heading_are_noticed(text: str) -> None:
    assert heading_of(text).scaled


@pytest.mark.parametrize("text", ["T at 1550 nm", "GDD (fs^2)", "n (10 mm)", "R 1030-1064 nm", "T 100 mm"])
def test_other_numbers_in_a_heading_are_no_power_of_ten(text: str) -> None:
    assert not heading_of(text).scaled


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        ("nm", "nm"), ("NM", "nm"), ("[nm]", "nm"), ("nanometers", "nm"), ("microns", "um"),
        ("Micrometres", "um"),
        ("cm-1", "cm^-1"), ("CM-1", "cm^-1"), ("1/CM", "cm^-1"), ("cm^-1", "cm^-1"), ("cm^(-1)", "cm^-1"),
        ("cm⁻¹", "cm^-1"), ("cm**-1", "cm^-1"), ("mm^-1", "mm^-1"), ("per cm", "cm^-1"), ("1/m", "m^-1"),
        ("dB/m", "dB/m"), ("db/cm", "dB/cm"), ("THZ", "THz"), ("ev", "eV"), ("meV", "meV"), ("%", "%"),
        ("percent", "%"), ("-", ""), ("a.u.", ""), ("arb. units", ""), ("rad/fs", "rad/fs"), ("deg", "deg"),
        ("in", None), ("air", None), ("20 °C", None), ("n", None), ("10 mm", None),
    ],
)  # fmt: skip
def test_units_in_any_spelling(text: str, unit: str | None) -> None:
    assert unit_named(text) == unit


@pytest.mark.parametrize(
    "line",
    ["wl,n", "# wavelength (um)  n  k", "Wavelength\tk", "lambda n", "nm A", "nm;Extinktion",
     '"Wavelength, nm","n"', "% λ/nm  T/%", "cm-1|Abs"],
)  # fmt: skip
def test_lines_that_name_an_axis_and_a_quantity_are_headings(line: str) -> None:
    assert is_heading(line)


@pytest.mark.parametrize(
    "line",
    ["sample 12", "# measured with care", "wavelength", "n,k", "Temperature, n", "# end of the first part",
     "# refractive index of an invented glass, wavelengths in air", ""],
)  # fmt: skip
def test_other_lines_are_not(line: str) -> None:
    assert not is_heading(line)


def test_a_thickness_in_a_heading_is_found() -> None:
    assert heading_of("Internal transmittance (10 mm)").thickness == pytest.approx(0.01)
    assert heading_of("τi(25mm)").thickness == pytest.approx(0.025)
    assert heading_of("n").thickness is None
