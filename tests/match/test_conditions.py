"""Conditions in symbols: they hold just where there is a real positive solution, and formulas give that solution.

Each case is solved once with symbols for all that is chosen and for the target. At hundreds of random points
the conditions of each branch are compared with the branch's own formulas, and at every fifth point the branches
whose conditions hold with all positive solutions, which a Groebner basis over the rationals gives.
"""

import random
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import pytest
import sympy

from symcirc.match.formula import condition_text, equation_text
from symcirc.match.problem import Branch, Gain, Root, Solutions
from symcirc.match.solve import solve
from symcirc.transfer.function import TransferFunction
from tests.match import stages
from tests.match.arithmetic import holds, value
from tests.match.reference import equations, positive_solutions
from tests.match.targets import problem, target

POINTS = 200
T0, T1, G = sympy.symbols("t0 t1 g")


@dataclass(frozen=True)
class Case:
    stage: TransferFunction
    kind: str
    unknowns: str
    gain: Gain = "exact"
    sign: int = 1
    gain_is_one: bool = False

    def __str__(self) -> str:
        return f"{self.kind} {' '.join(map(str, self.stage.ring.symbols))} for {self.unknowns}"


CASES = [
    Case(stages.unity_gain_low_pass(), "low-pass", "R1 R2", gain_is_one=True),
    Case(stages.unity_gain_low_pass(), "low-pass", "R1 C2", gain_is_one=True),
    Case(stages.positive_feedback_low_pass(), "low-pass", "R1 R2", "free"),
    Case(stages.positive_feedback_low_pass(), "low-pass", "R1 C2", "free"),
    Case(stages.positive_feedback_low_pass(), "low-pass", "R2 C1", "free"),
    Case(stages.positive_feedback_high_pass(), "high-pass", "R1 R2", "free"),
    Case(stages.positive_feedback_high_pass(), "high-pass", "C1 C2", "free"),
    Case(stages.positive_feedback_band_pass(), "band-pass", "R1 R2", "free"),
    Case(stages.positive_feedback_band_pass(), "band-pass", "R2 R3", "free"),
    Case(stages.positive_feedback_band_pass(), "band-pass", "R1 R2 R3"),
    Case(stages.multiple_feedback_low_pass(), "low-pass", "R1 R2 R3", sign=-1),
    Case(stages.multiple_feedback_low_pass(), "low-pass", "R2 R3 C2", sign=-1),
    Case(stages.multiple_feedback_band_pass(), "band-pass", "R1 R2 R3", sign=-1),
    Case(stages.multiple_feedback_band_pass(), "band-pass", "R2 C1 C2", sign=-1),
    Case(stages.multiple_feedback_high_pass(), "high-pass", "C1 C2 C3", sign=-1),
    Case(stages.ladder_low_pass(), "low-pass", "R1 R2", gain_is_one=True),
    Case(stages.ladder_low_pass(), "low-pass", "R1 C1", gain_is_one=True),
    Case(stages.doubly_terminated_ladder(), "low-pass", "L1 C1", "free"),
    Case(stages.state_variable("low"), "low-pass", "R1 R4 R6", sign=-1),
    Case(stages.state_variable("high"), "high-pass", "R1 R2 R5", sign=-1),
]


@dataclass(frozen=True)
class Texts:
    """A branch as it is printed."""

    equations: tuple[tuple[str, str], ...]
    conditions: tuple[str, ...]


def _texts(branch: Branch) -> Texts:
    assert not any(isinstance(e.formula, Root) for e in branch.equations)
    return Texts(
        tuple((e.part, equation_text(e.formula)) for e in branch.equations),
        tuple(map(condition_text, branch.conditions)),
    )


def _solution(branch: Texts, known: Mapping[str, float]) -> dict[str, float] | None:
    """Compute the formulas of a branch in their order; None where a value is not real and positive."""
    values = dict(known)
    for part, text in branch.equations:
        values[part] = value(text, values)
        if not values[part] > 0:
            return None
    return values


