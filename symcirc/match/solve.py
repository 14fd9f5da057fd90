"""From a problem to its solutions: count, solve triangularly, say where the solutions are real, give values."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from sympy.polys.rings import PolyElement

from symcirc.complaints import InternalFault
from symcirc.match.branches import Region
from symcirc.match.candidates import Candidate, Degenerate, candidates
from symcirc.match.cases import missing_cases
from symcirc.match.chains import Chain, chains, random_point, solutions_at
from symcirc.match.claims import Claim
from symcirc.match.counting import count
from symcirc.match.decimals import reals
from symcirc.match.problem import Branch, Problem, Refusal, Refused, Solutions
from symcirc.match.quantities import Quantities, is_met
from symcirc.match.refusals import contradiction, left_open, no_branch, too_few, too_many, undetermined
from symcirc.match.screening import partner_of, screened
from symcirc.match.shapes import check_order, check_shapes
from symcirc.match.system import Coefficient, System, build_system
from symcirc.match.triangular import triangular
from symcirc.match.work import DEFAULT_BOUND, Work
from symcirc.match.writing import Writer

#: Which of two refusals is told where a target may be met with either sign: the later one.
_TELLING = ("sign", "gain", "shape", "order", "target", "few", "negative", "many", "given up")


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


@dataclass(frozen=True)
class _Solvable:
    """A system with the equations to solve and those that have to follow."""

    system: System
    equations: tuple[PolyElement, ...]
    consequences: tuple[PolyElement, ...]
    refusal: Refusal  # where these do not follow
    fixed: tuple[PolyElement, ...]  # relations that the numbers of chosen quantities meet


def _branches(system: System, problem: Problem, work: Work) -> list[Branch]:
    solvable = _counted(system, problem)
    quantities = system.quantities
    found = _chains(solvable, work)
    if not found:
        if quantities.numbers:
            raise Degenerate(contradiction(problem))  # in symbols; for these numbers it may have a solution
        raise Refused(contradiction(problem))
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
    raise Refused(no_branch(failed, problem, quantities) if failed else contradiction(problem))


def _counted(system: System, problem: Problem) -> _Solvable:
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
    return _Solvable(
        system,
        tuple(relation(c) for c in independent),
        tuple(relation(c) for c in dependent),
        too_few(dependent, system, found, problem),
        tuple(fixed),
    )


def _chains(solvable: _Solvable, work: Work) -> list[Chain]:
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


def _check(candidate: Candidate, region: Region, solvable: _Solvable) -> None:
    """Put the values, where all are known, into the original equations and the conditions."""
    if None in candidate.values:
        return
    for equation in solvable.equations:
        if not is_met(equation, candidate.values, reals.mpf(10) ** -12):
            raise InternalFault(f"a solution of the match does not solve {equation} = 0")
    for claim in region.claims:
        if claim.is_missed(candidate.values):
            raise InternalFault(f"a solution of the match contradicts its condition on {claim.factors}")
