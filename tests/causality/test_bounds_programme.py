"""Proven ends in k against the best of many fixed places (HiGHS)."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.optimize import linprog

from pulseprop.causality.bounds_functionals import mass_derivatives, quantity_weights, spline_derivatives
from pulseprop.causality.bounds_materials import Materials
from pulseprop.causality.bounds_programme import Proofs
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import Knowledge, PassiveData
from pulseprop.errors import NumericalLimit

GIVEN_AWAY = 3e-3


def line_rows(rows=45):
    """n and k of one line at 3 rad/fs and one at 12."""
    omega = np.linspace(1.8, 4.2, rows)
    exact = np.sqrt(1 + 1.2 / (1 - (omega / 12) ** 2) + 4e-3 * 9 / (9 - omega**2 - 0.45j * omega))
    return omega, exact


def data_of(kind):
    omega, exact = line_rows()
    if kind == "n and k":
        return PassiveData(
            omega=omega,
            index=exact.real,
            index_error=np.full(len(omega), 2e-4),
            k_omega=omega,
            k=exact.imag,
            k_error=1e-5 + 0.02 * exact.imag,
        )
    clear = np.sqrt(1 + 1.2 / (1 - (omega / 12) ** 2))
    # wp^2 = 1.2 * 12^2, and a fifth more
    knowledge = Knowledge(strength=1.2 * np.pi / 2 * 1.2 * 144) if kind == "n, limited" else Knowledge()
    return PassiveData(omega=omega, index=clear, index_error=np.full(len(omega), 2e-4), knowledge=knowledge)


def best_of_places(passive, omega, weights):
    """Both ends over masses at 1,400 fixed places, written out apart from the classes under test."""
    rows, splines = passive.rows, passive.splines
    first, last = rows[0] ** 2, rows[-1] ** 2
    s = np.concatenate((first * (1 - np.geomspace(1e-8, 1, 500)), last * (1 + np.geomspace(1e-8, 1e5, 900))))
    size = np.minimum(np.abs(s - first), np.abs(s - last))
    columns = [size / (s - rows[:, None] ** 2)]
    costs = [weights @ mass_derivatives(omega, s - omega**2) * size]
    strengths = [np.pi * size]
    if passive.limit is None:
        columns.append(np.ones((len(rows), 1)))
        costs.append(weights[:1])
        strengths.append(np.zeros(1))
    of_k = np.zeros((len(passive.k_rows), sum(c.shape[1] for c in columns)))
    matrix = np.vstack((np.hstack(columns), of_k))
    if splines is not None:
        matrix = np.hstack((matrix, passive.spline_columns))
        costs.append(weights @ spline_derivatives(splines.knots, splines.pieces, omega))
        strengths.append(splines.strengths())
    scaled = matrix / passive.error[:, None]
    goal = passive.target / passive.error
    inequalities, limits = [scaled, -scaled], [goal + 1, 1 - goal]
    if passive.limit is not None:
        inequalities.append(np.concatenate(strengths)[None] / passive.limit)
        limits.append(np.ones(1))
    column = np.max(np.abs(scaled), axis=0)
    cost = np.concatenate(costs) / column
    ends = []
    for sign in (1, -1):
        found = linprog(
            sign * cost / np.max(np.abs(cost)),
            A_ub=np.vstack(inequalities) / column,
            b_ub=np.concatenate(limits),
            method="highs",
        )
        assert found.status == 0
        ends.append(float(found.x @ cost))
    return ends


@pytest.mark.parametrize("kind", ["n", "n, limited", "n and k"])
def test_ends_are_outside_and_near(kind):
    """Never inside the best of the fixed places, and at most 1 % wider."""
    passive = PassiveClass(data_of(kind))
    materials = Materials(passive)
    proofs = Proofs(materials)
    for omega in (2.5 / passive.unit, 3.1 / passive.unit):
        for weights in quantity_weights(omega)[:3]:
            low, high = proofs.interval(materials.functional(omega, weights), GIVEN_AWAY)
            inner = best_of_places(passive, omega, weights)
            slack = 1e-6 * (inner[1] - inner[0])
            assert low <= inner[0] + slack
            assert high >= inner[1] - slack
            assert high - low <= 1.01 * (inner[1] - inner[0])


def test_the_first_proof_already_holds():
    """One round with places as they come: wide, and never inside."""
    passive = PassiveClass(data_of("n"))
    materials = Materials(passive)
    omega = 2.5 / passive.unit
    for weights in quantity_weights(omega)[:3]:
        low, high = Proofs(materials).interval(materials.functional(omega, weights), np.inf)
        inner = best_of_places(passive, omega, weights)
        assert low <= inner[0]
        assert high >= inner[1]


def test_a_limit_below_what_the_index_needs_leaves_no_material():
    """The index less 1 is 0.5 and more, from lines that add up to a tenth of the strength that takes."""
    data = data_of("n")
    weak = PassiveData(
        omega=data.omega,
        index=data.index,
        index_error=data.index_error,
        knowledge=Knowledge(strength=0.1 * float(data.omega[-1] ** 2)),
    )
    with pytest.raises(NumericalLimit, match="no passive causal material"):
        Proofs(Materials(PassiveClass(weak)))


def test_one_index_does_not_limit_the_rest():
    data = data_of("n and k")
    anchored = PassiveData(
        omega=data.omega[10:11],
        index=data.index[10:11],
        index_error=data.index_error[10:11],
        k_omega=data.k_omega,
        k=data.k,
        k_error=data.k_error,
    )
    with pytest.raises(NumericalLimit, match="do not limit"):
        Proofs(Materials(PassiveClass(anchored)))
