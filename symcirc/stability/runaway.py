"""Roots that run to infinity as a small parameter vanishes: the Newton polygon of a polynomial in two variables."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

#: A root counts as real, or as purely imaginary, where the other part is smaller than this share of its size.
SHARE = 1e-6


@dataclass(frozen=True)
class Runaway:
    """How many roots run to infinity in the right half-plane: along the real axis, and in complex directions."""

    real: int
    complex: int

    @property
    def any(self) -> bool:
        """Whether there is one at all."""
        return bool(self.real or self.complex)


def runaway_roots(polynomial: Mapping[tuple[int, int], int]) -> Runaway | None:
    """Return which roots s of P(s, e) with s*eps for e run to infinity in the right half-plane as eps -> 0+.

    The terms of P(s, s*eps) with the power i of s and j of eps are points (i, j). Each edge of positive slope of
    the polygon below them gives roots s ~ c eps^(-slope), c the roots of the polynomial of the edge's own terms
    (Newton's polygon; Walker, "Algebraic Curves", 1950, chapter IV, from memory). Directions of no real part in
    leading order do not count: those roots keep a bounded real part.

    Args:
        polynomial: exact whole numbers by (power of s, power of e), zeros left out.

    Returns:
        The counts, or None where P(s, 0) is zero: then there is no ideal circuit to begin with.

    >>> runaway_roots({(0, 0): 1, (0, 1): 1})  # 1 + s eps: the root -1/eps
    Runaway(real=0, complex=0)
    >>> runaway_roots({(0, 0): 1, (0, 1): -1})
    Runaway(real=1, complex=0)
    >>> runaway_roots({(0, 0): 1, (2, 1): 1})  # 1 + s^3 eps: three roots, two to the right
    Runaway(real=0, complex=2)
    """
    tops: dict[int, int] = {}
    for power_of_s, power_of_e in polynomial:
        tops[power_of_e] = max(power_of_s, tops.get(power_of_e, 0))
    if 0 not in tops:
        return None
    points = {(top + j, j): polynomial[top, j] for j, top in tops.items()}
    real = complex_ = 0
    for edge in _edges(points):
        start = edge[0][0]
        for root in _roots({i - start: points[i, j] for i, j in edge}):
            if root.real > SHARE * abs(root):
                on_axis = abs(root.imag) <= SHARE * abs(root)
                real, complex_ = real + on_axis, complex_ + (not on_axis)
    return Runaway(real, complex_)


def _edges(points: Mapping[tuple[int, int], int]) -> list[list[tuple[int, int]]]:
    """Return the points on each edge of positive slope, from power 0 of eps upwards."""
    here = next(point for point in points if point[1] == 0)
    edges: list[list[tuple[int, int]]] = []
    while True:
        ahead = [(i, j) for i, j in points if i > here[0] and j > here[1]]
        if not ahead:
            return edges

        def level(point: tuple[int, int], start: tuple[int, int] = here) -> tuple[int, int]:
            return point[1] - start[1], point[0] - start[0]

        rise, run = min((level(p) for p in ahead), key=lambda step: step[0] / step[1])
        edge = [here, *sorted(p for p in ahead if level(p)[0] * run == rise * level(p)[1])]
        edges.append(edge)
        here = edge[-1]


def _roots(coefficients: Mapping[int, int]) -> list[complex]:
    """Return the roots, scaled to a geometric mean of 1, of a polynomial with coefficients of any size."""
    degree = max(coefficients)
    scale = (math.log(abs(coefficients[0])) - math.log(abs(coefficients[degree]))) / degree
    dense = np.zeros(degree + 1)
    for power, coefficient in coefficients.items():
        size = math.log(abs(coefficient)) - math.log(abs(coefficients[0])) + power * scale
        dense[degree - power] = math.exp(min(size, 700.0)) * (1 if coefficient > 0 else -1)
    return [complex(root) for root in np.roots(dense)]
