r"""The Gaussian low-pass: :math:`1/|H|^2` is the Maclaurin series of :math:`e^{\omega^2}` up to :math:`\omega^{2n}`.

Sources, from memory: M. Dishal, "Gaussian-response filter design" (1959); A. I. Zverev, "Handbook of Filter
Synthesis" (1967), chapter 2.
"""

from __future__ import annotations

from math import factorial

import mpmath
import sympy
from sympy import Integer, Rational

from symcirc.responses.exact import Coefficients, product
from symcirc.responses.numeric import (
    WORKING_DIGITS,
    edge_frequency,
    kept,
    kept_polynomial,
    scaled_factors,
    stable_factors,
)
from symcirc.responses.prototype import (
    HALF_POWER_DB,
    Prototype,
    all_pole,
    check_loss,
    check_order,
    rescaled,
)
from symcirc.responses.rough import Rough


def gaussian(order: int, edge_loss_db: sympy.Expr = HALF_POWER_DB) -> Prototype:
    r"""Return the Gaussian prototype, with a loss of ``edge_loss_db`` (half power) at 1 rad/s.

    Args:
        order: 1 to 20.
        edge_loss_db: an exact number, above 0 and at most 100.

    :math:`1/|H|^2 = \sum_{k \le n} (c\,\omega^2)^k/k!`, with the c that puts the edge in its place. Orders 1
    and 2 are in square roots; beyond that rounded to 70 digits.

    Raises:
        ResponseError: the order or the loss is out of range.

    >>> [round(float(c), 4) for c in gaussian(3).denominator]
    [4.1924, 6.9286, 4.2603, 1.0]
    """
    check_order(order)
    check_loss(edge_loss_db, "the loss at the edge")
    ratio = 10 ** (Rational(1, 10) * edge_loss_db)
    one = Integer(1)
    if order == 1:
        section: Coefficients = (one, one)
        return rescaled(all_pole("gaussian", (section,), section, edge_loss_db), 1 / sympy.sqrt(ratio - 1))
    if order == 2:  # 1 + x + x²/2 is (ω⁴ + 2 ω² + 2)/2 with x = ω²
        section = (sympy.sqrt(2), sympy.sqrt(2 + 2 * sympy.sqrt(2)), one)
        scale = 1 / sympy.sqrt(sympy.sqrt(2 * ratio - 1) - 1)
        return rescaled(all_pole("gaussian", (section,), section, edge_loss_db), scale)
    with mpmath.workdps(WORKING_DIGITS):
        squared = [mpmath.mpf(factorial(order) // factorial(k)) for k in range(order + 1)]
        factors = stable_factors(squared, _rough_squares(order))
        factors = scaled_factors(factors, 1 / edge_frequency(factors, edge_loss_db))
        return all_pole("gaussian", kept(factors), kept_polynomial(product(factors)), edge_loss_db)


def _rough_squares(order: int) -> list[complex]:
    """Return the values of ω² at which the series vanishes, roughly."""
    import numpy as np

    # With ω² = n y the roots y lie near one curve about 0 for every order (Szegő), and the sizes stay moderate.
    series = [order**k / factorial(k) for k in range(order + 1)]
    return [complex(order * y) for y in np.roots(series[::-1])]


def rough_gaussian(order: int) -> Rough:
    """Return the prototype in doubles, with c = 1."""
    import numpy as np

    return Rough(tuple(complex(-np.sqrt(-x + 0j)) for x in _rough_squares(order)))
