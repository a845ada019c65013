"""Kramers-Kronig against published pairs, tables and sum rules; the source stands beside each value."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from pulseprop.material.absorption_density import Tails, density_through
from pulseprop.material.kramers_kronig import Anchor, refraction_from_absorption

SHARED = Path(__file__).parents[2] / "shared"
BARE = Tails(below="none", above="none")


def transform(rows, values, omega, *, form="c2", tails=BARE):
    """Real part at omega of the transform of an odd density: chi1 from chi2, or n - 1 from k."""
    density = density_through(rows, values, form=form, tails=tails, parity=-1)
    return density.transform(np.array(omega, dtype=float)).real


# Gaussian pair chi2 = exp(-((w-3)/0.5)^2) - exp(-((w+3)/0.5)^2), chi1 by Dawson functions.
# Form: D. De Sousa Meneses, M. Malki, P. Echegut, J. Non-Cryst. Solids 352, 769 (2006) (from memory);
# values derived from the closed form, principal-value quadrature agrees to 12 digits.
GAUSSIAN = [(1.0, 0.21704170164463), (2.5, 0.65866229327062), (6.0, -0.064003747370488)]


@pytest.mark.parametrize(("omega", "expected"), GAUSSIAN)
def test_gaussian_band(omega, expected):
    rows = np.linspace(1e-3, 9, 8001)
    chi2 = np.exp(-(((rows - 3) / 0.5) ** 2)) - np.exp(-(((rows + 3) / 0.5) ** 2))
    assert transform(rows, chi2, [omega]) == pytest.approx([expected], abs=2e-12)


# Box chi2 = 1 on [2, 3]: chi1 = ln|(9 - w^2)/(4 - w^2)|/pi (textbook). Box alpha = 1 with c = 1, so k = 1/(2
# w): n - 1 = ln|(3-w)(2+w)/((3+w)(2-w))|/(2 pi w).
@pytest.mark.parametrize(
    ("omega", "chi1", "refraction"),
    [(1.0, 0.3122076478919, 0.064531776206704), (2.5, 0.063875466232979, -0.012775093246596)],
)
def test_box_of_susceptibility_and_box_of_absorption(omega, chi1, refraction):
    box = transform(np.array([2.0, 3.0]), np.ones(2), [omega], form="linear")
    assert box == pytest.approx([chi1], abs=1e-13)
    rows = np.linspace(2, 3, 2001)
    assert transform(rows, 1 / (2 * rows), [omega]) == pytest.approx([refraction], abs=1e-12)


# Triangle chi2 = max(0, 1 - |w - 3|): chi1 = [Lam(w) + Lam(-w)]/pi,
# Lam(w) = (w-2) ln|(3-w)/(2-w)| + (4-w) ln|(4-w)/(3-w)| (textbook; quadrature agrees to 12 digits).
@pytest.mark.parametrize(("omega", "expected"), [(1.0, 0.24698290597721), (2.5, 0.58274641419254)])
def test_triangle(omega, expected):
    found = transform(np.array([2.0, 3.0, 4.0]), np.array([0.0, 1.0, 0.0]), [omega], form="linear")
    assert found == pytest.approx([expected], abs=1e-13)


def test_triangle_on_its_corners():
    """Limits of the same closed form at its corners, where x ln x -> 0."""
    found = transform(np.array([2.0, 3.0, 4.0]), np.array([0.0, 1.0, 0.0]), [2.0, 3.0, 4.0], form="linear")
    mirror = [
        -(w + 2) * np.log((3 + w) / (2 + w)) + (4 + w) * np.log((4 + w) / (3 + w)) for w in (2.0, 3.0, 4.0)
    ]
    direct = [2 * np.log(2.0), 0.0, -2 * np.log(2.0)]
    assert found == pytest.approx((np.array(direct) + mirror) / np.pi, abs=1e-14)


# Lorentz medium wp^2 = 20, w0 = 4, g = 0.56: chi at 1, 4, 8 (textbook), and the sum rules int chi2/w = (pi/2)
# chi(0), int (n - 1) = 0, int w k = (pi/4) wp^2: M. Altarelli, D. L. Dexter, H. M. Nussenzveig, D. Y. Smith,
# Phys. Rev. B 6, 4502 (1972) (formulae from memory, each verified by quadrature).
STRENGTH, CENTRE, WIDTH = 20.0, 4.0, 0.56
LORENTZ = [(1.0, 1.3314775495132), (4.0, 0.0), (8.0, -0.41306838209376)]


def lorentz(omega):
    return STRENGTH / (CENTRE**2 - omega**2 - 1j * WIDTH * omega)


def lorentz_rows(count):
    a = WIDTH / 2
    reach = np.arcsinh((1e-3 - CENTRE) / a), np.arcsinh((2000 - CENTRE) / a)
    return CENTRE + a * np.sinh(np.linspace(*reach, count))


@pytest.mark.parametrize(("omega", "expected"), LORENTZ)
def test_lorentz_line(omega, expected):
    rows = lorentz_rows(4000)
    found = transform(rows, lorentz(rows).imag, [omega], tails=Tails())
    assert found == pytest.approx([expected], abs=2e-10)


def test_static_value_is_the_sum_of_absorption_over_frequency():
    rows = lorentz_rows(4000)
    found = transform(rows, lorentz(rows).imag, [0.0], tails=Tails())
    assert np.pi / 2 * found == pytest.approx([1.96349540849362], abs=2e-10)


def test_the_strength_shows_far_above_as_the_sum_of_frequency_times_absorption():
    """n - 1 = -(2/pi) int w k dw / omega^2 + ... far above; int w k = (pi/4) wp^2 = 15.707963267949."""
    rows = lorentz_rows(6000)
    chi = lorentz(rows)
    k = (chi / (1 + np.sqrt(1 + chi))).imag
    omega = 1e5
    found = transform(rows, k, [omega], tails=Tails())
    # the next terms are of order (4/1e5)^2, and the tail from 2000 on still lies below 1e5
    assert -np.pi / 2 * omega**2 * found == pytest.approx([15.707963267949], rel=1e-6)


def test_inertial_rule_the_refraction_averages_to_zero():
    """int_0^inf (n - 1) = 0: up to a cut by quadrature; beyond it -wp^2/(2 w^2) gives -wp^2/(2 cut)."""
    rows = lorentz_rows(6000)
    chi = lorentz(rows)
    k = (chi / (1 + np.sqrt(1 + chi))).imag
    x, weight = np.polynomial.legendre.leggauss(24)
    ends = np.concatenate(([0.0], lorentz_rows(300)[1:]))
    half = np.diff(ends)[:, None] / 2
    omega = ends[:-1, None] + half * (1 + x)
    total = np.sum(half * weight * transform(rows, k, omega, tails=Tails()))
    assert total - STRENGTH / (2 * ends[-1]) == pytest.approx(0.0, abs=1e-7)


# Water at 25 degC: G. M. Hale and M. R. Querry, Appl. Opt. 12, 555-563 (1973), a published subtractive
# Kramers-Kronig analysis; table in shared/ (CC0). Straight lines between the tabulated k, minus a + b nu^2 +
# c nu^4 + d nu^-2 for what the table leaves out, against the tabulated n over 0.4 ... 20 um: rms 0.0011 found
# elsewhere; 0.0015 is the mark to reach. The constant, 0.33, is the ultraviolet absorption that lies outside.
def water():
    table = np.loadtxt(SHARED / "water_hale_querry_1973.csv", delimiter=",", skiprows=6)[::-1]
    return 2 * np.pi * 299792458.0 / (table[:, 0] * 1e-6), table[:, 1], table[:, 2]


def test_water_of_hale_and_querry():
    omega, n, k = water()
    nu = omega / (2 * np.pi * 299792458.0) / 1e6
    chosen = (nu > 1 / 20.001) & (nu < 1 / 0.3999)
    bare = refraction_from_absorption(omega, k, omega[chosen], form="linear", tails=BARE).values.real
    outside = np.stack([np.ones(chosen.sum()), nu[chosen] ** 2, nu[chosen] ** 4, nu[chosen] ** -2], axis=1)
    fit, *_ = np.linalg.lstsq(outside, n[chosen] - 1 - bare, rcond=None)
    rest = n[chosen] - 1 - bare - outside @ fit
    assert np.sqrt(np.mean(rest**2)) <= 0.0015
    assert np.max(np.abs(rest)) <= 0.006
    assert fit[0] == pytest.approx(0.329075, abs=2e-4)


def test_water_anchored_at_one_wavelength_by_the_subtractive_relation():
    """Anchored in the visible, the infrared n follows within 0.012 up to 10 um, bare within 0.35."""
    omega, n, k = water()
    wavelength = 2 * np.pi * 299792458.0 / omega * 1e6
    at = int(np.argmin(np.abs(wavelength - 0.6)))
    chosen = (wavelength > 0.4) & (wavelength < 10.0)
    anchors = [Anchor(omega=omega[at], value=n[at])]
    found = refraction_from_absorption(omega, k, omega[chosen], anchors=anchors).values.real
    assert found[np.flatnonzero(chosen) == at] == pytest.approx([n[at] - 1], abs=1e-12)
    assert np.max(np.abs(found - (n[chosen] - 1))) < 0.012
