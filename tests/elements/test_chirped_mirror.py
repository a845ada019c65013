"""Chirped mirrors: orders, ripple, tables with known antiderivatives, pairs in turn."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.chirped_mirror import ChirpedMirror
from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.mirror_curves import OrdersOfBounce, Ripple, TableOfBounce
from pulseprop.errors import InputError

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
ROWS = 2 * np.pi * C / np.linspace(1000e-9, 650e-9, 71)
FS = 1e-15


def mirror(*mirrors, **changed) -> ChirpedMirror:
    return ChirpedMirror(name="mirror", centre=CENTRE, mirrors=mirrors, **changed)


def gdd_of(omega):
    """A smooth curve: -40 fs^2 with a slope and a swing, s^2."""
    x = (omega - CENTRE) * FS
    return (-40 + 30 * x - 25 * x**2 + 3 * np.cos(9 * x)) * FS**2


def delay_of(omega):
    """An antiderivative of it, with an offset of no consequence, s."""
    x = (omega - CENTRE) * FS
    return (-40 * x + 15 * x**2 - 25 / 3 * x**3 + np.sin(9 * x) / 3 + 7) * FS


def phase_of(omega):
    """An antiderivative of that, rad."""
    x = (omega - CENTRE) * FS
    return -20 * x**2 + 5 * x**3 - 25 / 12 * x**4 - np.cos(9 * x) / 27 + 7 * x + 3


def expected_phase(omega):
    slope = delay_of(CENTRE)
    return phase_of(omega) - phase_of(CENTRE) - slope * (omega - CENTRE)


def test_constant_orders_count_once_a_bounce():
    """20 bounces of -39.3 fs^2 and -26.4 fs^3."""
    element = mirror(OrdersOfBounce(centre=CENTRE, gdd=-39.3 * FS**2, tod=-26.4 * FS**3), bounces=20)
    found = orders_of_element(element, CENTRE)
    assert found == pytest.approx((0, -786 * FS**2, -528 * FS**3, 0), rel=1e-13, abs=1e-70)
    assert element.detail == "-39.3 fs^2 and -26.4 fs^3 a bounce at 800 nm; 20 bounces"


def test_no_bounce_does_nothing():
    omega = CENTRE * np.linspace(0.8, 1.2, 5)
    none = mirror(OrdersOfBounce(centre=CENTRE, gdd=1e-28), bounces=0, reflectance=0.9)
    assert transfer_of(none, omega) == pytest.approx(np.ones(5), abs=1e-15)


@pytest.mark.parametrize(
    ("quantity", "values", "accuracy"),
    [("gdd", gdd_of, 2e-5), ("group_delay", delay_of, 2e-6), ("phase", phase_of, 2e-6)],
)
def test_tables_give_the_phase_whose_derivatives_they_are(quantity, values, accuracy):
    element = mirror(TableOfBounce(omega=ROWS, values=values(ROWS), quantity=quantity))
    omega = np.linspace(ROWS[0], ROWS[-1], 333)
    assert element.exponent(omega, 1)[0].imag == pytest.approx(expected_phase(omega), abs=accuracy)
    assert element.exponent(omega, 1)[0].real == pytest.approx(np.zeros(333), abs=0)
    delay, gdd, tod, _ = orders_of_element(element, CENTRE)
    assert delay == pytest.approx(0, abs=1e-24)
    assert gdd == pytest.approx(-37 * FS**2, rel=1e-4)
    assert tod == pytest.approx(30 * FS**3, rel=1e-2)
    assert element.detail == "-37 fs^2 and 30 fs^3 a bounce at 800 nm; 1 bounce"


def test_a_polynomial_of_third_degree_comes_through_exactly():
    x = (ROWS - CENTRE) * FS
    cubic = (-40 + 30 * x - 25 * x**2 + 12 * x**3) * FS**2
    element = mirror(TableOfBounce(omega=ROWS, values=cubic, quantity="gdd"), bounces=3)
    assert orders_of_element(element, CENTRE)[1:] == pytest.approx(
        (-120 * FS**2, 90 * FS**3, -150 * FS**4), rel=1e-9
    )


def test_the_series_is_that_of_the_curve_between_rows_too():
    """Taylor coefficients against the curve itself, a small step away."""
    table = TableOfBounce(omega=ROWS, values=delay_of(ROWS), quantity="group_delay")
    at, step = 0.5 * (ROWS[30] + ROWS[31]), 2e11
    series = table.phase(np.array(at), 5)
    there = table.phase(np.array(at + step), 1)[0]
    assert sum(series[m] * step**m for m in range(5)) == pytest.approx(there, abs=1e-13)


def test_beyond_the_rows_the_group_delay_is_held_and_the_pulse_is_told_where_they_end():
    table = TableOfBounce(omega=ROWS, values=gdd_of(ROWS), quantity="gdd")
    element = mirror(table)
    outside = ROWS[-1] + np.array([0.0, 1e14, 2e14])
    series = element.exponent(outside, 3)
    assert series[1].imag == pytest.approx(np.full(3, series[1, 0].imag), rel=1e-12)
    assert np.diff(series[0].imag) == pytest.approx(series[1].imag[:2] * 1e14, rel=1e-9)
    assert np.all(series[2, 1:] == 0)
    assert (element.band.low, element.band.high) == (ROWS[0], ROWS[-1])
    assert "rows reach from 600 nm to 1050 nm" in element.remedy_beyond(
        2 * np.pi * C / 1050e-9, 2 * np.pi * C / 600e-9
    )


def test_a_ripple_swings_the_gdd_about_its_mean():
    period = 2 * np.pi * 20e12 / (2 * np.pi)
    ripple = Ripple(amplitude=10 * FS**2, period=period, phase=0.3)
    element = mirror(OrdersOfBounce(centre=CENTRE, gdd=-40 * FS**2, ripple=ripple))
    omega = CENTRE + 2 * np.pi * np.linspace(-30e12, 30e12, 61)
    gdd = 2 * np.imag(element.exponent(omega, 3)[2])
    expected = -40 * FS**2 + 10 * FS**2 * np.cos((omega - CENTRE) / period + 0.3)
    assert gdd == pytest.approx(expected, rel=1e-9)


def test_the_ripples_of_a_pair_in_antiphase_cancel():
    one, other = (
        OrdersOfBounce(
            centre=CENTRE,
            gdd=-40 * FS**2,
            ripple=Ripple(amplitude=30 * FS**2, period=3e13, phase=phase),
        )
        for phase in (0.0, np.pi)
    )
    both = mirror(one, other, bounces=5)
    plain = mirror(OrdersOfBounce(centre=CENTRE, gdd=-40 * FS**2), bounces=10)
    omega = CENTRE * np.linspace(0.9, 1.1, 50)
    assert both.exponent(omega, 1)[0] == pytest.approx(plain.exponent(omega, 1)[0], abs=1e-9)
    assert both.detail.startswith("-10 fs^2, then -70 fs^2 a bounce")
    assert both.detail.endswith("a bounce at 800 nm; 5 bounces off each")


def test_each_bounce_takes_its_loss():
    """99.8 % ten times off each of two: 0.998^20."""
    flat = OrdersOfBounce(centre=CENTRE, gdd=-40 * FS**2)
    element = mirror(flat, flat, bounces=10, reflectance=0.998)
    assert abs(complex(transfer_of(element, np.array(CENTRE)))) ** 2 == pytest.approx(0.998**20, rel=1e-13)
    assert "0.2 % passes through at each bounce" in element.stray_beams[0]
    assert mirror(flat).stray_beams == ()


def test_mirrors_outside_are_refused():
    flat = OrdersOfBounce(centre=CENTRE)
    with pytest.raises(InputError, match="bounces"):
        mirror(flat, bounces=-1)
    with pytest.raises(InputError, match="reflectance"):
        mirror(flat, reflectance=1.1)
    rows = 2 * np.pi * C / np.linspace(790e-9, 650e-9, 20)
    table = TableOfBounce(omega=rows, values=gdd_of(rows), quantity="gdd")
    with pytest.raises(InputError, match=r"does not hold the centre .*650 nm to 790 nm"):
        mirror(table)
    for quantity, count in (("gdd", 3), ("phase", 5)):
        with pytest.raises(InputError, match="too few rows"):
            TableOfBounce(omega=ROWS[:count], values=ROWS[:count], quantity=quantity)
