"""The report for a person: it answers first, fits the screen, and never shows more digits than there are."""

from __future__ import annotations

from dataclasses import replace

import pytest

from pulseprop.propagation.numerals import fixed, percent, quantity, scaled, significant, span
from pulseprop.propagation.result import Run
from pulseprop.propagation.words import headline
from pulseprop.reports.text import text_report


def row_of(report: str, name: str) -> list[str]:
    return next(line for line in report.splitlines() if line.startswith(name)).split()


def test_first_line_answers_the_question(run: Run) -> None:
    assert text_report(run).splitlines()[0] == run.headline


def test_no_line_is_wider_than_110_columns(run: Run) -> None:
    long = replace(run.elements[0], name="a very long name of an element that " * 4)
    report = text_report(replace(run, elements=(long, *run.elements)))
    assert max(map(len, report.splitlines())) <= 110


def test_rows_carry_the_digits_of_their_data_and_sums_those_of_their_coarsest_term(run: Run) -> None:
    report = text_report(run)
    assert "108.5" in row_of(report, "cryostat window")
    assert "108.46" not in report
    # 141.5433 known to two digits is 140, and the sum 250.0 is then known to tens.
    objective = row_of(report, "objective")
    assert "140" in objective
    assert "250" in objective
    assert "250.0" not in report


def test_textbook_estimate_stands_beside_the_total(run: Run) -> None:
    # 12 fs and 250 fs^2: 59.0 fs by the closed form; two digits because of the objective.
    assert "FWHM sqrt(1 + (4 ln2 GDD / FWHM^2)^2) = 59 fs" in " ".join(text_report(run).split())


def test_numbers_line_up_on_their_points(run: Run) -> None:
    whole = [replace(element, digits=4) for element in run.elements]
    lines = [
        line
        for line in text_report(replace(run, elements=tuple(whole))).splitlines()
        if line.startswith(("FWHM, outer", "RMS width"))
    ]
    assert len({line.index(".") for line in lines}) == 1


@pytest.mark.parametrize(
    "phrase",
    [
        "[laser-radiation]",
        "Left out of the front test",
        "objective",
        "0.011 of the energy ahead of the front, acausal",
        "noise floor of the test 1.0e-28",
        "I. H. Malitson (1965); temperature: 20 degC; valid 210 nm to 3710 nm; index against air",
        "fused silica (Arosa 2020) 35.86",
        "|GDD| = 302 fs^2",
        "5.0 mm of fused silica",
        "92.0 fs means positive GDD, one of 38.0 fs negative",
        "+ 0 (reshaping by absorption)",
        "the objective is known by two orders only",
        "Invented laboratory, invented data.",
    ],
)
def test_report_says(run: Run, phrase: str) -> None:
    assert phrase in " ".join(text_report(run).split())


def test_ringing_and_splitting_are_said_aloud(run: Run) -> None:
    rings = replace(run.pulse_out, split=True, energy_after=0.0078)
    report = " ".join(text_report(replace(run, pulse_out=rings)).split())
    assert "The pulse splits" in report
    assert "0.78 % of its energy comes later than three FWHM after the peak" in report
    assert "splits" not in text_report(run)


def test_what_has_no_answer_is_a_dash(run: Run) -> None:
    unknown = replace(run.elements[0], gdd_fs2=None, gdd_sum_fs2=None)
    assert "–" in row_of(text_report(replace(run, elements=(unknown,))), "cryostat window")


@pytest.mark.parametrize("share", [0.0661, 0.9924, 0.99949, 0.9999985, 1.0])
def test_opening_and_tables_tell_a_share_alike(run: Run, share: float) -> None:
    after = replace(run.pulse_out, peak_ratio=share)
    told = replace(run, headline=headline(run.pulse_in, after, run.path), pulse_out=after)
    lines = [line for line in " ".join(text_report(told).split()).split(". ") if "peak power " in line]
    assert f"{percent(share, 2)} of the peak power" in told.headline
    assert any(f"peak power {percent(share, 2)}," in line for line in lines)


def test_durations_of_a_size_share_their_unit(run: Run) -> None:
    def opening(before: float, after: float) -> str:
        widths = replace(run.pulse_in, fwhm_fs=before), replace(run.pulse_out, fwhm_fs=after)
        return headline(*widths, run.path)

    assert opening(1013.2, 988.2).startswith("0.988 ps at the end of the path against 1.01 ps at its start;")
    assert opening(12.0, 2500.0).startswith("2.5 ps at the end of the path against 12 fs at its start;")


def test_what_the_scenario_expects_stands_below_its_question(run: Run) -> None:
    lines = text_report(replace(run, answer="About 59 fs.")).splitlines()
    assert lines.index("Expected: About 59 fs.") == lines.index("Asked: How long is it?") + 1
    assert "Expected" not in text_report(run)
    assert replace(run, answer="About 59 fs.").as_json()["answer"] == "About 59 fs."


