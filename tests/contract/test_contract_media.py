"""Media of the contract, asked from outside; expected values are worked out here or printed elsewhere."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.optimize import brentq
from scipy.special import dawsn, wofz

C = 299792458.0
CENTRE = "780.24 nm"
OMEGA = 2 * np.pi * C / 780.24e-9
SILICA = [(0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161)]  # I. H. Malitson (1965)


def slab(medium: str, thickness: str, more: str = "") -> str:
    return f'[[path]]\nkind = "slab"\nmedium = "{medium}"\nthickness = "{thickness}"\n{more}\n'


def line(text: str, background: str = '"vacuum"') -> str:
    return f"[medium.m]\nbackground = {background}\nlines = [ {{ {text} }} ]\n"


# chi = wp^2 / (w0^2 - w^2 - i g w), g = 2 pi width: at the centre Im chi = wp^2 / (g w0), and alpha is
# Im chi w0 / c for a faint line. e^2 / (eps0 m_e) with CODATA 2022. A Lorentzian of peak a and FWHM w has the
# area pi a w / 2.
PLASMA = 1e18
PER_MM = PLASMA / (2 * np.pi * 1e9) / C / 1e3
FREE = 1.602176634e-19**2 / (8.8541878188e-12 * 9.1093837139e-31)


@pytest.mark.parametrize(
    ("stated", "expected"),
    [
        ('width = "1 GHz", peak_absorption = "12 cm^-1"', 1.2),
        ('half_width = "1 GHz", peak_absorption = "12 cm^-1"', 1.2),
        ('dephasing_time = "318 ps", peak_absorption = "12 cm^-1"', 1.2),
        ('width = "1 GHz", doppler_width = "0.6 GHz", peak_absorption = "12 cm^-1"', 1.2),
        ('doppler_width = "0.6 GHz", peak_absorption = "12 cm^-1"', 1.2),
        ('width = "1 GHz", integrated_absorption = "12 GHz/cm"', 2 * 12 / np.pi / 10),
        ('width = "1 GHz", integrated_absorption = "1 cm^-2"', 2 * C * 1e4 / np.pi / 1e9 / 1e3),
        ('width = "1 GHz", plasma_frequency = "1 rad/ns"', PER_MM),
        ('width = "4.135667697 ueV", plasma_frequency = "1 rad/ns"', PER_MM),
        ('width = "0.0333564095198 cm^-1", plasma_frequency = "1 rad/ns"', PER_MM),
        ('width = "6.283185307179586 rad/ns", plasma_frequency = "1 rad/ns"', PER_MM),
        ('width = "1 GHz", static_susceptibility = 1e-12', 1e-12 * OMEGA**2 / (2 * np.pi * 1e9) / C / 1e3),
        (
            'width = "1 GHz", oscillator_strength = 0.7, number_density = "1e10 cm^-3"',
            0.7e16 * FREE / (2 * np.pi * 1e9) / C / 1e3,
        ),
    ],
)
def test_every_strength_and_width_of_a_line(medium, stated, expected):
    row = medium(line(f'centre = "{CENTRE}", {stated}'), CENTRE)["at"][0]
    assert row["absorption_per_mm"] == pytest.approx(expected, rel=3e-6)


def test_peak_absorption_counts_the_background_index(medium):
    row = medium(line(f'centre = "{CENTRE}", width = "1 GHz", peak_absorption = "12 cm^-1"', "1.5"), CENTRE)[
        "at"
    ][0]
    assert row["absorption_per_mm"] == pytest.approx(1.2, rel=1e-7)
    assert row["index"] == pytest.approx(1.5, abs=1e-7)


def test_a_voigt_line_off_its_centre(medium):
    # Re w(z), z = (detuning + i HWHM) sqrt(ln 2) / Doppler HWHM: NIST Digital Library of Mathematical
    # Functions, 7.19.
    away = 2 * np.pi * 0.8e9
    place = f"{2 * np.pi * C / (OMEGA + away) * 1e9:.15f} nm"
    scale = np.sqrt(np.log(2)) / (np.pi * 0.6e9)
    shape = [wofz((detuning + 1j * np.pi * 1e9) * scale).real for detuning in (away, 0.0)]
    stated = f'centre = "{CENTRE}", width = "1 GHz", doppler_width = "0.6 GHz", peak_absorption = "12 cm^-1"'
    row = medium(line(stated), place)["at"][0]
    assert row["absorption_per_mm"] == pytest.approx(1.2 * shape[0] / shape[1], rel=1e-4)


def test_carriers_reflect_below_their_plasma_frequency(medium):
    # -wp^2 / (w^2 + i g w), wp = 9, g = 0.1 rad/fs at w = 9: n + ik worked out by hand.
    index = np.sqrt(1 - 81 / (81 + 0.9j))
    tables = '[medium.m]\ncarriers = [ { plasma_frequency = "9 rad/fs", scattering_time = "10 fs" } ]\n'
    row = medium(tables, f"{2 * np.pi * C / 9e15 * 1e9:.13f} nm")["at"][0]
    assert [row["index"], row["k"]] == pytest.approx([index.real, index.imag], rel=1e-11)


def test_a_relaxation_as_debye_gives_it(medium):
    # Water at 25 degC, one time (U. Kaatze 1989, from memory): 5.2 + 73.16 / (1 - i w t), t = 8.27 ps, at
    # w = 0.1 rad/ps.
    index = np.sqrt(5.2 + 73.16 / (1 - 0.827j))
    tables = (
        f"[medium.m]\nbackground = {float(np.sqrt(5.2))}\n"
        'relaxations = [ { static_susceptibility = 73.16, time = "8.27 ps" } ]\n'
    )
    row = medium(tables, f"{2 * np.pi * C / 1e11 * 1e3:.13f} mm")["at"][0]
    assert [row["index"], row["k"]] == pytest.approx([index.real, index.imag], rel=1e-12)


# Absorption known from a table: k = A (exp(-((w - w1)/s)^2) - exp(-((w + w1)/s)^2)); n - 1 is its Hilbert
# transform with Dawson's integral (NIST Digital Library of Mathematical Functions, 7.2.5).
BAND = 2 * np.pi * C / 620e-9
WIDTH = 0.12e15
LENGTH = 2e-3


def k_of(omega):
    return 2e-4 * (np.exp(-(((omega - BAND) / WIDTH) ** 2)) - np.exp(-(((omega + BAND) / WIDTH) ** 2)))


def n_of(omega):
    return 1.5 + 4e-4 / np.sqrt(np.pi) * (dawsn((omega + BAND) / WIDTH) - dawsn((omega - BAND) / WIDTH))


NM = np.arange(500, 850.1, 1.0)
AXIS = 2 * np.pi * C / (NM * 1e-9)
ALPHA = 2 * k_of(AXIS) * AXIS / C
REFLECTED = ((n_of(AXIS) - 1) / (n_of(AXIS) + 1)) ** 2
PASSED = np.exp(-ALPHA * LENGTH)
TABLES = {
    'x = "wavelength", x_unit = "nm", y = "absorbance", path_length = "2 mm"': (
        NM,
        ALPHA * LENGTH / np.log(10),
    ),
    'x = "wavelength", x_unit = "um", y = "napierian", path_length = "2 mm"': (NM / 1e3, ALPHA * LENGTH),
    'x = "frequency", x_unit = "THz", y = "alpha", y_unit = "cm^-1"': (AXIS / (2e12 * np.pi), ALPHA / 100),
    'x = "wavenumber", x_unit = "cm^-1", y = "k"': (1e7 / NM, k_of(AXIS)),
    'x = "photon_energy", x_unit = "eV", y = "molar", y_unit = "L/(mol cm)", concentration = "1 mmol/L"': (
        1239.8419843320026 / NM,
        ALPHA / 100 / np.log(10) / 1e-3,
    ),
    'x = "wavelength", x_unit = "nm", y = "internal_transmittance", y_unit = "%", path_length = "2 mm"': (
        NM,
        100 * PASSED,
    ),
    'x = "wavelength", x_unit = "nm", y = "transmittance", path_length = "2 mm"': (
        NM,
        (1 - REFLECTED) ** 2 * PASSED / (1 - REFLECTED**2 * PASSED**2),
    ),
}
ANCHOR = (
    f'anchor = [ {{ at = "800 nm", index = {float(n_of(2 * np.pi * C / 800e-9))}, uncertainty = 0.0002 }} ]\n'
)


def absorbing(tmp_path, spec: str, x, y) -> str:
    np.savetxt(
        tmp_path / "table.csv", np.column_stack([x, y]), fmt="%.12g", delimiter=",", header="x,y", comments=""
    )
    return f'[medium.m]\nbackground = 1.5\nabsorption = {{ file = "table.csv", {spec} }}\n' + ANCHOR


@pytest.mark.parametrize("spec", TABLES)
def test_every_kind_of_absorption_table_gives_the_index_that_goes_with_it(medium, tmp_path, spec):
    row = medium(absorbing(tmp_path, spec, *TABLES[spec]), "650 nm")["at"][0]
    omega, step = 2 * np.pi * C / 650e-9, 1e12
    phase = [(omega + m * step) * n_of(omega + m * step) / C for m in (-1, 0, 1)]
    assert row["k"] == pytest.approx(k_of(omega), rel=1e-6)
    assert row["index"] == pytest.approx(n_of(omega), abs=1e-9)
    assert row["gvd_fs2_per_mm"] == pytest.approx(
        (phase[0] - 2 * phase[1] + phase[2]) / step**2 * 1e27, abs=2e-3
    )


def test_without_an_anchor_the_index_is_relative_and_a_caution_says_so(sent, tmp_path):
    spec = next(iter(TABLES))
    tables = absorbing(tmp_path, spec, *TABLES[spec]).replace(ANCHOR, "")
    codes = [caution["code"] for caution in sent(slab("m", "1 mm") + tables, centre="700 nm")["cautions"]]
    assert "no-anchor" in codes


def test_a_ceiling_is_read_in_the_unit_of_y(medium, tmp_path):
    spec = 'x = "frequency", x_unit = "THz", y = "alpha", y_unit = "cm^-1"'
    tables = absorbing(tmp_path, spec + ", ceiling = 30.0", *TABLES[spec])
    above = int(np.sum(ALPHA / 100 > 30.0))
    assert 0 < above < 60
    notes = " ".join(medium(tables)["notes"])
    assert "above the stated ceiling are lower limits" in notes
    assert f"and {above - 5} more" in notes


@pytest.mark.parametrize(
    ("spoil", "parts"),
    [
        (lambda x, y: (x[:0], y[:0]), ["no row of numbers"]),
        (lambda x, y: (x, np.where(x == 620, np.nan, y)), ["table.csv:122", "nan"]),
        (lambda x, y: (np.where(x == 620, 640.5, x), y), ["table.csv:123", "out of order"]),
        (lambda x, y: (y, x), ["swapped"]),
        (lambda x, y: (x, -y), ["negative beyond noise"]),
        (lambda x, y: (x, np.where(x == 620, 1e300, y)), ["row 122", "no matter absorbs like this"]),
        (lambda x, y: (x / 1e9, y), ["table.csv:2", "x_unit"]),
    ],
)
def test_a_spoiled_table_is_refused_with_its_place(refused, tmp_path, spoil, parts):
    spec = next(iter(TABLES))
    message = refused(slab("m", "1 mm") + absorbing(tmp_path, spec, *spoil(*TABLES[spec])), centre="700 nm")
    for part in parts:
        assert part in message


def silica(nm):
    um2 = (np.asarray(nm) / 1e3) ** 2
    return np.sqrt(1 + sum(strength * um2 / (um2 - place**2) for strength, place in SILICA))


def test_a_vendors_index_table_has_the_dispersion_of_what_was_measured(medium, tmp_path):
    nm = np.arange(400, 1201, 20.0)
    np.savetxt(
        tmp_path / "v.csv", np.column_stack([nm / 1e3, silica(nm)]), fmt=["%.3f", "%.6f"], delimiter=",",
        header="wavelength,n", comments="",
    )  # fmt: skip
    row = medium('[medium.m]\nindex = { file = "v.csv", x_unit = "um", relative_to = "air" }\n', "800 nm")[
        "at"
    ][0]
    # Malitson 1965: n, n_g and GVD of the open list; six printed decimals.
    assert row["index"] == pytest.approx(1.4533172549, abs=2e-6)
    assert row["gvd_fs2_per_mm"] == pytest.approx(36.162, abs=0.1)


def test_an_index_against_air_becomes_one_against_vacuum(medium):
    # Own computation, Malitson 1965 with the standard air of Ciddor 1996: n_abs(L) = n_rel(L / n_air) n_air.
    terms = ", ".join(f'{{ strength = {s}, resonance = "{r} um" }}' for s, r in SILICA)
    formula = (
        f'[medium.m]\nabsolute = true\n[medium.m.formula]\nkind = "sellmeier"\nterms = [ {terms} ]\n'
        'valid = ["210 nm", "3.71 um"]\nrelative_to = "air"\n'
    )
    found = medium(formula, "800 nm")
    assert found["relative_to"] == "vacuum"
    assert found["at"][0]["gvd_fs2_per_mm"] == pytest.approx(36.2313299, rel=1e-7)
    plain = medium(formula.replace("absolute = true", "absolute = false"), "800 nm")
    assert plain["at"][0]["gvd_fs2_per_mm"] == pytest.approx(36.1619983, rel=1e-9)


def test_a_gas_scales_with_its_density(medium):
    # E. R. Peck and D. J. Fisher (1964): 20.047 fs^2/m at 0 degC and 101325 Pa; times p/T; the virial term is
    # below 0.1 %.
    gas = '[medium.m]\ngas = { medium = "argon", pressure = "0.4 bar", temperature = "22 degC" }\n'
    expected = 20.0474e-3 * (0.4e5 / 101325) * (273.15 / 295.15)
    assert medium(gas, "800 nm")["at"][0]["gvd_fs2_per_mm"] == pytest.approx(expected, rel=1e-3)


def test_humid_air_refracts_less_than_dry_air(medium):
    # P. E. Ciddor (1996), Table 3 (from memory): 20 degC, 100 kPa, 450 ppm CO2 at 633 nm, dry 1.00026824.
    state = 'medium = "humid air", pressure = "100 kPa", temperature = "20 degC"'
    gas = f'[medium.m]\ngas = {{{{ {state}, humidity = "{{}}" }}}}\n'
    dry, humid = (medium(gas.format(h), "633 nm")["at"][0]["index"] for h in ("0 %", "100 %"))
    assert dry == pytest.approx(1.00026824, abs=2e-8)
    # Water vapour at saturation, 2338 Pa (common practice): about -3.7e-10 per Pa in this band.
    assert humid - dry == pytest.approx(-3.7e-10 * 2338, rel=0.03)


@pytest.mark.parametrize("rule", ["lorentz-lorenz", "maxwell garnett", "bruggeman"])
def test_a_mixture_follows_its_rule(command, medium, rule):
    parts = [
        command("media", name, "--at", "800 nm", "--json", "-").json["at"][0]["index"]
        for name in ("water", "ethylene glycol")
    ]
    host, other = np.square(parts)

    def per_volume(eps):
        return (eps - 1) / (eps + 2)

    if rule == "bruggeman":
        eps = brentq(lambda e: 0.7 * (host - e) / (host + 2 * e) + 0.3 * (other - e) / (other + 2 * e), 1, 3)
    elif rule == "lorentz-lorenz":
        load = 0.7 * per_volume(host) + 0.3 * per_volume(other)
        eps = (1 + 2 * load) / (1 - load)
    else:
        load = 0.3 * (other - host) / (other + 2 * host)
        eps = host * (1 + 2 * load) / (1 - load)
    parts = '{ medium = "water", fraction = 0.7 }, { medium = "ethylene glycol", fraction = 0.3 }'
    row = medium(f'[medium.m]\nmixture = [ {parts} ]\nrule = "{rule}"\n', "800 nm")["at"][0]
    assert row["index"] == pytest.approx(np.sqrt(eps), rel=1e-11)


def test_orders_in_the_units_of_fibres_and_never_called_causal(sent):
    # GVD = -D lambda^2 / (2 pi c); (n_g - 1) L / c.
    orders = (
        '[medium.m]\norders = { at = "1550 nm", index = 1.45, group_index = 1.468, '
        'dispersion = "17 ps/(nm km)", dispersion_slope = "0.06 ps/(nm^2 km)" }\n'
    )
    answer = sent(
        slab("m", "1 m", 'name = "fibre"') + orders,
        centre="1550 nm",
        pulse='duration = "100 fs"\nenergy = "1 nJ"',
    )
    scale = 1550e-9**2 / (2 * np.pi * C)
    assert answer["path"]["group_delay_fs"] == pytest.approx(0.468 / C * 1e15, rel=1e-12)
    assert answer["path"]["gdd_fs2"] == pytest.approx(-17e-6 * scale * 1e30, rel=1e-9)
    assert answer["path"]["tod_fs3"] == pytest.approx(scale**2 * (60.0 + 34e-6 / 1550e-9) * 1e45, rel=1e-9)
    assert answer["causality"]["verdict"] == "unresolved"
    assert answer["causality"]["left_out"] == ["fibre"]
    assert answer["media"][0]["notes"] == ["orders only: not a causal model"]


def test_vacuum_is_a_medium_like_others(sent, command):
    answer = sent(slab("vacuum", "1 m"), pulse='duration = "30 fs"\nenergy = "1 uJ"\nbeam_radius = "1 mm"')
    assert (
        answer["path"]["group_delay_fs"] == answer["path"]["gdd_fs2"] == answer["path"]["b_integral_rad"] == 0
    )
    assert answer["causality"]["verdict"] == "causal"
    assert answer["warnings"] == []
    row = command("media", "vacuum", "--at", "800 nm", "--json", "-").json["at"][0]
    assert (row["index"], row["group_index"], row["gvd_fs2_per_mm"]) == (1, 1, 0)


def test_a_glass_of_another_name_is_offered_with_its_twin(command):
    told = command("media", "SF 10")
    assert told.code == 2
    assert "'SF10'" in told.err
    assert "'N-SF10'" in told.err


@pytest.mark.parametrize(
    "name", ["glycerol", "ethanol (Rheims 1997)", "methane", "PMMA", "BBO o (Zhang 2000)"]
)
def test_media_whose_formula_has_no_poles_pass_the_front_test(sent, command, name):
    low, high = command("media", name, "--json", "-").json["valid_nm"]
    centre = min(max(800, 1.3 * low), high / 1.3)
    centre = centre if low < centre < high else (low * high) ** 0.5
    answer = sent(
        slab(name, "1 mm"), centre=f"{centre} nm", pulse=f'duration = "{centre / 20} fs"\nenergy = "1 nJ"'
    )
    assert answer["causality"]["verdict"] == "causal"
    assert answer["causality"]["passive"] is True
