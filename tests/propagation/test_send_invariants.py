"""Invariants of runs and of the linear step: energy, Parseval, linearity, reversal, order of passive slabs;
a finite pulse on an exact Lorentz line against thirty digits.
"""

from __future__ import annotations

import json
from pathlib import Path as FilePath

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.special import j1

from pulseprop.elements.path import Path
from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.errors import RangeError
from pulseprop.grid import Grid
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.linear import multiply_by
from pulseprop.propagation.send import run
from pulseprop.pulse.pulse import Pulse

QUIET = settings(max_examples=8, deadline=None, derandomize=True)
C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
SEEDS = st.integers(0, 1000)
GRID = Grid(points=2048, step=2e-15, start=-1e-12, carrier=375e12)


def noise(seed: int) -> np.ndarray:
    """A spectrum over 700 to 900 nm, where the media of these tests are transparent."""
    generator = np.random.default_rng(seed)
    inside = np.abs(GRID.frequency - 375e12) < 45e12
    return inside * (generator.normal(size=GRID.points) + 1j * generator.normal(size=GRID.points))


def a_slab(medium: str, thickness: float, **more) -> Slab:
    return Slab(name=medium, medium=catalogue_medium(medium), thickness=thickness, **more)


SLABS = (a_slab("fused silica", 3e-3), a_slab("SF10", 2e-3, angle=0.6), a_slab("air", 2.0))


def through(path, spectrum: np.ndarray) -> np.ndarray:
    out = spectrum.copy()
    for element in path:
        multiply_by(element, GRID, out)
    return out


@QUIET
@given(SEEDS)
def test_transparent_slabs_keep_the_energy_in_time_and_in_frequency(seed):
    entering = noise(seed)
    leaving = through(SLABS, entering)
    assert GRID.energy(leaving) == pytest.approx(GRID.energy(entering), rel=1e-13)
    in_time = GRID.step * np.sum(np.abs(GRID.to_field(leaving)) ** 2)
    assert in_time == pytest.approx(GRID.energy(entering), rel=1e-12)


@QUIET
@given(SEEDS, SEEDS, st.complex_numbers(max_magnitude=10, allow_nan=False))
def test_what_leaves_is_linear_in_what_enters(first, second, factor):
    one, two = noise(first), noise(second)
    together = through(SLABS, one + factor * two)
    apart = through(SLABS, one) + factor * through(SLABS, two)
    assert np.abs(together - apart).max() < 1e-12 * np.abs(apart).max()


@QUIET
@given(SEEDS, st.floats(-2e4, 2e4), st.floats(-2e5, 2e5))
def test_a_device_and_its_reverse_give_the_input_back(seed, gdd, tod):
    def device(sign):
        return PhaseOrders(name="a", centre=CENTRE, gdd=sign * gdd * 1e-30, tod=sign * tod * 1e-45)

    entering = noise(seed)
    assert (
        np.abs(through((device(1), device(-1)), entering) - entering).max() < 1e-11 * np.abs(entering).max()
    )


@QUIET
@given(SEEDS)
def test_running_backwards_through_transparent_matter_is_conjugation(seed):
    """Transparent transfers are pure phases: send, conjugate the spectrum, send again, conjugate."""
    entering = noise(seed)
    back = through(SLABS, through(SLABS, entering).conj()).conj()
    assert np.abs(back - entering).max() < 1e-9 * np.abs(entering).max()


def pulse(**more) -> Pulse:
    return Pulse(**{"centre": CENTRE, "duration": 20e-15, "energy": 1e-6, **more})


def sent(path: Path, **more):
    return run(Experiment(title="check", pulse=more.pop("pulse", pulse()), path=path, **more), "0", "0")


def test_the_order_of_passive_slabs_does_not_matter_to_what_arrives():
    elements = (
        a_slab("fused silica", 2e-3, faces="fresnel"),
        a_slab("SF10", 1e-3),
        Loss(name="l", transmittance=0.4),
    )
    runs = [sent(Path(order)) for order in (elements, elements[::-1])]
    here, there = (one.as_json() for one in runs)
    for key in ("fwhm_fs", "rms_fs", "energy_J", "peak_ratio", "centre_nm"):
        assert here["pulse_out"][key] == pytest.approx(there["pulse_out"][key], rel=1e-9)
    for key in ("group_delay_fs", "gdd_fs2", "tod_fs3", "transmission", "centroid_delay_fs"):
        assert here["path"][key] == pytest.approx(there["path"][key], rel=1e-9)


def test_an_ideal_transparent_slab_keeps_energy_and_spectrum_of_a_run():
    result = sent(Path((a_slab("fused silica", 3e-3),)))
    assert result.path.transmission == pytest.approx(1, abs=1e-12)
    assert result.pulse_out.centre_nm == pytest.approx(result.pulse_in.centre_nm, rel=1e-12)
    assert result.path.reshaping_delay_fs == pytest.approx(0, abs=1e-6)
    assert result.path.centroid_delay_fs == pytest.approx(result.path.net_group_delay_fs, rel=1e-9)


