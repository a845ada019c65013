"""Unknowns that few equations share, taken out of least squares by orthogonal panels.

Equations  e_j: sum of band[i, j] y_i + dense[:, j] . z = ...  and  y_i = ...,  all weighted; each equation
touches a few neighbouring y only. Panels of y are eliminated one after another, each by a small orthogonal
factorisation; what is left are equations of z alone, as many as there were e, and y follows from z.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["BandElimination", "BandLayout"]

Real = NDArray[np.float64]
Indices = NDArray[np.intp]

PANEL = 16
"""Unknowns of one panel."""


class BandLayout:
    """Which equations enter with which panel. band: (unknowns, equations), each column on neighbouring rows,
    columns in order of their first rows."""

    def __init__(self, band: Real) -> None:
        self.unknowns, self.equations = band.shape
        touched = band != 0
        first = np.argmax(touched, axis=0)
        last = self.unknowns - 1 - np.argmax(touched[::-1], axis=0)
        self.reach = int(np.max(last - first, initial=0))
        self.unknown, self.equation = np.nonzero(touched)
        self.entry = band[self.unknown, self.equation]
        starts = range(0, self.unknowns, PANEL)
        inside = [np.flatnonzero((first >= at) & (first < at + PANEL)) for at in starts]
        self.panels = [
            (at, min(at + PANEL, self.unknowns), of, band[at : at + PANEL + self.reach, of].T)
            for at, of in zip(starts, inside, strict=True)
        ]

    def of_equations(self, of: Real) -> Real:
        """band @ of, (unknowns,), for one number per equation."""
        return np.asarray(
            np.bincount(self.unknown, self.entry * of[self.equation], self.unknowns), dtype=np.float64
        )

    def of_unknowns(self, of: Real) -> Real:
        """of @ band, (equations,), for one number per unknown."""
        return np.asarray(
            np.bincount(self.equation, self.entry * of[self.unknown], self.equations), dtype=np.float64
        )


@dataclass(frozen=True, eq=False)
class _Panel:
    """q: orthogonal, its rows (carried ones, y, e); triangle: of y; carry_on: rows to the next panel."""

    start: int
    stop: int
    equations: Indices
    q: Real
    triangle: Real
    carried: int
    carry_on: int


class BandElimination:
    """near: (unknowns,) weights of y; far: (equations,) weights of e; dense: (equations, z), weighted."""

    def __init__(self, layout: BandLayout, near: Real, far: Real, dense: Real) -> None:
        self.near, self.equations = near, layout.equations
        columns = dense.shape[1]
        self.coupling = np.empty((layout.unknowns, columns))
        self.panels: list[_Panel] = []
        left: list[Real] = []
        carry, carried = np.zeros((0, layout.reach)), np.zeros((0, columns))
        for start, stop, equations, band in layout.panels:
            done, width = stop - start, band.shape[1]
            rows = np.zeros((len(carry) + done + len(equations), width))
            rows[: len(carry), : carry.shape[1]] = carry[:, :width]
            rows[len(carry) + np.arange(done), np.arange(done)] = near[start:stop]
            rows[len(carry) + done :] = band * far[equations, None]
            q, triangle = _orthogonal(rows)
            turned = q[len(carry) + done :].T @ dense[equations]
            turned += q[: len(carry)].T @ carried
            on = min(width, len(rows)) - done
            self.panels.append(_Panel(start, stop, equations, q, triangle[:done], len(carry), on))
            self.coupling[start:stop] = turned[:done]
            carry, carried = triangle[done : done + on, done:], turned[done : done + on]
            left.append(turned[done + on :])
        self.left = np.concatenate((*left, carried))

    def reduced(self, near: Real, far: Real) -> tuple[Real, Real]:
        """Right sides (weighted) of y (unknowns,) and e (equations,) as those of y and of what is left."""
        of_unknowns, left, carried = np.empty(len(near)), [], np.zeros(0)
        for panel in self.panels:
            rows = np.concatenate((carried, near[panel.start : panel.stop], far[panel.equations]))
            turned = rows @ panel.q
            done = panel.stop - panel.start
            of_unknowns[panel.start : panel.stop] = turned[:done]
            carried = turned[done : done + panel.carry_on]
            left.append(turned[done + panel.carry_on :])
        return of_unknowns, np.concatenate((*left, carried))

    def restored(self, left: Real) -> tuple[Real, Real]:
        """What equations of z leave, as what those of y and e leave: back from `reduced`, 0 for y."""
        near, far = np.empty(len(self.near)), np.empty(self.equations)
        end = len(left)
        on = self.panels[-1].carry_on
        carried, end = left[end - on : end], end - on
        for panel in self.panels[::-1]:
            done = panel.stop - panel.start
            count = len(panel.q) - done - panel.carry_on
            turned = np.concatenate((np.zeros(done), carried, left[end - count : end]))
            end -= count
            rows = panel.q @ turned
            near[panel.start : panel.stop] = rows[panel.carried : panel.carried + done]
            far[panel.equations] = rows[panel.carried + done :]
            carried = rows[: panel.carried]
        return near, far

    def unknowns(self, right: Real, z: Real) -> Real:
        """y from the reduced right sides of y (unknowns,) and z."""
        from scipy.linalg.lapack import dtrtrs

        right = right - self.coupling @ z
        y = np.zeros(len(right))
        for panel in self.panels[::-1]:
            done, triangle = panel.stop - panel.start, panel.triangle
            beyond = triangle[:, done:] @ y[panel.stop : panel.start + triangle.shape[1]]
            y[panel.start : panel.stop] = dtrtrs(
                triangle[:, :done], right[panel.start : panel.stop] - beyond
            )[0]
        return y


def _orthogonal(rows: Real) -> tuple[Real, Real]:
    """Q, complete, and R; rows sorted by size, as the largest must be eliminated first."""
    order = np.argsort(-np.max(np.abs(rows), axis=1))
    sorted_q, triangle = np.linalg.qr(rows[order], mode="complete")
    q = np.empty_like(sorted_q)
    q[order] = sorted_q
    return q, triangle
