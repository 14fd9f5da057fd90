"""Formulas as they are printed give the values, and read as LaTeX."""

import re

import pytest
import sympy

from symcirc.match.formula import condition_latex, condition_text, equation_latex, equation_text
from symcirc.match.problem import Condition, Root, Solutions
from symcirc.match.solve import solve
from symcirc.transfer.function import TransferFunction
from tests.match import stages
from tests.match.arithmetic import holds, value
from tests.match.targets import Target, butterworth, problem, second_order, target

NANO = sympy.Rational(1, 10**9)
#: Chebyshev, 0.5 dB of ripple, order 2 (Zverev 1967, from memory): s^2 + 1.42562 s + 1.51620, and order 3.
CHEBYSHEV = {2: ("1.516203", "1.425625", "1"), 3: ("0.715694", "1.534895", "1.252913", "1")}


def _chebyshev(kind: str, order: int) -> Target:
    """Return the target with its coefficients as 60-digit numbers, edge 1 kHz."""
    w = 2000 * sympy.pi
    rows = [sympy.Float(c, 60) * w ** (order - k) for k, c in enumerate(CHEBYSHEV[order])]
    return target(kind, [*(row.evalf(60) for row in rows[:-1]), 1])


CASES = [
    (stages.unity_gain_low_pass(), butterworth("low-pass", 2), "R1 R2", {"C1": 22 * NANO, "C2": 10 * NANO}),
    (stages.unity_gain_low_pass(), butterworth("low-pass", 2), "R1 R2", {"C1": 20 * NANO, "C2": 10 * NANO}),
    (stages.unity_gain_low_pass(), _chebyshev("low-pass", 2), "R1 R2", {"C1": 47 * NANO, "C2": 10 * NANO}),
    (stages.unity_gain_low_pass(), _chebyshev("low-pass", 2), "C1 C2", {"R1": 4700, "R2": 10000}),
    (
        stages.multiple_feedback_low_pass(),
        butterworth("low-pass", 2, 3),
        "R1 R2 R3",
        {"C1": 100 * NANO, "C2": 4 * NANO},
    ),
    (stages.multiple_feedback_low_pass(), _chebyshev("low-pass", 2), "R1 C1 C2", {"R2": 10000, "R3": 4700}),
    (
        stages.multiple_feedback_band_pass(),
        second_order("band-pass", 2),
        "R1 R2 R3",
        {"C1": 10 * NANO, "C2": 10 * NANO, "f0": 1000, "Q": sympy.Rational("4.7")},
    ),
    (
        stages.multiple_feedback_high_pass(),
        _chebyshev("high-pass", 2),
        "R1 R2 C2",
        {"C1": 10 * NANO, "C3": 22 * NANO},
    ),
    (
        stages.positive_feedback_band_pass(),
        second_order("band-pass", 2),
        "R1 R2 R3",
        {"C1": 10 * NANO, "C2": 10 * NANO, "f0": 1000, "Q": 2, "k": 2},
    ),
    (
        stages.three_pole_low_pass(),
        butterworth("low-pass", 3),
        "C1 C2 C3",
        {"R1": 10000, "R2": 8200, "R3": 12000},
    ),
    (
        stages.three_pole_low_pass(),
        _chebyshev("low-pass", 3),
        "C1 C2 C3",
        {"R1": 10000, "R2": 10000, "R3": 10000},
    ),
    (
        stages.three_pole_low_pass(),
        butterworth("low-pass", 3),
        "R1 R2 R3",
        {"C1": 22 * NANO, "C2": 47 * NANO, "C3": 2 * NANO},
    ),
    (
        stages.three_pole_high_pass(),
        butterworth("high-pass", 3),
        "R1 R2 R3",
        {"C1": 10 * NANO, "C2": 10 * NANO, "C3": 10 * NANO},
    ),
    (
        stages.state_variable("band"),
        second_order("band-pass", 3),
        "R1 R4 R6",
        {
            "R2": 10000,
            "R3": 10000,
            "R5": 1000,
            "R7": 15000,
            "C1": 10 * NANO,
            "C2": 10 * NANO,
            "f0": 1000,
            "Q": 12,
        },
    ),
    (
        stages.ladder_low_pass(),
        target("low-pass", (100, 30, 1)),
        "R1 R2",
        {"C1": sympy.Rational("1e-5"), "C2": sympy.Rational("1e-6")},
    ),
    (
        stages.doubly_terminated_ladder(),
        butterworth("low-pass", 2, sympy.Rational(1, 2)),
        "R1 L1 C1",
        {"R2": 600},
    ),
]


