"""Devices given by orders, and plain losses."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.elements.element import Element, orders_of_element, transfer_of
from pulseprop.elements.phase_orders import Loss, PhaseOrders

QUIET = settings(max_examples=25, deadline=None, derandomize=True)
CENTRE = 2.35e15
NUMBER = st.floats(-1e4, 1e4)


@QUIET
@given(NUMBER, NUMBER, NUMBER, NUMBER, st.floats(-0.3, 0.3))
def test_the_phase_is_the_polynomial_and_the_field_turns_forward(delay, gdd, tod, fod, x):
    device = PhaseOrders(
        name="shaper",
        centre=CENTRE,
        group_delay=delay * 1e-15,
        gdd=gdd * 1e-30,
        tod=tod * 1e-45,
        fod=fod * 1e-60,
    )
    phase = delay * x + gdd * x**2 / 2 + tod * x**3 / 6 + fod * x**4 / 24
    found = device.exponent(np.array(CENTRE + x * 1e15), 1)[0]
    assert complex(found) == pytest.approx(1j * phase, rel=1e-11, abs=1e-11)
    assert orders_of_element(device, CENTRE) == pytest.approx(
        (delay * 1e-15, gdd * 1e-30, tod * 1e-45, fod * 1e-60), rel=1e-12
    )


def test_positive_gdd_delays_the_blue():
    device = PhaseOrders(name="glass", centre=CENTRE, gdd=100e-30)
    blue, _, _, _ = orders_of_element(device, CENTRE + 1e14)
    assert blue == pytest.approx(10e-15, rel=1e-12)


@QUIET
@given(st.floats(1e-6, 1.0))
def test_transmittance_is_of_energy(share):
    for device in (
        Loss(name="filter", transmittance=share),
        PhaseOrders(name="a", centre=CENTRE, transmittance=share),
    ):
        assert np.abs(transfer_of(device, np.array([1e15, CENTRE]))) ** 2 == pytest.approx(
            [share] * 2, rel=1e-12
        )


def test_a_phase_alone_is_no_matter_and_a_loss_is():
    assert PhaseOrders(name="a", centre=CENTRE).phase_only
    assert not Loss(name="a", transmittance=0.5).phase_only
    for device in (Loss(name="a", transmittance=0.5), PhaseOrders(name="a", centre=CENTRE)):
        assert isinstance(device, Element)
        assert device.ringing(0.0, 1e16) == 0.0
