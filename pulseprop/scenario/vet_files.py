"""A file of whatever kind, vetted: a table of a material or a mirror, a certificate, or a formula."""

from __future__ import annotations

from pathlib import Path

from pulseprop.errors import PulsepropError
from pulseprop.scenario.build_vet import read_vet_file
from pulseprop.vetting.asked import Asked
from pulseprop.vetting.certificate import judge_certificate
from pulseprop.vetting.certificate_values import Certificate
from pulseprop.vetting.formula_sheet_judge import judge_formula
from pulseprop.vetting.judge import judge
from pulseprop.vetting.mirror import is_mirror, judge_mirror
from pulseprop.vetting.passive import PassiveCausality
from pulseprop.vetting.reading import read_table
from pulseprop.vetting.result import Vetted

__all__ = ["vet_file"]


def vet_file(path: str | Path, asked: Asked, *, date: str, version: str) -> tuple[Vetted, ...]:
    """The answers on all tables of a file. Raises InputError and NumericalLimit with the file."""
    try:
        return _vetted(path, asked, date, version)
    except PulsepropError as error:
        raise error.located(file=str(path)) from None


def _vetted(path: str | Path, asked: Asked, date: str, version: str) -> tuple[Vetted, ...]:
    request, causality = asked.request, PassiveCausality()
    if Path(path).suffix.lower() == ".toml":
        return tuple(
            judge_certificate(one, request, date=date, version=version)
            if isinstance(one, Certificate)
            else judge_formula(one, request, date=date, version=version, causality=causality)
            for one in read_vet_file(path)
        )
    return tuple(
        judge_mirror(table, request, date=date, version=version)
        if is_mirror(table)
        else judge(table, request, date=date, version=version, causality=causality)
        for table in read_table(path, asked.reading)
    )
