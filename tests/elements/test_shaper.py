"""Pulse shapers: what is asked, what pixels show, what the range blocks.

Replicas of a mask of equal pixels, after Fourier: the answer to a delay t0 repeats at t0 + k T, where T is
the number of pixels over the bandwidth, each with the amplitude sinc(t / T) of a pixel's width times that of
the focus, exp(-(pi w t / T)^2 / 2) for a 1/e^2 radius of w pixels. (A. M. Weiner, Rev. Sci. Instrum. 71, 1929
(2000), has the same envelope; from memory.)
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.element import Element, orders_of_element, transfer_of
from pulseprop.elements.mirror_curves import OrdersOfBounce, TableOfBounce
from pulseprop.elements.phase_orders import PhaseOrders
from pulseprop.elements.pixels import Pixels
from pulseprop.elements.shaper import Shaper, Transmission
from pulseprop.elements.telling import Leading, Light, Telling
from pulseprop.errors import InputError
from pulseprop.material.response import Band

C = 299792458.0
CENTRE = 2 * np.pi * 375e12
BAND = Band(2 * np.pi * 360e12, 2 * np.pi * 390e12)


def shaper(gdd=0.0, tod=0.0, **changed) -> Shaper:
    orders = OrdersOfBounce(centre=CENTRE, gdd=gdd * 1e-30, tod=tod * 1e-45)
    return Shaper(name="shaper", centre=CENTRE, orders=orders, **changed)


def pixels(**changed) -> Pixels:
    return Pixels(**{"count": 300, "band": BAND, "spacing": "frequency", **changed})


def masked(**changed) -> dict:
    return {"range": BAND, "pixels": pixels(**changed)}


def light(low, high, count=400) -> Light:
    return Light(
        omega=2 * np.pi * np.linspace(low, high, count) * 1e12, power=np.ones(count), duration=30e-15
    )


def test_without_pixels_it_gives_the_orders_asked_for():
    """Against a device of the same orders."""
    omega = CENTRE + np.linspace(-2e14, 2e14, 9)
    device = PhaseOrders(name="device", centre=CENTRE, gdd=-900e-30, tod=400e-45, transmittance=0.6)
    ours = shaper(-900, 400, transmittance=0.6)
    assert isinstance(ours, Element)
    assert ours.phase_only
    assert transfer_of(ours, omega) == pytest.approx(transfer_of(device, omega), rel=1e-12)
    assert orders_of_element(ours, CENTRE)[1:3] == pytest.approx((-900e-30, 400e-45), rel=1e-12)
    assert ours.ringing(0.0, 1e16) == 0.0
    assert ours.warnings(light(360, 390)) == ()


def test_a_table_is_a_phase_without_its_delay():
    """(w - w0)^2 times 250 fs^2 is a GDD of 500 fs^2; the 40 fs of delay and the constant fall away."""
    omega = np.linspace(BAND.low, BAND.high, 41)
    x = omega - CENTRE
    table = TableOfBounce(omega=omega, values=3 + 40e-15 * x + 250e-30 * x**2, quantity="phase")
    ours = shaper(100, table=table, range=table.band)
    delay, gdd, _, _ = orders_of_element(ours, CENTRE)
    assert abs(delay) < 1e-22
    assert gdd * 1e30 == pytest.approx(600, rel=1e-9)
    assert "600 fs^2 at 799.4 nm" in ours.notes[0]


def test_transmission_is_of_energy():
    omega = np.linspace(BAND.low, BAND.high, 5)
    ours = shaper(transmission=Transmission(omega=omega, share=np.array([0, 0.2, 0.4, 0.9, 1.0])))
    passed = np.abs(transfer_of(ours, omega)) ** 2
    assert passed == pytest.approx([0, 0.2, 0.4, 0.9, 1.0], abs=1e-15)
    with pytest.raises(InputError, match=r"a transmission outside its range \(got 1\.2\)"):
        Transmission(omega=omega, share=np.array([0, 0.2, 0.4, 0.9, 1.2]))


def test_outside_the_range_is_dark():
    edge = (BAND.high - BAND.low) / 500
    for dark in (shaper(range=BAND), shaper(**masked())):
        passed = np.abs(transfer_of(dark, np.array([BAND.low - 10 * edge, CENTRE, BAND.high + 10 * edge])))
        assert passed == pytest.approx([0, 1, 0], abs=1e-9)
    half = shaper(range=Band(CENTRE, BAND.high))
    assert abs(transfer_of(half, np.array(CENTRE))) == pytest.approx(0.5, rel=1e-12)


def test_blocked_light_is_told():
    assert "25 % of the light lies outside its range, 768.7 nm to 832.8 nm" in " ".join(
        shaper(range=BAND).warnings(light(360, 400))
    )


def test_an_even_mask_is_no_mask():
    omega = np.linspace(BAND.low, BAND.high, 999)[100:-100]
    assert np.abs(shaper(**masked()).factor(omega) - 1).max() < 1e-9


@pytest.mark.parametrize("spot", [0.2, 1.0])
def test_replicas_stand_where_fourier_puts_them(spot):
    count, fine = 300, 40
    window = count / 30e12
    asked = 0.3 * window
    rows = np.linspace(BAND.low, BAND.high, 11)
    table = TableOfBounce(omega=rows, values=asked * (rows - CENTRE), quantity="phase")
    ours = shaper(table=table, **masked(spot=spot))
    # 120 windows of the spectrum sampled 40 times a pixel: 40 T in time, the pulse in its middle.
    frequency = 375e12 + (np.arange(count * fine) - count * fine // 2) / (fine * window)
    gate = np.exp(-(((frequency - 375e12) / 3e12) ** 2))
    spectrum = gate * transfer_of(ours, 2 * np.pi * frequency)
    field = np.abs(np.fft.fft(np.fft.ifftshift(spectrum)))
    reference = float(gate.sum())
    time = np.fft.fftfreq(count * fine, 1.0) * fine * window

    def expected(k: int) -> float:
        at = (asked + k * window) / window
        return abs(float(np.sinc(at) * np.exp(-((np.pi * spot * at) ** 2) / 2)))

    for k in (-2, -1, 0, 1):
        near = np.abs(time - k * window) < 0.05 * window
        assert field[near].max() / reference == pytest.approx(expected(k), rel=2e-3, abs=1e-6)


def test_the_time_window_is_pixels_over_bandwidth():
    """640 pixels over 30 THz: 21.33 ps; over 700 to 900 nm, 0.3125 nm or 146.4 GHz at 800 nm: 6.83 ps."""
    assert shaper(**masked(count=640)).time_window == pytest.approx(640 / 30e12, rel=1e-12)
    broad = Band(2 * np.pi * C / 900e-9, 2 * np.pi * C / 700e-9)
    ours = Shaper(
        name="shaper",
        centre=2 * np.pi * C / 800e-9,
        orders=OrdersOfBounce(centre=CENTRE),
        range=broad,
        pixels=Pixels(count=640, band=broad),
    )
    assert ours.figures["time_window_fs"] == pytest.approx(800e-9**2 / (C * 0.3125e-9) * 1e15, rel=1e-9)


def test_pixels_lie_evenly_in_what_they_are_said_to():
    for spacing, axis in (("wavelength", lambda w: 1 / w), ("frequency", lambda w: w)):
        steps = np.diff(axis(pixels(spacing=spacing).centres))
        assert steps == pytest.approx(np.full(299, steps[0]), rel=1e-9)
        mask = pixels(spacing=spacing)
        assert mask.place(mask.centres) == pytest.approx(np.arange(300) + 0.5, abs=1e-9)


def test_steps_larger_than_pixels_can_show_are_told():
    """Over 0.1 THz a GDD G changes the phase by G d(omega) delta: pi at 1 THz of detuning for 0.7958
    ps^2. With a little more all but the 19 steps nearest to the centre are too large, of 100 in the light.
    """
    steep = shaper(0.796e6, **masked())
    (warning,) = steep.warnings(light(370, 380))
    assert "for 81 % of the light" in warning
    assert "3.14 rad" in warning
    assert shaper(1e4, **masked()).warnings(light(370, 380)) == ()
    careful = shaper(1e5, **masked(), largest_step=0.5)
    assert any("0.5 rad" in text for text in careful.warnings(light(370, 380)))


def test_it_rings_before_and_after_for_as_long_as_the_focus_lets_it():
    """exp(-(s t)^2 / 2) = exp(-21), s = half the radius of the focus in frequency."""
    ours = shaper(**masked(spot=2.0))
    assert isinstance(ours, Leading)
    assert isinstance(ours, Telling)
    assert ours.lead == ours.ringing(0.0, 1e16) == pytest.approx(np.sqrt(42) / (2 * np.pi * 0.1e12))


@pytest.mark.parametrize(
    ("change", "words"),
    [
        ({"pixels": pixels()}, "pixels need the range"),
        ({"transmittance": 0.0}, "a transmittance outside its range"),
    ],
)
def test_what_makes_no_shaper_is_refused(change, words):
    with pytest.raises(InputError, match=words):
        shaper(**change)


@pytest.mark.parametrize(
    ("change", "words"), [({"count": 1}, "a mask needs pixels"), ({"spot": 0.0}, "a focus has a radius")]
)
def test_what_makes_no_mask_is_refused(change, words):
    with pytest.raises(InputError, match=words):
        pixels(**change)
