"""Tables of an invented chirped mirror with a ripple: phase, group delay, GDD and TOD in closed form."""

from __future__ import annotations

import json

import numpy as np
import pytest

from pulseprop.vetting.mirror import is_mirror, judge_mirror
from pulseprop.vetting.request import Request, Stated
from pulseprop.vetting.table import Column, SentTable

C = 299792458.0
NM = np.arange(680.0, 931.0, 2.0)
UNITS = {
    "phase": (1.0, "rad", 4),
    "group_delay": (1e-15, "fs", 2),
    "gdd": (1e-30, "fs^2", 2),
    "mirror_tod": (1e-45, "fs^3", 1),
    "reflectance": (1e-2, "%", 2),
    "transmittance": (1e-2, "%", 2),
}
RIPPLE, PERIOD = 6.0, 0.08
"""fs^2, and rad/fs."""


def detuning(nm):
    """rad/fs from 800 nm."""
    return 2e-6 * np.pi * C * (1 / nm - 1 / 800.0)


def mirror(nm=NM):
    """Columns in fs, fs^2, fs^3, % of one bounce."""
    x, turn = detuning(nm), 2 * np.pi / PERIOD
    reflectance = 99.9 - 0.5 * np.clip(np.abs(nm - 800) - 130, 0, None)
    return {
        "phase": 35 * x - 20 * x**2 - 13 / 3 * x**3 - RIPPLE / turn**2 * np.sin(turn * x),
        "group_delay": 35 - 40 * x - 13 * x**2 - RIPPLE / turn * np.cos(turn * x),
        "gdd": -40 - 26 * x + RIPPLE * np.sin(turn * x),
        "mirror_tod": -26 + RIPPLE * turn * np.cos(turn * x),
        "reflectance": reflectance,
        "transmittance": 99.95 - reflectance,
    }


def table(columns, nm=NM, places=None, **more):
    built = []
    for quantity, values in columns.items():
        unit, name, own = UNITS[quantity]
        digits = (places or {}).get(quantity, own)
        cells = tuple(f"{value:.{digits}f}" for value in values)
        built.append(
            Column(
                quantity=quantity,
                header=quantity,
                unit=name,
                cells=cells,
                values=np.array([float(cell) for cell in cells]) * unit,
                half_unit=np.full(len(nm), 0.5 * 10.0**-digits * unit),
            )
        )
    return SentTable(
        file="mirror.csv",
        sha256="0",
        lines=np.arange(len(nm)) + 2,
        axis="wavelength",
        axis_unit="nm",
        axis_cells=tuple(f"{value:g}" for value in nm),
        axis_values=nm,
        omega=2 * np.pi * C / (nm * 1e-9),
        columns=tuple(built),
        **more,
    )


def judged(sent, **request):
    return judge_mirror(sent, Request(**request), date="2026-01-01", version="0")


def some(*names, **changed):
    columns = mirror()
    return {name: changed.get(name, columns[name]) for name in names}


def finding(vetted, code):
    (found,) = [entry for entry in vetted.findings if entry.code == code]
    return found


def codes(vetted, severity=None):
    return [entry.code for entry in vetted.findings if severity in (None, entry.severity)]


# Good lots


def test_a_true_table_is_consistent_and_echoed_first():
    vetted = judged(table(mirror()), at=(2 * np.pi * C / 800e-9,), angle=np.radians(5), polarisation="p")
    assert vetted.verdict == "consistent"
    assert vetted.headline.startswith("this table gives -40 fs^2")
    assert "a bounce at 800 nm" in vetted.headline
    assert vetted.uncertainty_factor is None
    assert codes(vetted).count("columns-agree") == 3
    assert not codes(vetted, "error")
    assert not codes(vetted, "warning")
    assert "minimum phase" in vetted.blind_spots[0]
    json.dumps(vetted.as_json())


