"""All positive solutions of a match by another way: lexicographic Groebner bases of sympy over the rationals.

Everything is put in as fractions, so that the bases are exact; the roots of their polynomials are found by
sympy's ``nroots``. Nothing here is shared with ``symcirc.match``.
"""

from collections.abc import Mapping, Sequence
from fractions import Fraction

import sympy

from symcirc.transfer.function import TransferFunction


def fraction(number: object) -> sympy.Rational:
    """Return a fraction within 1e-45 of a number."""
    exact = sympy.sympify(number)
    if exact.is_Rational:
        return exact
    return sympy.Rational(Fraction(str(exact.evalf(50))))


def coefficients(
    function: TransferFunction, values: Mapping[str, object]
) -> tuple[list[sympy.Expr], list[sympy.Expr]]:
    """Return the numerator's and denominator's coefficients with values put in."""
    replaced = {symbol: values[str(symbol)] for symbol in function.ring.symbols if str(symbol) in values}
    rows = []
    for row in (function.numerator, function.denominator):
        rows.append([sympy.sympify(p.as_expr()).xreplace(replaced) for p in row])
    rows[0] += [sympy.S.Zero] * (len(rows[1]) - len(rows[0]))
    return rows[0], rows[1]


def equations(
    function: TransferFunction,
    values: Mapping[str, object],
    numerator: Sequence[object],
    denominator: Sequence[object],
    free_gain: bool = False,
) -> tuple[list[sympy.Expr], sympy.Expr]:
    """Return the polynomials that are zero where the stage is the target, and one that is not."""
    above, below = coefficients(function, {name: fraction(v) for name, v in values.items()})
    goal = [fraction(t) for t in denominator]
    wanted = [fraction(g) for g in numerator] + [sympy.S.Zero] * (len(goal) - len(numerator))
    lines = [d - t * below[-1] for d, t in zip(below, goal, strict=True)]
    if free_gain:
        lead = next(k for k, g in enumerate(wanted) if g)
        lines += [n * wanted[lead] - above[lead] * g for n, g in zip(above, wanted, strict=True)]
    else:
        lines += [n - g * below[-1] for n, g in zip(above, wanted, strict=True)]
    return [e for e in map(sympy.expand, lines) if e != 0], below[-1]


def positive_solutions(
    lines: Sequence[sympy.Expr], lead: sympy.Expr, unknowns: Sequence[str], signless: Sequence[str] = ()
) -> list[dict[str, float]]:
    """Return all real solutions of polynomial equations where ``lead`` is not zero; positive but for ``signless``."""
    symbols = sympy.symbols(list(unknowns))
    away = sympy.Symbol("away_from_zero")
    product = lead * sympy.Mul(*(s for s in symbols if str(s) not in signless))
    basis = sympy.groebner([*lines, sympy.expand(1 - away * product)], away, *symbols, order="lex")
    assert basis.is_zero_dimensional, "the reference has a continuum of solutions"
    found: list[dict[sympy.Symbol, sympy.Expr]] = [{}]
    for symbol in reversed(symbols):
        found = [
            {**values, symbol: root}
            for values in found
            for root in _next_roots(basis.exprs, symbol, values, away, symbols)
            if root > 0 or str(symbol) in signless
        ]
    return [{str(s): float(v) for s, v in values.items()} for values in found]


def _value(expression: sympy.Expr, values: Mapping[sympy.Symbol, sympy.Expr]) -> sympy.Expr:
    """Return the value of a polynomial; 0 where it is negligible beside its terms."""
    terms = [t.evalf(60, subs=values) for t in sympy.Add.make_args(sympy.expand(expression))]
    total, size = sum(terms), sum(map(abs, terms))
    return total if abs(total) > size * sympy.Float("1e-25") else sympy.S.Zero


def _next_roots(
    basis: Sequence[sympy.Expr],
    symbol: sympy.Symbol,
    values: Mapping[sympy.Symbol, sympy.Expr],
    away: sympy.Symbol,
    symbols: Sequence[sympy.Symbol],
) -> list[sympy.Expr]:
    """Return the real common roots of the basis' polynomials in the next unknown."""
    allowed = {symbol, *values}
    usable = [e for e in basis if symbol in e.free_symbols and e.free_symbols <= allowed]
    polynomials = []
    for expression in usable:
        placed = sympy.Poly(expression, symbol).as_dict()
        numbers = {power: _value(c, values) for (power,), c in placed.items()}
        kept = {power: c for power, c in numbers.items() if c}
        if kept and max(kept) > 0:
            polynomials.append(kept)
    lowest = min(polynomials, key=max)
    if not values:  # exact: multiple roots count once
        exact = min((sympy.Poly(e, symbol) for e in usable), key=lambda p: p.degree())
        lowest = {power: c for (power,), c in exact.sqf_part().as_dict().items()}
    roots = sympy.Poly.from_dict({(p,): c for p, c in lowest.items()}, symbol).nroots(n=40, maxsteps=200)
    return [sympy.re(r) for r in dict.fromkeys(roots) if abs(sympy.im(r)) < abs(r) * sympy.Float("1e-18")]
