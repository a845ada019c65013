"""Reading scenario files: whatever is wrong is named with file, line, key, value, what is allowed and what
to do."""

from __future__ import annotations

import hashlib
import subprocess
import sys
from pathlib import Path

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.read import LARGEST_FILE, Scenario, read_scenario, scenario_from

GOOD = """\
title = "an invented pulse through an invented window"

[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "30 fs"
energy = "2 uJ"

[[path]]
kind = "slab"
name = "cold window"
medium = "fused silica"
thickness = "3 mm"

[[path]]
kind = "loss"
name = "mirror no. 2"
transmittance = "99 %"
"""


def written(directory: Path, text: str | bytes) -> Path:
    path = directory / "case.toml"
    path.write_bytes(text.encode() if isinstance(text, str) else text)
    return path


def read(directory: Path, text: str | bytes, *overrides: str) -> Scenario:
    return read_scenario(written(directory, text), overrides)


def message(directory: Path, text: str | bytes, *overrides: str) -> str:
    with pytest.raises(InputError) as caught:
        read(directory, text, *overrides)
    assert caught.value.exit_code == 2
    return str(caught.value).replace(str(directory) + "/", "")


def changed(old: str, new: str) -> str:
    assert GOOD.count(old) == 1
    return GOOD.replace(old, new)


