"""The band over which a stage is compared with its target, and the frequencies at which that is done."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]

#: The band is where the target loses no more than this against its nominal gain: half the power.
LOSS = 10 * np.log10(2.0)
#: Between two frequencies of the search lie so many of the comparison.
_FINER = 24
#: The grid on which the band is looked for reaches so far beyond the poles and zeros, as a factor.
_BEYOND = 100.0
#: Infinite frequency is taken this much further out.
_FAR = 1e4


@dataclass(frozen=True)
class Response:
    """A target in numbers: coefficients of ascending powers of s over ``frequency`` (rad/s)."""

    numerator: Real
    denominator: Real
    frequency: float

    def at(self, w: Real) -> Complex:
        """Return the response at frequencies in units of ``frequency``."""
        s = 1j * np.asarray(w, complex)
        polyval = np.polynomial.polynomial.polyval
        with np.errstate(all="ignore"):
            return np.asarray(polyval(s, self.numerator) / polyval(s, self.denominator), complex)


@dataclass(frozen=True)
class Band:
    """Intervals in rad/s, the last of which may end at infinity, and frequencies in units of the response's.

    ``points`` are those of the comparison; every ``every``-th of them, with the ends of each interval, is one of the
    search.
    """

    intervals: tuple[tuple[float, float], ...]
    points: Real
    search_points: Real


def response(numerator: Sequence[float], denominator: Sequence[float]) -> Response:
    """Return a response, coefficients of ascending powers of s in rad/s, in units of its poles' geometric mean."""
    least = next(k for k, c in enumerate(denominator) if c)
    count = len(denominator) - 1 - least
    frequency = abs(denominator[least] / denominator[-1]) ** (1 / count) if count else 1.0
    return Response(_scaled(numerator, frequency), _scaled(denominator, frequency), frequency)


def _scaled(coefficients: Sequence[float], frequency: float) -> Real:
    return np.array([c * frequency**k for k, c in enumerate(coefficients)])


def band(target: Response, nominal: float | None) -> Band:
    """Return where a target's loss is at most 3.01 dB, with frequencies that follow its phase.

    Args:
        target: the response.
        nominal: its nominal gain; None for the largest gain that is found.

    >>> low_pass = response([1.0], [1.0, 2**0.5, 1.0])
    >>> band(low_pass, 1.0).intervals[0][0], round(band(low_pass, 1.0).intervals[0][1], 6)
    (0.0, 1.0)
    """
    grid = _grid(target)
    gains = np.abs(target.at(grid))
    reference = float(np.max(gains[np.isfinite(gains)])) if nominal is None else abs(nominal)
    least = reference * 10 ** (-(LOSS + 1e-12) / 20)
    inside = gains >= least
    edges = np.flatnonzero(np.diff(inside.astype(int)))
    crossings = [_crossing(target, grid[k], grid[k + 1], least) for k in edges]
    low, high = grid[0], grid[-1]
    if not inside.any():
        inside, crossings = np.ones_like(inside), []
    bounds = [*([low] if inside[0] else []), *crossings, *([high] if inside[-1] else [])]
    pairs = [(a, b) for a, b in zip(bounds[::2], bounds[1::2], strict=True) if b > a]
    count = 8 + 4 * (len(target.denominator) - 1) // len(pairs)
    fine, coarse = [], []
    for one, other in pairs:
        points = _spread(target, grid, one, other, _FINER * (count - 1) + 1)
        fine.append(points)
        coarse.append(points[::_FINER])
    ends = [np.array([0.0])] if inside[0] and pairs[0][0] == low else []
    ends += [np.array([_FAR * high])] if inside[-1] and pairs[-1][1] == high else []
    w0 = target.frequency
    intervals = tuple(
        (0.0 if a == low else float(a) * w0, float("inf") if b == high else float(b) * w0) for a, b in pairs
    )
    return Band(intervals, np.concatenate([*fine, *ends]), np.concatenate([*coarse, *ends]))


def _grid(target: Response) -> Real:
    """Return frequencies that leave no resonance out: dense in decades, denser about every pole."""
    polyroots = np.polynomial.polynomial.polyroots
    poles, zeros = polyroots(target.denominator), polyroots(target.numerator)
    sizes = np.abs(np.concatenate([poles, zeros]))
    sizes = sizes[sizes > 0] if np.any(sizes > 0) else np.array([1.0])
    low, high = sizes.min() / _BEYOND, sizes.max() * _BEYOND
    grid = [np.geomspace(low, high, 2001)]
    steps = np.sinh(np.linspace(-4, 4, 81))
    grid += [np.abs(root.imag) + np.abs(root.real) * steps for root in (*poles, *zeros) if root.imag > 0]
    joined = np.unique(np.concatenate(grid))
    return np.asarray(joined[(joined >= low) & (joined <= high)])


def _crossing(target: Response, one: float, other: float, least: float) -> float:
    """Return where the gain passes a bound between two frequencies, by bisection."""
    begins_inside = abs(target.at(np.array(one))) >= least
    for _ in range(60):
        middle = (one + other) / 2
        if (abs(target.at(np.array(middle))) >= least) == begins_inside:
            one = middle
        else:
            other = middle
    return float(one if begins_inside else other)


def _spread(target: Response, grid: Real, low: float, high: float, count: int) -> Real:
    """Return frequencies from low to high at equal steps of the target's phase and, a little, of their logarithm."""
    between = grid[(grid > low) & (grid < high)]
    w = np.concatenate([[low], between, [high]])
    phase = np.unwrap(np.angle(target.at(w)))
    steps = np.abs(np.diff(phase)) + 0.05 * np.diff(np.log(w))
    length = np.concatenate([[0.0], np.cumsum(steps)])
    points = np.interp(np.linspace(0, length[-1], count), length, w)
    points[0], points[-1] = low, high
    return np.asarray(points, float)
