"""The exact sets of a design: one for each solution, or for each combination of the chosen parts."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence

import numpy as np
import sympy
from numpy.typing import NDArray

from symcirc.design import Solution
from symcirc.match.problem import Equation, Root
from symcirc.values.arithmetic import evaluate

Real = NDArray[np.float64]
#: A root is real where its imaginary part is smaller than this against its size.
_REAL = 1e-9


def combinations(values: Mapping[str, Real]) -> dict[str, Real]:
    """Return all combinations of some values, one array for each name, all of one length.

    >>> combinations({"C1": np.array([1.0, 2.0]), "C2": np.array([5.0, 6.0])})
    {'C1': array([1., 1., 2., 2.]), 'C2': array([5., 6., 5., 6.])}
    """
    meshes = np.meshgrid(*values.values(), indexing="ij")
    return {name: mesh.reshape(-1) for name, mesh in zip(values, meshes, strict=True)}


def exact_sets(
    solutions: Sequence[Solution],
    known: Mapping[str, float],
    chosen: Mapping[str, Real],
    positives: Mapping[str, sympy.Expr],
) -> dict[str, Real]:
    """Return the exact sets: for every name of ``chosen`` and of the equations an array of its values.

    Args:
        solutions: of the design.
        known: numbers of the names that have one, in SI base units.
        chosen: for each chosen part its value in each combination; empty where there is none.
        positives: the parts that must be greater than zero, as formulas in names that have values.

    Combinations for which a solution is not real and positive have no set. Where a root of higher degree has several
    positive values, each has a set of its own.
    """
    found = [
        _sets(solution.branch.equations, known, chosen, positives) if chosen else _numbers(solution)
        for solution in solutions
    ]
    return {name: np.concatenate([sets[name] for sets in found]) for name in found[0]}


def _numbers(solution: Solution) -> dict[str, Real]:
    return {e.part: np.array([solution.branch.values[e.part]], float) for e in solution.branch.equations}


def _sets(
    equations: Sequence[Equation],
    known: Mapping[str, float],
    chosen: Mapping[str, Real],
    positives: Mapping[str, sympy.Expr],
) -> dict[str, Real]:
    values = dict(chosen)
    for equation in equations:
        count = len(next(iter(values.values())))
        numbers = {name: np.full(count, number) for name, number in known.items()}
        if isinstance(equation.formula, Root):
            rows, found = _roots(equation.formula, {**numbers, **values}, count, equation.part in positives)
            values = {name: array[rows] for name, array in values.items()}
        else:
            found = evaluate(equation.formula, {**numbers, **values})
            found = np.broadcast_to(found, (count,))
        values[equation.part] = found
    real = np.all([np.isfinite(values[e.part]) for e in equations], axis=0)
    kept = real & are_positive(positives.values(), known, values)
    return {name: array[kept] for name, array in values.items()}


def are_positive(
    formulas: Iterable[sympy.Expr], known: Mapping[str, float], values: Mapping[str, Real]
) -> NDArray[np.bool_]:
    """Return for each set of values whether all formulas are greater than zero."""
    count = len(next(iter(values.values())))
    numbers = {name: np.full(count, number) for name, number in known.items()}
    positive = np.ones(count, bool)
    for formula in formulas:
        positive &= evaluate(formula, {**numbers, **values}) > 0
    return positive


def _roots(
    root: Root, values: Mapping[str, Real], count: int, positive: bool
) -> tuple[NDArray[np.int64], Real]:
    """Return the real, or positive, roots for each combination: which combination each belongs to, and its value."""
    variable = next(x for x in root.polynomial.free_symbols if str(x) == root.variable)
    coefficients = [
        np.broadcast_to(evaluate(c, values), (count,))
        for c in sympy.Poly(root.polynomial, variable).all_coeffs()
    ]
    rows, found = [], []
    for row, polynomial in enumerate(np.column_stack(coefficients)):
        if not np.all(np.isfinite(polynomial)):
            continue
        roots = np.roots(polynomial)
        real = np.sort(roots.real[np.abs(roots.imag) < _REAL * np.abs(roots)])
        if positive:
            real = real[real > 0]
        if root.index:
            real = real[root.index - 1 : root.index]
        rows += [row] * len(real)
        found += list(real)
    return np.array(rows, int), np.array(found, float)
