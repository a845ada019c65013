"""Mistakes of the trade, planted in true tables of catalogue media and of random absorbers, as files.

Each kind is one function of a random generator that gives a file, the options it is vetted with, and how a
right answer names the mistake. The tables are those of `random_matter` and of published formulas; that such
mistakes are made is common practice, no source.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.material.catalogue_media import catalogue_medium
from tests.benchmarks.random_matter import C, Line, Matter

__all__ = ["KINDS", "Planted"]

Real = NDArray[np.float64]
Random = np.random.Generator

GLASSES = ("fused silica", "N-BK7", "SF10", "N-SF11", "F2", "N-LAK21", "SF57", "CaF2", "sapphire", "N-LAK22")
LN10 = float(np.log(10))
FS2_PER_MM = 1e-27


@dataclass(frozen=True, kw_only=True)
class Planted:
    """codes: of findings that name the mistake. words: that the text or repair of the finding must hold.
    needs_factor: whether only a factor of 2 shows it; else it is shown by another source or by a physical
    bound."""

    text: str
    codes: tuple[str, ...]
    words: str = ""
    needs_factor: bool = True
    options: dict[str, Any] = field(default_factory=dict)
    name: str = "table.csv"
    rows: tuple[int, ...] = ()


def written(headings: str, *columns: list[str]) -> str:
    return "\n".join([headings, *map(",".join, zip(*columns, strict=True))]) + "\n"


def fixed(values: Real, decimals: int) -> list[str]:
    return [f"{value:.{decimals}f}" for value in values]


def rounded(values: Real, digits: int = 4) -> list[str]:
    return [f"{value:.{digits - 1}e}" for value in values]


@dataclass(frozen=True, eq=False)
class Glass:
    """Evenly spaced rows of a catalogue medium, within 400 to 1600 nm."""

    name: str
    nm: Real
    n: Real
    decimals: int

    def orders(self) -> tuple[Real, Real]:
        """GVD (fs^2/mm) and TOD (fs^3/mm)."""
        medium = catalogue_medium(self.name)
        each = [medium.orders(TWO_PI_C / (place * 1e-9)) for place in self.nm]
        return np.array([one.gvd for one in each]) * 1e27, np.array([one.tod for one in each]) * 1e42


def glass(random: Random, least: int = 5, most: int = 7, finest: int = 2) -> Glass:
    """finest: step of the rows, in 5 nm."""
    name = str(random.choice(GLASSES))
    low, step = 5 * int(random.integers(80, 101)), 5 * int(random.integers(finest, 7))
    nm = np.arange(low, low + int(random.integers(600, 1101)), step, dtype=float)
    n = np.real(catalogue_medium(name).index(TWO_PI_C / (nm * 1e-9)))
    return Glass(name, nm, n, int(random.integers(least, most)))


@dataclass(frozen=True, eq=False)
class Absorber:
    """Evenly spaced rows in wavelength, eight at least over each line."""

    nm: Real
    n: Real
    k: Real

    def alpha(self, per: str) -> Real:
        """4 pi k / wavelength in cm^-1, mm^-1 or um^-1."""
        return 4 * np.pi * self.k / (self.nm * {"cm": 1e-7, "mm": 1e-6, "um": 1e-3}[per])


def absorber(random: Random, weakest: float = -2.0, strongest: float = -0.7) -> Absorber:
    nm = 400.0 + 2.0 * np.arange(int(random.integers(120, 200)))
    w = 2e3 * np.pi * C / nm
    lines = [Line(centre=float(random.uniform(8, 15)), peak=float(random.uniform(0.6, 2.0)))]
    for _ in range(int(random.integers(1, 4))):
        centre = float(random.uniform(w[-1] + 0.25, w[0] - 0.25))
        full = float(random.uniform(0.14, 0.4))
        peak = float(10 ** random.uniform(weakest, strongest))
        part = float(random.choice([0.0, 0.5, 1.0]))
        spread = full * float(np.sqrt(max((1 - 0.5346 * part) ** 2 - 0.2166 * part**2, 0))) / 2.3548
        lines.append(Line(centre=centre, peak=peak, width=part * full, spread=spread if part < 1 else 0.0))
    refraction = Matter(tuple(lines)).refraction(w)
    return Absorber(nm, refraction.real, refraction.imag)


def alpha_called_k(random: Random) -> Planted:
    one, per = absorber(random), str(random.choice(["cm", "mm", "um"]))
    text = written("wavelength (nm),n,k", fixed(one.nm, 0), fixed(one.n, 5), rounded(one.alpha(per)))
    return Planted(text=text, codes=("absorption-quantity",), words=f"alpha in {per}^-1")


def k_called_alpha(random: Random) -> Planted:
    one, per = absorber(random), str(random.choice(["cm", "um"]))
    text = written(f"wavelength (nm),n,alpha ({per}^-1)", fixed(one.nm, 0), fixed(one.n, 5), rounded(one.k))
    return Planted(text=text, codes=("absorption-quantity",), words=" as k")


def absorbance_called_alpha(random: Random) -> Planted:
    one, um = absorber(random, -3.5, -2.0), float(random.choice([20.0, 50.0, 100.0]))
    values = one.alpha("um") * um / LN10
    text = written("wavelength (nm),n,alpha (cm^-1)", fixed(one.nm, 0), fixed(one.n, 6), rounded(values))
    options = {"thickness": f"{um:g} um"}
    return Planted(text=text, codes=("absorption-quantity",), words="absorbance", options=options)


def alpha_to_base_10(random: Random) -> Planted:
    one, power = absorber(random), int(random.choice([-1, 1]))
    values = one.alpha("cm") * LN10**power
    text = written("wavelength (nm),n,alpha (cm^-1)", fixed(one.nm, 0), fixed(one.n, 5), rounded(values))
    return Planted(text=text, codes=("wrong-logarithm",), words="2.302585")


def absorbance_to_base_e(random: Random) -> Planted:
    one, um = absorber(random, -3.5, -2.0), float(random.choice([20.0, 50.0, 100.0]))
    text = written(
        "wavelength (nm),n,absorbance", fixed(one.nm, 0), fixed(one.n, 6), fixed(one.alpha("um") * um, 4)
    )
    options = {"thickness": f"{um:g} um"}
    return Planted(text=text, codes=("wrong-logarithm",), words="2.302585", options=options)


def two_columns_two_logarithms(random: Random) -> Planted:
    one, um = absorber(random, -4.0, -2.5), 100.0
    text = written(
        "wavelength (nm),absorbance,alpha (cm^-1)",
        fixed(one.nm, 0),
        fixed(one.alpha("um") * um / LN10, 4),
        rounded(one.alpha("cm") / LN10),
    )
    options = {"thickness": f"{um:g} um"}
    return Planted(
        text=text, codes=("wrong-logarithm",), words="2.302585", needs_factor=False, options=options
    )


def unit_of_wavelength(random: Random) -> Planted:
    one = glass(random)
    heading, scale, places = [("um", 1.0, 0), ("nm", 1e-3, 3), ("nm", 10.0, 0)][int(random.integers(3))]
    text = written(f"wavelength ({heading}),n", fixed(one.nm * scale, places), fixed(one.n, one.decimals))
    return Planted(text=text, codes=("axis-unit",), needs_factor=False, options={"medium": one.name})


def axis_called_wavelength(random: Random) -> Planted:
    """Frequencies in THz, or wavenumbers, under the heading of wavelengths."""
    one = glass(random)
    low, high = (1e3 * TWO_PI_C / 2 / np.pi / nm * 1e-6 for nm in (one.nm[-1], one.nm[0]))
    axis = np.round(np.linspace(low, high, len(one.nm)))
    n = np.real(catalogue_medium(one.name).index(2 * np.pi * axis * 1e12))
    text = written("wavelength (nm),n", fixed(axis, 0), fixed(n, one.decimals))
    return Planted(text=text, codes=("axis-unit",), words="frequency in THz")


def air_for_vacuum(random: Random) -> Planted:
    """An index against vacuum of a medium that is published against air."""
    one = glass(random)
    air = np.real(catalogue_medium("air").index(TWO_PI_C / (one.nm * 1e-9)))
    text = written("wavelength (nm),n", fixed(one.nm, 0), fixed(one.n * air, one.decimals))
    return Planted(text=text, codes=("air-vacuum",), needs_factor=False, options={"medium": one.name})


def percent_called_fraction(random: Random) -> Planted:
    one, um = absorber(random, -4.0, -2.5), 10.0
    values = np.exp(-one.alpha("um") * um)
    text = written(
        "wavelength (nm),n,internal transmittance", fixed(one.nm, 0), fixed(one.n, 6), fixed(100 * values, 2)
    )
    options = {"thickness": f"{um:g} um", "columns": "wavelength,n,internal transmittance/1"}
    if bool(random.integers(2)):
        text = written(
            "wavelength (nm),n,internal transmittance (%)",
            fixed(one.nm, 0),
            fixed(one.n, 6),
            fixed(values, 4),
        )
        options = {"thickness": f"{um:g} um"}
    return Planted(text=text, codes=("percent-fraction",), needs_factor=False, options=options)


def plate(random: Random, one: Glass) -> Real:
    """What a plate with one band of absorption lets through both faces, multiple reflections included."""
    centre, width = random.uniform(one.nm[0], one.nm[-1]), random.uniform(60, 120)
    inside = np.exp(-random.uniform(0.2, 1.5) * np.exp(-(((one.nm - centre) / width) ** 2)))
    reflected = ((one.n - 1) / (one.n + 1)) ** 2
    return (1 - reflected) ** 2 * inside / (1 - reflected**2 * inside**2)


def loss_at_faces_left_in(random: Random) -> Planted:
    """A plate with bands that absorb, and its catalogue medium stated."""
    one = glass(random)
    text = written("wavelength (nm),internal transmittance", fixed(one.nm, 0), fixed(plate(random, one), 4))
    options = {"medium": one.name, "thickness": "2 mm"}
    return Planted(text=text, codes=("fresnel-loss",), needs_factor=False, options=options)


def loss_at_faces_beside_the_index(random: Random) -> Planted:
    """A plate with a faint band, too faint to bend the index by the fourth decimal."""
    one = glass(random, 4, 5)
    text = written(
        "wavelength (nm),n,internal transmittance",
        fixed(one.nm, 0),
        fixed(one.n, 4),
        fixed(plate(random, one), 4),
    )
    return Planted(text=text, codes=("fresnel-loss",), needs_factor=False, options={"thickness": "20 mm"})


def columns_swapped(random: Random) -> Planted:
    one = absorber(random)
    text = written("wavelength (nm),n,k", fixed(one.nm, 0), fixed(one.k, 5), fixed(one.n, 5))
    return Planted(text=text, codes=("swapped-columns",))


def index_reversed(random: Random) -> Planted:
    one = glass(random)
    text = written("wavelength (nm),n", fixed(one.nm, 0), fixed(one.n[::-1], one.decimals))
    return Planted(text=text, codes=("reversed-order",))


def column_of_two_reversed(random: Random) -> Planted:
    one, which = absorber(random), bool(random.integers(2))
    n, k = (one.n[::-1], one.k) if which else (one.n, one.k[::-1])
    text = written("wavelength (nm),n,k", fixed(one.nm, 0), fixed(n, 5), fixed(k, 5))
    return Planted(text=text, codes=("reversed-order",), words=f"the {'n' if which else 'k'} column")


def row_twice(random: Random) -> Planted:
    """A wavelength twice, the second time with the value of another row."""
    one, row = glass(random), int(random.integers(3, 15))
    nm, n = np.insert(one.nm, row + 1, one.nm[row]), np.insert(one.n, row + 1, one.n[row + 1])
    text = written("wavelength (nm),n", fixed(nm, 0), fixed(n, one.decimals))
    return Planted(text=text, codes=("double-row",), rows=(row + 2, row + 3))


def rows_slipped(random: Random) -> Planted:
    """Rows far apart in a wide band: a slip of little rows is much like a stretched axis, a blind spot."""
    name, step = str(random.choice(GLASSES)), int(random.choice([-1, 1]))
    nm = np.arange(400.0, 1801.0, 5 * int(random.integers(5, 11)))
    one = Glass(name, nm, np.real(catalogue_medium(name).index(TWO_PI_C / (nm * 1e-9))), 6)
    nm, n = (one.nm[1:], one.n[:-1]) if step > 0 else (one.nm[:-1], one.n[1:])
    text = written("wavelength (nm),n", fixed(nm, 0), fixed(n, one.decimals))
    return Planted(text=text, codes=("shifted-rows",))


def absorption_slipped(random: Random) -> Planted:
    """The k column one row up or down beside n."""
    one = absorber(random)
    up = bool(random.integers(2))
    nm, n, k = (one.nm[1:], one.n[1:], one.k[:-1]) if up else (one.nm[:-1], one.n[:-1], one.k[1:])
    text = written("wavelength (nm),n,k", fixed(nm, 0), fixed(n, 5), fixed(k, 5))
    return Planted(text=text, codes=("shifted-rows",))


def row_displaced(random: Random) -> Planted:
    """The value of one row stands in another."""
    one, row = glass(random), int(random.integers(3, 15))
    n = one.n.copy()
    n[row] = n[row + int(random.choice([-1, 1]))]
    text = written("wavelength (nm),n", fixed(one.nm, 0), fixed(n, one.decimals))
    return Planted(text=text, codes=("displaced-row",), rows=(row + 2,))


def wrong_digit(random: Random) -> Planted:
    """One digit after the second decimal place read as another."""
    one = glass(random)
    cells, row = fixed(one.n, one.decimals), int(random.integers(2, len(one.n) - 2))
    place = int(random.integers(3, len(cells[row]) - 1))
    other = random.choice([digit for digit in "0123456789" if digit != cells[row][place]])
    cells[row] = cells[row][:place] + str(other) + cells[row][place + 1 :]
    text = written("wavelength (nm),n", fixed(one.nm, 0), cells)
    return Planted(text=text, codes=("displaced-row",), rows=(row + 2,))


def too_few_digits(random: Random) -> Planted:
    one = glass(random, 3, 5)
    text = written("wavelength (nm),n", fixed(one.nm, 0), fixed(one.n, one.decimals))
    at = one.nm[len(one.nm) // 2]
    options = {"require": (f"gvd at {at:g} nm = 40 +- 0.5 fs^2/mm",)}
    return Planted(
        text=text, codes=("too-few-digits",), words="decimals", needs_factor=False, options=options
    )


def formula_beyond_its_range(random: Random) -> Planted:
    name = str(random.choice(["N-BK7", "SF10", "N-SF11", "F2", "N-LAK21", "SF57"]))
    terms = SELLMEIER[name]
    low, high = (float(random.uniform(180, 270)), 2400.0) if random.integers(2) else (400.0, 3500.0)
    lines = [f'{{ strength = {b}, resonance_squared = "{c} um^2" }},' for b, c in terms]
    text = f"""name = "{name}"
