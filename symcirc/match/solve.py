"""From a problem to its solutions: count, solve triangularly, say where the solutions are real, give values."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

import sympy
from sympy.polys.rings import PolyElement

from symcirc.complaints import InternalFault
from symcirc.match.branches import Region
from symcirc.match.candidates import Candidate, Degenerate, candidates
from symcirc.match.cases import missing_cases
from symcirc.match.chains import Chain, chains, random_point, solutions_at
from symcirc.match.claims import Claim
from symcirc.match.counting import count
from symcirc.match.decimals import exact, reals
from symcirc.match.numeric import numeric_solutions
from symcirc.match.problem import Branch, Equation, Problem, Refusal, Refused, Solutions
from symcirc.match.quantities import Quantities, is_met
from symcirc.match.quotient import NotFound
from symcirc.match.refusals import (
    contradiction,
    left_open,
    no_branch,
    no_formula,
    none_positive,
    too_few,
    too_many,
    undetermined,
)
from symcirc.match.screening import partner_of, screened
from symcirc.match.shapes import check_order, check_shapes
from symcirc.match.system import Coefficient, System, build_system
from symcirc.match.triangular import triangular
from symcirc.match.work import DEFAULT_BOUND, Work
from symcirc.match.writing import Writer
from symcirc.transfer.function import symbols_in

#: Which of two refusals is told where a target may be met with either sign: the later one.
_TELLING = ("sign", "gain", "shape", "order", "target", "few", "negative", "many", "given up")

#: From this number of unknowns on the solutions are first found in numbers, where all are known; where there are more
#: complex ones than the second number, formulas would be too long to be of use, and are not looked for.
FEWEST_FOR_NUMBERS, MOST_FOR_FORMULAS = 4, 6
#: Products of terms after which the search in numbers ends, and that for other numbers nearby; a few seconds.
NUMERIC_BOUND, NEIGHBOUR_BOUND = 100_000, 50_000
#: By what a part's number is multiplied to find others nearby that would do.
_FACTORS = tuple(sympy.Rational(*f) for f in ((2, 1), (1, 2), (5, 1), (1, 5), (10, 1), (1, 10)))
#: Units of what is a part.
PARTS = ("ohm", "F", "H")
#: Sizes of parts in SI base units.
_USUAL = {
    "ohm": sympy.Integer(10) ** 4,
    "F": sympy.Rational(1, 10**8),
    "H": sympy.Rational(1, 10),
    "Hz": sympy.Integer(1000),
}


def solve(
    problem: Problem, bound: int = DEFAULT_BOUND, should_stop: Callable[[], bool] = lambda: False
) -> Solutions | Refusal:
    """Return all real positive solutions of a match, or why there are none.

    Where all numbers are known, a branch is a solution for these numbers. Where some are not, a branch is
    returned for every root that is positive somewhere, with the conditions that say where.

    Args:
        problem: stage, target, what is free.
        bound: products of terms after which it is given up (see :mod:`symcirc.match.work`).
        should_stop: asked between steps; when it returns True the match is given up.

    Raises:
        InternalFault: a solution does not solve the original equations, or its conditions contradict its values.
    """
    work = Work(bound, should_stop)
    branches: list[Branch] = []
    refusals: list[Refusal] = []
    try:
        check_order(problem)
    except Refused as refused:
        return refused.refusal
    for sign in (1, -1) if problem.gain == "magnitude" else (1,):
        try:
            branches += _solved(problem, sign, work)
        except Refused as refused:
            refusals.append(refused.refusal)
    if branches:
        return Solutions(tuple(branches))
    return max(refusals, key=lambda refusal: _TELLING.index(refusal.kind))


def _solved(problem: Problem, sign: int, work: Work) -> list[Branch]:
    """Return the branches by formulas; in numbers where these would be long or there are none.

    Raises Refused where there are no branches.
    """
    symbols = _symbols(problem)
    numeric: _Numeric | None = None
    if not symbols and len(problem.unknowns) >= FEWEST_FOR_NUMBERS:
        numeric = _in_numbers(problem, sign, work.again(NUMERIC_BOUND))
        if numeric is not None and not numeric.has_formulas:
            return _told(numeric, problem, sign, None, work.again(NEIGHBOUR_BOUND))
    try:
        return _by_formulas(problem, sign, work)
    except Refused as refused:
        if refused.refusal.kind not in ("negative", "given up"):
            raise
        refusal = refused.refusal
    if numeric is None:
        sampled = replace(problem, known={**problem.known, **_sample(symbols, problem.units)})
        try:
            numeric = _in_numbers(sampled, sign, work.again(NUMERIC_BOUND))
        except Refused:  # of the sample's numbers, which are not the user's
            raise Refused(refusal) from None
    if numeric is None or (symbols and not numeric.branches):
        raise Refused(refusal)
    if symbols:
        raise Refused(no_formula(symbols))
    return _told(numeric, problem, sign, refusal, work.again(NEIGHBOUR_BOUND))


def _told(
    numeric: _Numeric, problem: Problem, sign: int, refusal: Refusal | None, work: Work
) -> list[Branch]:
    """Return the branches found in numbers; where there are none, raise Refused, with what the formulas say of it."""
    if numeric.branches:
        return list(numeric.branches)
    if numeric.refusal is not None:
        raise Refused(numeric.refusal)
    if refusal is None or refusal.kind != "negative":
        refusal = none_positive(problem, _neighbour(problem, sign, work))
    raise Refused(refusal)


def _neighbour(problem: Problem, sign: int, work: Work) -> tuple[str, sympy.Expr] | None:
    """Return a part and another number for it with which there is a solution, the rest as given, if one is near."""
    names = [name for name in problem.known if problem.units.get(name) in PARTS]
    for factor in _FACTORS:
        for name in names:
            number = problem.known[name] * factor
            try:
                found = _in_numbers(replace(problem, known={**problem.known, name: number}), sign, work)
            except Refused:
                return None
            if found is not None and found.branches:
                return name, number
    return None


def _by_formulas(problem: Problem, sign: int, work: Work) -> list[Branch]:
    try:
        return _branches(build_system(problem, sign), problem, work)
    except Degenerate as degenerate:
        refusal = degenerate.refusal
    try:
        return _branches(build_system(problem, sign, numbers_in=True), problem, work)
    except Degenerate:
        raise Refused(refusal or undetermined()) from None
    except Refused as refused:
        raise Refused(refusal or refused.refusal) from None


def _symbols(problem: Problem) -> set[str]:
    """Return the symbols that are no unknowns and have no number."""
    targets = (*problem.target_numerator, *problem.target_denominator, *problem.positives.values())
    held = {str(s) for t in targets for s in t.free_symbols} | symbols_in(problem.function)
    return held - {*problem.unknowns, *problem.positives, *problem.known, "pi"}


def _sample(names: Iterable[str], units: Mapping[str, str]) -> dict[str, sympy.Expr]:
    """Return numbers of usual sizes for symbols, no two alike: whether a claim about all values is true for these."""
    return {
        name: _USUAL.get(units.get(name, ""), sympy.S.One) * sympy.Rational(97 + k, 89)
        for k, name in enumerate(sorted(names))
    }


@dataclass(frozen=True)
class _Numeric:
    """Branches found in numbers; ``refusal`` says which further equation the solutions miss, if they do.

    ``has_formulas`` tells whether formulas are worth a trial: they are long where there are many complex solutions,
    and lose digits where some of these meet.
    """

    branches: tuple[Branch, ...]
    has_formulas: bool
    refusal: Refusal | None


def _in_numbers(problem: Problem, sign: int, work: Work) -> _Numeric | None:
    """Return the branches of a problem without symbols, None where they cannot be found; raises Refused."""
    system = build_system(problem, sign)
    solvable = _counted(system, problem)
    quantities = system.quantities
    try:
        found = numeric_solutions(solvable.equations, quantities, problem.known, work)
    except (NotFound, Refused):  # the latter: too much work
        return None
    tied = [Claim((quotient.above, quotient.below)) for quotient in system.positives.values()]
    positive = [v for v in found.values if not any(claim.is_missed(v) for claim in tied)]
    met = [v for v in positive if all(is_met(equation, v) for equation in solvable.consequences)]
    refusal = solvable.refusal if positive and not met else None
    has_formulas = found.of_complex <= MOST_FOR_FORMULAS and found.distinct == found.of_complex
    return _Numeric(
        tuple(_numeric_branch(v, found.of_complex, quantities) for v in met), has_formulas, refusal
    )


def _numeric_branch(values: Sequence[Any], of_complex: int, quantities: Quantities) -> Branch:
    named = {quantities.name(k): values[k] for k in quantities.unknowns}
    equations = tuple(Equation(name, exact(value), of_complex) for name, value in named.items())
    return Branch(equations, (), {name: float(value) for name, value in named.items()}, of_complex)


@dataclass(frozen=True)
class Solvable:
    """A system with the equations to solve and those that have to follow."""

    system: System
    equations: tuple[PolyElement, ...]
    consequences: tuple[PolyElement, ...]
    refusal: Refusal  # where these do not follow
    fixed: tuple[PolyElement, ...]  # relations that the numbers of chosen quantities meet


def solved_chains(system: System, problem: Problem, work: Work) -> tuple[Solvable, list[Chain]]:
    """Return a system's equations counted, and the chains of formulas that solve them.

    Raises Refused where there are too many unknowns, an equation cannot be met, or the work grows too large.
    """
    solvable = _counted(system, problem)
    return solvable, _chains(solvable, work)


def _branches(system: System, problem: Problem, work: Work) -> list[Branch]:
    solvable, found = solved_chains(system, problem, work)
    quantities = system.quantities
    if not found:
        if quantities.numbers:
            raise Degenerate(
                contradiction(problem, quantities)
            )  # in symbols; for these numbers it may have a solution
        raise Refused(contradiction(problem, quantities))
    branches: list[Branch] = []
    failed: list[tuple[Candidate, Sequence[Claim] | None]] = []
    missed = False
    for chain in found:
        met = [e for e in solvable.consequences if not is_met(e, chain.sample)]
        written = Writer(system, (*solvable.fixed, *met), work)
        for candidate in candidates(chain, quantities):
            region = written.region(candidate)
            if candidate.fails or _misses(candidate, region, system):
                failed.append((candidate, None if region is None else region.claims))
            elif not _follow(solvable.consequences, candidate, chain, quantities):
                missed = True
            elif region is not None:
                _check(candidate, region, solvable)
                branches.append(written.branch(candidate, region))
            elif None not in candidate.values:
                raise InternalFault("a solution of the match contradicts the claim that there is none")
    if branches:
        return branches
    if missed:
        raise Refused(solvable.refusal)
    raise Refused(no_branch(failed, problem, quantities) if failed else contradiction(problem, quantities))


def _counted(system: System, problem: Problem) -> Solvable:
    """Return the equations of a system; raise Refused where there are too many unknowns or one cannot be met."""
    check_shapes(system)
    found = count(system)
    left, fixed = screened(system, found.references, problem)
    if found.rank < len(problem.unknowns):
        raise Refused(too_many(system, found, problem))
    references = dict(zip(system.groups, found.references, strict=True))

    def relation(coefficient: Coefficient) -> PolyElement:
        group = next(g for g in system.groups if coefficient in g)
        return system.relation(coefficient, partner_of(coefficient, system, references[group]))

    independent = [c for c in left if c in found.independent]
    dependent = [c for c in left if c not in found.independent]
    return Solvable(
        system,
        tuple(relation(c) for c in independent),
        tuple(relation(c) for c in dependent),
        too_few(dependent, system, found, problem),
        tuple(fixed),
    )


def _chains(solvable: Solvable, work: Work) -> list[Chain]:
    system = solvable.system
    quantities = system.quantities
    state = triangular(solvable.equations, quantities.unknowns, quantities, work)
    if state is None:
        return []
    if state.open:
        raise Refused(left_open(sorted(quantities.name(k) for k in state.open)))
    pool = [
        system.relation(one, other)
        for group in system.groups
        for k, one in enumerate(group)
        for other in group[:k]
        if one.target.above and other.target.above
    ]
    states = [state, *missing_cases(state, quantities, work)]
    return [c for s in states for c in chains(s, solvable.equations, pool, quantities, work)]


def _misses(candidate: Candidate, region: Region | None, system: System) -> bool:
    """Tell whether the numbers that are known are against a candidate with some values open, or against a tie."""
    if None in candidate.values and region is not None:
        return any(claim.is_missed(candidate.values) for claim in region.claims)
    tied = [Claim((quotient.above, quotient.below)) for quotient in system.positives.values()]
    return any(claim.is_missed(candidate.values) for claim in tied)


def _follow(
    consequences: Sequence[PolyElement], candidate: Candidate, chain: Chain, quantities: Quantities
) -> bool:
    """Tell whether further equations hold for a candidate; at random values of what has no number."""
    if not consequences:
        return True
    if None not in candidate.values:
        points = [candidate.values]
    else:
        point = random_point(quantities)
        for position, number in quantities.numbers.items():
            point[position] = number
        points = [tuple(solution) for solution in solutions_at(chain.steps, point)]
    return all(is_met(equation, point) for equation in consequences for point in points)


def _check(candidate: Candidate, region: Region, solvable: Solvable) -> None:
    """Put the values, where all are known, into the original equations and the conditions."""
    if None in candidate.values:
        return
    for equation in solvable.equations:
        if not is_met(equation, candidate.values, reals.mpf(10) ** -12):
            raise InternalFault(f"a solution of the match does not solve {equation} = 0")
    for claim in region.claims:
        if claim.is_missed(candidate.values):
            raise InternalFault(f"a solution of the match contradicts its condition on {claim.factors}")
