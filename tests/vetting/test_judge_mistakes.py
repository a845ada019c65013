"""Mistakes planted in true tables of catalogue media and of resonant absorbers: found, and named right."""

from __future__ import annotations

import re

import numpy as np
import pytest

from pulseprop.constants import TWO_PI_C
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.vetting.judge import judge
from pulseprop.vetting.passive import PassiveCausality
from pulseprop.vetting.reading import read_table
from pulseprop.vetting.request import Request, Stated

NM = np.linspace(450.0, 1600.0, 47)
MEDIA = ("fused silica", "SF10", "sapphire", "CaF2")
STATED = Request(uncertainty={"n": Stated(absolute=1e-5)})
ABSORBER = Request(uncertainty={"n": Stated(absolute=3e-4), "k": Stated(absolute=1e-4, relative=0.01)})
BAND_NM = np.linspace(420.0, 780.0, 61)


def judged(table, request=STATED):
    return judge(table, request, date="2026-12-01", version="0.0", causality=PassiveCausality())


def index(name, nm=NM):
    return np.real(catalogue_medium(name).index(TWO_PI_C / (nm * 1e-9)))


def gvd(name, nm=NM):
    """fs^2/mm"""
    medium = catalogue_medium(name)
    return np.array([medium.orders(TWO_PI_C / (place * 1e-9)).gvd for place in nm]) * 1e27


def absorber(seed):
    """n and k of two Lorentz lines, one in the visible: at least eight rows over its width."""
    rng = np.random.default_rng(seed)
    omega = TWO_PI_C / (BAND_NM * 1e-9)
    chi = np.full(len(omega), rng.uniform(0.6, 1.1), dtype=complex)
    for centre, width, strength in (
        (rng.uniform(540, 640), rng.uniform(0.09, 0.14), rng.uniform(0.006, 0.02)),
        (200.0, 0.02, 0.3),
    ):
        at = TWO_PI_C / (centre * 1e-9)
        chi += strength * at**2 / (at**2 - omega**2 - 1j * width * at * omega)
    refraction = np.sqrt(1 + chi)
    return refraction.real, refraction.imag


def named(vetted):
    """The first error: what the answer leads with."""
    assert vetted.verdict != "consistent", vetted.headline
    return next(finding for finding in vetted.findings if finding.severity == "error")


@pytest.mark.parametrize("name", MEDIA)
def test_a_true_table_is_consistent_with_its_medium_named_and_gvd_bounded(sent, printed, name):
    vetted = judged(sent(NM, printed("n", index(name), 5)), Request(at=(TWO_PI_C / 800e-9,)))
    assert vetted.verdict == "consistent"
    assert vetted.uncertainty_factor <= 1
    assert vetted.conflict == ()
    assert not [finding for finding in vetted.findings if finding.severity != "note"] or [
        finding.code for finding in vetted.findings if finding.severity != "note"
    ] == ["too-few-digits"]
    low, high = vetted.bounds[0].gvd_fs2_per_mm
    assert low < catalogue_medium(name).orders(TWO_PI_C / 800e-9).gvd * 1e27 < high
    assert any(f"{name} is the nearest" in finding.text for finding in vetted.findings)


@pytest.mark.parametrize("seed", range(4))
def test_a_true_absorber_is_consistent(sent, printed, seed):
    n, k = absorber(seed)
    vetted = judged(sent(BAND_NM, printed("n", n, 4), printed("k", k, 5)), ABSORBER)
    assert vetted.verdict == "consistent"


@pytest.mark.parametrize("name", MEDIA)
def test_an_index_in_reverse_order(sent, printed, name):
    vetted = judged(sent(NM, printed("n", index(name)[::-1], 5)))
    found = named(vetted)
    assert vetted.verdict == "contradictory"
    assert found.code == "reversed-order"
    assert found.factor_after_repair <= 1
    assert vetted.exit_code(strict=False) == 1
    assert vetted.sentence.startswith("The printed values contradict each other: rows ")


@pytest.mark.parametrize("name", MEDIA)
def test_without_stated_uncertainty_the_answer_leads_with_what_is_implied(sent, printed, name):
    vetted = judged(sent(NM, printed("n", index(name)[::-1], 5)), Request())
    assert vetted.headline.startswith("the printed values contradict each other: they could be true only if")
    # the reversed column can be off by no less than half of what the index varies, and by no more
    half = np.ptp(index(name)) / 2
    assert 0.5 * half < vetted.implied_uncertainty.n < 1.1 * half


@pytest.mark.parametrize("name", MEDIA)
def test_a_column_slipped_by_a_row(sent, printed, name):
    vetted = judged(sent(NM[:-1], printed("n", index(name)[1:], 6)), Request())
    assert named(vetted).code == "shifted-rows"


