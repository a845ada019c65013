"""Coefficient files as functions over their range.

Sources: I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965); SCHOTT catalogue 2017 (N-BK7); A. Borzsonyi et al.,
Appl. Opt. 47, 4856 (2008) with its misprint 12.75e-6 for 12.75e-3 (told in the open data set); A. Bideau-Mehu
et al., J. Quant. Spectrosc. Radiat. Transfer 25, 395 (1981) with 50.578 for 59.578. The three-term Cauchy fit
of fused silica over 0.4 to 1.6 um needs some 26 times 5e-5 (an own trial with another programme: 25.6).
The stand-in for the causality tests is the small programme that certificates use.
"""

from __future__ import annotations

import json
from dataclasses import replace

import numpy as np
import pytest

from pulseprop.material.catalogue import names, record
from pulseprop.vetting.causal import Standing
from pulseprop.vetting.certificate_functionals import Term
from pulseprop.vetting.certificate_proof import KnownRow, Printed
from pulseprop.vetting.certificate_values import printed_value
from pulseprop.vetting.formula_sheet import FormulaSheet, PrintedTerm
from pulseprop.vetting.formula_sheet_judge import judge_formula
from pulseprop.vetting.formula_sheet_samples import places, settled_factor
from pulseprop.vetting.passive import PassiveCausality
from pulseprop.vetting.request import Request
from pulseprop.vetting.result import Bounds

C = 299792458.0
SILICA = ((0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161))
CROWN = ((1.03961212, 0.00600069867), (0.231792344, 0.0200179144), (1.01046945, 103.560653))
XENON = ((103701.61e-8, 12.75e-3), (31228.61e-8, 0.561e-3))


def omega(um: float) -> float:
    return 2 * np.pi * C / (um * 1e-6)


class ByPrinted:
    """Rows of the index against materials that absorb nothing between the first and the last."""

    def _proof(self, data):
        rows = [
            KnownRow(
                terms=(Term(order="index", omega=float(at)),), value=float(index - 1), error=float(error)
            )
            for at, index, error in zip(data.omega, data.index, data.index_error, strict=True)
        ]
        return Printed(rows, (float(data.omega[0]), float(data.omega[-1])))

    def standing(self, data, *, thorough):
        return Standing(factor=self._proof(data).least_factor.factor)

    def bounds(self, data, omega):
        proof = self._proof(data)
        return [
            Bounds(
                wavelength_nm=2e9 * np.pi * C / at,
                gvd_fs2_per_mm=tuple(
                    end / 1e-27 for end in proof.interval((Term(order="gvd", omega=float(at)),), 1.0)
                ),
            )
            for at in omega
        ]


def sheet(terms, um, *, kind="sellmeier", squared=True, check=(), **more):
    return FormulaSheet(
        file="formula.toml",
        sha256="0",
        name="as sent",
        kind=kind,
        terms=tuple(PrintedTerm(strength=s, constant=c, squared=squared) for s, c in terms),
        valid=(omega(um[1]), omega(um[0])),
        check=tuple(printed_value(quantity, text, at=at) for quantity, text, at in check),
        **more,
    )


def judged(formula, request=None):
    return judge_formula(formula, request or Request(), date="2026-01-01", version="0", causality=ByPrinted())


def codes(vetted, severity=None):
    return [finding.code for finding in vetted.findings if severity in (None, finding.severity)]


def repairs(vetted):
    return [finding.repair for finding in vetted.findings if finding.code == "misprint"]


# What is right


@pytest.mark.parametrize(
    "formula",
    [
        sheet(SILICA, (0.21, 3.71), squared=False, claimed="fused silica"),
        sheet(CROWN, (0.3, 2.5), claimed="N-BK7"),
        sheet(XENON, (0.4, 1.0), claimed="xenon"),
    ],
    ids=["fused silica", "N-BK7", "xenon"],
)
def test_published_formulas_pass(formula):
    vetted = judged(formula)
    assert vetted.verdict == "consistent"
    assert vetted.uncertainty_factor < 0.01
    assert not codes(vetted, "error")
    assert not codes(vetted, "warning")
    json.dumps(vetted.as_json())


def _of_record(name):
    entry = record(name)
    low, high = entry.valid_um
    terms = tuple(PrintedTerm(strength=s, constant=c) for s, c in entry.terms)
    return FormulaSheet(
        file="", sha256="", name=name, kind=entry.kind, terms=terms, offset=entry.offset,
        valid=(omega(high), omega(low)), claimed=name,
    )  # fmt: skip


