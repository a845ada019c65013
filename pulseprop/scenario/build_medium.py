"""Media by name: those a scenario describes itself, then those of the catalogue."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import PurePath
from typing import Literal

import numpy as np

from pulseprop.errors import InputError, PulsepropError
from pulseprop.material.catalogue import near_names
from pulseprop.material.catalogue_media import VACUUM, catalogue_medium
from pulseprop.material.composition import (
    Absolute,
    Bruggeman,
    LorentzLorenz,
    MaxwellGarnett,
    WithAbsorption,
)
from pulseprop.material.formulas import Formula, Pole, Power, gas_term, pole_term, sellmeier_term
from pulseprop.material.gases import gas_at
from pulseprop.material.medium import Medium, NonlinearIndex
from pulseprop.material.orders_only import OrdersOnly
from pulseprop.material.refraction import refraction_series
from pulseprop.material.response import Band, Constant, Response, Sum, View
from pulseprop.material.wavelength_in_air import omega_of_air_wavelength
from pulseprop.scenario.build_files import absorption_of, index_table_of, lines_of
from pulseprop.scenario.build_lines import built_carriers, built_line, built_relaxation, resonance_of
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_formula import Formula as FormulaTable
from pulseprop.scenario.schema_formula import GasFormula, PoleFormula, PowerFormula, SellmeierFormula
from pulseprop.scenario.schema_medium import MediumTable, OrdersOnlyTable

__all__ = ["MediaOfScenario", "formula_of"]


class MediaOfScenario:
    """Builds and keeps the media that a scenario's elements name. Raises InputError with the place in the
    scenario.
    """

    def __init__(self, scenario: Scenario) -> None:
        self._scenario = scenario
        self._tables = scenario.content.medium
        self._built: dict[str, Medium] = {}
        self._open: list[str] = []
        self.substances: list[str] = []
        """Names of the catalogue media that were taken, also for a part of another."""
        self.rows: dict[str, tuple[float, float]] = {}
        """First and last row of measured absorptions, rad/s, by the name of the medium."""

    def medium(self, name: str) -> Medium:
        """The medium of that name: the scenario's own, else the catalogue's."""
        if name not in self._built:
            self._built[name] = self._from_table(name) if name in self._tables else self._from_catalogue(name)
        return self._built[name]

    def _from_catalogue(self, name: str) -> Medium:
        try:
            return self._taken(catalogue_medium(name))
        except InputError as error:
            if not self._tables or "no medium of this exact name" not in error.complaint.problem:
                raise
            own = ", ".join(repr(known) for known in self._tables)
            near = ", ".join(repr(known) for known in near_names(name))
            raise InputError(
                "no medium has this name",
                value=name,
                allowed=f"a [medium.NAME] of this scenario ({own}) or a name that `pulseprop media` lists",
                remedy=f"Did you mean {near}?" if near else "Check the spelling",
            ) from None

    def _taken(self, medium: Medium) -> Medium:
        self.substances.append(medium.name)
        return medium

    def _from_table(self, name: str) -> Medium:
        if name in self._open:
            chain = " -> ".join([*self._open, name])
            raise self._scenario.blamed(InputError("a medium is made of itself", value=chain), "medium", name)
        self._open.append(name)
        try:
            return self._assembled(name, self._tables[name])
        except PulsepropError as error:
            raise self._scenario.blamed(error, "medium", name) from None
        finally:
            self._open.pop()

    def _assembled(self, name: str, table: MediumTable) -> Medium:
        base = self._base(name, table)
        notes, relative, causal = base.notes, base.index_is_relative, base.causal
        response = base.response
        if table.absolute and _printed_against_air(table):
            response = Absolute(response, catalogue_medium("air").response)
        if table.absorption is not None:
            measured = absorption_of(self._scenario, table, _index_function(response))
            response = WithAbsorption(response, measured)
            self.rows[name] = (float(measured.omega[0]), float(measured.omega[-1]))
            notes = (*notes, *measured.notes)
            relative = any(code == "no-anchor" for code, _ in measured.cautions)
        lines = [*table.lines, *lines_of(self._scenario, table)]
        index_at = _index_at(response)
        built = [built_line(line, index_at, omega_of_air_wavelength) for line in lines]
        terms = [built_relaxation(term) for term in table.relaxations]
        carriers = [built_carriers(term) for term in table.carriers]
        added: tuple[Response, ...] = (*built, *terms, *carriers)
        return Medium(
            name=name,
            response=Sum((response, *added)) if added else response,
            source=table.source or _source(table, base),
            temperature=f"{table.temperature:.5g} K"
            if table.temperature
            else base.temperature or "not stated",
            temperature_K=table.temperature or base.temperature_K,
            relative_to="vacuum" if table.absolute else base.relative_to,
            causal=causal,
            orders_only=base.orders_only,
            resonances=(*base.resonances, *(resonance_of(line) for line in built)),
            n2=(NonlinearIndex(value=table.kerr.n2, source="stated in the scenario"),)
            if table.kerr
            else base.n2,
            spread=base.spread if not added and table.absorption is None else (),
            notes=(*notes, table.note) if table.note else notes,
            printed_digits=base.printed_digits,
            extendable=base.extendable and not terms,
            index_is_relative=relative,
            health=base.health,
        )

    def _base(self, name: str, table: MediumTable) -> Medium:
        """What stands at the bottom of the medium, vacuum where nothing does."""
        if isinstance(table.background, str) and table.background != VACUUM.name:
            return self.medium(table.background)
        if isinstance(table.background, float):
            return Medium(name=name, response=Constant(table.background**2 - 1))
        if table.formula is not None:
            return Medium(
                name=name,
                response=formula_of(table.formula),
                relative_to=table.formula.relative_to or "not stated",
            )
        if table.index is not None:
            return index_table_of(self._scenario, name, table)
        if table.gas is not None:
            gas = table.gas
            return self._taken(gas_at(gas.medium, gas.pressure, gas.temperature, gas.humidity))
        if table.mixture is not None:
            return self._mixture(name, table)
        if table.orders is not None:
            return Medium(
                name=name,
                response=_orders_only(table.orders),
                causal=False,
                orders_only=True,
                notes=("orders only: not a causal model",),
            )
        return Medium(name=name, response=VACUUM.response)

    def _mixture(self, name: str, table: MediumTable) -> Medium:
        parts = [(self.medium(part.medium), part.fraction) for part in table.mixture or []]
        (first, share), (second, other) = parts[0], parts[1]
        response: Response
        if table.rule == "lorentz-lorenz":
            response = LorentzLorenz(tuple((medium.response, fraction) for medium, fraction in parts))
        elif table.rule == "maxwell garnett":
            response = MaxwellGarnett(host=first.response, inclusion=second.response, fraction=other)
        else:
            response = Bruggeman(first.response, second.response, share)
        return Medium(
            name=name,
            response=response,
            source="; ".join(f"{medium.name}: {medium.source}" for medium, _ in parts),
            temperature="; ".join(
                dict.fromkeys(medium.temperature for medium, _ in parts if medium.temperature)
            ),
            temperature_K=first.temperature_K,
            relative_to=first.relative_to,
            causal=all(medium.causal for medium, _ in parts),
            orders_only=any(medium.orders_only for medium, _ in parts),
            resonances=tuple(line for medium, _ in parts for line in medium.resonances),
            notes=(f"{table.rule} mixture, fractions of volume before mixing",),
            extendable=all(medium.extendable for medium, _ in parts),
            health="; ".join(dict.fromkeys(medium.health for medium, _ in parts if medium.health)),
        )


def formula_of(table: FormulaTable) -> Formula:
    """The response behind a formula table."""
    band = Band(*table.valid)
    if isinstance(table, PowerFormula):
        powers = tuple(Power(term.strength, -term.power // 2) for term in table.terms)
        of: Literal["chi", "refraction"] = "chi" if table.kind == "powers" else "refraction"
        return Formula(band=band, of=of, offset=table.offset, powers=powers)
    if isinstance(table, GasFormula):
        poles = tuple(gas_term(term.strength, term.resonance) for term in table.terms)
        return Formula(band=band, of="refraction", offset=table.offset, poles=poles)
    if isinstance(table, SellmeierFormula):
        poles = tuple(sellmeier_term(term.strength, term.squared) for term in table.terms)
        return Formula(band=band, offset=table.offset, poles=poles)
    return _pole_formula(table, band)


def _pole_formula(table: PoleFormula, band: Band) -> Formula:
    poles: list[Pole] = []
    offset = table.offset
    for term in table.terms:
        pole, shift = pole_term(term.strength, term.squared)
        poles.append(pole)
        offset += shift
    return Formula(band=band, offset=offset, poles=tuple(poles))


def _orders_only(table: OrdersOnlyTable) -> OrdersOnly:
    index = table.index if table.index is not None else 1.0
    return OrdersOnly(
        centre=table.at.omega,
        index=index,
        group_index=table.group_index if table.group_index is not None else index,
        gvd=table.second_order,
        tod=table.third_order,
        fod=table.fod or 0.0,
    )


def _source(table: MediumTable, base: Medium) -> str:
    """Where each part of a medium comes from; what has no print is stated in the scenario."""
    parts = [(table.formula.source if table.formula else "") or base.source]
    for what, file in (("absorption", table.absorption), ("lines", table.lines_file)):
        if file is not None:
            parts.append(f"{what}: table {PurePath(file.file).name}")
    if table.lines or table.relaxations or table.carriers:
        parts.append("lines and terms stated in the scenario")
    return "; ".join(part for part in parts if part) or "stated in the scenario"


def _printed_against_air(table: MediumTable) -> bool:
    printed = table.formula or table.index
    return printed is None or printed.relative_to == "air"


def _index_function(response: Response) -> Callable[[np.ndarray], np.ndarray]:
    def index(omega: np.ndarray) -> np.ndarray:
        return np.asarray(1.0 + refraction_series(response, np.asarray(omega), 1, View.AXIS)[0])

    return index


def _index_at(response: Response) -> Callable[[float], float]:
    function = _index_function(response)
    return lambda omega: float(np.real(function(np.array(omega))))
