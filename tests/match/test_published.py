"""Published design equations and tables, each named with its source; all from memory."""

import math

import pytest
import sympy

from symcirc.match.formula import condition_text, equation_text
from symcirc.match.problem import Root, Solutions
from symcirc.match.solve import solve
from symcirc.transfer.function import TransferFunction
from tests.match import stages
from tests.match.arithmetic import value
from tests.match.targets import Target, butterworth, problem, second_order, target

NANO = sympy.Rational(1, 10**9)


def _solved(stage: TransferFunction, goal: Target, unknowns: str, **more: object) -> Solutions:
    outcome = solve(problem(stage, goal, unknowns, **more))
    assert isinstance(outcome, Solutions), outcome
    return outcome


def _values(outcome: Solutions, known: dict[str, float], branch: int = 0) -> dict[str, float]:
    """Compute a branch's printed formulas in their order."""
    values = dict(known)
    for equation in outcome.branches[branch].equations:
        values[equation.part] = value(equation_text(equation.formula), values)
    return values


def test_multiple_feedback_low_pass_needs_c1_of_four_q_squared_one_plus_gain_c2() -> None:
    """Huelsman and Allen 1980: C1/C2 >= 4 Q^2 (1 + H0)."""
    gain = sympy.Symbol("H0")
    outcome = _solved(
        stages.multiple_feedback_low_pass(), second_order("low-pass", gain), "R1 R2 R3", gain="magnitude"
    )
    assert len(outcome.branches) == 2
    for branch in outcome.branches:
        assert [condition_text(c) for c in branch.conditions] == ["C1 >= 4*Q**2*C2*(H0 + 1)"]


def test_multiple_feedback_band_pass_with_equal_capacitors_has_the_handbook_resistors() -> None:
    """Huelsman and Allen 1980: R1 = Q/(H w C), R2 = Q/((2 Q^2 - H) w C), R3 = 2 Q/(w C), where H < 2 Q^2."""
    gain = sympy.Symbol("H0")
    outcome = _solved(
        stages.multiple_feedback_band_pass(), second_order("band-pass", gain), "R1 R2 R3", gain="magnitude"
    )
    (branch,) = outcome.branches
    assert [condition_text(c) for c in branch.conditions] == ["H0 < Q**2*(C1 + C2)/C2"]
    known = {"f0": 800.0, "Q": 3.0, "H0": 5.0, "C1": 1e-8, "C2": 1e-8}
    w, q, h, c = 2 * math.pi * 800, 3.0, 5.0, 1e-8
    found = _values(outcome, known)
    expected = {"R1": q / (h * w * c), "R2": q / ((2 * q**2 - h) * w * c), "R3": 2 * q / (w * c)}
    assert {name: found[name] for name in expected} == pytest.approx(expected, rel=1e-12)


def test_multiple_feedback_high_pass_has_the_handbook_parts() -> None:
    """Huelsman and Allen 1980: C2 = C/H, R1 = 1/(Q w C (2 + 1/H)), R2 = Q (2 H + 1)/(w C) with C1 = C3 = C."""
    gain = sympy.Symbol("H0")
    outcome = _solved(
        stages.multiple_feedback_high_pass(), second_order("high-pass", gain), "R1 R2 C2", gain="magnitude"
    )
    w, q, h, c = 2 * math.pi * 300, 0.9, 2.0, 2.2e-8
    found = _values(outcome, {"f0": 300.0, "Q": q, "H0": h, "C1": c, "C3": c})
    expected = {"C2": c / h, "R1": 1 / (q * w * c * (2 + 1 / h)), "R2": q * (2 * h + 1) / (w * c)}
    assert {name: found[name] for name in expected} == pytest.approx(expected, rel=1e-12)


def test_biquad_has_one_explicit_positive_solution_whatever_is_chosen() -> None:
    """Thomas 1971: R1 = Q/(w C1), R2 = 1/(w^2 R3 C1 C2), R4 = R2/H for the low-pass output."""
    gain = sympy.Symbol("H0")
    outcome = _solved(
        stages.two_integrator_low_pass(), second_order("low-pass", gain), "R1 R2 R4", gain="magnitude"
    )
    (branch,) = outcome.branches
    assert branch.conditions == ()
    w, q, h = 2 * math.pi * 50, 10.0, 2.0
    found = _values(outcome, {"f0": 50.0, "Q": q, "H0": h, "R3": 1e4, "C1": 1e-7, "C2": 4.7e-8})
    r2 = 1 / (w**2 * 1e4 * 1e-7 * 4.7e-8)
    expected = {"R1": q / (w * 1e-7), "R2": r2, "R4": r2 / h}
    assert {name: found[name] for name in expected} == pytest.approx(expected, rel=1e-12)


def test_equal_parts_low_pass_has_the_gain_three_minus_one_over_q() -> None:
    """Sallen and Key 1955: R = 1/(w C), k = 3 - 1/Q."""
    outcome = _solved(stages.equal_parts_low_pass(), second_order("low-pass"), "R k", gain="free", free="k")
    found = _values(outcome, {"f0": 1000.0, "Q": 0.8, "C": 1e-8})
    assert found["R"] == pytest.approx(1 / (2 * math.pi * 1000 * 1e-8), rel=1e-12)
    assert found["k"] == pytest.approx(3 - 1 / 0.8, rel=1e-12)