def test_a_shaper_undoes_the_glass_in_a_run():
    """Opposite GDD, TOD and FOD leave a 40 fs pulse within 1e-4 of its limit."""
    glass = a_slab("fused silica", 5e-3)
    orders = glass.medium.orders(CENTRE)
    undo = PhaseOrders(
        name="shaper", centre=CENTRE, gdd=-orders.gvd * 5e-3, tod=-orders.tod * 5e-3, fod=-orders.fod * 5e-3
    )
    result = sent(Path((glass, undo)), pulse=pulse(duration=40e-15))
    assert result.path.gdd_fs2 == pytest.approx(0, abs=1e-9)
    assert result.pulse_out.fwhm_fs == pytest.approx(40, rel=1e-4)
    assert result.pulse_out.peak_ratio == pytest.approx(1, abs=1e-4)


def test_methods_and_forms_agree():
    path = Path((a_slab("SF10", 2e-3, faces="fresnel"),))
    exact, stepped = sent(path), sent(path, method="split-step")
    assert stepped.pulse_out.fwhm_fs == pytest.approx(exact.pulse_out.fwhm_fs, rel=1e-10)
    assert stepped.pulse_out.energy_J == pytest.approx(exact.pulse_out.energy_J, rel=1e-12)


def test_a_pulse_beyond_the_range_of_a_record_is_refused_with_range_and_share():
    with pytest.raises(RangeError) as caught:
        sent(Path((a_slab("ZnSe", 1e-3),)), pulse=pulse(centre=2 * np.pi * C / 560e-9))
    for word in ("ZnSe", "540 nm to 18200 nm", "% of the pulse's energy", "beyond_range"):
        assert word in str(caught.value)
    said = sent(
        Path((a_slab("ZnSe", 1e-5),)), pulse=pulse(centre=2 * np.pi * C / 560e-9), beyond_range="causal"
    )
    assert any("continued causally" in warning for warning in said.warnings)


# A finite pulse of 20 cycles at 800 nm on a resonant Lorentz line, T2 100 fs, optical depth 5 over 1 mm.
SUPPORT = 20 * 800e-9 / C
STEP = SUPPORT / 280
T2, DEPTH, LENGTH = 100e-15, 5.0, 1e-3
INSTANTS = 40 + 137 * np.arange(20)
WIDTH = 2 / T2
LINE = LorentzLine(strength=WIDTH * DEPTH / LENGTH * C, centre=CENTRE, width=WIDTH)
THIRTY_DIGITS = json.loads((FilePath(__file__).parent / "lorentz_20_cycles.json").read_text(encoding="utf-8"))


def bump(x):
    x = np.asarray(x, float)
    inside = (x > 0) & (x < 1)
    filled = np.where(inside, x, 0.5)
    return np.where(inside, np.exp(4 - 1 / (filled * (1 - filled))), 0.0)


def response() -> tuple[Grid, np.ndarray]:
    """The analytic signal behind the line; window 60 T2."""
    grid = Grid(points=1 << 15, step=STEP, start=-1000 * STEP, carrier=0.5 / STEP)
    field = bump(grid.time / SUPPORT) * np.cos(CENTRE * (grid.time - SUPPORT / 2))
    spectrum = grid.to_spectrum(field * np.exp(2j * np.pi * grid.carrier * grid.time))
    spectrum *= np.where(grid.frequency < grid.carrier, 2.0, 0.0)
    spectrum[0] /= 2
    cell = Slab(name="cell", medium=Medium(name="line", response=LINE), thickness=LENGTH)
    multiply_by(cell, grid, spectrum)
    return grid, grid.carrier_resolved(grid.to_field(spectrum))


def test_an_exact_lorentz_line_answers_a_finite_pulse_to_1e_9():
    """Quadrature of the same transfer along omega + i eta in 30 digits: tests/benchmarks/resonance.py."""
    _, field = response()
    expected = np.array([float(value) for value in THIRTY_DIGITS["field"]])
    assert expected.size == 20
    assert np.abs(field.real[1000 + INSTANTS] - expected).max() < 1e-9


def test_the_single_pole_closed_form_agrees_to_two_over_omega_t2():
    """D. C. Burnham, R. Y. Chiao, Phys. Rev. 188, 667 (1969): -exp(-t/T2) sqrt(b/t) J1(2 sqrt(b t))."""
    _, field = response()
    b = DEPTH / (2 * T2)

    def closed_form(time):
        """By parts of u = sqrt(t), so that the kernel is smooth where it starts."""

        def integrand(u):
            kernel = 2 * np.sqrt(b) * np.exp(-u * u / T2) * j1(2 * np.sqrt(b) * u)
            return kernel * float(bump((time - u * u) / SUPPORT))

        first = np.sqrt(max(time - SUPPORT, 0.0))
        return float(bump(time / SUPPORT)) - quad(integrand, first, np.sqrt(time), epsabs=1e-10, limit=400)[0]

    for index in INSTANTS:
        time = index * STEP
        envelope = field[1000 + index] * np.exp(1j * CENTRE * (time - SUPPORT / 2))
        assert abs(envelope - closed_form(time)) < 2 / (CENTRE * T2), index
