"""`send` held to its contract from outside: keys, figures, exit codes, saved fields, bad input."""

from __future__ import annotations

import json
import math
import os
import signal
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
import xarray

import pulseprop

C = 299792458.0
ROOT = Path(__file__).parents[2]
SILICA_10_FS = '[[path]]\nkind = "slab"\nname = "cold window"\nmedium = "fused silica"\nthickness = "1 mm"\n'
NOTHING = '[[path]]\nkind = "loss"\ntransmittance = 1.0\n'


def slab(medium: str, thickness: str, more: str = "") -> str:
    return f'[[path]]\nkind = "slab"\nmedium = "{medium}"\nthickness = "{thickness}"\n{more}\n'


# The keys that hold plain numbers.
MEASURES = {
    "centre_nm", "fwhm_fs", "rms_fs", "transform_limit_fwhm_fs", "time_bandwidth_product", "energy_J",
    "peak_power_W", "autocorrelation_fwhm_fs", "autocorrelation_factor",
}  # fmt: skip
KEYS = {
    "pulse_in": MEASURES,
    "pulse_out": MEASURES | {"peak_ratio", "two_photon_ratio", "energy_after"},
    "path": {
        "group_delay_fs", "gdd_fs2", "tod_fs3", "fod_fs4", "transmission", "broadening", "centroid_delay_fs",
        "net_group_delay_fs", "reshaping_delay_fs", "b_integral_rad",
    },
    "causality": {"energy_ahead_of_front", "noise_floor", "kk_residual"},
    "grid": {"points", "step_fs", "span_fs"},
}  # fmt: skip
ELEMENT = {
    "group_delay_fs", "gdd_fs2", "tod_fs3", "fod_fs4", "transmission", "gdd_sum_fs2", "tod_sum_fs3",
    "fwhm_after_fs", "peak_fluence_J_per_cm2", "b_integral_rad",
}  # fmt: skip


def test_every_key_of_the_contract_is_there_with_its_type(sent):
    beam = 'duration = "30 fs"\nenergy = "1 uJ"\nbeam_radius = "1 mm"'
    answer = sent(slab("fused silica", "3 mm"), pulse=beam)
    assert isinstance(answer["scenario"], str)
    assert isinstance(answer["version"], str)
    for table, keys in KEYS.items():
        for key in keys:
            assert type(answer[table][key]) in (int, float), (table, key)
    (element,) = answer["elements"]
    assert element["kind"] == "slab"
    assert isinstance(element["name"], str)
    assert all(type(element[key]) is float for key in ELEMENT)
    assert type(answer["pulse_out"]["split"]) is bool
    assert type(answer["causality"]["passive"]) is bool
    assert answer["causality"]["verdict"] == "causal"
    assert set(answer["solver"]) >= {"method", "steps", "transforms", "local_error", "estimated_error"}
    assert isinstance(answer["warnings"], list)
    assert all({"code", "text"} <= set(caution) for caution in answer["cautions"])


def test_a_ten_femtosecond_pulse_through_a_millimetre_of_silica(sent):
    # Own computation with the formula of I. H. Malitson (1965): FFT on two grids and mpmath quadrature: FWHM,
    # rms, centroid against the carrier's group delay, peak over the peak at the entrance.
    answer = sent(SILICA_10_FS, pulse='duration = "10 fs"\nenergy = "1 nJ"')
    out, path = answer["pulse_out"], answer["path"]
    assert out["fwhm_fs"] == pytest.approx(14.1018923, rel=1e-7)
    assert out["rms_fs"] == pytest.approx(6.01287477617, rel=1e-9)
    assert path["centroid_delay_fs"] - path["group_delay_fs"] == pytest.approx(0.191373923148, abs=1e-9)
    assert out["peak_power_W"] / answer["pulse_in"]["peak_power_W"] == pytest.approx(0.70819963, rel=1e-7)
    # n_g = 1.4671447554 at 800 nm.
    assert path["group_delay_fs"] == pytest.approx(0.4671447554e-3 / C * 1e15, rel=1e-9)


@pytest.mark.parametrize(
    ("shape", "product", "factor"),
    [
        # J.-C. Diels and W. Rudolph, Ultrashort Laser Pulse Phenomena: printed 0.441, 0.315, 0.142.
        ("gaussian", 2 * math.log(2) / math.pi, math.sqrt(2)),
        ("sech2", (2 * math.acosh(math.sqrt(2)) / math.pi) ** 2, 1.5428105588),
        ("lorentzian", 0.141999804245, 1.65396096033),
    ],
)
def test_shapes_have_the_printed_products(sent, shape, product, factor):
    entering = sent(NOTHING, shape=shape)["pulse_in"]
    assert entering["time_bandwidth_product"] == pytest.approx(product, rel=1e-7)
    assert entering["autocorrelation_factor"] == pytest.approx(factor, rel=1e-7)
    assert entering["fwhm_fs"] == pytest.approx(30, rel=1e-8)


