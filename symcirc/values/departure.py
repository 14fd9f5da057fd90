"""How far a stage departs from its target: the worst over many frequencies, for many sets of values at once.

Both measures hold what they are given at each frequency and take the worst. A measure over some of the
frequencies is therefore never larger than over all of them: a search with few loses no set that is better with all.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from symcirc.values.band import Response

Real = NDArray[np.float64]
Row = Sequence["Real | float"]


class Measure(Protocol):
    """The worst departure of sets of coefficients, as a number from 1 that grows with it."""

    def score(self, over: Row, under: Row, shape: tuple[int, ...]) -> Real:
        """Return one score for each set, flat; infinite where the response is none.

        Args:
            over, under: coefficients of ascending powers of s over the target's frequency, which broadcast to shape.
        """

    def decibels(self, score: float) -> float:
        """Return a score in dB."""


class LevelDeparture:
    """The departure in level, in dB.

    Args:
        target: what the stage must become.
        points: frequencies in units of the target's.
        powers: the powers of s that the stage's numerator and denominator hold.
        free: whether a constant factor is no departure; then half the spread of the level is taken, which is the
            worst departure with the best factor.
    """

    def __init__(
        self, target: Response, points: Real, powers: tuple[Sequence[int], Sequence[int]], free: bool
    ) -> None:
        self._free = free
        self._over, self._under = (list(side) for side in powers)
        gains = np.abs(target.at(points))
        with np.errstate(all="ignore"):
            scale = gains / points ** self._over[0] if len(self._over) == 1 else gains
        #: One power of s above the line only: then that power goes into the scale of what stands below.
        self._single = len(self._over) == 1 and bool(np.all(np.isfinite(scale)))
        self._below = _sides(points, self._under, scale if self._single else gains)
        self._above = _sides(points, self._over, np.ones_like(points))

    def score(self, over: Row, under: Row, shape: tuple[int, ...]) -> Real:
        """Return the largest factor between the stage's power and the target's, in either sense."""
        with np.errstate(all="ignore"):
            below = _squared(self._below, under, shape)
            if self._single:
                square = _matrix(over, self._over, shape)[0] ** 2
                high, low = square / below.min(axis=0), square / below.max(axis=0)
            else:
                ratio = np.divide(_squared(self._above, over, shape), below, out=below)
                high, low = ratio.max(axis=0), ratio.min(axis=0)
            score = high / low if self._free else np.maximum(high, 1 / low)
        score[np.isnan(score)] = np.inf
        return np.asarray(score, float)

    def decibels(self, score: float) -> float:
        """Return a score in dB."""
        return float((5 if self._free else 10) * np.log10(score))


class VectorDeparture:
    """The departure in level and phase: 20 log(1 + |H/T - 1|), for an all-pass, whose level alone tells nothing.

    Args:
        gain: "exact", "magnitude" (the sign is taken from the response at 0) or "free" (sign and size are).
    """

    def __init__(
        self, target: Response, points: Real, powers: tuple[Sequence[int], Sequence[int]], gain: str
    ) -> None:
        self._gain = gain
        self._over, self._under = (list(side) for side in powers)
        self._at_zero = float(target.at(np.array([0.0]))[0].real)
        polyval = np.polynomial.polynomial.polyval
        s = 1j * points
        over, under = polyval(s, target.numerator), polyval(s, target.denominator)
        self._differing = np.column_stack(
            [*(under * s**k for k in self._over), *(-over * s**k for k in self._under)]
        )
        self._below = np.column_stack([over * s**k for k in self._under])

    def score(self, over: Row, under: Row, shape: tuple[int, ...]) -> Real:
        """Return 1 and the largest relative difference of the stage's phasor and the target's."""
        above, below = _matrix(over, self._over, shape), _matrix(under, self._under, shape)
        with np.errstate(all="ignore"):
            if self._gain != "exact" and self._over[0] == self._under[0] == 0:
                factor = above[0] / below[0] / self._at_zero
                above /= np.sign(factor) if self._gain == "magnitude" else factor
            rows = np.concatenate([above, below])
            difference = (self._differing.real @ rows) ** 2 + (self._differing.imag @ rows) ** 2
            size = (self._below.real @ below) ** 2 + (self._below.imag @ below) ** 2
            score = 1 + np.sqrt((difference / size).max(axis=0))
        score[np.isnan(score)] = np.inf
        return np.asarray(score, float)

    def decibels(self, score: float) -> float:
        """Return a score in dB."""
        return float(20 * np.log10(score))


@dataclass(frozen=True)
class _Side:
    """The real or the imaginary part of a polynomial at all frequencies: its powers, and their factors by frequency."""

    powers: tuple[int, ...]
    factors: Real

    def of(self, row: Row, shape: tuple[int, ...]) -> Real:
        """Return it for all sets, frequencies by sets."""
        matrix = _matrix(row, self.powers, shape)
        if len(matrix) == 1:
            return np.asarray(self.factors * matrix[0])
        return np.asarray(self.factors @ matrix)


def _sides(points: Real, powers: Sequence[int], scale: Real) -> tuple[_Side, ...]:
    """Return the parts, real and imaginary, of a polynomial with these powers, multiplied by a scale."""
    sides = []
    for odd in (0, 1):
        own = tuple(power for power in powers if power % 2 == odd)
        factors = [(-1.0) ** (power // 2) * scale * points**power for power in own]
        if own:
            sides.append(_Side(own, np.column_stack(factors)))
    return tuple(sides)


def _matrix(row: Row, powers: Sequence[int], shape: tuple[int, ...]) -> Real:
    """Return the coefficients of some powers, one line each, of all sets."""
    matrix = np.empty((len(powers), *shape))
    for line, power in zip(matrix, powers, strict=True):
        line[...] = row[power]
    return matrix.reshape(len(powers), -1)


def _squared(sides: tuple[_Side, ...], row: Row, shape: tuple[int, ...]) -> Real:
    """Return the square of a polynomial's size, frequencies by sets."""
    first, *rest = (side.of(row, shape) for side in sides)
    np.multiply(first, first, out=first)
    for other in rest:
        np.multiply(other, other, out=other)
        np.add(first, other, out=first)
    return first
