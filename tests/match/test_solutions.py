"""All solutions for given numbers, against lexicographic Groebner bases of sympy over the rationals."""

import random
from dataclasses import dataclass

import pytest
import sympy

from symcirc.match.problem import Gain, Refusal, Solutions
from symcirc.match.solve import solve
from symcirc.transfer.function import TransferFunction
from tests.match import stages
from tests.match.reference import coefficients, equations, positive_solutions
from tests.match.targets import Target, problem, target

TRIALS = 3


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


UNITY = stages.unity_gain_low_pass()
LOW, HIGH, BAND = (
    stages.positive_feedback_low_pass(),
    stages.positive_feedback_high_pass(),
    stages.positive_feedback_band_pass(),
)
MULTIPLE = {
    "low-pass": stages.multiple_feedback_low_pass(),
    "band-pass": stages.multiple_feedback_band_pass(),
    "high-pass": stages.multiple_feedback_high_pass(),
}
THREE, THREE_HIGH = stages.three_pole_low_pass(), stages.three_pole_high_pass()
LADDER = stages.ladder_low_pass()

CASES = [
    *(Case(UNITY, "low-pass", u, gain_is_one=True) for u in ("R1 R2", "C1 C2", "R1 C1", "R1 C2", "R2 C1")),
    *(Case(LOW, "low-pass", u, "free") for u in ("R1 R2", "C1 C2", "R1 C2", "R2 C1", "R1 k", "C1 k")),
    *(Case(HIGH, "high-pass", u, "free") for u in ("R1 R2", "C1 C2", "R1 C1")),
    *(Case(BAND, "band-pass", u, "free") for u in ("R1 R2", "R1 R3", "R2 R3", "C1 C2")),
    *(Case(BAND, "band-pass", u) for u in ("R1 R2 R3", "R1 R2 k")),
    *(
        Case(MULTIPLE["low-pass"], "low-pass", u, sign=-1)
        for u in ("R1 R2 R3", "R1 C1 C2", "R1 R3 C1", "R2 R3 C2")
    ),
    *(
        Case(MULTIPLE["band-pass"], "band-pass", u, sign=-1)
        for u in ("R1 R2 R3", "R1 R2 C1", "R3 C1 C2", "R2 C1 C2")
    ),
    *(Case(MULTIPLE["high-pass"], "high-pass", u, sign=-1) for u in ("R1 R2 C2", "C1 C2 C3")),
    *(Case(MULTIPLE["low-pass"], "low-pass", u, "magnitude") for u in ("R1 R2 R3", "R1 C1 C2")),
    *(Case(THREE, "low-pass", u, gain_is_one=True) for u in ("C1 C2 C3", "R1 R2 R3", "R1 R2 C3", "R1 C1 C3")),
    *(Case(THREE_HIGH, "high-pass", u, gain_is_one=True) for u in ("R1 R2 R3", "C1 C2 C3", "R1 R2 C3")),
    *(Case(LADDER, "low-pass", u, gain_is_one=True) for u in ("R1 R2", "C1 C2", "R1 C1")),
    Case(stages.doubly_terminated_ladder(), "low-pass", "R1 L1 C1"),
    Case(stages.doubly_terminated_ladder(), "low-pass", "L1 C1", "free"),
    Case(stages.state_variable("low"), "low-pass", "R1 R4 R6", sign=-1),
    Case(stages.state_variable("low"), "low-pass", "R2 R3 R6", sign=-1),
    Case(stages.state_variable("band"), "band-pass", "R1 R4 R6"),
    Case(stages.state_variable("high"), "high-pass", "R1 R2 R5", sign=-1),
    Case(stages.equal_parts_low_pass(), "low-pass", "R k", "free"),
    Case(stages.two_integrator_low_pass(), "low-pass", "R1 R2 R4", sign=-1),
    Case(stages.two_integrator_band_pass(), "band-pass", "R1 R2 R4", sign=-1),
    Case(stages.bridged_notch(), "notch", "R1 R2 b", "free"),
    Case(stages.bridged_notch(), "all-pass", "R1 R2 b", "free"),
    Case(stages.divided_notch(), "all-pass", "R1 R2 R4", "free"),
    Case(stages.divided_notch(), "notch", "C1 C2 R4", "free"),
    Case(stages.first_order_all_pass(), "all-pass", "R1 R4", gain_is_one=True),
    Case(stages.twin_t_notch(), "notch", "R k", gain_is_one=True),
    Case(stages.series_resonance(), "low-pass", "R1 L1", gain_is_one=True),
]


def _number(generator: random.Random, low: float = -1, high: float = 1) -> sympy.Rational:
    """Return a fraction, its logarithm evenly spread between two powers of ten."""
    return sympy.Rational(round(1000 * 10 ** generator.uniform(low, high)), 1000)


def _denominator(generator: random.Random, order: int) -> list[sympy.Rational]:
    """Return coefficients not far from those of a usual response, so that solutions are met."""
    typical = {1: (1,), 2: (1, 1), 3: (1, 2, 2)}[order]
    spread = 0.3 if order == 3 else 1
    return [c * _number(generator, -spread, spread) for c in typical] + [sympy.S.One]