@pytest.mark.parametrize("row", [6, 20, 33])
def test_a_displaced_row_is_named_with_the_value_that_would_fit(sent, printed, row):
    values = index("N-BK7")
    true = values[row]
    values[row] += 7e-4
    vetted = judged(sent(NM, printed("n", values, 5)))
    found = named(vetted)
    line = row + 2
    assert (found.code, found.rows) == ("displaced-row", (line,))
    assert vetted.factor_without_conflict_rows <= 1
    assert f"row {line}" in vetted.headline
    low, high = re.search(r"room for ([0-9.]+) to ([0-9.]+)\.", found.text).groups()
    assert float(low) <= true <= float(high)


def test_two_digits_exchanged(sent, printed):
    column = printed("n", index("fused silica"), 5)
    row = 20
    assert column.cells[row] == "1.45107"  # 950 nm, Malitson 1965
    values = np.array([float(cell) for cell in column.cells])
    values[row] = 1.41507
    found = named(judged(sent(NM, printed("n", values, 5))))
    assert found.repair == "in row 22 1.45107 for 1.41507"
    assert "exchanged" in found.text


@pytest.mark.parametrize("seed", range(2))
@pytest.mark.parametrize("factor", [2.302585, 1 / 2.302585])
def test_the_wrong_logarithm(sent, printed, seed, factor):
    n, k = absorber(seed)
    vetted = judged(sent(BAND_NM, printed("n", n, 4), printed("k", factor * k, 5)), ABSORBER)
    assert vetted.uncertainty_factor > 2
    assert named(vetted).code == "wrong-logarithm"


@pytest.mark.parametrize("seed", range(2))
def test_alpha_per_micrometre_for_k(sent, printed, seed):
    n, k = absorber(seed)
    alpha = 4 * np.pi * k / (BAND_NM * 1e-3)
    found = named(judged(sent(BAND_NM, printed("n", n, 4), printed("k", alpha, 5)), ABSORBER))
    assert found.code == "absorption-quantity"
    assert "alpha in um^-1" in found.repair


@pytest.mark.parametrize("seed", range(2))
def test_n_and_k_under_each_others_heading(sent, printed, seed):
    n, k = absorber(seed)
    found = named(judged(sent(BAND_NM, printed("n", k, 5), printed("k", n, 4)), Request()))
    assert found.code == "swapped-columns"


@pytest.mark.parametrize("seed", range(2))
@pytest.mark.parametrize("which", ["n", "k"])
def test_one_of_two_columns_in_reverse_order(sent, printed, seed, which):
    n, k = absorber(seed)
    n, k = (n[::-1], k) if which == "n" else (n, k[::-1])
    found = named(judged(sent(BAND_NM, printed("n", n, 4), printed("k", k, 5)), ABSORBER))
    assert found.code == "reversed-order"
    assert found.repair == f"turn the {which} column round"


def test_absorption_beside_an_index_that_is_one_number(sent, printed):
    n, k = absorber(0)
    table = sent(BAND_NM, printed("n", np.full(len(n), 1.36), 4), printed("k", k, 5))
    vetted = judged(table, ABSORBER)
    assert vetted.verdict == "contradictory"
    assert named(vetted).code == "constant-index"


@pytest.mark.parametrize("name", MEDIA)
def test_frequencies_taken_for_wavelengths(sent, printed, name):
    terahertz = np.linspace(200.0, 650.0, 46)
    values = index(name, TWO_PI_C / (2 * np.pi * terahertz * 1e12) * 1e9)
    found = named(judged(sent(terahertz, printed("n", values, 5))))
    assert found.code == "axis-unit"
    assert found.repair == "read the axis as frequency in THz"


@pytest.mark.parametrize("name", MEDIA)
def test_micrometres_taken_for_nanometres(sent, printed, name):
    found = named(judged(sent(NM / 1000, printed("n", index(name), 5)), Request()))
    assert found.code == "axis-unit"
    assert name in found.text


@pytest.mark.parametrize("name", MEDIA)
def test_an_index_against_vacuum_of_a_medium_published_against_air(sent, printed, name):
    values = index(name) * index("air")
    vetted = judged(sent(NM, printed("n", values, 5)), Request(claimed=name))
    found = next(finding for finding in vetted.findings if finding.code == "air-vacuum")
    assert found.repair == "divide the index by that of air"
    assert any("air" in spot for spot in vetted.blind_spots)