def test_twin_t_with_feedback_has_the_q_of_the_handbooks() -> None:
    """Handbooks of active notches: Q = 1/(4 (1 - k)) and R C = 1/w."""
    outcome = _solved(stages.twin_t_notch(), second_order("notch"), "R k", free="k")
    found = _values(outcome, {"f0": 50.0, "Q": 5.0, "C": 1e-7})
    assert found["k"] == pytest.approx(1 - 1 / 20, rel=1e-12)
    assert found["R"] == pytest.approx(1 / (2 * math.pi * 50 * 1e-7), rel=1e-12)


def test_bridged_stage_is_an_all_pass_where_the_divider_gives_q_squared_times_two() -> None:
    """Deliyannis 1968: with C1 = C2 an all-pass needs b/(1 - b) = Q^2 (twice that is the notch's).

    From N1/N0 = -D1/D0: b D1 - (1 - b) R2 C2 = -b D1, and R2 C2/D1 = R2/(2 R1) = 2 Q^2.
    """
    known = {"f0": 1000.0, "Q": 2.0, "C1": 1e-8, "C2": 1e-8}
    for kind, share in (("all-pass", 1), ("notch", 2)):
        outcome = _solved(stages.bridged_notch(), second_order(kind), "R1 R2 b", gain="free", free="b")
        b = _values(outcome, known)["b"]
        assert b / (1 - b) == pytest.approx(share * 2.0**2, rel=1e-12)


def test_three_pole_low_pass_with_equal_resistors_has_the_tabulated_capacitors() -> None:
    """A. B. Williams, "Electronic Filter Design Handbook" (1981), active low-pass tables: 1.392, 3.546, 0.2024."""
    resistance, w = 10_000, 2 * math.pi * 1200
    known = {"R1": resistance, "R2": resistance, "R3": resistance}
    outcome = _solved(stages.three_pole_low_pass(), butterworth("low-pass", 3), "C1 C2 C3", known=known)
    (branch,) = outcome.branches
    assert isinstance(branch.equations[0].formula, Root)
    normalised = [branch.values[name] * resistance * w for name in ("C1", "C2", "C3")]
    assert normalised == pytest.approx([1.392, 3.546, 0.2024], rel=1e-3)


def test_first_order_stages_have_the_textbook_product() -> None:
    """Any textbook: R C = 1/w; the all-pass has R4 = R3; the gain is 1 + R3/R2."""
    w = 2 * math.pi * 1000
    goal = target("low-pass", (2000 * sympy.pi, 1))
    low = _solved(stages.first_order_low_pass(), goal, "R1", known={"C1": 10 * NANO})
    assert low.branches[0].values["R1"] == pytest.approx(1e8 / w, rel=1e-14)
    goal = target("high-pass", (2000 * sympy.pi, 1), 5)
    known = {"R2": 1000, "C1": 10 * NANO}
    high = _solved(stages.first_order_high_pass_with_gain(), goal, "R1 R3", known=known)
    assert high.branches[0].values == pytest.approx({"R1": 1e8 / w, "R3": 4000.0}, rel=1e-14)
    goal = target("all-pass", (2000 * sympy.pi, 1))
    known = {"R3": 10_000, "C1": 10 * NANO}
    shifter = _solved(stages.first_order_all_pass(), goal, "R1 R4", known=known)
    assert shifter.branches[0].values == pytest.approx({"R1": 1e8 / w, "R4": 10_000.0}, rel=1e-14)


def test_series_resonance_has_the_textbook_resistance() -> None:
    """Any textbook: w = 1/sqrt(L C), Q = sqrt(L/C)/R."""
    outcome = _solved(stages.series_resonance(), second_order("low-pass"), "R1 L1")
    found = _values(outcome, {"f0": 1000.0, "Q": 2.0, "C1": 1e-8})
    w = 2 * math.pi * 1000
    assert found["L1"] == pytest.approx(1 / (w**2 * 1e-8), rel=1e-12)
    assert found["R1"] == pytest.approx(math.sqrt(found["L1"] / 1e-8) / 2, rel=1e-12)


def test_unity_gain_low_pass_has_both_branches_at_22_and_10_nanofarad() -> None:
    """Sallen and Key 1955: R1, R2 = (1 +- sqrt(1 - 4 Q^2 C2/C1))/(2 Q w C2), either way round."""
    known = {"C1": 22 * NANO, "C2": 10 * NANO}
    outcome = _solved(stages.unity_gain_low_pass(), butterworth("low-pass", 2), "R1 R2", known=known)
    w, q = 2 * math.pi * 1200, math.sqrt(0.5)
    roots = [(1 + side * math.sqrt(1 - 4 * q**2 * 10 / 22)) / (2 * q * w * 1e-8) for side in (1, -1)]
    found = [[branch.values["R1"], branch.values["R2"]] for branch in outcome.branches]
    assert found == [pytest.approx(roots, rel=1e-12), pytest.approx(roots[::-1], rel=1e-12)]