claimed = "{name}"
[formula]
kind = "sellmeier"
valid = ["{low:.0f} nm", "{high:.0f} nm"]
terms = [
{chr(10).join(lines)}
]
"""
    return Planted(text=text, codes=("beyond-published-range",), needs_factor=False, name="formula.toml")


def index_falls(random: Random) -> Planted:
    """A stretch of a transparent band in which the index falls towards the blue: a table joined wrongly."""
    one, row = glass(random), int(random.integers(5, 12))
    n = one.n.copy()
    n[row : row + 6] = n[row : row + 6][::-1]
    text = written("wavelength (nm),n", fixed(one.nm, 0), fixed(n, one.decimals))
    return Planted(text=text, codes=("falling-index",))


def negative_absorption(random: Random) -> Planted:
    one = absorber(random, -4.0, -2.5)
    alpha = one.alpha("cm")
    values = -alpha if random.integers(2) else alpha - 0.2 * np.max(alpha)
    text = written("wavelength (nm),alpha (cm^-1)", fixed(one.nm, 0), fixed(values, 2))
    return Planted(text=text, codes=("negative-absorption",), needs_factor=False)


def gvd_from_another_column(random: Random) -> Planted:
    """D in ps/(nm km) under GVD, TOD under GVD, or GVD under the heading of a neighbouring unit."""
    one = glass(random, 6, 7, finest=5)
    gvd, tod = one.orders()
    length = (one.nm * 1e-9) ** 2
    dispersion = -TWO_PI_C / length * gvd * FS2_PER_MM * 1e6
    values = (dispersion, tod, 10 * gvd, -gvd)[int(random.integers(4))]
    text = written("wavelength (nm),n,GVD (fs^2/mm)", fixed(one.nm, 0), fixed(one.n, 6), fixed(values, 2))
    return Planted(text=text, codes=("printed-gvd",), needs_factor=False)


def tod_from_another_column(random: Random) -> Planted:
    one = glass(random, 6, 7, finest=5)
    gvd, tod = one.orders()
    values = (gvd, 10 * tod, -tod)[int(random.integers(3))]
    text = written("wavelength (nm),n,TOD (fs^3/mm)", fixed(one.nm, 0), fixed(one.n, 7), fixed(values, 2))
    return Planted(text=text, codes=("printed-tod",), needs_factor=False)


def abbe_of_another_glass(random: Random) -> Planted:
    name, other = random.choice(["N-BK7", "SF10", "N-SF11", "F2", "N-LAK21", "SF57"], size=2, replace=False)
    nm = np.arange(420.0, 901.0, 10.0)
    n = np.real(catalogue_medium(str(name)).index(TWO_PI_C / (nm * 1e-9)))
    f, d, c = np.real(
        catalogue_medium(str(other)).index(TWO_PI_C / (np.array([486.1327, 587.5618, 656.2725]) * 1e-9))
    )
    text = f"# melt 7, V_d = {(d - 1) / (f - c):.2f}\n" + written(
        "wavelength (nm),n", fixed(nm, 0), fixed(n, 5)
    )
    return Planted(text=text, codes=("abbe-number",), needs_factor=False)


def another_medium(random: Random) -> Planted:
    one = glass(random)
    claimed = str(random.choice([name for name in GLASSES if name != one.name]))
    text = written("wavelength (nm),n", fixed(one.nm, 0), fixed(one.n, one.decimals))
    return Planted(
        text=text, codes=("not-the-claimed-medium",), needs_factor=False, options={"medium": claimed}
    )


def flat_index(random: Random) -> Planted:
    """One number for the index of a sample that absorbs."""
    one = absorber(random)
    text = written(
        "wavelength (nm),n,k", fixed(one.nm, 0), fixed(np.full(len(one.n), 1.5), 3), fixed(one.k, 5)
    )
    return Planted(text=text, codes=("constant-index",))


SELLMEIER = {
    "N-BK7": ((1.03961212, 0.00600069867), (0.231792344, 0.0200179144), (1.01046945, 103.560653)),
    "SF10": ((1.61625977, 0.0127534559), (0.259229334, 0.0581983954), (1.07762317, 116.60768)),
    "N-SF11": ((1.73759695, 0.013188707), (0.313747346, 0.0623068142), (1.89878101, 155.23629)),
    "F2": ((1.34533359, 0.00997743871), (0.209073176, 0.0470450767), (0.937357162, 111.886764)),
    "N-LAK21": ((1.22718116, 0.00602075682), (0.420783743, 0.0196862889), (1.01284843, 88.4370099)),
    "SF57": ((1.81651371, 0.0143704198), (0.428893641, 0.0592801172), (1.07186278, 121.419942)),
}
"""Strength and resonance squared in um^2: SCHOTT optical glass catalogue (2017-01-20)."""

KINDS: dict[str, Callable[[Random], Planted]] = {
    "alpha under the heading k": alpha_called_k,
    "k under the heading alpha": k_called_alpha,
    "absorbance under the heading alpha": absorbance_called_alpha,
    "alpha with the wrong logarithm": alpha_to_base_10,
    "absorbance with the wrong logarithm": absorbance_to_base_e,
    "two columns, two logarithms": two_columns_two_logarithms,
    "unit of wavelength": unit_of_wavelength,
    "frequency under wavelength": axis_called_wavelength,
    "vacuum for air, medium stated": air_for_vacuum,
    "per cent and fraction": percent_called_fraction,
    "loss at faces left in, medium stated": loss_at_faces_left_in,
    "loss at faces left in, index beside": loss_at_faces_beside_the_index,
    "columns swapped": columns_swapped,
    "index sorted in reverse": index_reversed,
    "one of n, k sorted in reverse": column_of_two_reversed,
    "a row twice, values differ": row_twice,
    "index slipped by a row": rows_slipped,
    "k slipped by a row": absorption_slipped,
    "a row's value in another row": row_displaced,
    "a wrong digit": wrong_digit,
    "too few digits for the GVD asked": too_few_digits,
    "formula beyond its range": formula_beyond_its_range,
    "index falls in a transparent band": index_falls,
    "negative absorption": negative_absorption,
    "GVD from a wrong column": gvd_from_another_column,
    "TOD from a wrong column": tod_from_another_column,
    "Abbe number of another glass": abbe_of_another_glass,
    "another medium than stated": another_medium,
    "one number for an absorber's index": flat_index,
}
