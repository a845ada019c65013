"""What people type on an ordinary day at the bench, and the words that must come back."""

from __future__ import annotations

import numpy as np
import pytest

DYE = """
[[path]]
kind = "slab"
medium = "dye"
thickness = "2 mm"
[medium.dye]
background = "ethanol"
absorption = {{ file = "dye.csv", x = "wavelength", x_unit = "nm", {0}, path_length = "1 cm" }}
"""

AIR = '[[path]]\nname = "steering, air"\nkind = "slab"\nmedium = "air"\nthickness = "3 m"\n'

CELL = """
[[path]]
name = "cell"
kind = "slab"
medium = "vapour"
thickness = "7.5 cm"
[medium.vapour]
lines = [ { centre = "800 nm", width = "1 GHz", peak_absorption = "12 cm^-1" } ]
[grid]
span = "60 ps"
"""


def dye_table(folder, as_shown):
    nm = np.arange(400.0, 900.5, 1.0)
    absorbance = 0.02 * np.exp(-4 * np.log(2) * ((nm - 560) / 60) ** 2)
    rows = [f"{x:.0f},{y:.6f}" for x, y in zip(nm, as_shown(absorbance), strict=True)]
    (folder / "dye.csv").write_text("nm,reading\n" + "\n".join(rows), encoding="utf-8")


def test_a_measured_dye_is_not_laid_at_the_door_of_its_solvents_authors(command, scenario, tmp_path):
    dye_table(tmp_path, lambda absorbance: absorbance)
    told = command("send", scenario(DYE.format('y = "absorbance"'), centre="620 nm"), "--json", "-")
    medium = told.json["media"][0]
    assert "Opt. Mater. Express" in medium["source"]
    assert "absorption: table dye.csv" in medium["source"]
    assert medium["spread"] == []


def test_transmittance_in_per_cent_is_told_so(command, scenario, tmp_path):
    dye_table(tmp_path, lambda absorbance: 100 * 10**-absorbance)
    told = command("send", scenario(DYE.format('y = "transmittance"'), centre="620 nm"))
    assert told.code == 2
    assert "share of 1, not per cent" in told.err


def test_names_with_a_comma_are_told_apart(command, scenario):
    told = command("send", scenario(AIR), "--set", "path.7.thickness=1 m")
    assert told.code == 2
    assert "a name: 'steering, air'" in told.err


def test_a_terahertz_pulse_in_optical_air_is_not_talked_into_going_on(command, scenario):
    told = command("send", scenario(AIR, pulse='duration = "2 ps"', centre="1 THz"))
    assert told.code == 2
    assert "knows nothing of this pulse" in told.err
    assert "beyond_range" not in told.err


def test_a_window_too_short_for_the_ringing_is_refused_with_one_that_holds_it(command, scenario):
    """T2 = 1 / (pi 1 GHz) = 318 ps; 21 T2 = 6.7 ns at the least."""
    told = command("send", scenario(CELL))
    assert told.code == 3
    assert float(told.err.partition("sizes itself, to ")[2].partition(" ns or more")[0]) >= 6.7


@pytest.mark.parametrize(("memory", "words"), [("4 GiB", "12288 GiB"), ("1 MiB", "GiB")])
def test_a_gigantic_request_is_told_in_plain_numbers(command, scenario, memory, words):
    text = AIR.replace("3 m", "3e9 m") + f'[grid]\nmemory = "{memory}"\n'
    told = command("send", scenario(text, pulse='duration = "12 fs"'))
    assert told.code == 3
    assert words in told.err
    assert "e+" not in told.err


def test_echoes_too_faint_to_be_seen_are_counted_and_not_listed(command, scenario):
    """R = (2.418 / 4.418)^2: each echo holds R^2 = 0.0897 of the one before; the eighth is below 1e-8."""
    text = (
        '[[path]]\nname = "wafer"\nkind = "slab"\nmedium = "wafer"\nthickness = "0.5 mm"\nfaces = "echoes"\n'
        "[medium.wafer]\nbackground = 3.418\n"
    )
    told = command("send", scenario(text, pulse='duration = "1 ps"', centre="1 THz"))
    assert told.code == 0
    words = " ".join(told.out.split())
    assert "with their share of what leaves: 11.40 ps (8.2 %), 22.80 ps (0.73 %)" in words
    assert " fainter." in words
    listed = words.partition("share of what leaves: ")[2].partition(" fainter")[0].count("%)")
    assert listed == 7
