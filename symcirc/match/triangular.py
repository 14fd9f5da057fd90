"""The search for a triangular form: each equation has one unknown more than those before it.

The coefficients of a stage are of first degree in almost every part, so that most unknowns come out of a linear
equation. In which order, and from which equation, decides how long the formulas grow and of which degree the last
equation is: a beam of the best partial orders is kept and the best whole one taken.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import partial
from math import prod

from sympy.polys.rings import PolyElement

from symcirc.match.elimination import pseudo_remainder, put_in, subresultants, without_factor
from symcirc.match.problem import Refused
from symcirc.match.quantities import Quantities, by_powers, holds, holds_any
from symcirc.match.work import StepTooLarge, Work, given_up

#: How many partial orders are kept.
BEAM = 8
#: Equations with more terms are not looked at for factors.
MOST_FACTORED_TERMS = 100


@dataclass(frozen=True)
class Step:
    """An equation that gives an unknown, once those of the steps before it are known."""

    unknown: int
    equation: PolyElement


@dataclass(frozen=True)
class Pivot:
    """An unknown eliminated by an equation; ``others`` are the equations that stood beside it.

    ``dropped`` is a factor of the equation without the unknown, which was taken not to be zero.
    """

    unknown: int
    equation: PolyElement
    others: tuple[PolyElement, ...]
    dropped: PolyElement


@dataclass(frozen=True)
class State:
    """A system partly in triangular form.

    ``roots`` are steps of degree 2 and more in the order of computing; their unknowns count as known in
    ``equations``. ``pivots`` are in the order of elimination. ``open`` are the unknowns without an equation.
    """

    equations: tuple[PolyElement, ...]
    open: frozenset[int]
    roots: tuple[Step, ...] = ()
    pivots: tuple[Pivot, ...] = ()

    @property
    def steps(self) -> tuple[Step, ...]:
        """All steps in the order of computing."""
        return (*self.roots, *(Step(p.unknown, p.equation) for p in reversed(self.pivots)))


def triangular(
    equations: Iterable[PolyElement], unknowns: Iterable[int], quantities: Quantities, work: Work
) -> State | None:
    """Return the best triangular form found, None where the equations contradict each other.

    Where the equations do not determine all unknowns, some stay ``open`` in what is returned. Raises Refused,
    kind "given up", where every way is too long.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("x y", "a")
    >>> x, y, a = quantities.ring.gens
    >>> [step.equation for step in triangular([x * y - 1, x + y - a], (0, 1), quantities, Work()).steps]
    [x**2 - x*a + 1, x*y - 1]
    """
    search = _Search(quantities, work)
    start = search.state(search.learned(equations), State((), frozenset(unknowns)))
    frontier = [] if start is None else [start]
    finished: list[State] = []
    while frontier:
        finished += [state for state in frontier if not state.equations]
        grown = [s for state in frontier if state.equations for s in search.successors(state)]
        grown.sort(key=_cost)
        unique: dict[object, State] = {}
        for state in grown:
            unique.setdefault((frozenset(state.equations), state.open), state)
        frontier = list(unique.values())[:BEAM]
    if not finished and search.has_left_ways:
        raise Refused(given_up())
    return min(finished, key=search.final_cost) if finished else None


def _cost(state: State) -> tuple[int, int, int]:
    """Return a key that sorts states by how far their equations are from being solved, then by length so far."""
    degrees = sum(max(0, e.degree(k)) for e in state.equations for k in state.open)
    degree = prod(step.equation.degree(step.unknown) for step in state.roots)
    done = sum(len(pivot.equation) for pivot in state.pivots)
    return degree, 3 * degrees + sum(map(len, state.equations)), done


class _Search:
    """The steps of the search, all in one ring."""

    def __init__(self, quantities: Quantities, work: Work) -> None:
        self.quantities = quantities
        self.work = work
        self.has_left_ways = False
        self.positive: list[PolyElement] = []  # polynomials that are never zero, met as factors

    def learned(self, equations: Iterable[PolyElement]) -> list[PolyElement]:
        """Return equations without the factors that are never zero, and keep these to divide by later."""
        kept = []
        for equation in equations:
            if not equation or len(equation) > MOST_FACTORED_TERMS:
                kept.append(equation)
                continue
            left = self.quantities.ring.one
            for factor, _ in equation.factor_list()[1]:
                if not self.quantities.sign(factor):
                    left *= factor
                elif not factor.is_monomial and factor not in self.positive:
                    self.positive.append(factor)
            kept.append(left)
        return kept

    def final_cost(self, state: State) -> tuple[int, int, int]:
        """Return a key that sorts whole forms: lowest degree, fewest open cases, shortest."""
        degree = prod(step.equation.degree(step.unknown) for step in state.steps)
        cases = sum(not self.quantities.sign(by_powers(p.equation, p.unknown)[1]) for p in state.pivots)
        return degree, cases, sum(len(step.equation) for step in state.steps)

    def successors(self, state: State) -> list[State]:
        """Return the states one step on: by linear equations, else by equations in one unknown, else neither."""
        linear = [
            (e, k) for e in state.equations for k in sorted(state.open, reverse=True) if e.degree(k) == 1
        ]
        ways: list[Callable[[], State | None]]
        if linear:
            ways = [partial(self._by_linear, state, e, k) for e, k in linear]
        elif alone := [e for e in state.equations if len(self._held(e, state)) == 1]:
            ways = [partial(self._by_root, state, e) for e in alone]
        else:
            ways = [partial(self._by_resultant, state)]
        return [s for s in map(self._gone, ways) if s is not None]

    def _gone(self, way: Callable[[], State | None]) -> State | None:
        """Return where a way leads; None where it ends in a contradiction, or is left as too long."""
        try:
            return way()
        except StepTooLarge:
            self.has_left_ways = True
            return None

    def _held(self, equation: PolyElement, state: State) -> list[int]:
        return [k for k in sorted(state.open) if holds(equation, k)]

    def _by_linear(self, state: State, equation: PolyElement, unknown: int) -> State | None:
        others = tuple(e for e in state.equations if e is not equation)
        rest, lead = by_powers(equation, unknown)
        short = len(lead) + len(rest) <= MOST_FACTORED_TERMS
        dropped = lead.gcd(rest) if short else self.quantities.ring.one
        linear = equation if dropped.is_ground else self.quantities.cleaned(equation.exquo(dropped))
        grown = [self._plain(put_in(e, unknown, linear, self.quantities, self.work)) for e in others]
        pivot = Pivot(unknown, linear, others, dropped)
        after = State((), state.open - {unknown}, state.roots, (*state.pivots, pivot))
        return self.state(grown, after)

    def _plain(self, equation: PolyElement) -> PolyElement:
        for factor in self.positive:
            equation = without_factor(equation, factor, self.quantities)
        return equation

    def _by_root(self, state: State, equation: PolyElement) -> State | None:
        (unknown,) = self._held(equation, state)
        others = [e for e in state.equations if e is not equation]
        reduced = [self.quantities.cleaned(pseudo_remainder(e, equation, unknown, self.work)) for e in others]
        roots = (*state.roots, Step(unknown, equation))
        return self.state(reduced, State((), state.open - {unknown}, roots, state.pivots))

    def _by_resultant(self, state: State) -> State | None:
        """Eliminate the unknown of lowest degrees by the resultants with the equation that is simplest in it."""
        candidates = [(e.degree(k), len(e), k, e) for e in state.equations for k in self._held(e, state)]
        _, _, unknown, first = min(candidates, key=lambda c: c[:3])
        others = [e for e in state.equations if e is not first]
        grown, pivot = [], first
        for other in others:
            if not holds(other, unknown):
                grown.append(other)
                continue
            sequence = [self.quantities.cleaned(p) for p in subresultants(first, other, unknown, self.work)]
            grown += [sequence[-1]] if not holds(sequence[-1], unknown) else []
            pivot = min([pivot, *sequence[2:]], key=lambda p: p.degree(unknown) if holds(p, unknown) else 99)
        after = State(
            (),
            state.open - {unknown},
            state.roots,
            (*state.pivots, Pivot(unknown, pivot, (), self.quantities.ring.one)),
        )
        return self.state(grown, after)

    def state(self, equations: Iterable[PolyElement], after: State) -> State | None:
        """Return ``after`` with these equations; None where one of them is a contradiction."""
        kept = []
        roots = after.roots
        for equation in dict.fromkeys(equations):
            if not equation:
                continue
            if self.quantities.sign(equation):
                return None
            if holds_any(equation, after.open):
                kept.append(equation)
                continue
            merged = self._with(roots, equation)
            if merged is None:
                return None
            roots = merged
        return State(tuple(kept), after.open, roots, after.pivots)

    def _with(self, roots: tuple[Step, ...], equation: PolyElement) -> tuple[Step, ...] | None:
        """Return the steps with an equation put to the step that has its last unknown; None if it cannot hold."""
        for k in range(len(roots) - 1, -1, -1):
            unknown = roots[k].unknown
            if holds(equation, unknown):
                common = roots[k].equation.gcd(equation)
                if common.degree(unknown) < 1:
                    return None
                return (*roots[:k], Step(unknown, common), *roots[k + 1 :])
        return None