def test_bandwidth_is_read_in_wavelength_frequency_and_wavenumber(sent):
    # Half-maximum points c/(f0 -+ h) lie 2 c h / (f0^2 - h^2) apart; 0.441 over the width in frequency.
    f0, apart = C / 800e-9, 40e-9
    in_nm = 2 * (-C + math.hypot(C, apart * f0)) / apart
    for text, hertz in (("40 nm", in_nm), ("12 THz", 12e12), ("400 cm^-1", 400e2 * C)):
        found = sent(NOTHING, pulse=f'bandwidth = "{text}"\nenergy = "1 nJ"')["pulse_in"]["fwhm_fs"]
        assert found == pytest.approx(2 * math.log(2) / math.pi / hertz * 1e15, rel=1e-10)


@pytest.mark.parametrize(
    ("centre", "nm"),
    [
        ("375 THz", C / 375e12 * 1e9),
        ("12500 cm^-1", 800),
        ("1.55 eV", 1239.8419843320026 / 1.55),
        ("800 µm", 8e5),
    ],
)
def test_the_centre_in_every_unit(sent, centre, nm):
    answer = sent(NOTHING, centre=centre, pulse='duration = "20 ps"\nenergy = "1 nJ"')
    assert answer["pulse_in"]["centre_nm"] == pytest.approx(nm, rel=1e-10)


def test_a_measured_spectrum_takes_the_jacobian_and_its_own_centre(sent, tmp_path):
    # Power per wavelength exp(-((L - 800)/25)^2): per frequency it is L^2 / c times as much.
    nm = np.linspace(680, 920, 481)
    counts = np.exp(-(((nm - 800) / 25) ** 2))
    np.savetxt(
        tmp_path / "s.csv", np.column_stack([nm, counts]), delimiter=",", header="nm,counts", comments=""
    )
    file = 'spectrum = { file = "s.csv", x = "wavelength", x_unit = "nm", y = "counts", noise_cut = 1e-9 }\n'
    answer = sent(NOTHING, shape="measured", centre="760 nm", pulse=file + 'energy = "1 nJ"')
    frequency = C / nm
    mean = np.trapezoid(counts * nm**2 * frequency, frequency) / np.trapezoid(counts * nm**2, frequency)
    assert answer["pulse_in"]["centre_nm"] == pytest.approx(C / mean, rel=1e-6)
    assert any("pulse.centre is not used" in warning for warning in answer["warnings"])


def test_peak_power_is_as_launched_and_a_measured_duration_carries_both_signs(sent):
    # FWHM sqrt(1 + (4 ln2 GDD / FWHM^2)^2); energy of a Gaussian = peak FWHM / sqrt(4 ln2 / pi).
    long = 30 * math.hypot(1, 4 * math.log(2) * 1000 / 900)
    chirped = sent(NOTHING, pulse='duration = "30 fs"\npeak_power = "1 MW"\ngdd = "1000 fs^2"')["pulse_in"]
    assert chirped["peak_power_W"] == pytest.approx(1e6, rel=1e-10)
    assert chirped["energy_J"] == pytest.approx(
        1e6 * long * 1e-15 / math.sqrt(4 * math.log(2) / math.pi), rel=1e-10
    )
    size = 900 / (4 * math.log(2)) * math.sqrt((62 / 30) ** 2 - 1)
    both = sent(NOTHING, pulse='duration = "30 fs"\nmeasured_duration = "62 fs"\nenergy = "1 nJ"')["signs"]
    assert [case["gdd_in_fs2"] for case in both] == pytest.approx([size, -size], rel=1e-9)


def test_b_integral_and_fluence_on_the_axis(sent):
    # B = (2 pi / lambda) n2 I L for 10 mm, 2.7e-20 m^2/W, 1e15 W/m^2: 2.12057504117; I = 2 P / (pi w^2).
    power = 1e15 * math.pi * 1e-6 / 2
    tables = slab("m", "10 mm") + '[medium.m]\nbackground = 1.0\n[medium.m.kerr]\nn2 = "2.7e-20 m^2/W"\n'
    pulse = f'duration = "30 ps"\npeak_power = "{power!r} W"\nbeam_radius = "1 mm"'
    answer = sent(tables, pulse=pulse)
    assert answer["path"]["b_integral_rad"] == pytest.approx(2.12057504117, rel=1e-9)
    energy = power * 30e-12 / math.sqrt(4 * math.log(2) / math.pi)
    assert answer["elements"][0]["peak_fluence_J_per_cm2"] == pytest.approx(
        2 * energy / math.pi * 1e2, rel=1e-9
    )


