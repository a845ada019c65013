"""Transforms of tables against the exact Lorentz medium, orders of convergence, anchors and refusals."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.material.absorption_density import Tails, density_through
from pulseprop.material.kramers_kronig import Anchor, absorption_from_refraction, refraction_from_absorption

CENTRE, WIDTH, STRENGTH = 1.0, 0.02, 2e-4


def lorentz(omega):
    """n - 1 + i k of chi = strength / (centre^2 - omega^2 - i width omega), on the principal root."""
    chi = STRENGTH / (CENTRE**2 - omega**2 - 1j * WIDTH * omega)
    return chi / (1 + np.sqrt(1 + chi))


def lorentz_slope(omega):
    denominator = CENTRE**2 - omega**2 - 1j * WIDTH * omega
    return STRENGTH * (2 * omega + 1j * WIDTH) / denominator**2 / (2 * (1 + lorentz(omega)))


def graded_rows(count, low=1e-3, high=1e3):
    """Rows whose spacing grows with the distance from the line."""
    a = WIDTH / 2
    reach = np.arcsinh((low - CENTRE) / a), np.arcsinh((high - CENTRE) / a)
    return CENTRE + a * np.sinh(np.linspace(*reach, count))


def dense(rows):
    inner = rows[(rows > 0.5) & (rows < 2)]
    return np.concatenate((inner, inner[:-1] + 0.21 * np.diff(inner), (inner[1:] + inner[:-1]) / 2))


def largest_error(rows, form):
    omega = dense(rows)
    peak = lorentz(np.array([CENTRE])).imag[0]
    found = refraction_from_absorption(rows, lorentz(rows).imag, omega, form=form).values
    return np.max(np.abs(found - lorentz(omega))) / peak


@pytest.mark.parametrize(("form", "order"), [("linear", 2), ("c2", 4)])
def test_error_falls_with_the_square_and_the_fourth_power_of_the_spacing(form, order):
    coarse, fine = largest_error(graded_rows(751), form), largest_error(graded_rows(1501), form)
    assert np.log2(coarse / fine) == pytest.approx(order, abs=0.2)


def test_the_smooth_form_reaches_ten_digits_with_4000_rows():
    assert largest_error(graded_rows(4000), "c2") < 1e-10


def placed_rows(count, order):
    """Rows whose spacing^order times the order-th derivative of k is nearly the same everywhere."""
    fine = graded_rows(200001)
    square = (fine - CENTRE) ** 2 + WIDTH**2 / 4
    weight = (WIDTH / 2 / square ** ((order + 1) / 2)) ** (1 / order) + 0.03 / np.sqrt(square)
    share = np.concatenate(([0.0], np.cumsum((weight[1:] + weight[:-1]) / 2 * np.diff(fine))))
    return np.interp(np.linspace(0, share[-1], count), share, fine)


@pytest.mark.parametrize(("form", "order", "goal"), [("linear", 2, 3e-8), ("c2", 4, 1e-10)])
def test_20000_rows_placed_freely_reach_the_goal(form, order, goal):
    assert largest_error(placed_rows(20000, order), form) < goal


def test_the_slope_is_the_transform_of_the_slope():
    rows = graded_rows(3000)
    omega = dense(rows)[::7]
    density = density_through(rows, lorentz(rows).imag, form="c2", tails=Tails(), parity=-1)
    scale = np.max(np.abs(lorentz_slope(omega)))
    assert density.derivative.transform(omega) == pytest.approx(lorentz_slope(omega), abs=1e-7 * scale)


@pytest.mark.parametrize("height", [1e-6, 0.003, 0.4])
def test_above_the_axis_too(height):
    rows = graded_rows(3000)
    z = np.array([-1.1, 0.0, 0.7, 0.99, 1.0, 1.2, 5.0]) + 1j * height
    found = refraction_from_absorption(rows, lorentz(rows).imag, z).values
    assert found == pytest.approx(lorentz(z), abs=1e-12)


def test_negative_frequencies_carry_the_conjugate():
    rows = graded_rows(300)
    omega = np.array([0.5, 0.97, 1.4])
    found = refraction_from_absorption(rows, lorentz(rows).imag, np.concatenate((omega, -omega))).values
    assert found[3:] == pytest.approx(np.conj(found[:3]), abs=1e-15)


@pytest.mark.parametrize("omega", [0.3, 0.999, 1.5, 2.001, 5.0])
def test_matched_tails_agree_with_quadrature(omega):
    """k = 0.2 w below 1, 0.2 to 0.6 in a straight line over [1, 2], 0.6 (2/w)^3 above: in 30 digits."""
    rows, k = np.array([1.0, 2.0]), np.array([0.2, 0.6])
    found = refraction_from_absorption(rows, k, np.array([omega]), form="linear").values[0].real
    with mpmath.workdps(30):
        z = mpmath.mpf(omega)

        def value(w):
            if w < 1:
                return w / 5
            return mpmath.mpf(1) / 5 + (w - 1) * 2 / 5 if w < 2 else 3 * (2 / w) ** 3 / 5

        here, cut = value(z), mpmath.mpf(50)
        stops = sorted({mpmath.mpf(0), mpmath.mpf(1), mpmath.mpf(2), z, cut})
        smooth = mpmath.quad(lambda w: 2 * (w * value(w) - z * here) / ((w - z) * (w + z)), stops)
        beyond = mpmath.quad(lambda w: 2 * w * value(w) / ((w - z) * (w + z)), [cut, mpmath.inf])
        constant = here * mpmath.log(abs((cut - z) / (cut + z)))
        expected = (smooth + beyond + constant) / mpmath.pi
    assert found == pytest.approx(float(expected), rel=1e-9)


def test_an_exact_tail_loses_no_digits():
    """A table cut off far inside the tail of its own form must give what the longer table gives."""
    rows = np.linspace(1.0, 3.0, 400)
    k = np.exp(-(((rows - 1.5) / 0.1) ** 2))
    long = np.concatenate((rows, np.linspace(3.0, 30.0, 4000)[1:]))
    padded = np.concatenate((k, np.zeros(3999)))
    omega = np.array([0.1, 1.2, 1.5, 2.9, 3.0, 3.1])
    assert refraction_from_absorption(rows, k, omega).values == pytest.approx(
        refraction_from_absorption(long, padded, omega).values, abs=1e-14
    )


def test_the_shares_of_the_tails_add_up():
    rows, k = np.array([1.0, 1.5, 2.0, 2.5]), np.array([0.2, 0.3, 0.5, 0.6])
    place = np.array([1.75])
    none = Tails(below="none", above="none")
    whole = refraction_from_absorption(rows, k, place, form="linear")
    bare = refraction_from_absorption(rows, k, place, form="linear", tails=none)
    assert whole.middle == 1.75
    assert whole.from_above > 0 > whole.from_below
    shares = whole.from_below + whole.from_above
    assert whole.values.real - bare.values.real == pytest.approx([shares], rel=1e-12)
    assert (bare.from_below, bare.from_above) == (0, 0)


def test_absorption_comes_back_from_dispersion():
    rows = graded_rows(4000)
    omega = dense(rows)
    found = absorption_from_refraction(rows, lorentz(rows).real, omega).values
    peak = lorentz(np.array([CENTRE])).imag[0]
    assert np.max(np.abs(found - lorentz(omega).imag)) < 1e-9 * peak


def test_one_anchor_removes_a_constant_and_three_remove_what_lies_outside():
    """A line at 1 in the table, another at 6 outside it: n in 0.5 … 2 with no, one and three anchors."""
    rows = np.sort(np.concatenate((graded_rows(1500, 0.1, 2.9), [0.05])))

    def both(omega):
        return lorentz(omega) + 0.3 * 36 / (36 - omega**2)

    omega = np.linspace(0.7, 1.8, 200)
    error = []
    for places in ([], [0.6], [0.6, 1.3, 1.9]):
        anchors = [Anchor(omega=p, value=1 + float(both(p).real)) for p in places]
        tails = Tails(below="matched", above="matched")
        found = refraction_from_absorption(rows, lorentz(rows).imag, omega, tails=tails, anchors=anchors)
        assert len(found.subtraction) == len(places)
        error.append(np.max(np.abs(found.values.real - both(omega).real)))
    # the even series of the outer line is 0.3 (1 + s/36 + s^2/1296 + s^3/46656): what m anchors leave
    assert 0.3 < error[0] < 0.34
    assert 0.02 < error[1] < 0.03
    assert error[2] < 2e-5


def test_an_anchor_of_k_removes_a_linear_term():
    rows = graded_rows(2000, 0.1, 10.0)
    level = 0.3
    omega = np.array([0.9, 0.99, 1.0, 1.05])
    anchors = [Anchor(omega=p, value=float(lorentz(p).imag)) for p in (0.8, 1.2, 1.5)]
    found = absorption_from_refraction(rows, lorentz(rows).real + level, omega, anchors=anchors).values
    assert found == pytest.approx(lorentz(omega).imag, abs=1e-4 * level)


@pytest.mark.parametrize(
    ("rows", "k", "text"),
    [
        ([1.0, 3.0, 2.0, 4.0], [0.0, 1.0, 1.0, 0.0], "row 3: frequencies do not ascend"),
        ([1.0, 2.0, 2.0, 4.0], [0.0, 1.0, 1.0, 0.0], "row 3"),
        ([0.0, 1.0, 2.0, 4.0], [0.0, 1.0, 1.0, 0.0], "above 0 rad/s"),
        ([1.0, 2.0, 3.0, 4.0], [0.0, float("nan"), 1.0, 0.0], "row 2"),
        ([1.0, 2.0, 3.0], [0.0, 1.0, 0.0], "4 or more"),
    ],
)
def test_bad_rows_are_refused_with_their_number(rows, k, text):
    with pytest.raises(InputError, match=text):
        refraction_from_absorption(np.array(rows), np.array(k), np.array([2.5]))


def test_two_anchors_at_one_place_are_refused():
    rows = graded_rows(50)
    anchors = [Anchor(omega=1.0, value=1.5), Anchor(omega=1.0, value=1.5)]
    with pytest.raises(InputError, match="two anchors"):
        refraction_from_absorption(rows, lorentz(rows).imag, rows, anchors=anchors)


def test_the_index_where_absorption_breaks_off_is_refused():
    rows, k = np.array([1.0, 2.0]), np.array([1.0, 1.0])
    none = Tails(below="none", above="none")
    with pytest.raises(InputError, match="breaks off"):
        refraction_from_absorption(rows, k, np.array([2.0]), form="linear", tails=none)
    with pytest.raises(InputError, match="slopes of the index are infinite"):
        _ = density_through(rows, k, form="linear", tails=none, parity=-1).derivative


def test_below_the_axis_nothing_is_known():
    rows = graded_rows(50)
    with pytest.raises(InputError, match="above the real axis"):
        refraction_from_absorption(rows, lorentz(rows).imag, np.array([1.0 - 0.1j]))
