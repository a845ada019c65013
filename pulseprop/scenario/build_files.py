"""The files that a scenario names, read into SI columns and into what stands on them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, TypeVar

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import PLANCK, SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.files.number_table import NumberTable
from pulseprop.material.composition import WithAbsorption
from pulseprop.material.medium import Medium
from pulseprop.material.response import Constant
from pulseprop.material.wavelength_in_air import omegas_of_air_wavelengths
from pulseprop.scenario.columns import Columns, spectral_columns, time_columns
from pulseprop.scenario.line_files import lines_in
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_files import (
    AbsorptionFile,
    AutocorrelationFile,
    SpectralFile,
    SpectrumFile,
    TraceFile,
)
from pulseprop.scenario.schema_lines import LineTable
from pulseprop.scenario.schema_medium import MediumTable
from pulseprop.units import to_si

if TYPE_CHECKING:
    from pulseprop.material.absorption_table import AbsorptionTable
    from pulseprop.material.index_table import IndexTable

__all__ = [
    "SpectrumColumns",
    "absorption_of",
    "fitted_table",
    "index_table_of",
    "lines_of",
    "spectrum_columns",
    "time_and_signal",
]

Real = NDArray[np.float64]
T = TypeVar("T")

DIGITS_OF_TABLES = 3
SMALLEST_K = 1e-12
"""Below this, a share of k is no uncertainty: it keeps the linear programme scaled."""

BESIDE_THE_TABLE = ("anchor", "background", "uncertainty")
"""Places of complaints that belong to the scenario, not to the file of the table."""

Y_KINDS = {"alpha": "inverse_length", "molar": "molar_absorption"}


@dataclass(frozen=True, kw_only=True)
class SpectrumColumns:
    """x in SI of its axis, y and background as read, phase in rad."""

    x: Real
    y: Real
    phase: Real | None
    background: float | Real


def _omega(columns: Columns, spec: SpectralFile) -> Real:
    """rad/s; wavelengths in air turned into frequencies."""
    return omegas_of_air_wavelengths(columns.x) if spec.wavelength_in == "air" else columns.x


def _line_numbers(table: NumberTable) -> list[int]:
    return [int(line) for line in table.lines]


def absorption_of(
    scenario: Scenario, table: MediumTable, background: Callable[[Real], np.ndarray]
) -> AbsorptionTable:
    """The measured absorption of a medium on its background's index."""
    from pulseprop.material.absorption_density import Tails
    from pulseprop.material.absorption_table import absorption_table
    from pulseprop.material.kramers_kronig import Anchor

    spec = table.absorption
    assert spec is not None
    columns = spectral_columns(scenario.path_of(spec.file), spec)
    anchors = [
        Anchor(omega=anchor.at.omega, value=anchor.index, uncertainty=anchor.uncertainty)
        for anchor in table.anchor
    ]
    return _blaming(
        columns.table,
        lambda: absorption_table(
            _omega(columns, spec),
            _measured_values(columns, spec),
            quantity=spec.y,
            path_length=spec.path_length,
            concentration=spec.concentration,
            ceiling=_ceiling(spec),
            tails=Tails(below=spec.tails.below, above=spec.tails.above),
            anchors=anchors,
            background=background,
            numbers=_line_numbers(columns.table),
        ),
    )


def _measured_values(columns: Columns, spec: AbsorptionFile) -> Real:
    if spec.y_unit is None:
        return columns.y
    if spec.y_unit == "%":
        return columns.y / 100
    return np.asarray(to_si(columns.y, spec.y_unit, Y_KINDS[spec.y]), dtype=float)


def _ceiling(spec: AbsorptionFile) -> float | None:
    """The ceiling in SI where y has a unit; that of transmittances is an absorbance."""
    if spec.ceiling is None or spec.y_unit is None or spec.y_unit == "%":
        return spec.ceiling
    return float(to_si(spec.ceiling, spec.y_unit, Y_KINDS[spec.y]))