@pytest.mark.parametrize("case", CASES, ids=str)
def test_conditions_hold_just_where_a_solution_is_real_and_positive(case: Case) -> None:
    generator = random.Random(str(case))
    gain = 1 if case.gain_is_one or case.gain == "free" else case.sign * G
    goal = target(case.kind, (T0, T1, 1), gain)
    outcome = solve(problem(case.stage, goal, case.unknowns, case.gain))
    assert isinstance(outcome, Solutions)
    branches = list(map(_texts, outcome.branches))
    unknowns = case.unknowns.split()
    counts = {True: 0, False: 0}
    for point in range(POINTS):
        chosen = [str(s) for s in case.stage.ring.symbols if str(s) not in unknowns] + ["t0", "t1", "g"]
        exact = {name: sympy.Rational(round(10 ** generator.uniform(2, 4)), 1000) for name in chosen}
        if "k" in exact:
            exact["k"] += sympy.Rational(point % 3, 2)  # below and above 1
        known = {name: float(number) for name, number in exact.items()}
        found = []
        for branch in branches:
            solution = _solution(branch, known)
            met = _all_hold(branch, solution or known)
            assert met == (solution is not None), (known, branch)
            found += [solution] if solution else []
            counts[met] += 1
        if point % 5 == 0:
            _compare(case, exact, goal, found)
    assert counts[True] > POINTS / 50, "hardly a point has a solution: the case shows nothing"


def _all_hold(branch: Texts, values: Mapping[str, float]) -> bool:
    """Tell whether all conditions hold; one in parts that have no real value does not."""
    return all(_holds(condition, values) for condition in branch.conditions)


def _holds(text: str, values: Mapping[str, float]) -> bool:
    try:
        return holds(text, values)
    except KeyError:
        return False


def _compare(
    case: Case,
    exact: Mapping[str, sympy.Rational],
    goal: tuple[tuple[sympy.Expr, ...], tuple[sympy.Expr, ...]],
    found: list[dict[str, float]],
) -> None:
    """Compare the branches with all positive solutions from a Groebner basis."""
    numbers = {sympy.Symbol(name): number for name, number in exact.items()}
    numerator, denominator = ([sympy.sympify(c).xreplace(numbers) for c in row] for row in goal)
    lines, lead = equations(case.stage, exact, numerator, denominator, case.gain == "free")
    names = case.unknowns.split()
    expected = positive_solutions(lines, lead, names)
    assert len(found) == len(expected)
    pairs = [sorted(s, key=lambda v: [round(v[n], 5) for n in names]) for s in (found, expected)]
    for one, other in zip(*pairs, strict=True):
        assert [one[n] for n in names] == pytest.approx([other[n] for n in names], rel=1e-6)


def _resultant_roots(q: float, ratio: float) -> int:
    """Count the positive R1 of the unity-gain low-pass for Q and C1/C2, w0 = C2 = 1, by its quadratic in numpy."""
    roots = np.roots([ratio, -ratio / q, 1.0])
    return sum(1 for r in roots if abs(r.imag) < 1e-12 and r.real > 0)


def test_unity_gain_low_pass_needs_c1_of_at_least_four_q_squared_c2() -> None:
    """Sallen and Key 1955, from memory: C1/C2 >= 4 Q^2."""
    f0, q = sympy.symbols("f0 Q")
    goal = target("low-pass", ((2 * sympy.pi * f0) ** 2, 2 * sympy.pi * f0 / q, 1))
    outcome = solve(problem(stages.unity_gain_low_pass(), goal, "R1 R2"))
    assert isinstance(outcome, Solutions)
    assert [[condition_text(c) for c in b.conditions] for b in outcome.branches] == [["C1 >= 4*Q**2*C2"]] * 2
    generator = random.Random(4)
    for _ in range(300):
        quality, ratio = 10 ** generator.uniform(-1, 1), 10 ** generator.uniform(-2, 3)
        met = holds("C1 >= 4*Q**2*C2", {"C1": ratio, "C2": 1.0, "Q": quality})
        assert (_resultant_roots(quality, ratio) == 2) == met
