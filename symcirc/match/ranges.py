"""In which ranges a chosen part may lie, with the rest as given: for stages whose equation has no short formula.

With the others at their numbers the equation is a polynomial P(x, c) in the part x that is solved for and the chosen
part c. The number of real positive solutions can change only where two roots of P meet (its discriminant is zero),
where one comes from infinity or from zero (the first or the last coefficient is zero), or where another part, a
linear fraction in x, passes zero or infinity (the resultant of P with what stands above or below the line is zero).
These polynomials in c are computed exactly, their real roots isolated by Sturm's sequence, and one point between each
two neighbours is solved. Source of the method, from memory: G. E. Collins, "Quantifier elimination for real closed
fields by cylindrical algebraic decomposition" (1975), of which this is the case of two variables.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from itertools import pairwise
from math import inf, lcm
from typing import Any

from sympy import Expr, Rational, Symbol
from sympy.polys.domains import ZZ
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.match.candidates import Degenerate, candidates
from symcirc.match.chains import Chain
from symcirc.match.claims import Claim
from symcirc.match.decimals import as_fraction, decimal, fraction_near, reals
from symcirc.match.elimination import put_in
from symcirc.match.problem import Problem, Refused
from symcirc.match.quantities import Quantities, by_powers, holds, holds_any
from symcirc.match.roots import positive_roots
from symcirc.match.solve import Solvable, solved_chains
from symcirc.match.system import System, build_system
from symcirc.match.work import StepTooLarge, Work

#: Digits kept of a number that is no short fraction.
KEPT_DIGITS = 20
#: Polynomials of a higher degree in the chosen part are not looked at.
LARGEST_DEGREE = 120


@dataclass(frozen=True)
class Range:
    """Where a part may lie so that the rest has a real positive solution: intervals (low, high), in SI base units.

    The first may begin at 0, the last end at infinity. None at all: no value of this part alone would do.
    """

    part: str
    intervals: tuple[tuple[float, float], ...]


class _TooHard(Exception):
    """The borders cannot be had as polynomials in one part, or these are too long."""


def ranges(problem: Problem) -> tuple[Range, ...]:
    """Return the ranges of every part with a number, where the stage's equation is of degree 3 or more.

    Parts for which the borders cannot be found exactly are left out, as are all where the target holds symbols.
    """
    found: list[Range] = []
    work = Work()
    if any(c.free_symbols for c in (*problem.target_numerator, *problem.target_denominator)):
        return ()
    problem = _in_fractions(problem)
    pieces = [p for sign in _signs(problem) if (p := _solvable(problem, sign, work)) is not None]
    names = [name for name in problem.known if problem.units.get(name) in ("F", "ohm", "H")]
    for name in names:
        try:
            intervals = _intervals(name, problem, pieces, work)
        except (_TooHard, StepTooLarge, Refused):
            continue
        if intervals is not None:
            found.append(Range(name, intervals))
    return tuple(found)


def _in_fractions(problem: Problem) -> Problem:
    """Return a problem in which all numbers are fractions, each within 1e-20 of what it was.

    So the algebra that follows is exact, and what cancels in it cancels. A numerator keeps its ratio to the
    denominator.
    """
    below = tuple(_fraction(c) for c in problem.target_denominator)
    above = tuple(
        c if c == 0 else _fraction(c) if there == 0 else _fraction(c / whole) * there
        for c, there, whole in zip(problem.target_numerator, below, problem.target_denominator, strict=False)
    )
    known = {name: _fraction(number) for name, number in problem.known.items()}
    return replace(problem, target_numerator=above, target_denominator=below, known=known)


def _fraction(number: Expr) -> Rational:
    value = decimal(number)
    short = fraction_near(value)
    found = short if short is not None else as_fraction(reals.mpf(reals.nstr(value, KEPT_DIGITS)))
    return Rational(found.numerator, found.denominator)


def _signs(problem: Problem) -> tuple[int, ...]:
    return (1, -1) if problem.gain == "magnitude" else (1,)


def _solvable(problem: Problem, sign: int, work: Work) -> tuple[Solvable, list[Chain]] | None:
    try:
        return solved_chains(build_system(problem, sign), problem, work)
    except (Refused, Degenerate):
        return None


def _intervals(
    name: str, problem: Problem, pieces: Sequence[tuple[Solvable, list[Chain]]], work: Work
) -> tuple[tuple[float, float], ...] | None:
    """Return the intervals of one part, None where a short formula says it; raises _TooHard."""
    searches = []
    for solvable, chains in pieces:
        if solvable.consequences or solvable.fixed:
            raise _TooHard
        searches += [_Search(name, problem, solvable.system, chain, work) for chain in chains]
    if not any(search.is_long for search in searches):
        return None
    borders = sorted({border for search in searches for border in search.borders()})
    kept = [any(search.has_solution(point) for search in searches) for point in _points(borders)]
    found: list[tuple[float, float]] = []
    for (low, high), is_kept in zip(pairwise([0.0, *map(float, borders), inf]), kept, strict=True):
        if not is_kept or low == high:  # the latter between two borders that are one
            continue
        low = found.pop()[0] if found and found[-1][1] == low else low
        found.append((low, high))
    return tuple(found)


def _points(borders: Sequence[Any]) -> list[Any]:
    """Return one point in each interval between zero, the borders (rising) and infinity."""
    if not borders:
        return [reals.mpf(1)]
    inner = [reals.sqrt(low * high) for low, high in pairwise(borders)]
    return [borders[0] / 2, *inner, borders[-1] * 2]


class _Search:
    """One chain of a stage, its steps seen as polynomials in one unknown and one chosen part."""

    def __init__(self, name: str, problem: Problem, system: System, chain: Chain, work: Work) -> None:
        self.system = system
        self.quantities: Quantities = system.quantities
        self.chain = chain
        self.work = work
        positions = {self.quantities.name(k): k for k in self.quantities.numbers}
        if name not in positions or self._is_composed(name):
            raise _TooHard
        self.chosen = positions[name]
        unknowns = len(self.quantities.unknowns)
        if self.quantities.decimals or len(positions) + unknowns < self.quantities.ring.ngens:
            raise _TooHard  # a root is left in it, or something has no number
        self.known = {k: Fraction(int(n.p), int(n.q)) for k, n in self._numbers(problem) if k != self.chosen}
        roots = [s for s in chain.steps if s.equation.degree(s.unknown) > 1]
        if len(roots) > 1:
            raise _TooHard
        self.root = roots[0] if roots else None
        self.is_long = self.root is not None and self.root.equation.degree(self.root.unknown) > 2
        self.ring = PolyRing(["x", "c"], ZZ)

    def _is_composed(self, name: str) -> bool:
        """Tell whether a generator stands for an expression that the chosen part is in."""
        return any(
            not meaning.is_Symbol and name in map(str, meaning.free_symbols)
            for meaning in self.quantities.meanings.values()
        )

    def _numbers(self, problem: Problem) -> Iterator[tuple[int, Rational]]:
        """Yield the position and the number of every generator that is no unknown."""
        known = {Symbol(name): number for name, number in problem.known.items()}
        for k in self.quantities.numbers:
            yield k, Rational(self.quantities.meanings[k].subs(known))

    def borders(self) -> Iterator[Any]:
        """Yield where the number of solutions may change, in SI base units."""
        polynomials: list[PolyElement] = []
        equation = None if self.root is None else self._in_two(self.root.equation)
        if equation is not None:
            powers = by_powers(equation, 0)
            polynomials += [powers[0], powers[-1], equation.discriminant()]
        for factor in self._factors():
            bivariate = self._in_two(factor)
            if equation is not None and holds(bivariate, 0):
                bivariate = equation.resultant(bivariate)
            polynomials.append(bivariate)
        for polynomial in polynomials:
            yield from _positive_roots(polynomial)

    def _factors(self) -> Iterator[PolyElement]:
        """Yield what must not change its sign for the parts after the root to stay positive."""
        for step in self.chain.steps:
            if step.equation.degree(step.unknown) == 1 and step.unknown not in self.quantities.signless:
                yield from by_powers(step.equation, step.unknown)
        for quotient in self.system.positives.values():
            yield from (quotient.above, quotient.below)

    def _in_two(self, polynomial: PolyElement) -> PolyElement:
        """Return a polynomial in the root's unknown and the chosen part alone, over the integers."""
        x = None if self.root is None else self.root.unknown
        for step in reversed(self.chain.steps):
            if step is not self.root and holds(polynomial, step.unknown):
                polynomial = put_in(polynomial, step.unknown, step.equation, self.quantities, self.work)
        if holds_any(polynomial, [k for k in self.quantities.unknowns if k != x]):
            raise _TooHard
        sums: dict[tuple[int, int], Fraction] = defaultdict(Fraction)
        for monomial, coefficient in polynomial.items():
            value = Fraction(int(coefficient))
            for k, number in self.known.items():
                value *= number ** monomial[k]
            key = (0 if x is None else monomial[x], monomial[self.chosen])
            sums[key] += value
        common = lcm(*(value.denominator for value in sums.values()))
        return self.ring.from_dict({key: int(value * common) for key, value in sums.items() if value})

    def has_solution(self, value: Any) -> bool:
        """Tell whether all parts are real and positive where the chosen part has a value."""
        numbers = {**self.quantities.numbers, self.chosen: value}
        try:
            found = candidates(self.chain, replace(self.quantities, numbers=numbers))
        except Degenerate:
            return False
        tied = [Claim((q.above, q.below)) for q in self.system.positives.values()]
        return any(not one.fails and not any(claim.is_missed(one.values) for claim in tied) for one in found)


def _positive_roots(polynomial: PolyElement) -> Iterator[Any]:
    """Yield the positive real roots of a polynomial in c, each once; raises _TooHard for one that is too long."""
    if not polynomial:
        raise _TooHard
    single = polynomial.drop(0) if polynomial.ring.ngens > 1 else polynomial
    if single.is_ground:
        return
    if single.degree() > LARGEST_DEGREE:
        raise _TooHard
    for factor, _ in single.sqf_list()[1]:
        yield from positive_roots([reals.mpf(int(factor.coeff(power))) for power in _powers(factor)])


def _powers(polynomial: PolyElement) -> list[PolyElement]:
    (c,) = polynomial.ring.gens
    return [c**k for k in range(polynomial.degree() + 1)]
