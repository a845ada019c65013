"""The pulse before and after the path, when its energy arrives, and what its chirp may be."""

from __future__ import annotations

from pulseprop.propagation.numerals import (
    LONG_NM,
    percent,
    prefix_for,
    quantity,
    scaled,
    significant,
    span,
    terahertz,
)
from pulseprop.propagation.result import AutocorrelationFit, PulseMeasures, Run, SignCase
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.curves import field_facts, volts_per_metre
from pulseprop.reports.section_budget import digits_of, on_a_line

__all__ = ["autocorrelation_section", "delay_section", "pulse_section", "sign_section"]

WORTH_A_NOTE = 1e-4
"""Share of the energy later than three widths after the peak from which on the pulse is said to ring."""

Row = tuple[str, ...]


def pulse_section(run: Run) -> Section:
    """Before and after side by side, then what a width would hide."""
    before, after, digits = run.pulse_in, run.pulse_out, digits_of(run)
    columns = (Column("pulse", words=True), Column("enters"), Column("leaves"), Column("unit", words=True))
    rows = (
        *_centre(before.centre_nm, after.centre_nm),
        _width("FWHM, outermost points", before.fwhm_fs, after.fwhm_fs, digits),
        _width("RMS width", before.rms_fs, after.rms_fs, digits),
        _width("equivalent width", before.equivalent_width_fs, after.equivalent_width_fs, digits),
        _width("FWHM at flat phase", before.transform_limit_fwhm_fs, after.transform_limit_fwhm_fs, digits),
        _plain("time-bandwidth product", before.time_bandwidth_product, after.time_bandwidth_product, digits),
        _prefixed("energy", before.energy_J, after.energy_J, "J", digits),
        _prefixed("peak power", before.peak_power_W, after.peak_power_W, "W", digits),
        _width("autocorrelation FWHM", before.autocorrelation_fwhm_fs, after.autocorrelation_fwhm_fs, digits),
        _plain(
            "autocorrelation / pulse FWHM",
            before.autocorrelation_factor,
            after.autocorrelation_factor,
            digits,
        ),
    )
    notes = [*_limits(after, digits), *_shape(after), *run.pulse_notes]
    return Section(
        "pulse", "Pulse before and after", (Table(columns, rows), *(Paragraph(note) for note in notes))
    )


def _centre(before: float, after: float) -> tuple[Row, ...]:
    name = "centre (mean frequency)"
    if max(before, after) < LONG_NM:
        return ((name, significant(before, 5), significant(after, 5), "nm"),)
    return (
        (name, significant(terahertz(before), 4), significant(terahertz(after), 4), "THz"),
        ("its vacuum wavelength", significant(before * 1e-3, 4), significant(after * 1e-3, 4), "um"),
    )


def _width(name: str, before: float, after: float, digits: int) -> Row:
    unit, factor = scaled([before, after])
    return (name, significant(before * factor, digits), significant(after * factor, digits), unit)


def _plain(name: str, before: float, after: float, digits: int) -> Row:
    return (name, significant(before, digits), significant(after, digits), "")


def _prefixed(name: str, before: float, after: float, unit: str, digits: int) -> Row:
    size, prefix = prefix_for(max(before, after))
    return (name, significant(before / size, digits), significant(after / size, digits), prefix + unit)


def _limits(after: PulseMeasures, digits: int) -> list[str]:
    if after.peak_ratio is None or after.two_photon_ratio is None:
        return []
    return [
        f"Against the same transmitted spectrum with flat phase: peak power "
        f"{percent(after.peak_ratio, min(digits, 3))}, "
        f"two-photon signal {percent(after.two_photon_ratio, min(digits, 3))}."
    ]


def _shape(after: PulseMeasures) -> list[str]:
    notes = []
    if after.split:
        notes.append(
            "The pulse splits: it is above half maximum in more than one stretch, and its FWHM spans all "
            "of them. Look at the curves before quoting it."
        )
    if (after.energy_after or 0.0) >= WORTH_A_NOTE:
        notes.append(
            f"The pulse rings or trails: {percent(after.energy_after, 2)} of its energy comes later than "
            "three FWHM after the peak. FWHM does not see that; the logarithmic figure does."
        )
    return notes


