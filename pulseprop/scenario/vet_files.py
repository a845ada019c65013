"""A file of whatever kind, vetted: a table of a material or a mirror, a certificate, or a formula.

What a kind of file needs is loaded when such a file comes.
"""

from __future__ import annotations

from pathlib import Path

from pulseprop.errors import PulsepropError
from pulseprop.vetting.asked import Asked
from pulseprop.vetting.request import Request
from pulseprop.vetting.result import Vetted
from pulseprop.vetting.told import Stamp

__all__ = ["vet_file"]


def vet_file(path: str | Path, asked: Asked, *, date: str, version: str) -> tuple[Vetted, ...]:
    """The answers on all tables of a file. Raises InputError and NumericalLimit with the file."""
    stamp = Stamp(date=date, version=version)
    try:
        if Path(path).suffix.lower() == ".toml":
            return _of_sheet(path, asked.request, stamp)
        return _of_table(path, asked, stamp)
    except PulsepropError as error:
        raise error.located(file=str(path)) from None


def _of_sheet(path: str | Path, request: Request, stamp: Stamp) -> tuple[Vetted, ...]:
    """A certificate, or formulas."""
    from pulseprop.scenario.build_vet import read_vet_file
    from pulseprop.vetting.certificate import judge_certificate
    from pulseprop.vetting.certificate_values import Certificate
    from pulseprop.vetting.formula_sheet_judge import judge_formula
    from pulseprop.vetting.passive import PassiveCausality

    return tuple(
        judge_certificate(one, request, date=stamp.date, version=stamp.version)
        if isinstance(one, Certificate)
        else judge_formula(one, request, date=stamp.date, version=stamp.version, causality=PassiveCausality())
        for one in read_vet_file(path)
    )


def _of_table(path: str | Path, asked: Asked, stamp: Stamp) -> tuple[Vetted, ...]:
    """Rows of a material or of a mirror."""
    from pulseprop.vetting.judge import judge
    from pulseprop.vetting.mirror import is_mirror, judge_mirror
    from pulseprop.vetting.passive import PassiveCausality
    from pulseprop.vetting.reading import read_table

    return tuple(
        judge_mirror(table, asked.request, date=stamp.date, version=stamp.version)
        if is_mirror(table)
        else judge(table, asked.request, date=stamp.date, version=stamp.version, causality=PassiveCausality())
        for table in read_table(path, asked.reading)
    )
