r"""The low-pass of linear phase with equiripple error.

The phase of the all-pole H differs from :math:`-\omega` (a delay of 1 s) by at most ``ripple``, and takes that error
with alternating sign at n frequencies and at the end of the band: the best approximation in Chebyshev's sense. With
:math:`\varphi_i` the phases wanted at n such frequencies the equations
:math:`\operatorname{Im}\,D(j\omega_i)\,e^{-j\varphi_i} = 0` are linear in the coefficients of D, and the exchange of
Remez then moves the frequencies to the extremes of the error.

Sources, from memory: E. Remez on the exchange algorithm (1934); A. I. Zverev, "Handbook of Filter Synthesis"
(1967), chapter 2 and the tables for errors of 0.05 and 0.5 degrees.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import ceil, log, pi, radians
from typing import TYPE_CHECKING, Any

import mpmath
import sympy

from symcirc.responses.exact import ResponseError, digits, product
from symcirc.responses.numeric import (
    WORKING_DIGITS,
    edge_frequency,
    kept,
    kept_polynomial,
    mended_root,
    real_factors,
    scaled_factors,
    working,
)
from symcirc.responses.prototype import HALF_POWER_DB, Prototype, all_pole, check_loss, check_order
from symcirc.responses.rough import Rough

if TYPE_CHECKING:
    import numpy as np

    Floats = np.ndarray[Any, np.dtype[np.float64]]

#: The errors in degrees between which responses are made; below, the response is Bessel's for all purposes.
SMALLEST_RIPPLE_DEG, LARGEST_RIPPLE_DEG = sympy.Rational(1, 100), sympy.Integer(5)
#: The exchange settles in a few rounds, or never; from one ripple to the next it goes by this factor.
_EXCHANGES, _STEP = 40, 1.5
#: In doubles the extremes of a very small ripple are known to about so much; the rest is done with all digits.
_SETTLED = 1e-5


def linear_phase(order: int, ripple_deg: sympy.Expr, edge_loss_db: sympy.Expr = HALF_POWER_DB) -> Prototype:
    """Return the prototype of linear phase with equiripple error, a loss of ``edge_loss_db`` at 1 rad/s.

    Args:
        order: 1 to 20.
        ripple_deg: the greatest error of the phase in degrees; an exact number from 0.01 to 5.
        edge_loss_db: half power, or an exact number above 0 and at most 100.

    Rounded to 70 digits.

    Raises:
        ResponseError: the order, the ripple or the loss is out of range.

    >>> [round(float(c), 4) for c in linear_phase(2, sympy.Rational(1, 20)).denominator]
    [1.4637, 2.0174, 1.0]
    """
    check_order(order)
    _check_ripple(ripple_deg)
    check_loss(edge_loss_db, "the loss at the edge")
    extremes, coefficients = _exchanged(order, radians(float(digits(ripple_deg, 20))))
    with mpmath.workdps(WORKING_DIGITS):
        whole = _sharpened(working(sympy.pi * ripple_deg / 180), extremes.tolist())
        poles = [mended_root(whole, start) for start in _upper(_roots(coefficients))]
        factors = real_factors(poles)
        found = [c * whole[-1] for c in product(factors)]
        tolerance = mpmath.mpf(10) ** (20 - WORKING_DIGITS)
        matches = all(abs(a - b) < tolerance * abs(b) for a, b in zip(found, whole, strict=True))
        assert matches, "the sections of a linear phase response do not multiply to it"
        factors = scaled_factors(factors, 1 / edge_frequency(factors, edge_loss_db))
        return all_pole(
            "linear phase", kept(factors), kept_polynomial(product(factors)), edge_loss_db, ripple_deg
        )


def rough_linear_phase(order: int, ripple_deg: float) -> Rough:
    """Return the prototype in doubles, with a delay of about 1 s."""
    _, coefficients = _exchanged(order, radians(ripple_deg))
    return Rough(tuple(_roots(coefficients)))


def _check_ripple(ripple_deg: sympy.Expr) -> None:
    within = ripple_deg.is_number and SMALLEST_RIPPLE_DEG <= ripple_deg <= LARGEST_RIPPLE_DEG
    if not within:
        raise ResponseError(
            f"the ripple of a linear phase must be from {float(SMALLEST_RIPPLE_DEG)} to {LARGEST_RIPPLE_DEG} deg",
            "write: ripple 0.5 deg",
        )


def _exchanged(order: int, ripple: float) -> tuple[Floats, Floats]:
    """Return the frequencies of the extremes, falling, and the coefficients of D (ascending, the first 1).

    First from order to order at the largest ripple, where the exchange settles from afar; then, at the order, in
    small steps to the ripple that is wanted, the extremes continued as powers of the ripple.
    """
    import numpy as np

    now = radians(float(LARGEST_RIPPLE_DEG))
    extremes, coefficients = _exchanged_from(np.array([_first_extreme(now)]), now)
    before = extremes
    for _ in range(order - 1):
        start = _continued(before, extremes)
        before = extremes
        extremes, coefficients = _exchanged_from(start, now)
    slopes = np.ones(order)  # each step is by the same factor
    count = ceil(log(now / ripple) / log(_STEP))
    for goal in now * (ripple / now) ** (np.arange(1, count + 1) / max(count, 1)):
        before = extremes
        extremes, coefficients = _exchanged_from(before * slopes, float(goal))
        slopes = extremes / before
    return extremes, coefficients


def _exchanged_from(extremes: Floats, ripple: float) -> tuple[Floats, Floats]:
    """Exchange until the extremes stand, where the linear equations are solved again."""
    import numpy as np

    order = len(extremes)
    errors = ripple * (-1.0) ** np.arange(order)
    for _ in range(_EXCHANGES):
        coefficients = _interpolated(extremes, extremes + errors)
        slope, bend = _error_slopes(coefficients, extremes)
        step = slope / bend
        extremes = extremes - step
        if np.max(np.abs(step) / extremes) < _SETTLED:
            return extremes, coefficients
    raise AssertionError(f"the exchange for a linear phase of order {order} did not settle")


def _first_extreme(ripple: float) -> float:
    """Return where arctan(c ω) less ω is greatest, for order 1: about (3/2 ripple)^(1/3), as 1/3 of x³ is lost."""
    return float((1.5 * ripple) ** (1 / 3))


def _continued(before: Floats, extremes: Floats) -> Floats:
    """Return where the extremes of the next order begin: their spacing is continued from two orders."""
    import numpy as np

    n = len(extremes)
    if n == 1:
        return np.array([4.0, 1.5]) * float(extremes[0])
    start: Floats = 2 * _spread(extremes, n + 1) - _spread(before, n + 1)
    return start


def _spread(extremes: Floats, count: int) -> Floats:
    """Return as many frequencies on the curve of the extremes over their number, counted as a fraction from 0."""
    import numpy as np

    number = len(extremes)
    places = np.concatenate([[0.0], np.arange(1, number + 1)]) / (number + 0.5)
    wanted = np.arange(1, count + 1) / (count + 0.5)
    rising: Floats = np.interp(wanted, places, np.concatenate([[0.0], extremes[::-1]]))
    return rising[::-1]


def _interpolated(frequencies: Floats, phases: Floats) -> Floats:
    """Return the coefficients of the D with D(0) = 1 and the phases wanted at n frequencies."""
    import numpy as np

    powers = np.arange(1, len(frequencies) + 1)
    band = frequencies[0]
    rows = (frequencies[:, None] / band) ** powers * np.sin(powers * pi / 2 - phases[:, None])
    solved: Floats = np.linalg.solve(rows, np.sin(phases)) / band**powers
    return np.concatenate([[1.0], solved])


def _error_slopes(coefficients: Floats, frequencies: Floats) -> tuple[Floats, Floats]:
    """Return the first and second derivative of the phase of D(jω) less ω."""
    import numpy as np

    series = np.polynomial.polynomial
    first = series.polyder(coefficients)
    at = 1j * frequencies
    values = series.polyval(at, coefficients)
    ratio = series.polyval(at, first) / values
    bend = series.polyval(at, series.polyder(first)) / values - ratio**2
    return ratio.real - 1, -bend.imag


def _sharpened(ripple: mpmath.mpf, extremes: Sequence[float]) -> list[mpmath.mpf]:
    """Return the coefficients of D to the working precision, by more exchanges with that many digits."""
    order = len(extremes)
    places = [mpmath.mpf(x) for x in extremes]
    errors = [ripple * (-1) ** i for i in range(order)]
    largest = mpmath.mpf(1)
    while True:
        phases = [x + e for x, e in zip(places, errors, strict=True)]
        whole = _solved(places, phases)
        # The error is stationary where it is taken, so what is off by 1e-30 in frequency is off by 1e-60 in it.
        if largest < mpmath.mpf(10) ** (-WORKING_DIGITS // 2):
            return whole
        steps = [_step(whole, x) for x in places]
        places = [x - step for x, step in zip(places, steps, strict=True)]
        largest = max(map(abs, steps))


def _solved(places: Sequence[mpmath.mpf], phases: Sequence[mpmath.mpf]) -> list[mpmath.mpf]:
    order, band = len(places), places[0]
    rows = mpmath.matrix(order, order)
    for i, (x, phase) in enumerate(zip(places, phases, strict=True)):
        turned = (-mpmath.sin(phase), mpmath.cos(phase), mpmath.sin(phase), -mpmath.cos(phase))
        for power in range(1, order + 1):
            rows[i, power - 1] = (x / band) ** power * turned[power % 4]
    solved = mpmath.lu_solve(rows, mpmath.matrix([mpmath.sin(phase) for phase in phases]))
    return [mpmath.mpf(1), *(solved[k] / band ** (k + 1) for k in range(order))]


def _step(whole: Sequence[mpmath.mpf], frequency: mpmath.mpf) -> mpmath.mpf:
    """Return Newton's step from a frequency to the extreme of the phase error near it."""
    at = mpmath.mpc(0, frequency)
    first = [k * c for k, c in enumerate(whole)][1:]
    second = [k * c for k, c in enumerate(first)][1:] or [mpmath.mpf(0)]
    value = mpmath.polyval(whole[::-1], at)
    ratio = mpmath.polyval(first[::-1], at) / value
    bend = mpmath.polyval(second[::-1], at) / value - ratio**2
    return (ratio.real - 1) / -bend.imag


def _roots(coefficients: Floats) -> list[complex]:
    """Return the roots of D, found on a scale on which its first and last coefficient agree."""
    import numpy as np

    order = len(coefficients) - 1
    scale = (1 / coefficients[-1]) ** (1 / order)
    return [complex(scale * z) for z in np.roots((coefficients * scale ** np.arange(order + 1))[::-1])]


def _upper(roots: Sequence[complex]) -> list[mpmath.mpf | mpmath.mpc]:
    """Return the starts of the roots above the real axis, and of the real one of an odd order."""
    falling = sorted(roots, key=lambda z: -z.imag)[: (len(roots) + 1) // 2]
    starts = [mpmath.mpc(z) for z in falling]
    if len(roots) % 2:
        starts[-1] = starts[-1].real
    return starts
