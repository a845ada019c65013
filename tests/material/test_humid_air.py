"""Moist air against values of P. E. Ciddor, Appl. Opt. 35, 1566 (1996), and made with his equation."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.humid_air import humid_air_response, vapour_fraction
from pulseprop.material.medium import Medium


def orders(celsius, pressure, humidity, nm=633.0, **carbon_dioxide):
    response = humid_air_response(pressure, 273.15 + celsius, humidity, **carbon_dioxide)
    return Medium(name="moist air", response=response).orders(2 * np.pi * 299792458.0 / (nm * 1e-9))


def refractivity(*state, **more):
    return 1e8 * orders(*state, **more).index_minus_one


# Ciddor's table for dry air at 633 nm, 450 ppm: degC, Pa, 1e8 (n - 1). From memory, every digit reproduced.
DRY = [
    (20, 80e3, 21458.0),
    (20, 100e3, 26824.4),
    (20, 120e3, 32191.6),
    (10, 100e3, 27774.7),
    (30, 100e3, 25937.2),
]


@pytest.mark.parametrize(("celsius", "pressure", "printed"), DRY)
def test_dry_air_to_half_a_unit_of_the_last_digit(celsius, pressure, printed):
    assert refractivity(celsius, pressure, 0.0) == pytest.approx(printed, abs=0.05)


# J. A. Stone, J. H. Zimmerman, "Index of Refraction of Air", NIST Engineering Metrology Toolbox, Ciddor's
# equation at 633 nm, 450 ppm: degC, Pa, relative humidity, n. From memory, every digit reproduced.
TOOLBOX = [
    (20, 101325, 0.0, 1.000271800),
    (20, 60e3, 0.0, 1.000160924),
    (20, 120e3, 0.0, 1.000321916),
    (5, 100e3, 0.0, 1.000282756),
    (-40, 100e3, 0.0, 1.000337580),
    (50, 120e3, 1.0, 1.000287924),
    (40, 120e3, 0.75, 1.000299418),
    (20, 100e3, 1.0, 1.000267394),
]


@pytest.mark.parametrize(("celsius", "pressure", "humidity", "printed"), TOOLBOX)
def test_printed_index_to_half_a_unit_of_the_ninth_decimal(celsius, pressure, humidity, printed):
    assert orders(celsius, pressure, humidity).index == pytest.approx(printed, abs=0.51e-9)


# Measured air of a laboratory at 633 nm that Ciddor compares with (K. P. Birch, M. J. Downs): degC, Pa,
# vapour pressure in Pa, ppm of carbon dioxide, 1e8 (n - 1). From memory. The equation claims 2 to 5 of these.
MEASURED = [
    (19.526, 102094.8, 1065, 510, 27392.3),
    (19.517, 102096.8, 1065, 510, 27394.0),
    (19.173, 102993.0, 641, 450, 27683.4),
    (19.188, 102918.8, 706, 450, 27658.7),
    (19.532, 103603.2, 986, 600, 27802.1),
]


@pytest.mark.parametrize(("celsius", "pressure", "vapour", "ppm", "measured"), MEASURED)
def test_measured_moist_air(celsius, pressure, vapour, ppm, measured):
    """The vapour itself makes 24 to 40 of these units."""
    saturated = vapour_fraction(pressure, 273.15 + celsius, 1.0) * pressure
    found = refractivity(celsius, pressure, vapour / saturated, carbon_dioxide_ppm=ppm)
    assert found == pytest.approx(measured, abs=2.0)


def test_saturated_vapour_pressure_of_water():
    """2338.8 Pa at 20 degC, as steam tables have it (common practice, no source), enhanced by 0.4 %."""
    assert vapour_fraction(101325.0, 293.15, 1.0) * 101325.0 / 1.00400 == pytest.approx(2338.8, rel=5e-4)


@pytest.mark.parametrize("nm", [400.0, 800.0, 1550.0])
def test_standard_dry_air_is_the_air_of_the_catalogue(nm):
    omega = 2 * np.pi * 299792458.0 / (nm * 1e-9)
    here, there = orders(15, 101325, 0.0, nm=nm), catalogue_medium("air").orders(omega)
    assert here.index_minus_one == pytest.approx(there.index_minus_one, rel=1e-12)
    assert here.gvd == pytest.approx(there.gvd, rel=1e-9)


# B. Edlen, Metrologia 2, 71 (1966): standard air with 300 ppm of carbon dioxide (from memory), 1e8 (n - 1).
EDLEN = [(400.0, 28274.750725), (632.9908, 27651.755032), (800.0, 27503.653546), (1550.0, 27325.18372)]


@pytest.mark.parametrize(("nm", "older"), EDLEN)
def test_three_decades_older_equation_lies_a_part_in_a_hundred_million_below(nm, older):
    """0.9 to 1.4 units of 1e-8, by the published comparison."""
    assert 0.8 < refractivity(15, 101325, 0.0, nm=nm) - older < 1.5


def test_vapour_lowers_the_index_and_vacuum_has_none():
    assert refractivity(20, 101325, 0.5) < refractivity(20, 101325, 0.0)
    assert refractivity(20, 0.0, 0.5) == 0.0


@pytest.mark.parametrize(
    ("state", "message"),
    [
        ((20, 101325, 40.0), "humidity out of range"),
        ((20, 1e6, 0.4), "pressure out of range"),
        ((-60, 101325, 0.4), "temperature out of range"),
        ((90, 20e3, 1.0), "cannot hold this much water vapour"),
        ((float("nan"), 101325, 0.4), "temperature out of range"),
    ],
)
def test_states_outside_the_equation_are_refused(state, message):
    with pytest.raises(InputError, match=message):
        orders(*state)