GLASSES = [
    name
    for name in names()
    if record(name).kind in ("sellmeier", "gas")
    and record(name).terms
    and not (record(name).pole_terms or record(name).power_terms)
    and all(strength > 0 for strength, _ in record(name).terms)
    and np.isfinite(record(name).valid_um[1])
]


@pytest.mark.parametrize("name", GLASSES[::6])
def test_catalogue_formulas_pass(name):
    vetted = judged(_of_record(name))
    assert vetted.verdict == "consistent", vetted.findings


def test_the_factor_does_not_depend_on_the_samples():
    found = settled_factor(_cauchy(5e-5), ByPrinted(), thorough=False)
    assert found.change < 0.01
    coarse, fine = places(_cauchy(5e-5), 32), places(_cauchy(5e-5), 64)
    assert np.allclose(coarse, fine[::2], rtol=1e-14)


# What is wrong


def _cauchy(error, **more):
    um = np.linspace(0.4, 1.6, 241)
    index = np.sqrt(1 + sum(s * um**2 / (um**2 - r**2) for s, r in SILICA))
    first, second, third = np.linalg.lstsq(np.stack([um**0, um**-2.0, um**-4.0], 1), index, rcond=None)[0]
    return sheet(
        ((second, -2), (third, -4)), (0.4, 1.6), kind="index powers", offset=first - 1, error=error, **more
    )


def test_a_cauchy_fit_over_too_wide_a_range_contradicts_itself():
    stated = judged(_cauchy(5e-5, stated=True))
    assert stated.verdict == "contradictory"
    assert stated.uncertainty_factor == pytest.approx(26, rel=0.05)
    assert stated.implied_uncertainty.n == pytest.approx(1.3e-3, rel=0.05)
    default = judged(_cauchy(1e-5))
    assert default.verdict == "doubtful"
    assert [entry["about"] for entry in default.inferred] == ["uncertainty of n"]


(S1, R1), (S2, R2), (S3, R3) = CROWN
STRENGTHS_FIRST = ((S1, S2), (S3, R1), (R2, R3))
SWAPPED_STRENGTHS = ((S2, R1), (S1, R2), (S3, R3))


@pytest.mark.parametrize("evidence", ["claim", "check"])
@pytest.mark.parametrize(
    ("terms", "squared", "words"),
    [
        (CROWN, False, "read all resonances as squared"),
        (STRENGTHS_FIRST, True, "all strengths first"),
        (tuple((c, s) for s, c in CROWN), True, "resonance before strength"),
        ((CROWN[0], (CROWN[1][0] * 10, CROWN[1][1]), CROWN[2]), True, "10 times as small"),
        ((CROWN[0], (-CROWN[1][0], CROWN[1][1]), CROWN[2]), True, "turn the sign of the second"),
        (SWAPPED_STRENGTHS, True, "swap the strengths of the first and the second"),
        (((CROWN[0][1], CROWN[0][0]), *CROWN[1:]), True, "swap strength and resonance of the first"),
    ],
    ids=["squares", "order", "turned", "ten", "sign", "swapped strengths", "swapped pair"],
)
def test_a_slip_in_the_constants_is_named(terms, squared, words, evidence):
    more = (
        {"claimed": "N-BK7"}
        if evidence == "claim"
        else {"check": [("n_d", "1.51680", None), ("gvd", "44.65 fs^2/mm", "800 nm")]}
    )
    vetted = judged(sheet(terms, (0.3, 2.5), squared=squared, **more))
    assert vetted.verdict != "consistent"
    assert any(words in repair for repair in repairs(vetted)), vetted.findings


def test_a_single_resonance_printed_as_its_square():
    mixed = sheet(SILICA, (0.21, 3.71), squared=False, claimed="fused silica")
    terms = list(mixed.terms)
    terms[1] = PrintedTerm(strength=SILICA[1][0], constant=SILICA[1][1] ** 2, squared=False)
    vetted = judged(replace(mixed, terms=tuple(terms)))
    assert repairs(vetted)[0].startswith("read the second resonance as squared")


def test_n_squared_for_n_squared_minus_one():
    vetted = judged(sheet(CROWN, (0.3, 2.5), offset=1.0, check=[("n_d", "1.51680", None)]))
    assert "check-differs" in codes(vetted, "error")
    assert any("take 1 off the constant" in repair for repair in repairs(vetted))