@pytest.mark.parametrize("step", [0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 40.0])
@pytest.mark.parametrize("digits", [0, 1, 2])
def test_true_tables_are_never_doubted_however_coarse(step, digits):
    nm = np.arange(680.0, 931.0, step)
    columns = mirror(nm)
    places = dict.fromkeys(("group_delay", "gdd", "mirror_tod"), digits) | {"phase": digits + 1}
    vetted = judged(table(columns, nm, places))
    assert vetted.verdict == "consistent", vetted.findings


def test_rows_in_reverse_and_in_frequency_are_the_same():
    columns = {name: values[::-1] for name, values in mirror().items()}
    assert judged(table(columns, NM[::-1])).verdict == "consistent"


def test_a_wrapped_phase_and_one_without_linear_term_are_no_faults():
    phase = mirror()["phase"]
    wrapped = judged(table(some("phase", "group_delay", phase=np.angle(np.exp(1j * phase)))))
    assert "columns-agree" in codes(wrapped)
    bare = judged(table(some("phase", "group_delay", phase=phase - 35 * detuning(NM))))
    assert bare.verdict == "consistent"
    assert "without a term linear" in finding(bare, "phase-without-delay").text


def test_noise_of_a_measurement_is_told_and_not_accused():
    noisy = mirror()["gdd"] + np.random.default_rng(3).normal(0, 1.0, len(NM))
    vetted = judged(table(some("group_delay", "gdd", gdd=noisy)))
    assert vetted.verdict == "consistent"
    found = finding(vetted, "columns-disagree")
    assert found.severity == "warning"
    assert "uncertain by +-" in found.text
    assert (
        judged(
            table(some("group_delay", "gdd", gdd=noisy)), uncertainty={"gdd": Stated(absolute=4e-30)}
        ).verdict
        == "consistent"
    )


def test_columns_that_are_stated_to_be_exact():
    """Errors of 0 are those of arithmetic; empty cells are left out; a lone row is compared with nothing."""
    sent = table(some("group_delay", "gdd"), places={"group_delay": 12, "gdd": 12})
    for column in sent.columns:
        column.half_unit[:] = 0
        column.values[::7] = np.nan
    assert judged(sent).verdict == "consistent"
    assert judged(table({"gdd": np.array([-40.0])}, np.array([800.0]))).verdict == "consistent"


# Mistakes


@pytest.mark.parametrize(
    ("changed", "places", "words"),
    [
        ({"gdd": -mirror()["gdd"]}, {}, "sign of one of the two is turned"),
        ({"gdd": 2 * mirror()["gdd"]}, {}, "the GDD is that of a pair of bounces"),
        ({"group_delay": 2 * mirror()["group_delay"]}, {}, "the group delay is that of a pair of bounces"),
        ({"group_delay": mirror()["group_delay"] / 1000}, {"group_delay": 5}, "the other unit"),
        ({"gdd": mirror()["gdd"] / (2 * np.pi)}, {"gdd": 4}, "per ordinary frequency"),
        (
            {"gdd": mirror()["gdd"] * (-2 * np.pi * C * 1e-6 / NM**2)},
            {"gdd": 5},
            "derivative of the group delay by wavelength",
        ),
    ],
    ids=["sign", "pair", "delay of a pair", "ps", "ordinary frequency", "by wavelength"],
)
def test_columns_that_are_no_derivative_and_what_they_are(changed, places, words):
    vetted = judged(table(some("group_delay", "gdd", **changed), places=places))
    assert vetted.verdict == "contradictory"
    found = finding(vetted, "columns-disagree")
    assert words in found.repair
    assert found.text in vetted.headline


def test_a_tod_column_of_another_mirror():
    vetted = judged(table(some("gdd", "mirror_tod", mirror_tod=-mirror()["mirror_tod"])))
    assert "TOD is not the derivative of the GDD" in finding(vetted, "columns-disagree").text


def test_the_phase_sign_is_told():
    vetted = judged(table(some("phase", "group_delay", phase=-mirror()["phase"])))
    assert vetted.verdict == "consistent"
    assert finding(vetted, "phase-sign").repair == "turn the sign of the phase"


