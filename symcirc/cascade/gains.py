"""The gain of a cascade: what each stage has by its nature, and what is left to be shared.

A section's numerator is scaled so that its nominal gain is 1; the target's numerator is then their product times a
factor, which the stages' gains must multiply to.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import sympy

from symcirc.cascade.assignment import Section
from symcirc.cascade.factors import Factored
from symcirc.match.decimals import decimal, exact
from symcirc.match.problem import Branch
from symcirc.responses.exact import Coefficients, over, product
from symcirc.transfer.function import TransferFunction


def denominator(section: Section) -> Coefficients:
    """Return a section's denominator, ascending powers of s, monic."""
    return product(pole.coefficients for pole in section.poles)


def numerator(section: Section, high: bool) -> Coefficients:
    """Return a section's numerator with the nominal gain 1.

    That is the gain at 0, or where ``high`` is set (the whole target has zeros there) the gain at infinity, if the
    section has one; else the other one of these; else that of a band-pass pair at its peak. Where there are zeros
    at 0 and at infinity beyond a pair, it is the gain at which the two slopes meet at the poles' mean frequency.

    >>> from symcirc.cascade.factors import Factor
    >>> numerator(Section((Factor((9, 2, 1), 3.0, 1.5),), (), 1), False)
    (0, 2)
    """
    below = denominator(section)
    zeros = product(zero.coefficients for zero in section.zeros)
    row = (*[sympy.S.Zero] * section.at_zero, *zeros)
    order, degree = len(below) - 1, len(row) - 1
    if degree == order and (high or row[0] == 0):
        factor = sympy.S.One
    elif row[0] != 0:
        factor = over(below[0], row[0])
    elif order == 2:
        factor = below[1]
    else:
        factor = below[0] ** sympy.Rational(order - degree, order)
    return tuple(factor * c for c in row)


def remaining_factor(target: Factored, sections: Sequence[Section], high: bool) -> sympy.Expr:
    """Return what the stages' gains must multiply to so that the numerators come to the target's."""
    factor = target.leading / sympy.Mul(*(numerator(section, high)[-1] for section in sections))
    number, symbols = factor.as_independent(*factor.free_symbols)
    return exact(decimal(number)) * symbols


def own_gain(
    function: TransferFunction,
    section: Section,
    high: bool,
    numbers: Mapping[str, sympy.Expr],
    branch: Branch,
) -> sympy.Expr | None:
    """Return the gain of a stage whose denominator is the section's, sign included.

    It is exact where the fixed numbers alone decide it, a formula where it holds symbols that the designer chooses,
    else as exact as the branch's values; None where it holds a part that has none.
    """
    below, above = denominator(section), numerator(section, high)
    quotients = [
        sympy.cancel(function.numerator[k].as_expr() / function.denominator[k].as_expr())
        * over(below[k], above[k])
        for k, c in enumerate(above)
        if c != 0 and below[k] != 0
    ]
    known = {"pi": sympy.pi, **numbers}
    found = {name: sympy.Float(value, 17) for name, value in branch.values.items() if value is not None}
    for values in (known, known | found):
        for quotient in quotients:
            gain = quotient.xreplace({x: values[str(x)] for x in quotient.free_symbols if str(x) in values})
            if not {str(x) for x in gain.free_symbols} & set(branch.values):
                positive = {x: sympy.Symbol(str(x), positive=True) for x in gain.free_symbols}
                return sympy.cancel(gain.xreplace(positive)) if positive else gain
    return None
