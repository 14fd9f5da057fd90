"""From where to where: the frequencies and the time that show a response."""

from __future__ import annotations

from collections.abc import Sequence
from math import floor, log10, pi

import numpy as np

from symcirc.plots.rational import Floats, Rational
from symcirc.plots.step import step_length

#: Frequencies of the plain grid in a decade, and about each pole and zero.
_A_DECADE, _ABOUT = 150, 160
#: What is shown where there is neither a pole nor an edge, in Hz.
_NOWHERE = (10.0, 1e5)
#: A loop gain is followed down to 1, at most so many decades.
_FOLLOWED = 9


def frequencies_for(ratios: Sequence[Rational], edges: Sequence[float], is_loop: bool = False) -> Floats:
    """Return the frequencies in Hz at which functions are shown, rising.

    Args:
        ratios: the first of them says where the poles and zeros are; the others (real amplifiers, say) are shown
            over the same range.
        edges: of limits, in Hz; each is among the frequencies.
        is_loop: whether the frequencies must reach to where the gain falls below 1.

    The range goes a decade beyond all of these, to a round number. It is dense about roots of high Q.
    """
    roots = np.concatenate([*([r.poles for r in ratios]), *([r.zeros for r in ratios])]) / (2 * pi)
    first = np.abs(np.concatenate([ratios[0].poles, ratios[0].zeros])) / (2 * pi)
    corners = [*first[first > 0], *edges]
    low, high = (min(corners) / 10, max(corners) * 10) if corners else _NOWHERE
    if is_loop:
        high = _down_to_one(ratios[0], high)
    low, high = round_down(low), round_up(high)
    count = int(_A_DECADE * log10(high / low)) + 1
    grid = [np.geomspace(low, high, count), np.asarray(edges, float)]
    steps = np.sinh(np.linspace(-5, 5, _ABOUT))
    for root in roots[roots.imag > 0]:
        grid.append(root.imag + max(abs(root.real), 1e-3 * abs(root)) * steps)
    found = np.unique(np.concatenate(grid))
    inside = found[(found > low) & (found < high)]
    return np.concatenate([[low], inside, [high]])


def _down_to_one(ratio: Rational, high: float) -> float:
    for _ in range(_FOLLOWED):
        if abs(ratio.at(np.array(2 * pi * high))) < 0.3:
            break
        high *= 10
    return high


def round_down(value: float) -> float:
    """Return the largest of 1, 2, 5 times a power of ten that is not above a positive value.

    >>> round_down(120.0), round_down(0.5)
    (100.0, 0.5)
    """
    power = 10.0 ** floor(log10(value) + 1e-9)
    return float(max(m for m in (1.0, 2.0, 5.0) if m <= value / power * (1 + 1e-6)) * power)


def round_up(value: float) -> float:
    """Return the least of 1, 2, 5 times a power of ten that is not below a positive value.

    >>> round_up(12e3), round_up(1000.0)
    (20000.0, 1000.0)
    """
    power = 10.0 ** floor(log10(value) + 1e-9)
    return float(min(m for m in (1.0, 2.0, 5.0, 10.0) if m * (1 + 1e-6) >= value / power) * power)


def step_end(ratios: Sequence[Rational]) -> float:
    """Return for how many seconds step responses are shown: until all have settled."""
    return max(step_length(ratio) for ratio in ratios)
