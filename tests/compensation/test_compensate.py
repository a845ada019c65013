"""From the question to the answer: an engineer's path to 12 fs, tolerances, limits, and what data hide.

The path of the first tests: glass, crystals and 3 m of air before a sample, 12 fs at 800 nm. Expected values
were computed beforehand from the published dispersion formulas by another program: with 20 mirrors of
-40 fs^2 14.0 fs and 85 % of the peak; with -39.3 fs^2 and -26.4 fs^3 a bounce 12.0 fs.
"""

from __future__ import annotations

import json

import numpy as np
import pytest
from scipy.special import j0

from pulseprop.compensation.compensate import compensate
from pulseprop.compensation.problem import Adjustment, Alternative, Goal, Part, Problem, fixed
from pulseprop.elements.element import orders_of_element
from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError, RangeError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium, Resonance

C = 299792458.0
FWHM = 12e-15
PER_GDD = 4 * np.log(2) / FWHM**2
"""Chirp parameter x of a Gaussian over its GDD: the peak falls as (1 + x^2)^(-1/2)."""
FIVE_PERCENT = np.sqrt(0.95**-2 - 1) / PER_GDD
"""GDD that costs 5 % of the peak of a 12 fs Gaussian, s^2: 17.1 fs^2."""


def sample_path(bench):
    thicknesses = {
        "N-BK7": 4e-3,
        "SF10": 2e-3,
        "air": 3.0,
        "quartz": 1e-3,
        "MgF2": 0.8e-3,
        "fused silica": 3e-3,
        "sapphire": 1e-3,
    }
    return [bench.glass(name, thickness) for name, thickness in thicknesses.items()]


def answer(bench, parts, **more):
    return compensate(Problem(pulse=bench.pulse(FWHM), parts=tuple(parts), **more))


def test_the_path_alone_and_with_stock_mirrors(bench):
    found = answer(bench, [*sample_path(bench), bench.mirrors("stock", -40e-30, most=30)])
    assert found.transform_limit_fwhm_fs == pytest.approx(12.0, abs=1e-6)
    assert found.before.fwhm_fs == pytest.approx(181.6, abs=0.1)
    assert found.before.peak_ratio == pytest.approx(0.066, abs=5e-4)
    assert found.before.residual_gdd_fs2 == pytest.approx(785.8, abs=0.1)
    design = found.designs[0]
    assert [(one.element, one.value, one.unit, one.move) for one in design.settings] == [
        ("stock", 20.0, "", None)
    ]
    assert design.fwhm_fs == pytest.approx(14.0, abs=0.05)
    assert design.peak_ratio == pytest.approx(0.85, abs=0.005)


def test_a_mirror_to_order_has_its_sheet(bench):
    found = answer(bench, [*sample_path(bench), bench.ordered_mirror(20.0)])
    design, sheet = found.designs[0], found.designs[0].mirrors[0]
    assert design.fwhm_fs == pytest.approx(12.0, abs=0.005)
    assert sheet.bounces == 20
    # Nulling both orders asks for -39.3 and -26.4; the fourth order moves the best by less than 1 %.
    assert sheet.gdd_at_centre_fs2 == pytest.approx(-39.3, abs=0.05)
    assert sheet.tod_at_centre_fs3 == pytest.approx(-26.4, rel=0.01)
    at_centre = np.interp(800.0, sheet.wavelength_nm, sheet.gdd_fs2)
    assert at_centre == pytest.approx(sheet.gdd_at_centre_fs2, abs=1e-3)
    assert np.all(sheet.low_fs2 < sheet.gdd_fs2)
    assert np.all(sheet.gdd_fs2 < sheet.high_fs2)
    # The ideal curve takes the whole rest of the path out: at the centre that is its GDD over the bounces.
    rest = sum(
        orders_of_element(slab, bench.OMEGA)[1] for part in sample_path(bench) for slab in part.build({})
    )
    ideal = np.interp(800.0, sheet.wavelength_nm, sheet.ideal_gdd_fs2)
    assert ideal == pytest.approx(-rest * 1e30 / 20, abs=1e-3)


