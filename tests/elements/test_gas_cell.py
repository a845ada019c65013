"""Gas cells: density by pressure, windows, and the cautions that go with them.

Argon at 0 C and 101325 Pa, 800 nm: GVD 20.0474437 fs^2/m; helium 1.09960587 fs^2/m (E. R. Peck, D. J. Fisher
1964; C. R. Mansfield, E. R. Peck 1969; from the printed formulas in 60 digits).
"""

from __future__ import annotations

import pytest

import pulseprop as pp
from pulseprop.errors import InputError
from pulseprop.scenario.read import scenario_from

PULSE = {
    "shape": "gaussian",
    "centre": "800 nm",
    "duration": "30 fs",
    "energy": "1 uJ",
    "beam_radius": "1 mm",
}


def sent(**cell):
    given = {"kind": "gas cell", "name": "cell", "gas": "argon", "temperature": "0 degC", "length": "2 m"}
    return pp.send(scenario_from({"pulse": PULSE, "path": [given | cell]}))


@pytest.mark.parametrize(("gas", "gvd"), [("argon", 20.0474437), ("helium", 1.09960587)])
@pytest.mark.parametrize("atmospheres", [0.1, 1.0, 3.0])
def test_gdd_goes_with_the_pressure(gas, gvd, atmospheres):
    """Ideal gas; the second virial coefficient of argon changes the density by 0.1 % an atmosphere."""
    (row,) = sent(gas=gas, pressure=f"{atmospheres} atm").elements
    assert row.gdd_fs2 == pytest.approx(2 * gvd * atmospheres, rel=3e-3)


def test_an_empty_cell_is_its_windows():
    window = {"medium": "fused silica", "thickness": "1 mm"}
    (row,) = sent(pressure="0 bar", windows=[window, window]).elements
    assert row.gdd_fs2 == pytest.approx(2 * 36.1619983, rel=1e-8)
    assert [part.detail for part in row.parts][::2] == ["1 mm fused silica"] * 2
    assert row.parts[1].gdd_fs2 == 0


def test_windows_lose_at_two_faces_each_and_the_gas_at_none():
    """R = 0.0341 of fused silica: (1 - R)^4."""
    window = {"medium": "fused silica", "thickness": "1 mm"}
    reflected = ((1.4533172549 - 1) / (1.4533172549 + 1)) ** 2
    run = sent(pressure="0.4 bar", windows=[window, window], faces="fresnel")
    assert run.path.transmission == pytest.approx((1 - reflected) ** 4, rel=1e-4)
    stated = sent(pressure="0.4 bar", windows=[window, window], reflectance="0.5 %")
    assert stated.path.transmission == pytest.approx(0.995**4, rel=1e-12)


def test_pressure_and_gas_are_cautioned_about():
    codes = {caution.code: caution.text for caution in sent(pressure="3 bar").cautions}
    assert "displaces oxygen" in codes["gas-displaces-oxygen"]
    assert "3 bar absolute" in codes["pressure-vessel"]
    assert "not considered" in codes["pressure-vessel"]
    calm = {caution.code for caution in sent(pressure="1 atm").cautions}
    assert "pressure-vessel" not in calm
    assert "gas-displaces-oxygen" in calm


def test_a_cell_is_matter_for_the_front_test():
    run = sent(pressure="1 bar")
    assert run.causality.verdict == "causal"
    assert run.causality.left_out == ()
    assert run.elements[0].b_integral_rad > 0


def test_humid_air_in_a_cell():
    run = sent(gas="air", pressure="1013 hPa", temperature="20 degC", humidity="50 %")
    assert "humid air" in run.media[0].name
    with pytest.raises(InputError, match="humidity goes with air only"):
        sent(pressure="1 bar", humidity="50 %")
