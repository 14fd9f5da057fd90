"""Real numbers to 80 digits, and the short exact expressions that they are."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import sympy
from mpmath import MPContext

#: The arithmetic of this package: 80 digits, whatever the precision is that mpmath is set to elsewhere.
reals: Any = MPContext()
reals.dps = 80

#: The relative size below which a number is zero.
NEGLIGIBLE = reals.mpf(10) ** -50
#: Numerators and denominators of an exact number that counts as short are below this.
LARGEST_PART = 10**18
#: Digits kept of a number that is not short.
KEPT_DIGITS = 60

_AGREEMENT = 10**50
_POWERS_OF_PI = (0, 1, -1, 2, -2, 3, -3, 4, -4)


def exact(value: Any) -> sympy.Expr:
    """Return a decimal number as a fraction, or the root of one, times a power of pi where it is such a number.

    It is taken for one where the two agree to 50 digits while the fraction has at most 36, of which chance has
    odds of about 1e-13. Any other number comes back rounded to 60 digits.

    >>> print(exact(reals.pi * 2400 * reals.sqrt(2)), exact(1 / reals.mpf(3)))
    2400*sqrt(2)*pi 1/3
    """
    if not value:
        return sympy.S.Zero
    for power in _POWERS_OF_PI:
        rest = value / reals.pi**power
        found = fraction_near(rest)
        if found is not None:
            return _rational(found) * sympy.pi**power
        found = fraction_near(rest * rest)
        if found is not None:
            root = sympy.sqrt(_rational(found)) * sympy.pi**power
            return root if value > 0 else -root
    return sympy.Float(reals.nstr(value, KEPT_DIGITS), KEPT_DIGITS)


def fraction_near(value: Any) -> Fraction | None:
    """Return the fraction of at most 18 digits above and below that a decimal agrees with to 50 digits, if any."""
    size = abs(as_fraction(value))
    numerator, denominator = size.numerator, size.denominator
    above, below, last_above, last_below = 1, 0, 0, 1  # the convergents of the continued fraction
    rest, divisor = numerator, denominator
    while divisor:
        whole, left = divmod(rest, divisor)
        above, last_above = whole * above + last_above, above
        below, last_below = whole * below + last_below, below
        if max(above, below) > LARGEST_PART:
            return None
        if abs(above * denominator - numerator * below) * _AGREEMENT < numerator * below:
            return Fraction(-above if value < 0 else above, below)
        rest, divisor = divisor, left
    return None


def _rational(value: Fraction) -> sympy.Rational:
    return sympy.Rational(value.numerator, value.denominator)


def decimal(number: sympy.Expr) -> Any:
    """Return an exact real number in decimals.

    >>> decimal(sympy.Rational(1, 8))
    mpf('0.125')
    """
    if number.is_Rational:
        return reals.mpf(int(number.p)) / int(number.q)
    return reals.mpf(sympy.Float(number.evalf(reals.dps + 5), reals.dps + 5)._mpf_)


def as_fraction(value: Any) -> Fraction:
    """Return a decimal number as the fraction it is, exactly.

    >>> as_fraction(reals.mpf("-0.75"))
    Fraction(-3, 4)
    """
    sign, mantissa, exponent, _ = value._mpf_
    size: Fraction = Fraction(int(mantissa)) * Fraction(2) ** exponent
    return -size if sign else size
