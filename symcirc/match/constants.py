"""Exact numbers and target expressions taken apart into fractions and generators for what is no fraction."""

from __future__ import annotations

import sympy

from symcirc.match.decimals import decimal, exact
from symcirc.match.problem import Refusal, Refused

#: The half power: what a square root is as a power.
_HALF = sympy.Rational(1, 2)


class Constants:
    """Generators for irrational numbers, made as they are met: pi, square roots of integers, any other number whole.

    A root or a function of free symbols (``sqrt(F1*F2)``) becomes a generator too, taken as positive.
    """

    def __init__(self) -> None:
        self._generators: dict[sympy.Expr, sympy.Symbol] = {}

    def meanings(self) -> dict[sympy.Symbol, sympy.Expr]:
        """Return what each generator made so far stands for."""
        return {symbol: expression for expression, symbol in self._generators.items()}

    def _generator(self, expression: sympy.Expr) -> sympy.Symbol:
        name = f"#{len(self._generators)}"  # no name of a sheet begins so
        return self._generators.setdefault(expression, sympy.Symbol(name, positive=True))

    def rational(self, expression: sympy.Expr) -> sympy.Expr:
        """Return the expression with generators in place of all that is no fraction, power or symbol.

        >>> constants = Constants()
        >>> constants.rational(sympy.sqrt(2) * sympy.pi * sympy.Symbol("F", positive=True))
        #0*#1*F
        """
        if expression.is_Rational or expression.is_Symbol:
            return expression
        if expression.is_number:
            return self._number(expression)
        if expression.is_Add or expression.is_Mul:
            return self._sum_or_product(expression)
        if expression.is_Pow and expression.exp.is_Integer:
            return self.rational(expression.base) ** expression.exp
        if not expression.is_positive:
            raise Refused(
                Refusal(
                    "target", f"the target holds {expression}, which may be negative", "write it another way"
                )
            )
        return self._generator(expression)

    def _sum_or_product(self, expression: sympy.Expr) -> sympy.Expr:
        numbers = [a for a in expression.args if a.is_number]
        others = [self.rational(a) for a in expression.args if not a.is_number]
        return expression.func(self.rational(expression.func(*numbers)), *others)

    def _number(self, expression: sympy.Expr) -> sympy.Expr:
        if not expression.evalf(20).is_real:
            raise Refused(
                Refusal(
                    "target", f"the target holds {expression}, which is no real number", "use real numbers"
                )
            )
        short = exact(decimal(expression))
        if not short.is_Float:
            return sympy.Mul(*(self._factor(f) for f in sympy.Mul.make_args(short)))
        size = -expression if decimal(expression) < 0 else expression
        return self._generator(size) if size is expression else -self._generator(size)

    def _factor(self, factor: sympy.Expr) -> sympy.Expr:
        base, exponent = factor.as_base_exp()
        if base == sympy.pi:
            return self._generator(sympy.pi) ** exponent
        if base.is_Integer and exponent == _HALF:
            return self._generator(factor)
        assert factor.is_Rational, "a short number is a fraction times roots of integers and powers of pi"
        return factor
