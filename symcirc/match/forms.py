"""What kind of equation a step is: linear, a pure power, quadratic, or of higher degree."""

from __future__ import annotations

from dataclasses import dataclass
from functools import reduce
from math import gcd

from sympy.polys.rings import PolyElement

from symcirc.match.quantities import Quantities, by_powers
from symcirc.match.triangular import Step


@dataclass(frozen=True)
class Form:
    """A step as a polynomial in a power of its unknown: ``coefficients``, ascending, in x**``power``."""

    step: Step
    power: int
    coefficients: tuple[PolyElement, ...]

    @property
    def degree(self) -> int:
        """The degree in x**``power``."""
        return len(self.coefficients) - 1

    @property
    def unknown(self) -> int:
        """The position of the unknown."""
        return self.step.unknown


def form_of(step: Step, quantities: Quantities) -> Form:
    """Return the form of a step; an unknown that may be negative is not taken as a power.

    A pure square is a quadratic, its leading coefficient positive where its sign is certain.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("x", "a")
    >>> x, a = quantities.ring.gens
    >>> form = form_of(Step(0, x**4 - a * x**2 + 1), quantities)
    >>> form.power, form.coefficients
    (2, (1, -a, 1))
    """
    coefficients = by_powers(step.equation, step.unknown)
    used = [k for k, c in enumerate(coefficients) if c]
    power = 1 if step.unknown in quantities.signless else reduce(gcd, used)
    if used == [0, 2]:
        sign = quantities.sign(coefficients[2]) or 1
        return Form(step, 1, tuple(sign * c for c in coefficients))
    return Form(step, power, tuple(coefficients[::power]))


def discriminant(form: Form) -> PolyElement:
    """Return b² - 4ac of a form of degree 2."""
    c, b, a = form.coefficients
    return b**2 - 4 * a * c


def deflated(polynomial: PolyElement, form: Form) -> PolyElement | None:
    """Return a polynomial with x in place of x**power; None where it holds other powers of x.

    >>> from sympy import ZZ, ring
    >>> _, x, a = ring("x,a", ZZ)
    >>> deflated(x**2 + a, Form(Step(0, x**4 - a), 2, ()))
    x + a
    """
    lowered = {}
    for monomial, coefficient in polynomial.items():
        exponent, rest = divmod(monomial[form.unknown], form.power)
        if rest:
            return None
        lowered[(*monomial[: form.unknown], exponent, *monomial[form.unknown + 1 :])] = coefficient
    return polynomial.ring.from_dict(lowered)
