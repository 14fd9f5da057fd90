"""The solutions of a cascade: every solution of one stage goes with every one of the others."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import islice, product
from math import prod
from typing import Any

from symcirc.cascade.search import Found, StageMatch
from symcirc.match.problem import Branch
from symcirc.proof import prove
from symcirc.transfer.function import symbols_in

#: So many solutions of a whole cascade are listed; ten stages of two solutions each would have 1024.
MOST_SOLUTIONS = 64


@dataclass(frozen=True)
class Combination:
    """A solution of the whole: ``branch`` has all the equations, ``choice`` says which solution of each stage."""

    branch: Branch
    choice: tuple[int, ...]


def combinations(found: Found, factors: Sequence[Sequence[Any]]) -> tuple[list[Combination], bool]:
    """Return the solutions of the whole, and whether there are more of them than are listed.

    Equations come in the order of the stages; those of one stage hold no part of another that is solved for.
    ``factors`` are the stages' own; where the target binds the sign, those of the wrong sign are left out.
    """
    choices = product(*(range(len(match.branches)) for match in found.stages))
    meant = (choice for choice in choices if _has_sign(found.sign, product_factor(factors, choice)))
    listed = [_joined(found, choice) for choice in islice(meant, MOST_SOLUTIONS)]
    return listed, next(meant, None) is not None


def _has_sign(sign: int, factor: Any) -> bool:
    return not sign or factor is None or factor * sign > 0


def covering(combined: Sequence[Combination]) -> list[Combination]:
    """Return few of the combinations in which every solution of every stage that stands in them stands once."""
    seen: set[tuple[int, int]] = set()
    kept = []
    for one in reversed(combined):
        new = set(enumerate(one.choice)) - seen
        if new:
            kept.append(one)
            seen |= new
    return kept


def _joined(found: Found, choice: tuple[int, ...]) -> Combination:
    branches = [match.branches[k] for match, k in zip(found.stages, choice, strict=True)]
    equations = tuple(e for branch in branches for e in branch.equations)
    conditions = tuple(dict.fromkeys(c for branch in branches for c in branch.conditions))
    values = {name: value for branch in branches for name, value in branch.values.items()}
    return Combination(Branch(equations, conditions, values), choice)


def stage_factors(match: StageMatch) -> tuple[Any, ...]:
    """Prove every solution of a stage in the stage's own circuit; return the factors over its target.

    Raises InternalFault where a stage departs from its share of the target.
    """
    stage = match.stage
    present, numbers = symbols_in(stage.answer.function), stage.sheet.numbers
    return tuple(
        prove(stage.derivation, stage.answer.setup, present, match.goal, branch, numbers)
        for branch in match.branches
    )


def product_factor(factors: Sequence[Sequence[Any]], choice: tuple[int, ...]) -> Any:
    """Return the product of the stages' factors for a choice, None where one was not found."""
    chosen = [row[k] for row, k in zip(factors, choice, strict=True)]
    return None if None in chosen else prod(chosen)