def test_a_good_file_becomes_typed_si(tmp_path: Path) -> None:
    scenario = read(tmp_path, GOOD)
    assert scenario.content.pulse.duration == 30e-15
    assert scenario.content.pulse.centre is not None
    assert scenario.content.pulse.centre.wavelength == pytest.approx(800e-9, rel=1e-15)
    slab, loss = scenario.content.path
    assert slab.kind == "slab"
    assert slab.thickness == 3e-3
    assert loss.kind == "loss"
    assert loss.transmittance == 0.99
    assert scenario.directory == tmp_path
    assert scenario.path_of("data.csv") == tmp_path / "data.csv"
    assert scenario.sha256 == hashlib.sha256(GOOD.encode()).hexdigest()


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        (
            changed('duration = "30 fs"', 'duratoin = "30 fs"'),
            ["case.toml:6:1, pulse.duratoin", 'no key "duratoin"', 'Did you mean "duration"?'],
        ),
        (
            changed('thickness = "3 mm"', 'thickness = "3"'),
            ["case.toml:13:13, path.1.thickness", "unit is missing (got '3')", 'a length such as "3 mm"'],
        ),
        (
            changed('thickness = "3 mm"', "thickness = 3"),
            ["case.toml:13:13, path.1.thickness", "unit is missing (got 3)", "in quotes"],
        ),
        (
            changed('thickness = "3 mm"', 'thickness = "3 fs"'),
            ["path.1.thickness", "expected a length, but the unit is that of a time", "'3 fs'"],
        ),
        (
            changed('thickness = "3 mm"', 'thickness = "-3 mm"'),
            ["case.toml:13:13, path.1.thickness", "out of bounds (got '-3 mm')", "a length of 0 m or more"],
        ),
        (
            changed('thickness = "3 mm"', 'thickness = "3,5 mm"'),
            ["path.1.thickness", "comma", 'Write "3.5 mm" with a point'],
        ),
        (changed('thickness = "3 mm"', "thickness = nan"), ["path.1.thickness", "unit is missing (got nan)"]),
        (
            changed('thickness = "3 mm"\n', ""),
            ["case.toml:9:3, path.1.thickness", "missing", 'Add "thickness"'],
        ),
        (
            changed('shape = "gaussian"', 'shape = "gausian"'),
            [
                "case.toml:4:9, pulse.shape",
                "none of the choices (got 'gausian')",
                '"sech2"',
                'mean "gaussian"?',
            ],
        ),
        (
            changed('kind = "loss"', 'kind = "polariser"'),
            [
                "case.toml:16:8, path.2.kind",
                "'polariser'",
                '"slab", "loss", "known orders"',
            ],
        ),
        (changed('kind = "loss"\n', ""), ["case.toml:15:3, path.2.kind", "missing", 'Add "kind"']),
        (
            changed('transmittance = "99 %"', 'transmittance = "199 %"'),
            ["path.2.transmittance", "out of bounds", "a share of 1 or less"],
        ),
        (
            changed('transmittance = "99 %"', 'transmittance = "99 %"\nextinction = 2'),
            ["path.2.extinction", "extinction", "absorbance (decadic)"],
        ),
        (
            changed('energy = "2 uJ"', 'energy = "2 uJ"\npeak_power = "1 GW"'),
            ["case.toml:8:1, pulse.peak_power", "energy and peak_power exclude each other"],
        ),
        (
            changed('duration = "30 fs"\n', ""),
            ["case.toml:3:2, pulse", "one of duration, bandwidth is missing", "measured_duration"],
        ),
        (changed('centre = "800 nm"\n', ""), ["case.toml:3:2, pulse", "centre is missing", '"800 nm"']),
        (
            changed('energy = "2 uJ"', 'gdd = "1 fs^2"\nmeasured_duration = "60 fs"'),
            ["pulse.measured_duration", "in place of gdd"],
        ),
        (changed('energy = "2 uJ"', "order = 3"), ["case.toml:7:9, pulse.order", "supergaussian"]),
        (
            changed(
                'energy = "2 uJ"',
                'spectrum = { file = "a.csv", x = "wavelength", x_unit = "nm", y = "counts" }',
            ),
            ["pulse.spectrum", "shape = 'measured'"],
        ),
        (
            changed('name = "mirror no. 2"', 'name = "cold window"'),
            ["path", "two elements have the same name (got 'cold window')", "unique"],
        ),
        (
            GOOD + "\n[propagation]\nnonlinear = true\n",
            ["case.toml:21:13, propagation.nonlinear", "not part of this release", "Allowed: false"],
        ),
        (GOOD + '\n[propagation]\nmethod = "exakt"\n', ["propagation.method", '"exact"', 'mean "exact"?']),
        (GOOD + "\n[propagation]\nlocal_error = 0.0\n", ["propagation.local_error", "above 0"]),
        (GOOD + "\n[propagation]\nlocal_error = nan\n", ["propagation.local_error", "bounds"]),
        (GOOD + "\n[grid]\npoints = 1025\n", ["case.toml:21:10, grid.points", "multiple of 2"]),
        (GOOD + '\n[grid]\npoints = "many"\n', ["grid.points", "expected a whole number (got 'many')"]),
        (GOOD + '\n[grid]\nmemory = "4 mm"\n', ["grid.memory", "an amount of memory", '"4 GiB"']),
        (
            GOOD + '\n[expect]\n"pulse_out.fwhm_fs" = [1]\n',
            ["expect.pulse_out.fwhm_fs", "[value, tolerance]"],
        ),
        (GOOD + '\n[pulze]\nshape = "x"\n', ["case.toml:20:2, pulze", 'no key "pulze"', 'mean "pulse"?']),
        ("path = 3\n" + GOOD.split("[[path]]")[0], ["case.toml:1:8, path", "expected a list (got 3)"]),
        ("path = [3]\n" + GOOD.split("[[path]]")[0], ["path.1", "expected a table"]),
        (
            changed('name = "cold window"', "name = true"),
            ["path.1.name", "expected a text in quotes (got True)"],
        ),
        (changed('name = "cold window"', 'name = ""'), ["path.1.name", "a text that is not empty"]),
        (
            changed('name = "cold window"', 'keep = "yes"'),
            ["path.1.keep", "expected true or false (got 'yes')"],
        ),
        ('title = "no pulse"\n', ["case.toml, pulse", "missing", 'Add "pulse"']),
        (
            changed('medium = "fused silica"', 'medium = "fused silica"\nangle = "91 deg"'),
            ["path.1.angle", "would not meet the slab", "below 90 deg"],
        ),
        (
            changed('medium = "fused silica"', 'medium = "x"\nfaces = "ideal"\nreflectance = "1 %"'),
            ["path.1.reflectance", "exclude each other"],
        ),
        (
            changed('medium = "fused silica"', 'medium = "x"\nfaces = "fresnel"\nangle = "10 deg"'),
            ["path.1.angle", 'polarisation = "p" or "s"'],
        ),
    ],
)
def test_a_fault_is_named_with_its_place_and_remedy(tmp_path: Path, text: str, parts: list[str]) -> None:
    found = message(tmp_path, text)
    for part in parts:
        assert part in found
    assert "things cannot be used" not in found


def test_all_faults_come_at_once(tmp_path: Path) -> None:
    text = (
        GOOD.replace("30 fs", "30 mm")
        .replace('"3 mm"', "3")
        .replace("99 %", "99")
        .replace('"loss"', '"lost"')
    )
    found = message(tmp_path, text)
    assert "case.toml: 3 things cannot be used:" in found
    assert [line.split(",")[1].split(":")[0].strip() for line in found.splitlines()[1:]] == [
        "pulse.duration",
        "path.1.thickness",
        "path.2.kind",
    ]


