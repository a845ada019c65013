"""The limit on absorption that the number of electrons sets: f-sum rule of k, from density and composition.

    int_0^inf omega k d omega = pi wp^2 / 4,   wp^2 = electrons per volume * e^2 / (eps0 m)

(M. Altarelli, D. L. Dexter, H. M. Nussenzveig, D. Y. Smith, Phys. Rev. B 6, 4502 (1972), from memory), so
that over s = omega^2 the integral of k is pi wp^2 / 2. All electrons are counted, those of the inner shells
too: what absorbs below the X-rays is less, never more.
"""

from __future__ import annotations

import math
import re

from pulseprop.constants import ELECTRON_CHARGE, ELECTRON_MASS, VACUUM_PERMITTIVITY
from pulseprop.errors import InputError

__all__ = ["plasma_frequency", "strength_of"]

AVOGADRO = 6.02214076e23
"""1/mol, exact."""

WEIGHTS = (
    "H 1.008 He 4.0026 Li 6.94 Be 9.0122 B 10.81 C 12.011 N 14.007 O 15.999 F 18.998 Ne 20.180 Na 22.990 "
    "Mg 24.305 Al 26.982 Si 28.085 P 30.974 S 32.06 Cl 35.45 Ar 39.95 K 39.098 Ca 40.078 Sc 44.956 Ti 47.867 "
    "V 50.942 Cr 51.996 Mn 54.938 Fe 55.845 Co 58.933 Ni 58.693 Cu 63.546 Zn 65.38 Ga 69.723 Ge 72.630 "
    "As 74.922 Se 78.971 Br 79.904 Kr 83.798 Rb 85.468 Sr 87.62 Y 88.906 Zr 91.224 Nb 92.906 Mo 95.95 Tc 97 "
    "Ru 101.07 Rh 102.91 Pd 106.42 Ag 107.87 Cd 112.41 In 114.82 Sn 118.71 Sb 121.76 Te 127.60 I 126.90 "
    "Xe 131.29 Cs 132.91 Ba 137.33 La 138.91 Ce 140.12 Pr 140.91 Nd 144.24 Pm 145 Sm 150.36 Eu 151.96 "
    "Gd 157.25 Tb 158.93 Dy 162.50 Ho 164.93 Er 167.26 Tm 168.93 Yb 173.05 Lu 174.97 Hf 178.49 Ta 180.95 "
    "W 183.84 Re 186.21 Os 190.23 Ir 192.22 Pt 195.08 Au 196.97 Hg 200.59 Tl 204.38 Pb 207.2 Bi 208.98 "
    "Po 209 At 210 Rn 222 Fr 223 Ra 226 Ac 227 Th 232.04 Pa 231.04 U 238.03"
)
"""Symbols in order of their electrons (1 for H), each with its weight in g/mol: IUPAC, abridged standard
atomic weights 2021, from memory; elements without a stable isotope by mass number of the longest-lived."""

HEAVY_HYDROGEN = {"D": (1, 2.014)}
"""Electrons and weight: heavy water is sold as D2O."""


def _elements() -> dict[str, tuple[int, float]]:
    words = WEIGHTS.split()
    pairs = zip(words[::2], words[1::2], strict=True)
    return HEAVY_HYDROGEN | {symbol: (z, float(weight)) for z, (symbol, weight) in enumerate(pairs, start=1)}


ELEMENTS = _elements()
PART = re.compile(r"([A-Z][a-z]?|\(|\))(\d+(?:\.\d+)?)?")


def strength_of(density: float, composition: str) -> float:
    """Largest integral of k over s = omega^2, rad^2/s^2: `Knowledge.strength`. Arguments and errors as of
    `plasma_frequency`."""
    return math.pi / 2 * plasma_frequency(density, composition) ** 2


def plasma_frequency(density: float, composition: str) -> float:
    """Of all electrons, rad/s.

    density: kg/m^3, above 0. composition: a chemical formula, "SiO2", "KH2PO4", "Ca5(PO4)3F"; counts may be
    decimal. Raises InputError for anything else, and for an unknown element.
    """
    if not (math.isfinite(density) and density > 0):
        raise InputError("a density must be above 0", value=density, allowed="kg/m^3, above 0")
    electrons, weight = _electrons_and_weight(composition)
    per_volume = density / (weight * 1e-3) * AVOGADRO * electrons
    return math.sqrt(per_volume * ELECTRON_CHARGE**2 / (VACUUM_PERMITTIVITY * ELECTRON_MASS))


def _electrons_and_weight(composition: str) -> tuple[float, float]:
    """Of one formula unit; g/mol."""
    formula = composition.strip()
    parts = list(PART.finditer(formula))
    if not parts or "".join(part.group() for part in parts) != formula:
        raise _unreadable(composition)
    groups = [(0.0, 0.0)]
    # from the right, a closing bracket comes first and brings the count of its group along
    counts: list[float] = []
    for part in reversed(parts):
        symbol, count = part.group(1), float(part.group(2) or 1)
        if symbol == ")":
            groups.append((0.0, 0.0))
            counts.append(count)
            continue
        if symbol == "(" and (part.group(2) or not counts):
            raise _unreadable(composition)
        added = groups.pop() if symbol == "(" else _element(symbol, composition)
        count = counts.pop() if symbol == "(" else count
        electrons, weight = groups[-1]
        groups[-1] = electrons + count * added[0], weight + count * added[1]
    if counts or groups[0][0] == 0:
        raise _unreadable(composition)
    return groups[0]


def _element(symbol: str, composition: str) -> tuple[int, float]:
    if symbol not in ELEMENTS:
        raise InputError(
            f"{symbol} in {composition!r} is no element known here",
            value=symbol,
            allowed="symbols of the elements from H to U, and D",
            remedy="Write the composition as a chemical formula, for instance SiO2.",
        )
    return ELEMENTS[symbol]


def _unreadable(composition: str) -> InputError:
    return InputError(
        "the composition cannot be read",
        value=composition,
        allowed="a chemical formula: symbols, counts and round brackets, for instance SiO2 or Ca5(PO4)3F",
    )