def silica(omega):
    um2 = (2 * np.pi * C / omega * 1e6) ** 2
    terms = [(0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161)]
    return np.sqrt(1 + sum(s * um2 / (um2 - r**2) for s, r in terms))


@pytest.mark.parametrize("faces", ["ideal", "fresnel", "echoes"])
@pytest.mark.parametrize(("degrees", "polarisation"), [(0, "p"), (40, "s"), (40, "p"), (70, "s")])
def test_a_tilted_slab_against_the_sum_of_its_reflections(sent, degrees, polarisation, faces):
    # G. B. Airy: t t' e / (1 - r^2 e^2), e = exp(i (omega/c) d q), q = sqrt(n^2 - sin^2); A. J. Fresnel's r.
    omega = 2 * np.pi * C / 800e-9 + np.linspace(-0.35e15, 0.35e15, 100001)
    weight = np.exp(-(30e-15**2) * (omega - 2 * np.pi * C / 800e-9) ** 2 / (4 * np.log(2)))
    index, sine, cosine = silica(omega), np.sin(np.radians(degrees)), np.cos(np.radians(degrees))
    inside = np.sqrt(index**2 - sine**2)
    admittance = inside if polarisation == "s" else inside / index**2
    reflected = (cosine - admittance) / (cosine + admittance)
    once = np.exp(1j * omega / C * 1e-4 * inside)
    passed = {
        "ideal": once,
        "fresnel": (1 - reflected**2) * once,
        "echoes": (1 - reflected**2) * once / (1 - (reflected * once) ** 2),
    }[faces]
    power = weight * np.abs(passed) ** 2
    delay = np.gradient(np.unwrap(np.angle(passed)) - omega / C * 1e-4 * cosine, omega)
    more = f'angle = "{degrees} deg"\npolarisation = "{polarisation}"\nfaces = "{faces}"'
    path = sent(slab("fused silica", "0.1 mm", more))["path"]
    assert path["transmission"] == pytest.approx(power.sum() / weight.sum(), rel=1e-12)
    # The sum runs in steps of 7 / fs, of which the ripple of the echoes makes 1e-5 of the delay.
    assert path["centroid_delay_fs"] == pytest.approx((power * delay).sum() / power.sum() * 1e15, rel=3e-6)


def test_faces_by_reflectance_losses_and_known_orders_multiply(sent):
    path = (
        slab("fused silica", "1 mm", 'reflectance = "0.5 %"')
        + '[[path]]\nkind = "loss"\ntransmittance = "94 %"\n'
        + '[[path]]\nkind = "known orders"\ngdd = "500 fs^2"\ntod = "200 fs^3"\ntransmittance = 0.5\n'
        + '[[path]]\nkind = "pulse shaper"\ngdd = "-536.162 fs^2"\n'
    )
    found = sent(path)["path"]
    assert found["transmission"] == pytest.approx(0.995**2 * 0.94 * 0.5, rel=1e-12)
    # 36.1619983 fs^2/mm and 27.49726172 fs^3/mm of fused silica.
    assert found["gdd_fs2"] == pytest.approx(36.1619983 + 500 - 536.162, abs=1e-6)
    assert found["tod_fs3"] == pytest.approx(227.49726172, abs=1e-6)


def test_the_stepper_repeats_the_exact_answer(sent):
    exact = sent(SILICA_10_FS)
    stepped = sent(SILICA_10_FS, "--set", "propagation.method=split-step")
    for key in ("fwhm_fs", "rms_fs", "peak_power_W", "energy_J"):
        assert stepped["pulse_out"][key] == pytest.approx(exact["pulse_out"][key], rel=1e-12)
    assert stepped["solver"]["steps"] > exact["solver"]["steps"]


def test_a_front_through_an_opaque_line_and_the_filter_that_only_absorbs(sent):
    # 80 fs from first to last instant are 22.56 fs of FWHM (0.282). Nothing may be early; a filter without
    # phase lets some 1 % out before its cause.
    line = '[medium.m]\nlines = [ { centre = "800 nm", width = "1 THz", peak_absorption = "1000 mm^-1" } ]\n'
    found = sent(slab("m", "1 mm") + line, shape="finite", pulse='duration = "22.56 fs"\nenergy = "1 nJ"')[
        "causality"
    ]
    assert found["verdict"] == "causal"
    assert found["energy_ahead_of_front"] <= 1e-24
    assert found["naive_filter"]["verdict"] == "acausal"
    assert found["naive_filter"]["energy_ahead_of_front"] >= 5e-3