def test_a_misprint_that_leaves_the_index_but_not_the_dispersion():
    """12.75e-6 for 12.75e-3: n - 1 changes little, GVD at 800 nm is 1.25 and not 94.99 fs^2/m."""
    wrong = ((XENON[0][0], 12.75e-6), XENON[1])
    for more in ({"claimed": "xenon"}, {"check": [("gvd", "95.0 fs^2/m", "800 nm")]}):
        vetted = judged(sheet(wrong, (0.4, 1.0), **more))
        assert vetted.verdict == "doubtful"
        assert any("1000 times as large, 0.01275" in repair for repair in repairs(vetted))
    alone = judged(sheet(wrong, (0.4, 1.0)))
    assert alone.verdict == "consistent"
    assert "any wrong constant that stays positive" in alone.blind_spots[0]


def test_a_misprinted_digit_is_seen_beside_the_record():
    wrong = ((0.00322869, 46.301), (0.00355393, 50.578), (0.0606764, 112.74))
    vetted = judged(sheet(wrong, (0.16, 0.6234), kind="gas", claimed="xenon (Bideau-Mehu 1981)"))
    (finding,) = [entry for entry in vetted.findings if entry.code == "not-the-claimed-medium"]
    assert finding.severity == "error"
    assert "50.578 and not, as in the catalogue's record, 59.578" in finding.repair


def test_a_missing_term_is_named():
    vetted = judged(sheet(CROWN[:2], (0.3, 2.5), claimed="N-BK7"))
    (finding,) = [entry for entry in vetted.findings if entry.code == "not-the-claimed-medium"]
    assert "1.01046945" in finding.repair
    assert "missing" in finding.repair


def test_a_pole_inside_the_range():
    vetted = judged(sheet(SILICA, (0.21, 3.71), squared=True))
    assert vetted.verdict == "contradictory"
    assert codes(vetted)[0] == "pole-in-range"
    assert vetted.uncertainty_factor is None
    assert "261.5" in vetted.headline  # nm: the square root of 0.0684043 um^2


def test_a_range_beyond_the_published_one():
    vetted = judged(sheet(CROWN, (0.2, 4.0), claimed="N-BK7"))
    assert "beyond-published-range" in codes(vetted, "warning")
    assert "beyond-published-range" not in codes(judged(sheet(CROWN, (0.3, 2.5), claimed="N-BK7")))


def test_an_index_that_falls_with_frequency():
    vetted = judged(sheet(((0.01, 2), (-0.001, 4)), (0.4, 2.0), kind="powers", offset=1.0))
    assert "falls-with-frequency" in codes(vetted, "error")
    assert vetted.uncertainty_factor > 1


def test_no_real_index():
    vetted = judged(sheet(((-1.0, 2),), (0.4, 2.0), kind="powers", offset=0.5))
    assert vetted.verdict == "contradictory"
    assert codes(vetted, "error")[0] == "index-not-real"


def test_an_index_below_one():
    vetted = judged(sheet(((-1e-3, 2),), (0.4, 1.0), kind="index powers", offset=0.0))
    assert "index-below-1" in codes(vetted, "warning")


def test_requirements_on_a_formula():
    wanted = ("gvd at 800 nm = 36.2 +- 0.5 fs^2/mm", "V_d = 67.8 +- 0.2", "gvd at 5 um >= 0 fs^2/mm")
    request = Request(at=(omega(0.8),), require=wanted)
    vetted = judged(sheet(SILICA, (0.21, 3.71), squared=False), request)
    assert [answer.verdict for answer in vetted.requirements] == ["conforming", "conforming", "not decided"]
    assert vetted.bounds[0].gvd_fs2_per_mm[0] < 36.1619983 < vetted.bounds[0].gvd_fs2_per_mm[1]


def test_the_rows_of_the_proof_of_a_formula_are_its_samples():
    vetted = judge_formula(
        _cauchy(5e-5, stated=True), Request(), date="2026-01-01", version="0", causality=PassiveCausality()
    )
    assert vetted.conflict
    for entry in vetted.conflict:
        assert entry.place == f"sample at {entry.wavelength_nm:.5g} nm"
    sizes = [abs(entry.weight) * entry.uncertainty for entry in vetted.conflict]
    total = sum(entry.weight * (entry.value - 1) for entry in vetted.conflict)
    assert total / sum(sizes) == pytest.approx(vetted.uncertainty_factor, rel=2e-3)