def test_another_glass_than_the_one_named(sent, printed):
    vetted = judged(sent(NM, printed("n", index("SF10"), 5)), Request(claimed="N-BK7"))
    found = named(vetted)
    assert found.code == "not-the-claimed-medium"
    assert "SF10" in found.text


@pytest.mark.parametrize(
    ("wrong", "words"),
    [
        (lambda nm, values: 10 * values, "per cm and not per mm"),
        (lambda nm, values: -values, "sign is turned round"),
        # D = -(2 pi c / lambda^2) GVD in ps/(nm km)
        (
            lambda nm, values: -TWO_PI_C / (nm * 1e-9) ** 2 * values * 1e-27 * 1e6,
            "D in ps/(nm km)",
        ),
    ],
)
def test_a_printed_gvd_that_does_not_follow_from_the_index(sent, printed, wrong, words):
    table = sent(
        NM,
        printed("n", index("fused silica"), 6),
        printed("gvd", wrong(NM, gvd("fused silica")), 2, "fs^2/mm", 1e-27),
    )
    found = named(judged(table, Request()))
    assert found.code == "printed-gvd"
    assert words in found.repair


@pytest.mark.parametrize(
    ("title", "open_axis"),
    [
        ("sapphire window, random cut", True),
        ("sapphire", True),
        ("sapphire, c-cut", False),
        ("sapphire, ordinary ray", False),
        ("fused silica", False),
    ],
)
def test_a_crystal_whose_axis_is_not_stated_is_told_with_both(sent, printed, title, open_axis):
    # both records of the catalogue at 800 nm, from their formulas: 58.04 and 56.63 fs^2/mm
    request = Request(at=(TWO_PI_C / 800e-9,))
    vetted = judged(sent(NM, printed("n", index("sapphire"), 5), title=title), request)
    found = [one for one in vetted.findings if one.code == "orientation-open"]
    assert bool(found) is open_axis
    if found:
        assert all(number in found[0].text for number in ("58.04", "56.63"))
        assert ("is random" in found[0].text) is ("random" in title)
        assert found[0].severity == "warning"


@pytest.mark.parametrize(
    ("factor", "words"), [(1.0, None), (-1.0, "the sign is turned round"), (None, "read as GVD in fs^2/mm")]
)
def test_a_printed_dispersion_parameter_is_held_to_the_index(tmp_path, factor, words):
    orders = gvd("fused silica")  # fs^2/mm
    parameter = -orders * 1883.651567 / NM**2 * 1e3 if factor else orders  # ps/(nm km)
    path = tmp_path / "fibre.csv"
    rows = zip(NM, index("fused silica"), parameter * (factor or 1.0), strict=True)
    path.write_text(
        "wavelength (nm);n;D (ps/(nm km))\n" + "".join(f"{a:.0f};{b:.6f};{c:.3f}\n" for a, b, c in rows)
    )
    (table,) = read_table(path)
    vetted = judged(table, Request())
    if words is None:
        assert vetted.verdict == "consistent"
        return
    found = named(vetted)
    assert (found.code, "turned from the printed D" in found.text) == ("printed-gvd", True)
    assert words in found.repair


def test_the_encyclopedias_gvd_of_silica_does_not_follow_from_malitsons_index(sent, printed):
    # 35 fs^2/mm at 800 nm and -26 at 1500 nm stood in an older encyclopedia article; Malitson 1965 gives
    # 36.16 and -22.20. -26 is met near 1533 nm.
    nm = np.arange(700.0, 1651.0, 25.0)
    values = gvd("fused silica", nm)
    values[nm == 1500.0] = -26.0
    values[nm == 800.0] = 35.0
    chosen = np.isin(nm, (800.0, 1500.0))
    column = printed("gvd", np.where(chosen, values, np.nan), 1, "fs^2/mm", 1e-27)
    found = named(judged(sent(nm, printed("n", index("fused silica", nm), 6), column), Request()))
    assert found.code == "printed-gvd"
    assert len(found.rows) == 2


def test_one_wrong_gvd_among_right_ones(sent, printed):
    # a textbook prints 1500 fs^2/cm for SF10 at 800 nm, where the catalogue formula gives 1594.6
    nm = np.arange(500.0, 1301.0, 25.0)
    values = 10 * gvd("SF10", nm)
    assert values[nm == 800.0] == pytest.approx(1594.59, abs=0.01)
    values[nm == 800.0] = 1500.0
    table = sent(nm, printed("n", index("SF10", nm), 6), printed("gvd", values, 0, "fs^2/cm", 1e-28))
    found = named(judged(table, Request()))
    assert found.code == "printed-gvd"
    assert found.rows == (2 + list(nm).index(800.0),)