@pytest.mark.parametrize(("column", "change"), [("gdd", 8.0), ("group_delay", 0.5)])
def test_a_single_wrong_cell_is_named(column, change):
    values = mirror()[column].copy()
    values[60] += change
    vetted = judged(table(some("group_delay", "gdd", **{column: values})))
    assert vetted.verdict == "doubtful"
    assert finding(vetted, "columns-disagree").rows == (62,)


def test_stated_uncertainties_make_it_contradictory():
    values = mirror()["gdd"].copy()
    values[60] += 8
    stated = {"gdd": Stated(absolute=0.1e-30), "group_delay": Stated(absolute=0.006e-15)}
    vetted = judged(table(some("group_delay", "gdd", gdd=values)), uncertainty=stated)
    assert vetted.verdict == "contradictory"


def test_more_light_than_came():
    columns = some("reflectance", "transmittance")
    columns["transmittance"] = columns["transmittance"] + 1.5
    vetted = judged(table(columns))
    assert vetted.verdict == "contradictory"
    assert "R + T is above 1" in finding(vetted, "more-than-all").text
    a_little = some("reflectance", "transmittance")
    a_little["transmittance"] = a_little["transmittance"] + 0.2
    assert judged(table(a_little)).verdict == "doubtful"


def test_percent_read_as_fractions():
    columns = some("reflectance", "gdd")
    columns["reflectance"] = columns["reflectance"] * 100
    assert (
        finding(judged(table(columns)), "reflectance-above-1").repair
        == "state the unit of the reflectance as %"
    )


def test_a_negative_share():
    columns = some("reflectance", "transmittance")
    columns["transmittance"] = columns["transmittance"] - 0.2
    assert finding(judged(table(columns)), "negative-share").severity == "error"


def test_a_reflectance_band_narrower_than_that_of_the_gdd():
    narrow = 99.9 - 0.5 * np.clip(np.abs(NM - 800) - 60, 0, None)
    vetted = judged(table(some("reflectance", "gdd", reflectance=narrow)))
    assert "738" in finding(vetted, "reflectance-narrower-than-gdd").text
    wide = np.full(len(NM), 99.9)
    assert "reflectance-narrower-than-gdd" not in codes(
        judged(table(some("reflectance", "gdd", reflectance=wide)))
    )


def test_angle_and_polarisation():
    assert "angle-not-stated" in codes(judged(table(some("gdd"))))
    assert "polarisation-not-stated" in codes(judged(table(some("gdd"))))
    normal = judged(table(some("gdd")), angle=0.0)
    assert "polarisation-not-stated" not in codes(normal)
    sent = table(some("gdd"), comments=("AOI 45 deg, s-pol",))
    other = judged(sent, angle=np.radians(5), polarisation="p")
    assert {"other-angle", "other-polarisation"} <= set(codes(other, "error"))
    assert not codes(judged(sent, angle=np.radians(45), polarisation="s"), "error")


def test_a_pair_is_told():
    assert "per-pair" in codes(judged(table(some("gdd"), title="GDD per pair")))


def test_a_calculated_curve_looks_so():
    assert "group delay" in finding(judged(table(mirror())), "looks-calculated").text
    noise = np.random.default_rng(4).normal(0, 0.3, (2, len(NM)))
    measured = some("group_delay", "gdd")
    measured = {name: values + noise[number] for number, (name, values) in enumerate(measured.items())}
    assert "looks-calculated" not in codes(judged(table(measured)))


