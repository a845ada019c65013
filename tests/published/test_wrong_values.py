"""Printed values that are wrong, sent as a buyer would send them, are found; right ones are accepted.

From `shared/published_checks.json`, each with its source there: the figures kept although they are wrong, and
the cautions. The terms of A. Bideau-Mehu et al., J. Quant. Spectrosc. Radiat. Transfer 25, 395 (1981) and of
A. Borzsonyi et al., Appl. Opt. 47, 4856 (2008), and what is misprinted in them: refractiveindex.info database
(CC0), entries main/Ne/Bideau-Mehu, main/Xe/Bideau-Mehu and main/Xe/Borzsonyi.
"""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest

from pulseprop.constants import TWO_PI_C
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.scenario.vet_files import vet_file
from pulseprop.vetting.asked import Asked

SHARED = Path(__file__).parents[2] / "shared"
CHECKS = {
    check["id"]: check
    for check in json.loads((SHARED / "published_checks.json").read_text(encoding="utf-8"))["checks"]
}
PUBLISHED = json.loads((SHARED / "published_dispersion.json").read_text(encoding="utf-8"))
C = 299792458.0


@pytest.fixture
def vetted(tmp_path):
    """The answer on a file with this text."""

    def answer(text, name="sent.toml", **options):
        path = tmp_path / name
        path.write_text(text, encoding="utf-8")
        (one,) = vet_file(path, Asked(**options), date="2026-12-01", version="0.0")
        return one

    return answer


def certificate(name, *values, orientation=""):
    """values: (quantity, text, at)."""
    lines = "\n".join(
        f'    {{ quantity = "{quantity}", value = "{text}"' + (f', at = "{at}"' if at else "") + " },"
        for quantity, text, at in values
    )
    return f'[certificate]\nname = "{name}"\norientation = "{orientation}"\nvalues = [\n{lines}\n]\n'


def formula(claimed, kind, terms, low, high):
    """terms: (strength, constant) as printed, um."""
    constant = {"gas": "resonance = {}", "sellmeier": 'resonance_squared = "{} um^2"'}[kind]
    lines = "\n".join(f"    {{ strength = {s!r}, {constant.format(repr(r))} }}," for s, r in terms)
    return (
        f'claimed = "{claimed}"\n[formula]\nkind = "{kind}"\nvalid = ["{low} um", "{high} um"]\n'
        f"terms = [\n{lines}\n]\n"
    )


def codes(answer, *severities):
    return [finding.code for finding in answer.findings if finding.severity in severities]


# Printed figures of dispersion


def test_a_textbooks_sf10_is_found_and_its_neighbours_accepted(vetted):
    _, silica, sf10 = CHECKS["B-print-Abramczyk"]["value"]
    wrong = vetted(certificate("SF10", ("gvd", f"{sf10} fs^2/cm", "800 nm")))
    assert codes(wrong, "error") == ["differs-from-catalogue"]
    assert wrong.verdict == "doubtful"
    right = vetted(certificate("fused silica", ("gvd", f"{silica} fs^2/cm", "800 nm")))
    assert right.verdict == "consistent"
    sapphire = certificate("sapphire", ("gvd", "580 fs^2/cm", "800 nm"), orientation="o")
    assert vetted(sapphire).verdict == "consistent"


def test_an_encyclopedias_silica_is_found_with_the_place_where_it_would_be_right(vetted):
    first, second = CHECKS["B-print-encyclopedia"]["value"]
    answer = vetted(
        certificate(
            "fused silica", ("gvd", f"{first} fs^2/mm", "800 nm"), ("gvd", f"{second} fs^2/mm", "1500 nm")
        )
    )
    assert codes(answer, "error") == ["differs-from-catalogue"] * 2
    text = " ".join(finding.text for finding in answer.findings)
    assert "36.162" in text
    assert "-22.197" in text
    assert "1533 nm" in text


def test_a_papers_table_made_with_a_rounded_speed_of_light_is_accepted_and_told(vetted):
    gvd, tod, fod = CHECKS["B-print-Backus-fused"]["value"]
    answer = vetted(
        certificate(
            "fused silica",
            ("gvd", f"{gvd} fs^2/cm", "800 nm"),
            ("tod", f"{tod} fs^3/cm", "800 nm"),
            ("fod", f"{fod} fs^4/cm", "800 nm"),
        )
    )
    assert answer.verdict == "consistent"
    assert "rounded-speed-of-light" in codes(answer, "note")


@pytest.mark.parametrize(
    ("speed", "decimals", "told"),
    [(3e8, 0, False), (3e8, 2, True), (2.9979e8, 2, False), (2.9979e8, 4, True)],
)
@pytest.mark.parametrize("name", ["fused silica", "N-BK7", "SF10"])
def test_a_rounded_speed_of_light_shows_only_where_the_digits_show_it(vetted, name, speed, decimals, told):
    """GVD is a derivative by wavelength over c^2: 3e8 makes it 1.4e-3 smaller, 2.9979e8 1.6e-5 larger."""
    true = catalogue_medium(name).orders(TWO_PI_C / 800e-9).gvd / 1e-27
    printed, exact = f"{true * (C / speed) ** 2:.{decimals}f}", f"{true:.{decimals}f}"
    answer = vetted(certificate(name, ("gvd", f"{printed} fs^2/mm", "800 nm")))
    assert answer.verdict == "consistent"
    assert ("rounded-speed-of-light" in codes(answer, "note")) is (printed != exact)
    assert (printed != exact) is told


# Twins of glass


