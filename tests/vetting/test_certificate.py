"""Printed numbers alone.

Wrong and right figures of print: dispersion per cm at 800 nm of Ti:sapphire, fused silica and SF10 in H.
Abramczyk, Introduction to Laser Spectroscopy (Elsevier, 2005), p. 107 (text seen); GVD of silica 35 and -26
fs^2/mm at 800 and 1500 nm in an older encyclopedia article, as quoted on a web page (seen); GDD, TOD and FOD
of 1 cm of fused silica at 800 nm in S. Backus et al., Rev. Sci. Instrum. 69, 1207 (1998) (from memory, all
digits reproduced with c = 2.9979e8 m/s). n_d and V_d: SCHOTT catalogue 2017. Orders: computed with 60 digits
from the published formulas (shared/published_dispersion.json).
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.vetting.certificate import judge_certificate
from pulseprop.vetting.certificate_functionals import Term, constant_values, values
from pulseprop.vetting.certificate_proof import KnownRow, Printed
from pulseprop.vetting.certificate_values import Certificate, half_unit, printed_value
from pulseprop.vetting.request import Request

C = 299792458.0


def omega(nm: float) -> float:
    return 2 * np.pi * C / (nm * 1e-9)


def judged(name, *printed, request=None, **more):
    """printed: (quantity, value as text, at, uncertainty)."""
    numbers = tuple(
        printed_value(quantity, text, at=at, uncertainty=uncertainty, line=line)
        for line, (quantity, text, at, uncertainty) in enumerate(printed, start=1)
    )
    sheet = Certificate(file="sheet.toml", sha256="0", name=name, values=numbers, **more)
    return judge_certificate(sheet, request or Request(), date="2026-01-01", version="0")


def codes(vetted, severity=None):
    return [finding.code for finding in vetted.findings if severity in (None, finding.severity)]


# What is printed


@pytest.mark.parametrize(
    ("number", "half"),
    [
        ("1.51680", 5e-6),
        ("64.17", 5e-3),
        ("35", 0.5),
        ("1500", 50),
        ("1500.", 0.5),
        ("360", 5),
        ("0", 0.5),
        ("1.20e-3", 5e-6),
        ("-114.35", 5e-3),
        ("12e2", 50),
    ],
)
def test_digits_state_half_a_unit_of_the_last_place(number, half):
    assert half_unit(number) == pytest.approx(half, rel=1e-12)


def test_values_keep_unit_digits_and_place():
    value = printed_value("gvd", "1500 fs^2/cm", at="800 nm")
    assert (value.value, value.error) == pytest.approx((150e-27, 5e-27))
    assert value.omega == pytest.approx(omega(800))
    assert not value.stated
    stated = printed_value("n_d", "1.51680", uncertainty="2e-5")
    assert (stated.error, stated.stated) == (2e-5, True)
    assert printed_value("V_d", "64.17", uncertainty="0.5 %").error == pytest.approx(0.32085)
    # No statement makes a number better than its print.
    assert printed_value("V_d", "64", uncertainty="0.1").error == pytest.approx(0.6)


@pytest.mark.parametrize(
    ("quantity", "text", "at", "said"),
    [
        ("gvd", "44.7 fs^2/mm", None, "wavelength of gvd is missing"),
        ("gvd", "44.7 fs^3/mm", "800 nm", "expected a group velocity dispersion"),
        ("n_d", "1.5168", "800 nm", "takes no wavelength"),
        ("n_d", "glass", None, "expected one number"),
        ("index", "1.5 mm", "800 nm", "has no unit"),
        ("index", "1e999", "800 nm", "not finite"),
    ],
)
def test_what_is_no_printed_number_is_told(quantity, text, at, said):
    with pytest.raises(InputError, match=said):
        printed_value(quantity, text, at=at)


# Linear functionals


@pytest.mark.parametrize("order", ["index", "group index", "gvd", "tod", "fod"])
def test_functionals_are_derivatives_of_the_wave_number(order):
    """Of one mass: against derivatives of omega n / c by mpmath."""
    mpmath = pytest.importorskip("mpmath")
    place, at = 1.6, 1.0
    wave = lambda w: w * (w * 0 + 1 / (mpmath.mpf(place) ** 2 - w**2))  # noqa: E731
    derivative = {"index": 0, "group index": 1, "gvd": 2, "tod": 3, "fod": 4}[order]
    expected = float(mpmath.diff(wave, at, derivative)) if derivative else float(wave(mpmath.mpf(at)) / at)
    if derivative > 1:
        expected /= C
    found = values([Term(order=order, omega=at)], np.array([place]))[0]
    assert found == pytest.approx(expected, rel=1e-12)
    assert constant_values([Term(order=order, omega=at)]) == (1.0 if derivative < 2 else 0.0)


def rows(name, nms, digits):
    medium = catalogue_medium(name)
    return [
        KnownRow(
            terms=(Term(order="index", omega=omega(nm)),),
            value=round(medium.orders(omega(nm)).index, digits) - 1,
            error=0.5 * 10.0**-digits,
        )
        for nm in nms
    ]


@pytest.mark.parametrize("name", ["fused silica", "N-BK7", "SF10", "sapphire", "CaF2"])
@pytest.mark.parametrize("digits", [4, 5])
def test_true_values_lie_inside_all_bounds(name, digits):
    proof = Printed(
        rows(name, (486.1327, 546.074, 587.5618, 656.2725, 852.1, 1030), digits), (omega(1100), omega(450))
    )
    assert proof.least_factor.factor <= 1
    for nm in (500, 620, 800, 1000):
        orders = catalogue_medium(name).orders(omega(nm))
        for order, true in (
            ("index", orders.index - 1),
            ("group index", orders.group_index - 1),
            ("gvd", orders.gvd),
            ("tod", orders.tod),
        ):
            low, high = proof.interval([Term(order=order, omega=omega(nm))], 1.0)
            assert low <= true <= high


def test_bounds_bracket_the_gvd_as_tried_before():
    """Fused silica to +-1e-5 over 0.4 to 1.6 um brackets 36.16 fs^2/mm at 800 nm within about a per cent."""
    proof = Printed(rows("fused silica", np.linspace(400, 1600, 61), 5), (omega(1600), omega(400)))
    low, high = proof.interval([Term(order="gvd", omega=omega(800))], 1.0)
    assert low < 36.1619983e-27 < high
    assert high - low < 1e-27


def test_proof_can_be_checked_by_hand():
    """sum w_i f_i <= 0 for every mass and for the constant, and the factor is that of the weights."""
    wrong = rows("N-BK7", (486.1327, 587.5618, 656.2725, 800), 5)
    wrong[1] = KnownRow(terms=wrong[1].terms, value=wrong[1].value + 2e-4, error=wrong[1].error)
    proof = Printed(wrong, (omega(900), omega(450)))
    least = proof.least_factor
    assert least.factor > 5
    weights = least.weights
    everywhere = np.concatenate(
        (np.linspace(0, 0.9999999, 4001) * omega(900), omega(450) / np.linspace(1e-4, 0.9999999, 4001))
    )
    rows_there = np.array([values(row.terms, everywhere) for row in wrong])
    total = weights @ rows_there
    assert np.all(
        np.sign(total[np.argmax(np.abs(total))]) * total
        >= -1e-5 * np.max(np.abs(weights) @ np.abs(rows_there))
    )
    of_data = abs(float(weights @ [row.value for row in wrong]))
    assert of_data / float(np.abs(weights) @ [row.error for row in wrong]) == pytest.approx(
        least.factor, rel=1e-4
    )


# Against the catalogue


def test_a_handbook_value_for_sf10_that_is_wrong():
    vetted = judged("SF10", ("gvd", "1500 fs^2/cm", "800 nm", None))
    assert vetted.verdict == "doubtful"
    (finding,) = [entry for entry in vetted.findings if entry.severity == "error"]
    assert finding.code == "differs-from-catalogue"
    assert "1500 fs^2/cm" in finding.text
    assert "1594.587" in finding.text
    assert "does not follow" in finding.text
    assert "1500" in vetted.sentence


@pytest.mark.parametrize(
    ("name", "text"), [("fused silica", "360 fs^2/cm"), ("sapphire", "580 fs^2/cm"), ("SF10", "1590 fs^2/cm")]
)
def test_handbook_values_that_agree_to_rounding(name, text):
    vetted = judged(name, ("gvd", text, "800 nm", None), orientation="o" if name == "sapphire" else "")
    assert vetted.verdict == "consistent"
    assert "agrees-with-catalogue" in codes(vetted)


def test_encyclopedia_values_of_silica_do_not_follow():
    vetted = judged(
        "fused silica", ("gvd", "35 fs^2/mm", "800 nm", None), ("gvd", "-26 fs^2/mm", "1500 nm", None)
    )
    assert codes(vetted, "error") == ["differs-from-catalogue"] * 2
    assert "-22.19799" in vetted.findings[1].text
    assert "1533 nm" in vetted.findings[1].text


def test_a_table_made_with_a_rounded_speed_of_light_is_right_in_its_digits():
    vetted = judged(
        "fused silica",
        ("gvd", "361.626 fs^2/cm", "800 nm", None),
        ("tod", "274.979 fs^3/cm", "800 nm", None),
        ("fod", "-114.35 fs^4/cm", "800 nm", None),
    )
    assert vetted.verdict == "consistent"
    rounded = [entry for entry in vetted.findings if entry.code == "rounded-speed-of-light"]
    assert len(rounded) == 2
    assert all("2.9979e+08" in entry.text for entry in rounded)


@pytest.mark.parametrize(
    ("name", "printed", "repair"),
    [
        ("SF10", ("gvd", "1565 fs^2/cm", "800 nm", None), "that of N-SF10"),
        ("SF10", ("gvd", "159.5 fs^2/cm", "800 nm", None), "per mm and not per cm"),
        ("SF10", ("gvd", "1082 fs^2/cm", "800 nm", None), "another wavelength, 1030 nm"),
        ("SF10", ("gvd", "79.7 fs^2/mm", "800 nm", None), "2 times smaller"),
        ("N-BK7", ("gvd", "-44.65 fs^2/mm", "800 nm", None), "the other sign"),
        ("fused silica", ("gvd", "21.91 fs^2/mm", "1550 nm", None), "D in ps/(nm km)"),
        ("fused silica", ("group index", "1.4533", "800 nm", None), "the index and not the group index"),
        ("fused silica", ("index", "1.4671", "800 nm", None), "the group index"),
        ("N-BK7", ("n_d", "1.51722", None, None), "against vacuum and not against air"),
    ],
)
def test_the_column_that_a_number_was_copied_from_is_named(name, printed, repair):
    vetted = judged(name, printed)
    assert any(finding.repair and repair in finding.repair for finding in vetted.findings), vetted.findings


def test_zero_dispersion_wavelength_of_the_formula():
    # Root of d2n/dL2 of Malitson's formula: 1.27275393 um (60 digits).
    assert (
        judged("fused silica", ("zero dispersion wavelength", "1.2728 um", None, None)).verdict
        == "consistent"
    )
    assert "error" in {
        f.severity
        for f in judged("fused silica", ("zero dispersion wavelength", "1.31 um", None, None)).findings
    }


def test_names_are_exact():
    vetted = judged("BK7", ("n_d", "1.51680", None, None))
    (finding,) = vetted.findings
    assert finding.code == "not-in-catalogue"
    assert "N-BK7" in finding.text


def test_a_crystal_without_orientation_is_told_with_both_axes():
    vetted = judged("sapphire", ("gvd", "58.0 fs^2/mm", "800 nm", None), orientation="random")
    (finding,) = [entry for entry in vetted.findings if entry.code == "orientation-open"]
    # 58.04 and 56.63 fs^2/mm: both records, from their formulas.
    assert "58.04" in finding.text
    assert "56.63" in finding.text
    assert "is random" in finding.text
    assert (
        judged("sapphire", ("gvd", "56.6 fs^2/mm", "800 nm", None), orientation="e").verdict == "consistent"
    )
    assert "orientation-open" not in codes(
        judged("sapphire", ("gvd", "58.0 fs^2/mm", "800 nm", None), orientation="o")
    )


# Against each other

CROWN = (
    ("n_d", "1.51680", None, "1e-5"),
    ("V_d", "64.17", None, "0.02"),
    ("index", "1.51078", "800 nm", "1e-5"),
    ("index", "1.50709", "1030 nm", "1e-5"),
)
BAND = (omega(2500), omega(300))


def test_a_true_certificate_of_no_known_glass_is_consistent():
    vetted = judged("melt 77", *CROWN, ("gvd", "44.7 fs^2/mm", "800 nm", "0.1 fs^2/mm"), transparent=BAND)
    assert vetted.verdict == "consistent"
    assert vetted.uncertainty_factor <= 1
    assert vetted.uncertainty_stated


@pytest.mark.parametrize(
    ("printed", "repair"),
    [
        (("gvd", "25.1 fs^2/mm", "800 nm", "0.1 fs^2/mm"), "another wavelength, 1030 nm"),
        (("gvd", "447 fs^2/mm", "800 nm", "0.5 fs^2/mm"), "per cm and not per mm"),
        (("gvd", "-44.7 fs^2/mm", "800 nm", "0.1 fs^2/mm"), "the other sign"),
        (("gvd", "22.3 fs^2/mm", "800 nm", "0.1 fs^2/mm"), "2 times smaller"),
    ],
)
def test_a_wrong_number_is_found_and_its_origin_named(printed, repair):
    vetted = judged("melt 77", *CROWN, printed, transparent=BAND)
    assert vetted.verdict == "contradictory"
    assert vetted.uncertainty_factor > 2
    named = [entry for entry in vetted.findings if entry.code == "does-not-follow"]
    assert named[0].rows == (5,)
    assert repair in named[0].repair


def test_explanations_are_ordered_by_how_exactly_they_hit_and_nothing_is_said_three_times():
    # twice the number lies in what the others leave at 800 nm, 44.47 to 45.87 fs^2/mm; at 1064 nm, near the
    # last of them, they leave 1.4 to 24.7, into which much falls by chance
    printed = (
        ("n_d", "1.51676", None, None),
        ("n_F", "1.52238", None, None),
        ("n_C", "1.51426", None, None),
        ("V_d", "63.70", None, None),
        ("index", "1.50654", "1064 nm", None),
        ("gvd", "22.7 fs^2/mm", "800 nm", None),
    )
    vetted = judged("melt 78", *printed, transparent=(omega(1800), omega(380)))
    found = next(entry for entry in vetted.findings if entry.code == "does-not-follow")
    order = [found.repair.index(words) for words in ("2 times smaller", "1064 nm (where the others leave")]
    assert order == sorted(order)
    assert found.text in vetted.sentence
    assert "25 times" in vetted.findings[0].text
    assert "25 times" not in vetted.headline + vetted.sentence


def test_the_conflict_of_a_certificate_can_be_added_up_in_printed_units():
    gvd = ("gvd", "25.1 fs^2/mm", "800 nm", "0.1 fs^2/mm")
    vetted = judged("melt 77", *CROWN, gvd, transparent=BAND)
    conflict = vetted.conflict
    assert sum(abs(entry.weight) for entry in conflict) == pytest.approx(1)
    less = [1.0 if entry.quantity in ("n", "group index") else 0.0 for entry in conflict]
    total = sum(e.weight * (e.value - one) for e, one in zip(conflict, less, strict=True))
    size = sum(abs(e.weight) * e.uncertainty for e in conflict)
    assert total / size == pytest.approx(vetted.uncertainty_factor, rel=1e-6)
    by_place = {entry.place: entry for entry in conflict}
    assert by_place["gvd at 800 nm"].value == pytest.approx(25.1)
    assert by_place["gvd at 800 nm"].quantity == "gvd, fs^2/mm"
    # the sum is below 0 for matter that exists: a published crown, V_d entering as its difference
    medium = catalogue_medium("N-BK7")
    d, f, c = (medium.orders(omega(nm)).index for nm in (587.5618, 486.1327, 656.2725))
    known = {
        "n_d": d - 1,
        "V_d": d - 1 - 64.17 * (f - c),
        "gvd at 800 nm": medium.orders(omega(800)).gvd / 1e-27,
    }
    for nm in (800, 1030):
        known[f"index at {nm} nm"] = medium.orders(omega(nm)).index - 1
    assert sum(entry.weight * known[entry.place] for entry in conflict) < 0.01 * total
    assert judged("melt 77", *CROWN, transparent=BAND).conflict == ()


def test_an_abbe_number_that_does_not_follow_from_the_lines():
    lines = (("n_d", "1.51680", None, None), ("n_F", "1.52238", None, None), ("n_C", "1.51432", None, None))
    assert judged("melt 77", *lines, ("V_d", "64.1", None, None)).uncertainty_factor <= 1
    wrong = judged("melt 77", *lines, ("V_d", "61.4", None, None))
    assert wrong.uncertainty_factor > 5
    assert any("V_d" in finding.text for finding in wrong.findings if finding.severity == "error")


def test_rounding_alone_is_never_contradictory():
    vetted = judged(
        "melt 77",
        *((*entry[:3], None) for entry in CROWN),
        ("gvd", "44.1 fs^2/mm", "800 nm", None),
        transparent=BAND,
    )
    assert vetted.verdict != "contradictory"


def test_what_was_not_stated_is_told_first_and_does_not_make_a_contradiction_alone():
    vetted = judged("melt 77", *CROWN, ("gvd", "44.7 fs^2/mm", "800 nm", "0.1 fs^2/mm"))
    assert [entry["about"] for entry in vetted.inferred] == ["transparent band"]


@pytest.mark.parametrize(
    "glass", ["N-BK7", "SF10", "N-SF11", "F2", "fused silica", "CaF2", "N-LAK21", "sapphire"]
)
def test_certificates_made_from_published_formulas_are_never_doubted(glass):
    medium = catalogue_medium(glass)
    d, f, c = (medium.orders(omega(nm)).index for nm in (587.5618, 486.1327, 656.2725))
    at = medium.orders(omega(800))
    vetted = judged(
        glass,
        ("n_d", f"{d:.5f}", None, None),
        ("V_d", f"{(d - 1) / (f - c):.2f}", None, None),
        ("gvd", f"{at.gvd / 1e-27:.2f} fs^2/mm", "800 nm", None),
        ("tod", f"{at.tod / 1e-42:.1f} fs^3/mm", "800 nm", None),
        ("group index", f"{at.group_index:.4f}", "800 nm", None),
    )
    assert vetted.verdict == "consistent", vetted.findings
    assert vetted.uncertainty_factor <= 1


def test_requirements_and_bounds_from_a_certificate():
    request = Request(
        at=(omega(800),),
        require=(
            "gvd at 800 nm = 44.6 +- 1 fs^2/mm",
            "V_d >= 65",
            "tod at 800 nm = 32 +- 0.1 fs^3/mm",
            "gdd at 800 nm = -40 +- 5 fs^2",
        ),
    )
    vetted = judged("melt 77", *CROWN, transparent=BAND, request=request)
    assert [answer.verdict for answer in vetted.requirements] == [
        "conforming",
        "not conforming",
        "not decided",
        "not decided",
    ]
    (bounds,) = vetted.bounds
    assert bounds.gvd_fs2_per_mm[0] < 44.65 < bounds.gvd_fs2_per_mm[1]
    assert vetted.exit_code(strict=False) == 1
