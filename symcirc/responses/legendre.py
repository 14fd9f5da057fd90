r"""The monotonic low-pass of steepest edge, whose :math:`1/|H|^2 - 1` is made of Legendre polynomials.

Of all :math:`L(\omega^2)` of degree n that rise from 0 to 1 without ever falling, it is the one whose slope at the
edge is the greatest. Sources, from memory: A. Papoulis, "Optimum filters with monotonic response" (1958), odd
orders; A. Papoulis, "On monotonic response filters", and M. Fukada, "Optimum filters of even orders with monotonic
response" (1959), even ones.
"""

from __future__ import annotations

from fractions import Fraction
from math import comb, sqrt

import mpmath
import sympy

from symcirc.responses.exact import product
from symcirc.responses.numeric import (
    WORKING_DIGITS,
    crossing,
    kept,
    kept_polynomial,
    scaled_factors,
    stable_factors,
    working,
)
from symcirc.responses.prototype import (
    HALF_POWER_DB,
    Prototype,
    all_pole,
    butterworth,
    check_loss,
    check_order,
    rescaled,
)
from symcirc.responses.rough import Rough


def legendre_square(order: int) -> tuple[Fraction, ...]:
    r"""Return :math:`L_n`, the polynomial in :math:`\omega^2` that is :math:`1/|H|^2 - 1`, ascending powers.

    >>> [int(c) for c in legendre_square(3)], [int(c) for c in legendre_square(4)]
    ([0, 1, -3, 3], [0, 0, 3, -8, 6])
    """
    k = (order - 1) // 2
    total = [Fraction(0)] * (k + 1)
    for i in _degrees(order):
        for power in range(i + 1):  # the Legendre polynomial of 2x - 1
            total[power] += (2 * i + 1) * (-1) ** (i + power) * comb(i, power) * comb(i + power, power)
    slope = [Fraction(c) for c in product([total, total])]
    if order % 2:
        scale = Fraction(1, (k + 1) ** 2)
    else:
        slope, scale = [Fraction(0), *slope], Fraction(4, (k + 1) * (k + 2))
    return (Fraction(0), *(scale * c / (power + 1) for power, c in enumerate(slope)))


def _degrees(order: int) -> range:
    """Return the degrees of the Legendre polynomials that make the root of the slope."""
    k = (order - 1) // 2
    return range(k + 1) if order % 2 else range(k % 2, k + 1, 2)


def legendre(order: int, edge_loss_db: sympy.Expr = HALF_POWER_DB) -> Prototype:
    r"""Return the monotonic prototype of steepest edge, with a loss of ``edge_loss_db`` (half power) at 1 rad/s.

    Args:
        order: 1 to 20.
        edge_loss_db: an exact number, above 0 and at most 100.

    :math:`|H|^2 = 1/(1 + L_n(\omega^2))`. Orders 1 and 2 are those of Butterworth; beyond that rounded to 70
    digits. Another loss at the edge scales the same response in frequency.

    Raises:
        ResponseError: the order or the loss is out of range.

    >>> [round(float(c), 4) for c in legendre(3).denominator]
    [0.5774, 1.359, 1.3107, 1.0]
    """
    check_order(order)
    check_loss(edge_loss_db, "the loss at the edge")
    if order <= 2:
        growth = 10 ** (sympy.Rational(1, 10) * edge_loss_db) - 1
        edge = growth ** sympy.Rational(1, 2 * order)
        (section,) = butterworth(order).sections
        return rescaled(all_pole("legendre", (section,), section, edge_loss_db), 1 / edge)
    with mpmath.workdps(WORKING_DIGITS):
        rising = [mpmath.mpf(c.numerator) / c.denominator for c in legendre_square(order)]
        squared = [rising[0] + 1, *rising[1:]]
        factors = stable_factors(squared, _rough_squares(order))
        if edge_loss_db != HALF_POWER_DB:
            goal = working(10 ** (sympy.Rational(1, 10) * edge_loss_db))
            square = crossing(lambda x: mpmath.polyval(squared[::-1], x), goal, mpmath.mpf(1))
            factors = scaled_factors(factors, 1 / mpmath.sqrt(square))
        return all_pole("legendre", kept(factors), kept_polynomial(product(factors)), edge_loss_db)


def _rough_squares(order: int) -> list[complex]:
    """Return the values of ω² at which 1 + L vanishes, roughly: by the series in Legendre polynomials itself.

    The powers of ω² would lose all digits at order 20.
    """
    from numpy.polynomial import legendre as series

    k = (order - 1) // 2
    root = [float(2 * i + 1) if i in _degrees(order) else 0.0 for i in range(k + 1)]
    slope = series.legmul(root, root)
    if order % 2:
        slope = slope / (2 * (k + 1) ** 2)
    else:
        slope = series.legmul(slope, [1.0, 1.0]) / ((k + 1) * (k + 2))
    rising = series.legint(slope, lbnd=-1)
    rising[0] += 1
    return [complex(t + 1) / 2 for t in series.legroots(rising)]


def rough_legendre(order: int) -> Rough:
    """Return the prototype in doubles, half power at 1 rad/s."""
    import numpy as np

    if order == 1:
        return Rough((-1 + 0j,))
    if order == 2:
        return Rough((complex(-sqrt(0.5), sqrt(0.5)), complex(-sqrt(0.5), -sqrt(0.5))))
    return Rough(tuple(complex(-np.sqrt(-x + 0j)) for x in _rough_squares(order)))
