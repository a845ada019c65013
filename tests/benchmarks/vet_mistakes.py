"""Mistakes planted in true tables: how many the data show, how many of those are found, and named right.

    python -m tests.benchmarks.vet_mistakes [CASES [WORD]]      # 20 showing cases of each kind where not said

Shown: the factor is at least 2 after planting, or another source or a physical bound tells (as the kind
says). Found: the verdict is not "consistent", or a finding of severity error or warning stands. Named right:
a finding has the code, the rows and the words of the mistake. Leads: it is the first. Leaves with 1 where
less than 90 % of a kind is found or named right.
"""

from __future__ import annotations

import sys
import tempfile
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from pulseprop.errors import PulsepropError
from pulseprop.scenario.vet_files import vet_file
from pulseprop.vetting.asked import Asked
from pulseprop.vetting.result import Finding, Vetted
from tests.benchmarks.planted_mistakes import KINDS, Planted

__all__ = ["Met", "cases", "met"]

SHOWS = 2.0
WANTED = 0.9
TRIES = 4
"""Times as many cases as wanted that are tried for enough that show."""


@dataclass(frozen=True, kw_only=True)
class Met:
    """What the answer makes of a planted mistake."""

    seed: int
    planted: Planted
    shows: bool
    found: bool
    named: bool
    leads: bool
    said: str


def met(kind: str, seed: int) -> Met:
    """One case. leads: the naming finding is the first error or warning."""
    planted = KINDS[kind](np.random.default_rng([seed, *kind.encode()]))
    try:
        answer = _vetted(planted)
    except PulsepropError as refusal:
        return Met(
            seed=seed, planted=planted, shows=True, found=True, named=False, leads=False, said=str(refusal)
        )
    told = [finding for finding in answer.findings if finding.severity != "note"]
    naming = [finding for finding in told if _names(planted, finding)]
    factor = answer.uncertainty_factor or 0.0
    return Met(
        seed=seed,
        planted=planted,
        shows=not planted.needs_factor or factor >= SHOWS,
        found=bool(told) or answer.verdict != "consistent",
        named=bool(naming),
        leads=bool(naming) and naming[0] is told[0],
        said=f"{answer.verdict}, factor {factor:.4g}: "
        + ("; ".join(f"{one.code} [{one.repair or ''}]" for one in told) or "nothing"),
    )


def _vetted(planted: Planted) -> Vetted:
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / planted.name
        path.write_text(planted.text, encoding="utf-8")
        (answer,) = vet_file(path, Asked(**planted.options), date="2026-12-01", version="0.0")
    assert answer.blind_spots
    return answer


def _names(planted: Planted, finding: Finding) -> bool:
    """By code, by rows where the mistake is one of rows, and by words."""
    right_rows = not planted.rows or bool(set(planted.rows) & set(finding.rows))
    said = f"{finding.text} {finding.repair or ''}"
    return finding.code in planted.codes and right_rows and planted.words in said


def cases(kind: str, count: int) -> Iterator[Met]:
    """Until so many show, or four times as many were tried."""
    shown = 0
    for seed in range(TRIES * count):
        one = met(kind, seed)
        yield one
        shown += one.shows
        if shown == count:
            return


def main() -> int:
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 20
    word = sys.argv[2] if len(sys.argv) > 2 else ""
    print("| mistake | planted | shown | found | named right | leads |\n|---|---|---|---|---|---|")
    bad = 0
    for kind in (kind for kind in KINDS if word in kind):
        every = list(cases(kind, count))
        shown = [one for one in every if one.shows]
        found, named, leads = (
            sum(getattr(one, part) for one in shown) for part in ("found", "named", "leads")
        )
        print(f"| {kind} | {len(every)} | {len(shown)} | {found} | {named} | {leads} |", flush=True)
        for one in shown:
            if not one.named:
                print(f"    {one.seed}: {one.said}", file=sys.stderr, flush=True)
        bad += len(shown) < count or min(found, named) < WANTED * len(shown)
    return int(bad > 0)


if __name__ == "__main__":
    sys.exit(main())
