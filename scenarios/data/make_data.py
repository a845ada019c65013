"""Writes the invented data of Larkmoor Bench, an invented laboratory, beside this file.

    python scenarios/data/make_data.py [FOLDER]

Every table comes from a closed form that stands here in full, rounded as an instrument would print it, with a
noise that is the same at every run. Nothing was measured by anyone.
"""

from __future__ import annotations

import math
import random
import sys
from collections.abc import Iterable, Iterator
from functools import partial
from pathlib import Path

__all__ = ["FILES", "write_all"]

LIGHT = 299.792458
"""nm/fs."""

INVENTED = "# Larkmoor Bench (an invented laboratory): invented data, measured by nobody"

DYES = ((1.26e-3, 2.730, 0.120), (6.0e-4, 4.280, 0.200))
"""Dyes of the green filter: k at the peak, its place in rad/fs, and w of exp(-(d/w)^2) in rad/fs."""

FILTER_SECTION_MM = 0.25

GAS_LINES = (
    (0.381, 6.2, 0.011),
    (0.562, 7.4, 0.034),
    (0.688, 5.8, 0.009),
    (0.771, 7.0, 0.052),
    (0.934, 6.6, 0.023),
    (1.118, 8.0, 0.047),
)
"""Lines of the invented gas: centre in THz, FWHM in GHz, peak absorption in 1/cm."""

OSCILLATOR_FS, OSCILLATOR_NM, OSCILLATOR_GDD = 25.0, 800.0, 400.0
"""Transform limit (intensity FWHM, Gaussian), centre, and size of the chirp in fs^2."""

DARK_COUNTS, PEAK_COUNTS = 120.0, 42000.0

CYCLE_PS = 0.22
"""s of the waveform -(t/s) exp(1/2 - t^2/(2 s^2))."""

CRYSTAL = ((1.462, 0.0106), (0.930, 96.0))
"""Invented crystal: strength and squared resonance (um^2) of its Sellmeier terms."""

WINDOW = ((1.246, 0.0098), (0.880, 95.0))
"""Invented window glass: strength and squared resonance (um^2) of its Sellmeier terms."""

MIRROR_GDD, MIRROR_TOD, MIRROR_RIPPLE, MIRROR_SWING = -45.0, -33.0, 60.0, 26.0
"""A bounce off the mirrors at 800 nm, fs^2 and fs^3; size of their ripple, fs^2, and its swing, fs."""

AIR_AT = 1.00027
"""Index of air, in which the vendor of the crystal measures."""


def noise(seed: int) -> Iterator[float]:
    """Even noise between -1 and 1."""
    source = random.Random(seed)
    while True:
        yield 2 * source.random() - 1


def steps(first: float, last: float, step: float) -> list[float]:
    """Places from first to last, both included."""
    return [first + step * number for number in range(round((last - first) / step) + 1)]


def dye_k(omega: float) -> float:
    """Absorption index of the dyes at omega in rad/fs; odd, as that of all matter."""
    return sum(
        peak * (math.exp(-(((omega - place) / width) ** 2)) - math.exp(-(((omega + place) / width) ** 2)))
        for peak, place, width in DYES
    )


def green_filter() -> Iterable[str]:
    """Decadic absorbance of a thin section."""
    yield "wavelength_nm,absorbance"
    for wavelength in steps(350, 900, 2):
        napierian = (
            4 * math.pi * dye_k(2 * math.pi * LIGHT / wavelength) / wavelength * FILTER_SECTION_MM * 1e6
        )
        yield f"{wavelength:.0f},{napierian / math.log(10):.5f}"


def gas_lines() -> Iterable[str]:
    """A line a row."""
    yield "centre_THz,width_GHz,peak_absorption_per_cm"
    for centre, width, peak in GAS_LINES:
        yield f"{centre:.3f},{width:.1f},{peak:.3f}"