@pytest.mark.parametrize(("stage", "goal", "unknowns", "known"), CASES)
def test_printed_formulas_and_conditions_give_the_values(
    stage: TransferFunction, goal: Target, unknowns: str, known: dict[str, object]
) -> None:
    outcome = solve(problem(stage, goal, unknowns, "magnitude", known))
    assert isinstance(outcome, Solutions)
    for branch in outcome.branches:
        values = {name: float(sympy.N(number)) for name, number in known.items()}
        for equation in branch.equations:
            text = equation_text(equation.formula)
            expected = branch.values[equation.part]
            assert expected is not None
            if equation.degree > 2:
                _is_root(text, equation.part, values, expected)
                values[equation.part] = expected
            else:
                values[equation.part] = value(text, values)
                assert values[equation.part] == pytest.approx(expected, rel=1e-9)
        for condition in branch.conditions:
            text = condition_text(condition)
            assert condition.relation == "=" or holds(text, values), text


def _is_root(text: str, part: str, values: dict[str, float], expected: float) -> None:
    """Check that the polynomial in ``root(... in PART)`` changes its sign about the value."""
    inner = re.fullmatch(rf"root\((.*) in {part}\)", text)
    assert inner
    below, above = (value(inner[1], {**values, part: expected * (1 + shift)}) for shift in (-1e-7, 1e-7))
    assert below * above < 0


def test_root_index_counts_the_positive_roots_upwards() -> None:
    """(x - 1)(x - 2)(x - 3) as a stage: D1 = R1 + ... has R1, R2, R3 as any order of the roots."""
    known = {"C1": 22 * NANO, "C2": 47 * NANO, "C3": 2 * NANO}
    outcome = solve(
        problem(stages.three_pole_low_pass(), butterworth("low-pass", 3), "R1 R2 R3", known=known)
    )
    assert isinstance(outcome, Solutions)
    roots = [branch.equations[0].formula for branch in outcome.branches]
    assert all(isinstance(root, Root) for root in roots)
    firsts = [branch.values[branch.equations[0].part] for branch in outcome.branches]
    assert firsts == sorted(firsts)
    assert [root.index for root in roots] == sorted(root.index for root in roots)


def test_solution_in_symbols_of_an_equation_of_degree_three_has_an_open_index() -> None:
    outcome = solve(problem(stages.three_pole_low_pass(), butterworth("low-pass", 3), "C1 C2 C3"))
    assert isinstance(outcome, Solutions)
    (branch,) = outcome.branches
    root = branch.equations[0].formula
    assert isinstance(root, Root)
    assert root.index == 0
    assert set(branch.values.values()) == {None}


def test_exact_numbers_stay_exact_and_others_have_17_digits() -> None:
    C, k = sympy.symbols("C1 k")
    texts = {
        equation_text(C / 3): "C1/3",
        equation_text(sympy.Rational("0.49999041") * C): "0.49999041*C1",
        equation_text(C / (2400 * sympy.pi) ** 3): "C1/(2400*pi)**3",
        equation_text(sympy.Float("1.23456789012345678901", 60) * C): "1.2345678901234568*C1",
        equation_text(sympy.Float("1.5e-12", 60) * C): "1.5e-12*C1",
        equation_text((k - 1) ** sympy.Rational(1, 3)): "(k - 1)**(1/3)",
        equation_text(-C): "-C1",
        equation_text(1 - C * (k + 1)): "1 - C1*(k + 1)",
        equation_text(sympy.S.Zero): "0",
        equation_text(sympy.S.Half): "1/2",
    }
    assert list(texts) == list(texts.values())


def test_latex_has_indices_fractions_and_roots() -> None:
    R, C, k = sympy.symbols("R1 S1_C2 k")
    texts = {
        equation_latex(
            sympy.sqrt(R * (R - 2 * C)) / (2 * sympy.pi * k)
        ): r"\frac{\sqrt{R_{1} \left(R_{1} - 2 C_{\mathrm{S1},2}\right)}}{2 \pi k}",
        equation_latex(sympy.Float("1.5e-12", 60) * R): r"1.5 \cdot 10^{-12} R_{1}",
        equation_latex(1 / (2400 * sympy.pi) ** 2): r"\frac{1}{\left(2400 \pi\right)^{2}}",
        equation_latex((k - 1) ** sympy.Rational(1, 3)): r"\sqrt[3]{k - 1}",
        equation_latex((k - 1) ** sympy.Rational(2, 3)): r"\left(\sqrt[3]{k - 1}\right)^{2}",
        equation_latex(Root(R**3 - k, "R1", 1)): r"\operatorname{root}_{R_{1}}\left(R_{1}^{3} - k\right)",
        condition_latex(Condition(R, "<=", 2 * k)): r"R_{1} \le 2 k",
    }
    assert list(texts) == list(texts.values())


def test_formulas_hold_plain_symbols_that_others_can_replace() -> None:
    outcome = solve(problem(stages.first_order_low_pass(), target("low-pass", (100, 1)), "R1"))
    assert isinstance(outcome, Solutions)
    formula = outcome.branches[0].equations[0].formula
    assert isinstance(formula, sympy.Expr)
    assert formula.subs(sympy.Symbol("C1"), 2) == sympy.Rational(1, 200)
