"""Absorption alone, judged: causality says nothing, physical bounds and the trade do."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.units import spectral_width
from pulseprop.vetting.judge import judge
from pulseprop.vetting.request import Request, Stated

NM = np.linspace(400.0, 800.0, 81)
BAND = 1.2 * np.exp(-(((NM - 550) / 40) ** 2))


class NotAsked:
    """Causality has nothing to say here and must not be asked."""

    def standing(self, data, *, thorough):
        raise AssertionError("asked")

    def bounds(self, data, omega):
        raise AssertionError("asked")


def judged(table, **options):
    return judge(table, Request(**options), date="2026-12-01", version="0.0", causality=NotAsked())


def codes(vetted, severity):
    return [finding.code for finding in vetted.findings if finding.severity == severity]


def test_an_honest_spectrum_is_consistent_and_the_answer_says_what_was_not_tested(sent, printed):
    vetted = judged(sent(NM, printed("absorbance", BAND, 3), thickness=1e-3))
    assert vetted.verdict == "consistent"
    assert vetted.uncertainty_factor is None
    assert "without an index" in vetted.headline
    assert vetted.exit_code(strict=True) == 0


def test_negative_absorption_is_a_broken_bound(sent, printed):
    vetted = judged(sent(NM, printed("alpha", BAND - 0.3, 3, "1/cm", 100.0)))
    assert vetted.verdict == "contradictory"
    assert codes(vetted, "error") == ["negative-absorption"]
    assert "amplify" in vetted.findings[0].text
    assert vetted.exit_code(strict=False) == 1


def test_a_baseline_a_little_below_zero_is_a_warning(sent, printed):
    vetted = judged(sent(NM, printed("absorbance", BAND - 0.004, 3), thickness=1e-3))
    assert vetted.verdict == "consistent"
    assert codes(vetted, "warning") == ["negative-absorption"]


def test_a_stated_uncertainty_makes_the_same_baseline_an_error(sent, printed):
    stated = {"absorbance": Stated(absolute=1e-3)}
    vetted = judged(sent(NM, printed("absorbance", BAND - 0.004, 3), thickness=1e-3), uncertainty=stated)
    assert vetted.verdict == "contradictory"


def test_more_light_out_than_in(sent, printed):
    vetted = judged(sent(NM, printed("internal_transmittance", np.exp(-BAND) * 1.06, 3), thickness=1e-3))
    assert vetted.verdict == "contradictory"
    assert "transmittance-above-1" in codes(vetted, "error")


def test_per_cent_read_as_fractions(sent, printed):
    vetted = judged(sent(NM, printed("internal_transmittance", 100 * np.exp(-BAND), 1), thickness=1e-3))
    found = next(finding for finding in vetted.findings if finding.code == "percent-fraction")
    assert found.severity == "error"
    assert "per cent" in found.repair


def test_fractions_read_as_per_cent(sent, printed):
    column = printed("internal_transmittance", np.exp(-BAND), 3, "%", 0.01)
    vetted = judged(sent(NM, column, thickness=1e-3))
    assert "percent-fraction" in codes(vetted, "warning")


def test_a_plate_of_a_stated_medium_cannot_let_more_through_than_its_faces(sent, printed):
    # two uncoated faces of N-BK7 at 550 nm, n = 1.5185: 2n/(n^2 + 1) = 0.9187
    vetted = judged(
        sent(NM, printed("transmittance", np.full(81, 0.985), 3), thickness=1e-3), claimed="N-BK7"
    )
    found = next(finding for finding in vetted.findings if finding.code == "transmittance-above-faces")
    assert vetted.verdict == "doubtful"  # coated faces would explain it
    assert "internal transmittance" in found.repair


def test_a_lossless_silica_plate_called_internal(sent, printed):
    # an uncoated silica plate shows 93.0 to 93.4 % (2n/(n^2 + 1), Malitson 1965); called internal, 3 mm give
    # a false 0.0228 /mm
    plate = np.interp(NM, [400, 500, 600, 800], [0.93015, 0.93206, 0.93305, 0.93403])
    vetted = judged(
        sent(NM, printed("internal_transmittance", plate, 3), thickness=3e-3),
        claimed="fused silica",
    )
    assert codes(vetted, "error") == ["fresnel-loss"]
    assert vetted.verdict == "doubtful"


def test_the_medium_of_the_faces_is_read_from_the_name_where_it_is_certain(sent, printed):
    plate = np.interp(NM, [400, 500, 600, 800], [0.93015, 0.93206, 0.93305, 0.93403])
    column = printed("internal_transmittance", plate, 3)
    vetted = judged(sent(NM, column, thickness=3e-3, title="fused silica, lot 4"))
    assert codes(vetted, "error") == ["fresnel-loss"]
    (note,) = vetted.inferred
    assert (note["about"], note["taken"], note["overrule"]) == (
        "medium of the faces",
        "fused silica",
        "--medium",
    )
    for title in ("fused silica and sapphire", "water"):  # which of them; and the cell has the faces
        other = judged(sent(NM, column, thickness=3e-3, title=title))
        assert "fresnel-loss" not in codes(other, "error")
        assert other.inferred == ()


def test_two_columns_with_different_logarithms(sent, printed):
    absorbance = printed("absorbance", BAND, 4)
    alpha = printed("alpha", BAND / 0.1, 3, "1/cm", 100.0)  # should be 2.302585 times as large for 1 mm
    vetted = judged(sent(NM, absorbance, alpha, thickness=1e-3))
    assert codes(vetted, "error") == ["wrong-logarithm"]


def test_two_columns_that_agree(sent, printed):
    absorbance = printed("absorbance", BAND, 4)
    alpha = printed("alpha", 2.302585 * BAND / 0.1, 3, "1/cm", 100.0)
    assert judged(sent(NM, absorbance, alpha, thickness=1e-3)).verdict == "consistent"


def test_k_and_alpha_that_differ_by_a_power_of_ten(sent, printed):
    k = 1e-4 * BAND
    alpha = 4 * np.pi * k / (NM * 1e-7)  # per cm
    vetted = judged(sent(NM, printed("k", k, 8), printed("alpha", alpha, 3, "1/mm", 1000.0)))
    assert codes(vetted, "error") == ["absorption-quantity"]
    assert "per mm where the other is per cm" in vetted.findings[0].text


def test_k_copied_into_the_column_of_alpha(sent, printed):
    vetted = judged(sent(NM, printed("k", BAND, 4), printed("alpha", BAND, 4, "1/cm", 100.0)))
    assert "without wavelength" in vetted.findings[0].text


@pytest.mark.parametrize(("slit", "flagged"), [("0.5 nm", False), ("4 nm", True)])
def test_a_line_as_narrow_as_the_slit_is_flagged(sent, printed, slit, flagged):
    nm = np.linspace(580.0, 600.0, 201)
    line = np.exp(-4 * np.log(2) * ((nm - 589.0) / 3.0) ** 2)  # 3 nm wide
    vetted = judged(sent(nm, printed("absorbance", line, 4), thickness=1e-3), resolution=spectral_width(slit))
    assert ("narrow-line" in codes(vetted, "warning")) is flagged


def test_rows_at_a_ceiling_are_told(sent, printed):
    values = np.minimum(4 * BAND, 3.0)
    vetted = judged(sent(NM, printed("absorbance", values, 2), thickness=1e-3))
    found = next(finding for finding in vetted.findings if finding.code == "instrument-ceiling")
    assert "inferred" in found.text
    assert len(found.rows) == np.sum(values == 3.0)


def test_the_answer_is_plain_json(sent, printed):
    import json

    vetted = judged(sent(NM, printed("absorbance", BAND, 3), thickness=1e-3), at=(3e15,))
    document = json.loads(json.dumps(vetted.as_json(), allow_nan=False))
    assert document["bounds"][0]["index"] is None
    assert "without an index" in document["bounds"][0]["reason"]
