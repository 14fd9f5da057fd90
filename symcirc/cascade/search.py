"""The search for an assignment of a target to the stages of a cascade under which every stage has real values."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from itertools import islice, product
from typing import Literal

import sympy

from symcirc.cascade.assignment import Section, assignments, shape_of
from symcirc.cascade.factors import Factored
from symcirc.cascade.gains import denominator, numerator, own_gain, remaining_factor
from symcirc.cascade.stages import Stage
from symcirc.complaints import Complaint
from symcirc.goal import Goal
from symcirc.match.problem import Branch, Problem, Refusal
from symcirc.match.solve import solve
from symcirc.posing import build_problem
from symcirc.progress import Progress

#: After so many assignments the search ends, and so many gains are tried for each.
MOST_ASSIGNMENTS, MOST_GAINS = 5000, 64
#: The relative size by which gains that are equal may differ.
SAME_GAIN = 1e-12


@dataclass(frozen=True)
class StageMatch:
    """A stage with what it takes of the target, and every solution for it.

    ``goal`` is its own target. ``gain`` is what it has by its nature, or its share of what is left where ``shares``
    is set; None where the target leaves the gain free and no number is known.
    """

    stage: Stage
    section: Section
    goal: Goal
    problem: Problem
    branches: tuple[Branch, ...]
    gain: sympy.Expr | None
    shares: bool


@dataclass(frozen=True)
class Found:
    """An assignment that works.

    ``reason`` says why it is not the one in order of Q: the place of the stage that failed there, the section that it
    could not give, and why; None where it is that one. ``sign`` is that which the stages' gains must have together,
    0 where either will do.
    """

    stages: tuple[StageMatch, ...]
    reason: tuple[int, Section, Refusal] | None
    sign: int


@dataclass(frozen=True)
class _Solved:
    goal: Goal
    problem: Problem
    branches: tuple[Branch, ...]
    gains: tuple[sympy.Expr | None, ...]


def search(stages: Sequence[Stage], goal: Goal, target: Factored, progress: Progress) -> Found | Refusal:
    """Return the first assignment, in order of Q, that every stage has real positive values for; or why none.

    Raises Complaint where a stage has too many free parts.
    """
    return _Search(stages, goal, target, progress).found()


class _Search:
    def __init__(self, stages: Sequence[Stage], goal: Goal, target: Factored, progress: Progress) -> None:
        self.stages = stages
        self.goal = goal
        self.target = target
        self.progress = progress
        self.high = target.at_zero > 0
        self.shapes = [shape_of(stage.answer.function) for stage in stages]
        self.solved: dict[tuple[int, Section, sympy.Expr | None], _Solved | Refusal] = {}
        self.sharing: set[int] = set()  # the places of stages whose gain is free to be set
        self.failures: list[tuple[int, Section, Refusal]] = []

    def found(self) -> Found | Refusal:
        refusal = self._count()
        if refusal is not None:
            return refusal
        for tried, way in enumerate(assignments(self.shapes, self.target, self._fits)):
            if tried == MOST_ASSIGNMENTS:
                return Refusal(
                    "given up",
                    f"none of the first {MOST_ASSIGNMENTS:,} assignments of the pole pairs to the stages works",
                    "match the stages one by one, each with its own target",
                )
            matched = self._matched(way)
            if matched is not None:
                reason = None if self._is_first(way) or not self.failures else self.failures[0]
                return Found(matched, reason, self._sign(way))
        return self._refusal()

    def _is_first(self, way: Sequence[Section]) -> bool:
        """Tell whether an assignment is the one in order of Q that the shapes alone allow."""
        return tuple(way) == next(assignments(self.shapes, self.target, lambda place, section: True), None)

    def _sign(self, way: Sequence[Section]) -> int:
        if self.goal.gain != "exact":
            return 0
        total = remaining_factor(self.target, way, self.high)
        return -1 if total.is_negative else 1

    def _count(self) -> Refusal | None:
        """Refuse stages that together have other numbers of poles and zeros than the target."""
        counts: tuple[tuple[Literal["order", "shape"], str, int, int], ...] = (
            ("order", "poles", sum(s.order for s in self.shapes), sum(p.degree for p in self.target.poles)),
            ("shape", "zeros at s = 0", sum(s.at_zero for s in self.shapes), self.target.at_zero),
            (
                "shape",
                "finite zeros elsewhere",
                sum(s.finite for s in self.shapes),
                sum(z.degree for z in self.target.zeros),
            ),
        )
        for kind, what, here, there in counts:
            if here != there:
                return Refusal(
                    kind,
                    f"the {len(self.shapes)} stages together have {here} {what}, the target has {there}",
                    "ask for a target of their number, or use other stages",
                )
        return None

    def _fits(self, place: int, section: Section) -> bool:
        """Tell whether a stage can give a section, whatever its gain."""
        outcome = self._solve(place, section, None)
        return not isinstance(outcome, Refusal) or outcome.kind == "many"

    def _solve(self, place: int, section: Section, gain: sympy.Expr | None) -> _Solved | Refusal:
        key = (place, section, gain)
        if key not in self.solved:
            self.solved[key] = outcome = self._solve_now(place, section, gain)
            if isinstance(outcome, Refusal) and not (gain is None and outcome.kind == "many"):
                self.failures.append((place, section, outcome))
        return self.solved[key]

    def _solve_now(self, place: int, section: Section, gain: sympy.Expr | None) -> _Solved | Refusal:
        stage = self.stages[place]
        self.progress(f"solving stage {stage.number} of {len(self.stages)}")
        above, below = numerator(section, self.high), denominator(section)
        factor = sympy.S.One if gain is None else gain
        goal = replace(
            self.goal,
            numerator=tuple(factor * c for c in above),
            denominator=below,
            gain="free" if gain is None else "magnitude",
        )
        problem = build_problem(stage.sheet, stage.answer, goal)
        if not stage.order and not problem.unknowns:
            branches: tuple[Branch, ...] = (Branch((), (), {}),)
        else:
            outcome = solve(problem)
            if isinstance(outcome, Refusal):
                if gain is None and outcome.kind == "many" and self.goal.gain != "free":
                    self.sharing.add(place)
                elif outcome.kind in ("many", "target"):
                    raise Complaint(
                        self.goal.target.place, f"in {stage_words(stage)}, {outcome.cause}", outcome.mend
                    )
                return outcome
            branches = outcome.branches
        numbers = stage.sheet.numbers
        function = stage.answer.function
        gains = tuple(own_gain(function, section, self.high, numbers, branch) for branch in branches)
        return _Solved(goal, problem, branches, gains)

    def _matched(self, way: Sequence[Section]) -> tuple[StageMatch, ...] | None:
        """Return the stages matched, the gain shared; None where the gain cannot be had."""
        plain = {k: self._solve(k, section, None) for k, section in enumerate(way)}
        fixed = {k: s for k, s in plain.items() if isinstance(s, _Solved)}
        if self.goal.gain == "free":
            return tuple(self._stage(k, way[k], s, s.gains[0], s.branches) for k, s in fixed.items())
        total = remaining_factor(self.target, way, self.high)
        for gains in islice(product(*(_distinct(s.gains) for s in fixed.values())), MOST_GAINS):
            own = dict(zip(fixed, gains, strict=True))
            shared = self._shared(way, total, own)
            if shared is None:
                continue
            stages = dict(shared)
            for k, s in fixed.items():
                alike = tuple(b for b, g in zip(s.branches, s.gains, strict=True) if _is_same(g, own[k]))
                stages[k] = self._stage(k, way[k], s, own[k], alike)
            return tuple(stages[k] for k in range(len(way)))
        return None

    def _stage(
        self,
        place: int,
        section: Section,
        solved: _Solved,
        gain: sympy.Expr | None,
        branches: tuple[Branch, ...],
    ) -> StageMatch:
        return StageMatch(
            self.stages[place],
            section,
            solved.goal,
            solved.problem,
            branches,
            gain,
            place in self.sharing,
        )

    def _shared(
        self, way: Sequence[Section], total: sympy.Expr, own: dict[int, sympy.Expr | None]
    ) -> dict[int, StageMatch] | None:
        """Return the stages whose gain can be set, matched with equal shares of what the others leave."""
        if None in own.values():
            place = next(k for k, gain in own.items() if gain is None)
            raise Complaint(
                self.goal.target.place,
                f"the gain of {stage_words(self.stages[place])} depends on what has no number",
                "fix its parts, or leave `gain` out of the target",
            )
        rest = _size(total / sympy.Mul(*own.values()))
        open_places = [k for k in range(len(way)) if k not in own]
        if not open_places:
            if rest.free_symbols or abs(float(rest) - 1) > 1e-9:
                self.failures.append((len(way) - 1, way[-1], _gain_refusal(total, own.values())))
                return None
            return {}
        share = rest ** sympy.Rational(1, len(open_places))
        if share.is_number and share.has(sympy.Float):  # no more digits than the values that it comes from
            share = sympy.Rational(f"{float(share):.16g}")
        found = {}
        for k in open_places:
            solved = self._solve(k, way[k], share)
            if isinstance(solved, Refusal):
                return None
            found[k] = self._stage(k, way[k], solved, share, solved.branches)
        return found

    def _refusal(self) -> Refusal:
        """Return why no assignment works: what first stood in the way."""
        if not self.failures:
            return Refusal(
                "shape",
                "the stages' orders and numerators do not allow any assignment of the target's poles and zeros",
                "use stages whose shapes fit the target's pole pairs and zeros",
            )
        place, section, refusal = self.failures[0]
        if refusal.kind == "gain" and not any(r.kind != "gain" for _, _, r in self.failures):
            return refusal
        stage = self.stages[place]
        return replace(
            refusal,
            cause=f"no assignment of the pole pairs has real values; in order of Q, {stage_words(stage)} "
            f"would take {section_words(section)}, and {refusal.cause}",
        )


def _gain_refusal(total: sympy.Expr, gains: Iterable[sympy.Expr | None]) -> Refusal:
    here, there = sympy.Mul(*(g for g in gains if g is not None)), total
    return Refusal(
        "gain",
        f"the stages' gains come to {_short(here)}, the target needs {_short(there)}",
        "leave a part that sets a gain free, or leave `gain` out of the target",
    )


def _short(number: sympy.Expr) -> str:
    return str(number) if number.free_symbols else f"{abs(float(number)):.6g}"


def _size(number: sympy.Expr) -> sympy.Expr:
    return number if number.free_symbols or number.is_positive else -number


def _distinct(gains: Iterable[sympy.Expr | None]) -> list[sympy.Expr | None]:
    found: list[sympy.Expr | None] = []
    for gain in gains:
        if not any(_is_same(gain, other) for other in found):
            found.append(gain)
    return found


def _is_same(one: sympy.Expr | None, other: sympy.Expr | None) -> bool:
    """Tell whether two gains are the same size."""
    if one is None or other is None or one.free_symbols or other.free_symbols:
        return one == other
    return abs(abs(float(one)) - abs(float(other))) <= SAME_GAIN * abs(float(one))


def stage_words(stage: Stage) -> str:
    """Return how a stage is named in a sentence: its number and its nodes."""
    piece = stage.piece
    return f"stage {stage.number} ({piece.first or 'the input'} to {piece.last})"


def section_words(section: Section) -> str:
    """Return a section in words.

    >>> from symcirc.cascade.factors import Factor
    >>> section_words(Section((Factor((1, 1), 1.0, 0.5), Factor((1, 1.618, 1), 1.0, 0.618)), (), 0))
    'a real pole and the pair with Q = 0.618'
    """
    real = sum(pole.degree == 1 for pole in section.poles)
    words = [f"{real} real poles"] if real > 1 else ["a real pole"] * real
    words += [f"the pair with Q = {pole.q:.4g}" for pole in section.poles if pole.degree == 2]
    words += ["a zero" if zero.degree == 1 else "a pair of zeros" for zero in section.zeros]
    return " and ".join(words) or "no poles"
