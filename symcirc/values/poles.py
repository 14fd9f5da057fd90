"""Pole pairs of a stage with chosen values against those of its target."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import inf, log, pi, sqrt

import numpy as np


@dataclass(frozen=True)
class PolePair:
    """A pair of poles, two real ones included (Q at most 1/2); a pole alone has no Q. ``f0`` is in Hz."""

    f0: float
    q: float | None


@dataclass(frozen=True)
class Shift:
    """A pair of poles with chosen values: what it is, and by what part of it f0 and Q are off (0.01 for 1 %)."""

    pair: PolePair
    f0_shift: float
    q_shift: float | None


def pole_pairs(denominator: Sequence[float]) -> tuple[PolePair, ...]:
    """Return the pole pairs of a denominator, by f0 and then by Q.

    Args:
        denominator: coefficients of ascending powers of s, in rad/s.

    Real poles are paired in the order of their size, the nearest two first where one is left over.

    >>> pole_pairs([1.0, 0.5, 1.0])[0].q
    2.0
    """
    coefficients = np.trim_zeros(np.asarray(denominator, float), "b")
    ends = np.abs(coefficients[[0, -1]])
    order = len(coefficients) - 1
    if order < 1:
        return ()
    unit = (ends[0] / ends[1]) ** (1 / order) if ends[0] else 1.0
    roots = unit * np.polynomial.polynomial.polyroots(coefficients * unit ** np.arange(order + 1))
    pairs = [_pair(complex(root), complex(root.conjugate())) for root in roots[roots.imag > 0]]
    pairs += _real_pairs([float(size) for size in np.sort(np.abs(roots.real[roots.imag == 0]))])
    return tuple(sorted(pairs, key=lambda pair: (float(f"{pair.f0:.9g}"), pair.q or 0.0)))


def _pair(one: complex, other: complex) -> PolePair:
    size = sqrt((one * other).real)
    total = abs((one + other).real)
    return PolePair(size / (2 * pi), size / total if total else inf)


def _real_pairs(poles: list[float]) -> list[PolePair]:
    alone = []
    if len(poles) % 2:
        left = min(range(0, len(poles), 2), key=lambda k: _ratios(poles[:k] + poles[k + 1 :]))
        alone = [PolePair(poles[left] / (2 * pi), None)]
        poles = poles[:left] + poles[left + 1 :]
    return [_pair(complex(a), complex(b)) for a, b in zip(poles[::2], poles[1::2], strict=True)] + alone


def _ratios(poles: list[float]) -> float:
    return sum(b / a if a else inf for a, b in zip(poles[::2], poles[1::2], strict=True))


def shifts(target: Sequence[PolePair], found: Sequence[PolePair]) -> tuple[Shift, ...]:
    """Return for each pair of the target the nearest pair of the stage that no nearer one has taken.

    >>> shift, = shifts([PolePair(1000.0, 1.0)], [PolePair(1010.0, 0.5)])
    >>> round(shift.f0_shift, 6), shift.q_shift
    (0.01, -0.5)
    """
    distances = sorted(
        (_distance(one, other), k, m)
        for k, one in enumerate(target)
        for m, other in enumerate(found)
        if (one.q is None) == (other.q is None)
    )
    partners: dict[int, int] = {}
    for _, k, m in distances:
        if k not in partners and m not in partners.values():
            partners[k] = m
    return tuple(_shift(target[k], found[partners[k]]) for k in sorted(partners))


def _distance(one: PolePair, other: PolePair) -> float:
    distance = abs(log(other.f0 / one.f0)) if one.f0 and other.f0 else abs(other.f0 - one.f0)
    if one.q is not None and other.q is not None:
        distance += abs(1 / one.q - 1 / other.q)
    return distance


def _shift(one: PolePair, other: PolePair) -> Shift:
    q_shift = None if one.q is None or other.q is None else other.q / one.q - 1
    return Shift(other, other.f0 / one.f0 - 1 if one.f0 else 0.0, q_shift)
