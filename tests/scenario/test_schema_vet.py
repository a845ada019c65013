"""TOML files of `vet`: certificates and formulas, with places in messages."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.build_vet import read_vet_file
from pulseprop.vetting.certificate import judge_certificate
from pulseprop.vetting.certificate_values import Certificate
from pulseprop.vetting.formula_sheet import FormulaSheet, medium_of
from pulseprop.vetting.request import Request

C = 299792458.0

CERTIFICATE = """
[certificate]
name = "N-BK7"
relative_to = "air"
temperature = "22 degC"
transparent = ["300 nm", "2.5 um"]
values = [
  { quantity = "n_d", value = "1.51680", uncertainty = "2e-5" },
  { quantity = "V_d", value = 64.17 },
  { quantity = "gvd", at = "800 nm", value = "44.7 fs^2/mm" },
  { quantity = "zero_dispersion_wavelength", value = "1.34 um" },
]
"""

FORMULA = """
name = "crown as sent"
claimed = "N-BK7"
uncertainty = "2e-5"
check = [ { quantity = "gvd", at = "800 nm", value = "44.65 fs^2/mm" } ]

[formula]
kind = "sellmeier"
terms = [
  { strength = 1.03961212, resonance_squared = "0.00600069867 um^2" },
  { strength = 0.231792344, resonance_squared = "0.0200179144 um^2" },
  { strength = 1.01046945, resonance = "10.17647547 um" },
]
valid = ["300 nm", "2.5 um"]
relative_to = "air"
source = "SCHOTT optical glass catalogue (2017)"
"""


def written(tmp_path, text):
    path = tmp_path / "sheet.toml"
    path.write_text(text, encoding="utf-8")
    return path


def omega(nm):
    return 2 * np.pi * C / (nm * 1e-9)


def test_a_certificate(tmp_path):
    (sheet,) = read_vet_file(written(tmp_path, CERTIFICATE))
    assert isinstance(sheet, Certificate)
    assert (sheet.name, sheet.relative_to, sheet.temperature) == ("N-BK7", "air", "22 degC")
    assert sheet.transparent == pytest.approx((omega(2500), omega(300)))
    index, abbe, gvd, zero = sheet.values
    assert (index.value, index.error, index.stated, index.line) == (1.5168, 2e-5, True, 8)
    assert (abbe.value, abbe.error, abbe.stated) == (64.17, 0.005, False)
    assert gvd.value == pytest.approx(44.7e-27)
    assert gvd.omega == pytest.approx(omega(800))
    assert zero.value == pytest.approx(1.34e-6)
    assert len(sheet.sha256) == 64


def test_a_certificate_is_judged_as_read(tmp_path):
    (sheet,) = read_vet_file(written(tmp_path, CERTIFICATE))
    vetted = judge_certificate(sheet, Request(), date="2026-01-01", version="0")
    assert vetted.uncertainty_factor <= 1
    assert vetted.file.endswith("sheet.toml")


def test_a_formula_with_what_stands_beside_it(tmp_path):
    (sheet,) = read_vet_file(written(tmp_path, FORMULA))
    assert isinstance(sheet, FormulaSheet)
    assert (sheet.name, sheet.claimed, sheet.error, sheet.stated) == ("crown as sent", "N-BK7", 2e-5, True)
    assert [term.squared for term in sheet.terms] == [True, True, False]
    assert sheet.range_nm == pytest.approx((300, 2500))
    assert sheet.check[0].line == 5
    # 44.65179715 fs^2/mm: the catalogue constants with 60 digits (shared/published_dispersion.json).
    assert medium_of(sheet).orders(omega(800)).gvd == pytest.approx(44.65179715e-27, rel=1e-8)


def test_media_as_in_a_scenario(tmp_path):
    body = FORMULA.partition("[formula]")[2]
    text = f'[medium."first".formula]{body}\n[medium."second".formula]{body}'
    first, second = read_vet_file(written(tmp_path, text))
    assert (first.name, second.name) == ("first", "second")
    assert (first.error, first.stated) == (1e-5, False)


def test_a_whole_scenario_gives_its_formulas(tmp_path):
    body = FORMULA.partition("[formula]")[2]
    text = (
        '[pulse]\nshape = "gaussian"\ncentre = "800 nm"\nduration = "30 fs"\n'
        + f'[medium."mine".formula]{body}'
    )
    (sheet,) = read_vet_file(written(tmp_path, text))
    assert (sheet.name, sheet.kind) == ("mine", "sellmeier")
    with pytest.raises(InputError, match="no medium by a formula"):
        read_vet_file(written(tmp_path, text.partition("[medium")[0]))


@pytest.mark.parametrize("kind", ["gas", "poles", "powers", "index powers"])
def test_other_kinds(tmp_path, kind):
    term = {
        "gas": "{ strength = 0.05792105, resonance = 238.0185 }",
        "poles": '{ strength = 0.0147, resonance_squared = "0.0147 um^2" }',
    }.get(kind, "{ strength = 0.01, power = -2 }")
    text = f'[formula]\nkind = "{kind}"\nterms = [ {term} ]\nvalid = ["400 nm", "1 um"]\noffset = 0.0001'
    (sheet,) = read_vet_file(written(tmp_path, text))
    assert sheet.kind == kind
    assert medium_of(sheet).orders(omega(589.3)).index > 1


@pytest.mark.parametrize(
    ("old", "new", "where", "said"),
    [
        ('"1.51680"', '"1,51680"', ":8:", 'Write "1.51680"'),
        ('value = "44.7 fs^2/mm"', "value = 44.7", ":10:", "unit is missing"),
        ('at = "800 nm", ', "", ":10:", "wavelength of gvd is missing"),
        ('"V_d"', '"Vd"', ":9:", "nothing of this name can be printed"),
        ("name =", "nmae =", ":3:", 'there is no key "nmae"'),
        ('"2e-5"', '"-2e-5"', ":8:", "above zero"),
        ('"air"', '"water"', ":4:", "none of the choices"),
        ('["300 nm", "2.5 um"]', '["300 nm"]', ":6:", "two ends"),
        ("64.17", "true", ":9:", "no printed number"),
        ("64.17", "nan", ":9:", "no printed number"),
        ("[certificate]", "[certificat]", ":2:", 'Did you mean "certificate"'),
        ("values = [", "values = [[", "", "not TOML"),
    ],
)
def test_mistakes_in_a_certificate_are_placed(tmp_path, old, new, where, said):
    assert old in CERTIFICATE
    with pytest.raises(InputError) as caught:
        read_vet_file(written(tmp_path, CERTIFICATE.replace(old, new, 1)))
    assert said in str(caught.value)
    assert where in str(caught.value)


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('"N-BK7"', '"BK7"', "N-BK7"),
        ('"2e-5"', '"0"', "no uncertainty of n"),
        ("kind =", "kinds =", "Did you mean"),
        ('resonance = "10.17647547 um"', "strengths = 3", 'there is no key "strengths"'),
        (
            "[formula]",
            '[certificate]\nvalues = [{ quantity = "n_d", value = "1.5" }]\n[formula]',
            "exclude each other",
        ),
    ],
)
def test_mistakes_in_a_formula_are_told(tmp_path, old, new, said):
    assert old in FORMULA
    with pytest.raises(InputError) as caught:
        read_vet_file(written(tmp_path, FORMULA.replace(old, new, 1)))
    assert said in str(caught.value)


def test_a_file_must_hold_something_to_vet(tmp_path):
    with pytest.raises(InputError, match="one of certificate, formula, medium is missing"):
        read_vet_file(written(tmp_path, 'title = "nothing"'))


@pytest.mark.parametrize(
    "text", ["", "\n", "x", "[[certificate]]", "certificate = 3", "formula = []", "medium = 1", "check = 4"]
)
def test_broken_files_are_refused_in_words(tmp_path, text):
    with pytest.raises(InputError):
        read_vet_file(written(tmp_path, text))


def test_cut_files_are_refused_in_words(tmp_path):
    for whole in (CERTIFICATE, FORMULA):
        for end in range(0, len(whole), 7):
            try:
                read_vet_file(written(tmp_path, whole[:end]))
            except InputError:
                continue