def _reached(case: Case, values: dict[str, object]) -> Target:
    """Return the target that given parts have."""
    above, below = coefficients(case.stage, values)
    sign = -1 if case.gain == "magnitude" else 1
    return tuple(sign * c / below[-1] for c in above), tuple(c / below[-1] for c in below)


def _wished(case: Case, generator: random.Random) -> Target:
    """Return a random target, which may have no solution."""
    gain = 1 if case.gain_is_one or case.gain == "free" else _number(generator, -0.5, 0.5)
    return target(case.kind, _denominator(generator, case.stage.order), case.sign * gain)


@pytest.mark.parametrize("case", CASES, ids=str)
def test_solutions_are_those_of_an_exact_elimination_and_give_the_target(case: Case) -> None:
    generator = random.Random(str(case))
    names = case.unknowns.split()
    signless = {"k", "b"} & set(names)
    met = 0
    for trial in range(TRIALS):
        everything = {str(s): _number(generator) for s in case.stage.ring.symbols}
        if "k" in everything:
            everything["k"] = 1 + _number(generator, -1, 0.3)
        reachable = trial % 2 == 0 and case.kind in ("low-pass", "high-pass", "band-pass")
        goal = _reached(case, everything) if reachable else _wished(case, generator)
        values = {name: number for name, number in everything.items() if name not in names}
        outcome = solve(problem(case.stage, goal, case.unknowns, case.gain, values, " ".join(signless)))
        found = [dict(b.values) for b in outcome.branches] if isinstance(outcome, Solutions) else []
        if isinstance(outcome, Refusal):
            assert outcome.kind in ("negative", "sign", "gain"), outcome
        sign = -1 if case.gain == "magnitude" else 1
        wanted = [sign * c for c in goal[0]]
        lines, lead = equations(case.stage, values, wanted, goal[1], case.gain == "free")
        expected = positive_solutions(lines, lead, names, signless)
        _same(found, expected, names)
        for solution in found:
            _gives(case, solution | values, wanted, goal[1])
        met += len(found)
    assert met > 0, "no trial has a solution: the case shows nothing"


NATURAL = [case for case in CASES if case.kind in ("low-pass", "high-pass", "band-pass")]


@pytest.mark.parametrize("case", NATURAL, ids=str)
def test_equal_and_whole_values_lose_no_solution(case: Case) -> None:
    """Small whole values make formulas divide by zero and roots fall together, which random ones never do."""
    generator = random.Random("whole" + str(case))
    names = case.unknowns.split()
    signless = {"k"} & set(names)
    for _ in range(2):
        everything: dict[str, object] = {
            str(s): sympy.Integer(generator.choice([1, 1, 2, 3])) for s in case.stage.ring.symbols
        }
        if "k" in everything:
            everything["k"] = sympy.Rational(generator.choice([1, 2, 3, 4]), 2)
        goal = _reached(case, everything)
        if 0 in goal[1]:
            continue
        values = {name: number for name, number in everything.items() if name not in names}
        outcome = solve(problem(case.stage, goal, case.unknowns, case.gain, values, " ".join(signless)))
        assert isinstance(outcome, Solutions)
        found = [dict(b.values) for b in outcome.branches]
        own = [float(everything[name]) for name in names]
        assert any([s[name] for name in names] == pytest.approx(own, rel=1e-12) for s in found)
        sign = -1 if case.gain == "magnitude" else 1
        lines, lead = equations(case.stage, values, [sign * c for c in goal[0]], goal[1], case.gain == "free")
        _same(found, _each_once(positive_solutions(lines, lead, names, signless), names), names)


def _each_once(solutions: list[dict[str, float]], names: list[str]) -> list[dict[str, float]]:
    kept: list[dict[str, float]] = []
    for solution in solutions:
        ours = [solution[name] for name in names]
        if not any([other[name] for name in names] == pytest.approx(ours, rel=1e-9) for other in kept):
            kept.append(solution)
    return kept


def _same(found: list[dict[str, float]], expected: list[dict[str, float]], names: list[str]) -> None:
    assert len(found) == len(expected)
    ordered = [sorted(s, key=lambda v: [round(v[n], 6) for n in names]) for s in (found, expected)]
    for one, other in zip(*ordered, strict=True):
        assert [one[n] for n in names] == pytest.approx([other[n] for n in names], rel=1e-9)


def _gives(
    case: Case, values: dict[str, object], wanted: list[sympy.Expr], denominator: tuple[sympy.Expr, ...]
) -> None:
    """Put the values back into the stage's coefficients and compare with the target."""
    above, below = coefficients(case.stage, values)
    assert [float(c / below[-1]) for c in below] == pytest.approx([float(c) for c in denominator], rel=1e-9)
    numerator = [float(c / below[-1]) for c in above]
    goal = [float(c) for c in wanted] + [0.0] * (len(numerator) - len(wanted))
    lead = next(k for k, c in enumerate(goal) if c)
    factor = numerator[lead] / goal[lead] if case.gain == "free" else 1.0
    size = max(map(abs, numerator))
    assert numerator == pytest.approx([factor * c for c in goal], rel=1e-9, abs=1e-9 * size)
