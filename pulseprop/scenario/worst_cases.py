"""What a vendor's table of the index may hide: the extreme materials that its numbers allow, as other truths.

For each medium of the path with a table of its own, those of lowest and highest GVD and TOD at the pulse's
centre (`causality.extreme_materials`). What they add to a path is (omega/c) L (n - n of the model) of phase,
L the way in the medium through all that stays as it is.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from contextlib import suppress
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.extreme_materials import ExtremeMaterial, extreme_materials
from pulseprop.causality.passive_data import PassiveData
from pulseprop.compensation.problem import Alternative, Part, Problem
from pulseprop.compensation.today import settings_today
from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.element import Element
from pulseprop.elements.group import media_of, passages
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError, NumericalLimit
from pulseprop.material.index_table import IndexTable
from pulseprop.scenario.build_files import fitted_table
from pulseprop.scenario.read import Scenario

__all__ = ["worst_cases_of"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]

POINTS = 257
"""Places at which an index is worked out; a spline runs between them."""
REACH = 1e-6
"""Share of the pulse's energy that may lie beyond them."""
WORDS = {"gvd": ("GVD", 1e27, "fs^2/mm"), "tod": ("TOD", 1e42, "fs^3/mm")}
Exponent = Callable[[Real], Complex]


@dataclass(frozen=True, eq=False)
class _Other:
    """Exponent of an extreme material less that of the model, for a way of `length` m in it."""

    length: float
    at: Real
    difference: Complex

    def __call__(self, omega: Real) -> Complex:
        """Beyond the table, where next to nothing of the pulse lies, the difference is held."""
        from scipy.interpolate import CubicSpline

        held = np.clip(omega, self.at[0], self.at[-1])
        index = CubicSpline(self.at, self.difference)(held)
        return np.asarray(1j * omega / SPEED_OF_LIGHT * self.length * index, dtype=complex)


@dataclass(frozen=True, eq=False)
class _Sum:
    """Several at once."""

    parts: tuple[Exponent, ...]

    def __call__(self, omega: Real) -> Complex:
        return np.asarray(sum(part(omega) for part in self.parts))


def worst_cases_of(scenario: Scenario, problem: Problem) -> tuple[tuple[Alternative, ...], tuple[str, ...]]:
    """Alternatives for the tables of the path, and what is to be said of those that have none."""
    tabled = {name: one for name, one in scenario.content.medium.items() if one.index is not None}
    lengths, notes = _lengths(problem, tabled), list(_not_held(problem, tabled))
    found: list[Alternative] = []
    together: dict[str, list[Exponent]] = {"lowest": [], "highest": []}
    for name, length in lengths.items():
        table = fitted_table(scenario, tabled[name])
        if not table.causal:
            notes.append(f"{name} is used as printed: no matter has these numbers, so no worst case is told")
            continue
        at = _places(problem, table)
        try:
            extremes = extreme_materials(_data(table), problem.pulse.centre, at)
        except NumericalLimit as limit:
            notes.append(f"no worst case of {name}: {limit.complaint.problem}")
            continue
        model = table.refraction_series(at, 1)[0] + 1
        for one in extremes:
            other = _Other(length, at, one.index + 1j * one.k - model)
            found.append(Alternative(name=f"{name}: {_words(one)}", exponent=other))
            if one.quantity == "gvd":
                together[one.end].append(other)
    if min(map(len, together.values())) > 1:
        found += [
            Alternative(name=f"all tables at their {end} GVD", exponent=_Sum(tuple(parts)))
            for end, parts in together.items()
        ]
    return tuple(found), tuple(notes)


def _words(one: ExtremeMaterial) -> str:
    word, size, unit = WORDS[one.quantity]
    return f"{one.end} {word}, {one.value * size:.4g} {unit}"


def _lengths(problem: Problem, tabled: Mapping[str, object]) -> dict[str, float]:
    """The way through each tabled medium in what stays as it is, m, by name."""
    lengths: dict[str, float] = {}
    for part in problem.parts:
        if part.movable:
            continue
        for element in passages(part.build({})):
            medium = element.medium
            if medium is not None and medium.name in tabled and not element.phase_only:
                lengths[medium.name] = lengths.get(medium.name, 0.0) + _way(element, problem.pulse.centre)
    return {name: length for name, length in lengths.items() if length > 0}


def _way(element: Element, omega: float) -> float:
    """Of the carrier in the medium, m: longer in a slab that is tilted."""
    if not isinstance(element, Slab) or element.medium is None:
        return element.length
    index = float(np.real(element.medium.index(np.array(omega))))
    return element.length / float(np.sqrt(1 - (np.sin(element.angle) / index) ** 2))


def _not_held(problem: Problem, tabled: Mapping[str, object]) -> Iterator[str]:
    """Elements that are set, so that no fixed way in their media can be counted."""
    for part in problem.parts:
        named = sorted(set(_names(part)) & set(tabled)) if part.movable else []
        if named:
            yield f"worst cases of {', '.join(named)} leave out {part.name}, on which something is set"


def _names(part: Part) -> Iterator[str]:
    with suppress(InputError):
        for element in part.build(settings_today(part)):
            yield from (medium.name for medium in media_of(element))


def _places(problem: Problem, table: IndexTable) -> Real:
    """Frequencies of the pulse that the table holds, rad/s, (POINTS,)."""
    low, high = problem.pulse.spectral_extent(REACH)
    first, last = float(table.omega[0]), float(table.omega[-1])
    inside = 1e-9 * (last - first)
    return np.linspace(max(low, first + inside), min(high, last - inside), POINTS)


def _data(table: IndexTable) -> PassiveData:
    return PassiveData(
        omega=table.omega,
        index=table.index,
        index_error=table.index_error,
        k_omega=None if table.k is None else table.omega,
        k=table.k,
        k_error=table.k_error,
    )
