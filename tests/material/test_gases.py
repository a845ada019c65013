"""Gases at other states: density, Lorentz-Lorenz, second virial coefficient, n2."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.material.catalogue import record
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.gases import gas_at
from pulseprop.material.molar_density import GAS_CONSTANT, molar_density

OMEGA = np.array(2 * np.pi * 299792458.0 / 800e-9)
DILUTE = ["argon", "helium", "air", "nitrogen", "krypton"]


def excess(medium):
    return float(medium.refraction(OMEGA)[0])


@pytest.mark.parametrize("name", DILUTE)
def test_at_the_state_of_its_record_a_gas_is_its_record(name):
    entry = record(name)
    here = gas_at(name, entry.pressure_Pa, entry.temperature_K)
    assert excess(here) == pytest.approx(excess(catalogue_medium(name)), rel=1e-12)


@pytest.mark.parametrize("name", ["air", "krypton"])
def test_half_the_pressure_is_half_the_refraction_of_an_ideal_gas(name):
    """(n^2 - 1)/(n^2 + 2) is halved; n - 1 itself differs from that by (n - 1)/6 of itself, some 1e-4."""
    entry = record(name)
    whole, half = (
        excess(gas_at(name, p, entry.temperature_K)) for p in (entry.pressure_Pa, entry.pressure_Pa / 2)
    )
    polarisability = [((1 + e) ** 2 - 1) / ((1 + e) ** 2 + 2) for e in (whole, half)]
    # Krypton at 0 C: B = -63 cm^3/mol (J. H. Dymond, E. B. Smith 1980; memory), so 1.4e-3 less than half.
    virial = 2e-3 if entry.second_virial else 1e-12
    assert polarisability[1] / polarisability[0] == pytest.approx(0.5, rel=virial)
    assert half == pytest.approx(whole / 2, rel=max(virial, 2e-4))


def test_a_gas_without_pressure_is_vacuum():
    assert excess(gas_at("argon", 0.0, 293.15)) == 0.0


def test_molar_volume_of_an_ideal_gas():
    """22.413 969 54 l/mol at 0 C and 101325 Pa (CODATA 2018, from memory)."""
    assert 1 / molar_density(101325.0, 273.15) == pytest.approx(22.41396954e-3, rel=1e-9)


@pytest.mark.parametrize("virial", [-1e-5, -2e-4, 3e-5])
def test_density_with_a_second_virial_coefficient_solves_its_equation(virial):
    pressure, temperature = 2e6, 250.0
    rho = molar_density(pressure, temperature, virial)
    assert rho * GAS_CONSTANT * temperature * (1 + virial * rho) == pytest.approx(pressure, rel=1e-12)
    assert molar_density(1.0, temperature, virial) == pytest.approx(
        1 / (GAS_CONSTANT * temperature), rel=1e-6
    )


def test_beyond_the_virial_equation_there_is_no_density():
    assert np.isnan(molar_density(1e8, 100.0, -2e-4))


def test_argon_at_ten_bar_is_denser_than_ideal():
    """B(argon, 293 K) = -16.9 cm^3/mol (J. H. Dymond, E. B. Smith 1980; memory): 0.7 % denser at 10 bar."""
    real = gas_at("argon", 1e6, 293.15)
    low = gas_at("argon", 1e3, 293.15)
    ratio = [((1 + excess(m)) ** 2 - 1) / ((1 + excess(m)) ** 2 + 2) for m in (real, low)]
    ideal = 1e6 / (GAS_CONSTANT * 293.15)
    assert ratio[0] / ratio[1] / 1e3 == pytest.approx(1 + 16.9e-6 * ideal, abs=7e-4)


def test_a_state_beyond_the_virial_gas_is_refused_with_the_state():
    with pytest.raises(InputError, match="condensed") as caught:
        gas_at("xenon", 1e9, 273.15)
    assert "Pa" in str(caught.value)


def test_a_second_virial_coefficient_is_told_with_its_source_and_where_it_is_held():
    inside, beyond = (gas_at("argon", 1e5, kelvin).notes for kelvin in (285.0, 400.0))
    assert any("Dymond" in note and "held" not in note for note in inside)
    assert any("Dymond" in note and "held beyond its 273.15 to 298.15 K" in note for note in beyond)


def test_n2_goes_with_density():
    """From the state of the record to twice its density; argon after Wahlstrand et al. 2012."""
    entry = record("argon")
    base = catalogue_medium("argon")
    ratio = 2 * entry.pressure_Pa, entry.temperature_K
    dense = gas_at("argon", *ratio)
    assert dense.n2[0].value / base.n2[0].value == pytest.approx(2, rel=2e-3)
    assert "density" in dense.notes[-1]
    assert dense.temperature_K == entry.temperature_K


def test_air_with_a_humidity_is_humid_air():
    """Water vapour lowers the index of air: by 3.7e-8 per hPa near 633 nm (Birch and Downs 1993; memory)."""
    wet, dry = (gas_at(name, 101325.0, 293.15, share) for name, share in (("air", 0.5), ("humid air", 0.0)))
    omega = 2 * np.pi * 299792458.0 / 633e-9
    vapour_hPa = 0.5 * 23.39
    fall = dry.orders(omega).index - wet.orders(omega).index
    assert fall == pytest.approx(3.7e-8 * vapour_hPa, rel=0.05)
    assert wet.name.startswith("humid air")
