"""The space of a search: exact sets, and around each of them the values that can be had."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from math import prod

import numpy as np
import sympy
from numpy.typing import NDArray

from symcirc.complaints import Complaint, listed
from symcirc.match.formula import condition_text
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import Name
from symcirc.sheet.model import Buyable, Sheet, Value
from symcirc.values.centres import combinations, exact_sets
from symcirc.values.choices import Choices
from symcirc.values.plan import Plan
from symcirc.values.search import Axis, Counted, Space, window
from symcirc.values.series import values_between
from symcirc.values.stock import stock_of

Real = NDArray[np.float64]
#: Windows reach so many values to both sides of the exact one, where that makes no more sets than these.
REACH, MOST_SETS = 5, 10_000_000
#: More combinations of chosen parts are refused.
MOST_COMBINATIONS = 1_000_000
#: Of so many values pairs are made: some millions.
MOST_PAIRED = 2_000
#: No part's range goes on further than this from its exact values.
MOST_DECADES = 12.0


@dataclass(frozen=True)
class Posed:
    """A search made ready.

    Args:
        space: what is searched.
        counted: what is in stock of it.
        exact: for every part that is searched its value in each exact set.
        chosen: for every chosen part its choices, and the position of each exact set's one.
        reach: how many values a window reaches to both sides.
        combinations: how many combinations of chosen parts there are; 0 where none is chosen.
    """

    space: Space
    counted: Counted
    exact: Mapping[str, Real]
    chosen: Mapping[str, tuple[Choices, NDArray[np.int64]]]
    reach: int
    combinations: int


def build_space(plan: Plan, reach: int | None) -> Posed:
    """Return the space around the exact sets of a plan; ``reach`` None takes what makes a search of some seconds.

    Raises Complaint for a list that cannot be read, a range that holds nothing, a chosen part without a range, too
    many combinations of chosen parts, and where none of them has a real positive exact set.
    """
    singles = {name: _chosen_choices(plan, name) for name in plan.chosen}
    count = prod(len(choices) for choices in singles.values())
    if count > MOST_COMBINATIONS:
        raise Complaint(
            plan.buyables[plan.chosen[0]].place,
            f"{listed(plan.chosen)} have {count:,} combinations, more than {MOST_COMBINATIONS:,}",
            "narrow the ranges, take a coarser series, or fix one of them",
        )
    positions = {name: np.arange(len(choices)) for name, choices in singles.items()}
    picked = (
        combinations({name: array.astype(float) for name, array in positions.items()}) if positions else {}
    )
    values = {name: singles[name].values[picked[name].astype(int)] for name in picked}
    exact = exact_sets(plan.design.solutions, plan.known, values, plan.positives)
    centres = len(next(iter(exact.values()))) if exact else 1
    if not centres:
        raise _none_real(plan, count)
    exact |= {name: np.full(centres, plan.known[name]) for name in plan.moved}
    chosen = {name: (singles[name], _places(singles[name], exact[name])) for name in plan.chosen}
    searched = {name: exact[name] for name in (*plan.following, *plan.moved)}
    lists = _lists(plan, searched, REACH if reach is None else reach)
    if reach is None:
        reach = _affordable(searched, lists, plan, centres)
    axes = tuple(
        _axis(name, array, lists[plan.buyables[name].kind], reach) for name, array in searched.items()
    )
    held = {name: exact[name] for name in (*plan.chosen, *plan.held)}
    space = Space(axes, held, centres)
    times = _times(plan.sheet)
    return Posed(space, Counted(space, chosen, times), exact, chosen, reach, count if plan.chosen else 0)


def _axis(name: str, exact: Real, choices: Choices, reach: int) -> Axis:
    starts, width = window(choices, exact, reach)
    return Axis(name, choices, starts, width)


def _affordable(searched: Mapping[str, Real], lists: Mapping[str, Choices], plan: Plan, centres: int) -> int:
    """Return the largest reach, from 1 to REACH, that makes no more than MOST_SETS sets."""
    for reach in range(REACH, 1, -1):
        widths = [min(2 * reach + 1, len(lists[plan.buyables[name].kind])) for name in searched]
        if centres * prod(widths) <= MOST_SETS:
            return reach
    return 1


def _places(choices: Choices, values: Real) -> NDArray[np.int64]:
    """Return the positions of values that are choices, exactly."""
    return np.searchsorted(choices.values, values)


def _chosen_choices(plan: Plan, name: str) -> Choices:
    """Return all values of a chosen part, each of one piece."""
    buyable = plan.buyables[name]
    if buyable.series is not None and buyable.low is None:
        raise Complaint(
            buyable.place,
            f"`{name}` is chosen from {buyable.series}, and the line gives no range for it",
            f"add a range: parts {buyable.kind}: {buyable.series}, from LOW to HIGH",
        )
    return _choices(plan.sheet, buyable, (0.0, 0.0), pairs=False)


def _lists(plan: Plan, searched: Mapping[str, Real], reach: int) -> dict[str, Choices]:
    """Return for each kind of part the values that it can have, where no range is given those near the exact sets."""
    lists = {}
    for kind in {plan.buyables[name].kind: None for name in searched}:
        buyable = next(b for b in plan.sheet.buyables if b.kind == kind)
        exact = np.concatenate([v for name, v in searched.items() if plan.buyables[name].kind == kind])
        decades = 10.0 ** min(1 + reach / int((buyable.series or "E3")[1:]), MOST_DECADES)
        near = (float(exact.min()) / decades, float(exact.max()) * decades)
        lists[kind] = _choices(plan.sheet, buyable, near, pairs=buyable.pairs)
    return lists


def _choices(sheet: Sheet, buyable: Buyable, near: tuple[float, float], *, pairs: bool) -> Choices:
    low, high = (_bound(sheet, value) for value in (buyable.low, buyable.high))
    if buyable.series is not None:
        pieces = values_between(buyable.series, *(near if low is None or high is None else (low, high)))
        counts = None
    else:
        held = stock_of(sheet, buyable)
        stock = [s for s in held if low is None or high is None or low <= s.value <= high]
        pieces, counts = tuple(s.value for s in stock), [s.count for s in stock]
    if not pieces:
        raise Complaint(
            buyable.place, f"no value of parts {buyable.kind} lies in the range", "widen the range"
        )
    if pairs and len(pieces) > MOST_PAIRED:
        raise Complaint(
            buyable.place,
            f"{len(pieces):,} values make too many pairs; more than {MOST_PAIRED:,} are not paired",
            "narrow the range, or leave out `pairs`",
        )
    return Choices(buyable.kind, pieces, pairs=pairs, counts=counts)


def _bound(sheet: Sheet, value: Value | None) -> Fraction | None:
    """Return an end of a range; one that is no fraction is taken to 30 digits."""
    if value is None:
        return None
    number = sympy.nsimplify(sympy.N(exact_number(value.expression, sheet.numbers), 30), rational=True)
    return Fraction(int(number.p), int(number.q))


def _times(sheet: Sheet) -> dict[str, int]:
    """Return how many parts have each part's value: itself, and those that are tied to be equal to it."""
    times: dict[str, int] = {}
    for part in sheet.parts:
        name, tie = part.name, sheet.ties.get(part.name)
        while isinstance(tie, Name):
            name, tie = tie.text, sheet.ties.get(tie.text)
        times[name] = times.get(name, 0) + 1
    return times


def _none_real(plan: Plan, count: int) -> Complaint:
    first = plan.design.solutions[0].branch
    conditions = [condition_text(c).replace("**", "^") for c in first.conditions]
    needed = f": the first solution needs {listed(conditions[:3])}" if conditions else ""
    return Complaint(
        plan.buyables[plan.chosen[0]].place if plan.chosen else plan.design.goal.target.place,
        f"none of the {count:,} combinations of {listed(plan.chosen)} makes a solution of the design equations "
        f"real and positive{needed}",
        "widen the range of what can be bought",
    )
