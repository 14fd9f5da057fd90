"""The explicit formula of a part from the equation of first or second degree that gives it."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import sympy
from sympy.polys.rings import PolyElement

from symcirc.match.decimals import fraction_near, reals
from symcirc.match.forms import Form, discriminant
from symcirc.match.problem import Root
from symcirc.match.products import (
    MOST_FACTORED_TERMS,
    Product,
    Sum,
    expression,
    factored,
    root_expression,
    whole,
    without_sign,
)
from symcirc.match.quadratics import Quadratic
from symcirc.match.quantities import Quantities


def ratio_formula(form: Form, quantities: Quantities) -> sympy.Expr:
    """Return the formula of an unknown from ``a x**power + c = 0``.

    >>> from symcirc.match.forms import form_of
    >>> from symcirc.match.quantities import plain_quantities
    >>> from symcirc.match.triangular import Step
    >>> quantities = plain_quantities("x", "a b")
    >>> x, a, b = quantities.ring.gens
    >>> ratio_formula(form_of(Step(0, a * x**3 - 8 * b), quantities), quantities)
    2*(b/a)**(1/3)
    """
    rest, lead = form.coefficients
    ratio = factored(-rest, quantities) / factored(lead, quantities)
    return (
        expression(ratio, quantities) if form.power == 1 else root_expression(ratio, form.power, quantities)
    )


def root_record(form: Form, index: int, quantities: Quantities) -> Root:
    """Return the record of a root of an equation of higher degree, its coefficients without common factor."""
    content = whole(form.step.equation, quantities)
    lead = factored(form.coefficients[-1], quantities).number
    monomial = tuple(0 if k == form.unknown else e for k, e in enumerate(content.monomial))
    content = Product(abs(content.number) * reals.sign(lead), monomial, {})
    unknown = quantities.meanings[form.unknown]
    terms = [
        expression(factored(c, quantities) / content, quantities) * unknown ** (k * form.power)
        for k, c in enumerate(form.coefficients)
        if c
    ]
    return Root(sympy.Add(*terms), quantities.name(form.unknown), index)


def quadratic_formula(root: Quadratic, quantities: Quantities) -> sympy.Expr:
    """Return the formula of a root of a quadratic equation.

    It is (-b ± r)/2a, or 2c/(-b ∓ r) where a may be zero and b not: that form stays true there.

    >>> from symcirc.match.forms import form_of
    >>> from symcirc.match.quantities import plain_quantities
    >>> from symcirc.match.triangular import Step
    >>> quantities = plain_quantities("x", "a")
    >>> x, a = quantities.ring.gens
    >>> quadratic_formula(Quadratic(form_of(Step(0, x**2 - 2 * a * x + a), quantities), 1), quantities)
    a + sqrt(a*(a - 1))
    """
    c, b, a = root.form.coefficients
    side = root.side
    if not side:
        value = expression(factored(-b, quantities) / factored(2 * a, quantities), quantities)
    elif not b:
        value = side * root_expression(factored(-c, quantities) / factored(a, quantities), 2, quantities)
    elif quantities.sign(a) is None and quantities.sign(b) == side:
        value = 1 / _quotient(-b, -side, discriminant(root.form), 2 * c, quantities)
    else:
        value = _quotient(-b, side, discriminant(root.form), 2 * a, quantities)
    return value if root.form.power == 1 else value ** sympy.Rational(1, root.form.power)


def _quotient(
    plain: PolyElement, side: int, radicand: PolyElement, below: PolyElement, quantities: Quantities
) -> sympy.Expr:
    """Return ``(plain + side sqrt(radicand)) / below``, tidied."""
    square, inside = _without_squares(radicand, quantities)
    common = plain.gcd(square).gcd(below)
    first = whole(plain.exquo(common), quantities)
    below_line = factored(below.exquo(common), quantities)
    outer = whole(square.exquo(common), quantities)
    root, factor = _square_root(factored(inside, quantities), outer.number / first.number, quantities)
    shared = tuple(map(min, zip(first.monomial, outer.monomial, strict=True)))
    lead = Product(reals.mpf(1), shared, {})
    first_term = expression(Product(reals.mpf(1), first.monomial, first.sums) / lead, quantities)
    second_term = expression(Product(factor, outer.monomial, outer.sums) / lead, quantities) * root
    front = expression(Product(first.number, shared, {}) / below_line, quantities)
    return front * (first_term + side * second_term)


def _without_squares(radicand: PolyElement, quantities: Quantities) -> tuple[PolyElement, PolyElement]:
    """Return polynomials f and g with f² g the radicand, f as large as its factors show."""
    radicand = quantities.reduced(radicand)
    outside, inside = quantities.ring.one, quantities.ring.one
    if len(radicand) > MOST_FACTORED_TERMS:
        return outside, radicand
    number, found = radicand.factor_list()
    for factor, exponent in found:
        outside *= factor ** (exponent // 2)
        inside *= factor ** (exponent % 2)
    return outside, inside * int(number)


def _square_root(radicand: Product, factor: Any, quantities: Quantities) -> tuple[sympy.Expr, Any]:
    """Return ``factor`` times the square root of a product as a root with plain numbers in it, and a fraction."""
    radicand = without_sign(radicand)
    size = factor**2 * radicand.number
    fraction = fraction_near(abs(size))
    outside = reals.mpf(1)
    if fraction is not None:
        whole_part, rest = _square_part(fraction)
        outside = reals.mpf(whole_part.numerator) / whole_part.denominator
        size = reals.sign(size) * rest
    sums = dict(radicand.sums)
    if sums and abs(size) != 1:  # the number goes into the bracket, where it may stand at one term only
        key = next(iter(sums))
        spread = Sum(tuple((monomial, value * size * outside**2) for monomial, value in key.terms))
        sums = {spread: sums.pop(key), **sums}
        size, outside = reals.mpf(1), reals.mpf(1)
    inside = Product(size, radicand.monomial, sums)
    return sympy.sqrt(expression(inside, quantities)), reals.sign(factor) * outside


def _square_part(fraction: Fraction) -> tuple[Fraction, int]:
    """Return a fraction f and an integer n without square factors so that f² n is the fraction given.

    >>> _square_part(Fraction(8, 9))
    (Fraction(2, 3), 2)
    """
    root = sympy.sqrt(sympy.Rational(fraction.numerator, fraction.denominator))
    outside, inside = root.as_coeff_Mul()
    return Fraction(int(outside.p), int(outside.q)), int(inside**2)
