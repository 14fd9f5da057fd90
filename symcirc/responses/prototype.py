r"""Low-pass prototypes, exact: Butterworth, Chebyshev and Bessel, orders 1 to 20, with their edge at 1 rad/s.

Poles, with :math:`\theta_k = (2k - 1)\pi/2n`:

- Butterworth: on the unit circle, sections :math:`s^2 + 2 \sin\theta_k\, s + 1`;
- Chebyshev: on an ellipse, sections :math:`s^2 + 2 a \sin\theta_k\, s + a^2 + \cos^2\theta_k` with
  :math:`a = \sinh(\operatorname{asinh}(1/\varepsilon)/n)`;
- Bessel: the roots of the reverse Bessel polynomial, which are no short radicals from order 3 on.

Sources, from memory: S. Butterworth, "On the theory of filter amplifiers" (1930); L. Weinberg, "Network
Analysis and Synthesis" (1962), chapter 11; A. I. Zverev, "Handbook of Filter Synthesis" (1967).
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import sympy
from sympy import Integer, Rational

from symcirc.responses.bessel_polynomial import bessel_frequency, bessel_sections, reverse_bessel
from symcirc.responses.exact import (
    GUARD_DIGITS,
    KEPT_DIGITS,
    Coefficients,
    ResponseError,
    digits,
    over,
    product,
    scaled,
    two_cosine,
)

#: The highest order of a prototype, and the largest loss or ripple in dB.
LARGEST_ORDER, LARGEST_LOSS_DB = 20, 100
#: The largest stop loss: what the best converters see.
LARGEST_STOP_DB = 200
#: The loss at which half of the power is left, 3.0103 dB.
HALF_POWER_DB = 10 * sympy.log(2) / sympy.log(10)

#: Up to this order whole denominators are in radicals, where the family has such.
SHORT_ORDER = 6


@dataclass(frozen=True)
class Prototype:
    """A low-pass response with its edge at 1 rad/s; polynomials in s, ascending powers, denominators monic.

    The nominal gain, the largest magnitude in the pass band, is 1. ``sections`` are the factors of the
    denominator, one of first order before those of second order, and these by rising Q. ``edge_loss_db`` is
    the loss at the edge relative to the nominal gain; ``ripple_db``, ``stop_db`` and ``ripple_deg`` are the
    family's own numbers. ``zeros`` are the squares of the positive frequencies at which nothing passes, those
    nearest to the pass band last. Numbers are exact, but where no short closed form
    exists (each family says where) they are rounded to 70 digits, of which 60 and more are correct.
    """

    family: str
    order: int
    sections: tuple[Coefficients, ...]
    numerator: Coefficients
    denominator: Coefficients
    edge_loss_db: sympy.Expr
    ripple_db: sympy.Expr | None = None
    stop_db: sympy.Expr | None = None
    ripple_deg: sympy.Expr | None = None
    zeros: tuple[sympy.Expr, ...] = ()

    @property
    def dc_gain(self) -> sympy.Expr:
        """The gain at zero frequency: 1, or less by the ripple where an even order has ripple."""
        return over(self.numerator[0], self.denominator[0])


def butterworth(order: int) -> Prototype:
    r"""Return the maximally flat prototype, half power at 1 rad/s.

    Args:
        order: 1 to 20.

    The sections are in square roots for orders 1 to 6, 8, 10, 12, 16 and 20, else with cosines. The whole
    denominator is in square roots for orders 1 to 6; beyond, its coefficients are the exact products
    :math:`\prod_{j=1}^{k} \cos\frac{(j-1)\pi}{2n} / \sin\frac{j\pi}{2n}` (Weinberg, from memory).

    Raises:
        ResponseError: the order is out of range.

    >>> butterworth(4).sections
    ((1, sqrt(sqrt(2) + 2), 1), (1, sqrt(2 - sqrt(2)), 1))
    >>> butterworth(5).denominator
    (1, 1 + sqrt(5), sqrt(5) + 3, sqrt(5) + 3, 1 + sqrt(5), 1)
    """
    check_order(order)
    one = Integer(1)
    first = ((one, one),) if order % 2 else ()
    pairs = tuple((one, two_cosine(turn), one) for turn in pair_turns(order))
    lower = _butterworth_coefficients(order, order // 2)
    denominator = lower + lower[: (order + 1) // 2][::-1]  # the polynomial reads the same both ways
    return Prototype("butterworth", order, first + pairs, (one,), denominator, HALF_POWER_DB)


def chebyshev(order: int, ripple_db: sympy.Expr) -> Prototype:
    r"""Return the prototype with equal ripple in the pass band, which ends at 1 rad/s.

    Args:
        order: 1 to 20.
        ripple_db: an exact number, above 0 and at most 100.

    The nominal gain is the maximum of the pass band: an even order has the gain :math:`10^{-ripple/20}` at 0.
    The sections are exact, with :math:`a = (v^{1/2n} - v^{-1/2n})/2`, :math:`v = (g + 1)/(g - 1)`,
    :math:`g = 10^{ripple/20}`, which is :math:`\sinh(\operatorname{asinh}(1/\varepsilon)/n)` in radicals. The
    numerator and the whole denominator are exact up to order 6, beyond that rounded to 70 digits.

    Raises:
        ResponseError: the order or the ripple is out of range.

    >>> [round(float(c), 4) for c in chebyshev(2, Rational(1, 2)).denominator]
    [1.5162, 1.4256, 1.0]
    >>> chebyshev(4, Integer(20)).dc_gain
    1/10
    """
    check_order(order)
    check_loss(ripple_db, "the ripple")
    gain = 10 ** (Rational(1, 20) * ripple_db)
    epsilon = sympy.sqrt(gain**2 - 1)
    numerator = 1 / (2 ** (order - 1) * epsilon)
    at_zero = numerator if order % 2 else gain * numerator
    axis = _minor_axis(order, gain)
    sections = ellipse_sections(order, axis)
    if order <= 2:  # here other forms are shorter than those by the half axis
        middle = (sympy.sqrt(gain / epsilon - 1),) if order == 2 else ()
        sections = ((at_zero, *middle, Integer(1)),)
        denominator = sections[0]
    elif order <= SHORT_ORDER:
        denominator = (at_zero, *ellipse_coefficients(order, axis)[1:])
    else:
        denominator = rounded_product(sections)
        numerator = denominator[0] if order % 2 else digits(numerator, KEPT_DIGITS)
    return Prototype("chebyshev", order, sections, (numerator,), denominator, ripple_db, ripple_db)


def bessel(order: int, edge_loss_db: sympy.Expr = HALF_POWER_DB) -> Prototype:
    """Return the prototype of maximally flat delay, with a loss of ``edge_loss_db`` (half power) at 1 rad/s.

    Args:
        order: 1 to 20.
        edge_loss_db: an exact number, above 0 and at most 100.

    The denominator is the reverse Bessel polynomial, its frequency scaled by the positive root of the
    equation for that loss: in square roots for orders 1 and 2, beyond that rounded to 70 digits.

    Raises:
        ResponseError: the order or the loss is out of range.

    >>> bessel(2).denominator
    (1/2 + sqrt(5)/2, 3*sqrt(1/6 + sqrt(5)/6), 1)
    """
    check_order(order)
    check_loss(edge_loss_db, "the loss at the edge")
    denominator = tuple(Integer(c) for c in reverse_bessel(order))
    sections = bessel_sections(order)
    unit_delay = Prototype("bessel", order, sections, denominator[:1], denominator, edge_loss_db)
    return rescaled(unit_delay, 1 / bessel_frequency(order, edge_loss_db))


def rescaled(prototype: Prototype, factor: sympy.Expr) -> Prototype:
    """Return the prototype with all poles and zeros multiplied by ``factor``."""
    return replace(
        prototype,
        sections=tuple(scaled(section, len(section) - 1, factor) for section in prototype.sections),
        numerator=scaled(prototype.numerator, prototype.order, factor),
        denominator=scaled(prototype.denominator, prototype.order, factor),
        zeros=tuple(square * factor**2 for square in prototype.zeros),
    )


def all_pole(
    family: str,
    sections: tuple[Coefficients, ...],
    denominator: Coefficients,
    edge_loss_db: sympy.Expr,
    ripple_deg: sympy.Expr | None = None,
) -> Prototype:
    """Return the prototype without zeros whose gain is 1 at zero; ``denominator`` is the product of the sections."""
    order = len(denominator) - 1
    return Prototype(
        family, order, sections, denominator[:1], denominator, edge_loss_db, ripple_deg=ripple_deg
    )


def check_loss(loss_db: sympy.Expr, what: str, largest: int = LARGEST_LOSS_DB) -> None:
    """Refuse a loss or ripple that is no number, not positive or beyond the largest, in dB; ``what`` names it."""
    if not loss_db.is_number:
        raise ResponseError(
            f"{what} must be a number of dB, not {loss_db}", f"write {what} as a number of dB"
        )
    if loss_db.is_zero or not 0 < digits(loss_db, 20) <= largest:
        raise ResponseError(
            f"{what} must be above 0 dB and at most {largest} dB",
            f"give a value in that range as {what}",
        )


def check_order(order: int) -> None:
    """Refuse an order that no prototype has."""
    mend = f"give an order from 1 to {LARGEST_ORDER}"
    if order < 1:
        raise ResponseError(f"there is no response of order {order}", mend)
    if order > LARGEST_ORDER:
        raise ResponseError(
            f"an order of {order} is beyond {LARGEST_ORDER}, where no real parts hold the poles in place",
            mend,
        )


def pair_turns(order: int) -> list[sympy.Rational]:
    """Return the Butterworth pole pairs' angles from the negative real axis, in half turns, by rising Q."""
    return [Rational(k, 2 * order) for k in range(1 + order % 2, order, 2)]