def oscillator_spectrum() -> Iterable[str]:
    """Counts of a spectrometer: power per wavelength on dark counts, with noise that does not end."""
    yield "wavelength_nm,counts"
    exponent = OSCILLATOR_FS**2 / (4 * math.log(2))
    rattle = noise(8)
    for wavelength in steps(680, 940, 0.4):
        away = 2 * math.pi * LIGHT * (1 / wavelength - 1 / OSCILLATOR_NM)
        per_nm = math.exp(-exponent * away**2) * (OSCILLATOR_NM / wavelength) ** 2
        yield f"{wavelength:.1f},{DARK_COUNTS + PEAK_COUNTS * per_nm + 12 * next(rattle):.0f}"


def oscillator_autocorrelation() -> Iterable[str]:
    """Intensity autocorrelation of the chirped pulse: sqrt(2) times as long, for a Gaussian."""
    yield "delay_fs,signal"
    duration = OSCILLATOR_FS * math.hypot(1, 4 * math.log(2) * OSCILLATOR_GDD / OSCILLATOR_FS**2)
    rattle = noise(9)
    for delay in steps(-240, 240, 3):
        shape = math.exp(-2 * math.log(2) * ((delay - 6) / duration) ** 2)
        yield f"{delay:.0f},{0.030 + 0.850 * shape + 0.004 * next(rattle):.4f}"


def reference_waveform() -> Iterable[str]:
    """Field of a single cycle, in parts of its largest."""
    yield "time_ps,field"
    rattle = noise(10)
    for time in steps(0, 30, 0.05):
        scaled = (time - 8) / CYCLE_PS
        yield f"{time:.2f},{-scaled * math.exp(0.5 - scaled**2 / 2) + 1e-4 * next(rattle):.5f}"


def crystal_index(wavelength: float) -> float:
    """Index of the crystal against vacuum; wavelength in um."""
    square = wavelength**2
    return math.sqrt(1 + sum(strength * square / (square - place) for strength, place in CRYSTAL))


def crystal_table() -> Iterable[str]:
    """Index against air at wavelengths in air, to five decimals."""
    yield "wavelength_um,n"
    for wavelength in steps(0.5, 2.0, 0.05):
        yield f"{wavelength:.2f},{crystal_index(wavelength * AIR_AT) / AIR_AT:.5f}"


def window_index(wavelength: float) -> float:
    """Index of the window glass against vacuum; wavelength in um."""
    square = wavelength**2
    return math.sqrt(1 + sum(strength * square / (square - place) for strength, place in WINDOW))


def window_table() -> Iterable[str]:
    """Index against vacuum, to four decimals."""
    yield "wavelength_um,n"
    for wavelength in steps(0.48, 1.60, 0.04):
        yield f"{wavelength:.2f},{window_index(wavelength):.4f}"


def mirror(sign: int) -> Iterable[str]:
    """GDD of one bounce; the ripples of the two mirrors have opposite signs."""
    yield "wavelength_nm,gdd_fs2"
    for wavelength in steps(600, 1150, 2):
        away = 2 * math.pi * LIGHT * (1 / wavelength - 1 / 800)
        ripple = sign * MIRROR_RIPPLE * math.cos(MIRROR_SWING * away)
        yield f"{wavelength:.0f},{MIRROR_GDD + MIRROR_TOD * away + ripple:.3f}"


FILES = {
    "green_filter.csv": green_filter,
    "gas_lines.csv": gas_lines,
    "oscillator_spectrum.csv": oscillator_spectrum,
    "oscillator_autocorrelation.csv": oscillator_autocorrelation,
    "reference_waveform.csv": reference_waveform,
    "crystal.csv": crystal_table,
    "window.csv": window_table,
    "mirror_a.csv": partial(mirror, 1),
    "mirror_b.csv": partial(mirror, -1),
}


def write_all(folder: Path) -> None:
    """Write every file into the folder."""
    for name, rows in FILES.items():
        (folder / name).write_text("\n".join((INVENTED, *rows())) + "\n", encoding="utf-8", newline="\n")


if __name__ == "__main__":
    write_all(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent)
