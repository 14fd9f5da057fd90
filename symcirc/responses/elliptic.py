r"""The elliptic low-pass: equal ripple in the pass band and in the stop band, the steepest of all for its order.

:math:`|H|^2 = 1/(1 + \varepsilon^2 R_n(\omega)^2)` with the elliptic rational function :math:`R_n`. Its modulus
:math:`k` (one over the stop edge) follows from :math:`k_1 = \varepsilon/\varepsilon_s` by the degree equation,
which is :math:`q = q_1^{1/n}` for the nomes; the poles and zeros follow by Landen's transformation.

Sources, from memory: W. Cauer, "Synthesis of Linear Communication Networks" (1958); L. M. Milne-Thomson on elliptic
functions in Abramowitz and Stegun, "Handbook of Mathematical Functions" (1964), chapters 16 and 17.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any

import mpmath
import sympy
from sympy import Integer, Rational

from symcirc.responses.exact import ResponseError, digits, product
from symcirc.responses.numeric import (
    WORKING_DIGITS,
    Factor,
    crossing,
    kept,
    kept_polynomial,
    real_factors,
    rounded,
    scaled_factors,
    squared_growth,
    working,
)
from symcirc.responses.prototype import (
    LARGEST_STOP_DB,
    Prototype,
    chebyshev,
    check_loss,
    check_order,
    rescaled,
)
from symcirc.responses.rough import Rough

#: A context of mpmath and a number of it: ``mpmath.mp`` has many digits, ``mpmath.fp`` is in doubles.
Context = Any
Real = Any

#: Closer to 1 than this the nome of the transition is refused: pass and stop band are then one.
_NARROWEST = 1e-6


@dataclass(frozen=True)
class _Places:
    """Poles on and above the real axis, the positive frequencies of the zeros, and the modulus."""

    poles: list[Any]
    zeros: list[Real]
    modulus: Real


def elliptic(order: int, ripple_db: sympy.Expr, stop_db: sympy.Expr) -> Prototype:
    r"""Return the elliptic prototype, with the end of its pass band at 1 rad/s.

    Args:
        order: 1 to 20.
        ripple_db: of the pass band; an exact number, above 0 and at most 100.
        stop_db: the loss that the stop band never falls below, likewise, and above the ripple.

    The nominal gain is the maximum of the pass band; an even order has the ripple at 0 and ``stop_db`` at
    infinity. Where the stop band begins follows from the three. Orders 1 (which has no stop band: it is
    Chebyshev's) and 2 are in square roots; beyond that rounded to 70 digits.

    Raises:
        ResponseError: the order, the ripple or the stop loss is out of range.

    >>> [round(float(c), 4) for c in elliptic(3, Integer(1), Integer(40)).denominator]
    [0.5265, 1.2434, 0.9782, 1.0]
    """
    check_order(order)
    check_loss(ripple_db, "the ripple")
    check_loss(stop_db, "the stop loss", LARGEST_STOP_DB)
    if digits(stop_db, 20) - digits(ripple_db, 20) <= 0:
        raise ResponseError(
            f"the stop loss of {stop_db} dB is not above the ripple of {ripple_db} dB",
            "give a stop loss that is larger than the ripple",
        )
    if order == 1:
        return replace(chebyshev(1, ripple_db), family="elliptic", stop_db=stop_db)
    if order == 2:
        return _second_order(ripple_db, stop_db)
    return _higher_order(order, ripple_db, stop_db, ripple_db)


def _higher_order(
    order: int, ripple_db: sympy.Expr, stop_db: sympy.Expr, edge_loss_db: sympy.Expr
) -> Prototype:
    """Return an order from 3 on, with its edge where the loss is ``edge_loss_db``."""
    with mpmath.workdps(_working_digits(ripple_db)):
        growths = [working(10 ** (Rational(1, 10) * loss) - 1) for loss in (ripple_db, stop_db)]
        places = _places(mpmath.mp, order, mpmath.sqrt(growths[0]), mpmath.sqrt(growths[1]))
        factors = real_factors(places.poles)
        squares = sorted((zero**2 for zero in places.zeros), reverse=True)
        if edge_loss_db != ripple_db:
            goal = working(10 ** (Rational(1, 10) * edge_loss_db))
            at_zero = mpmath.mpf(1) if order % 2 else 1 + growths[0]
            scale = 1 / _transition(factors, squares, at_zero, goal)
            factors = scaled_factors(factors, scale)
            squares = [square * scale**2 for square in squares]
        denominator = product(factors)
        over = product([(square, mpmath.mpf(0), mpmath.mpf(1)) for square in squares])
        size = denominator[0] / over[0] if order % 2 else 1 / mpmath.sqrt(1 + growths[1])
        return Prototype(
            "elliptic",
            order,
            kept(factors),
            tuple(rounded(size * c) if c else Integer(0) for c in over),
            kept_polynomial(denominator),
            edge_loss_db,
            ripple_db,
            stop_db,
            zeros=tuple(rounded(square) for square in squares),
        )


def _transition(factors: list[Factor], squares: list[Real], at_zero: Real, goal: Real) -> Real:
    """Return the frequency between the pass band's end, 1 rad/s, and the first zero where 1/|H|² is ``goal``."""
    lowest = min(squares)

    def power(square: Real) -> Real:
        if square <= 1:  # inside the ripple: taken as flat, so that what follows never falls
            return mpmath.mpf(1)
        if square >= lowest:
            return mpmath.inf
        passed = mpmath.fprod((1 - square / zero) ** 2 for zero in squares)
        return at_zero * squared_growth(factors, square) / passed

    return mpmath.sqrt(crossing(power, goal, lowest))


def rough_elliptic(order: int, ripple_db: float, stop_db: float) -> Rough:
    """Return the prototype in doubles, the end of its pass band at 1 rad/s."""
    context = mpmath.fp
    epsilon, floor = (context.sqrt(context.expm1(context.log(10) * x / 10)) for x in (ripple_db, stop_db))
    places = _places(context, order, epsilon, floor)
    upper = [complex(p) for p in places.poles]
    lower = [p.conjugate() for p in upper if p.imag]
    return Rough((*upper, *lower), tuple(places.zeros), 0.0 if order % 2 else ripple_db)


def moved_elliptic(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    """Return the prototype whose loss at 1 rad/s is ``loss_db``, between the ripple and the stop loss."""
    n, ripple_db, stop_db = prototype.order, prototype.ripple_db, prototype.stop_db
    assert ripple_db is not None
    assert stop_db is not None
    _check_between(loss_db, ripple_db, stop_db, n)
    if n > 2:
        return _higher_order(n, ripple_db, stop_db, loss_db)
    original = elliptic(n, ripple_db, stop_db)
    growths = [10 ** (Rational(1, 10) * loss) - 1 for loss in (loss_db, ripple_db)]
    if n == 1:
        return rescaled(original, sympy.sqrt(growths[1] / growths[0]))
    ratio, middle, zero = _second_order_places(ripple_db, stop_db)
    r = ratio * sympy.sqrt(growths[0] / growths[1])
    return rescaled(original, sympy.sqrt((1 + r) / (middle + r * zero)))


def _check_between(loss_db: sympy.Expr, ripple_db: sympy.Expr, stop_db: sympy.Expr, order: int) -> None:
    loss = digits(loss_db, 20)
    if loss_db != ripple_db and loss < digits(ripple_db, 20):
        raise ResponseError(
            f"a loss of {loss_db} dB at the edge is less than the ripple of {ripple_db} dB",
            "give a loss at the edge that is at least the ripple",
        )
    if order > 1 and loss_db != stop_db and loss > digits(stop_db, 20):
        raise ResponseError(
            f"a loss of {loss_db} dB at the edge is more than the stop loss of {stop_db} dB",
            "give a loss at the edge that is at most the stop loss",
        )


def _second_order_places(
    ripple_db: sympy.Expr, stop_db: sympy.Expr
) -> tuple[sympy.Expr, sympy.Expr, sympy.Expr]:
    """Return k1, and the squares of the frequencies of no loss and of no gain, of order 2.

    R(ω) = (ω² - a)/(k1 (z - ω²)) with a = (1 + k1)/2 and z = a/k1 is -1 at 0, 1 at 1 and 1/k1 at infinity.
    """
    growths = [10 ** (Rational(1, 10) * loss) - 1 for loss in (ripple_db, stop_db)]
    ratio = sympy.sqrt(growths[0] / growths[1])
    return ratio, (1 + ratio) / 2, (1 + 1 / ratio) / 2


def _second_order(ripple_db: sympy.Expr, stop_db: sympy.Expr) -> Prototype:
    """Return order 2 in square roots, from |D|² = (z - ω²)² + εs² (ω² - a)², divided by 1 + εs²."""
    _, middle, zero = _second_order_places(ripple_db, stop_db)
    gains = [10 ** (Rational(1, 20) * loss) for loss in (ripple_db, stop_db)]
    power = gains[1] ** 2
    constant = zero * gains[0] / gains[1]
    slope = sympy.sqrt(2 * constant - 2 * (zero + (power - 1) * middle) / power)
    denominator = (constant, slope, Integer(1))
    return Prototype(
        "elliptic",
        2,
        (denominator,),
        (zero / gains[1], Integer(0), 1 / gains[1]),
        denominator,
        ripple_db,
        ripple_db,
        stop_db,
        zeros=(zero,),
    )


def _working_digits(ripple_db: sympy.Expr) -> int:
    """Return more digits than usual for a very small ripple, which makes k1 very small."""
    return WORKING_DIGITS + max(0, -int(sympy.log(digits(ripple_db, 20), 10)))


def _places(context: Context, order: int, epsilon: Real, floor: Real) -> _Places:
    """Return poles and zeros; ``epsilon`` and ``floor`` are sqrt(10^(loss/10) - 1) of the ripple and the stop."""
    ratio = epsilon / floor
    modulus, complement = _modulus(context, order, ratio)
    ladder = _landen(context, modulus, complement)
    depth = _depth(context, order, epsilon, ratio)
    turns = [context.mpf(2 * i - 1) / order for i in range(1, order // 2 + 1)]
    zeros = [1 / (modulus * _climbed(context.cos(t * context.pi / 2), ladder)) for t in turns]
    j = context.mpc(0, 1)
    poles = [j * _climbed(context.cos((t - j * depth) * context.pi / 2), ladder) for t in turns]
    if order % 2:
        poles.append((j * _climbed(context.sin(j * depth * context.pi / 2), ladder)).real)
    return _Places(poles, zeros, modulus)


def _modulus(context: Context, order: int, ratio: Real) -> tuple[Real, Real]:
    """Return k and its complement by the degree equation q = q1^(1/n), ``ratio`` being k1."""
    complement = context.sqrt((1 - ratio) * (1 + ratio))
    # ln q1 = -π K'/K, and K is π/2 over the arithmetic-geometric mean of 1 and the complement.
    exponent = -context.pi * _mean(context, complement) / _mean(context, ratio) / order
    if -exponent < _NARROWEST:
        raise ResponseError(
            "the stop loss is so close to the ripple that the edge between them has no width",
            "give a stop loss that is larger than the ripple",
        )
    if -exponent > context.pi:
        small = _of_nome(context, context.exp(exponent))
        return small, context.sqrt((1 - small) * (1 + small))
    small = _of_nome(context, context.exp(context.pi**2 / exponent))
    return context.sqrt((1 - small) * (1 + small)), small


def _mean(context: Context, number: Real) -> Real:
    """Return the arithmetic-geometric mean of 1 and a number."""
    high, low = context.mpf(1), number
    for _ in range(_ROUNDS):
        high, low = (high + low) / 2, context.sqrt(high * low)
    return high


#: Rounds of the arithmetic-geometric mean and of Landen's transformation: each doubles the digits, once it has some.
_ROUNDS = 16


def _of_nome(context: Context, nome: Real) -> Real:
    """Return the modulus of a nome of at most exp(-π): the square of θ2(q)/θ3(q)."""
    terms = range(1, _ROUNDS)
    over = 1 + sum(nome ** (m * (m + 1)) for m in terms)
    under = 1 + 2 * sum(nome ** (m * m) for m in terms)
    return 4 * context.sqrt(nome) * (over / under) ** 2


def _landen(context: Context, modulus: Real, complement: Real) -> list[Real]:
    """Return the moduli of Landen's descending transformation, each about a quarter of the square of the last."""
    ladder = []
    for _ in range(_ROUNDS):
        modulus, complement = (
            (modulus / (1 + complement)) ** 2,
            2 * context.sqrt(complement) / (1 + complement),
        )
        ladder.append(modulus)
    return ladder


def _climbed(value: Any, ladder: list[Real]) -> Any:
    """Return cd or sn of an argument in quarter periods, from its cosine or sine, up the ladder of moduli."""
    for modulus in reversed(ladder):
        value = (1 + modulus) * value / (1 + modulus * value**2)
    return value


def _depth(context: Context, order: int, epsilon: Real, ratio: Real) -> Real:
    """Return the v with sn(j v n K1, k1) = j/ε, in quarter periods: the poles' way from the zeros of loss."""
    above, height = ratio, 1 / epsilon
    complement = context.sqrt((1 - ratio) * (1 + ratio))
    for modulus in _landen(context, ratio, complement):
        height = 2 * height / ((1 + modulus) * (1 + context.sqrt(1 + (above * height) ** 2)))
        above = modulus
    return 2 * context.ln(height + context.sqrt(1 + height**2)) / (context.pi * order)
