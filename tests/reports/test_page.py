"""The page: complete in itself, accessible, and deaf to what a hostile scenario whispers."""

from __future__ import annotations

import re
from dataclasses import replace
from html.parser import HTMLParser

import pytest

from pulseprop import api
from pulseprop.propagation.result import Caution, Run
from pulseprop.reports.figures import drawings
from pulseprop.reports.page import page_html

HOSTILE = '</title><script>alert("1")</script><img src=x onerror=alert(1)>{{ 7*7 }}'

VOID = {"meta", "br", "img", "link", "hr", "input"}


class Outline(HTMLParser):
    """Collects what the tests ask about, and checks that tags close in order."""

    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.ids: list[str] = []
        self.headings: list[str] = []
        self.links: list[str] = []
        self.tags: set[str] = set()
        self.unlabelled = 0

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        given = dict(attrs)
        self.tags.add(tag)
        if tag not in VOID:
            self.open.append(tag)
        if given.get("id"):
            self.ids.append(str(given["id"]))
        if re.fullmatch("h[1-6]", tag):
            self.headings.append(tag)
        self.links += [str(value) for name, value in attrs if name in ("src", "href", "xlink:href", "action")]
        self.unlabelled += given.get("role") == "img" and not given.get("aria-label")
        assert not any(name.startswith("on") for name in given)

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag


def outline_of(page: str) -> Outline:
    outline = Outline()
    outline.feed(page)
    assert outline.open == []
    return outline


@pytest.fixture(scope="module")
def page(run: Run) -> str:
    return page_html(run, drawings(run, [api.medium("fused silica")]))


def test_nothing_is_fetched(page: str) -> None:
    outline = outline_of(page)
    assert all(link.startswith(("#", "data:image/png")) for link in outline.links)
    assert "script" not in outline.tags
    assert not re.search(r"url\((?!#)", page)
    assert not re.search(r"@import|https?://(?!www\.w3\.org/)", page)


def test_page_stays_small(page: str) -> None:
    assert len(page.encode()) < 2_000_000


def test_ids_are_unique_and_references_arrive(page: str) -> None:
    outline = outline_of(page)
    assert len(outline.ids) == len(set(outline.ids))
    wanted = set(re.findall(r"url\(#([^)]+)\)", page)) | {
        link[1:] for link in outline.links if link[0] == "#"
    }
    assert wanted <= set(outline.ids)


def test_headings_begin_with_the_answer_and_skip_no_level(run: Run, page: str) -> None:
    # WCAG 2.2, technique G141: headings in order.
    assert outline_of(page).headings[0] == "h1"
    assert set(outline_of(page).headings) == {"h1", "h2"}
    assert f"<h1>{run.headline}</h1>" in page


def test_every_picture_has_words(page: str) -> None:
    # WCAG 2.2, success criterion 1.1.1.
    outline = outline_of(page)
    assert outline.unlabelled == 0
    assert page.count('role="img"') == page.count("<figcaption>") == 9


@pytest.mark.parametrize(
    "phrase",
    [
        "Laser radiation, in full.",
        "laser-radiation",
        "For the hazard assessment",
        "711 nm to 915 nm",
        "679 nm to 974 nm",
        "400 mW",
        "80.0 MHz",
        "IEC 60825-1",
        "ANSI Z136.1",
        "no laser class, no exposure limit and no eyewear figure",
        "no replacement for local codes and licensed practice",
        "each face reflects about 3.4 % if uncoated",
        "Invented laboratory, invented data.",
        "window.toml",
        "ab" * 32,
        "0.0.1",
        "fs<sup>2</sup>",
    ],
)
def test_page_says(page: str, phrase: str) -> None:
    assert phrase in " ".join(page.split())


def test_page_gives_no_verdict_on_hazards(page: str) -> None:
    assert not re.search(r"\bsafe\b|class [1-4][BMRC]?\b|optical density", page, re.IGNORECASE)


def test_hostile_scenarios_stay_text(run: Run) -> None:
    caution = Caution(code=HOSTILE, line=HOSTILE, text=HOSTILE)
    element = replace(run.elements[0], name=HOSTILE, detail=HOSTILE)
    medium = replace(run.media[0], name=HOSTILE, source=HOSTILE)
    hostile = replace(
        run,
        scenario=HOSTILE,
        question=HOSTILE,
        note=HOSTILE,
        file=HOSTILE,
        scenario_text=HOSTILE,
        headline=HOSTILE,
        elements=(element,),
        media=(medium,),
        warnings=(HOSTILE,),
        cautions=(caution,),
    )
    page = page_html(hostile, drawings(hostile))
    assert not {"script", "img"} & outline_of(page).tags
    assert "{{ 7*7 }}" in page


def luminance(colour: str) -> float:
    """Relative luminance of sRGB: WCAG 2.2, definition."""
    parts = [int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5)]
    linear = [part / 12.92 if part <= 0.04045 else ((part + 0.055) / 1.055) ** 2.4 for part in parts]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(one: str, other: str) -> float:
    bright, dark = sorted((luminance(one), luminance(other)), reverse=True)
    return (bright + 0.05) / (dark + 0.05)


@pytest.mark.parametrize("scheme", [0, 1])
def test_colours_can_be_read_in_light_and_in_dark(page: str, scheme: int) -> None:
    # WCAG 2.2, success criterion 1.4.3: 4.5 to 1 for text, and axis labels have the colours of their lines.
    block = re.findall(r":root \{([^}]*)\}", page)[scheme]
    colours = dict(re.findall(r"--(\w+): (#[0-9a-f]{6})", block))
    for name in ("ink", "before", "after", "warm", "green"):
        assert contrast(colours[name], colours["paper"]) >= 4.5, name
    assert contrast(colours["ink"], colours["card"]) >= 4.5
