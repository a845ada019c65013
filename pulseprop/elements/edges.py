"""What straight edges take off a Gaussian beam, and off the light of a pulse."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.telling import Light
from pulseprop.errors import InputError

__all__ = ["amplitude_on", "missed", "require_beam", "share_beside", "share_between"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

WORTH_SAYING = 1e-3
"""Share of the energy from which on what is cut off is told."""


def share_between(first: Real | float, second: Real | float, radius: float) -> Real:
    """Energy of a Gaussian beam that passes between two straight edges, 0 to 1.

    first, second: distances in m of the beam's axis from the edges on its two sides (negative: the axis lies
    beyond the edge). radius: 1/e^2 intensity radius, m. From the integral of exp(-2 x^2 / radius^2).
    """
    from scipy.special import erf

    scale = np.sqrt(2) / radius
    return np.asarray(np.maximum(0.5 * (erf(scale * first) + erf(scale * second)), 0.0))


def amplitude_on(width: float, offset: Real, spot: float) -> Complex:
    """What a face of that width takes of beams that meet it `offset` from its middle, shape kept; m.

    spot: 1/e^2 radius on the face. Nothing where the offset is NaN.
    """
    share = share_between(0.5 * width - offset, 0.5 * width + offset, spot)
    return np.asarray(np.sqrt(np.where(np.isfinite(offset), share, 0.0)), dtype=complex)


def require_beam(width: float | None, beam_radius: float | None) -> None:
    """Refuse a width that nothing can be made of."""
    if width is not None and beam_radius is None:
        raise InputError(
            "what misses a grating of this width depends on the beam",
            remedy="State beam_radius, of the element or in [pulse]",
        )


def share_beside(distance: Real | float, radius: float) -> Real:
    """Energy of a Gaussian beam that passes one straight edge, `distance` m from its axis: 0 to 1."""
    from scipy.special import erfc

    return np.asarray(0.5 * erfc(-np.sqrt(2) / radius * np.asarray(distance)))


def missed(name: str, amplitude: Complex | None, light: Light, what: str) -> tuple[str, ...]:
    """A sentence where some of the light misses what an element of that name offers it.

    amplitude: what meets it at the frequencies of the light; None where all does.
    """
    if amplitude is None:
        return ()
    passed = np.abs(amplitude) ** 2
    share = 1 - float((light.power * passed).sum() / light.power.sum())
    if share < WORTH_SAYING:
        return ()
    return (f"{name}: {100 * share:.2g} % of the energy misses {what}",)
