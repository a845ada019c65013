"""One file with every form that a scenario may hold, and each of them changed by one letter.

All data are invented but for the coefficients of a borosilicate crown glass, which are printed in its maker's
data sheet (from memory).
"""

from __future__ import annotations

import tomllib
from collections.abc import Iterator
from typing import Any

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.places import Keys, key_path, places_in
from pulseprop.scenario.read import scenario_from

WHOLE = """
title = "everything at once"
question = "does it all parse"
answer = "it does"
note = "invented"
laboratory = "an invented laboratory; all its data are invented"

[pulse]
shape = "gaussian"
centre = "800 nm"
wavelength_in = "air"
duration = "30 fs"
energy = "2 uJ"
repetition_rate = "1 kHz"
beam_radius = "1 mm"
gdd = "0 fs^2"
tod = "0 fs^3"
fod = "0 fs^4"
carrier_phase = "0 rad"
autocorrelation = { file = "ac.csv", x = "delay", x_unit = "fs" }

[[path]]
kind = "slab"
name = "cold window"
medium = "fused silica"
thickness = "3 mm"
angle = "0 deg"
polarisation = "p"
faces = "ideal"
temperature = "293 K"
keep = true

[[path]]
kind = "slab"
medium = "my crown"
thickness = "1 mm"
reflectance = "0.5 %"

[[path]]
kind = "loss"
transmittance = 0.92
beam_radius = "0.7 mm"

[[path]]
kind = "known orders"
name = "objective"
group_delay = "1 ps"
gdd = "1500 fs^2"
tod = "900 fs^3"
fod = "1 fs^4"
transmittance = "80 %"

[[path]]
kind = "pulse shaper"
gdd = "-1500 fs^2"
tod = "-900 fs^3"
fod = "-1 fs^4"

[medium."cell vapour"]
background = "vacuum"
lines = [
  { centre = "780.24 nm", wavelength_in = "air", width = "1 GHz", peak_absorption = "12 cm^-1" },
  { centre = "384 THz", dephasing_time = "1 ns", doppler_width = "0 GHz", peak_absorption = "1 cm^-1" },
]
lines_file = { file = "lines.csv", wavelength_in = "air" }
relaxations = [ { static_susceptibility = 73.16, time = "8.27 ps", valid = ["0 THz", "1 THz"] } ]
carriers = [ { plasma_frequency = "9 rad/fs", scattering_time = "10 fs" } ]
temperature = "80 degC"

[medium."my crown".formula]
kind = "sellmeier"
terms = [
  { strength = 1.03961212, resonance_squared = "0.00600069867 um^2" },
  { strength = 0.23, resonance = "141.5 nm" },
]
offset = 0.0
valid = ["300 nm", "2.5 um"]
relative_to = "air"
source = "where it is printed"

[medium."green filter"]
anchor = [ { at = "589.3 nm", index = 1.5230, uncertainty = 0.0002 } ]
[medium."green filter".absorption]
file = "filter.csv"
x = "wavelength"
x_unit = "nm"
y = "absorbance"
path_length = "2 mm"
ceiling = 3.0
tails = { below = "matched", above = "none" }

[medium."window stock"]
index = { file = "vendor.csv", x_unit = "um", relative_to = "air", uncertainty = { n = 1e-4, k = "2 %" } }
absolute = false
as_printed = true
source = "an invented vendor"

[medium."argon fill"]
gas = { medium = "argon", pressure = "0.4 bar", temperature = "22 degC", humidity = "40 %" }

[medium."coolant"]
mixture = [ { medium = "water", fraction = 0.7 }, { medium = "ethylene glycol", fraction = 0.3 } ]
rule = "lorentz-lorenz"

[medium."stock fibre"]
orders = { at = "1550 nm", index = 1.45, group_index = 1.468, gvd = "-22 fs^2/mm", tod = "90 fs^3/mm" }

[medium."stock fibre".kerr]
n2 = "2.6e-20 m^2/W"
steepening = true
raman = "none"
two_photon = "0 cm/GW"

[propagation]
nonlinear = false
method = "auto"
form = "envelope"
local_error = 1e-8

[grid]
span = "60 ps"
points = 65536
memory = "4 GiB"
beyond_range = "refuse"

[expect]
"pulse_out.fwhm_fs" = [30.0, 0.5]
"causality.verdict" = "causal"
"pulse_out.split" = false

[[compensate.with]]
kind = "grating pair"
grooves = "300 /mm"
incidence = "10 deg"
separation = { from = "2 mm", to = "80 mm", now = "31 mm" }
[compensate]
goal = "peak power"
target = 0.95

[[sweep]]
key = "path.1.thickness"
values = { from = "1 mm", to = "5 mm", points = 41 }
[study]
record = ["pulse_out.fwhm_fs", "path.transmission"]
sample = "grid"
"""

OPEN = ("expect", "sweep", "study")
"""Tables whose keys are not those of the schema."""


def keys_of(table: Any, above: Keys = ()) -> Iterator[Keys]:
    """All keys of the tables in a document, but for names of media and the open tables."""
    for key, value in table.items() if isinstance(table, dict) else enumerate(table):
        keys = (*above, key)
        if keys[0] in OPEN:
            continue
        if isinstance(key, str) and above != ("medium",):
            yield keys
        if isinstance(value, dict | list):
            yield from keys_of(value, keys)


def test_every_form_parses() -> None:
    content = scenario_from(tomllib.loads(WHOLE), text=WHOLE, file="whole.toml").content
    assert [element.kind for element in content.path] == [
        "slab",
        "slab",
        "loss",
        "known orders",
        "pulse shaper",
    ]
    assert next(iter(content.medium)) == "cell vapour"
    assert content.grid.memory == 4 * 2**30
    assert content.expect == {
        "pulse_out.fwhm_fs": (30.0, 0.5),
        "causality.verdict": "causal",
        "pulse_out.split": False,
    }
    assert content.compensate is not None
    assert content.compensate.with_[0].grooves == pytest.approx(3e5)
    assert content.compensate.with_[0].separation == pytest.approx(31e-3)
    assert content.compensate.target == 0.95


@pytest.mark.parametrize("keys", list(keys_of(tomllib.loads(WHOLE))), ids=key_path)
def test_a_misspelt_key_is_refused_and_the_right_one_offered(keys: Keys) -> None:
    document = tomllib.loads(WHOLE)
    holder: Any = document
    for key in keys[:-1]:
        holder = holder[key]
    right = str(keys[-1])
    wrong = right + "x"
    holder[wrong] = holder.pop(right)
    with pytest.raises(InputError) as caught:
        scenario_from(document, text=WHOLE, file="whole.toml")
    message = str(caught.value)
    if right == "kind":
        assert f'{key_path(keys)}: the key is missing. Did you mean "kind" where "kindx" stands?' in message
        return
    assert f'{key_path((*keys[:-1], wrong))}: there is no key "{wrong}" here' in message
    assert f'Did you mean "{right}"?' in message


@pytest.mark.parametrize("keys", list(keys_of(tomllib.loads(WHOLE))), ids=key_path)
def test_every_key_has_its_own_place(keys: Keys) -> None:
    found = places_in(WHOLE).of_key(keys)
    if found is None:
        assert keys == ("medium",)  # no header of its own
        return
    rest = WHOLE.splitlines()[found[0] - 1][found[1] - 1 :]
    assert str(keys[-1]) in rest.partition("=")[0]
