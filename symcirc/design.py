"""From a sheet's target to the design of its stage: the match, and the proof of every solution."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Any

import sympy

from symcirc.cascade.combine import MOST_SOLUTIONS, combinations, covering, product_factor, stage_factors
from symcirc.cascade.factors import Factored, factored
from symcirc.cascade.search import Found, search
from symcirc.cascade.stages import Stage, cascade_stages
from symcirc.circuit.model import Setup
from symcirc.complaints import Complaint, Remark, nearest
from symcirc.derivation import MOST_PRODUCTS, Answer, BigAnswer, Derivation, Posed, derive, pose
from symcirc.goal import Goal, build_goal, symbol
from symcirc.match.problem import Branch, Problem, Refusal
from symcirc.match.ranges import Range, ranges
from symcirc.match.solve import FEWEST_FOR_NUMBERS, solve
from symcirc.posing import build_problem, unknowns_in
from symcirc.progress import Progress, silent
from symcirc.proof import prove
from symcirc.sheet.model import Ask, Sheet, Target
from symcirc.transfer.function import symbols_in
from symcirc.transfer.ties import natural_key

#: Where a stage's equations have more complex solutions, the borders of its ranges are not looked for.
MOST_FOR_RANGES = 8


@dataclass(frozen=True)
class Solution:
    """A branch of the match with the values of every part that has one, in SI base units.

    ``sign`` is that of the stage's gain against the target's, as the numeric solve of the circuit showed it with
    these values, or with random ones of the symbols; 0 where no values were found for that proof. ``gain`` is the
    nominal gain that the stage gives, sign included, where the target's is a number.
    """

    branch: Branch
    values: Mapping[str, float]
    sign: int
    gain: float | None


@dataclass(frozen=True)
class Design:
    """What a match comes to; ``refusal`` says why where there is no solution.

    ``whole`` is the stage as one problem, ``cascade`` the stages with what each takes of the target. A cascade that
    was refused has neither; ``present`` are the names in the ratio. ``ranges`` say where parts with a number may lie,
    where no short condition says so: for stages of three poles and more, and for numbers that allow no solution.
    """

    derivation: Derivation
    ask: Ask
    goal: Goal
    present: frozenset[str]
    unknowns: tuple[str, ...]
    whole: Whole | None
    cascade: Found | None
    solutions: tuple[Solution, ...]
    refusal: Refusal | None
    remarks: tuple[Remark, ...]
    ranges: tuple[Range, ...] = ()


@dataclass(frozen=True)
class Whole:
    """A stage that was solved as one problem."""

    answer: Answer
    problem: Problem


def design(sheet: Sheet, ask: str | None = None, progress: Progress = silent) -> Design:
    """Solve for the parts that make the asked ratio meet its target.

    Stages that are separable are matched one by one, as :mod:`symcirc.cascade` shares the target out.

    Raises Complaint where the sheet has no target, or two and ``ask`` is None; where a circuit or a target cannot
    be used; and where too many parts are free. Raises InternalFault where a solution does not give the target.
    """
    target = pick_target(sheet, ask)
    posed = pose(sheet)
    stages = cascade_stages(posed, target.ask, progress)
    if stages:
        goal = build_goal(sheet, target)
        factors = factored(goal)
        if factors is not None:
            return _cascade(posed, stages, goal, factors, progress)
    return _whole(posed, target, progress)


def _whole(posed: Posed, target: Target, progress: Progress) -> Design:
    derivation = derive(posed, {target.ask}, MOST_PRODUCTS, progress)
    answer = _expanded(derivation, target)
    goal = build_goal(posed.sheet, target)
    problem = build_problem(posed.sheet, answer, goal)

    def keep_going() -> bool:
        progress("solving the design equations")
        return False

    outcome = solve(problem, should_stop=keep_going)
    present = frozenset(symbols_in(answer.function))
    begun = Design(
        derivation,
        answer.ask,
        goal,
        present,
        problem.unknowns,
        Whole(answer, problem),
        None,
        (),
        None,
        derivation.remarks,
    )
    if isinstance(outcome, Refusal):
        if outcome.kind in ("many", "target"):
            raise Complaint(target.place, outcome.cause, outcome.mend)
        progress("looking for values that would do")
        is_short = len(problem.unknowns) < FEWEST_FOR_NUMBERS
        where = ranges(problem) if outcome.kind == "negative" and is_short else ()
        return replace(begun, refusal=outcome, ranges=where)
    progress("proving the solutions")
    factors = [
        prove(derivation, answer.setup, present, goal, branch, posed.sheet.numbers)
        for branch in outcome.branches
    ]
    solutions = (
        _solution(begun, branch, problem.positives, factor)
        for branch, factor in zip(outcome.branches, factors, strict=True)
    )
    return replace(begun, solutions=tuple(solutions), ranges=_ranges(problem, outcome.branches))


def _cascade(
    posed: Posed, stages: tuple[Stage, ...], goal: Goal, factors: Factored, progress: Progress
) -> Design:
    """Share a target out among the stages, and prove what they come to together."""
    unexpanded = 0  # products: the whole stays a decision diagram, as expanded it may be huge
    derivation = derive(posed, {goal.target.ask}, unexpanded, progress)
    functions = [stage.answer.function for stage in stages]
    unknowns = (name for s in stages for name in unknowns_in(s.sheet, s.answer.function))
    begun = Design(
        derivation,
        derivation.answers[0].ask,
        goal,
        frozenset().union(*map(symbols_in, functions)),
        tuple(unknowns),
        None,
        None,
        (),
        None,
        derivation.remarks,
    )
    found = search(stages, goal, factors, progress)
    if isinstance(found, Refusal):
        return replace(begun, refusal=found)
    progress("proving the solutions")
    return _proved(replace(begun, cascade=found), posed.setups[goal.target.ask], found)


def _proved(begun: Design, setup: Setup, found: Found) -> Design:
    """Return the design of a cascade with its solutions.

    Each solution of a stage is proved in that stage, and with the others in the whole circuit, once or more: the
    whole is the product of its stages, so that the factor of the other combinations follows.
    """
    positives = {name: e for match in found.stages for name, e in match.problem.positives.items()}
    factors = [stage_factors(match) for match in found.stages]
    combined, more = combinations(found, factors)
    if not combined:
        cause = "the stages' gains together have the other sign"
        return replace(begun, cascade=None, refusal=Refusal("gain", cause, "turn the target's sign"))
    numbers = begun.derivation.sheet.numbers
    scales = [
        _quotient(
            prove(begun.derivation, setup, begun.present, begun.goal, one.branch, numbers),
            product_factor(factors, one.choice),
        )
        for one in covering(combined)
    ]
    solutions = tuple(
        _solution(begun, one.branch, positives, _product(scales[0], product_factor(factors, one.choice)))
        for one in combined
    )
    remarks = (*begun.remarks, *_more(begun.goal, more))
    where = tuple(r for match in found.stages for r in _ranges(match.problem, match.branches))
    return replace(begun, solutions=solutions, remarks=remarks, ranges=where)


def _ranges(problem: Problem, branches: tuple[Branch, ...]) -> tuple[Range, ...]:
    """Return where the parts with numbers may lie, if the conditions do not say it in a formula."""
    is_long = any(equation.degree > 2 for branch in branches for equation in branch.equations)
    of_complex = max((branch.of_complex for branch in branches), default=0)
    return ranges(problem) if is_long and of_complex <= MOST_FOR_RANGES else ()


def _quotient(one: Any, other: Any) -> Any:
    return None if one is None or other is None else one / other


def _product(one: Any, other: Any) -> Any:
    return None if one is None or other is None else one * other


def _expanded(derivation: Derivation, target: Target) -> Answer:
    (answer,) = derivation.answers
    if isinstance(answer, BigAnswer):
        raise Complaint(
            target.place,
            f"`{target.ask}` is too big to be matched: it has {sum(answer.products):,} products",
            "match its sections one by one",
        )
    return answer


def pick_target(sheet: Sheet, ask: str | None) -> Target:
    """Return the target of the named ask, or the only one; raises Complaint where there is none or a choice."""
    if not sheet.targets:
        raise Complaint(
            sheet.asks[0].place,
            "the sheet has no target to match",
            f"add a line such as: target {sheet.asks[0].name}: lowpass butterworth, order 2, edge 1 kHz",
        )
    if ask is None:
        if len(sheet.targets) > 1:
            known = ", ".join(target.ask for target in sheet.targets)
            raise Complaint(
                sheet.targets[1].place,
                f"the sheet has more than one target ({known})",
                "say which: --ask NAME",
            )
        return sheet.targets[0]
    for target in sheet.targets:
        if target.ask == ask:
            return target
    known_targets = [target.ask for target in sheet.targets]
    raise Complaint(
        sheet.targets[0].place,
        f"there is no target for `{ask}`",
        nearest(ask, known_targets) or f"the targets are for {', '.join(known_targets)}",
    )


def _solution(begun: Design, branch: Branch, positives: Mapping[str, sympy.Expr], factor: Any) -> Solution:
    """Return a branch with the values of all parts; ``factor`` is by how much the proof found it above the target."""
    values = part_values(begun.derivation.sheet, branch, positives)
    sign = 0 if factor is None else 1 if factor > 0 else -1
    return Solution(branch, values, sign, _gain(begun.goal, branch, factor))


def part_values(sheet: Sheet, branch: Branch, positives: Mapping[str, sympy.Expr]) -> dict[str, float]:
    """Return the values of a sheet's parts, solved, fixed and tied ones (``positives``), those that have one."""
    exact: dict[str, sympy.Expr] = dict(sheet.numbers)
    exact |= {name: sympy.Float(value, 17) for name, value in branch.values.items() if value is not None}
    for name, expression in positives.items():
        value = expression.subs({symbol(n): v for n, v in exact.items()})
        if value.is_number:
            exact[name] = value
    parts = [name for name, s in sheet.symbols.items() if s.role == "part" or name in branch.values]
    return {name: float(exact[name]) for name in sorted(parts, key=natural_key) if name in exact}


def _gain(goal: Goal, branch: Branch, factor: Any) -> float | None:
    """Return the nominal gain of the stage, where it is a number and was not found at random values."""
    if factor is None or goal.nominal is None or goal.nominal.free_symbols or None in branch.values.values():
        return None
    return float(factor * sympy.N(goal.nominal, 20))


def _more(goal: Goal, more: bool) -> tuple[Remark, ...]:
    """Return the remark that there are more solutions than are listed."""
    text = f"only {MOST_SOLUTIONS} combinations of the stages' solutions are listed; there are more"
    return (Remark(goal.target.place, text),) if more else ()
