"""What all elements of a path have in common, and phases by their orders."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field

from pulseprop.scenario.fields import Length, Name, Table, Temperature, measured

__all__ = ["RIGHT_ANGLE", "ElementTable", "OrdersTable"]

RIGHT_ANGLE = 1.5707963267948966


class ElementTable(Table):
    """What every element may carry. kind: the word for its sort. beam_radius: 1/e^2 of the intensity, m.
    temperature: K. keep: never to be changed. place: of a compensator at hand, "start", "end", "after:NAME".
    """

    kind: str
    name: Name | None = None
    beam_radius: Length | None = None
    temperature: Temperature | None = None
    keep: bool = False
    place: Annotated[str, Field(pattern=r"^(start|end|after:.+)$")] | None = None


class OrdersTable(ElementTable):
    """Spectral phase by its orders at the pulse's centre: gdd in s^2, tod in s^3, fod in s^4; positive gdd
    is red first."""

    gdd: Annotated[float, measured("gdd")] = 0.0
    tod: Annotated[float, measured("tod")] = 0.0
    fod: Annotated[float, measured("fod")] = 0.0
