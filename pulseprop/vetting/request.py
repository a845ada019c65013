"""What the user states beside a table, and asks of it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from pulseprop.units import Width

__all__ = ["Anchor", "Request", "Stated"]


@dataclass(frozen=True, kw_only=True)
class Stated:
    """An uncertainty as stated: absolute (SI) plus relative times the size of the value; both 0 or more."""

    absolute: float = 0.0
    relative: float = 0.0


@dataclass(frozen=True, kw_only=True)
class Anchor:
    """An index known from elsewhere, with its uncertainty (above 0), at omega in rad/s."""

    omega: float
    index: float
    error: float


@dataclass(frozen=True, kw_only=True)
class Request:
    """Options of a call, SI.

    uncertainty: by quantity ("n", "k", "alpha", "absorbance", …); k is the uncertainty of k whatever the
    column holds. at: frequencies in rad/s at which bounds are asked. require: texts of requirements. ceiling:
    the instrument's highest absorbance for absorbance and transmittances, else in the values' SI unit.
    resolution: of the instrument, full width at half maximum. transparent: (low, high) in rad/s between which
    the material is known to absorb nothing. strength: as in `causality.passive_data.Knowledge`. claimed:
    exact catalogue name of what the table is said to be. angle: of incidence outside, rad (mirrors).
    """

    uncertainty: Mapping[str, Stated] = field(default_factory=dict)
    at: tuple[float, ...] = ()
    require: tuple[str, ...] = ()
    strict: bool = False
    ceiling: float | None = None
    resolution: Width | None = None
    anchors: tuple[Anchor, ...] = ()
    transparent: tuple[float, float] | None = None
    strength: float | None = None
    claimed: str | None = None
    angle: float | None = None
    polarisation: Literal["s", "p"] | None = None
