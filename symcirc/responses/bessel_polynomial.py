r"""The reverse Bessel polynomials: their coefficients, their factors and the frequency of a given loss.

:math:`\theta_n(s) = \sum_k \frac{(2n-k)!}{2^{n-k}\,k!\,(n-k)!}\,s^k` is the denominator of the low-pass
whose delay at zero is 1 s and maximally flat. Sources, from memory: W. E. Thomson, "Delay networks having
maximally flat frequency characteristics" (1949); L. Weinberg, "Network Analysis and Synthesis" (1962),
chapter 11.
"""

from __future__ import annotations

from math import factorial

import mpmath
import sympy
from sympy import Integer, Rational

from symcirc.responses.exact import GUARD_DIGITS, KEPT_DIGITS, Coefficients, digits, product
from symcirc.responses.numeric import mended_root, real_factors

_WORKING_DIGITS = KEPT_DIGITS + 2 * GUARD_DIGITS


def reverse_bessel(order: int) -> tuple[int, ...]:
    """Return the coefficients of the reverse Bessel polynomial, ascending powers, monic.

    >>> reverse_bessel(3)
    (15, 15, 6, 1)
    """
    n = order
    return tuple(
        factorial(2 * n - k) // (2 ** (n - k) * factorial(k) * factorial(n - k)) for k in range(n + 1)
    )


def bessel_sections(order: int) -> tuple[Coefficients, ...]:
    """Return the monic real factors of the polynomial: the first-order one, then second-order by rising Q.

    Exact for orders 1 and 2; beyond, rounded to 70 digits: the roots found by numpy are mended by Newton's
    method, and the product of the factors is compared with the polynomial.

    >>> bessel_sections(2)
    ((3, 3, 1),)
    """
    whole = reverse_bessel(order)
    if order <= 2:
        return (tuple(Integer(c) for c in whole),)
    with mpmath.workdps(_WORKING_DIGITS):
        factors = real_factors(mended_root(whole, start) for start in _upper_starts(whole))
        tolerance = mpmath.mpf(10) ** -KEPT_DIGITS
        matches = all(abs(a - b) < tolerance * b for a, b in zip(product(factors), whole, strict=True))
        assert matches, "the sections of a Bessel polynomial do not multiply to it"
        return tuple((*(sympy.Float(c, KEPT_DIGITS) for c in factor[:-1]), Integer(1)) for factor in factors)


def _upper_starts(whole: tuple[int, ...]) -> list[mpmath.mpf | mpmath.mpc]:
    """Return the roots on and above the real axis, roughly, the one real root of an odd order as a real number."""
    import numpy as np

    order = len(whole) - 1
    rough = sorted(np.roots([float(c) for c in whole[::-1]]), key=lambda z: -z.imag)[: (order + 1) // 2]
    starts = [mpmath.mpc(complex(z)) for z in rough]
    if order % 2:
        starts[-1] = starts[-1].real
    return starts


def bessel_frequency(order: int, loss_db: sympy.Expr) -> sympy.Expr:
    """Return the frequency in rad/s of a loss in dB, of the low-pass with 1 s of delay at zero.

    That is the one positive root of |θ(jω)|² = θ(0)² 10^(loss/10): in square roots for orders 1 and 2, beyond
    that rounded to 70 digits.

    >>> bessel_frequency(1, Integer(10))
    3
    """
    growth = 10 ** (Rational(1, 10) * loss_db) - 1
    if order == 1:
        return sympy.sqrt(growth)
    if order == 2:  # x² + 3 x = 9 growth in x = ω²; 1/x has the shorter form
        return ((1 + sympy.sqrt(1 + 4 * growth)) / (6 * growth)) ** Rational(-1, 2)
    rising = _squared_magnitude(reverse_bessel(order))
    with mpmath.workdps(_WORKING_DIGITS):
        goal = rising[0] * mpmath.mpf(str(digits(growth, _WORKING_DIGITS)))
        falling = [*rising[:0:-1], -goal]
        slope = [k * rising[k] for k in range(order, 0, -1)]
        # All coefficients of |θ|² are positive, so it rises and bends upwards: from the right, Newton's
        # method falls to the root without ever passing it, and rounding ends the fall.
        x = mpmath.root(goal / rising[-1], order)
        while (lower := x - mpmath.polyval(falling, x) / mpmath.polyval(slope, x)) < x:
            x = lower
        return sympy.Float(mpmath.sqrt(x), KEPT_DIGITS)


def _squared_magnitude(whole: tuple[int, ...]) -> tuple[int, ...]:
    """Return |p(jω)|² as coefficients of the powers of ω².

    >>> _squared_magnitude((3, 3, 1))
    (9, 3, 1)
    """
    mirrored = [c * (-1) ** k for k, c in enumerate(whole)]
    squared = product([whole, mirrored])  # p(s) p(-s), in which s² is -ω²
    return tuple(int(c) * (-1) ** k for k, c in enumerate(squared[::2]))
