"""The answer of `compensate`: designs side by side, then each with its settings and tolerances."""

from __future__ import annotations

from collections.abc import Iterator

from pulseprop.compensation.result import Compensation, DataCase, Design, Drift, Setting, Target
from pulseprop.propagation.numerals import percent, significant, span
from pulseprop.reports.blocks import Column, Paragraph, Section, Table

__all__ = ["compensation_headline", "compensation_sections", "setting_text"]

RATIO_DIGITS = 4


def compensation_headline(answer: Compensation) -> str:
    """The answer in a sentence or two."""
    best, before = answer.designs[0], answer.before
    told = (
        f"{span(best.fwhm_fs, 3)} with {percent(best.peak_ratio)} of the peak power of the limit, against "
        f"{span(before.fwhm_fs, 3)} and {percent(before.peak_ratio)} today: {used(best)}."
    )
    return told if answer.target.wanted is None else f"{told} {_target(answer.target)}"


def _target(target: Target) -> str:
    unit = f" {target.unit}" if target.unit else ""
    wanted = f"{significant(target.wanted, 4)}{unit}"
    if target.reached:
        return f"The target, {target.goal} {wanted}, is reached."
    told = (
        f"The target, {target.goal} {wanted}, is not reached: the nearest design has "
        f"{significant(target.nearest, 4)}{unit}, short by {significant(target.short_by, 2)}{unit}"
    )
    return told + (f" ({'; '.join(target.limits)})." if target.limits else ".")


def used(design: Design) -> str:
    """The settings of a design in words, element by element."""
    by_element: dict[str, list[Setting]] = {}
    for setting in design.settings:
        by_element.setdefault(setting.element, []).append(setting)
    parts = [
        f"{element} ({', '.join(f'{_word(one.parameter)} {_value(one)}' for one in settings)})"
        for element, settings in by_element.items()
    ]
    return "; ".join(parts) or "as it stands, with nothing added"


def compensation_sections(answer: Compensation) -> tuple[Section, ...]:
    """All sections but orders and building, which have files of their own."""
    each = (section for number, design in enumerate(answer.designs, 1) for section in _of(number, design))
    return (_overview(answer), *each, _remainder(answer), _search(answer))


def _overview(answer: Compensation) -> Section:
    columns = (
        Column(""),
        Column("set-up", words=True),
        Column("FWHM", "fs"),
        Column("peak ratio"),
        Column("two-photon ratio"),
        Column("transmission"),
        Column("GDD left", "fs^2"),
        Column("TOD left", "fs^3"),
        Column("bench", "m"),
    )
    before = answer.before
    rows = [
        _overview_row("today", ", ".join(before.in_place) or "nothing set", before, None),
        *(
            _overview_row(str(number), used(design), design, design.size_m)
            for number, design in enumerate(answer.designs, 1)
        ),
    ]
    return Section("designs", "Designs", (Table(columns, tuple(rows)), *map(Paragraph, answer.notes)))


def _overview_row(number: str, words: str, row: object, size: float | None) -> tuple[str, ...]:
    return (
        number,
        words,
        significant(getattr(row, "fwhm_fs"), 4),  # noqa: B009 - states and designs share these names
        significant(getattr(row, "peak_ratio"), RATIO_DIGITS),  # noqa: B009
        significant(getattr(row, "two_photon_ratio"), RATIO_DIGITS),  # noqa: B009
        percent(getattr(row, "transmission")),  # noqa: B009
        significant(getattr(row, "residual_gdd_fs2"), 3),  # noqa: B009
        significant(getattr(row, "residual_tod_fs3"), 3),  # noqa: B009
        "" if size is None else significant(size, 2),
    )


def _of(number: int, design: Design) -> Iterator[Section]:
    key = f"design-{number}"
    yield Section(key, f"Design {number}", tuple(_design_blocks(design)))


def _design_blocks(design: Design) -> Iterator[Table | Paragraph]:
    if design.settings:
        yield _settings(design.settings)
    if design.left_out:
        yield Paragraph(f"{', '.join(design.left_out)}.", label="Taken out of the beam")
    yield Paragraph(
        f"{span(design.pulse_out.autocorrelation_fwhm_fs, 3)} (FWHM of the trace; "
        f"{significant(design.pulse_out.autocorrelation_factor, 4)} times that of this pulse).",
        label="Expected autocorrelation",
    )
    if design.tolerance:
        yield Paragraph("how far each may be off alone before 5 % of the peak power are lost:", "Tolerances")
        yield _tolerances(design.tolerance)
    yield from _together(design)
    if design.angles:
        yield _angles(design)
    yield from _data(design.data)


def _settings(settings: tuple[Setting, ...]) -> Table:
    columns = (
        Column("element", words=True),
        Column("setting", words=True),
        Column("value", words=True),
        Column("move from today", words=True),
        Column("", words=True),
    )
    return Table(
        columns,
        tuple((one.element, _word(one.parameter), _value(one), _move(one), _limit(one)) for one in settings),
    )


