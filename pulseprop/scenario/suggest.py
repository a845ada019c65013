"""The nearest of the allowed words."""

from __future__ import annotations

from collections.abc import Sequence

__all__ = ["did_you_mean", "nearest"]


def nearest(word: str, allowed: Sequence[str]) -> str | None:
    """The allowed word that is most like the given one; None where none is like it."""
    from difflib import get_close_matches

    plain = {option.casefold().replace("_", " ").replace("-", " "): option for option in allowed}
    found = get_close_matches(
        word.casefold().replace("_", " ").replace("-", " "), list(plain), n=1, cutoff=0.6
    )
    return plain[found[0]] if found else None


def did_you_mean(word: str, allowed: Sequence[str]) -> str:
    """A question that offers the nearest word; empty where there is none."""
    option = nearest(word, allowed)
    return f'Did you mean "{option}"?' if option else ""