def _butterworth_coefficients(order: int, last: int) -> Coefficients:
    """Return the coefficients of the powers 0 to ``last`` of the Butterworth polynomial."""
    result = [Integer(1)]
    for j in range(1, last + 1):
        if order <= SHORT_ORDER:
            # The squares of the cosines lie in a smaller field: by them the square roots come out short.
            above, below = two_cosine(Rational(j - 1, order)), two_cosine(Rational(j, order))
            square = sympy.expand(sympy.radsimp(result[-1] ** 2 * (2 + above) / (2 - below)))
            result.append(sympy.sqrtdenest(sympy.sqrt(square)))
        else:
            above = two_cosine(Rational(j - 1, 2 * order))
            below = two_cosine(Rational(order - j, 2 * order))  # of the complement: twice the sine
            result.append(result[-1] * above / below)
    return tuple(result)


def _minor_axis(order: int, gain: sympy.Expr) -> sympy.Expr:
    """Return the half axis of the Chebyshev ellipse along the real axis; ``gain`` is 10^(ripple/20)."""
    root = ((gain + 1) / (gain - 1)) ** Rational(1, 2 * order)
    return (root - 1 / root) / 2


def ellipse_sections(order: int, axis: sympy.Expr) -> tuple[Coefficients, ...]:
    """Return the sections of the ellipse whose half axis along the real axis is ``axis``, by rising Q."""
    one = Integer(1)
    sections: list[Coefficients] = [(axis, one)] if order % 2 else []
    for turn in pair_turns(order):
        squared_sine = (2 - two_cosine(2 * turn)) / 4
        sections.append((axis**2 + squared_sine, axis * two_cosine(turn), one))
    return tuple(sections)


def ellipse_coefficients(order: int, axis: sympy.Expr) -> Coefficients:
    """Return Chebyshev's whole denominator, each coefficient a polynomial in the half axis with short radicals."""
    symbol = sympy.Symbol("axis", positive=True)
    # At order 4 both cosines are written with one square root, so that their products come out short.
    other = {two_cosine(Rational(3, 8)): (sympy.sqrt(2) - 1) * two_cosine(Rational(1, 8))}
    sections = [[c.subs(other) for c in section] for section in ellipse_sections(order, symbol)]
    whole = (sympy.collect(sympy.expand(c), symbol) for c in product(sections))
    return tuple(c.subs(symbol, axis) for c in whole)


def rounded_product(sections: tuple[Coefficients, ...]) -> Coefficients:
    """Return the product of exact monic sections, rounded to 70 digits."""
    known = [[digits(c, KEPT_DIGITS + GUARD_DIGITS) for c in section] for section in sections]
    return (*(sympy.Float(c, KEPT_DIGITS) for c in product(known)[:-1]), Integer(1))
