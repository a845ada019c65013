"""Shapes: each field and its spectrum are one pair, of the width that the unit promises."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.pulse import shapes
from pulseprop.pulse.bandwidth import duration_from_bandwidth, frequency_width
from pulseprop.pulse.shapes import SHAPES, shape_named

C = 299792458.0
ORDERS = [(name, None) for name in SHAPES] + [("supergaussian", order) for order in (1, 3, 8, 32)]


@pytest.mark.parametrize(("name", "order"), ORDERS)
def test_the_power_falls_to_half_at_half_the_width(name, order):
    shape = shape_named(name, order)
    assert shape.field(np.array([0.0]))[0] == 1.0
    assert shape.field(np.array([-0.5, 0.5])) ** 2 == pytest.approx([0.5, 0.5], rel=1e-14)


@pytest.mark.parametrize(("name", "order"), ORDERS)
def test_parseval_between_the_two_closed_forms(name, order):
    shape = shape_named(name, order)
    u, spacing = np.linspace(-shape.spectral_end, shape.spectral_end, 400_001, retstep=True)
    kink = 1e-7 if name == "lorentzian" else 1e-13  # the trapezoid rule on exp(-2 |u|)
    assert np.sum(shape.spectrum(u) ** 2) * spacing / (2 * np.pi) == pytest.approx(shape.energy, rel=kink)


def finite_by_quadrature(u):
    """int exp(4 - 1/(y(1 - y))) cos(u x) dx in 30 digits."""
    with mpmath.workdps(30):
        ratio = mpmath.sqrt(mpmath.log(2) / (8 + mpmath.log(2)))
        half = 1 / (2 * ratio)

        def field(x):
            room = (0.5 + ratio * x) * (0.5 - ratio * x)
            return mpmath.exp(4 - 1 / room) * mpmath.cos(u * x) if room > 0 else mpmath.mpf(0)

        return float(2 * mpmath.quad(field, mpmath.linspace(0, half, 41)))


@pytest.mark.parametrize("u", [0.0, 0.31, 7.7, 23.0, 100.0])
def test_spectrum_of_the_finite_shape_against_quadrature(u):
    assert shapes.finite_spectrum(np.array([u]))[0] == pytest.approx(finite_by_quadrature(u), abs=5e-15)


@pytest.mark.parametrize("u", [0.0, 1.3, 9.1, 30.0])
def test_spectrum_of_a_supergaussian_against_quadrature(u):
    with mpmath.workdps(25):
        expected = 2 * mpmath.quad(
            lambda x: mpmath.exp(-mpmath.log(2) / 2 * (2 * x) ** 6) * mpmath.cos(u * x),
            mpmath.linspace(0, 1.6, 20),
        )
    assert shapes.supergaussian_spectrum(np.array([u]), 3)[0] == pytest.approx(float(expected), abs=5e-15)


def test_a_supergaussian_of_order_one_is_the_gaussian():
    u = np.linspace(0, 16, 333)
    assert shapes.supergaussian_spectrum(u, 1) == pytest.approx(shapes.gaussian_spectrum(u), abs=2e-14)


def test_the_finite_shape_is_zero_outside_its_support_and_as_wide_as_stated():
    # The stated ratio of FWHM to support is 0.282.
    assert pytest.approx(0.282, abs=5e-4) == shapes.FINITE_FWHM
    end = 0.5 / shapes.FINITE_FWHM
    outside = shapes.finite_field(np.array([-3 * end, -end, end, 1e9]))
    assert (outside == 0).all()
    assert (shapes.finite_field(np.array([-0.99 * end, 0.99 * end])) > 0).all()


@pytest.mark.parametrize("name", SHAPES)
def test_reaches_leave_out_the_share_they_promise(name):
    shape = shape_named(name)
    for share in (1e-2, 1e-6):
        edge = shape.field_reach(share)
        inner, step = np.linspace(-edge, edge, 200_001, retstep=True)
        left = 1 - np.sum(shape.field(inner) ** 2) * step / shape.energy
        assert 0 < left < 1.02 * share
        edge = shape.spectral_reach(share)
        inner, step = np.linspace(-edge, edge, 200_001, retstep=True)
        left = 1 - np.sum(shape.spectrum(inner) ** 2) * step / (2 * np.pi * shape.energy)
        assert 0 < left < 1.02 * share


def test_a_gaussian_reach_in_closed_form():
    # Share outside |x|: erfc(2 sqrt(ln2) |x|); at 1e-12 the argument is 5.0420297.
    assert shape_named("gaussian").field_reach(1e-12) == pytest.approx(
        5.042029745639 / (2 * np.sqrt(np.log(2))), rel=2e-3
    )


def test_unknown_shapes_and_orders_are_refused():
    with pytest.raises(InputError, match=r"no pulse shape has this name .*'sinc'.*gaussian, sech2"):
        shape_named("sinc")
    with pytest.raises(InputError, match="whole number"):
        shape_named("supergaussian", 2.5)
    with pytest.raises(InputError, match="has no order"):
        shape_named("gaussian", 2)


@pytest.mark.parametrize("width", [1e-9, 40e-9, 600e-9])
def test_a_bandwidth_in_wavelength_lies_between_the_half_maximum_points(width):
    centre = 2 * np.pi * C / 800e-9
    full = frequency_width(width, "wavelength", centre)
    frequency = C / 800e-9
    assert C / (frequency - full / 2) - C / (frequency + full / 2) == pytest.approx(width, rel=1e-12)


def test_bandwidths_of_all_kinds_agree():
    gaussian, centre = shape_named("gaussian"), 2 * np.pi * 375e12
    one = duration_from_bandwidth(gaussian, centre, 12e12, "frequency")
    assert one == pytest.approx(2 * np.log(2) / np.pi / 12e12, rel=1e-13)
    assert duration_from_bandwidth(gaussian, centre, 12e12 / C, "wavenumber") == pytest.approx(one, rel=1e-14)
    planck = 6.62607015e-34
    assert duration_from_bandwidth(gaussian, centre, 12e12 * planck, "photon_energy") == pytest.approx(one)


def test_a_bandwidth_must_be_one():
    with pytest.raises(InputError, match="must be positive"):
        frequency_width(-1e-9, "wavelength", 1e15)
    with pytest.raises(InputError, match="width of something else"):
        frequency_width(1.0, "time", 1e15)
