"""Where a response absorbs: the places that an integral over its absorption must resolve."""

from __future__ import annotations

import numpy as np

from pulseprop.material.composition import (
    Absolute,
    Bruggeman,
    LorentzLorenz,
    MaxwellGarnett,
    Scaled,
    WithAbsorption,
)
from pulseprop.material.formulas import MICROMETRE_OMEGA, Formula
from pulseprop.material.lines import Carriers, LorentzLine, Relaxation, VoigtLine
from pulseprop.material.response import Response, Sum

__all__ = ["completion_shift", "features_of", "knots_of", "relaxes"]

Place = tuple[float, float]
KNOTS = (-2.0, -1.0, 0.0, 1.0, 2.0)


def features_of(response: Response) -> tuple[Place, ...]:
    """(centre, width) in rad/s of everything that absorbs and is smooth about its centre.

    Bands of a formula that stands by itself are told by `knots_of`; measured tables are left out (their sums
    are their own).
    """
    if isinstance(response, LorentzLine):
        return ((response.centre, response.width),)
    if isinstance(response, VoigtLine):
        return ((response.centre, response.width + response.doppler_width),)
    if isinstance(response, Relaxation):
        return ((0.0, 1 / response.time),)
    if isinstance(response, Carriers):
        return ((0.0, response.rate),)
    if isinstance(response, Formula):
        return ()
    inner = tuple(place for part in _parts(response) for place in features_of(part))
    if isinstance(response, Sum):
        return inner
    # Where dielectric functions are mixed, bands move and their flanks are no longer polynomials.
    return inner + tuple(place for part in _parts(response) for place in _knots(part))


def knots_of(response: Response) -> tuple[float, ...]:
    """Knots in rad/s of the absorption bands of formulas: chi is smooth between them."""
    return tuple(centre for centre, _ in _knots(response))


def _knots(response: Response) -> tuple[Place, ...]:
    if isinstance(response, Formula):
        return _bands(response)
    return (
        tuple(place for part in _parts(response) for place in _knots(part))
        if isinstance(response, Sum)
        else ()
    )


def completion_shift(response: Response) -> float:
    """Largest change of n in range by which the causal completion of a formula departs from the print."""
    if isinstance(response, Formula):
        return response.completion.shift
    return max((completion_shift(part) for part in _parts(response)), default=0.0)


def relaxes(response: Response) -> bool:
    """Whether a Debye or Drude term takes part."""
    return isinstance(response, Relaxation | Carriers) or any(relaxes(part) for part in _parts(response))


def _parts(response: Response) -> tuple[Response, ...]:
    if isinstance(response, Sum):
        return response.parts
    if isinstance(response, Scaled):
        return (response.of,)
    if isinstance(response, LorentzLorenz):
        return tuple(part for part, _ in response.parts)
    if isinstance(response, MaxwellGarnett):
        return (response.host, response.inclusion)
    if isinstance(response, Bruggeman):
        return (response.first, response.second)
    if isinstance(response, Absolute):
        return (response.printed, response.air)
    if isinstance(response, WithAbsorption):
        return (response.background,)
    return ()


def _bands(formula: Formula) -> tuple[Place, ...]:
    """The knots of the absorption bands outside the range: cubic pieces between them."""
    found = []
    completion = formula.completion
    for centre, knot in zip(completion.centre, completion.knot, strict=True):
        width = float(np.sqrt(centre + knot) - np.sqrt(centre)) * MICROMETRE_OMEGA
        for shift in KNOTS:
            found.append((float(np.sqrt(centre + shift * knot)) * MICROMETRE_OMEGA, width))
    return tuple(found)