def index_table_of(scenario: Scenario, name: str, table: MediumTable) -> Medium:
    """The medium of a table of n, or n and k."""
    from pulseprop.material.held_at_ends import HeldAtEnds

    found, spec = fitted_table(scenario, table), table.index
    assert spec is not None
    return Medium(
        name=name,
        response=WithAbsorption(Constant(0.0), found if found.causal else HeldAtEnds(found)),
        source=table.source or f"table {Path(spec.file).name}",
        relative_to=spec.relative_to or "not stated",
        causal=found.causal,
        notes=found.notes,
        printed_digits=DIGITS_OF_TABLES,
    )


def fitted_table(scenario: Scenario, table: MediumTable) -> IndexTable:
    """The rows of a medium's `index` with their uncertainties, and the model that explains them."""
    from pulseprop.material.index_table import index_table

    spec = table.index
    assert spec is not None
    columns = spectral_columns(scenario.path_of(spec.file), spec, index=True)
    _check_index_column(columns)
    k, stated = columns.beside(), spec.uncertainty
    return _blaming(
        columns.table,
        lambda: index_table(
            _omega(columns, spec),
            columns.y,
            k,
            index_error=stated.n if stated else None,
            k_error=np.maximum(np.abs(k), SMALLEST_K) * stated.k
            if stated and stated.k and k is not None
            else None,
            printed_axis=columns.table.values[:, columns.x_column],
            as_printed=table.as_printed,
            numbers=_line_numbers(columns.table),
        ),
    )


def _check_index_column(columns: Columns) -> None:
    odd = (columns.y <= 0) | (columns.y >= 20)
    if odd.any():
        row = int(np.argmax(odd))
        raise columns.table.refused(
            "this is not an index of refraction",
            row=row,
            value=columns.table.cells[row][columns.y_column],
            allowed="above 0 and below 20",
            remedy="Check whether the columns are swapped, or state x_column and y_column",
        )


def lines_of(scenario: Scenario, table: MediumTable) -> Sequence[LineTable]:
    """The lines of the medium's lines_file."""
    if table.lines_file is None:
        return ()
    return lines_in(scenario.path_of(table.lines_file.file), table.lines_file)


def spectrum_columns(scenario: Scenario, spec: SpectrumFile) -> SpectrumColumns:
    """Columns of a measured spectrum; its background from a number or a file of the same rows."""
    columns = spectral_columns(scenario.path_of(spec.file), spec)
    phase = None
    if spec.phase is not None:
        phase = spec.phase_sign * np.asarray(
            to_si(columns.table.column(spec.phase), spec.phase_unit, "phase")
        )
    return SpectrumColumns(
        x=_si_axis(_omega(columns, spec), spec.x),
        y=columns.y,
        phase=phase,
        background=_background(scenario, spec, columns),
    )


def _si_axis(omega: Real, axis: str) -> Real:
    """Vacuum wavelength in m, Hz, 1/m or J of angular frequencies."""
    if axis == "wavelength":
        return np.asarray(TWO_PI_C / omega)
    scale = {"frequency": 1.0, "wavenumber": 1 / SPEED_OF_LIGHT, "photon_energy": PLANCK}[axis]
    return omega / (2 * np.pi) * scale


def _background(scenario: Scenario, spec: SpectrumFile, columns: Columns) -> float | Real:
    if spec.background is None:
        return 0.0
    if isinstance(spec.background, float):
        return spec.background
    dark = spectral_columns(scenario.path_of(spec.background), spec)
    if dark.x.shape != columns.x.shape or not np.allclose(dark.x, columns.x, rtol=1e-6):
        raise dark.table.refused(
            "the background does not stand on the rows of the spectrum",
            value=f"{dark.x.size} rows",
            allowed=f"the {columns.x.size} places of {columns.table.file}",
        )
    return dark.y


def time_and_signal(scenario: Scenario, spec: TraceFile | AutocorrelationFile) -> tuple[Real, Real]:
    """Time or delay in s and the signal, of a waveform or an autocorrelation."""
    columns = time_columns(scenario.path_of(spec.file), spec)
    return columns.x, columns.y


def _blaming(numbers: NumberTable, make: Callable[[], T]) -> T:
    """make(), its complaints located in the table, but for those of what the scenario says beside it."""
    try:
        return make()
    except InputError as error:
        if error.complaint.place in BESIDE_THE_TABLE:
            raise
        raise error.located(file=numbers.file) from None
