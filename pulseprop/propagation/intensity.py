"""Peak fluence, peak intensity and the B-integral of a linearly propagated pulse.

The on-axis values of a Gaussian beam of 1/e^2 radius w: fluence 2 E / (pi w^2), intensity 2 P / (pi w^2).
B = (2 pi / lambda) int n2 I_peak dz.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element
from pulseprop.grid import Grid
from pulseprop.measures.widths import peak
from pulseprop.propagation.linear import blocks

__all__ = ["b_integral", "on_axis"]

Complex = NDArray[np.complex128]

SPEED_OF_LIGHT = 299792458.0
RELATIVE_ERROR = 1e-5
MOST_HALVINGS = 7


def on_axis(total: float, radius: float) -> float:
    """Fluence (J/m^2) from energy in J, or intensity (W/m^2) from power in W; radius in m."""
    return 2 * total / (np.pi * radius**2)


def b_integral(element: Element, grid: Grid, spectrum: Complex, omega: float, n2: float, radius: float) -> float:
    """B in rad of one element, given the spectrum A(omega) that enters; omega: carrier, rad/s; n2: m^2/W; radius: m.

    The peak power inside is that of the pulse propagated to the depth; Simpson's rule on halved intervals until the
    estimate stands within 1e-5.
    """
    wave_number = omega / SPEED_OF_LIGHT
    values = {0.0: _peak_at(element, grid, spectrum, 0.0), 1.0: _peak_at(element, grid, spectrum, 1.0)}
    previous = 0.5 * (values[0.0] + values[1.0])
    mean = previous
    for halving in range(1, MOST_HALVINGS + 1):
        places = np.linspace(0, 1, 2**halving + 1)
        for place in places[1::2]:
            values[float(place)] = _peak_at(element, grid, spectrum, float(place))
        mean = _simpson(np.array([values[float(place)] for place in places]))
        if abs(mean - previous) <= RELATIVE_ERROR * abs(mean):
            break
        previous = mean
    return float(wave_number * n2 * on_axis(mean, radius) * element.length)


def _simpson(values: NDArray[np.float64]) -> float:
    weights = np.full(values.size, 2.0)
    weights[1::2] = 4.0
    weights[0] = weights[-1] = 1.0
    return float(np.dot(weights, values) / (3 * (values.size - 1)))


def _peak_at(element: Element, grid: Grid, spectrum: Complex, share: float) -> float:
    """Peak power in W after a share of the element's length, faces left out."""
    inside = spectrum.copy()
    for part in blocks(grid):
        inside[part] *= np.exp(share * element.exponent(2 * np.pi * grid.frequency[part], 1)[0])
    return peak(grid.to_field(inside)).power
