"""The design equations' expressions as forms, so that every writer of a note shares one tree."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import lcm

import sympy

from symcirc.match.arithmetic import Factor, Term, by_powers_of, term_of, terms_of
from symcirc.match.problem import Condition, Equation, Root
from symcirc.note.model import Relation
from symcirc.transfer import form as f
from symcirc.transfer.form import (
    ONE,
    ZERO,
    Decimal,
    Form,
    Integer,
    Negative,
    Sum,
    Symbol,
    power,
    product,
    quotient,
)


@dataclass(frozen=True)
class Statement:
    """``left relation right``; ``root_of`` as in :class:`symcirc.note.model.Equation`."""

    left: Form
    relation: Relation
    right: Form
    root_of: str | None = None


def equation_statement(equation: Equation) -> Statement:
    """Return a design equation: a part and its formula, or the polynomial whose root the part is.

    Where the formula is a root of odd degree, as a cube root, the part's power is given.

    >>> R1, C1 = sympy.symbols("R1 C1", positive=True)
    >>> equation_statement(Equation("R1", sympy.cbrt(C1), 1)).left
    Power(base=Symbol(name='R1'), exponent=3)
    """
    formula = equation.formula
    if isinstance(formula, Root):
        ordered = by_powers_of(formula.polynomial, sympy.Symbol(formula.variable))
        left = _total([term_of(term) for term in ordered])
        return Statement(left, "=", ZERO, root_of=formula.variable)
    degree = _odd_degree(formula)
    return Statement(power(Symbol(equation.part), degree), "=", expression_form(formula**degree))


def condition_statement(condition: Condition) -> Statement:
    """Return a condition as a statement.

    >>> C1, C2 = sympy.symbols("C1 C2", positive=True)
    >>> condition_statement(Condition(C1, ">=", 4 * C2)).right
    Product(factors=(Integer(value=4), Symbol(name='C2')))
    """
    return Statement(expression_form(condition.left), condition.relation, expression_form(condition.right))


def expression_form(expression: sympy.Expr) -> Form:
    """Return an expression of sums, products, powers and square roots as a form.

    Numbers without a short exact form get 17 significant digits. Raises ValueError for a root of odd degree.

    >>> from symcirc.transfer.text import text
    >>> C1, C2 = sympy.symbols("C1 C2")
    >>> text(expression_form((C1 + sympy.sqrt(C1 * (C1 - 4 * C2))) / (4800 * sympy.pi * C1 * C2)))
    '(C1 + sqrt(C1*(C1 - 4*C2)))/(4800*pi*C1*C2)'
    """
    return _total(terms_of(expression))


def has_decimals(form: Form) -> bool:
    """Tell whether a form holds a number in decimals.

    >>> has_decimals(Integer(2)), has_decimals(Negative(Decimal("0.5")))
    (False, True)
    """
    return isinstance(form, Decimal) or any(map(has_decimals, f.children(form)))


def _odd_degree(formula: sympy.Expr) -> int:
    """Return by which power a product of roots of odd degree loses them; 1 for what has none outside of brackets."""
    denominators = [factor.as_base_exp()[1] for factor in sympy.Mul.make_args(formula)]
    odd = [_odd_part(int(exponent.q)) for exponent in denominators if exponent.is_Rational]
    return lcm(*odd)


def _odd_part(number: int) -> int:
    while number % 2 == 0:
        number //= 2
    return number


def _total(terms: Sequence[Term]) -> Form:
    forms = [_term(term) for term in terms]
    return forms[0] if len(forms) == 1 else Sum(tuple(forms))


def _term(term: Term) -> Form:
    form = quotient([_factor(x) for x in term.above], [_factor(x) for x in term.below])
    return Negative(form) if term.sign < 0 and form != ZERO else form


def _factor(factor: Factor) -> Form:
    base = product([_base(base) for base in factor.bases])
    whole, degree = int(factor.power.p), int(factor.power.q)
    raised = power(base, whole) if base != ONE else base
    while degree > 1:
        if degree % 2:
            raise ValueError(f"a root of degree {degree} has no form")
        raised, degree = f.Root(raised), degree // 2
    return raised


def _base(base: sympy.Expr | str) -> Form:
    if isinstance(base, str):
        return Decimal(base)
    if base.is_Integer:
        return Integer(int(base))
    if base.is_Symbol or base == sympy.pi:
        return Symbol(str(base))
    return expression_form(base)
