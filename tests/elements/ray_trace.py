"""A ray trace in two dimensions with mpmath, for elements of plane faces and gratings.

It knows nothing of the program: rays are followed from face to face with the wave vector's component along
each face kept (and that of a grating added), and the phase is k times the way, plus K x at a grating.
"""

from __future__ import annotations

from dataclasses import dataclass

import mpmath as mp

C = mp.mpf(299792458)


def silica(omega):
    """Malitson 1965, fused silica, omega in rad/s."""
    square = (2 * mp.pi * C / omega * 1e6) ** 2
    terms = (
        ("0.6961663", "0.0684043"),
        ("0.4079426", "0.1162414"),
        ("0.8974794", "9.896161"),
    )
    return mp.sqrt(1 + sum(mp.mpf(b) * square / (square - mp.mpf(c) ** 2) for b, c in terms))


def unit(angle):
    return mp.matrix([mp.cos(angle), mp.sin(angle)])


def dot(a, b):
    return a[0] * b[0] + a[1] * b[1]


def cross(a, b):
    return a[0] * b[1] - a[1] * b[0]


@dataclass
class Face:
    """A line through `point` along the unit vector `along`; glass: what lies behind it; momentum along."""

    point: mp.matrix
    along: mp.matrix
    glass: bool
    momentum: object = 0


def trace(omega, start, direction, faces, index):
    """Points met on the faces, the wave vector behind the last, and the phase up to there."""
    here, wave, phase, points = start, omega / C * direction, mp.mpf(0), []
    for face in faces:
        reach = cross(face.point - here, face.along) / cross(wave, face.along)
        there = here + reach * wave
        phase += dot(wave, there - here) + face.momentum * dot(there - face.point, face.along)
        normal = mp.matrix([face.along[1], -face.along[0]])
        if dot(wave, normal) < 0:
            normal = -normal
        length = omega / C * (index(omega) if face.glass else 1)
        kept = dot(wave, face.along) + face.momentum
        wave = kept * face.along + mp.sqrt(length**2 - kept**2) * normal
        points.append(there)
        here = there
    return points, wave, phase


def orders(phase, centre):
    """Second to fourth derivative."""
    with mp.workdps(50):
        return [float(mp.diff(phase, mp.mpf(centre), m)) for m in (2, 3, 4)]
