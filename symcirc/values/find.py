"""From a sheet to ranked sets of preferred values."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import sympy
from numpy.typing import NDArray

from symcirc.complaints import InternalFault
from symcirc.goal import Goal
from symcirc.progress import Progress, silent
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import names
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Sheet
from symcirc.transfer.ties import natural_key
from symcirc.values.arithmetic import Coefficients
from symcirc.values.band import Band, Response, band, response
from symcirc.values.centres import are_positive
from symcirc.values.choices import Choice
from symcirc.values.departure import LevelDeparture, Measure, VectorDeparture
from symcirc.values.plan import Plan, plan
from symcirc.values.poles import PolePair, Shift, pole_pairs, shifts
from symcirc.values.search import Kept, search
from symcirc.values.space import Posed, build_space

Real = NDArray[np.float64]
#: So many sets are kept by the search, at least, to be compared over all frequencies of the band.
_KEPT = 500
#: An exact set may depart from the target by no more than this, in dB: more is no rounding.
_EXACT = 1e-3


@dataclass(frozen=True)
class ChosenSet:
    """A set of preferred values, and what it does.

    Args:
        preferred: for every part that was searched what to buy, in natural order.
        exact: for the same parts the exact values that the set stands for, in SI base units; of a chosen part that
            is its preferred value, of one that was fixed its number.
        held: names that are set to their exact number: what the design equations give and cannot be bought.
        values: every part of the sheet that has a value, fixed and tied ones too, in SI base units.
        departure: worst departure from the target over its band, in dB.
        shifts: of each pole pair of the target.
        spread: largest over smallest value of each kind of part.
        capacitance: of all capacitors, in farad.
    """

    preferred: Mapping[str, Choice]
    exact: Mapping[str, float]
    held: Mapping[str, float]
    values: Mapping[str, float]
    departure: float
    shifts: tuple[Shift, ...]
    spread: Mapping[str, float]
    capacitance: float


@dataclass(frozen=True)
class Found:
    """The best sets of a search, best first.

    Args:
        sets: ranked.
        band: over which the target was compared.
        poles: the target's pole pairs.
        searched: how many sets were searched, of ``size``; fewer only where it was stopped.
        reach: how many preferred values a window reaches to both sides of the exact value.
        centres: how many exact sets there are, of so many ``combinations`` of chosen parts (0: none is chosen).
        left_out: no set that was searched and is not here departs by less than this, in dB; None where all are here.
    """

    plan: Plan
    sets: tuple[ChosenSet, ...]
    band: Band
    poles: tuple[PolePair, ...]
    searched: int
    size: int
    complete: bool
    reach: int
    centres: int
    combinations: int
    left_out: float | None


@dataclass(frozen=True)
class Options:
    """How to search: see :func:`find_values`."""

    best: int = 10
    reach: int | None = None
    together: bool = False


def find_values(
    sheet: Sheet, ask: str | None = None, options: Options | None = None, progress: Progress = silent
) -> Found:
    """Return the best sets of preferred values for a sheet's target.

    Parts that the sheet chooses take every value of their range, one piece each; for each combination of them the
    design equations give the exact values of the others, and every combination of preferred values in a window
    around these is searched.

    Args:
        sheet: with a target and `parts` lines.
        ask: whose target; None where there is only one.
        options: ``best`` sets are returned; windows ``reach`` so many values to both sides of the exact one (None:
            5, or fewer where that would be too many sets); ``together`` moves parts fixed to a number as well.
        progress: is told the count and the time left.

    Raises Complaint as :func:`symcirc.values.plan.plan` and :func:`symcirc.values.space.build_space` say. Ctrl-C ends
    the search early, with the best so far and ``complete`` false; InternalFault where an exact set is none.

    The ranking holds over the whole band although the search looks at few frequencies of it: the departure at these is
    never larger than over all, so a set that was left out departs by at least the ``threshold`` of what was kept.
    """
    options = options or Options()
    planned = plan(sheet, ask, options.together, progress)
    posed = build_space(planned, options.reach)
    goal = planned.design.goal
    target = _target(goal)
    compared = band(target, None if goal.nominal is None else float(sympy.N(goal.nominal, 20)))
    known = {name: number for name, number in planned.known.items() if name not in planned.moved}
    coefficients = Coefficients(planned.functions, known, target.frequency)

    def measure(points: Real) -> Measure:
        powers = coefficients.powers
        if goal.target.kind == "allpass":
            return VectorDeparture(target, points, powers, goal.gain)
        return LevelDeparture(target, points, powers, goal.gain == "free")

    most = max(_KEPT, 20 * options.best)
    kept = search(posed.space, coefficients, measure(compared.search_points), most, progress, posed.counted)
    ranking = _Ranking(planned, posed, kept, coefficients, measure(compared.points))
    ranked = ranking.best(options.best)
    threshold = kept.threshold
    left_out = None if np.isinf(threshold) else ranking.measure.decibels(threshold)
    poles = pole_pairs([float(sympy.N(c, 20)) for c in goal.denominator])
    return Found(
        planned,
        tuple(_chosen_set(ranking, row, departure, poles) for row, departure in ranked),
        compared,
        poles,
        kept.searched,
        posed.space.size,
        kept.complete,
        posed.reach,
        posed.space.centres,
        posed.combinations,
        left_out,
    )


def _target(goal: Goal) -> Response:
    sides = ([float(sympy.N(c, 20)) for c in side] for side in (goal.numerator, goal.denominator))
    return response(*sides)


@dataclass(frozen=True)
class _Ranking:
    """The sets that the search kept, to be compared over all frequencies."""

    plan: Plan
    posed: Posed
    kept: Kept
    coefficients: Coefficients
    measure: Measure

    def best(self, count: int) -> list[tuple[int, float]]:
        """Return the rows of the best sets and their departures in dB, equal sets once.

        Of equal departures the set of fewer pieces comes first; of equal sets the one nearest to its exact set stays.
        """
        values = self.values()
        scores, far = self._scores(values), self._distances(values)
        known = {name: n for name, n in self.plan.known.items() if name not in values}
        allowed = are_positive(self.plan.positives.values(), known, values)
        rows = [row for row in range(len(scores)) if allowed[row]]
        rows.sort(key=lambda row: (float(scores[row]), self._pieces(row), float(far[row])))
        ranked: list[tuple[int, float]] = []
        seen: set[tuple[float, ...]] = set()
        for row in rows:
            numbers = tuple(float(column[row]) for column in values.values())
            if len(ranked) < count and numbers not in seen:
                seen.add(numbers)
                ranked.append((row, self.measure.decibels(float(scores[row]))))
        self._check([row for row, _ in ranked])
        return ranked

    def _distances(self, values: Mapping[str, Real]) -> Real:
        """Return how far each set is from its exact one, over all parts."""
        axes = self.posed.space.axes
        exact = [np.log(values[a.part] / self.posed.exact[a.part][self.kept.centres]) for a in axes]
        return np.asarray(np.abs(exact).sum(axis=0)) if exact else np.zeros(len(self.kept.scores))

    def values(self) -> dict[str, Real]:
        """Return for every name its value in each set."""
        space = self.posed.space
        values = {name: array[self.kept.centres] for name, array in space.held.items()}
        for k, axis in enumerate(space.axes):
            values[axis.part] = axis.choices.values[self.kept.choices[:, k]]
        return values

    def choice(self, name: str, row: int) -> Choice:
        """Return what a part is in a set."""
        if name in self.posed.chosen:
            choices, positions = self.posed.chosen[name]
            return choices[positions[self.kept.centres[row]]]
        names = [axis.part for axis in self.posed.space.axes]
        k = names.index(name)
        return self.posed.space.axes[k].choices[self.kept.choices[row, k]]

    def _pieces(self, row: int) -> int:
        axes = self.posed.space.axes
        return sum(int(axis.choices.second[self.kept.choices[row, k]] >= 0) for k, axis in enumerate(axes))

    def _scores(self, values: Mapping[str, Real]) -> Real:
        over, under = self.coefficients(values)
        return self.measure.score(over, under, (len(next(iter(values.values()))),))

    def _check(self, rows: list[int]) -> None:
        """The exact sets behind the best must be exact."""
        if not rows:
            return
        centres = self.kept.centres[rows]
        exact = {name: array[centres] for name, array in self.posed.exact.items()}
        worst = self.measure.decibels(float(self._scores(exact).max()))
        if not worst < _EXACT:
            raise InternalFault(f"an exact set departs from the target by {worst:.3g} dB")


def _chosen_set(
    ranking: _Ranking, row: int, departure: float, target_poles: tuple[PolePair, ...]
) -> ChosenSet:
    sheet, posed = ranking.plan.sheet, ranking.posed
    searched = [n for n in sheet.symbols if n in posed.chosen or n in [a.part for a in posed.space.axes]]
    preferred = {name: ranking.choice(name, row) for name in sorted(searched, key=natural_key)}
    centre = ranking.kept.centres[row]
    exact = {name: float(posed.exact[name][centre]) for name in preferred}
    held = {name: float(posed.exact[name][centre]) for name in ranking.plan.held}
    values = _values(sheet, preferred, held)
    _, under = Coefficients(ranking.plan.functions, {})(
        {name: np.array(value) for name, value in values.items()}
    )
    poles = pole_pairs([float(c) for c in under])
    parts = {part.name: part.kind for part in sheet.parts if part.name in values}
    spread = {}
    for kind in dict.fromkeys(parts.values()):
        sizes = [values[name] for name in parts if parts[name] == kind]
        if len(sizes) > 1 and kind in ("R", "C", "L"):
            spread[kind] = max(sizes) / min(sizes)
    capacitance = sum(values[name] for name in parts if parts[name] == "C")
    listed = {name: values[name] for name in sorted(parts, key=natural_key)}
    return ChosenSet(
        preferred, exact, held, listed, departure, shifts(target_poles, poles), spread, capacitance
    )


def _values(sheet: Sheet, preferred: Mapping[str, Choice], held: Mapping[str, float]) -> dict[str, float]:
    """Return the value of every name that has one, ties followed."""
    exact: dict[str, sympy.Expr] = dict(sheet.numbers)
    exact |= {name: sympy.Rational(c.value.numerator, c.value.denominator) for name, c in preferred.items()}
    exact |= {name: sympy.Float(value, 17) for name, value in held.items()}
    for name in tie_order(sheet.ties):
        tie = sheet.ties[name]
        if all(n.text in exact or n.text == "pi" for n in names(tie)):
            exact[name] = exact_number(tie, exact)
    return {name: float(sympy.N(value, 20)) for name, value in exact.items()}