def test_an_abbe_number_that_does_not_follow_from_the_index(sent, printed):
    table = sent(NM, printed("n", index("N-BK7"), 5), title="melt 12, V_d = 64.17")
    assert judged(table, Request()).verdict == "consistent"
    table = sent(NM, printed("n", index("N-BK7"), 5), title="melt 12, V_d = 61.47")
    found = named(judged(table, Request()))
    assert found.code == "abbe-number"


def test_an_absorbing_table_says_what_the_slab_lets_through(sent, printed):
    n, k = absorber(1)
    request = Request(
        uncertainty=ABSORBER.uncertainty,
        require=("internal transmittance at 600 nm for 1 um >= 0.999",),
    )
    answer = judged(sent(BAND_NM, printed("n", n, 4), printed("k", k, 5)), request).requirements[0]
    at = int(np.argmin(np.abs(BAND_NM - 600)))
    assert answer.verdict == "not conforming"
    assert answer.bounds[0] < np.exp(-4 * np.pi * k[at] / 0.6) < answer.bounds[1]


def test_a_requirement_not_met_is_in_the_sentence_to_the_supplier(sent, printed):
    request = Request(require=("gvd at 800 nm >= 90 fs^2/mm", "n_d >= 1.4"))
    vetted = judged(sent(NM, printed("n", index("fused silica"), 5)), request)
    assert vetted.sentence.endswith("By your numbers gvd at 800 nm >= 90 fs^2/mm is not met; please comment.")


def test_three_decimals_are_too_few_for_the_gvd(sent, printed):
    request = Request(require=("gvd at 800 nm = 36.2 +- 0.5 fs^2/mm",))
    vetted = judged(sent(NM, printed("n", index("fused silica"), 3)), request)
    found = next(finding for finding in vetted.findings if finding.code == "too-few-digits")
    assert vetted.requirements[0].verdict == "not decided"
    # bounds of the GVD at 800 nm are 0.8 wide at +-1e-5 and 4 wide at +-1e-4 over 0.4 to 1.6 um
    assert "takes 5 decimals" in found.text or "takes 6 decimals" in found.text


def test_two_rows_at_one_wavelength_that_contradict_each_other(sent, printed):
    nm = np.insert(NM, 20, NM[20])
    values = np.insert(index("SF10"), 20, index("SF10")[20] + 2e-3)
    vetted = judged(sent(nm, printed("n", values, 5)))
    assert named(vetted).code == "double-row"
    assert vetted.verdict == "contradictory"
    assert {entry.row for entry in vetted.conflict} == {22, 23}


def test_two_rows_at_one_wavelength_imply_half_of_their_difference(sent, printed):
    place = TWO_PI_C / (NM[20] * 1e-9)
    nm = np.insert(NM, 20, NM[20])
    values = np.insert(index("SF10"), 20, index("SF10")[20] + 2e-3)
    vetted = judged(sent(nm, printed("n", values, 5)), Request(at=(place,)))
    assert vetted.implied_uncertainty.n == pytest.approx(1e-3, rel=0.01)
    assert vetted.verdict == "doubtful"  # 0.06 % of n, as interferometry of plates may miss
    low, high = vetted.bounds[0].index
    assert low < index("SF10")[20] < high
    assert high - low < 2e-3


def test_rows_that_stand_twice_are_told(sent, printed):
    nm = np.insert(NM, 20, NM[20])
    vetted = judged(sent(nm, printed("n", index("SF10", nm), 5)))
    assert vetted.verdict == "consistent"
    assert any(finding.code == "double-row" for finding in vetted.findings)


def test_noise_beyond_the_printed_digits_is_doubtful_never_contradictory(sent, printed):
    noise = np.random.default_rng(3).uniform(-2e-4, 2e-4, len(NM))
    vetted = judged(sent(NM, printed("n", index("SF10") + noise, 6)), Request())
    assert vetted.verdict == "doubtful"
    assert "true only if the index is known no better than +-" in vetted.headline
    assert vetted.implied_uncertainty.n < 2e-4
    assert "common practice" in vetted.implied_uncertainty.grade


def test_the_proof_is_checked_with_a_pocket_calculator(sent, printed):
    values = index("SF10")[::-1]
    vetted = judged(sent(NM, printed("n", values, 5)))
    row = {line: place for place, line in enumerate(range(2, 2 + len(NM)))}
    assert sum(abs(entry.weight) for entry in vetted.conflict) == pytest.approx(1)
    gained = sum(entry.weight * (round(values[row[entry.row]], 5) - 1) for entry in vetted.conflict)
    assert gained / 1e-5 == pytest.approx(vetted.uncertainty_factor, rel=3e-3)
