"""Options as they are typed."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.vetting.asked import Asked, asked_with

LIGHT = 299792458.0


def omega(nm: float) -> float:
    return 2 * math.pi * LIGHT / (nm * 1e-9)


def test_nothing_asked_is_nothing() -> None:
    request = Asked().request
    assert request.at == ()
    assert request.uncertainty == {}
    assert request.transparent is None
    assert request.strength is None


def test_everything_in_si() -> None:
    request = asked_with(
        {
            "uncertainty": "n=1e-4,k=2%",
            "at": ["800 nm", "375 THz", "1.55 eV"],
            "anchor": "1.5230 +- 0.0002 at 589.3 nm",
            "transparent": "2.5 um to 300 nm",
            "angle": "30 deg",
            "polarisation": "p",
        }
    ).request
    assert request.uncertainty["n"].absolute == 1e-4
    assert request.uncertainty["k"].relative == 0.02
    # 1.55 eV: e / hbar with the exact constants of the SI.
    assert request.at == pytest.approx(
        (omega(800), 2 * math.pi * 375e12, 1.55 * 1.602176634e-19 * 2 * math.pi / 6.62607015e-34), rel=1e-12
    )
    (anchor,) = request.anchors
    assert (anchor.index, anchor.error) == (1.5230, 0.0002)
    assert anchor.omega == pytest.approx(omega(589.3), rel=1e-12)
    assert request.transparent == pytest.approx((omega(2500), omega(300)), rel=1e-12)
    assert request.angle == pytest.approx(math.pi / 6)
    assert request.polarisation == "p"


def test_signs_of_plus_and_minus_are_both_read() -> None:
    first, second = Asked(anchor=("1.5±1e-4 at 1 um", "1.5 +- 1e-4 at 1 um")).request.anchors
    assert first == second


def test_the_strength_of_silica() -> None:
    """The f-sum rule for k (in omega): integral of k omega d(omega) = pi wp^2 / 4, in s = omega^2 twice that.

    60.08 g/mol, 30 electrons a unit; e^2/(eps0 m_e) with CODATA 2022.
    """
    strength = Asked(composition="SiO2", density="2.2 g/cm^3").request.strength
    electrons = 30 * 2.2e6 / 60.0843 * 6.02214076e23
    plasma_squared = electrons * 1.602176634e-19**2 / (8.8541878188e-12 * 9.1093837139e-31)
    assert strength == pytest.approx(math.pi / 2 * plasma_squared, rel=1e-3)


@pytest.mark.parametrize(
    ("options", "part"),
    [
        ({"anchor": "1.5 at 800 nm"}, "--anchor"),
        ({"anchor": "x +- 1 at 800 nm"}, "--anchor"),
        ({"anchor": "1e300 +- 1 at 800 nm"}, "above 0 and below"),
        ({"anchor": "1.5 +- 0 at 800 nm"}, "above 0"),
        ({"transparent": "800 nm"}, "--transparent"),
        ({"transparent": "800 nm to 800 nm"}, "two different ends"),
        ({"composition": "SiO2"}, "--density"),
        ({"density": "2 g/cm^3"}, "--composition"),
        ({"at": "800"}, "--at"),
        ({"angle": "steep"}, "--angle"),
        ({"resolution": "thin"}, "--resolution"),
        ({"resolution": "0 nm"}, "above 0"),
        ({"colour": "red"}, "no such option"),
    ],
)
def test_what_cannot_be_read_is_told(options: dict[str, str], part: str) -> None:
    with pytest.raises(InputError, match=r".") as told:
        _ = asked_with(options).request
    assert part in str(told.value)


TEXT = st.text(max_size=20) | st.from_regex(
    r"[0-9.e+-]{1,8} ?(nm|um|eV|THz|mm|deg|%)?( to |\+-| at )?[0-9.]{0,4}( nm)?"
)


@settings(deadline=None, max_examples=300)
@given(
    name=st.sampled_from(
        ["uncertainty", "at", "anchor", "transparent", "composition", "density", "resolution", "angle"]
    ),
    text=TEXT,
)
def test_no_text_is_worse_than_refused(name: str, text: str) -> None:
    try:
        _ = asked_with({name: text}).request
    except InputError:
        return
