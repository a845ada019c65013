"""Failures as part of the interface: the parts of a message, and what every refusal of the core says."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.path import Path
from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError, NumericalLimit, PulsepropError, RangeError
from pulseprop.grid import Grid
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.formulas import MICROMETRE_OMEGA, Formula, sellmeier_term
from pulseprop.material.gases import gas_at
from pulseprop.material.lines import line
from pulseprop.material.medium import Medium
from pulseprop.material.response import Band, Constant

GLASS = Medium(name="glass", response=Constant(1.25))


def slab(**changed) -> Slab:
    return Slab(**{"name": "a", "medium": GLASS, "thickness": 1e-3, **changed})


REFUSALS = {
    "odd grid": (
        lambda: Grid(points=7, step=1.0, start=0.0, carrier=0.0),
        ["even number of points", "7", "2 or more"],
    ),
    "one point": (lambda: Grid(points=0, step=1.0, start=0.0, carrier=0.0), ["even number of points", "0"]),
    "no step": (
        lambda: Grid(points=8, step=0.0, start=0.0, carrier=0.0),
        ["positive time step", "0.0", "above 0"],
    ),
    "NaN step": (lambda: Grid(points=8, step=np.nan, start=0.0, carrier=0.0), ["positive time step", "nan"]),
    "negative slab": (lambda: slab(thickness=-1e-3), ["thickness", "-0.001"]),
    "NaN slab": (lambda: slab(thickness=np.nan), ["thickness", "nan"]),
    "grazing slab": (lambda: slab(angle=np.pi / 2), ["angle of incidence", "1.57", "below 90 deg"]),
    "unpolarised": (lambda: slab(angle=0.5, faces="fresnel"), ["polarisation", '"p"', '"s"']),
    "gain as loss": (lambda: Loss(name="a", transmittance=1.5), ["transmittance", "1.5", "at most 1"]),
    "opaque orders": (
        lambda: PhaseOrders(name="a", centre=1.0, transmittance=0.0),
        ["transmittance", "0.0", "above 0"],
    ),
    "twins": (lambda: Path((slab(), slab())), ["share a name", "'a'", "name of its own"]),
    "pole in range": (
        lambda: Formula(
            band=Band(MICROMETRE_OMEGA, 4 * MICROMETRE_OMEGA), poles=(sellmeier_term(1.0, 0.25),)
        ),
        ["pole inside its own range", "500 nm", "250 nm to 1000 nm", "squared"],
    ),
    "line without width": (lambda: line(centre=1e15, width=0.0), ["needs a width", "doppler_width"]),
    "overdamped": (
        lambda: line(centre=1e15, width=3e15, doppler_width=1e12),
        ["overdamped", "below twice the centre"],
    ),
    "negative pressure": (lambda: gas_at("argon", -1.0, 293.0), ["pressure", "-1.0", "0 Pa or more"]),
    "zero kelvin": (lambda: gas_at("argon", 1e5, 0.0), ["temperature", "0.0", "above 0 K"]),
    "glass as gas": (lambda: gas_at("N-BK7", 1e5, 293.0), ["not a gas", "N-BK7", "gas of the catalogue"]),
    "wet argon": (lambda: gas_at("argon", 1e5, 293.0, 0.5), ["humidity", "humid air"]),
    "air without humidity": (lambda: gas_at("humid air", 1e5, 293.0), ["humidity", "100 %"]),
    "humid air as it is": (lambda: catalogue_medium("humid air"), ["state", "pressure", "humidity"]),
    "unknown medium": (lambda: catalogue_medium("SF-10"), ["SF-10", "'SF10'", "'N-SF10'"]),
}


@pytest.mark.parametrize(("act", "words"), REFUSALS.values(), ids=REFUSALS.keys())
def test_a_refusal_names_value_what_is_allowed_and_what_to_do(act, words):
    with pytest.raises(InputError) as caught:
        act()
    for word in words:
        assert word in str(caught.value)
    assert caught.value.exit_code == 2


def test_a_message_joins_the_parts_that_are_known():
    complaint = InputError(
        "a slab needs a thickness.",
        value="x",
        allowed="0 mm or more",
        remedy="say so",
        file="a.toml",
        place="path.1",
    )
    assert str(complaint) == (
        "a.toml, path.1: a slab needs a thickness (got 'x'). Allowed: 0 mm or more. say so."
    )
    assert str(InputError("odd")) == "odd."


def test_outer_layers_add_file_and_place_but_never_replace_them():
    inner = RangeError("too far", value=3, place="medium x")
    outer = inner.located(file="a.toml", place="path.2")
    assert isinstance(outer, RangeError)
    assert str(outer) == "a.toml, medium x: too far (got 3)."
    assert outer.args == (str(outer),)


@pytest.mark.parametrize(
    ("kind", "code"), [(PulsepropError, 2), (InputError, 2), (RangeError, 2), (NumericalLimit, 3)]
)
def test_exit_codes(kind, code):
    assert kind("x").exit_code == code
    assert issubclass(kind, PulsepropError)
