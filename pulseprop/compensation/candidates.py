"""Every discrete choice with the flattest phase that its continuous settings allow, before any field.

A choice says which compensators are used and what their steps and lists stand at. Settings that do not enter
as straight lines are looked at on a lattice here, and moved freely later.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import product

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.boxed import least_in_box
from pulseprop.compensation.models import Model, exponent_of
from pulseprop.compensation.phase_fit import whitened
from pulseprop.compensation.problem import Goal, Part, Value
from pulseprop.compensation.samples import Samples
from pulseprop.errors import InputError

__all__ = ["Candidate", "Kind", "background_of", "candidates", "kind_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Kind = tuple[tuple[str, tuple[Value, ...]], ...]
"""Which parts are used, and what was chosen from lists on each."""

LATTICE = 5
"""Values of a curved setting that are looked at, from end to end of its range."""
MOST_CANDIDATES = 20_000
NO_EFFECT = 1e-9
"""Largest exponent, rad or nepers, of a part that might as well not be there."""


@dataclass(frozen=True, kw_only=True, eq=False)
class _Option:
    """One way to use a part: its model, and a place (k,) of shares of its ranges."""

    model: Model
    place: Real


@dataclass(frozen=True, kw_only=True, eq=False)
class Candidate:
    """One discrete choice. first: flattest phase (k,). estimate: of the score, from the phase alone."""

    assembly: Assembly
    first: Real
    estimate: float

    @property
    def kind(self) -> Kind:
        """Of the assembly."""
        return kind_of(self.assembly)


def kind_of(assembly: Assembly) -> Kind:
    """What a person would call another design: parts and listed choices, not counts or settings."""
    return tuple(
        (
            model.part.name,
            tuple(model.discrete[one.parameter] for one in model.part.adjustments if one.choices),
        )
        for model in assembly.models
    )


def background_of(parts: Sequence[Part], samples: Samples) -> Complex:
    """The exponent (n,) of the parts on which nothing can be set."""
    elements = [element for part in parts if not part.movable for element in part.build({})]
    return exponent_of(elements, samples.omega)


def candidates(
    parts: Sequence[Part], samples: Samples, background: Complex, goal: Goal
) -> tuple[list[Candidate], tuple[str, ...]]:
    """All discrete choices, the best estimate first, and why some cannot be built.

    Raises InputError where none can, or where there are more than 20,000.
    """
    movable = [part for part in parts if part.movable]
    _refuse_too_many(movable)
    sets: list[list[_Option | None]] = []
    refusals: list[str] = []
    for part in movable:
        options = _options(part, samples, refusals)
        sets.append([None, *options] if part.optional else list(options))
        if not sets[-1]:
            raise InputError(f"{part.name} has no setting that can be used: {refusals[-1]}", place=part.name)
    found = _ranked(sets, samples, background, goal)
    return found, tuple(dict.fromkeys(refusals))


def _refuse_too_many(parts: Sequence[Part]) -> None:
    count = 1
    for part in parts:
        each = int(np.prod([len(one.values) for one in part.discrete], dtype=float))
        count *= each + part.optional
    if count > MOST_CANDIDATES:
        raise InputError(
            "the steps and lists of the compensators make too many combinations",
            value=count,
            allowed=f"up to {MOST_CANDIDATES}",
            remedy="Give fewer choices, wider steps, or ranges without steps",
        )


def _options(part: Part, samples: Samples, refusals: list[str]) -> list[_Option]:
    names = [one.parameter for one in part.discrete]
    options = []
    for chosen in product(*(one.values for one in part.discrete)):
        model = Model(part=part, discrete=dict(zip(names, chosen, strict=True)), samples=samples)
        for place in _lattice(model):
            try:
                base, slopes = model.lines(model.low + place * (model.high - model.low))
            except InputError as error:
                refusals.append(str(error))
                continue
            if part.optional and _idle(model, base, slopes):
                continue
            options.append(_Option(model=model, place=place))
    return options


def _idle(model: Model, base: Complex, slopes: Complex) -> bool:
    largest = np.abs(base).max() + np.abs(slopes).sum()
    return not model.curved and not model.edged and bool(largest <= NO_EFFECT)


def _lattice(model: Model) -> list[Real]:
    axes = [
        np.linspace(0.0, 1.0, LATTICE) if index in model.curved else np.zeros(1)
        for index in range(len(model.continuous))
    ]
    return [np.array(place, dtype=float) for place in product(*axes)]


@dataclass(frozen=True, eq=False)
class _Columns:
    """Whitened phases of an option: base (n,), slopes over the whole range (n, straight); loss, size."""

    base: Real
    slopes: Real
    loss: float
    size: float


def _ranked(
    sets: list[list[_Option | None]], samples: Samples, background: Complex, goal: Goal
) -> list[Candidate]:
    window = np.abs(samples.amplitude) * np.exp(background.real)
    window /= window.sum()
    columns = {
        id(option): _columns(option, samples, window, goal)
        for options in sets
        for option in options
        if option is not None
    }
    own = background.imag + np.unwrap(np.angle(samples.amplitude))
    base = whitened(own, samples.detuning, window)
    best: dict[tuple[int, ...], Candidate] = {}
    for used in product(*([bool(option) for option in _presence(options)] for options in sets)):
        rows = [
            [option for option in options if option is not None]
            for options, present in zip(sets, used, strict=True)
            if present
        ]
        for row, where, square in _fitted(rows, columns, base):
            kept = _candidate(row, where, square, columns, samples, background, goal)
            key = tuple(id(option.model) for option in row)
            if key not in best or kept.estimate > best[key].estimate:
                best[key] = kept
    return sorted(best.values(), key=lambda one: -one.estimate)


def _presence(options: list[_Option | None]) -> list[_Option | None]:
    """One entry for "left out" and one for "used", as far as there are such."""
    present = [option for option in options if option is not None][:1]
    return [*([None] if None in options else []), *present]


def _columns(option: _Option, samples: Samples, window: Real, goal: Goal) -> _Columns:
    model, straight = option.model, list(option.model.straight)
    width = model.high - model.low
    base, slopes = model.lines(model.low + option.place * width)
    slopes = slopes * width[straight]
    middle = base + slopes.sum(axis=1) / 2
    values = model.low + option.place * width
    return _Columns(
        base=whitened(base.imag, samples.detuning, window),
        slopes=whitened(slopes.imag, samples.detuning, window),
        loss=float(-2 * np.dot(window, middle.real)),
        size=model.size(values) if goal.size_weight else 0.0,
    )


Row = tuple[_Option, ...]


def _fitted(
    rows: list[list[_Option]], columns: dict[int, _Columns], base: Real
) -> list[tuple[Row, Real, float]]:
    """For every combination of options: settings of its straight adjustments and mean square phase."""
    every = [option for options in rows for option in options]
    if not every:
        return [((), np.zeros(0), float(base @ base))]
    held = [columns[id(option)] for option in every]
    bases = np.stack([base, *(one.base for one in held)], axis=1)
    slopes = np.concatenate([np.zeros((base.size, 0)), *(one.slopes for one in held)], axis=1)
    between, across, gram = bases.T @ bases, slopes.T @ bases, slopes.T @ slopes
    starts = np.cumsum([0, *(one.slopes.shape[1] for one in held)])
    combined = list(product(*_numbered(rows)))
    chosen = np.array(combined)
    # All options of one part have as many straight settings only where they are equally straight.
    groups: dict[tuple[int, ...], list[int]] = {}
    for index, row in enumerate(combined):
        groups.setdefault(tuple(held[at].slopes.shape[1] for at in row), []).append(index)
    result: list[tuple[Row, Real, float]] = []
    for shape, members in groups.items():
        picked = chosen[members]
        total = np.concatenate([np.zeros((len(members), 1), dtype=int), picked + 1], axis=1)
        constant = between[total[:, :, None], total[:, None, :]].sum(axis=(1, 2))
        places = [starts[picked[:, column]][:, None] + np.arange(width) for column, width in enumerate(shape)]
        at = np.concatenate(places, axis=1).astype(int)
        slope = across[at[:, :, None], total[:, None, :]].sum(axis=2)
        where, gain = least_in_box(gram[at[:, :, None], at[:, None, :]], slope)
        for index, row in enumerate(picked):
            square = float(max(constant[index] + gain[index], 0.0))
            result.append((tuple(every[option] for option in row), where[index], square))
    return result


def _numbered(rows: list[list[_Option]]) -> list[range]:
    ends = np.cumsum([0, *(len(options) for options in rows)])
    return [range(int(ends[i]), int(ends[i + 1])) for i in range(len(rows))]


def _candidate(
    row: Row,
    where: Real,
    square: float,
    columns: dict[int, _Columns],
    samples: Samples,
    background: Complex,
    goal: Goal,
) -> Candidate:
    held = [columns[id(option)] for option in row]
    assembly = Assembly(samples=samples, background=background, models=tuple(option.model for option in row))
    estimate = -square - sum(
        goal.transmission_weight * one.loss + goal.size_weight * one.size for one in held
    )
    return Candidate(assembly=assembly, first=_joined(row, where), estimate=estimate)


def _joined(row: Row, where: Real) -> Real:
    """Curved places and straight answers in the order of the assembly."""
    parts, start = [np.zeros(0)], 0
    for option in row:
        place = option.place.copy()
        count = len(option.model.straight)
        place[list(option.model.straight)] = where[start : start + count]
        start += count
        parts.append(place)
    return np.concatenate(parts)