def test_a_long_list_of_faults_is_cut_and_counted(tmp_path: Path) -> None:
    found = message(tmp_path, GOOD + "".join(f"wrong{n} = 1\n" for n in range(12)))
    assert "12 things cannot be used" in found
    assert "and 4 more." in found
    assert len(found.splitlines()) == 10


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("", ["case.toml", "empty", "[pulse]"]),
        (" \n\n", ["empty"]),
        (b"title = '\xe9'\n", ["case.toml:1", "not in UTF-8 (got 'byte 0xe9')", "Save the file"]),
        (
            "[pulse]\nduration = 30 fs\n",
            ["case.toml:2:15", "not TOML", "'duration = 30 fs'", "stand in quotes"],
        ),
        ('[pulse]\nshape = "gauss', ["case.toml:2", "not TOML"]),
        ("[pulse]\na = 1\na = 2\n", ["case.toml:3", "not TOML", "overwrite"]),
        ("[pulse]\n[pulse]\n", ["case.toml:2", "not TOML"]),
        ("x = " + "[" * 5000, ["case.toml", "not TOML"]),
    ],
)
def test_what_is_no_toml_is_refused_at_its_line(tmp_path: Path, text: str | bytes, parts: list[str]) -> None:
    found = message(tmp_path, text)
    for part in parts:
        assert part in found


def test_missing_files_directories_and_giants_are_refused(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="there is no such file"):
        read_scenario(tmp_path / "absent.toml")
    with pytest.raises(InputError, match="not a file"):
        read_scenario(tmp_path)
    giant = tmp_path / "giant.toml"
    with giant.open("wb") as file:
        file.truncate(LARGEST_FILE + 1)
    with pytest.raises(InputError, match="too large for a scenario"):
        read_scenario(giant)


def test_a_byte_order_mark_and_other_line_ends_are_read(tmp_path: Path) -> None:
    assert read(tmp_path, b"\xef\xbb\xbf" + GOOD.replace("\n", "\r\n").encode()).content.pulse.energy == 2e-6


def test_an_error_found_later_can_be_placed(tmp_path: Path) -> None:
    scenario = read(tmp_path, GOOD)
    placed = scenario.blamed(InputError("no such medium", value="fused silica"), "path", 0, "medium")
    assert str(placed).startswith(f"{tmp_path}/case.toml:12:10, path.1.medium: no such medium")
    inner = scenario.blamed(InputError("not a number", file="data.csv:7"), "pulse", "spectrum")
    assert str(inner).startswith("data.csv:7, named by")


def test_an_error_found_later_in_an_override_is_placed_there(tmp_path: Path) -> None:
    scenario = read(tmp_path, GOOD, "path.1.medium=BK9")
    assert str(scenario.blamed(InputError("no such medium"), "path", 0, "medium")).startswith(
        "--set, path.1.medium"
    )
    assert ":13:13, path.1.thickness" in str(scenario.blamed(InputError("thick"), "path", 0, "thickness"))


def test_tables_of_other_commands_are_left_alone(tmp_path: Path) -> None:
    text = GOOD + (
        '\n[[sweep]]\nkey = "path.1.thickness"\nvalues = { from = "1 mm", to = "5 mm", points = 41 }\n'
        '[study]\nrecord = ["pulse_out.fwhm_fs"]\n'
    )
    content = read(tmp_path, text).content
    assert content.sweep[0]["key"] == "path.1.thickness"
    assert content.study["record"] == ["pulse_out.fwhm_fs"]


def test_plain_tables_without_a_file_are_checked_in_the_same_way() -> None:
    with pytest.raises(InputError, match=r"pulse\.shape: the key is missing"):
        scenario_from({"pulse": {"centre": "800 nm"}})


def test_reading_a_good_file_loads_neither_the_units_library_nor_the_place_finder(tmp_path: Path) -> None:
    path = written(tmp_path, GOOD)
    code = (
        "import sys; from pulseprop.scenario.read import read_scenario;"
        f"read_scenario({str(path)!r});"
        "assert not {'pint', 'tree_sitter', 'difflib', 'scipy'} & set(sys.modules)"
    )
    subprocess.run([sys.executable, "-c", code], check=True)
