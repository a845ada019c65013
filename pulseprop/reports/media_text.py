"""What `media` prints: records with their orders at wavelengths, or the list of the catalogue."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Protocol

from pulseprop.propagation.numerals import LONG_NM, significant, terahertz
from pulseprop.reports.blocks import Column, Paragraph, Table
from pulseprop.reports.section_sources import medium_facts, range_text
from pulseprop.reports.text import blocks_text, printable, table_text

__all__ = ["MediumFacts", "OrdersFacts", "catalogue_text", "media_text"]

COLUMNS = (
    Column("index"),
    Column("absorption", "/mm"),
    Column("group index"),
    Column("GVD", "fs^2/mm"),
    Column("TOD", "fs^3/mm"),
    Column("FOD", "fs^4/mm"),
)


class OrdersFacts(Protocol):
    """Orders of a medium at one vacuum wavelength."""

    @property
    def wavelength_nm(self) -> float: ...
    @property
    def index(self) -> float | None: ...
    @property
    def k(self) -> float | None: ...
    @property
    def absorption_per_mm(self) -> float | None: ...
    @property
    def group_index(self) -> float | None: ...
    @property
    def gvd_fs2_per_mm(self) -> float | None: ...
    @property
    def tod_fs3_per_mm(self) -> float | None: ...
    @property
    def fod_fs4_per_mm(self) -> float | None: ...


class MediumFacts(Protocol):
    """A medium with its source and its orders."""

    @property
    def name(self) -> str: ...
    @property
    def source(self) -> str: ...
    @property
    def temperature(self) -> str: ...
    @property
    def relative_to(self) -> str: ...
    @property
    def valid_nm(self) -> tuple[float, float] | None: ...
    @property
    def notes(self) -> tuple[str, ...]: ...
    @property
    def spread(self) -> tuple[str, ...]: ...
    @property
    def n2_m2_per_W(self) -> float | None: ...
    @property
    def at(self) -> Sequence[OrdersFacts]: ...


def media_text(media: Iterable[MediumFacts]) -> str:
    """A section a medium: source, temperature, range; orders where wavelengths were asked for."""
    return printable("\n\n".join(_medium(medium) for medium in media)) + "\n"


def _medium(medium: MediumFacts) -> str:
    facts = medium_facts(medium.source, medium.temperature, medium.relative_to, medium.valid_nm)
    lines = [facts, *(note[:1].upper() + note[1:].rstrip(".") + "." for note in medium.notes)]
    if medium.spread:
        lines.append(f"Other records: {'; '.join(medium.spread)}.")
    if medium.n2_m2_per_W is not None:
        lines.append(f"Nonlinear index n2: {significant(medium.n2_m2_per_W, 3)} m^2/W.")
    blocks: tuple[Table | Paragraph, ...] = tuple(Paragraph(line) for line in lines)
    if medium.at:
        blocks += (_orders(medium.at),)
    return f"{medium.name}\n{blocks_text(blocks)}"


def _orders(rows: Sequence[OrdersFacts]) -> Table:
    """Long waves are told by their frequency as well."""
    columns: tuple[Column, ...] = (Column("wavelength", "nm"),)
    places: list[tuple[str, ...]] = [(significant(row.wavelength_nm, 6),) for row in rows]
    if max(row.wavelength_nm for row in rows) >= LONG_NM:
        columns = (Column("frequency", "THz"), Column("wavelength", "um"))
        places = [_long(row.wavelength_nm) for row in rows]
    lines = tuple((*place, *_row(row)) for place, row in zip(places, rows, strict=True))
    return Table((*columns, *COLUMNS), lines)


def _long(wavelength_nm: float) -> tuple[str, ...]:
    return significant(terahertz(wavelength_nm), 6), significant(wavelength_nm * 1e-3, 6)


def _row(row: OrdersFacts) -> tuple[str, ...]:
    return (
        significant(row.index, 6),
        significant(row.absorption_per_mm, 3),
        significant(row.group_index, 6),
        significant(row.gvd_fs2_per_mm, 4),
        significant(row.tod_fs3_per_mm, 4),
        significant(row.fod_fs4_per_mm, 4),
    )


def catalogue_text(media: Iterable[MediumFacts], stateless: Iterable[str] = ()) -> str:
    """The catalogue, a row a record: name, range, temperature, what the index is against.

    stateless: names of records that are nothing without a state (pressure, temperature, humidity).
    """
    columns = (
        Column("medium", words=True),
        Column("valid", words=True),
        Column("temperature", words=True),
        Column("index against", words=True),
    )
    rows = tuple(
        (medium.name, range_text(medium.valid_nm), medium.temperature, medium.relative_to) for medium in media
    )
    rows += tuple((name, "needs its state: `pulseprop media NAME` says how", "", "") for name in stateless)
    return table_text(Table(columns, tuple(sorted(rows, key=lambda row: row[0].lower())))) + "\n"
