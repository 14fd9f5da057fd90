"""From a sheet's target to the design of its stage: the match, and the proof of every solution."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import sympy

from symcirc.complaints import Complaint, Remark, nearest
from symcirc.derivation import MOST_PRODUCTS, Answer, BigAnswer, Derivation, derive, pose
from symcirc.goal import Goal, build_goal, symbol, target_symbols
from symcirc.match.problem import Branch, Problem, Refusal
from symcirc.match.solve import solve
from symcirc.progress import Progress, silent
from symcirc.proof import prove
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import names
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Sheet, Target
from symcirc.transfer.function import symbols_in
from symcirc.transfer.ties import natural_key


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
    """What a match comes to; ``refusal`` says why where there is no solution."""

    derivation: Derivation
    answer: Answer
    goal: Goal
    problem: Problem
    solutions: tuple[Solution, ...]
    refusal: Refusal | None
    remarks: tuple[Remark, ...]


def design(sheet: Sheet, ask: str | None = None, progress: Progress = silent) -> Design:
    """Solve for the parts that make the asked ratio meet its target.

    Raises Complaint where the sheet has no target, or two and ``ask`` is None; where a circuit or a target cannot
    be used; and where too many parts are free. Raises InternalFault where a solution does not give the target.
    """
    target = pick_target(sheet, ask)
    derivation = derive(pose(sheet), {target.ask}, MOST_PRODUCTS, progress)
    answer = _expanded(derivation, target)
    goal = build_goal(sheet, target)
    problem = build_problem(sheet, answer, goal)

    def keep_going() -> bool:
        progress("solving the design equations")
        return False

    outcome = solve(problem, should_stop=keep_going)
    if isinstance(outcome, Refusal):
        if outcome.kind in ("many", "target"):
            raise Complaint(target.place, outcome.cause, outcome.mend)
        return Design(derivation, answer, goal, problem, (), outcome, derivation.remarks)
    progress("proving the solutions")
    solutions = tuple(_solution(derivation, answer, goal, problem, branch) for branch in outcome.branches)
    return Design(derivation, answer, goal, problem, solutions, None, derivation.remarks)


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


def build_problem(sheet: Sheet, answer: Answer, goal: Goal) -> Problem:
    """Return what is to be solved: parts that are neither fixed nor chosen, and parameters behind ``solve``."""
    present = symbols_in(answer.function)
    set_aside = set(sheet.fixes) | set(sheet.chosen)
    unknowns = [
        name
        for name, s in sheet.symbols.items()
        if name in present and name not in set_aside and (s.role == "part" or name in sheet.solved)
    ]
    for name in target_symbols(goal.target):
        if name.text in unknowns or name.text in sheet.ties:
            raise Complaint(
                name.place,
                f"`{name.text}` stands in the target, so it cannot be solved for",
                f"choose {name.text}",
            )
    return Problem(
        function=answer.function,
        target_numerator=goal.numerator,
        target_denominator=goal.denominator,
        gain=goal.gain,
        unknowns=tuple(unknowns),
        known=sheet.numbers,
        free_unknowns=frozenset(n for n in unknowns if sheet.symbols[n].dimension in (None, "ratio")),
        positives=_tied_parts(sheet),
        units={name: s.dimension for name, s in sheet.symbols.items() if s.dimension not in (None, "ratio")},
    )


def _tied_parts(sheet: Sheet) -> dict[str, sympy.Expr]:
    """Return the tied resistors, capacitors and inductors as expressions in names that are not tied."""
    expressions: dict[str, sympy.Expr] = {}
    for name in tie_order(sheet.ties):
        tie = sheet.ties[name]
        if any(n.text == "s" for n in names(tie)):
            continue
        known = {n.text: expressions.get(n.text, symbol(n.text)) for n in names(tie) if n.text != "pi"}
        expressions[name] = exact_number(tie, known)
    parts = {name for name, s in sheet.symbols.items() if s.role == "part"}
    return {name: expression for name, expression in expressions.items() if name in parts}


def _solution(
    derivation: Derivation, answer: Answer, goal: Goal, problem: Problem, branch: Branch
) -> Solution:
    sheet = derivation.sheet
    factor = prove(derivation, answer, goal, branch, sheet.numbers)
    exact: dict[str, sympy.Expr] = dict(sheet.numbers)
    exact |= {name: sympy.Float(value, 17) for name, value in branch.values.items() if value is not None}
    for name, expression in problem.positives.items():
        value = expression.subs({symbol(n): v for n, v in exact.items()})
        if value.is_number:
            exact[name] = value
    parts = [name for name, s in sheet.symbols.items() if s.role == "part" or name in branch.values]
    values = {name: float(exact[name]) for name in sorted(parts, key=natural_key) if name in exact}
    sign = 0 if factor is None else 1 if factor > 0 else -1
    return Solution(branch, values, sign, _gain(goal, branch, factor))


def _gain(goal: Goal, branch: Branch, factor: Any) -> float | None:
    """Return the nominal gain of the stage, where it is a number and was not found at random values."""
    if factor is None or goal.nominal is None or goal.nominal.free_symbols or None in branch.values.values():
        return None
    return float(factor * sympy.N(goal.nominal, 20))
