"""Columns that hold the uncertainty of another: "u(n)", "uncertainty of k", "Δn", "Unsicherheit" beside n."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import replace

import numpy as np

from pulseprop.vetting.heading_units import unit_named
from pulseprop.vetting.heading_words import meaning_of
from pulseprop.vetting.headings import Heading
from pulseprop.vetting.number_columns import NumberColumns, Role
from pulseprop.vetting.printed import Spread

__all__ = ["with_uncertainties"]

WORD = (
    r"(?:(?:std\.?|standard|expanded|abs\.?|absolute) )?"
    r"(?:(?:mess)?unsicherheit(?:en)?|uncertaint(?:y|ies)|incertitudes?|incertidumbre|incertezza"
    r"|onzekerheid|os[aä]kerhet|неопределенность|不確かさ|不确定度)"
)
"""What an uncertainty is called. An error may be the difference from another table, and is not taken; nor is
a relative one without its percent sign."""
OF = re.compile(
    rf"{WORD}\s*(?:\b(?:of|in|von|der|des|de|di|d')\b|[:,_(])\s*(?:the )?(?P<of>[^()]+)\)?"
    rf"|{WORD}\s+(?P<behind>.+)|(?P<before>.+?)[\s_-]+{WORD}"
    r"|u\s*\(\s*(?P<symbol>.+)\s*\)|u_(?P<low>\w+)",
    re.IGNORECASE,
)
ALONE = re.compile(rf"{WORD}|±|\+-|\+/-", re.IGNORECASE)
DELTA = re.compile(r"(?:delta[\s_]*|[Δ∆±]\s*|\+-\s*|\+/-\s*|d(?=[nkRTA]$))\(?(?P<of>[^()]+)\)?")
"""May be a difference as well, so it is only taken where one column alone can be meant."""
UNIT = re.compile(
    r"(?P<words>.*?\S)\s*(?:[\[(](?P<a>[^\[\]()]*)[\])]|/\s*(?P<b>\S+)|\bin (?P<c>\S+)|(?P<d>%))"
)


def with_uncertainties(
    columns: NumberColumns, heads: Mapping[int, Heading], roles: Mapping[int, Role]
) -> tuple[dict[int, Role], frozenset[int]]:
    """The roles with what other columns say of their uncertainty, and which columns those are.

    Each belongs to the nearest column of its quantity to the left that has none yet. Columns with gaps or
    numbers below 0 are no uncertainties.
    """
    found, used = dict(roles), set()
    for index in sorted(set(heads) - set(roles)):
        words, unit = _taken_apart(heads[index].text)
        owner = _owner(words, index, found)
        if owner is None:
            continue
        values = columns.values(index)
        rows = np.isfinite(found[owner].values)
        if not np.all(values[rows] >= 0) or not np.any(values[rows] > 0):
            continue
        unit = "%" if index in columns.percent else unit
        found[owner] = replace(found[owner], spread=Spread(values=values, unit=unit))
        used.add(index)
        columns.tell(
            f"uncertainty of {found[owner].name}",
            f"column {index + 1}, as stated{', per cent of the value' if unit == '%' else ''}",
            f'its heading is "{heads[index].text}"',
            '"-" for it in --columns, or --uncertainty',
        )
    return found, frozenset(used)


def _owner(words: str, index: int, roles: Mapping[int, Role]) -> int | None:
    """The column that the words speak of; None where they speak of none, or may mean another thing."""
    if ALONE.fullmatch(words):
        return index - 1 if _is_open(roles, index - 1) else None
    found = OF.fullmatch(words) or DELTA.fullmatch(words)
    if found is None:
        return None
    of = next(part for part in found.groups() if part)
    meaning = meaning_of(of.strip())
    same = [place for place in roles if roles[place].meaning == meaning]
    owner = max((place for place in same if place < index), default=None)
    certain = found.re is OF or len(same) == 1
    return owner if owner is not None and certain and _is_open(roles, owner) else None


def _is_open(roles: Mapping[int, Role], index: int) -> bool:
    return index in roles and roles[index].axis is None and roles[index].spread is None


def _taken_apart(text: str) -> tuple[str, str | None]:
    """The words and the unit; None where none is said: then it is that of the column it belongs to."""
    text = text.strip()
    match = UNIT.fullmatch(text)
    if match is not None and match["words"] != "u":
        unit = unit_named(next(part for part in match.groups()[1:] if part is not None))
        if unit is not None:
            return match["words"], unit
    return text, None
