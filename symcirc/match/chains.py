"""From a triangular form to chains: the steps a person computes, shortest formula first, of true solutions only.

The last equation of an elimination can have factors that solve no original equation. Each factor is tried at a
random point, over the complex numbers: a factor cannot be split further, so what holds for one of its roots there
holds for all, everywhere.
"""

from __future__ import annotations

import random
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from itertools import product
from typing import Any

from sympy.polys.rings import PolyElement

from symcirc.match.decimals import reals
from symcirc.match.elimination import put_in
from symcirc.match.names import natural
from symcirc.match.quantities import Quantities, by_powers, holds, holds_any, is_met, value_at
from symcirc.match.roots import complex_roots
from symcirc.match.triangular import State, Step
from symcirc.match.work import StepTooLarge, Work

#: Equations with more terms are not factored, as that could take long.
MOST_FACTORED_TERMS = 300
#: Where an equation of higher degree stands among formulas that are surely positive (0) and others (2, 3).
_ROOT_DOUBT = 1


@dataclass(frozen=True)
class Chain:
    """Steps in the order of computing; those of degree 2 and more cannot be factored further.

    ``sample`` is a complex solution at a random point, by position.
    """

    steps: tuple[Step, ...]
    sample: tuple[Any, ...]


def chains(
    state: State,
    equations: Sequence[PolyElement],
    pool: Sequence[PolyElement],
    quantities: Quantities,
    work: Work,
) -> list[Chain]:
    """Return the chains of a triangular form that solve the original equations.

    Args:
        state: a whole triangular form.
        equations: those it came from.
        pool: further relations; those that follow serve as formulas where they are shorter.
        quantities: the ring.
        work: counts the products of terms.
    """
    point = random_point(quantities)
    found = []
    linear = state.steps[len(state.roots) :]
    for roots in product(*(factors(step, quantities) for step in state.roots)):
        steps = (*roots, *linear)
        for sample in solutions_at(steps, point):
            if all(is_met(equation, sample) for equation in equations):
                usable = [r for r in pool if r and is_met(r, sample)]
                ordered = _shortest(steps, [*equations, *usable], quantities, sample, work)
                found.append(Chain(ordered, tuple(sample)))
                break
    return found


def random_point(quantities: Quantities) -> list[Any]:
    """Return a value for each generator: constants as they are, the others at random about 1."""
    generator = random.Random(1955)
    point = [reals.mpf(generator.randrange(5000, 20000)) / 10007 for _ in range(quantities.ring.ngens)]
    for position, value in quantities.decimals.items():
        point[position] = value
    return point


def factors(step: Step, quantities: Quantities) -> list[Step]:
    """Return the factors of an equation that hold its unknown and can be zero, as steps."""
    if len(step.equation) > MOST_FACTORED_TERMS:
        return [step]
    found = (quantities.cleaned(f) for f, _ in step.equation.factor_list()[1])
    return [Step(step.unknown, f) for f in found if holds(f, step.unknown) and not quantities.sign(f)]


def solutions_at(steps: Sequence[Step], point: Sequence[Any]) -> Iterator[list[Any]]:
    """Yield all complex solutions of a triangular form, the quantities that are no unknowns at ``point``."""
    if not steps:
        yield list(point)
        return
    step = steps[0]
    coefficients = [value_at(c, point) for c in by_powers(step.equation, step.unknown)]
    while coefficients and not coefficients[-1]:
        coefficients.pop()
    for root in complex_roots(coefficients) if len(coefficients) > 1 else ():
        values = list(point)
        values[step.unknown] = root
        yield from solutions_at(steps[1:], values)


def _shortest(
    steps: Sequence[Step],
    relations: Sequence[PolyElement],
    quantities: Quantities,
    values: Sequence[Any],
    work: Work,
) -> tuple[Step, ...]:
    """Return the steps with each linear one replaced by the shortest equation that gives an unknown by then.

    A formula that is positive in sight comes first; one that may not be only where no equation of higher degree
    can be solved in its place.
    """
    missing = {step.unknown for step in steps}
    roots = [step for step in steps if step.equation.degree(step.unknown) > 1]
    pool = dict.fromkeys([*relations, *(s.equation for s in steps if s not in roots)])
    ordered: list[Step] = []
    while missing:
        candidates = [
            (cost, natural(quantities.name(k)), Step(k, equation))
            for equation in pool
            for k in _alone(equation, missing)
            if (cost := _cost(equation, k, quantities, values)) is not None
        ]
        candidates += [
            ((_ROOT_DOUBT, 0, 0), natural(quantities.name(s.unknown)), s)
            for s in roots
            if s.unknown in missing and not holds_any(s.equation, missing - {s.unknown})
        ]
        step = min(candidates, key=lambda candidate: candidate[:2])[2]
        ordered.append(step)
        missing.discard(step.unknown)
        if len(step.equation) == 2 and step.equation.degree(step.unknown) == 1:
            pool |= dict.fromkeys(_with_put_in(step, pool, quantities, work))
    return tuple(ordered)


def _with_put_in(
    step: Step, pool: Iterable[PolyElement], quantities: Quantities, work: Work
) -> Iterator[PolyElement]:
    """Yield the equations that a part's formula of one term, put in, makes no longer."""
    for equation in pool:
        if holds(equation, step.unknown) and equation != step.equation:
            try:
                shorter = put_in(equation, step.unknown, step.equation, quantities, work)
            except StepTooLarge:
                continue
            if shorter and len(shorter) <= len(equation):
                yield shorter


def _alone(equation: PolyElement, missing: set[int]) -> list[int]:
    """Return the missing unknown of an equation if it holds only one, and in first degree."""
    held = [k for k in missing if holds(equation, k)]
    return held if len(held) == 1 and equation.degree(held[0]) == 1 else []


def _cost(
    equation: PolyElement, unknown: int, quantities: Quantities, values: Sequence[Any]
) -> tuple[int, int, int] | None:
    """Return a key for the formula of an unknown from a linear equation: doubt about its sign, then length.

    None where it divides by zero.
    """
    rest, lead = by_powers(equation, unknown)
    if not value_at(lead, values):
        return None
    below, above = quantities.sign(lead), quantities.sign(rest)
    surely_positive = below is not None and above is not None and below == -above
    if surely_positive or (below and unknown in quantities.signless):
        doubt = 0
    else:
        doubt = 2 if below else 3
    return doubt, len(equation), sum(map(sum, equation))