def test_a_pulse_on_a_line_against_averages_over_its_spectrum(sent):
    # mpmath quadrature for one pole: transmission 0.37287577017, centroid shift -48.004170308 fs for 1000 fs,
    # T2 100 fs, optical depth 1, on resonance; a medium's oscillator may differ by up to 3/(omega0 T2).
    stated = 'centre = "800 nm", dephasing_time = "100 fs", peak_absorption = "1 mm^-1"'
    line = f"[medium.m]\nlines = [ {{ {stated} }} ]\n"
    path = sent(slab("m", "1 mm") + line, pulse='duration = "1000 fs"\nenergy = "1 nJ"')["path"]
    assert path["transmission"] == pytest.approx(0.37287577017, rel=1e-6)
    assert path["centroid_delay_fs"] == pytest.approx(-48.004170308, rel=1e-5)
    assert path["net_group_delay_fs"] + path["reshaping_delay_fs"] == pytest.approx(
        path["centroid_delay_fs"], rel=1e-12
    )


def test_saved_fields_on_the_clock_of_the_front(command, scenario, tmp_path):
    fibre = (
        slab("m", "1 m")
        + '[medium.m]\norders = { at = "1550 nm", index = 1.45, group_index = 1.468, gvd = "0 fs^2/mm" }\n'
    )
    file = scenario(
        fibre, centre="1550 nm", pulse='duration = "100 fs"\nenergy = "1 nJ"\nrepetition_rate = "1 kHz"'
    )
    target = tmp_path / "fields.nc"
    told = command("send", file, "--save", target, "--json", "-")
    assert told.code == 0
    with xarray.open_dataset(target, engine="h5netcdf") as saved:
        assert saved.field_out.dims == ("time", "part")
        assert list(saved.part.values) == ["re", "im"]
        field = saved.field_out.values[:, 0] + 1j * saved.field_out.values[:, 1]
        instants, power = saved.time.values, np.abs(field) ** 2
        frequency = saved.frequency.values
        assert np.all(np.diff(frequency) > 0)
        # 1 m at n_g = 1.468: the peak comes 0.468 L / c behind the front.
        assert instants @ power / power.sum() == pytest.approx(0.468 / C * 1e15, abs=1e-3)
        assert power.sum() * np.diff(instants)[0] * 1e-15 == pytest.approx(1e-9, rel=1e-9)
        for spectrum in (saved.spectrum_in, saved.spectrum_out):
            assert np.trapezoid(spectrum.values, frequency) == pytest.approx(1e-9, rel=1e-9)
        units = {"time": "fs", "frequency": "THz", "spectrum_out": "J/THz", "group_delay": "fs"}
        assert {name: saved[name].attrs["units"] for name in units} == units
        assert saved.field_out.attrs["carrier_THz"] == pytest.approx(C / 1550e-9 * 1e-12, rel=0.1)
        assert saved.attrs["scenario"] == file.read_text(encoding="utf-8")
        assert {"scenario_sha256", "catalogue_sha256", "pulseprop_version"} <= set(saved.attrs)


def test_two_runs_write_the_same_bytes(command, scenario, tmp_path):
    file = scenario(SILICA_10_FS)
    for name in ("a", "b"):
        assert (
            command("send", file, "--json", tmp_path / f"{name}.json", "--save", tmp_path / f"{name}.nc").code
            == 0
        )
    for kind in ("json", "nc"):
        assert (tmp_path / f"a.{kind}").read_bytes() == (tmp_path / f"b.{kind}").read_bytes()


def test_python_and_the_command_give_equal_numbers(command, scenario):
    file = scenario(SILICA_10_FS)
    run = pulseprop.send(file, ["path.cold window.thickness=2 mm"])
    told = command("send", file, "--json", "-", "--set", "path.cold window.thickness=2 mm")
    assert json.loads(json.dumps(run.as_json())) == told.json
    assert told.json["overrides"] == ["path.cold window.thickness=2 mm"]
    assert run.path.gdd_fs2 == pytest.approx(2 * 36.1619983, rel=1e-8)
    assert pulseprop.dataset(run).field_out.dtype == np.complex128


def program(*arguments: object, **options: object) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "pulseprop", *map(str, arguments)],
        capture_output=True, text=True, timeout=60, env=os.environ | {"PYTHONPATH": str(ROOT)}, **options,
    )  # fmt: skip


