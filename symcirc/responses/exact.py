"""What the prototypes are made of: exact cosines, products of polynomials, and digits one can rely on."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import sympy
from sympy.core.evalf import PrecisionExhausted

#: A polynomial as its coefficients, ascending powers.
Coefficients = tuple[sympy.Expr, ...]

#: Digits kept of a number that has no short closed form, and how many of them may be lost on the way.
KEPT_DIGITS, GUARD_DIGITS = 70, 10


class ResponseError(ValueError):
    """A response that cannot be had.

    ``cause`` says in one sentence why, ``mend`` in one what would mend it.
    """

    def __init__(self, cause: str, mend: str) -> None:
        super().__init__(cause)
        self.cause = cause
        self.mend = mend


def digits(expression: sympy.Expr, count: int = 50) -> sympy.Float:
    """Return a real number to ``count`` digits, all of them correct.

    The working precision is raised until the digits stand, whatever cancels on the way.

    Raises:
        ResponseError: the expression is no real number (a symbol is left in it), it holds a rounded number
            with fewer than ``count + 10`` digits, or its digits cannot be had (a zero in disguise).

    >>> digits(sympy.sqrt(2) - sympy.Rational(14142135623730951, 10**16), 20)
    -5.1198311275790301921e-17
    """
    if expression.free_symbols:
        names = ", ".join(sorted(map(str, expression.free_symbols)))
        raise ResponseError(f"this depends on {names}, so it has no value", "give them numbers first")
    kept = min((sympy.core.evalf.prec_to_dps(x._prec) for x in expression.atoms(sympy.Float)), default=None)
    if kept is not None and kept < count + GUARD_DIGITS:
        most = max(kept - GUARD_DIGITS, 1)
        raise ResponseError(
            f"{count} digits were asked of a number that is known to {most}", f"ask for at most {most} digits"
        )
    try:
        value = expression.evalf(count + GUARD_DIGITS, maxn=20 * (count + GUARD_DIGITS), strict=True)
    except PrecisionExhausted:
        raise ResponseError(
            f"the first {count} digits of this number cannot be told, as if it were zero in disguise",
            "write the number in a simpler form",
        ) from None
    if not value.is_Float and not value.is_Rational:
        raise ResponseError("this number is not real", "give a real number")
    return sympy.Float(value, count)


def two_cosine(turn: sympy.Rational) -> sympy.Expr:
    """Return 2 cos(π ``turn``) for 0 <= ``turn`` <= 1, in square roots where that is short.

    Short are the angles whose denominator is a power of two times 1, 3 or 5, by the formula of half the
    angle, 2 cos x = sqrt(2 + 2 cos 2x). The others stay as a cosine.

    >>> two_cosine(sympy.Rational(3, 8)), two_cosine(sympy.Rational(1, 12)), two_cosine(sympy.Rational(1, 7))
    (sqrt(2 - sqrt(2)), sqrt(2)/2 + sqrt(6)/2, 2*cos(pi/7))
    """
    if 2 * turn > 1:
        return -two_cosine(1 - turn)
    denominator = int(turn.q)
    odd_part = denominator // (denominator & -denominator)
    if denominator in (1, 2, 3, 4, 5, 6, 12) or odd_part not in (1, 3, 5):
        return sympy.expand(2 * sympy.cos(sympy.pi * turn))
    return sympy.sqrt(2 + two_cosine(2 * turn))


def product(factors: Iterable[Sequence[sympy.Expr]]) -> Coefficients:
    """Return the coefficients of a product of polynomials; the empty product is 1.

    Coefficients may be of any kind that adds and multiplies: sympy's, or mpmath's numbers.

    >>> product([(1, 1), (1, -1, 1)])
    (1, 0, 0, 1)
    """
    result: list[sympy.Expr] = [sympy.S.One]
    for factor in factors:
        grown = [sympy.S.Zero] * (len(result) + len(factor) - 1)
        for i, a in enumerate(result):
            for j, b in enumerate(factor):
                grown[i + j] = grown[i + j] + a * b
        result = grown
    return tuple(result)


def scaled(coefficients: Sequence[sympy.Expr], degree: int, factor: sympy.Expr) -> Coefficients:
    """Return the coefficient of each power k times ``factor`` to the power ``degree - k``.

    With the degree of the denominator this multiplies all poles and zeros by the factor and keeps a monic
    denominator monic and the gain at zero what it was.

    >>> scaled((1, 2, 1), 2, sympy.Symbol("w"))
    (w**2, 2*w, 1)
    """
    return tuple(c * factor ** (degree - k) for k, c in enumerate(coefficients))


def over(numerator: sympy.Expr, denominator: sympy.Expr) -> sympy.Expr:
    """Return the quotient, an exact 1 where both are the same rounded number."""
    return sympy.S.One if numerator == denominator else numerator / denominator
