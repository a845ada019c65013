"""The front test: what matter, a filter of absorption alone and acausal devices let out before the front.

Nothing may: A. Sommerfeld, Ann. Phys. 44, 177 (1914). The strong line: 80 fs support at 800 nm, a 1 THz
wide line of optical depth 1000.
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.front import TestPulse, front_test, judged
from pulseprop.elements.element import transfer_of
from pulseprop.elements.path import Path
from pulseprop.elements.phase_orders import PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium, Resonance
from pulseprop.material.response import View
from pulseprop.propagation.diagnostics import causality_of
from pulseprop.pulse.shapes import FINITE_FWHM

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
WIDTH = 2 * np.pi * 1e12
T2 = 2 / WIDTH


def bump(x):
    inside = (x > 0) & (x < 1)
    filled = np.where(inside, x, 0.5)
    return np.where(inside, np.exp(-1 / (filled * (1 - filled))), 0.0)


PULSE = TestPulse(envelope=bump, support=80e-15, centre=CENTRE)
LINE = LorentzLine(strength=WIDTH * 1e6 * C, centre=CENTRE, width=WIDTH)
CELL = Slab(
    name="cell",
    medium=Medium(name="vapour", response=LINE, resonances=(Resonance(CENTRE, WIDTH, T2),)),
    thickness=1e-3,
)


def sent_through(transfer, *, most_points=1 << 20, first_span=1e-12, ringing=0.0, absorbs=False):
    return front_test(
        PULSE, transfer, first_span=first_span, ringing=ringing, most_points=most_points, absorbs=absorbs
    )


def test_the_line_has_its_optical_depth():
    """Im chi = alpha c/omega = x; Im sqrt(1 + i x) = (x/2)(1 - x^2/8 ...), here 0.2 % less than half of x."""
    x = 1e6 * C / CENTRE
    depth = CELL.medium.absorption(np.array([CENTRE]))[0] * 1e-3
    assert depth == pytest.approx(1000 * (1 - x * x / 8), rel=1e-4)


def test_a_strong_line_lets_nothing_out_before_the_front_and_absorption_alone_does():
    result = sent_through(
        lambda omega: transfer_of(CELL, omega, View.COMPLETED),
        ringing=32 * T2,
        first_span=1e-12,
        absorbs=True,
    )
    assert result.verdict == "causal"
    assert result.energy_ahead <= 1e-24
    assert result.naive_verdict == "acausal"
    assert result.naive_energy_ahead >= 5e-3


def test_the_diagnostics_of_a_path_say_the_same():
    causality = causality_of(Path((CELL,)), CENTRE, 80e-15 * FINITE_FWHM, 2**30)
    assert causality.verdict == "causal"
    assert causality.energy_ahead_of_front <= 1e-24
    assert causality.naive_filter.verdict == "acausal"
    assert causality.naive_filter.energy_ahead_of_front >= 5e-3
    assert causality.passive


def test_catalogue_media_alone_are_causal_and_not_unresolved():
    slabs = [("window", "fused silica", 3e-3), ("crown", "N-BK7", 2e-3), ("air", "air", 1.0)]
    path = Path(tuple(Slab(name=n, medium=catalogue_medium(m), thickness=d) for n, m, d in slabs))
    causality = causality_of(path, CENTRE, 20e-15, 2**30)
    assert causality.verdict == "causal"
    assert causality.kk_residual == 0.0
    assert causality.left_out == ()


@pytest.mark.parametrize("early", [8e-15, 20e-15])
def test_an_advance_is_acausal(early):
    """exp(-i omega early) sends the pulse out before it came; its first tenth holds 1e-8 of the energy."""
    result = sent_through(lambda omega: np.exp(-1j * omega * early))
    assert result.verdict == "acausal"


def test_a_line_conjugated_rings_before_it_is_struck():
    result = sent_through(lambda omega: np.conj(transfer_of(CELL, omega, View.COMPLETED)), ringing=32 * T2)
    assert result.verdict == "acausal"


def test_vacuum_leaves_the_pulse_alone():
    result = sent_through(lambda omega: np.ones(omega.shape, complex))
    assert result.verdict == "causal"
    assert result.energy_ahead < 1e-28


@pytest.mark.parametrize("late", [0.9e-12, 1.0e-12, 1.9e-12])
def test_a_late_pulse_is_followed_by_a_larger_window(late):
    result = sent_through(lambda omega: np.exp(1j * omega * late), first_span=0.3e-12)
    assert result.verdict == "causal"
    assert result.span > late


@pytest.mark.parametrize("late", [0.85e-12, 0.95e-12, 1.0e-12])
def test_a_late_pulse_in_a_window_that_cannot_grow_never_looks_early(late):
    result = sent_through(lambda omega: np.exp(1j * omega * late), first_span=0.3e-12, most_points=1 << 12)
    assert result.verdict == "unresolved"


def test_a_device_of_phase_alone_is_left_out():
    path = Path((PhaseOrders(name="shaper", centre=CENTRE, gdd=-500e-30), CELL))
    causality = causality_of(path, CENTRE, 80e-15 * FINITE_FWHM, 2**30)
    assert causality.left_out == ("shaper",)
    assert causality.verdict == "causal"


def test_a_path_of_devices_alone_is_not_judged():
    causality = causality_of(Path((PhaseOrders(name="shaper", centre=CENTRE),)), CENTRE, 20e-15, 2**30)
    assert causality.verdict == "unresolved"
    assert causality.energy_ahead_of_front is None


def test_gain_is_not_passive():
    gain = Medium(name="gain", response=LINE.with_strength(-1e22), resonances=(Resonance(CENTRE, WIDTH, T2),))
    path = Path((Slab(name="rod", medium=gain, thickness=1e-3),))
    causality = causality_of(path, CENTRE, 80e-15 * FINITE_FWHM, 2**30)
    assert not causality.passive
    assert causality.verdict == "causal"


def test_the_test_pulse_is_finite_and_sampled_to_rounding():
    step = PULSE.step()
    time = step * np.arange(-100, 3000)
    field = PULSE.field(time)
    assert np.all(field[time <= 0] == 0)
    assert np.all(field[time >= 80e-15] == 0)
    spectrum = np.abs(np.fft.rfft(field, 1 << 14))
    assert spectrum[-20:].max() < 1e-14 * spectrum.max()


@pytest.mark.parametrize(
    ("ahead", "floor", "verdict"),
    [
        (1e-27, 1e-28, "causal"),
        (1e-11, 1e-11, "causal"),
        (1e-12, 1e-9, "unresolved"),
        (1e-25, 1e-28, "unresolved"),
        (1e-20, 1e-28, "acausal"),
        (1e-3, 1e-9, "acausal"),
    ],
)
def test_verdicts(ahead, floor, verdict):
    assert judged(ahead, floor) == verdict