def test_one_document_on_standard_output_and_the_rest_on_standard_error(scenario):
    done = program("send", scenario(SILICA_10_FS, pulse='duration = "10 fs"'), "--json", "-")
    assert done.returncode == 0
    document = json.loads(done.stdout, parse_constant=lambda word: pytest.fail(f"{word} is no JSON"))
    assert document["warnings"]
    assert f"warning: {document['warnings'][0]}" in done.stderr


def listen_to_interrupts():
    """A shell starts what runs in the background deaf to SIGINT, and its children inherit that."""
    signal.signal(signal.SIGINT, signal.SIG_DFL)


def test_an_interrupted_run_leaves_nothing(scenario, tmp_path):
    line = '[medium.m]\nlines = [ { centre = "800 nm", width = "1 GHz", peak_absorption = "12 cm^-1" } ]\n'
    file = scenario(slab("m", "1.5 cm") + line)
    target = tmp_path / "out"
    target.mkdir()
    outputs = ["--json", target / "a.json", "--save", target / "a.nc", "--page", target / "a.html"]
    running = subprocess.Popen(
        [sys.executable, "-m", "pulseprop", "send", str(file), *map(str, outputs)],
        stderr=subprocess.PIPE, text=True, env=os.environ | {"PYTHONPATH": str(ROOT)},
        preexec_fn=listen_to_interrupts,
    )  # fmt: skip
    assert running.stderr is not None
    running.stderr.read(1)  # the first word of progress: the run is under way
    running.send_signal(signal.SIGINT)
    _, told = running.communicate(timeout=60)
    assert running.returncode == 130
    assert "nothing half done was written" in told
    assert list(target.iterdir()) == []


@pytest.mark.parametrize(
    ("override", "parts"),
    [
        ("path.1.thickness=3", ["unit is missing", "got 3"]),
        ("path.1.thickness=-3 mm", ["-3 mm", "0 m or more"]),
        ("path.1.thickness=3 fs", ["a length", "that of a time"]),
        ("path.1.thickness=nan mm", ["not finite"]),
        ("path.1.thicknes=3 mm", ['Did you mean "thickness"']),
        ("path.2.thickness=3 mm", ["no such entry", "cold window"]),
        ("path.warm window.thickness=3 mm", ['Did you mean "cold window"']),
        ("path.1.angle=95 deg", ["below 90 deg"]),
        ("pulse.gdd=100 fs", ["group delay dispersion"]),
        ("pulse.shape=square", ['"gaussian", "sech2"']),
        ("pulse.centre=800", ["unit is missing"]),
        ("pulse.centre=150 nm", ["leaves the range", "210 nm to 3710 nm"]),
        ("pulse.duration=1 as", ["zero frequency"]),
        ("propagation.nonlinear=true", ["not part of this release"]),
        ("grid.points=99999999999998", ["grid.points"]),
    ],
)
def test_what_cannot_be_used_is_told_in_one_message(refused, override, parts):
    message = refused(SILICA_10_FS, "--set", override)
    assert message.startswith("pulseprop: ")
    for part in parts:
        assert part in message


def test_a_fault_in_the_file_is_told_with_line_and_column(refused):
    message = refused(SILICA_10_FS.replace('"1 mm"', '"-1 mm"'))
    assert "scenario.toml:10:13, path.1.thickness" in message


def test_the_word_extinction_is_refused(refused):
    line = '[medium.m]\nlines = [ { centre = "800 nm", width = "1 THz", extinction = "12 cm^-1" } ]\n'
    message = refused(slab("m", "1 mm") + line)
    assert "absorbance" in message
    assert "molar" in message


def test_a_memory_limit_stops_with_three_and_the_way_past_it(refused):
    message = refused(slab("fused silica", "100 km"), code=3)
    assert "scenario.toml" in message
    assert "Raise grid.memory" in message


@pytest.mark.parametrize("key", ["grid.span=10 fs", "grid.points=16"])
def test_a_stated_grid_that_cannot_hold_the_pulse_stops_with_three(refused, key):
    message = refused(SILICA_10_FS, "--set", key, code=3)
    assert "cannot hold the pulse" in message
    assert key.partition("=")[0] in message


@pytest.mark.parametrize("thickness", ["10 um", "100 um"])
def test_light_that_does_not_get_through_is_told(refused, thickness):
    metal = '[medium.m]\ncarriers = [ { plasma_frequency = "9 rad/fs", scattering_time = "10 fs" } ]\n'
    assert "nothing leaves this element" in refused(slab("m", thickness) + metal)


def test_a_gigantic_grid_is_refused_with_file_and_place(refused):
    message = refused(SILICA_10_FS, "--set", "grid.points=4294967296")
    assert "scenario.toml, grid.points" in message
