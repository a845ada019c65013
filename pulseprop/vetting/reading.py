"""What vendors send, read: text tables, workbooks and JCAMP-DX, with all that was inferred told."""

from __future__ import annotations

import hashlib
from collections.abc import Mapping, Sequence
from dataclasses import replace
from pathlib import Path

import numpy as np

from pulseprop.errors import InputError
from pulseprop.files.blocks import Block
from pulseprop.files.jcamp import is_jcamp, spectra_of
from pulseprop.files.source import contents, decoded
from pulseprop.files.text_blocks import text_blocks
from pulseprop.files.workbook import first_sheet, is_workbook
from pulseprop.vetting.block_tables import tables_of_block
from pulseprop.vetting.headings import is_heading
from pulseprop.vetting.joined import joined
from pulseprop.vetting.printed import Source
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.request import Stated
from pulseprop.vetting.spectrum_tables import table_of_spectrum
from pulseprop.vetting.table import Column, Inference, Quantity, SentTable
from pulseprop.vetting.uncertainty_text import uncertainties_in

__all__ = ["read_table", "tables_in"]


def read_table(path: str | Path, options: ReadOptions | None = None) -> tuple[SentTable, ...]:
    """The tables of a file, in its order; one for each block of numbers, index column and spectrum.

    Rows stand as in the file. Rows with missing cells are left out, and `inferred` says which.

    Raises InputError with file and line where the file cannot be read, or where what it means cannot be told
    (then with the option that says it).
    """
    path = Path(path)
    return tables_in(contents(path), str(path), options or ReadOptions())


def tables_in(data: bytes, file: str, options: ReadOptions) -> tuple[SentTable, ...]:
    """The tables in the bytes of a file; `file` is its name in messages. Raises as `read_table` does."""
    uncertainty = uncertainties_in(options.uncertainty) if options.uncertainty else {}
    tables = _tables(data, file, options)
    return tuple(
        replace(table, columns=tuple(_with_uncertainty(column, uncertainty) for column in table.columns))
        for table in tables
    )


def _tables(data: bytes, file: str, options: ReadOptions) -> list[SentTable]:
    source = Source(file=file, place=file, sha256=hashlib.sha256(data).hexdigest(), options=options)
    if is_workbook(data):
        return _of_workbook(data, source)
    _check_kind(data, file)
    text = decoded(data, file)
    if is_jcamp(text):
        return [table_of_spectrum(source, spectrum) for spectrum in spectra_of(text, file)]
    return _of_blocks(text_blocks(text, file, is_heading), source, [])


def _of_workbook(data: bytes, source: Source) -> list[SentTable]:
    """The first sheet with numbers; which one is told."""
    sheet = first_sheet(data, source.file, is_heading)
    others = f"; after it: {', '.join(sheet.others)}"[:80] if sheet.others else ""
    note = Inference(
        about="sheet",
        taken=sheet.name,
        why=f"the first that holds rows of numbers{others}",
        overrule="save the sheet that is meant in a file of its own",
    )
    source = replace(source, place=f"{source.file}[{sheet.name}]", title=sheet.name)
    return _of_blocks(sheet.blocks, source, [note])


def _of_blocks(blocks: Sequence[Block], source: Source, notes: Sequence[Inference]) -> list[SentTable]:
    tables: list[SentTable] = []
    for number, block in enumerate(blocks):
        options = _options_of_block(source.options, blocks, number)
        tables += tables_of_block(replace(source, options=options), block, notes)
    return joined(tables)


def _options_of_block(options: ReadOptions, blocks: Sequence[Block], number: int) -> ReadOptions:
    """ "wavelength,n,k" for a block of wavelength and n and one of wavelength and k names both."""
    names = options.columns.split(",") if options.columns else []
    if len(names) < 3 or len(names) != len(blocks) + 1 or any(block.width != 2 for block in blocks):
        return options
    return replace(options, columns=f"{names[0]},{names[number + 1]}")


def _check_kind(data: bytes, file: str) -> None:
    """Files that hold pictures or pages of numbers are refused by name."""
    if data.startswith(b"%PDF"):
        raise InputError(
            "a PDF is a page, not a table",
            file=file,
            allowed="text, xlsx or JCAMP-DX",
            remedy="Copy its numbers to a CSV file, or its few printed values to a TOML file",
        )


def _with_uncertainty(column: Column, stated: Mapping[Quantity, Stated]) -> Column:
    found = stated.get(column.quantity)
    if found is None:
        return column
    return replace(column, uncertainty=found.absolute + found.relative * np.abs(column.values))