def test_the_orders_of_the_sheet_alone_give_twelve_femtoseconds(bench):
    found = answer(
        bench, [*sample_path(bench), bench.mirrors("made", -39.3e-30, -26.4e-45, most=20, step=20)]
    )
    assert found.designs[0].fwhm_fs == pytest.approx(12.0, abs=0.01)


def test_tolerances_of_a_gaussian_are_the_closed_form(bench):
    """GDD that costs 5 %: x = 0.3287; in glass that over its GVD; a fast ripple of phase amplitude a keeps
    J0(a)^2 of the peak: its replicas lie beside the pulse."""
    found = answer(bench, [bench.glass("CaF2", 2e-3), bench.ordered_mirror(2.0)])
    drifts = {(one.element, one.parameter): one for one in found.designs[0].tolerance}
    gdd = drifts["mirror to order", "gdd"]
    assert gdd.below == pytest.approx(FIVE_PERCENT * 1e30 / 2, rel=2e-3)
    assert gdd.above == pytest.approx(FIVE_PERCENT * 1e30 / 2, rel=2e-3)
    slab = Slab(name="CaF2", medium=catalogue_medium("CaF2"), thickness=1e-3)
    glass = drifts["CaF2", "thickness"]
    assert glass.above == pytest.approx(FIVE_PERCENT / orders_of_element(slab, bench.OMEGA)[1], rel=0.01)
    assert not glass.set_by_hand
    sheet = found.designs[0].mirrors[0]
    assert sheet.offset_fs2 == pytest.approx(gdd.above, rel=5e-3)
    fast = sheet.ripples[-1]
    amplitude = np.interp(-0.95, -(j0(np.linspace(0, 1, 2001)) ** 2), np.linspace(0, 1, 2001))
    wanted = amplitude * (1e15 / (fast.period_THz * 1e12)) ** 2 / 2
    assert fast.amplitude_fs2 == pytest.approx(wanted, rel=2e-3)


def test_all_drifts_at_once_are_tighter_than_alone_and_repeat(bench):
    parts = [bench.glass("CaF2", 2e-3), bench.glass("SF10", 0.5e-3), bench.ordered_mirror(6.0)]
    first, second = (answer(bench, parts, seed=7).designs[0].together for _ in range(2))
    assert first == second
    assert first.share_of_lone is not None
    assert 0.1 < first.share_of_lone < 1.0
    # Errors of 0.1 mm in CaF2 and SF10 alone, normal: the mean loss is at least that of the glass by itself.
    assert first.workshop_peak_median is not None
    assert first.workshop_peak_tenth is not None
    assert first.workshop_peak_tenth < first.workshop_peak_median < 1.0
    other = answer(bench, parts, seed=8).designs[0].together
    assert other != first


def test_one_quantity_alone_may_use_its_whole_tolerance(bench):
    parts = [
        fixed(PhaseOrders(name="rest", centre=bench.OMEGA, gdd=500e-30)),
        bench.wedge("SF10", optional=True),
    ]
    parts.append(bench.mirrors("m", -100e-30, most=10, step=1))
    design = answer(bench, parts[:1] + parts[2:]).designs[0]
    assert design.tolerance == ()
    assert design.together.share_of_lone is None
    assert design.together.workshop_peak_median is None


