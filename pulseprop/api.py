"""What the command line does, as functions, in the same words and with the same numbers."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

if TYPE_CHECKING:
    import xarray

    from pulseprop.compensation.result import Compensation, Design
    from pulseprop.material.medium import Medium
    from pulseprop.propagation.result import Run
    from pulseprop.propagation.send import Progress
    from pulseprop.scenario.read import Scenario
    from pulseprop.vetting.result import Vetted

from pulseprop import __version__
from pulseprop.constants import TWO_PI_C

__all__ = [
    "Compensated",
    "MediumReport",
    "OrdersRow",
    "catalogue",
    "compensate",
    "dataset",
    "media",
    "medium",
    "read",
    "send",
    "vet",
    "vet_document",
]

UNASKED_OMEGA = 2.4e15
"""rad/s: n2 is that measured nearest to it where no wavelength is asked for."""


def read(path: str | Path, overrides: Iterable[str] = ()) -> Scenario:
    """Read and check a scenario file, with overrides "KEY=VALUE". Raises InputError."""
    from pulseprop.scenario.read import read_scenario

    return read_scenario(path, overrides)


def send(
    scenario: str | Path | Scenario, overrides: Iterable[str] = (), progress: Progress | None = None
) -> Run:
    """Send the pulse of a scenario (a file or what `read` returned) through its path.

    progress(stage, fraction) is called as the work goes on. Raises InputError and NumericalLimit.
    """
    from pulseprop.propagation.send import run
    from pulseprop.scenario.build import build

    experiment = build(_read(scenario, overrides))
    if progress is None:
        return run(experiment, __version__, catalogue_checksum())
    return run(experiment, __version__, catalogue_checksum(), progress)


def _read(scenario: str | Path | Scenario, overrides: Iterable[str]) -> Scenario:
    if isinstance(scenario, str | Path):
        return read(scenario, overrides)
    if tuple(overrides):
        raise ValueError("overrides go with a file: give them to read()")
    return scenario


@dataclass(frozen=True, kw_only=True)
class Compensated:
    """The answer to `compensate`; run: its best design, sent in full as `send` does."""

    compensation: Compensation
    run: Run

    @property
    def designs(self) -> tuple[Design, ...]:
        """The designs, the best first."""
        return self.compensation.designs

    @property
    def exit_code(self) -> int:
        """1 where no design comes within the target, else 0."""
        return self.compensation.exit_code

    def as_json(self) -> dict[str, Any]:
        """The document of the JSON report."""
        sent = self.run.as_json()
        return {
            **{key: sent[key] for key in ("scenario", "overrides", "question", "version")},
            **self.compensation.as_json(),
            "build_sheet": sent["elements"],
            **{key: sent[key] for key in ("media", "hazard_assessment", "warnings", "cautions")},
        }


def compensate(
    scenario: str | Path | Scenario,
    overrides: Iterable[str] = (),
    best: int | None = None,
    progress: Progress | None = None,
) -> Compensated:
    """The best settings and additions for a scenario's goal, with tolerances. best: how many designs.

    progress(stage, fraction) is called as the work goes on. Raises InputError and NumericalLimit.
    """
    from dataclasses import replace

    from pulseprop.compensation.compensate import compensate as solve
    from pulseprop.propagation.send import run
    from pulseprop.scenario.build import build
    from pulseprop.scenario.build_compensate import problem_of
    from pulseprop.scenario.worst_cases import worst_cases_of

    scenario = _read(scenario, overrides)
    problem = problem_of(scenario)
    alternatives, notes = worst_cases_of(scenario, problem)
    problem = replace(problem, alternatives=alternatives, best=best or problem.best)
    answer = solve(problem) if progress is None else solve(problem, progress)
    answer = replace(answer, notes=(*answer.notes, *notes))
    experiment = build(scenario, answer.designs[0].path)
    return Compensated(compensation=answer, run=run(experiment, __version__, catalogue_checksum()))


def dataset(run: Run) -> xarray.Dataset:
    """The fields of a run as an xarray.Dataset: complex in memory, units in the attributes."""
    from pulseprop.reports.dataset import to_dataset

    return to_dataset(run)


@cache
def catalogue_checksum() -> str:
    """SHA-256 over the catalogue's data files."""
    from pulseprop.material.catalogue import FAMILIES

    folder = Path(__file__).parent / "material"
    digest = hashlib.sha256()
    for file in sorted(FAMILIES.values()):
        digest.update((folder / file).read_bytes())
    return digest.hexdigest()


def catalogue() -> tuple[str, ...]:
    """The printed names of all media of the catalogue."""
    from pulseprop.material.catalogue import names

    return names()


def medium(name: str) -> Medium:
    """A medium by name: of the catalogue, or "SCENARIO.toml:NAME" (split at the last colon). Raises
    InputError.
    """
    from pulseprop.material.catalogue_media import catalogue_medium

    file, colon, own = name.rpartition(":")
    if colon and file.lower().endswith(".toml"):
        from pulseprop.scenario.build import media_of

        return media_of(read(file)).medium(own)
    return catalogue_medium(name)


