"""Which catalogue media a certificate speaks of, and crystals whose axis is left open."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.material.catalogue import Record, near_names, record
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.composition import Absolute
from pulseprop.material.medium import Medium
from pulseprop.vetting.result import Finding

__all__ = ["Claim", "axes_of", "claim_of", "open_axis"]

OPEN = ("", "random")
"""Orientations that leave the axis open."""


@dataclass(frozen=True, kw_only=True)
class Claim:
    """media: all that the name may mean, empty where the catalogue does not have it. findings: about it."""

    media: tuple[Medium, ...]
    findings: tuple[Finding, ...]


def axes_of(name: str) -> dict[str, str]:
    """The catalogue names of one crystal by axis; empty for what has none."""
    own = record(name)
    if not own.axis:
        return {}
    known = [(other, record(other)) for other in near_names(name)]
    return {
        entry.axis: other
        for other, entry in known
        if entry.axis and _substance(entry) == _substance(own) and entry.source == own.source
    }


def claim_of(
    name: str, orientation: str, omegas: Sequence[float], relative_to: Literal["air", "vacuum"] | None = None
) -> Claim:
    """What the name says. orientation: an axis, "random", or "" where it is not stated. omegas: rad/s, where
    values are printed. relative_to: what the printed index is against, if stated: media follow it."""
    claim = _named(name, orientation, omegas)
    return replace(claim, media=tuple(_against(medium, relative_to) for medium in claim.media))


def _against(medium: Medium, relative_to: str | None) -> Medium:
    """The medium with its index against vacuum, where that was stated and its own is against air."""
    if relative_to != "vacuum" or medium.relative_to != "air":
        return medium
    absolute = Absolute(medium.response, catalogue_medium("air").response)
    return replace(medium, response=absolute, relative_to="vacuum")


def _named(name: str, orientation: str, omegas: Sequence[float]) -> Claim:
    try:
        own = record(name)
    except InputError as error:
        return Claim(media=(), findings=tuple(_unknown(name, error)))
    if own.kind == "humid air":
        return Claim(media=(), findings=())
    axes = axes_of(name)
    if orientation in axes:
        return Claim(media=(catalogue_medium(axes[orientation]),), findings=())
    if not axes or name != _substance(own):
        return Claim(media=(catalogue_medium(name),), findings=())
    media = tuple(catalogue_medium(other) for other in axes.values())
    return Claim(media=media, findings=(open_axis(name, axes, orientation, omegas),))


def open_axis(name: str, axes: dict[str, str], orientation: str, omegas: Sequence[float]) -> Finding:
    """That the axis is not stated, with the values of each."""
    places = sorted(set(omegas), reverse=True)
    shown = [_values(axes, omega) for omega in places[:3]]
    how = "is random" if orientation == "random" else "is not stated"
    return Finding(
        code="orientation-open",
        severity="warning",
        text=f"The orientation of this {name} {how}: its index and dispersion depend on the axis. "
        + " ".join(text for text in shown if text),
        repair='state orientation = "' + '" or "'.join(axes) + '"',
    )


def _values(axes: dict[str, str], omega: float) -> str:
    """At one place, by axis; empty where a record does not reach."""
    parts = []
    for axis, name in axes.items():
        medium = catalogue_medium(name)
        if not medium.band.low <= omega <= medium.band.high:
            return ""
        orders = medium.orders(omega)
        parts.append(f"{axis}: n = {orders.index:.5f}, GVD {orders.gvd / 1e-27:.4g} fs^2/mm")
    return f"At {TWO_PI_C / omega * 1e9:.6g} nm, {'; '.join(parts)}."


def _substance(entry: Record) -> str:
    """The name without its axis: "sapphire" of "sapphire e"."""
    return entry.name.removesuffix(f" {entry.axis}")


def _unknown(name: str, error: InputError) -> Iterator[Finding]:
    if name:
        near = error.complaint.remedy
        yield Finding(
            code="not-in-catalogue",
            severity="note",
            text=f"The catalogue has no medium of the exact name {name!r}, so the numbers were not compared "
            "with one." + (f" {near}" if near.startswith("Did you mean") else ""),
        )
