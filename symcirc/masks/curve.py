"""The loss of a low-pass prototype as a curve: where it is stationary, where it crosses a level, its worst over a band.

Everything is found on the squared frequency x = ω², in doubles, from poles and zeros. The stationary points of the
loss are the roots of a polynomial; it is known at Chebyshev's points, as many as its degree needs, and its roots are
those of the colleague matrix (J. P. Boyd, "Solving Transcendental Equations" (2014), chapter 2; from memory), once for
ω from 0 to 1 and once, in 1/x, for ω from 1 to infinity. Between two neighbours the loss rises or falls, nothing else.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from itertools import pairwise
from math import inf, log10, sqrt
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    import numpy as np

    Complexes = np.ndarray[Any, np.dtype[np.complex128]]
    Floats = np.ndarray[Any, np.dtype[np.float64]]

#: Losses are compared with limits to so many dB: a ripple that is exactly the limit meets it.
SLACK_DB = 1e-7

#: A polynomial is known on stretches of its own, as the points of a steep response crowd towards its edge.
_STRETCHES = (0.0, 0.6, 0.95, 0.995, 0.9995, 1.0)


@dataclass(frozen=True)
class Curve:
    """A prototype whose frequencies lie about 1 rad/s; ``corners`` are the frequencies where the loss may turn.

    The corners rise from 0 to infinity; ``losses`` are the losses there, in dB, relative to the nominal gain.
    """

    poles: tuple[complex, ...]
    zeros: tuple[float, ...]
    loss_at_zero_db: float
    corners: tuple[float, ...]
    losses: tuple[float, ...]

    def loss(self, omega: float) -> float:
        """Return the loss in dB at a frequency in rad/s (0 and infinity allowed)."""
        return _loss(self.poles, self.zeros, self.loss_at_zero_db, omega)

    def least(self, low: float, high: float) -> float:
        """Return the least loss in dB from ``low`` to ``high``."""
        return min(self._candidates(low, high))

    def most(self, low: float, high: float) -> float:
        """Return the greatest loss in dB from ``low`` to ``high``."""
        return max(self._candidates(low, high))

    def _candidates(self, low: float, high: float) -> list[float]:
        inside = [loss for w, loss in zip(self.corners, self.losses, strict=True) if low < w < high]
        return [self.loss(low), self.loss(high), *inside]

    def first_above(self, loss_db: float) -> float:
        """Return the frequency up to which the loss is at most ``loss_db`` (0 where it is more at once)."""
        for place, after in enumerate(self.losses):
            if after > loss_db + SLACK_DB:
                if place == 0:
                    return 0.0
                return self._crossing(self.corners[place - 1], self.corners[place], loss_db)
        return inf

    def last_below(self, loss_db: float) -> float:
        """Return the frequency from which on the loss is at least ``loss_db`` (infinity where it never stays)."""
        for place in range(len(self.losses) - 1, -1, -1):
            if self.losses[place] < loss_db - SLACK_DB:
                if place == len(self.losses) - 1:
                    return inf
                return self._crossing(self.corners[place], self.corners[place + 1], loss_db)
        return 0.0

    def _crossing(self, low: float, high: float, loss_db: float) -> float:
        """Return where the loss, which rises from ``low`` to ``high``, is ``loss_db``, by halves."""
        if high == inf:
            high = 2 * max(low, 1.0)
            while self.loss(high) < loss_db:
                low, high = high, 2 * high
        for _ in range(60):
            middle = (low + high) / 2
            if self.loss(middle) < loss_db:
                low = middle
            else:
                high = middle
        return (low + high) / 2


def build_curve(poles: tuple[complex, ...], zeros: tuple[float, ...], loss_at_zero_db: float) -> Curve:
    """Return the curve of a prototype.

    Args:
        poles: all of them, in rad/s.
        zeros: the positive frequencies at which nothing passes, in rad/s.
        loss_at_zero_db: the loss at 0, relative to the nominal gain.

    >>> curve = build_curve((-1 + 0j,), (), 0.0)
    >>> round(curve.loss(1.0), 4), round(curve.first_above(10.0), 6)
    (3.0103, 3.0)
    """
    found = sorted({*_stationary(poles, zeros), *zeros})
    corners = (0.0, *(w for w in found if 0 < w < inf), inf)
    losses = tuple(_loss(poles, zeros, loss_at_zero_db, w) for w in corners)
    return Curve(poles, zeros, loss_at_zero_db, corners, losses)


def _loss(poles: tuple[complex, ...], zeros: tuple[float, ...], at_zero_db: float, omega: float) -> float:
    if omega == inf:
        if len(poles) > 2 * len(zeros):
            return inf
        omega = 1e9 * max(map(abs, poles))
    power = 1.0
    for p in poles:  # |jω - p|² over |p|²: with its conjugate's factor it is the whole's share
        power *= (p.real**2 + (omega - p.imag) ** 2) / (p.real**2 + p.imag**2)
    for z in zeros:
        power /= (1 - (omega / z) ** 2) ** 2 or 1e-300
    return at_zero_db + 10 * log10(power)


def _stationary(poles: tuple[complex, ...], zeros: tuple[float, ...]) -> list[float]:
    """Return frequencies among which are all where the loss has a maximum or a least value between 0 and infinity.

    With the squares a of the poles and b of the zeros, as values of x, the derivative of the logarithm of the squared
    magnitude is Σ 2/(x - b) - Σ 1/(x - a). What is no stationary point does no harm in the list, so that roots that
    are nearly real count as real.
    """
    import numpy as np

    centres = np.concatenate([-(np.array(poles) ** 2), np.array(zeros) ** 2])
    scale: Floats = 1 + np.abs(centres)
    weights: Floats = np.array([-1.0] * len(poles) + [2.0] * len(zeros)) / scale

    def below(x: Complexes) -> Complexes:
        """The derivative times all its denominators, over one scale that keeps the sizes moderate."""
        return _summed((x[:, None] - centres) / scale, weights)

    def above(y: Complexes) -> Complexes:
        """The same in y = 1/x, times a power of y."""
        return _summed((1 - y[:, None] * centres) / scale, weights)

    degree = len(centres) - 1
    lower = [sqrt(x) for x in _roots(below, degree)]
    upper = [1 / sqrt(y) for y in _roots(above, degree) if y > 0]
    return [*lower, *upper]


def _summed(gaps: Complexes, weights: Floats) -> Complexes:
    """Return, row by row, the sum of each weight times all gaps but its own."""
    import numpy as np

    total: Complexes = np.zeros(len(gaps), dtype=complex)
    for place, weight in enumerate(weights):
        total += weight * np.prod(np.delete(gaps, place, axis=1), axis=1)
    return total


def _roots(polynomial: Callable[[Complexes], Complexes], degree: int) -> list[float]:
    """Return the real parts of the roots near the interval from 0 to 1 of a real polynomial of at most a degree."""
    import numpy as np

    if degree < 1:
        return []
    series = np.polynomial.chebyshev
    points = series.chebpts1(degree + 1)
    found: list[float] = []
    for low, high in pairwise(_STRETCHES):
        places = low + (high - low) * (points + 1) / 2
        values = polynomial(places.astype(complex)).real
        coefficients = series.chebfit(points, values / np.max(abs(values)), degree)
        roots = series.chebroots(series.chebtrim(coefficients, 1e-15))
        near = [x.real for x in roots if abs(x.imag) < 0.01 and abs(x.real) <= 1.001]
        found += [low + (high - low) * (float(x) + 1) / 2 for x in near]
    return [x for x in found if 0 <= x <= 1]