@dataclass(frozen=True, kw_only=True)
class OrdersRow:
    """Orders of a medium at one vacuum wavelength; names and units are those of the JSON keys."""

    wavelength_nm: float
    index: float | None
    k: float | None
    absorption_per_mm: float | None
    group_index: float | None
    gvd_fs2_per_mm: float | None
    tod_fs3_per_mm: float | None
    fod_fs4_per_mm: float | None


@dataclass(frozen=True, kw_only=True)
class MediumReport:
    """A medium with its source and its orders."""

    name: str
    source: str
    temperature: str
    relative_to: str
    valid_nm: tuple[float, float] | None
    notes: tuple[str, ...]
    spread: tuple[str, ...]
    n2_m2_per_W: float | None
    at: tuple[OrdersRow, ...]

    def as_json(self) -> dict[str, Any]:
        """The document of the JSON report."""
        from dataclasses import asdict

        document = asdict(self)
        document["valid_nm"] = None if self.valid_nm is None else list(self.valid_nm)
        for key in ("notes", "spread", "at"):
            document[key] = list(document[key])
        return document


def media(
    names: str | Sequence[str], at: str | float | Sequence[str | float] = ()
) -> tuple[MediumReport, ...]:
    """Reports on media by name, one or several, with orders at vacuum wavelengths ("800 nm", or metres).

    Raises InputError for unknown names, and RangeError for wavelengths outside a record's range.
    """
    names = [names] if isinstance(names, str) else names
    places = [at] if isinstance(at, str | float | int) else at
    return tuple(_report(medium(name), places) for name in names)


def _report(found: Medium, at: Sequence[str | float]) -> MediumReport:
    from pulseprop.propagation.sources import valid_nm

    omegas = [_omega(place) for place in at]
    known = found.nonlinear_index(omegas[0] if omegas else UNASKED_OMEGA)
    return MediumReport(
        name=found.name,
        source=found.source,
        temperature=found.temperature,
        relative_to=found.relative_to,
        valid_nm=valid_nm(found),
        notes=found.notes,
        spread=found.spread,
        n2_m2_per_W=known.value if known else None,
        at=tuple(_row(found, omega) for omega in omegas),
    )


def _omega(place: str | float) -> float:
    from pulseprop.units import quantity

    if isinstance(place, str):
        return quantity(place, "spectral")
    return TWO_PI_C / place


def _row(found: Medium, omega: float) -> OrdersRow:
    from pulseprop.errors import RangeError

    if not found.band.contains(np.array(omega)):
        low, high = (TWO_PI_C / edge * 1e9 if edge else np.inf for edge in (found.band.high, found.band.low))
        raise RangeError(
            f"a wavelength outside the range of {found.name!r}",
            value=f"{TWO_PI_C / omega * 1e9:.6g} nm",
            allowed=f"{low:.6g} nm to {high:.6g} nm",
            remedy="Take a record that covers it: `pulseprop media` lists ranges",
        )
    orders = found.orders(omega)
    return OrdersRow(
        wavelength_nm=TWO_PI_C / omega * 1e9,
        index=_finite(orders.index),
        k=_finite(orders.k),
        absorption_per_mm=_finite(orders.absorption * 1e-3),
        group_index=_finite(orders.group_index),
        gvd_fs2_per_mm=_finite(orders.gvd * 1e27),
        tod_fs3_per_mm=_finite(orders.tod * 1e42),
        fod_fs4_per_mm=_finite(orders.fod * 1e57),
    )


def _finite(value: float) -> float | None:
    return float(value) if np.isfinite(value) else None


VERDICTS = ("consistent", "doubtful", "contradictory")


def vet(
    tables: str | Path | Sequence[str | Path], progress: Progress | None = None, **options: Any
) -> tuple[Vetted, ...]:
    """Vet files: text tables, workbooks, JCAMP-DX; certificates and formulas as TOML; an answer a table.

    options: those of `pulseprop.vetting.asked.Asked`, in its words: uncertainty="n=1e-4,k=2%", at=["800 nm"],
    require=[...], columns, unit, relative_to, thickness, medium and more; progress(stage, fraction) is called
    before each file. Raises InputError, and NumericalLimit.
    """
    from datetime import date

    from pulseprop.scenario.vet_files import vet_file
    from pulseprop.vetting.asked import asked_with

    files = [tables] if isinstance(tables, str | Path) else tables
    asked, today = asked_with(options), date.today().isoformat()
    answers: list[Vetted] = []
    for number, file in enumerate(files):
        if progress is not None:
            progress(f"vetting {Path(file).name}", number / (len(files) + 1))
        answers += vet_file(file, asked, date=today, version=__version__)
    return tuple(answers)


def vet_document(answers: Sequence[Vetted]) -> dict[str, Any]:
    """The JSON document: of one table its answer, of several the worst verdict and the list of them."""
    if len(answers) == 1:
        return answers[0].as_json()
    worst = max((answer.verdict for answer in answers), key=VERDICTS.index)
    return {"verdict": worst, "tables": [answer.as_json() for answer in answers]}