def random_mirror(seed):
    """Wavelengths, columns and digits: a chirp and one to three ripples, any row spacing and print."""
    rng = np.random.default_rng(seed)
    start = rng.uniform(600, 900)
    step = rng.choice([0.5, 1, 2, 3, 5, 8, 10, 20])
    nm = np.round(np.arange(start, start + rng.uniform(80, 300), step), 1)
    x = detuning(nm) - np.mean(detuning(nm))
    gdd, slope = rng.uniform(-120, 120), rng.uniform(-200, 200)
    delay = rng.uniform(0, 60) + gdd * x + slope * x**2 / 2
    dispersion = gdd + slope * x
    for _ in range(rng.integers(1, 4)):
        size, turn, start = rng.uniform(1, 25), 2 * np.pi / rng.uniform(0.04, 0.4), rng.uniform(0, 6)
        dispersion = dispersion + size * np.sin(turn * x + start)
        delay = delay - size / turn * np.cos(turn * x + start)
    digits = int(rng.integers(0, 4))
    return nm, {"group_delay": delay, "gdd": dispersion}, {"group_delay": digits, "gdd": max(digits - 1, 0)}


def test_random_true_mirrors_are_never_doubted_and_slips_are_named():
    named = seen = 0
    for seed in range(60):
        nm, columns, places = random_mirror(seed)
        assert judged(table(columns, nm, places)).verdict == "consistent", seed
        turned = judged(table(columns | {"gdd": -columns["gdd"]}, nm, places))
        found = [entry for entry in turned.findings if entry.code == "columns-disagree"]
        seen += bool(found)
        named += any(entry.repair and "sign" in entry.repair for entry in found)
    assert seen >= 50
    assert named >= 0.9 * seen


# What was ordered


@pytest.mark.parametrize(
    ("text", "verdict"),
    [
        ("gdd from 750 nm to 850 nm = -40 +- 15 fs^2", "conforming"),
        ("gdd from 750 nm to 850 nm = -40 +- 3 fs^2", "not decided"),
        ("gdd from 750 nm to 850 nm >= 0 fs^2", "not conforming"),
        ("gdd at 800 nm = -40 +- 0.1 fs^2", "conforming"),
        ("gdd at 801 nm = -40 +- 3 fs^2", "conforming"),
        ("gdd at 600 nm = -40 +- 5 fs^2", "not decided"),
        ("tod at 800 nm = 445 +- 5 fs^3", "conforming"),
        ("group delay at 800 nm = 35 +- 1 fs", "conforming"),
        ("reflectance from 700 nm to 900 nm >= 99.8 %", "conforming"),
        ("reflectance from 680 nm to 900 nm >= 0.998", "conforming"),
        ("reflectance at 930 nm >= 99.95 %", "not conforming"),
        ("transmittance at 800 nm <= 0.1 %", "conforming"),
        ("gvd at 800 nm = 36 +- 1 fs^2/mm", "not decided"),
    ],
)
def test_requirements_on_a_mirror(text, verdict):
    (answer,) = judged(table(mirror()), require=(text,)).requirements
    assert answer.verdict == verdict, answer


def test_between_rows_the_curve_is_inside_the_bounds():
    nm = np.linspace(700.0, 900.0, 37)
    sent = table(mirror())
    for place in nm:
        text = f"gdd at {place:.6f} nm >= -1000 fs^2"
        low, high = judged(sent, require=(text,)).requirements[0].bounds
        assert low <= mirror(np.array([place]))["gdd"][0] <= high


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("gdd at 800 nm = 40 +- 5 fs^2", "sign is turned"),
        ("gdd at 800 nm = -80 +- 5 fs^2", "a pair was ordered"),
        ("gdd at 800 nm = -20 +- 5 fs^2", "pair of bounces and not of one"),
    ],
)
def test_what_was_ordered_with_another_sign_or_for_a_pair(text, words):
    assert words in finding(judged(table(mirror()), require=(text,)), "other-than-ordered").text


def test_a_table_of_transmittance_alone_is_no_mirror():
    assert not is_mirror(table(some("transmittance")))
    assert is_mirror(table(some("gdd")))


def test_other_phases_are_not_taken_for_a_delay():
    """A random walk is no integral of the group delay, whatever its sign."""
    walk = np.cumsum(np.random.default_rng(5).normal(0, 0.3, len(NM)))
    assert "columns-disagree" in codes(judged(table(some("phase", "group_delay", phase=walk))), "error")
