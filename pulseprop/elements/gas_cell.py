"""A gas cell: a window, gas at a pressure, a window."""

from __future__ import annotations

from dataclasses import dataclass

from pulseprop.elements.group import Group

__all__ = ["GasCell"]


@dataclass(frozen=True, kw_only=True)
class GasCell(Group):
    """gas: its catalogue name. pressure: absolute, Pa. temperature: K."""

    gas: str
    pressure: float
    temperature: float
