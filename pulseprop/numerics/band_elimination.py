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
        self.band = band
        unknowns = len(band)
        touched = band != 0
        first = np.argmax(touched, axis=0)
        last = unknowns - 1 - np.argmax(touched[::-1], axis=0)
        self.reach = int(np.max(last - first, initial=0))
        self.panels = [
            (at, min(at + PANEL, unknowns), np.flatnonzero((first >= at) & (first < at + PANEL)))
            for at in range(0, unknowns, PANEL)
        ]


@dataclass(frozen=True, eq=False)
class _Panel:
    """q: orthogonal; order: of its rows (carried ones, y, e); carry_on: rows to the next panel."""

    start: int
    stop: int
    equations: Indices
    order: Indices
    q: Real
    carried: int
    carry_on: int


class BandElimination:
    """near: (unknowns,) weights of y; far: (equations,) weights of e; dense: (z, equations)."""

    def __init__(self, layout: BandLayout, near: Real, far: Real, dense: Real) -> None:
        self.near, self.far = near, far
        unknowns = len(near)
        self.coupling = np.empty((unknowns, len(dense)))
        self.panels: list[_Panel] = []
        self.triangles: list[Real] = []
        left: list[Real] = []
        carry, carried = np.zeros((0, layout.reach)), np.zeros((0, len(dense)))
        for start, stop, equations in layout.panels:
            width = min(stop + layout.reach, unknowns) - start
            rows = np.zeros((len(carry) + stop - start + len(equations), width))
            rows[: len(carry), : carry.shape[1]] = carry[:, :width]
            own = np.arange(stop - start)
            rows[len(carry) + own, own] = near[start:stop]
            rows[len(carry) + stop - start :] = (
                layout.band[start : start + width, equations] * far[equations]
            ).T
            right = np.zeros((len(rows), len(dense)))
            right[: len(carry)] = carried
            right[len(carry) + stop - start :] = (dense[:, equations] * far[equations]).T
            order = np.argsort(-np.max(np.abs(rows), axis=1))
            q, triangle = np.linalg.qr(rows[order], mode="complete")
            turned = q.T @ right[order]
            done, on = stop - start, min(width, len(rows)) - (stop - start)
            self.panels.append(_Panel(start, stop, equations, order, q, len(carry), on))
            self.triangles.append(triangle[:done])
            self.coupling[start:stop] = turned[:done]
            carry, carried = triangle[done : done + on, done:], turned[done : done + on]
            left.append(turned[done + on :])
        left.append(carried)
        self.left = np.concatenate(left)

    def reduced(self, near: Real, far: Real) -> tuple[Real, Real]:
        """Right sides (weighted) of y (unknowns,) and e (equations,) as those of y and of what is left."""
        of_unknowns, left, carried = np.empty(len(near)), [], np.zeros(0)
        for panel in self.panels:
            rows = np.concatenate((carried, near[panel.start : panel.stop], far[panel.equations]))
            turned = rows[panel.order] @ panel.q
            done = panel.stop - panel.start
            of_unknowns[panel.start : panel.stop] = turned[:done]
            carried = turned[done : done + panel.carry_on]
            left.append(turned[done + panel.carry_on :])
        return of_unknowns, np.concatenate((*left, carried))

    def restored(self, left: Real) -> tuple[Real, Real]:
        """What equations of z leave, as what those of y and e leave: back from `reduced`, 0 for y."""
        near, far = np.empty(len(self.near)), np.empty(len(self.far))
        end = len(left)
        on = self.panels[-1].carry_on
        carried, end = left[end - on : end], end - on
        for panel in self.panels[::-1]:
            done = panel.stop - panel.start
            count = len(panel.q) - done - panel.carry_on
            turned = np.concatenate((np.zeros(done), carried, left[end - count : end]))
            end -= count
            rows = np.empty(len(turned))
            rows[panel.order] = panel.q @ turned
            near[panel.start : panel.stop] = rows[panel.carried : panel.carried + done]
            far[panel.equations] = rows[panel.carried + done :]
            carried = rows[: panel.carried]
        return near, far

    def unknowns(self, right: Real, z: Real) -> Real:
        """y from the reduced right sides of y (unknowns,) and z."""
        from scipy.linalg.lapack import dtrtrs

        right = right - self.coupling @ z
        y = np.zeros(len(right))
        for panel, triangle in zip(self.panels[::-1], self.triangles[::-1], strict=True):
            done = panel.stop - panel.start
            beyond = triangle[:, done:] @ y[panel.stop : panel.start + triangle.shape[1]]
            y[panel.start : panel.stop] = dtrtrs(
                triangle[:, :done], right[panel.start : panel.stop] - beyond
            )[0]
        return y
