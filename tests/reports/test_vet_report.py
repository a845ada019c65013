"""The report, the page and the figure of a vetted table made by hand."""

from __future__ import annotations

import re
from dataclasses import replace
from html.parser import HTMLParser

import numpy as np
import pytest

from pulseprop.reports.draw_vet import vet_drawings
from pulseprop.reports.text import WIDTH
from pulseprop.reports.vet_numbers import factor_text, interval_text, nm_text
from pulseprop.reports.vet_page import vet_page_html
from pulseprop.reports.vet_text import vet_text
from pulseprop.vetting.result import (
    Bounds,
    ConflictRow,
    Finding,
    ImpliedUncertainty,
    RequirementAnswer,
    Vetted,
)

NM = np.array([500.0, 600.0, 700.0])
INDEX = np.array([1.52, 1.519, 1.513])


def made(**changes) -> Vetted:
    """Three rows, the middle one wrong."""
    plain = Vetted(
        file="/home/somebody/lots/lot <7>.csv",
        sha256="ab" * 32,
        date="2031-04-05",
        version="9.9",
        what="A table of n: 3 rows from 500 to 700 nm.",
        verdict="contradictory",
        headline="The printed values contradict each other: they need 12 times their uncertainties.",
        sentence="The printed values contradict each other: row 3; please check it.",
        decision_rule="Contradictory above 1.",
        uncertainty_factor=12.345678,
        certified_gap=6e-4,
        uncertainty_stated=True,
        implied_uncertainty=ImpliedUncertainty(n=1.2345678e-3, k=None, grade="That is much."),
        factor_without_conflict_rows=0.4567,
        conflict=(
            ConflictRow(
                row=2, wavelength_nm=500.0, quantity="n", weight=-0.25, value=1.52, uncertainty=1e-4
            ),
            ConflictRow(row=3, wavelength_nm=600.0, quantity="n", weight=0.5, value=1.519, uncertainty=1e-4),
            ConflictRow(
                row=4, wavelength_nm=700.0, quantity="n", weight=-0.25, value=1.513, uncertainty=1e-4
            ),
        ),
        bounds=(
            Bounds(
                wavelength_nm=600.0, index=(1.5123456, 1.5134567), gvd_fs2_per_mm=(-3.21, 40.9), reason="few."
            ),
            Bounds(wavelength_nm=650.0, reason="few."),
        ),
        requirements=(),
        findings=(
            Finding(code="aside", severity="note", text="An aside."),
            Finding(
                code="displaced", severity="error", text="Row 3 is off.", rows=(3,), repair="print 1.516",
                factor_after_repair=0.5,
            ),
        ),
        inferred=({"about": "unit", "taken": "nm", "why": "its size", "overrule": "--unit"},),
        assumptions=("It is passive.",),
        blind_spots=("a common factor",),
        curves={
            "n_nm": NM, "n": INDEX, "n_error": np.full(3, 1e-4), "n_distance": np.array([-12.0, 12.0, -12.0]),
            "n_model_nm": NM, "n_model": INDEX - np.array([-1.2e-3, 1.2e-3, -1.2e-3]),
        },
    )  # fmt: skip
    return replace(plain, **changes)


MET = RequirementAnswer(text="n_d >= 1.5", verdict="conforming", bounds=(1.51, 1.52))
UNMET = RequirementAnswer(text="gvd at 600 nm >= 90 fs^2/mm", verdict="not conforming", bounds=(-3.21, 40.9))
OPEN = RequirementAnswer(text="V_d >= 60", verdict="not decided", bounds=None, reason="no row is near")


@pytest.mark.parametrize(
    ("interval", "text"),
    [
        ((1.5123456, 1.5134567), "1.5123 to 1.5135"),
        ((-3.21, 40.9), "-4 to 41"),
        ((36.0161, 36.2831), "36.01 to 36.29"),
        ((1234.5, 9876.5), "1200 to 9900"),
        ((1.5, 1.5), "1.5 to 1.5"),
        (None, ""),
    ],
)
def test_bounds_are_rounded_outward_to_two_digits_of_their_width(interval, text):
    assert interval_text(interval) == text


def test_numbers_without_idle_digits():
    assert (nm_text(800.0), nm_text(589.3)) == ("800", "589.3")
    assert (factor_text(1.6e-6), factor_text(0.1234), factor_text(112.4)) == ("below 0.001", "0.123", "112")


def test_the_answer_comes_first_and_says_nothing_twice():
    text = vet_text([made()])
    lines = text.splitlines()
    assert lines[0].startswith("CONTRADICTORY: the printed values contradict each other")
    assert max(map(len, lines)) <= WIDTH
    assert text.index("TO OVERRULE".lower().replace("to", "To", 1)) < text.index("CAN THE NUMBERS BE TRUE?")
    assert text.index("[displaced, error]") < text.index("[aside, note]")
    assert "To mend it: print 1.516. The factor is then 0.5." in text
    assert "At 600, 650 nm: few." in text
    for fact in ("ab" * 32, "2031-04-05", "pulseprop 9.9", "Contradictory above 1.", "a common factor"):
        assert text.count(fact) == 1


