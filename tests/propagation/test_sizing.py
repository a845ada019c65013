"""The grid sizes itself: what it must hold, what it refuses, and that the answer does not depend on it."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.path import Path
from pulseprop.elements.phase_orders import PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.errors import NumericalLimit
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium, Resonance
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.send import run
from pulseprop.propagation.sizing import GridWish, first_windows, larger, most_points
from pulseprop.pulse.pulse import Pulse

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
PULSE = Pulse(centre=CENTRE, duration=20e-15, energy=1e-6)
GLASS = Path((Slab(name="flint", medium=catalogue_medium("SF10"), thickness=10e-3),))


def ringing_path(t2: float) -> Path:
    line = LorentzLine(strength=2 / t2 * 3e3 * C, centre=CENTRE, width=2 / t2)
    medium = Medium(name="vapour", response=line, resonances=(Resonance(CENTRE, 2 / t2, t2),))
    return Path((Slab(name="cell", medium=medium, thickness=1e-3),))


def test_the_grid_holds_band_and_delays():
    windows = first_windows(PULSE, GLASS, GridWish())
    grid = windows.grid
    low, high = PULSE.spectral_extent(1e-20)
    assert 2 * np.pi * grid.frequency[0] < low
    assert 2 * np.pi * grid.frequency[-1] > high
    first, last = PULSE.field_extent(1e-12)
    assert grid.time[0] < first
    assert grid.time[-1] > last
    # 10 mm of SF10 delay by (n_g - 1) L / c, n_g = 1.7509961512 at 800 nm.
    exit_window = windows.after(0)
    delay = 0.7509961512 * 10e-3 / C
    assert exit_window.time[0] < delay + first
    assert exit_window.time[-1] > delay + last


def test_a_line_asks_for_twenty_one_memories():
    assert first_windows(PULSE, ringing_path(1e-12), GridWish()).grid.span > 21e-12
    assert first_windows(PULSE, ringing_path(10e-12), GridWish()).grid.span > 210e-12


def test_the_answer_does_not_depend_on_the_grid():
    def sent(wish):
        return run(Experiment(title="a", pulse=PULSE, path=GLASS, grid=wish), "0", "0")

    plain, fine = sent(GridWish()), sent(GridWish(points=1 << 15, span=12e-12))
    assert fine.grid.points == 1 << 15
    assert fine.grid.span_fs == pytest.approx(12000, rel=1e-12)
    for key in ("fwhm_fs", "rms_fs", "peak_power_W", "energy_J", "equivalent_width_fs"):
        assert getattr(fine.pulse_out, key) == pytest.approx(getattr(plain.pulse_out, key), rel=1e-7), key
    assert fine.path.centroid_delay_fs == pytest.approx(plain.path.centroid_delay_fs, rel=1e-9)


def test_the_form_of_the_field_does_not_change_the_answer():
    runs = [
        run(Experiment(title="a", pulse=PULSE, path=GLASS, grid=GridWish(form=form)), "0", "0")
        for form in ("envelope", "field")
    ]
    assert runs[0].pulse_out.fwhm_fs == pytest.approx(runs[1].pulse_out.fwhm_fs, rel=1e-7)


def test_memory_is_counted_in_twelve_arrays_of_sixteen_bytes():
    assert most_points(12 * 16 * 4096) == 4096
    assert most_points(12 * 16 * 8191) == 4096


def refused(act) -> str:
    with pytest.raises(NumericalLimit) as caught:
        act()
    assert caught.value.exit_code == 3
    return str(caught.value)


def test_a_request_beyond_the_memory_is_refused_before_it_is_made():
    device = PhaseOrders(name="fibre", centre=CENTRE, gdd=1e-20)
    said = refused(lambda: first_windows(PULSE, Path((device,)), GridWish(memory=64 * 2**20)))
    for word in ("memory limit", "points", "GiB", "grid.memory", "narrow lines"):
        assert word in said


def test_a_stated_grid_that_is_too_coarse_or_short_is_refused_with_a_size_that_would_do():
    said = refused(lambda: first_windows(PULSE, GLASS, GridWish(points=256, span=10e-12)))
    for word in ("256 points of 39.06 fs", "grid.points", "points"):
        assert word in said
    said = refused(lambda: first_windows(PULSE, GLASS, GridWish(points=4096, span=50e-15)))
    assert "cannot hold the pulse" in said


def test_a_stated_window_that_wraps_is_not_enlarged_behind_the_users_back():
    windows = first_windows(PULSE, GLASS, GridWish(span=8e-12))
    said = refused(lambda: larger(windows, PULSE, GLASS, GridWish(span=8e-12)))
    for word in ("wraps around", "8 ps", "grid.span"):
        assert word in said


def test_larger_doubles_and_stops_at_the_memory():
    wish = GridWish(memory=12 * 16 * (1 << 13))
    windows = first_windows(PULSE, Path(()), wish)
    assert windows.grid.points == 1 << 12
    doubled = larger(windows, PULSE, Path(()), wish)
    assert doubled.grid.points == 1 << 13
    assert doubled.grid.step == windows.grid.step
    assert "memory limit" in refused(lambda: larger(doubled, PULSE, Path(()), wish))