def test_an_angle_that_is_off_changes_the_orders_by_its_derivative(bench):
    """Gratings at 0.1 deg: orders of two other gratings, one at each side."""
    part = bench.gratings(300e3, (10.0, 10.0), most=40e-3)
    drifting = Part(
        name=part.name,
        build=lambda given: part.build({"incidence": np.radians(10.0), **given}),
        adjustments=(part.adjustments[0],),
        drifts=(
            Adjustment(parameter="incidence", unit="deg", unit_size=np.radians(1.0), now=np.radians(10.0)),
        ),
    )
    found = answer(bench, [bench.glass("fused silica", 20e-3), drifting])
    design = found.designs[0]
    error = design.angles[0]
    assert (error.element, error.parameter, error.angle_deg) == ("gratings", "incidence", pytest.approx(0.1))
    separation = design.settings[0].value * 1e-3

    def orders(degrees):
        built = part.build({"separation": separation, "incidence": np.radians(degrees)})
        return np.array(orders_of_element(built[0], bench.OMEGA))[1:] * [1e30, 1e45, 1e60]

    differences = [orders(10.1) - orders(10.0), orders(9.9) - orders(10.0)]
    sizes = np.max(np.abs(differences), axis=0)
    found_sizes = np.abs([error.gdd_error_fs2, error.tod_error_fs3, error.fod_error_fs4])
    assert found_sizes == pytest.approx(sizes, rel=1e-9)
    assert np.sign(error.gdd_error_fs2) == np.sign(differences[0][0])
    drift = {one.parameter: one for one in design.tolerance}["incidence"]
    assert drift.above is not None
    assert drift.sigma == pytest.approx(0.1)
    assert not drift.set_by_hand


def test_moves_are_counted_from_today(bench):
    part = bench.wedge("SF10", most=8e-3)
    today = Part(
        name="wedge",
        build=part.build,
        adjustments=(
            Adjustment(parameter="insertion", unit="mm", unit_size=1e-3, low=0.0, high=8e-3, now=3e-3),
        ),
    )
    found = answer(bench, [fixed(PhaseOrders(name="rest", centre=bench.OMEGA, gdd=-700e-30)), today])
    setting = found.designs[0].settings[0]
    assert setting.move == pytest.approx(setting.value - 3.0, abs=1e-12)
    gvd = orders_of_element(part.build({"insertion": 1e-3})[0], bench.OMEGA)[1]
    assert setting.value == pytest.approx(700e-30 / gvd, rel=0.01)
    assert found.before.in_place == ("wedge",)
    assert found.before.residual_gdd_fs2 == pytest.approx(3 * gvd * 1e30 - 700, abs=1e-6)


def test_a_target_out_of_reach_names_the_nearest_miss(bench):
    """2 mm of wedge travel against 700 fs^2: all of it is taken, and it is not enough."""
    rest = fixed(PhaseOrders(name="rest", centre=bench.OMEGA, gdd=-700e-30, tod=-445e-45))
    found = answer(bench, [rest, bench.wedge("SF10", most=2e-3)], goal=Goal(target=0.95))
    assert found.exit_code == 1
    target = found.target
    assert not target.reached
    assert target.nearest == pytest.approx(found.designs[0].peak_ratio)
    assert target.short_by == pytest.approx(0.95 - target.nearest)
    assert target.limits == ("wedge: insertion at its high limit, 2 mm",)
    assert found.designs[0].settings[0].at_limit == "high"
    near = answer(bench, [rest, bench.wedge("SF10", most=6e-3)], goal=Goal(target=0.95))
    assert near.exit_code == 0
    assert near.target.short_by == 0.0


@pytest.mark.parametrize(("wanted", "code"), [(12e-15, 0), (11.9e-15, 1)])
def test_a_duration_is_a_target_in_seconds(bench, wanted, code):
    parts = [*sample_path(bench), bench.ordered_mirror(20.0)]
    found = answer(bench, parts, goal=Goal(name="duration", target=wanted))
    assert found.exit_code == code
    assert found.target.unit == "fs"
    assert found.target.nearest == pytest.approx(12.0, abs=0.005)