@pytest.mark.parametrize(
    ("name", "twin", "own", "of_twin"),
    [("F2", "N-F2", 11.83, 0.056), ("SF10", "N-SF10", 34.1, 25.5), ("SF11", "N-SF11", 46.5, 35.9)],
)
def test_the_dispersion_of_a_lead_free_twin_is_found_though_the_index_agrees(
    vetted, name, twin, own, of_twin
):
    """GVD in fs^2/mm at 1550 nm of both (cautions); n_d is that of either within 3e-5."""
    right = vetted(certificate(name, ("gvd", f"{own} fs^2/mm", "1550 nm")))
    assert right.verdict == "consistent"
    d = catalogue_medium(name).orders(TWO_PI_C / 587.5618e-9).index
    wrong = vetted(certificate(name, ("n_d", f"{d:.4f}", None), ("gvd", f"{of_twin} fs^2/mm", "1550 nm")))
    assert wrong.verdict == "doubtful"
    (found,) = [finding for finding in wrong.findings if finding.severity == "error"]
    assert found.code == "differs-from-catalogue"
    assert twin in (found.repair or "")


# Misprinted constants of gases

XENON_2008 = ((103701.61e-8, 12.75e-3), (31228.61e-8, 0.561e-3))
XENON_1981 = ((0.00322869, 46.301), (0.00355393, 59.578), (0.0606764, 112.74))
NEON_1981 = ((0.00128145, 184.661), (0.0220486, 376.840))


@pytest.mark.parametrize(
    "text",
    [
        formula("xenon", "sellmeier", XENON_2008, 0.4, 1.0),
        formula("xenon (Bideau-Mehu 1981)", "gas", XENON_1981, 0.16, 0.6234),
        formula("neon (Bideau-Mehu 1981)", "gas", NEON_1981, 0.1404, 0.5462),
    ],
    ids=["xenon 2008", "xenon 1981", "neon 1981"],
)
def test_the_corrected_constants_are_accepted(vetted, text):
    answer = vetted(text)
    assert answer.verdict == "consistent"
    assert codes(answer, "error", "warning") == []


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (formula("xenon", "sellmeier", ((103701.61e-8, 12.75e-6), XENON_2008[1]), 0.4, 1.0), "0.01275"),
        (
            formula(
                "xenon (Bideau-Mehu 1981)",
                "gas",
                (XENON_1981[0], (0.00355393, 50.578), XENON_1981[2]),
                0.16,
                0.6234,
            ),
            "59.578",
        ),
        # 182.90 for 1.8290 makes the second strength a hundred times as large
        (
            formula("neon (Bideau-Mehu 1981)", "gas", (NEON_1981[0], (2.20486, 376.840)), 0.1404, 0.5462),
            "0.0220486",
        ),
    ],
    ids=["12.75e-6 for 12.75e-3", "50.578 for 59.578", "182.90 for 1.8290"],
)
def test_misprinted_constants_are_found_with_what_they_should_be(vetted, text, words):
    answer = vetted(text)
    assert answer.verdict != "consistent"
    assert words in " ".join(f"{finding.text} {finding.repair or ''}" for finding in answer.findings)


# Against air and against vacuum


@pytest.mark.parametrize("name", ["fused silica", "N-BK7", "SF10", "CaF2"])
def test_an_absolute_index_sent_for_a_medium_published_against_air(vetted, name):
    """All four are published relative to air (cautions)."""
    nm = np.arange(450.0, 1001.0, 10.0)
    omega = TWO_PI_C / (nm * 1e-9)
    relative = np.real(catalogue_medium(name).index(omega))
    absolute = relative * np.real(catalogue_medium("air").index(omega))
    text = "wavelength (nm),n\n" + "\n".join(f"{x:.0f},{n:.6f}" for x, n in zip(nm, absolute, strict=True))
    answer = vetted(text, "table.csv", medium=name)
    assert "air-vacuum" in codes(answer, "warning", "error")
    text = "wavelength (nm),n\n" + "\n".join(f"{x:.0f},{n:.6f}" for x, n in zip(nm, relative, strict=True))
    right = vetted(text, "table.csv", medium=name)
    assert right.verdict == "consistent"
    assert codes(right, "warning", "error") == []


def test_what_air_does_to_the_gvd_of_silica_is_told_by_the_digits(vetted):
    """36.162 against air and 36.231 against vacuum, fs^2/mm at 800 nm."""
    against_air, against_vacuum = CHECKS["B-vac-air"]["value"][:2]
    right = vetted(certificate("fused silica", ("gvd", f"{against_air:.3f} fs^2/mm", "800 nm")))
    assert codes(right, "warning", "error") == []
    other = vetted(certificate("fused silica", ("gvd", f"{against_vacuum:.3f} fs^2/mm", "800 nm")))
    assert codes(other, "warning", "error") == ["differs-from-catalogue"]


# All that is right


@pytest.mark.parametrize(
    ("name", "nm", "row"),
    [
        pytest.param(entry["medium"], nm, row, id=f"{entry['medium']} {nm} nm")
        for entry in PUBLISHED["media"]
        for nm, row in entry["rows"].items()
        if nm in ("515", "800")
    ],
)
def test_published_rows_are_accepted(vetted, name, nm, row):
    """27 formulas; 26 of them reach 800 nm."""
    gvd, tod = (f"{row[key]:.7g}" for key in ("GVD_fs2_per_mm", "TOD_fs3_per_mm"))
    answer = vetted(
        certificate(name, ("gvd", f"{gvd} fs^2/mm", f"{nm} nm"), ("tod", f"{tod} fs^3/mm", f"{nm} nm"))
    )
    assert answer.verdict == "consistent"
    assert codes(answer, "error", "warning") == []
