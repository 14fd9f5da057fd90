"""Lines as algebra in voltages and currents: quotients of polynomials in them, the parts being field elements.

A line such as ``Vo/Vi = -N/D`` becomes linear when it is cleared of its denominators; to see that, a denominator is
kept as a product of factors, and a factor that stands above and below is removed at once.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
    names,
)
from symcirc.working.elimination import Row
from symcirc.working.field import PRIME, evaluate, inverse, residue

#: A product of unknowns, sorted, with repetitions; () is the constant.
Monomial = tuple[str, ...]
#: Factors of products of unknowns, none of them zero.
Polynomial = dict[Monomial, int]
#: A polynomial as something to compare: its first factor is 1.
Factor = tuple[tuple[Monomial, int], ...]
#: Beyond this degree, or this many products, a line is taken for not linear.
HIGHEST_DEGREE, MOST_PRODUCTS = 6, 400
#: Stands for the constant in a row.
CONSTANT = "1"


class NotLinear(Exception):
    """An expression that is not linear in voltages and currents, or not seen to be."""


@dataclass(frozen=True)
class Form:
    """``above`` over the product of the factors ``below``."""

    above: Mapping[Monomial, int]
    below: tuple[Factor, ...]


def constant(value: int) -> Form:
    """Return a field element as a form."""
    return Form({(): value % PRIME} if value % PRIME else {}, ())


def unknown(name: str) -> Form:
    """Return a voltage or a current as a form."""
    return Form({(name,): 1}, ())


def add(left: Form, right: Form) -> Form:
    """Return a sum over the least common denominator."""
    only_left, only_right = _without(left.below, right.below), _without(right.below, left.below)
    above = dict(_times(left.above, _expanded(only_right)))
    for monomial, factor in _times(right.above, _expanded(only_left)).items():
        total = (above.get(monomial, 0) + factor) % PRIME
        if total:
            above[monomial] = total
        else:
            above.pop(monomial, None)
    return _reduced(above, (*left.below, *only_right))


def multiply(left: Form, right: Form) -> Form:
    """Return a product, factors that stand above and below removed."""
    one, two = _reduced(left.above, right.below), _reduced(right.above, left.below)
    return _reduced(_times(one.above, two.above), (*one.below, *two.below))


def invert(form: Form) -> Form:
    """Return one over a form; raises ZeroDivisionError for 0."""
    if not form.above:
        raise ZeroDivisionError
    factor, scale = _normal(form.above)
    above = _times(_expanded(form.below), {(): inverse(scale)})
    return Form(above, ()) if factor == (((), 1),) else Form(above, (factor,))


def raised(form: Form, exponent: int) -> Form:
    """Return a whole power; raises NotLinear for a high power of unknowns."""
    base = form if exponent >= 0 else invert(form)
    if set(base.above) <= {()} and not base.below:
        return constant(pow(base.above.get((), 0), abs(exponent), PRIME))
    if abs(exponent) > HIGHEST_DEGREE:
        raise NotLinear
    result = constant(1)
    for _ in range(abs(exponent)):
        result = multiply(result, base)
    return result


def row_of(form: Form) -> Row[str]:
    """Return the row that says that a form is zero: nothing where it is always so.

    What is common to all products is taken out. Raises NotLinear where products of two unknowns are left.
    """
    if not form.above:
        return {}
    if len(form.above) == 1:
        ((monomial, factor),) = form.above.items()
        if len(set(monomial)) > 1:
            raise NotLinear
        return {monomial[0] if monomial else CONSTANT: factor}
    common = _common(list(form.above))
    row: Row[str] = {}
    for monomial, factor in form.above.items():
        rest = list(monomial)
        for name in common:
            rest.remove(name)
        if len(rest) > 1:
            raise NotLinear
        row[rest[0] if rest else CONSTANT] = factor
    return row


def _common(monomials: list[Monomial]) -> list[str]:
    """Return the unknowns that stand in every one of the products."""
    common = list(monomials[0])
    for monomial in monomials[1:]:
        left, shared = list(monomial), []
        for name in common:
            if name in left:
                left.remove(name)
                shared.append(name)
        common = shared
    return common


def form_of(expression: Expression, form: Callable[[str], Form], value: Callable[[str], int]) -> Form:
    """Return an expression as a form.

    ``form`` gives the form of a name, ``value`` the residue of one that holds no unknowns. Raises NotLinear,
    ZeroDivisionError, and NotInField for a root that has no one value.
    """

    def combine(node: Expression, operands: list[Form]) -> Form:
        match node:
            case Number():
                return constant(residue(node.value))
            case Name():
                return form(node.text)
            case Sum():
                return _folded(add, operands)
            case Product():
                return _folded(multiply, operands)
            case Negative():
                return multiply(constant(-1), operands[0])
            case Reciprocal():
                return invert(operands[0])
            case Power():
                return raised(operands[0], node.exponent)
            case Root():
                if any(name.text not in ("pi", "s") for name in names(node)):
                    raise NotLinear
                return constant(evaluate(node, value))

    return fold(expression, combine)


def _folded(operation: Callable[[Form, Form], Form], operands: list[Form]) -> Form:
    result = operands[0]
    for operand in operands[1:]:
        result = operation(result, operand)
    return result


def _times(left: Mapping[Monomial, int], right: Mapping[Monomial, int]) -> Polynomial:
    if len(left) * len(right) > MOST_PRODUCTS * 4:
        raise NotLinear
    result: Polynomial = {}
    for one, factor in left.items():
        for two, other in right.items():
            monomial = tuple(sorted(one + two)) if one and two else one or two
            total = (result.get(monomial, 0) + factor * other) % PRIME
            if total:
                result[monomial] = total
            else:
                result.pop(monomial, None)
    if len(result) > MOST_PRODUCTS or any(len(m) > HIGHEST_DEGREE for m in result):
        raise NotLinear
    return result


def _expanded(factors: tuple[Factor, ...]) -> Polynomial:
    result: Polynomial = {(): 1}
    for factor in factors:
        result = _times(result, dict(factor))
    return result


def _without(factors: tuple[Factor, ...], others: tuple[Factor, ...]) -> tuple[Factor, ...]:
    """Return the factors that are left when the others are taken away, each once."""
    left = list(factors)
    for factor in others:
        if factor in left:
            left.remove(factor)
    return tuple(left)


def _normal(polynomial: Mapping[Monomial, int]) -> tuple[Factor, int]:
    """Return a polynomial scaled so that its first factor is 1, and the scale."""
    items = sorted(polynomial.items())
    scale = items[0][1]
    one_over = inverse(scale)
    return tuple((monomial, factor * one_over % PRIME) for monomial, factor in items), scale


def _reduced(above: Mapping[Monomial, int], below: tuple[Factor, ...]) -> Form:
    """Return a quotient, a factor below that is all of what stands above removed."""
    if not above:
        return Form({}, ())
    if below:
        factor, scale = _normal(above)
        if factor in below:
            return Form({(): scale}, _without(below, (factor,)))
    return Form(above, below)