def _limit(one: Setting) -> str:
    return f"at its {one.at_limit} limit" if one.at_limit else ""


def setting_text(one: Setting) -> str:
    """A setting in words."""
    return f"{_word(one.parameter)} {_value(one)}"


def _word(parameter: str) -> str:
    return parameter.replace("_", " ")


def _value(one: Setting) -> str:
    number = one.value if isinstance(one.value, str) else f"{one.value:.5g}"
    return f"{number} {one.unit}".rstrip()


def _move(one: Setting) -> str:
    return "" if one.move is None else f"{one.move:+.4g} {one.unit}".rstrip()


def _tolerances(drifts: tuple[Drift, ...]) -> Table:
    columns = (
        Column("element", words=True),
        Column("quantity", words=True),
        Column("less", words=True),
        Column("more", words=True),
        Column("workshop", words=True),
    )
    rows = tuple(
        (
            drift.element,
            _word(drift.parameter) + (" (set by hand)" if drift.set_by_hand else ""),
            _distance(drift.below, drift.unit, "-"),
            _distance(drift.above, drift.unit, "+"),
            _distance(drift.sigma, drift.unit, "+-"),
        )
        for drift in drifts
    )
    return Table(columns, rows)


def _distance(value: float | None, unit: str, sign: str) -> str:
    return "no limit met" if value is None else f"{sign}{significant(value, 2)} {unit}".rstrip()


def _together(design: Design) -> Iterator[Paragraph]:
    all_at_once = design.together
    if all_at_once.workshop_peak_median is not None:
        yield Paragraph(
            f"with ordinary workshop errors (one standard deviation as above) half of {all_at_once.draws} "
            "builds "
            f"keep {percent(all_at_once.workshop_peak_median)} of the design's peak power, nine in ten keep "
            f"{percent(all_at_once.workshop_peak_tenth)}; {percent(all_at_once.workshop_share_kept)} of "
            "them keep "
            f"95 % (seed {all_at_once.seed}).",
            label="All together",
        )
    if all_at_once.share_of_lone is not None:
        yield Paragraph(
            f"nine builds in ten keep 95 % of the peak when everything stays within "
            f"{percent(all_at_once.share_of_lone, 2)} of what it may be off alone."
        )


def _angles(design: Design) -> Table:
    columns = (
        Column("element", words=True),
        Column("angle", words=True),
        Column("off by", "deg"),
        Column("GDD error", "fs^2"),
        Column("TOD error", "fs^3"),
        Column("FOD error", "fs^4"),
    )
    rows = tuple(
        (
            one.element,
            _word(one.parameter),
            significant(one.angle_deg, 1),
            significant(one.gdd_error_fs2, 3),
            significant(one.tod_error_fs3, 3),
            significant(one.fod_error_fs4, 3),
        )
        for one in design.angles
    )
    return Table(columns, rows)


def _data(cases: tuple[DataCase, ...]) -> Iterator[Table | Paragraph]:
    if not cases:
        return
    yield Paragraph(
        "the design under the extreme materials that the vendor's numbers still allow, as set and set anew:",
        label="If the data are off",
    )
    columns = (Column("data", words=True), Column("peak ratio"), Column("set anew"))
    rows = tuple(
        (
            case.name,
            significant(case.peak_ratio, RATIO_DIGITS),
            significant(case.peak_ratio_reset, RATIO_DIGITS),
        )
        for case in cases
    )
    yield Table(columns, rows)


def _remainder(answer: Compensation) -> Section:
    rest = answer.remainder
    text = (
        f"The spectrum that is left behind what cannot be set has a limit of {span(rest.limit_out_fs, 3)} "
        f"({span(rest.limit_in_fs, 3)} before it), and {percent(rest.transmission)} of the energy: "
        "whatever the "
        f"phase, the peak power stays below {percent(rest.peak_limit)} of the limit of the pulse that "
        "enters. "
        f"With every smooth phase taken off, {percent(rest.smooth_peak_ratio)} of the peak are left"
    )
    text += "; the rest is structure of absorption lines." if rest.smooth_peak_ratio < 0.995 else "."
    if rest.dark_nm:
        dark = ", ".join(f"{low:.1f} to {high:.1f} nm" for low, high in rest.dark_nm)
        text += f" Dark stretches of the spectrum: {dark}."
    return Section("remainder", "What no compensator can undo", (Paragraph(text),))


def _search(answer: Compensation) -> Section:
    found = answer.search
    text = (
        f"{found.choices} discrete choices; {found.refined} refined, {found.proved} excluded by a bound"
        f"{f', {found.by_phase} left out by their fitted phase' if found.by_phase else ''}; "
        f"{found.evaluations} "
        f"evaluations of the field on {found.points} points; seed {answer.seed}."
    )
    refused = [Paragraph(text) for text in found.refusals[:6]]
    return Section("search", "Search", (Paragraph(text), *refused))