def test_vendor_data_are_run_over_their_worst_cases(bench):
    """A glass that may have 20 fs^2 more or less: a wedge can be set anew, a count of mirrors cannot."""

    def shift(gdd):
        return lambda omega: 0.5j * gdd * (omega - bench.OMEGA) ** 2

    cases = (
        Alternative(name="most", exponent=shift(20e-30)),
        Alternative(name="least", exponent=shift(-20e-30)),
    )
    rest = fixed(PhaseOrders(name="rest", centre=bench.OMEGA, gdd=-300e-30))
    parts = [rest, bench.wedge("fused silica", most=12e-3, optional=True)]
    parts.append(bench.mirrors("m", 50e-30, most=10, step=1))
    found = answer(bench, parts, alternatives=cases, best=3)
    by_mirrors = next(one for one in found.designs if [s.element for s in one.settings] == ["m"])
    by_wedge = next(one for one in found.designs if [s.element for s in one.settings] == ["wedge"])
    lost = 1 / np.hypot(1, PER_GDD * 20e-30)
    for case in by_mirrors.data:
        assert case.peak_ratio == pytest.approx(lost, rel=1e-6)
        assert case.peak_ratio_reset == pytest.approx(lost, rel=1e-6)
    for case in by_wedge.data:
        assert case.peak_ratio < by_wedge.peak_ratio - 0.02
        assert case.peak_ratio_reset > by_wedge.peak_ratio - 0.005
    worst = by_wedge.worst_case
    assert worst is not None
    assert worst.peak_ratio == min(case.peak_ratio for case in by_wedge.data)


def test_what_no_compensator_can_undo(bench):
    """A line inside the spectrum leaves structure; glass leaves none; a uniform loss only light."""
    width, depth, length = 2 * np.pi * 4e12, 6.0, 1e-3
    resonance = LorentzLine(strength=width * depth / length * C, centre=bench.OMEGA * 1.005, width=width)
    vapour = Medium(
        name="line", response=resonance, resonances=(Resonance(resonance.centre, width, 2 / width),)
    )
    cell = fixed(Slab(name="cell", medium=vapour, thickness=length))
    lined = answer(bench, [cell, bench.mirrors("m", -40e-30)]).remainder
    assert lined.smooth_peak_ratio < 0.98
    # Amplitude exp(-depth/2 / (1 + (2 d / width)^2)) over a Gaussian, summed.
    brute = bench.Brute(FWHM, points=4096)
    offset = 2 * (brute.omega - resonance.centre) / width
    left = np.exp(-0.5 * depth / (1 + offset**2))
    limit = (brute.amplitude @ left / brute.amplitude.sum()) ** 2
    assert lined.peak_limit == pytest.approx(limit, rel=0.01)
    passed = brute.amplitude**2 @ left**2 / (brute.amplitude**2).sum()
    assert lined.transmission == pytest.approx(passed, rel=0.01)
    # exp(-6) of the power is left at the line's centre; half where depth / (1 + (2 d / width)^2) = ln 2.
    half = 0.5 * width * np.sqrt(depth / np.log(2) - 1)
    (low, high) = (2e9 * np.pi * C / (resonance.centre + sign * half) for sign in (1, -1))
    assert lined.dark_nm[0] == pytest.approx((low, high), abs=0.6)
    glass = answer(bench, [bench.glass("SF10", 5e-3), bench.mirrors("m", -40e-30)]).remainder
    assert glass.smooth_peak_ratio == pytest.approx(1.0, abs=1e-6)
    assert glass.limit_out_fs == pytest.approx(12.0, rel=1e-3)
    assert glass.dark_nm == ()
    grey = answer(bench, [fixed(Loss(name="grey", transmittance=0.4)), bench.mirrors("m", -40e-30)]).remainder
    assert grey.peak_limit == pytest.approx(0.4, rel=1e-9)
    assert grey.transmission == pytest.approx(0.4, rel=1e-9)
    assert grey.limit_out_fs == pytest.approx(grey.limit_in_fs, rel=1e-9)


