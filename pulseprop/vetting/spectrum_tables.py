"""A JCAMP-DX spectrum as a table: its units are its headings."""

from __future__ import annotations

import re
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.files.jcamp import Spectrum
from pulseprop.vetting.assemble import table_of
from pulseprop.vetting.heading_units import AXIS_OF_DIMENSION, dimension
from pulseprop.vetting.heading_words import AXES, QUANTITIES
from pulseprop.vetting.headings import Heading, heading_of
from pulseprop.vetting.printed import Printed, Source
from pulseprop.vetting.read_options import named_columns
from pulseprop.vetting.remarks import sample_thickness
from pulseprop.vetting.sizes import unit_by_size
from pulseprop.vetting.table import Inference, Quantity, SentTable

__all__ = ["table_of_spectrum"]

Real = NDArray[np.float64]

DATA = ("XYDATA", "XYPOINTS", "PEAKTABLE", "TITLE", "END")


def table_of_spectrum(source: Source, spectrum: Spectrum) -> SentTable:
    """The table of a spectrum. Raises InputError where its units do not tell what it holds."""
    axis, head = _headings(source, spectrum)
    told = [_read(spectrum, axis, head)]
    words = tuple(f"{label} = {value}" for label, value in spectrum.records.items() if label not in DATA)
    source = replace(
        source,
        words=words,
        title=spectrum.title,
        thickness=_path_length(source, spectrum, told),
        thickness_said_by="the PATHLENGTH record",
    )
    return table_of(
        source,
        _printed(str(axis.meaning), axis, spectrum.x, spectrum.x_half),
        [(_quantity(head), _printed(str(head.meaning), head, spectrum.y, spectrum.y_half))],
        spectrum.lines,
        told,
    )


def _printed(name: str, head: Heading, values: Real, half: float) -> Printed:
    return Printed(
        name=name,
        unit=head.unit,
        heading=head.text,
        cells=tuple(f"{value:.10g}" for value in values),
        values=values,
        half=np.full(len(values), half),
    )


def _quantity(head: Heading) -> Quantity:
    return next(quantity for quantity in QUANTITIES if quantity == head.meaning)


def _headings(source: Source, spectrum: Spectrum) -> tuple[Heading, Heading]:
    """Axis and quantity: by option, else by XUNITS and YUNITS."""
    axis, head = (heading_of(spectrum.records.get(name, "")) for name in ("XUNITS", "YUNITS"))
    if source.options.columns is not None:
        names = named_columns(source.options.columns)
        if len(names) != 2 or names[0].meaning not in AXES:
            raise _refused(
                source, "a spectrum has two columns", source.options.columns, "wavenumber,absorbance"
            )
        units = [name.unit or given.unit for name, given in zip(names, (axis, head), strict=True)]
        axis, head = (
            replace(given, meaning=name.meaning, unit=unit, extinction=False)
            for given, name, unit in zip((axis, head), names, units, strict=True)
        )
    return _with_unit(source, spectrum, axis), _checked(source, head)


def _with_unit(source: Source, spectrum: Spectrum, axis: Heading) -> Heading:
    """The axis with its unit: by option, by XUNITS, or by size."""
    unit = source.options.axis_unit() or axis.unit
    meaning = AXIS_OF_DIMENSION.get(dimension(unit)) if unit else axis.axis
    if meaning is not None and not unit:
        unit = unit_by_size(meaning, spectrum.x)
    if meaning is None or unit is None:
        raise _refused(
            source, "XUNITS names no spectral axis", axis.text, "1/CM, NANOMETERS, MICROMETERS", "--unit"
        )
    return replace(axis, meaning=meaning, unit=unit)


def _checked(source: Source, head: Heading) -> Heading:
    if head.extinction:
        raise _refused(
            source, "extinction has several meanings", head.text, "k, absorbance, alpha", "--columns"
        )
    if head.meaning is None or head.axis:
        raise _refused(
            source,
            "YUNITS does not tell what the ordinates are",
            head.text,
            "TRANSMITTANCE, ABSORBANCE, REFLECTANCE",
            "--columns wavenumber,transmittance",
        )
    return head


def _refused(source: Source, problem: str, value: str, allowed: str, option: str = "--columns") -> InputError:
    remedy = f"Say it: {option}"
    return InputError(problem, value=value or None, allowed=allowed, remedy=remedy, file=source.place)


def _read(spectrum: Spectrum, axis: Heading, head: Heading) -> Inference:
    return Inference(
        about="columns",
        taken=f"{axis.meaning} in {axis.unit}, {head.meaning}",
        why=f'JCAMP-DX with XUNITS "{axis.text}" and YUNITS "{head.text}" ({spectrum.form})',
        overrule="--columns, --unit",
    )


def _path_length(source: Source, spectrum: Spectrum, told: list[Inference]) -> float | None:
    """PATHLENGTH in m; a bare number is in cm, as the standard says (from memory)."""
    text = spectrum.records.get("PATHLENGTH", "").replace(",", ".")
    if not text or source.options.thickness is not None:
        return None
    bare = re.fullmatch(r"[0-9]*\.?[0-9]+([eE][+-]?[0-9]{1,2})?", text)
    if bare and float(text) > 0:
        told.append(
            Inference(
                about="unit of PATHLENGTH", taken="cm", why="JCAMP-DX gives it so", overrule="--thickness"
            )
        )
        return float(text) * 1e-2
    remark = sample_thickness([f"thickness {text}"])
    return None if remark is None else remark.length