def test_a_finding_that_is_the_headline_is_not_told_again():
    headline = "Row 3 is off."
    text = vet_text([made(headline=headline, sentence="")])
    assert "[displaced, error]  As said above." in text


def test_a_finding_that_is_the_sentence_to_the_supplier_is_not_told_again():
    text = vet_text([made(sentence="Something is wrong. Row 3 is off. Please comment.")])
    assert "[displaced, error]  As said above. To mend it: print 1.516." in " ".join(text.split("\n"))


def test_the_printed_proof_can_be_added_up():
    text = vet_text([made()])
    rows = [line.split() for line in text.splitlines() if re.match(r"[234] +[567]00 ", line)]
    assert [row[3] for row in rows] == ["1.520", "1.519", "1.513"]
    total = sum(float(row[5]) * (float(row[3]) - 1) for row in rows)
    size = sum(abs(float(row[5])) * float(row[4]) for row in rows)
    assert total / size == pytest.approx(12.5)


def test_places_that_are_no_rows_of_a_table_are_named():
    conflict = (
        ConflictRow(
            row=9, wavelength_nm=587.6, quantity="n", weight=1.0, place="n_d", value=1.5, uncertainty=1e-5
        ),
        ConflictRow(
            row=13, wavelength_nm=800.0, quantity="gvd, fs^2/mm", weight=-6.5432109e-6, place="gvd at 800 nm",
            value=22.7, uncertainty=0.05,
        ),
    )  # fmt: skip
    text = vet_text([made(conflict=conflict)])
    assert re.search(r"n_d +587\.6 +n +1\.5 +1e-5 ", text)
    assert re.search(r"gvd at 800 nm +800 +gvd, fs\^2/mm +22\.7 +0\.05 +-6\.5432109e-06", text)


def test_requirements_are_the_first_answer():
    fine = made(verdict="consistent", requirements=(MET,))
    assert vet_text([fine]).startswith("CONFORMING: the requirement is met.")
    assert vet_text([made(requirements=(MET,))]).startswith("CONTRADICTORY: ")
    unmet = vet_text([made(requirements=(MET, OPEN, UNMET))])
    assert unmet.startswith(
        "NOT CONFORMING: 1 of 3: gvd at 600 nm >= 90 fs^2/mm (the numbers guarantee -4 to 41)"
    )
    undecided = vet_text([made(verdict="doubtful", requirements=(MET, OPEN))])
    assert undecided.startswith("NOT DECIDED: 1 of 2: V_d >= 60")


def test_several_tables_begin_with_all_of_them():
    answers = [made(), made(file="b.csv", verdict="consistent", conflict=(), requirements=(UNMET, MET))]
    text = vet_text(answers)
    assert text.startswith("2 tables: 1 contradictory, 1 consistent; requirements: 1 not met of 2.")
    assert "1 not conforming, 1 conforming" in " ".join(text.split())


class Seen(HTMLParser):
    """Tags, identities and text of a page."""

    def __init__(self) -> None:
        super().__init__()
        self.ids: list[str] = []
        self.headings = 0
        self.text = ""

    def handle_starttag(self, tag, attrs):
        self.ids += [value for name, value in attrs if name == "id"]
        self.headings += tag == "h1"

    def handle_data(self, data):
        self.text += data


def test_a_page_of_several_tables_has_identities_of_its_own_and_no_folders():
    answers = [made(), made(requirements=(UNMET,)), made(curves={}, conflict=())]
    page = vet_page_html(answers, vet_drawings(answers))
    seen = Seen()
    seen.feed(page)
    assert len(seen.ids) == len(set(seen.ids))
    assert seen.headings == 1
    assert {"figure-table-1", "figure-table-2", "part-3"} <= set(seen.ids)
    assert "figure-table-3" not in seen.ids
    assert "lot <7>.csv" in seen.text
    assert "/home/somebody" not in page
    for fact in ("ab" * 32, "2031-04-05", "9.9", "To the supplier", "Contradictory above 1."):
        assert fact in seen.text
    assert "://" not in page.replace("http://www.w3.org/", "")


def test_rows_in_conflict_are_named_on_the_figure():
    drawing = vet_drawings([made()])[0]
    assert "row 3" in drawing.svg
    assert "ringed" in drawing.caption
    assert set(drawing.columns) >= {"n_nm", "n", "n_error", "n_distance"}


def test_a_mirror_and_an_absorption_are_drawn_too():
    mirror = made(
        conflict=(),
        findings=(Finding(code="x", severity="error", text="Off.", rows=(7,)),),
        curves={"gdd_nm": NM, "gdd": NM - 640, "gdd_row": np.array([6, 7, 8])},
    )
    ceiling = made(
        conflict=(),
        findings=(Finding(code="instrument-ceiling", severity="note", text="Up.", rows=(7,)),),
        curves={"absorbance_nm": NM, "absorbance": NM / 300, "absorbance_row": np.array([6, 7, 8])},
    )
    drawn = vet_drawings([mirror, ceiling])
    assert "ringed" in drawn[0].caption
    assert "lower limits" in drawn[1].caption
    assert list(drawn[0].columns) == ["gdd_nm", "gdd"]
