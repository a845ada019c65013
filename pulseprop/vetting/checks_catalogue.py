"""The table beside the catalogue: what it is said to be, what it is nearest to, units and air that only
another source can show."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.medium import Medium
from pulseprop.vetting.case import Case
from pulseprop.vetting.certificate_medium import claim_of
from pulseprop.vetting.nearest import Likeness, likeness, nearest, said_to_be
from pulseprop.vetting.result import Finding
from pulseprop.vetting.table import SentTable

__all__ = ["claimed_medium", "claimed_of", "nearest_medium", "open_orientation", "wavelength_unit"]

Real = NDArray[np.float64]

MELT = 1e-3
"""Difference from a catalogue index that melts, cuts and temperatures explain (common practice, no
source).
"""
FAR = 0.02
"""Difference of index from which on the nearest medium is no likeness."""
ALIKE = 2e-4
"""Difference up to which a table is that of a medium."""
BETTER = 5.0
"""Times nearer that another reading must bring a table to count."""
AIR_SHOWS, AIR_FITS = 1e-4, 5e-5
"""Uncertainty of the index up to which that of air, 2.7e-4, is seen, and how well the table must then fit."""
AXIS_SAID = re.compile(
    r"\bn_?\{?[oexyz]\}?\b|\b(extra)?ordinary\b|\b[oexyz][- ]?(ray|axis|polari[sz])"
    r"|\b[acxyz][- ](cut|plane|axis)\b|\b0001\b|ordentlich|fused quartz|quartz glass|quarzglas",
    re.IGNORECASE,
)
"""Words by which an axis, or matter without one, is told."""
RANDOM = re.compile(r"\brandom(ly)?\b", re.IGNORECASE)
SCALES = (1e3, 1e-3, 10.0, 0.1, 1e4, 1e-4, 1e6, 1e-6)
"""Of wavelength units that are mixed up: nm, um, 0.1 nm, m."""


def claimed_of(case: Case) -> tuple[Medium, bool] | None:
    """The medium that the table is said to be, and whether that was stated (not read from a title)."""
    if case.request.claimed is not None:
        return catalogue_medium(case.request.claimed), True
    name = said_to_be(case.table)
    return (catalogue_medium(name), False) if name else None


def claimed_medium(case: Case) -> Iterator[Finding]:
    """The table against the medium it is said to be; air and vacuum, which causality cannot tell apart."""
    rows, claim = _index(case.table), claimed_of(case)
    if rows is None or claim is None:
        return
    (omega, index), (medium, stated) = rows, claim
    like = likeness(medium, omega, index)
    if like is None:
        return
    error = float(np.median(case.numbers.data.index_error)) if case.numbers.data else 0.0
    slip = _air(case.table, medium, like, error)
    if slip is not None:
        yield slip
    elif like.distance > MELT + 3 * error:
        yield _not_that(case, like, stated)


def open_orientation(case: Case) -> Iterator[Finding]:
    """A crystal whose axis nobody states: the table may be of any, and so may be what is delivered."""
    table, claim = case.table, claimed_of(case)
    words = " ".join(
        (table.title, Path(table.file).stem, *table.comments, *(one.header for one in table.columns))
    )
    if claim is None or AXIS_SAID.search(words):
        return
    cut = "random" if RANDOM.search(words) else ""
    places = case.request.at or (float(np.median(table.omega)),)
    for finding in claim_of(claim[0].name, cut, places).findings:
        if finding.code == "orientation-open":
            yield replace(finding, repair="state the axis along which the light is polarised")


def nearest_medium(case: Case) -> Iterator[Finding]:
    """Which catalogue medium the table is nearest to, and how far."""
    rows = _index(case.table)
    if rows is None:
        return
    like = nearest(*rows)
    if like is None:
        return
    far = like.distance > FAR
    yield Finding(
        code="far-from-catalogue" if far else "nearest-medium",
        severity="note",
        text=("No medium of the catalogue has such an index and dispersion. The nearest is " if far else "")
        + f"{like.medium.name}{'' if far else ' is the nearest medium of the catalogue'}: "
        + _difference(like)
        + ".",
    )


def wavelength_unit(case: Case) -> Iterator[Finding]:
    """A unit of wavelength that is wrong by a power of ten: seen against the catalogue only."""
    rows = _index(case.table)
    if rows is None:
        return
    omega, index = rows
    claim = claimed_of(case)
    now = likeness(claim[0], omega, index) if claim else nearest(omega, index)
    if now is not None and now.distance <= ALIKE:
        return
    for scale in SCALES:
        then = likeness(claim[0], omega / scale, index) if claim else nearest(omega / scale, index)
        limit = MELT if claim else ALIKE
        if then is None or then.distance > limit or not then.whole:
            continue
        if now is not None and now.distance < BETTER * then.distance + ALIKE:
            continue
        yield Finding(
            code="axis-unit",
            severity="error",
            text=f"With the axis in {case.table.axis_unit} the table is like no such medium; with "
            f"wavelengths {scale:g} times as long it is {then.medium.name} within {then.distance:.1g}. A "
            "unit of wavelength is mixed up.",
            repair=f"read the wavelengths as {scale:g} times as long",
            factor_after_repair=case.factor,
        )
        return


def _index(table: SentTable) -> tuple[Real, Real] | None:
    column = table.column("n")
    if column is None:
        return None
    order = np.argsort(table.omega, kind="stable")
    order = order[np.isfinite(column.values[order])]
    return (table.omega[order], column.values[order]) if len(order) >= 2 else None


def _air(table: SentTable, medium: Medium, like: Likeness, error: float) -> Finding | None:
    """A difference that is the index of air: 2.7e-4, the same over the table but for 1e-5."""
    air, rows = catalogue_medium("air"), _index(table)
    if rows is None or error > AIR_SHOWS or table.relative_to not in (None, medium.relative_to):
        return None
    omega, index = rows
    if not air.band.contains(omega).all():
        return None
    of_air = np.real(air.index(omega))
    for reading, against, how in ((index / of_air, "vacuum", "divide"), (index * of_air, "air", "multiply")):
        then = likeness(medium, omega, reading)
        if then is not None and then.distance < AIR_FITS + 2 * error and like.distance > 3 * then.distance:
            return Finding(
                code="air-vacuum",
                severity="warning",
                text=f"The index lies {like.offset:+.2g} from that of {medium.name}, published against "
                f"{medium.relative_to}: just as one against {against} does. Causality alone cannot see this.",
                repair=f"{how} the index by that of air",
            )
    return None


def _not_that(case: Case, like: Likeness, stated: bool) -> Finding:
    rows = _index(case.table)
    other = nearest(*rows) if rows is not None else None
    text = f"The table is said to be {like.medium.name}, but {_difference(like)} from its published index"
    if other is not None and other.medium.name != like.medium.name and other.distance < like.distance / 2:
        text += f". It is nearer to {other.medium.name}: {_difference(other)}"
    return Finding(
        code="not-the-claimed-medium",
        severity="error" if stated and like.distance > FAR else "warning",
        text=text + ".",
    )


def _difference(like: Likeness) -> str:
    return (
        f"{like.offset:+.1e} in the mean and up to {like.shape:.1e} in shape over {like.rows} compared rows"
    )
