"""One step of elimination: an unknown taken out of an equation by means of another equation.

A linear equation is put in. Of two equations of higher degree the subresultants are taken: the last one is the
resultant, without the unknown, and the one of degree 1, if there is one, gives the unknown by the others.
Source, from memory: W. S. Brown, "The subresultant PRS algorithm" (1978).
"""

from __future__ import annotations

from collections.abc import Sequence

from sympy.polys.rings import PolyElement

from symcirc.match.quantities import Quantities, by_powers
from symcirc.match.work import STEP_BOUND, Work


def put_in(
    equation: PolyElement, unknown: int, linear: PolyElement, quantities: Quantities, work: Work
) -> PolyElement:
    """Return an equation with the unknown taken from a linear one, without denominators and plain factors.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("x y", "a")
    >>> x, y, a = quantities.ring.gens
    >>> put_in(x**2 + y - 1, 0, a * x - y, quantities, Work())
    y**2 + y*a**2 - a**2
    """
    powers = by_powers(equation, unknown)
    if len(powers) == 1:
        return equation
    rest, below = by_powers(linear, unknown)
    total = substituted(powers, -rest, below, work)
    return without_factor(quantities.cleaned(total), below, quantities)


def substituted(
    powers: Sequence[PolyElement], above: PolyElement, below: PolyElement, work: Work
) -> PolyElement:
    """Return a polynomial's value at ``above/below`` times ``below`` to its degree (Horner's scheme).

    ``powers`` are its coefficients, ascending. Raises StepTooLarge where a product is too long.
    """
    total, scale = powers[-1], powers[-1].ring.one
    for coefficient in reversed(powers[:-1]):
        work.spend(len(total) * len(above) + len(scale) * len(below))
        scale = scale * below
        work.spend(len(coefficient) * len(scale))
        total = total * above + coefficient * scale
    return total


def without_factor(equation: PolyElement, factor: PolyElement, quantities: Quantities) -> PolyElement:
    """Return an equation without a factor that is known not to be zero, but for very long equations."""
    factor = quantities.cleaned(factor)
    if factor.is_ground or not equation or len(equation) * len(factor) > STEP_BOUND:
        return equation
    while len(equation) >= len(factor):
        quotient, rest = equation.div(factor)
        if rest:
            break
        equation = quantities.cleaned(quotient)
    return equation


def pseudo_remainder(one: PolyElement, other: PolyElement, unknown: int, work: Work) -> PolyElement:
    """Return the remainder of ``one`` times a power of the leading coefficient of ``other``, by ``other``."""
    generator, degree = one.ring.gens[unknown], other.degree(unknown)
    lead = by_powers(other, unknown)[-1]
    missing = one.degree(unknown) - degree + 1
    while one and one.degree(unknown) >= degree:
        top = by_powers(one, unknown)[-1]
        work.spend(len(one) * len(lead) + len(other) * len(top))
        one = one * lead - other * top * generator ** (one.degree(unknown) - degree)
        missing -= 1
    return one * lead ** max(missing, 0)


def subresultants(one: PolyElement, other: PolyElement, unknown: int, work: Work) -> list[PolyElement]:
    """Return the subresultants of two polynomials in one generator, of falling degree, the two included.

    The last one is free of the generator, or it is the factor that the two have in common.

    >>> from sympy import ZZ, ring
    >>> _, x, a = ring("x,a", ZZ)
    >>> subresultants(x**2 - a, x**2 + x, 0, Work())[2:]
    [x + a, a**2 - a]
    """
    if one.degree(unknown) < other.degree(unknown):
        one, other = other, one
    sequence = [one, other]
    drop = one.degree(unknown) - other.degree(unknown)
    lead = by_powers(other, unknown)[-1]
    scale = -(lead**drop)
    rest = pseudo_remainder(one, other, unknown, work) * (-1) ** (drop + 1)
    while rest:
        sequence.append(rest)
        if rest.degree(unknown) <= 0:
            break
        one, other = other, rest
        drop = one.degree(unknown) - other.degree(unknown)
        divisor = -lead * scale**drop
        rest = pseudo_remainder(one, other, unknown, work).exquo(divisor)
        lead = by_powers(other, unknown)[-1]
        scale = ((-lead) ** drop).exquo(scale ** (drop - 1)) if drop > 1 else -lead
    return sequence
