"""What a response does in time: Q of its poles, its group delay over the pass band, and how long a step rings.

All in doubles, from poles and zeros in rad/s.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, log
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    import numpy as np

    Floats = np.ndarray[Any, np.dtype[np.float64]]

#: A step has settled when it stays within this part of the nominal gain.
SETTLED = 0.01
#: Points of the group delay over a band, beside those about every pole; and of a step's window, a radian apart.
_DELAY_POINTS, _STEPS_A_RADIAN = 400, 4
_MOST_STEPS = 1 << 14
#: So often the window of time is halved, and in so many steps the last one is searched, twice.
_WINDOWS, _FINER = 60, 64


@dataclass(frozen=True)
class Factors:
    """Real factors of a response, each as (numerator, denominator), ascending powers, the denominators monic."""

    sections: tuple[tuple[tuple[float, ...], tuple[float, ...]], ...]
    poles: tuple[complex, ...]


def highest_q(poles: tuple[complex, ...]) -> float:
    """Return the highest Q of the poles; that of a real pole is 0.5.

    >>> round(highest_q((-1 + 1j, -1 - 1j)), 4)
    0.7071
    """
    return max(abs(p) / (-2 * p.real) for p in poles)


def delay_variation(poles: tuple[complex, ...], bands: list[tuple[float, float]]) -> float:
    """Return the greatest group delay less the least over some bands (rad/s), in seconds.

    The delay is the sum of one bell a pole. It is computed at points that lie dense about every pole, and its
    extremes are then mended by parabolas through three points; zeros on the imaginary axis add nothing.

    >>> round(delay_variation((-1 + 0j,), [(0.0, 1.0)]), 6)
    0.5
    """
    import numpy as np

    all_poles = np.array(poles)
    slowest = float(np.max(abs(all_poles)))
    low_values, high_values = [], []
    for low, high in bands:
        points = _points(all_poles, low, min(high, 1e4 * slowest))
        delays = (-all_poles.real / (all_poles.real**2 + (points[:, None] - all_poles.imag) ** 2)).sum(axis=1)
        high_values.append(_peak(points, delays))
        low_values.append(0.0 if high == inf else -_peak(points, -delays))
    return max(high_values) - min(low_values)


def _points(poles: Any, low: float, high: float) -> Floats:
    import numpy as np

    about = [p.imag + abs(p.real) * np.linspace(-8, 8, 81) for p in poles if p.imag >= 0]
    least = max(low, 1e-4 * high)
    spread = [np.linspace(low, high, _DELAY_POINTS), np.geomspace(least, high, _DELAY_POINTS)]
    points = np.unique(np.concatenate([*about, *spread]))
    inside: Floats = points[(points >= low) & (points <= high)]
    return inside


def _peak(points: Floats, values: Floats) -> float:
    """Return the greatest value, by the parabola through it and its neighbours where it has two."""
    import numpy as np

    at = int(np.argmax(values))
    if at in (0, len(values) - 1):
        return float(values[at])
    x, y = points[at - 1 : at + 2] - points[at], values[at - 1 : at + 2]
    square, linear, constant = np.polyfit(x, y, 2)
    return float(constant - linear**2 / (4 * square)) if square < 0 else float(values[at])


def settling_time(factors: Factors) -> float:
    """Return the time in seconds from which on the answer to a unit step stays within 1 % of its final value.

    The 1 % are of the nominal gain, 1, so that a band-pass or high-pass, whose final value is 0, has a time too.
    The state equations of the sections in cascade are solved by the matrix exponential, on windows of time that
    begin with the last; in each the steps are a quarter of a radian of the fastest pole that is still alive.

    >>> first_order = Factors((((1.0,), (1.0, 1.0)),), (-1 + 0j,))
    >>> round(settling_time(first_order), 4)  # ln 100
    4.6052
    """
    import numpy as np

    from symcirc.responses.state_space import state_space

    slowest = min(-p.real for p in factors.poles)
    scale = float(np.exp(np.mean(np.log(np.abs(factors.poles)))))
    state, drive, output, _ = state_space(_scaled(factors, scale))
    # In the time of the geometric mean of the poles; the steady state is taken off, so that what is left decays.
    steady = np.linalg.solve(state, -drive).astype(float)
    sizes = np.array([abs(p) / scale for p in factors.poles])
    decays = np.array([-p.real / scale for p in factors.poles])
    end = (40 + 2 * len(sizes)) * scale / slowest
    for _ in range(_WINDOWS):
        begin = end / 2
        fastest = float(np.max(np.where(decays * begin < log(1e6), sizes, 0.0)))
        count = int(min(_MOST_STEPS, max(64.0, _STEPS_A_RADIAN * fastest * (end - begin))))
        last = _last_outside(state, steady, output, (begin, end), count)
        if last is not None:
            for _ in range(2):  # the step behind the last point outside, in ever smaller ones
                last = _last_outside(state, steady, output, last, _FINER) or last
            return last[0] / scale
        end = begin
    return 0.0


def _scaled(factors: Factors, scale: float) -> list[tuple[list[float], list[float]]]:
    """Return the sections with time in units of 1/scale, as many coefficients above as below."""
    sections = []
    for over, under in factors.sections:
        n = len(under) - 1
        above = [c / scale ** (n - k) for k, c in enumerate(over)] + [0.0] * (n + 1 - len(over))
        sections.append((above, [c / scale ** (n - k) for k, c in enumerate(under)]))
    return sections


def _last_outside(
    state: Floats, steady: Floats, output: Floats, window: tuple[float, float], count: int
) -> tuple[float, float] | None:
    """Return the last of ``count`` steps of a window of time that begins with too large an error, if there is one.

    The error is the output less its final value, -c e^(A t) x, with x the steady state; the states of all steps
    are made by doubling their number.
    """
    import numpy as np

    from symcirc.responses.state_space import exponential

    begin, step = window[0], (window[1] - window[0]) / count
    block = exponential(state * begin) @ -steady[:, None]
    advance = exponential(state * step)
    while block.shape[1] < count:
        block = np.concatenate([block, advance @ block], axis=1)
        advance = advance @ advance
    outside = np.nonzero(np.abs(output @ block[:, :count]) > SETTLED)[0]
    if not len(outside):
        return None
    last = begin + step * float(outside[-1])
    return last, last + step
