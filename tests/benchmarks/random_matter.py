"""Random passive causal materials known in closed form, and tables of them as a vendor would print them.

    chi = sum over lines of   a q^2 / (q^2 - w^2 - i g w)                                  an oscillator
                      or   A i [F((w - q + i g/2)/(sqrt2 s)) - F((w + q + i g/2)/(sqrt2 s))]  a Voigt profile

with the Faddeeva function F (NIST Digital Library of Mathematical Functions, 7.2.3; its derivatives: 7.10);
g = 0 makes a Gaussian. Both are analytic in the upper half plane with Im chi >= 0. Nothing here comes from
the package that is tested. Frequencies are in rad/fs, lengths in um.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray
from scipy.special import wofz

__all__ = ["C", "Line", "Matter", "Printing", "Sheet", "coarse", "random_sheet"]

Real = NDArray[np.float64]

C = 0.299792458
"""um/fs."""
GAUSS = np.sqrt(8 * np.log(2))
ROWS_OVER_A_LINE = 8.0


@dataclass(frozen=True, kw_only=True)
class Line:
    """peak: of Im chi (the static chi of an undamped oscillator). width: Lorentzian FWHM. spread: standard
    deviation of the Gaussian part, 0 for an oscillator."""

    centre: float
    peak: float
    width: float = 0.0
    spread: float = 0.0

    @property
    def full_width(self) -> float:
        """FWHM (J. J. Olivero, R. L. Longbothum, J. Quant. Spectrosc. Radiat. Transfer 17, 233 (1977))."""
        gauss = GAUSS * self.spread
        return 0.5346 * self.width + float(np.hypot(np.sqrt(0.2166) * self.width, gauss))

    def orders(self, w: Real) -> NDArray[np.complex128]:
        """chi and its first two derivatives by w: (3, places)."""
        return self._voigt(w) if self.spread else self._oscillator(w)

    def _oscillator(self, w: Real) -> NDArray[np.complex128]:
        strength = self.peak * (self.width * self.centre if self.width else self.centre**2)
        bottom, slope = self.centre**2 - w**2 - 1j * self.width * w, -2 * w - 1j * self.width
        return strength * np.array([1 / bottom, -slope / bottom**2, 2 * slope**2 / bottom**3 + 2 / bottom**2])

    def _voigt(self, w: Real) -> NDArray[np.complex128]:
        unit = np.sqrt(2) * self.spread
        scale = self.peak / wofz(0.5j * self.width / unit).real
        total = np.zeros((3, len(w)), dtype=complex)
        for sign in (1, -1):
            z = (w - sign * self.centre + 0.5j * self.width) / unit
            value = wofz(z)
            first = -2 * z * value + 2j / np.sqrt(np.pi)
            second = -2 * value - 2 * z * first
            total += sign * np.array([value, first / unit, second / unit**2])
        return 1j * scale * total


@dataclass(frozen=True)
class Matter:
    """A sum of lines."""

    lines: tuple[Line, ...]

    def refraction(self, w: Real) -> NDArray[np.complex128]:
        """n + i k."""
        return np.sqrt(1 + sum(line.orders(w) for line in self.lines)[0])

    def truth(self, w: Real) -> dict[str, Real]:
        """Index, group index and GVD (fs^2/mm) at w."""
        chi, slope, bend = sum(line.orders(w) for line in self.lines)
        n = np.sqrt(1 + chi)
        first = slope / (2 * n)
        second = bend / (2 * n) - slope**2 / (4 * n**3)
        return {
            "index": n.real,
            "group_index": (n + w * first).real,
            "gvd_fs2_per_mm": (2 * first + w * second).real / C * 1e3,
        }


AXES: dict[str, tuple[str, float, int]] = {
    "nm": ("wavelength (nm)", 2 * np.pi * C * 1e3, -1),
    "um": ("wavelength (um)", 2 * np.pi * C, -1),
    "cm^-1": ("wavenumber (cm^-1)", 1e4 / (2 * np.pi * C), 1),
    "THz": ("frequency (THz)", 1e3 / (2 * np.pi), 1),
}
"""Heading; value = number * w^power."""


@dataclass(frozen=True, kw_only=True)
class Printing:
    """decimals: of the axis and of n; k: its decimals, or significant digits where `significant`."""

    unit: str
    axis_decimals: int
    index_decimals: int
    k_digits: int | None = None
    significant: bool = False


@dataclass(frozen=True, kw_only=True, eq=False)
class Sheet:
    """A printed table, what is true of it, and whether each position was printed as it was."""

    matter: Matter
    printing: Printing
    w: Real
    positions: Real
    exact_positions: bool
    kind: str
    notes: dict[str, Any] = field(default_factory=dict)

    @property
    def columns(self) -> list[list[str]]:
        """Cells of the axis, of n, and of k where it is given."""
        printing, refraction = self.printing, self.matter.refraction(self.w)
        columns = [
            [f"{value:.{printing.axis_decimals}f}" for value in self.positions],
            [f"{value:.{printing.index_decimals}f}" for value in refraction.real],
        ]
        if printing.k_digits is not None:
            style = f".{printing.k_digits - 1}e" if printing.significant else f".{printing.k_digits}f"
            columns.append([f"{max(value, 0.0):{style}}" for value in refraction.imag])
        return columns

    @property
    def headings(self) -> list[str]:
        """Of the columns."""
        return [AXES[self.printing.unit][0], "n", "k"][: len(self.columns)]

    def text(self) -> str:
        """As comma separated values."""
        return "\n".join([",".join(self.headings), *map(",".join, zip(*self.columns, strict=True))]) + "\n"

    def half_units(self) -> str:
        """The rounding itself as an option of uncertainty."""
        printing = self.printing
        parts = [f"n={0.5 * 10.0**-printing.index_decimals:.6g}"]
        if printing.k_digits is not None and printing.significant:
            # significant digits are wrong by half a unit of 1.00... at most
            parts.append(f"k={0.5 * 10.0 ** (3 - printing.k_digits):.6g}%+1e-15")
        elif printing.k_digits is not None:
            parts.append(f"k={0.5 * 10.0**-printing.k_digits:.6g}")
        return ",".join(parts)


def random_sheet(seed: int, most_rows: int = 300) -> Sheet:
    """A transparent material (even seeds) or an absorbing one, sampled finely enough."""
    random = np.random.default_rng([seed, 1])
    absorbing = bool(seed % 2)
    w, positions, exact, printing = _axis(random, most_rows, absorbing)
    lines = _outside(random, w, damped=absorbing)
    kind = "transparent"
    if absorbing:
        kind = "absorbing"
        lines += _inside(random, w, lambda: ROWS_OVER_A_LINE * random.uniform(1.0, 3.0))
    return _sheet(Matter(tuple(lines)), printing, w, positions, exact, kind)


def coarse(seed: int, most_rows: int = 300) -> Sheet:
    """Lines of 0.3 to 4 rows over their widths in a table of n and k; every third seed one line that hides
    between two rows of a table of n."""
    random = np.random.default_rng([seed, 2])
    w, positions, exact, printing = _axis(random, most_rows, absorbing=bool(seed % 3))
    lines = _outside(random, w, damped=bool(seed % 3))
    if seed % 3:
        lines += _inside(random, w, lambda: random.uniform(0.3, 4.0))
    else:
        lines += _inside(random, w, lambda: random.uniform(0.01, 0.5))[:1]
    return _sheet(Matter(tuple(lines)), printing, w, positions, exact, "coarse")


def _sheet(matter: Matter, printing: Printing, w: Real, positions: Real, exact: bool, kind: str) -> Sheet:
    return Sheet(matter=matter, printing=printing, w=w, positions=positions, exact_positions=exact, kind=kind)


def _axis(random: Any, most_rows: int, absorbing: bool) -> tuple[Real, Real, bool, Printing]:
    """15 to 300 rows, as many short tables as long ones, in a unit of the trade."""
    rows = int(np.exp(random.uniform(np.log(15), np.log(most_rows))))
    start = np.exp(random.uniform(np.log(0.25), np.log(4.0)))
    ends = np.array([start, start * random.uniform(1.3, 4.0)])
    unit: Literal["nm", "um", "cm^-1", "THz"] = random.choice(list(AXES))
    _, number, power = AXES[unit]
    low, high = np.sort(number * (2 * np.pi * C / ends) ** power)
    even = bool(random.random() < 0.5)
    step = (high - low) / (rows - 1)
    decimals = max(int(np.ceil(-np.log10(step))) + (1 if even else 2), 0)
    steps = np.ones(rows - 1) if even else random.uniform(0.4, 1.6, rows - 1)
    if even:
        low, step = round(low, decimals), round(step, decimals)
        positions = np.round(low + step * np.arange(rows), decimals)
    else:
        positions = low + (high - low) * np.concatenate(([0], np.cumsum(steps))) / np.sum(steps)
    printed = np.round(positions, decimals)
    exact = even or bool(random.random() < 0.5)
    w = (
        (number / (printed if exact else positions))
        if power < 0
        else (printed if exact else positions) / number
    )
    printing = Printing(
        unit=unit,
        axis_decimals=decimals,
        index_decimals=int(random.integers(3, 7)),
        k_digits=None,
    )
    if absorbing:
        significant = bool(random.random() < 0.5)
        digits = int(random.integers(2, 5)) if significant else int(random.integers(3, 7))
        printing = Printing(
            unit=unit,
            axis_decimals=decimals,
            index_decimals=printing.index_decimals,
            k_digits=digits,
            significant=significant,
        )
    if random.random() < 0.5:
        w, printed = w[::-1].copy(), printed[::-1].copy()
    return w, printed, exact, printing


def _outside(random: Any, w: Real, *, damped: bool) -> list[Line]:
    """Beyond the rows: undamped, or Gaussian and so far that less than 1e-16 is absorbed at them."""
    first, last = float(np.min(w)), float(np.max(w))
    lines = []
    blue = last * random.uniform(1.15, 8.0, size=int(random.integers(1, 4)))
    red = first / random.uniform(1.5, 8.0, size=int(random.integers(0, 3)))
    shares = random.dirichlet(np.ones(len(blue))) * random.uniform(0.3, 4.0)
    room = np.concatenate((blue - last, first - red))
    peaks = np.concatenate((shares, random.uniform(0.0, 0.6, size=len(red))))
    for centre, peak, away in zip(np.concatenate((blue, red)), peaks, room, strict=True):
        if random.random() < 0.5:
            spread = min(away / random.uniform(9.0, 30.0), centre / 9)
            # as strong as an oscillator of that static chi: (2/pi) int Im chi / w dw
            lines.append(Line(centre=centre, peak=peak * centre * np.sqrt(np.pi / 8) / spread, spread=spread))
        else:
            width = random.uniform(0.0, 0.2) * away if damped else 0.0
            lines.append(Line(centre=centre, peak=peak * centre / width if width else peak, width=width))
    return lines


def _inside(random: Any, w: Real, rows_over: Any) -> list[Line]:
    """One to four lines in the band, so many rows over the width of each."""
    lines = []
    for _ in range(int(random.integers(1, 5))):
        centre = random.uniform(np.min(w), np.max(w))
        wanted = rows_over()
        full, gaps, edges = 0.0, np.abs(np.diff(w)), (w[1:] + w[:-1]) / 2
        for _ in range(8):
            near = np.abs(edges - centre) <= full / 2 + gaps
            full = max(full, wanted * float(np.max(gaps[near], initial=np.min(gaps))))
        full = min(full, 1.2 * centre)
        peak = 10 ** random.uniform(-3.0, 0.0)
        shape = random.choice(["lorentz", "voigt", "gauss"])
        if shape == "lorentz":
            lines.append(Line(centre=centre, peak=peak, width=full))
        else:
            part = random.uniform(0.2, 0.8) if shape == "voigt" else 0.0
            # Olivero and Longbothum solved for the Gaussian part
            rest = np.sqrt((1 - 0.5346 * part) ** 2 - 0.2166 * part**2)
            lines.append(Line(centre=centre, peak=peak, width=part * full, spread=rest * full / GAUSS))
    return lines
