"""A design with names for the numbers of its target: what a workbook recalculates."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import sympy

from symcirc.cascade.assignment import Section
from symcirc.cascade.gains import denominator, numerator
from symcirc.cascade.search import StageMatch, stage_words
from symcirc.design import Design, Whole
from symcirc.goal import Goal, symbol
from symcirc.match.problem import Branch, Problem, Solutions
from symcirc.match.solve import solve
from symcirc.progress import Progress, silent
from symcirc.report.match_facts import chosen_names
from symcirc.transfer.function import TransferFunction
from symcirc.workbook.goal import Quantity, fresh, known_numbers, live_goal
from symcirc.workbook.sections import following, named_section, scale_of

#: By how much a solution in names may differ, at the sheet's numbers, from the one that was proved.
AGREEMENT = 1e-11


@dataclass(frozen=True)
class LiveStage:
    """A stage with its design equations in the names of inputs and parts.

    ``branches`` are in the order of the proved ones. ``is_live`` tells whether the target's numbers are names in
    them; where not, they are the proved ones themselves. ``own_gain`` is the stage's gain as a formula, None where
    it is ``shared``: that is the quantity for its share of what the other stages leave, None where it has none.
    """

    heading: str
    problem: Problem
    branches: tuple[Branch, ...]
    is_live: bool
    own_gain: sympy.Expr | None
    shared: Quantity | None

    @property
    def function(self) -> TransferFunction:
        """The stage's ratio."""
        return self.problem.function


@dataclass(frozen=True)
class LiveDesign:
    """A design with its inputs; ``solutions`` say which branch of each stage a solution takes."""

    design: Design
    goal: Goal
    inputs: tuple[Quantity, ...]
    stages: tuple[LiveStage, ...]
    solutions: tuple[tuple[int, ...], ...]


def live_design(design: Design, progress: Progress = silent) -> LiveDesign:
    """Return a design, which must have solutions, with its target's numbers as inputs.

    The equations are solved once more with names for these numbers, and each solution is compared with the one
    that was proved; a stage where they do not agree keeps its proved equations.
    """
    progress("solving with names for the target's numbers")
    sheet = design.derivation.sheet
    goal, words = live_goal(sheet, design.goal)
    given = [_given(design, name) for name in _given_names(design)]
    if design.cascade is None:
        assert design.whole is not None
        return _whole(design, design.whole, goal, (*words, *given))
    if goal.target.expression is not None:
        goal, words = design.goal, ()
    scale = scale_of(design.goal, words)
    words = following(words, scale)
    sections = [named_section(match, scale, sheet.symbols) for match in design.cascade.stages]
    quantities = tuple(q for _, own in sections for q in own)
    stages = tuple(
        _stage(match, section, quantities, design)
        for match, (section, _) in zip(design.cascade.stages, sections, strict=True)
    )
    chosen = tuple(
        tuple(_taken(match.branches, solution.branch) for match in design.cascade.stages)
        for solution in design.solutions
    )
    return LiveDesign(design, goal, (*words, *quantities, *given), stages, chosen)


def _given_names(design: Design) -> list[str]:
    """Return the names that are inputs: those that stand in formulas as given, and what else has a number."""
    sheet = design.derivation.sheet
    problems = [design.whole.problem] if design.whole else [m.problem for m in _matches(design)]
    held = {str(x) for p in problems for e in p.positives.values() for x in e.free_symbols}
    needed = held - set(design.unknowns)
    wanted = [*chosen_names(design), *(n for n in sheet.symbols if n in needed or n in sheet.numbers)]
    return list(dict.fromkeys(wanted))


def _matches(design: Design) -> Sequence[StageMatch]:
    return design.cascade.stages if design.cascade else ()


def _given(design: Design, name: str) -> Quantity:
    sheet = design.derivation.sheet
    dimension = sheet.symbols[name].dimension
    unit = dimension if dimension not in (None, "ratio") else ""
    meaning = "as the sheet gives it" if name in sheet.numbers else "chosen by the designer: fill it in"
    if name not in design.present:
        meaning += "; the ratio does not hold it"
    return Quantity(name, str(unit), sheet.numbers.get(name), None, meaning)


# one stage --------------------------------------------------------------------------------------------------


def _whole(design: Design, whole: Whole, goal: Goal, inputs: tuple[Quantity, ...]) -> LiveDesign:
    proved = tuple(solution.branch for solution in design.solutions)
    named = replace(
        whole.problem,
        target_numerator=goal.numerator,
        target_denominator=goal.denominator,
        known={**whole.problem.known, **known_numbers(inputs)},
    )
    branches = _solved(named, proved)
    stage = LiveStage("design equations", named, branches or proved, branches is not None, None, None)
    return LiveDesign(design, goal, inputs, (stage,), tuple((k,) for k in range(len(proved))))


def _solved(problem: Problem, proved: Sequence[Branch]) -> tuple[Branch, ...] | None:
    """Return the solutions of a problem in the order of the proved ones; None where they do not agree."""
    outcome = solve(problem)
    if not isinstance(outcome, Solutions) or len(outcome.branches) < len(proved):
        return None
    found = [next((b for b in outcome.branches if _agree(b.values, p.values)), None) for p in proved]
    if any(None in p.values.values() for p in proved) and len(outcome.branches) == len(proved):
        return outcome.branches
    kept = tuple(b for b in found if b is not None)
    return kept if len(kept) == len(proved) else None


def _agree(one: Mapping[str, float | None], other: Mapping[str, float | None]) -> bool:
    return one.keys() == other.keys() and all(
        value is not None and known is not None and abs(value - known) <= AGREEMENT * abs(known)
        for value, known in ((one[name], other[name]) for name in other)
    )


# a cascade --------------------------------------------------------------------------------------------------


def _stage(
    match: StageMatch, section: Section, quantities: tuple[Quantity, ...], design: Design
) -> LiveStage:
    high = design.goal.numerator[0] == 0
    above, below = numerator(section, high), denominator(section)
    shared = None
    if match.shares and match.gain is not None:
        name = fresh(f"gain_{match.stage.number}", design.derivation.sheet.symbols)
        meaning = "its share of the gain that the other stages leave"
        shared = Quantity(name, "", match.gain if match.gain.is_number else None, match.gain, meaning)
        above = tuple(symbol(name) * c for c in above)
    named = replace(
        match.problem,
        target_numerator=above,
        target_denominator=below,
        known={
            **match.problem.known,
            **known_numbers(quantities),
            **known_numbers([shared] if shared else []),
        },
    )
    no_equations = not match.branches[0].equations
    branches = match.branches if no_equations else _solved(named, match.branches)
    own = None if shared else _own_gain(match.problem.function, above, below)
    return LiveStage(
        stage_words(match.stage), named, branches or match.branches, branches is not None, own, shared
    )


def _own_gain(
    function: TransferFunction, above: Sequence[sympy.Expr], below: Sequence[sympy.Expr]
) -> sympy.Expr:
    """Return a stage's gain as a formula in its parts and its section's names."""
    k = next(k for k, c in enumerate(above) if c != 0 and below[k] != 0)
    ratio = function.numerator[k].as_expr() / function.denominator[k].as_expr()
    return ratio * below[k] / above[k]


def _taken(branches: Sequence[Branch], whole: Branch) -> int:
    """Return which of a stage's branches stands in a solution of the whole."""
    return next(k for k, b in enumerate(branches) if all(whole.values[n] == v for n, v in b.values.items()))
