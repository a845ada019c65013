"""What the faces of a plate reflect: by the table's index, the medium stated, or the one it is said to be."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.material.absorption_quantities import face_reflectance
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import Inference, SentTable

__all__ = ["inferred_medium", "surface_reflectance"]

Real = NDArray[np.float64]


def surface_reflectance(table: SentTable, request: Request) -> Real | None:
    """Of one face at normal incidence, (R,), from the table's index or that of the medium; None where neither
    is known in all rows."""
    from pulseprop.material.catalogue_media import catalogue_medium

    column = table.column("n")
    if column is not None:
        return face_reflectance(column.values.astype(complex))
    name = request.claimed or _read(table)
    if name is None:
        return None
    medium = catalogue_medium(name)
    if not np.all(medium.band.contains(table.omega)):
        return None
    return face_reflectance(medium.index(table.omega))


def inferred_medium(table: SentTable, request: Request) -> Inference | None:
    """That the faces were taken as those of a medium nobody stated; None where it was not so."""
    if table.column("n") is not None or request.claimed is not None:
        return None
    if not (table.column("transmittance") or table.column("internal_transmittance")):
        return None
    name = _read(table)
    if name is None or surface_reflectance(table, request) is None:
        return None
    return Inference(
        about="medium of the faces",
        taken=name,
        why="the file calls its sample so; their reflection loss follows from its index",
        overrule="--medium",
    )


def _read(table: SentTable) -> str | None:
    """The one solid that the file says its sample is: of a liquid the faces are those of its cell."""
    from pulseprop.material.catalogue import record
    from pulseprop.vetting.nearest import media_named

    named = media_named(table)
    name = max(named, key=len, default=None)
    certain = name is not None and all(other in name for other in named)
    return name if certain and name is not None and record(name).family != "liquid" else None
