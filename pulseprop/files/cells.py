"""Cells of tables that people send: numbers, missing values, decimal signs.

Thousands separators are refused, never guessed: "1,064" beside "1.5" could be one metre or one millimetre.
"""

from __future__ import annotations

import re
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError

__all__ = ["decimal_commas", "is_missing", "looks_numeric", "numbers", "tidy"]

Real = NDArray[np.float64]
Lines = Sequence[int] | NDArray[np.int64]

LOOKS_NUMERIC = re.compile(r"[+-]?(?=[.,]?[0-9])[0-9.,'’]+(?:[eEdD][+-]?[0-9]{1,4})?(?:\s?%)?")
MISSING = re.compile(
    r"""|[-–—_*?.]+|[+-]?nan|[+-]?inf(inity)?|n\.?\s?/?[ad]\.?|null|none|nil|missing"""
    r"""|\#(n/a|div/0!|value!|ref!|num!|name\?|null!)|over(flow)?|sat(urated)?""",
    re.IGNORECASE,
)
THOUSANDS = re.compile(
    r"[+-]?[0-9]{1,3}(?:,[0-9]{3}|['’][0-9]{3})+(?:\.[0-9]*)?"
    r"|[+-]?[0-9]{1,3}(?:\.[0-9]{3})+,[0-9]*|[+-]?[0-9]{1,3}(?:\.[0-9]{3}){2,}"
)
THREE_PLACES = re.compile(r"[+-]?[1-9][0-9]{0,2},[0-9]{3}")
WHOLE = re.compile(r"[+-]?[0-9]{3,}")


def tidy(text: str) -> str:
    """One sign for minus and one for space, so that only true differences remain."""
    return text.replace("−", "-").replace("\u00a0", " ").replace("\u202f", " ")


def looks_numeric(cell: str) -> bool:
    """True for what was meant as a number, even one that will be refused."""
    return LOOKS_NUMERIC.fullmatch(cell) is not None


def is_missing(cell: str) -> bool:
    """True for an empty cell and for what people write in one: -, NaN, n.d., n/a, #N/A and the like."""
    return MISSING.fullmatch(cell) is not None


def decimal_commas(columns: Sequence[Sequence[str]], lines: Lines, file: str) -> bool:
    """Whether the decimal sign of these columns is a comma. Missing cells do not count.

    Raises InputError, with the line, where a comma or a point may as well separate thousands.
    """
    has_comma = any("," in cell for column in columns for cell in column)
    if not has_comma:
        return False
    has_point = any("." in cell and not is_missing(cell) for column in columns for cell in column)
    for column in columns:
        for line, cell in zip(lines, column, strict=True):
            if "," in cell and (has_point or cell.count(",") > 1):
                raise _thousands(cell, line, file)
        _check_thousands(column, lines, file)
    return True


def _check_thousands(column: Sequence[str], lines: Lines, file: str) -> None:
    """999 followed by 1,000 counts in thousands, whatever the other columns do."""
    groups = [index for index, cell in enumerate(column) if "," in cell]
    if not groups or not all(THREE_PLACES.fullmatch(column[index]) for index in groups):
        return
    if any(WHOLE.fullmatch(cell) for cell in column):
        raise _thousands(column[groups[0]], lines[groups[0]], file)


def _thousands(cell: str, line: int, file: str) -> InputError:
    return InputError(
        "the comma may be a decimal sign or separate thousands",
        value=cell,
        allowed="numbers such as 1064 or 1.5",
        remedy="Write one decimal sign throughout and nothing between thousands",
        file=f"{file}:{line}",
    )


def numbers(column: Sequence[str], commas: bool, lines: Lines, file: str) -> Real:
    """The cells as numbers, (R,); NaN for missing ones. `commas`: the decimal sign is a comma.

    Raises InputError, with the line, for a cell that is neither a number nor missing.
    """
    texts = [cell.replace(",", ".") for cell in column] if commas else column
    try:
        plain = "_" not in "".join(texts)
        values = np.array(list(map(float, texts)) if plain else [])
    except ValueError:
        plain = False
    if not plain:
        pairs = zip(texts, column, lines, strict=True)
        values = np.array([_number(text, cell, line, file) for text, cell, line in pairs])
    return np.where(np.isfinite(values), values, np.nan)


def _number(text: str, cell: str, line: int, file: str) -> float:
    if is_missing(cell):
        return np.nan
    if looks_numeric(text) and not THOUSANDS.fullmatch(cell):
        try:
            return float(text.replace("D", "E").replace("d", "e"))
        except ValueError:
            pass
    if THOUSANDS.fullmatch(cell) or re.fullmatch(r"[0-9]{1,3}( [0-9]{3})+([.,][0-9]*)?", cell):
        raise InputError(
            "thousands are separated here",
            value=cell[:60],
            allowed="numbers such as 1064 or 1.5",
            remedy="Write the number without a sign between thousands",
            file=f"{file}:{line}",
        )
    raise InputError(
        "the cell is not a number",
        value=cell[:60],
        allowed='a number such as 1.5 or 2e-3, or nothing, "-", "n.d." where there is none',
        remedy="Correct the cell, or begin the line with # to leave it out",
        file=f"{file}:{line}",
    )