def test_the_answer_is_json(bench):
    found = answer(
        bench, [*sample_path(bench), bench.ordered_mirror(20.0), bench.wedge(optional=True)], best=2
    )
    document = json.loads(json.dumps(found.as_json(), allow_nan=False))
    assert set(document) >= {"transform_limit_fwhm_fs", "before", "designs"}
    wanted = {
        "settings",
        "fwhm_fs",
        "peak_ratio",
        "transmission",
        "residual_gdd_fs2",
        "residual_tod_fs3",
        "tolerance",
    }
    for design in document["designs"]:
        assert set(design) >= wanted
        assert set(design["settings"][0]) >= {"element", "parameter", "value", "unit", "move"}


def test_a_design_agrees_with_its_path_sent_through(bench):
    """The elements of the design, walked anew on another grid, have the measures that the design states."""
    design = answer(bench, [bench.glass("SF10", 4e-3), bench.prisms("SF10", most=1.5)]).designs[0]
    brute = bench.Brute(FWHM)
    exponent = brute.exponent(*design.path)
    assert brute.ratio(exponent) == pytest.approx(design.peak_ratio, abs=2e-4)
    residual = sum(orders_of_element(element, bench.OMEGA)[1] for element in design.path)
    assert design.residual_gdd_fs2 == pytest.approx(residual * 1e30, abs=1e-6)
    assert design.size_m == pytest.approx(design.path.elements[1].footprint)


def test_a_thinner_window_and_a_higher_pressure_carry_a_caution(bench):
    def build(settings):
        slab = Slab(name="window", medium=catalogue_medium("SF10"), thickness=float(settings["thickness"]))
        return (slab,)

    part = Part(
        name="window",
        build=build,
        adjustments=(
            Adjustment(parameter="thickness", unit="mm", unit_size=1e-3, low=0.5e-3, high=5e-3, now=5e-3),
        ),
    )
    found = answer(bench, [fixed(PhaseOrders(name="rest", centre=bench.OMEGA, gdd=-400e-30)), part])
    assert found.designs[0].cautions
    assert "mechanical strength is not considered" in found.designs[0].cautions[0]


def test_a_chirped_pulse_is_compensated_with_its_chirp(bench):
    found = compensate(
        Problem(
            pulse=bench.pulse(30e-15, gdd=5000e-30), parts=(bench.gratings(600e3, (14.0, 14.0), most=10e-3),)
        )
    )
    design = found.designs[0]
    assert found.before.residual_gdd_fs2 == pytest.approx(5000.0, rel=1e-9)
    assert abs(design.residual_gdd_fs2) < 150
    assert design.fwhm_fs < 40


def test_settings_outside_their_band_are_not_taken(bench):
    """Gratings of 1200 lines/mm: below some incidence the red end of 12 fs is not diffracted."""
    found = answer(
        bench, [bench.glass("fused silica", 10e-3), bench.gratings(1200e3, (-20.0, 40.0), most=3e-3)]
    )
    assert found.designs[0].peak_ratio > 0.3
    assert found.designs[0].transmission == pytest.approx(1.0, abs=1e-5)
    assert found.search.refusals
    assert "leaves the band" in found.search.refusals[0] or "diffract" in found.search.refusals[0]


def test_a_pulse_outside_a_record_is_refused_as_in_any_run(bench):
    from dataclasses import replace

    source = replace(bench.pulse(30e-15), centre=2 * np.pi * 299792458.0 / 9e-6, duration=200e-15)
    with pytest.raises(RangeError, match="leaves the range"):
        compensate(Problem(pulse=source, parts=(bench.glass("fused silica", 1e-3), bench.wedge())))


def test_two_parts_of_one_name_are_refused(bench):
    with pytest.raises(InputError, match="share a name"):
        Problem(pulse=bench.pulse(), parts=(bench.glass("SF10", 1e-3), bench.glass("SF10", 2e-3)))
    with pytest.raises(InputError, match="number of designs"):
        Problem(pulse=bench.pulse(), parts=(), best=0)
