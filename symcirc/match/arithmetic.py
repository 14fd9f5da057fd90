"""An expression taken apart the way it is written down: signs, numbers, what is above and below the line.

Text and LaTeX are two ways to write the same parts. A number that has no short exact form is written with 17
significant digits, which is what a double-precision number holds.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

import sympy

from symcirc.match.decimals import decimal, exact, reals
from symcirc.match.names import is_part, natural

#: Numerators and denominators beyond this are not written.
_LONGEST_FRACTION = 10**15


@dataclass(frozen=True)
class Factor:
    """``(base * base * ...) ** power``; a base is a symbol, pi, a whole number, a decimal text, a sum or a root."""

    bases: tuple[sympy.Expr | str, ...]
    power: sympy.Expr


@dataclass(frozen=True)
class Term:
    """A product: ``sign`` times the factors above over the factors below the line."""

    sign: int
    above: tuple[Factor, ...]
    below: tuple[Factor, ...]


def term_of(expression: sympy.Expr) -> Term:
    """Return a product as it is written: numbers, pi, parameters, parts, brackets.

    >>> C, R = sympy.symbols("C1 R1")
    >>> term = term_of(-C * (R + 1) / (5760000 * sympy.pi**2))
    >>> term.below, term.sign
    ((Factor(bases=(2400, pi), power=2),), -1)
    >>> [factor.bases for factor in term.above]
    [(C1,), (R1 + 1,)]
    """
    factors = sympy.Mul.make_args(expression)
    number = sympy.Mul(*(f for f in factors if f.is_number))
    if not number.is_Rational:
        number = exact(decimal(number))
    sign = -1 if number.is_negative else 1
    above, below = _number(sign * number)
    for factor in sorted((f for f in factors if not f.is_number), key=_place):
        base, power = factor.as_base_exp()
        if power.is_number and power.is_negative:
            below.append(Factor((base,), -power))
        else:
            above.append(Factor((base,), power))
    return Term(sign, _gathered(above), _gathered(below))


def _place(factor: sympy.Expr) -> tuple[object, ...]:
    """Return a key that sorts parameters, then parts, then roots of symbols, then brackets."""
    base, power = factor.as_base_exp()
    if base.is_Symbol:
        return 0 if power.is_Integer else 1, is_part(str(base)), natural(str(base))
    return 2, False, natural(str(base))


def _number(number: sympy.Expr) -> tuple[list[Factor], list[Factor]]:
    """Return a positive number's factors above and below the line."""
    above: list[Factor] = []
    below: list[Factor] = []
    for factor in sympy.Mul.make_args(number):
        base, power = factor.as_base_exp()
        if factor.is_Rational:
            upper, lower = _fraction(Fraction(int(factor.p), int(factor.q)))
            above += [] if upper == 1 else [Factor((upper,), sympy.S.One)]
            below += [] if lower == 1 else [Factor((sympy.Integer(lower),), sympy.S.One)]
        elif factor.is_Float:
            above.append(Factor((decimal_text(factor),), sympy.S.One))
        else:
            (above if power.is_positive else below).append(Factor((base,), abs(power)))
    return above, below


def _fraction(value: Fraction) -> tuple[sympy.Expr | str, int]:
    """Return what is written above and below for a fraction: the shorter way where the decimals are exact."""
    upper, lower = value.numerator, value.denominator
    if lower > 1:
        text = decimal_text(sympy.Rational(upper, lower))
        is_exact = Fraction(text) == value
        if (is_exact and len(text) < len(f"{upper}/{lower}")) or (
            not is_exact and max(upper, lower) > _LONGEST_FRACTION
        ):
            return text, 1
    return sympy.Integer(upper), lower


def decimal_text(number: sympy.Expr) -> str:
    """Return a number with 17 significant digits, or fewer where these say the same.

    >>> decimal_text(sympy.Rational(1, 3)), decimal_text(sympy.Rational(1, 2048))
    ('0.33333333333333333', '0.00048828125')
    """
    digits: str = reals.nstr(decimal(number), 17, min_fixed=-5, max_fixed=17)
    return digits.removesuffix(".0").replace(".0e", "e")


def _gathered(factors: Sequence[Factor]) -> tuple[Factor, ...]:
    """Return the factors with a square of pi taken together with what else is squared: ``(2*pi*F)**2``."""
    of_pi = next((f for f in factors if f.bases == (sympy.pi,) and f.power.is_Integer and f.power > 1), None)
    if of_pi is None:
        return tuple(factors)
    power = of_pi.power
    number = next((f for f in factors if _is_integer(f)), None)
    root = sympy.Integer(1) if number is None else sympy.root(number.bases[0], power)
    if not root.is_Integer:
        return tuple(factors)
    others = [f for f in factors if f.power == power and f is not of_pi and _is_parameter(f)]
    bases = (*(() if root == 1 else (root,)), sympy.pi, *(f.bases[0] for f in others))
    rest = [f for f in factors if f is not of_pi and f is not number and f not in others]
    return (Factor(bases, power), *rest)


def _is_parameter(factor: Factor) -> bool:
    base = factor.bases[0]
    return not isinstance(base, str) and bool(base.is_Symbol) and not is_part(str(base))


def _is_integer(factor: Factor) -> bool:
    base = factor.bases[0]
    return not isinstance(base, str) and bool(base.is_Integer) and factor.power == 1


def terms_of(expression: sympy.Expr) -> list[Term]:
    """Return a sum's terms in the order in which they are written: a positive one first, roots last."""
    ordered = expression.as_ordered_terms() if expression.is_Add else [expression]
    terms = [(t, term_of(t)) for t in ordered]
    plain = [term for expr, term in terms if not _has_root(expr)]
    roots = [term for expr, term in terms if _has_root(expr)]
    result = plain + roots
    first = next((k for k, term in enumerate(result) if term.sign > 0), 0)
    return [result[first], *result[:first], *result[first + 1 :]]


def _has_root(expression: sympy.Expr) -> bool:
    return any(not p.exp.is_Integer and p.base.free_symbols for p in expression.atoms(sympy.Pow))


def by_powers_of(expression: sympy.Expr, symbol: sympy.Symbol) -> list[sympy.Expr]:
    """Return a polynomial's terms in a symbol, falling powers."""
    terms: Iterable[sympy.Expr] = sympy.Add.make_args(expression)
    return sorted(terms, key=lambda term: -term.as_powers_dict()[symbol])