def test_loads_that_differ_by_rounding_are_everywhere(run: Run) -> None:
    first, second = run.elements
    report = " ".join(text_report(run).split())
    assert "Highest peak fluence: 5.1e-8 J/cm^2, everywhere." in report
    close = replace(second, peak_fluence_J_per_cm2=5.1e-8 * (1 + 1e-13), peak_intensity_W_per_cm2=3e6)
    report = " ".join(text_report(replace(run, elements=(first, close))).split())
    assert "J/cm^2, everywhere. Highest peak intensity: 4.0e6 W/cm^2, in cryostat window." in report
    focused = replace(second, peak_fluence_J_per_cm2=5.2e-8)
    assert "5.2e-8 J/cm^2, in objective." in " ".join(
        text_report(replace(run, elements=(first, focused))).split()
    )


def test_at_a_line_centre_orders_say_little(run: Run) -> None:
    on_line = replace(run, path=replace(run.path, gdd_only_fwhm_fs=None))
    report = " ".join(text_report(on_line).split())
    assert "orders at a line centre say little: look at the delays and curves" in report
    assert "Group delay at the pulse's centre, where a line stands" in report
    unknown = replace(run, path=replace(run.path, gdd_only_fwhm_fs=None, gdd_fs2=None))
    assert "line centre" not in text_report(unknown)


def test_nothing_to_test_is_no_fault_of_the_window(run: Run) -> None:
    remark = "no matter in the path to which the front test applies"
    idle = replace(
        run.causality, verdict="unresolved", remark=remark, front_points=0, energy_ahead_of_front=None
    )
    report = " ".join(text_report(replace(run, causality=idle)).split())
    assert f"Unresolved: {remark}." in report
    assert report.count("no matter in the path") == 1
    assert "window" not in report[report.index("CAUSALITY") : report.index("MEDIA")]


def test_long_waves_have_a_frequency(run: Run) -> None:
    # 1 THz is 299.792458 um: SI, definition of the metre.
    long = replace(run.pulse_out, centre_nm=299792.458)
    report = text_report(replace(run, pulse_in=long, pulse_out=long))
    assert row_of(report, "centre (mean")[-3:] == ["1.000", "1.000", "THz"]
    assert row_of(report, "its vacuum")[-3:] == ["299.8", "299.8", "um"]
    assert row_of(text_report(run), "centre (mean")[-1] == "nm"


def test_empty_path(run: Run) -> None:
    assert "The path is empty" in text_report(replace(run, elements=(), media=()))


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (36.1649, 4, "36.16"),
        (1234.5, 2, "1200"),
        (0.000123456, 3, "0.000123"),
        (9.996, 3, "10.0"),
        (1.2e-9, 2, "1.2e-9"),
        (-289_000.4, 3, "-289000"),
        (6.966e13, 4, "6.966e13"),
        (999_999.6, 6, "1.00000e6"),
        (0.0, 3, "0"),
        (-0.04, 1, "-0.04"),
        (None, 3, "–"),
        (float("nan"), 3, "–"),
    ],
)
def test_significant_digits(value: float | None, digits: int, text: str) -> None:
    assert significant(value, digits) == text


def test_rounding_to_zero_has_no_sign() -> None:
    assert fixed(-0.004, -1) == "0.0"


def test_long_sums_have_an_exponent() -> None:
    assert fixed(69_660_000_000_000.0, 10) == "6.966e13"


@pytest.mark.parametrize(
    ("share", "text"),
    [
        (1.0, "100 %"),
        (0.93261, "93.3 %"),
        (0.9924, "99.24 %"),
        (0.99993, "99.99 %"),
        (0.999951, "100 %"),
        (0.9999985, "100 %"),
        (1 - 1e-13, "100 %"),
        (1.25, "125 %"),
        (0.0661, "6.61 %"),
        (3.2e-7, "3.20e-5 %"),
    ],
)
def test_shares_near_the_whole_keep_what_is_missing(share: float, text: str) -> None:
    assert percent(share) == text


def test_units_of_readable_size() -> None:
    assert quantity(391432.2, "W") == "391 kW"
    assert quantity(5e-9, "J") == "5.00 nJ"
    assert quantity(999.9e3, "W") == "1.00 MW"
    assert span(12345.6, 4) == "12.35 ps"
    assert span(4.9e6, 2) == "4.9 ns"
    assert scaled([12.0, 181.6])[0] == scaled([5.0, 1500.0])[0] == "fs"
    assert scaled([1013.0, 988.0])[0] == scaled([425.7, 5098.0])[0] == "ps"


def test_a_scenario_cannot_steer_the_terminal(run: Run) -> None:
    report = text_report(replace(run, scenario="\x1b]0;owned\x07\x9b2J", note="\x1b[2J"))
    assert not set(report) & {"\x1b", "\x07", "\x9b"}