def delay_section(run: Run) -> Section:
    """When the energy arrives, against the same path in vacuum."""
    if not run.elements:
        return Section("delays", "Delays", (Paragraph("The path is empty: nothing is delayed."),))
    path, digits = run.path, digits_of(run)
    sense = "later" if path.centroid_delay_fs >= 0 else "earlier"
    delay = span(abs(path.centroid_delay_fs), digits)
    lines = [f"The energy's centroid arrives {delay} {sense} than through vacuum"]
    if path.net_group_delay_fs is not None and path.reshaping_delay_fs is not None:
        lines.append(
            f": {span(path.net_group_delay_fs, digits)} (group delay averaged over the transmitted "
            f"spectrum) {_signed(path.reshaping_delay_fs, path.centroid_delay_fs, digits)} (reshaping by "
            "absorption)"
        )
    text = "".join(lines) + "."
    if path.group_delay_fs is not None:
        place = ", where a line stands" if on_a_line(path) else ""
        text += f" Group delay at the pulse's centre{place}: {span(path.group_delay_fs, digits)}."
    blocks = [Paragraph(text), *([Paragraph(_field(run, digits))] if run.fields.form == "field" else [])]
    return Section("delays", "Delays", tuple(blocks))


def _field(run: Run, digits: int) -> str:
    """What a detector of the field sees of the main cycle."""
    fields, centre = run.fields, 1e12 * terahertz(run.pulse_in.centre_nm)
    before = field_facts(fields.grid_in, fields.envelope_in, centre)
    after = field_facts(fields.grid_out, fields.envelope_out, centre)
    delay = (after.arrival - before.arrival) * 1e15
    sense = "later" if delay >= 0 else "earlier"
    text = (
        f"Field: its main peak arrives {span(abs(delay), digits)} {sense} than "
        f"through vacuum; peak to peak it is {percent(after.peak_to_peak / before.peak_to_peak, 3)} of the "
        "field that enters"
    )
    radius = run.hazards.beam_radius_m
    if run.hazards.pulse_energy_J is not None and radius is not None:
        text += f", {quantity(volts_per_metre(after.peak_to_peak, radius) * 1e-2, 'V/cm')} on the axis"
    return text + "."


def _signed(value: float, beside: float, digits: int) -> str:
    """A term of a sum with its sign; nothing finer than the sum itself is known."""
    if abs(value) < 0.5 * 10.0**-digits * abs(beside) or value == 0:
        return "+ 0"
    return f"{'+' if value > 0 else '-'} {span(abs(value), min(digits, 3))}"


def sign_section(run: Run) -> Section | None:
    """Both signs of a chirp of which a measured duration only gives the size."""
    if not run.signs:
        return None
    digits = digits_of(run)
    unit, factor = scaled(
        [width for case in run.signs for width in (case.fwhm_fs, case.autocorrelation_fwhm_fs)]
    )
    columns = (
        Column("GDD at the start", "fs^2"),
        Column("FWHM at the end", unit),
        Column("autocorrelation", unit),
        Column("peak ratio"),
    )
    rows = tuple(_sign_row(case, factor, digits) for case in run.signs)
    text = (
        "A duration or an autocorrelation measured beside a spectrum gives the size of the chirp, not its "
        "sign. Both are carried to the end of the path. The numbers above are those of the pulse as stated; "
        "where a measured duration is stated, of positive GDD."
    )
    return Section("signs", "Both signs of the chirp", (Paragraph(text), Table(columns, rows)))


def _sign_row(case: SignCase, factor: float, digits: int) -> Row:
    return (
        significant(case.gdd_in_fs2, min(digits, 3)),
        significant(case.fwhm_fs * factor, digits),
        significant(case.autocorrelation_fwhm_fs * factor, digits),
        percent(case.peak_ratio, 3),
    )


def autocorrelation_section(run: Run) -> Section | None:
    """A measured intensity autocorrelation: the chirp that fits it, the glass that would tell the sign."""
    fit = run.autocorrelation
    if fit is None:
        return None
    text = (
        f"The measured autocorrelation is fitted by |GDD| = {significant(fit.gdd_fs2, 3)} fs^2 at the "
        f"start of the path, with a residual of {significant(fit.residual, 2)} rms of its peak."
    )
    blocks = [Paragraph(text)]
    if sentence := _glass(fit):
        blocks.append(Paragraph(sentence))
    return Section("autocorrelation", "Measured autocorrelation", tuple(blocks))


def _glass(fit: AutocorrelationFit) -> str:
    if fit.glass_mm is None or fit.fwhm_if_positive_fs is None or fit.fwhm_if_negative_fs is None:
        return ""
    return (
        f"An intensity autocorrelation is blind to the sign. Put {significant(fit.glass_mm, 2)} mm of "
        f"{fit.glass} in front of the autocorrelator: a trace of {span(fit.fwhm_if_positive_fs, 3)} means "
        f"positive GDD, one of {span(fit.fwhm_if_negative_fs, 3)} negative."
    )
