r"""The inverse Chebyshev low-pass: flat in the pass band, equal ripple in the stop band, which begins at 1 rad/s.

:math:`|H|^2 = 1/(1 + 1/(\varepsilon^2 T_n(1/\omega)^2))` with :math:`\varepsilon^2 = 1/(10^{stop/10} - 1)`: the poles
are one over those of Chebyshev. Source, from memory: L. Weinberg, "Network Analysis and Synthesis" (1962), chapter 11.
"""

from __future__ import annotations

import sympy
from sympy import Integer, Rational

from symcirc.responses.exact import KEPT_DIGITS, Coefficients, ResponseError, digits, two_cosine
from symcirc.responses.prototype import (
    LARGEST_STOP_DB,
    SHORT_ORDER,
    Prototype,
    check_loss,
    check_order,
    ellipse_coefficients,
    ellipse_sections,
    rescaled,
    rounded_product,
)


def inverse_chebyshev(order: int, stop_db: sympy.Expr) -> Prototype:
    r"""Return the prototype with equal ripple in the stop band, which begins at 1 rad/s.

    Args:
        order: 1 to 20.
        stop_db: the loss that the stop band never falls below; an exact number, above 0 and at most 100.

    The gain at 0 is 1; an even order has ``stop_db`` at infinity. The sections and zeros are exact, and so is the
    numerator, the integers of :math:`T_n` times a square root; the whole denominator is exact up to order 6,
    beyond that rounded to 70 digits.

    Raises:
        ResponseError: the order or the stop loss is out of range.

    >>> inverse_chebyshev(2, Integer(20)).numerator
    (1/5, 0, 1/10)
    """
    check_order(order)
    check_loss(stop_db, "the stop loss", LARGEST_STOP_DB)
    gain = 10 ** (Rational(1, 20) * stop_db)
    root = (gain + sympy.sqrt(gain**2 - 1)) ** Rational(1, order)
    axis = (root - 1 / root) / 2
    size = 1 / (sympy.sqrt(gain**2 - 1) if order % 2 else gain)
    sections = tuple(_inverted(section) for section in ellipse_sections(order, axis))
    at_zero = 2 ** (order - 1) * size
    if order <= 2:
        middle = () if order == 1 else (2 * sympy.sqrt(gain - 1) / gain,)
        sections = ((at_zero, *middle, Integer(1)),)
        denominator = sections[0]
    elif order <= SHORT_ORDER:
        # One over Chebyshev's poles: its coefficients backwards, over its constant, which is one over ours.
        falling = ellipse_coefficients(order, axis)[:0:-1]
        denominator = (at_zero, *(at_zero * c for c in falling[1:]), Integer(1))
    else:
        denominator = rounded_product(sections)
    turns = [two_cosine(2 * turn) for turn in _zero_turns(order)]
    return Prototype(
        "inverse chebyshev",
        order,
        sections,
        tuple(size * c for c in _chebyshev_sizes(order)),
        denominator,
        stop_db,
        stop_db=stop_db,
        zeros=tuple(4 / (2 + turn) for turn in turns),
    )


def moved_inverse_chebyshev(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    """Return the prototype whose loss at 1 rad/s is ``loss_db``, by T_n(1/ω) = cosh(n acosh(1/ω))."""
    n, stop_db = prototype.order, prototype.stop_db
    assert stop_db is not None
    beyond = stop_db - loss_db
    if beyond != 0 and digits(beyond, 20) < 0:
        raise ResponseError(
            f"a loss of {loss_db} dB at the edge is more than the stop loss of {stop_db} dB",
            "give a loss at the edge that is at most the stop loss",
        )
    growths = [10 ** (Rational(1, 10) * loss) - 1 for loss in (stop_db, loss_db)]
    ratio = sympy.sqrt(growths[0] / growths[1])
    root = (ratio + sympy.sqrt(ratio**2 - 1)) ** Rational(1, n)
    factor = (root + 1 / root) / 2
    return rescaled(
        inverse_chebyshev(n, stop_db), factor if n <= SHORT_ORDER else digits(factor, KEPT_DIGITS)
    )


def _inverted(section: Coefficients) -> Coefficients:
    """Return the section whose roots are one over those of ``section``."""
    return tuple(c / section[0] for c in reversed(section))


def _zero_turns(order: int) -> list[sympy.Rational]:
    """Return the angles, in half turns, whose cosines are one over the zeros' frequencies."""
    return [Rational(2 * k - 1, 2 * order) for k in range(order // 2, 0, -1)]


def _chebyshev_sizes(order: int) -> list[int]:
    """Return the sizes of the coefficients of s^n T_n(1/s), ascending powers.

    >>> _chebyshev_sizes(3), _chebyshev_sizes(4)
    ([4, 0, 3], [8, 0, 8, 0, 1])
    """
    before, sizes = [1], [0, 1]
    for _ in range(order - 1):  # T_n is 2 x T_(n-1) - T_(n-2): the signs alternate, so the sizes add
        padded = [*before, 0, 0]
        before, sizes = sizes, [c + d for c, d in zip([0, *(2 * c for c in sizes)], padded, strict=True)]
    falling = sizes[::-1]
    return falling if falling[-1] else falling[:-1]
