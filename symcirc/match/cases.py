"""Solutions that an elimination passes over: those where the coefficient of an eliminated unknown is zero.

From ``a x + b = 0`` the unknown x was taken as -b/a. Where a is zero, b must be zero too, and x follows from the
other equations. That is one equation more than unknowns, so that such cases are rare. A common factor of a and b
that was dropped may be zero as well.
"""

from __future__ import annotations

import random

from sympy.polys.rings import PolyElement

from symcirc.match.quantities import Quantities, by_powers, holds_any
from symcirc.match.triangular import Pivot, State, triangular
from symcirc.match.work import Work


def missing_cases(state: State, quantities: Quantities, work: Work) -> list[State]:
    """Return triangular forms of the cases that a form passes over.

    A case is first tried with random numbers for all that is chosen, which shows quickly that most have no solution.
    A case that leaves an unknown open has solutions for no finite set of values and is not returned.
    """
    found = []
    for k, pivot in enumerate(state.pivots):
        unknowns = [pivot.unknown, *(p.unknown for p in state.pivots[k + 1 :])]
        unknowns += [step.unknown for step in state.roots]
        for zeros in _zeros(pivot, unknowns, quantities):
            equations = [*zeros, *pivot.others]
            if triangular([_sampled(e, quantities) for e in equations], unknowns, quantities, work) is None:
                continue
            case = triangular([quantities.cleaned(e) for e in equations], unknowns, quantities, work)
            if case is not None and not case.open:
                found.append(State((), case.open, case.roots, (*state.pivots[:k], *case.pivots)))
    return found


def _zeros(pivot: Pivot, unknowns: list[int], quantities: Quantities) -> list[list[PolyElement]]:
    """Return the polynomials that would have to be zero together in each case that a pivot passes over."""
    if pivot.equation.degree(pivot.unknown) > 1:
        return []
    rest, lead = by_powers(pivot.equation, pivot.unknown)
    cases = [[pivot.dropped], [lead, rest]]
    return [c for c in cases if not quantities.sign(c[0]) and holds_any(c[0], unknowns)]


def _sampled(equation: PolyElement, quantities: Quantities) -> PolyElement:
    """Return an equation in the unknowns alone, the other quantities at small random numbers."""
    generator = random.Random(1729)
    point = [generator.randrange(2, 200) for _ in range(quantities.ring.ngens)]
    sampled = quantities.ring.zero
    for monomial, coefficient in equation.items():
        for k, exponent in enumerate(monomial):
            if k not in quantities.unknowns:
                coefficient *= point[k] ** exponent
        key = tuple(e if k in quantities.unknowns else 0 for k, e in enumerate(monomial))
        sampled[key] = sampled.get(key, 0) + coefficient
    sampled.strip_zero()
    return quantities.cleaned(sampled)
