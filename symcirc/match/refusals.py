"""The sentences that say why a target is not met."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

import sympy

from symcirc.complaints import listed
from symcirc.match.candidates import Candidate
from symcirc.match.claims import Claim
from symcirc.match.counting import Count, groups_to_choose
from symcirc.match.decimals import reals
from symcirc.match.engineering import engineering
from symcirc.match.formula import condition_text, equation_text
from symcirc.match.inequalities import condition
from symcirc.match.names import natural
from symcirc.match.problem import Condition, Problem, Refusal
from symcirc.match.quantities import Quantities, holds_any
from symcirc.match.screening import name_of, partner_of
from symcirc.match.system import Coefficient, System

_WRONG = {">": "is not more than", ">=": "is less than", "<": "is not less than", "<=": "is more than"}


def too_many(system: System, found: Count, problem: Problem) -> Refusal:
    """Return the refusal of a problem with more unknowns than the target can set."""
    surplus = len(problem.unknowns) - found.rank
    groups = groups_to_choose(system, found, problem.units)
    offered = "; or ".join(listed(group) for group in groups[:4])
    values = "value" if found.rank == 1 else "values"
    return Refusal(
        "many",
        f"the target sets {found.rank} {values}, and {len(problem.unknowns)} parts are free: "
        f"{listed(problem.unknowns)}",
        f"choose {surplus} of them: {offered}" if groups else f"choose {surplus} of them",
        groups,
    )


def left_open(names: Sequence[str]) -> Refusal:
    """Return the refusal of a problem whose equations leave parts open."""
    groups = tuple((name,) for name in names)
    return Refusal(
        "many", f"the target leaves {listed(names)} open", f"choose {listed(names, last='or')}", groups
    )


def too_few(coefficients: Iterable[Coefficient], system: System, found: Count, problem: Problem) -> Refusal:
    """Return the refusal of a problem in which some coefficients follow from others and miss their targets."""
    order = problem.function.order
    names = [
        name_of(c, partner_of(c, system, found.references[-1 if c.where == "numerator" else 0]), order)
        for c in coefficients
    ]
    verb = "follow" if len(names) > 1 else "follows"
    free = listed(problem.unknowns) if problem.unknowns else "nothing"
    return Refusal(
        "few",
        f"{listed(names)} {verb} from the others and cannot be met: only {free} can be solved for",
        "leave more parts to be solved for, or untie parts that are tied together",
    )


def contradiction(problem: Problem, quantities: Quantities) -> Refusal:
    """Return the refusal of a problem without a positive solution, whatever is chosen of what is left a symbol."""
    symbols = {str(s) for s in problem.function.ring.symbols} - {*problem.unknowns, "pi"}
    left = symbols & {quantities.name(k) for k in range(quantities.ring.ngens)}
    chosen = listed(sorted(left, key=natural), last="or")
    whatever = f", whatever the values of {chosen}" if chosen else ""
    return Refusal(
        "negative",
        f"no positive {listed([*problem.unknowns, *problem.positives])} give this target{whatever}",
        "ask for another target, or leave other parts to be solved for",
    )


def none_positive(problem: Problem, neighbour: tuple[str, sympy.Expr] | None) -> Refusal:
    """Return the refusal of numbers for which all solutions were found and none is positive.

    ``neighbour`` is a part with another number for which there is a solution.
    """
    mend = "change the ratios of the chosen values, or leave other parts to be solved for"
    if neighbour is not None:
        name, number = neighbour
        mend = f"{name} = {engineering(float(number), problem.units[name])} would do, the rest as given"
    parts = listed([*problem.unknowns, *problem.positives])
    return Refusal("negative", f"no positive {parts} give this target with the given values", mend)


def no_formula(symbols: Iterable[str]) -> Refusal:
    """Return the refusal of a problem that has solutions in numbers, with symbols left in it."""
    names = listed(sorted(symbols, key=natural))
    return Refusal(
        "given up",
        f"the design equations of this stage have no short formulas in {names}",
        f"fix a number for {names}: then the solutions are found in numbers",
    )


def undetermined() -> Refusal:
    """Return the refusal of numbers for which formulas divide by zero however the equations are solved."""
    return Refusal(
        "given up",
        "for these numbers the design equations divide by zero",
        "change one of the chosen values a little, or leave other parts to be solved for",
    )


def no_branch(
    failed: Sequence[tuple[Candidate, Sequence[Claim] | None]], problem: Problem, quantities: Quantities
) -> Refusal:
    """Return the refusal of numbers that no candidate is real and positive for.

    Args:
        failed: the candidates, each with its claims (None where it is never positive).
        problem: for units and numbers.
        quantities: the ring.
    """
    missed = [
        (any(holds_any(f, quantities.unknowns) for f in claim.factors), k, claim, candidate)
        for candidate, claims in failed
        for k, claim in enumerate(claims or ())
        if claim.is_missed(candidate.values)
    ]
    failing = [candidate for candidate, _ in failed if candidate.fails]
    if missed:
        in_parts, _, claim, candidate = min(missed, key=lambda entry: entry[:2])
        if not (in_parts and failing):
            return _violated(condition(claim, quantities), candidate, problem, quantities)
    if not failing:
        return contradiction(problem, quantities)
    form = failing[0].forms[len(failing[0].choices) - 1]
    name, value = quantities.name(form.unknown), failing[0].values[form.unknown]
    if reals.isnan(value):
        cause = f"the equation for {name} has no positive root for these numbers"
    else:
        cause = f"{name} would have to be {engineering(float(value), problem.units.get(name, ''))}"
    return Refusal("negative", cause, "choose other values, or leave other parts to be solved for")


def _violated(violated: Condition, candidate: Candidate, problem: Problem, quantities: Quantities) -> Refusal:
    """Return the refusal that tells a condition and the numbers that are against it."""
    return Refusal(
        "negative",
        violation(violated, _numbers(candidate, quantities), problem.units),
        f"choose values with {condition_text(violated)}",
        condition=violated,
    )


def _numbers(candidate: Candidate, quantities: Quantities) -> dict[str, Any]:
    return {str(quantities.meanings[k]): v for k, v in enumerate(candidate.values) if v is not None}


def violation(violated: Condition, numbers: Mapping[str, Any], units: Mapping[str, str]) -> str:
    """Return the sentence that says by which numbers a condition is violated.

    >>> C1, C2 = sympy.symbols("C1 C2")
    >>> violation(Condition(C1, ">=", 2 * C2), {"C1": 1e-8, "C2": 2.2e-8}, {"C1": "F", "C2": "F"})
    'C1 = 10 nF is less than 2*C2 = 44 nF'
    """
    unit = units.get(str(violated.left), "") if violated.left.is_Symbol else ""
    sides = [_side(side, numbers, unit) for side in (violated.left, violated.right)]
    return f"{sides[0]} {_WRONG[violated.relation]} {sides[1]}"


def _side(expression: sympy.Expr, numbers: Mapping[str, Any], unit: str) -> str:
    replaced = {s: sympy.Float(float(numbers[str(s)])) for s in expression.free_symbols if str(s) in numbers}
    value = expression.evalf(subs=replaced)
    if not expression.free_symbols:
        return engineering(float(value), unit)
    return f"{equation_text(expression)} = {engineering(float(value), unit)}"
