"""Corners: double roots, constants in the stage, parameters of any sign, cases that an elimination passes over."""

import math

import pytest
import sympy
from sympy import QQ
from sympy.polys.rings import PolyRing

from symcirc.match.cases import missing_cases
from symcirc.match.elimination import subresultants
from symcirc.match.formula import condition_text, equation_text
from symcirc.match.problem import Refusal, Refused, Solutions
from symcirc.match.quantities import plain_quantities
from symcirc.match.solve import solve
from symcirc.match.triangular import State, triangular
from symcirc.match.work import Work
from symcirc.transfer.function import TransferFunction
from tests.match import stages
from tests.match.arithmetic import value
from tests.match.targets import butterworth, problem, second_order, target

NANO = sympy.Rational(1, 10**9)


def _solved(*arguments: object, **more: object) -> Solutions:
    outcome = solve(problem(*arguments, **more))
    assert isinstance(outcome, Solutions), outcome
    return outcome


def test_double_root_is_one_branch_with_an_equality() -> None:
    known = {"C1": 20 * NANO, "C2": 10 * NANO}
    outcome = _solved(stages.unity_gain_low_pass(), butterworth("low-pass", 2), "R1 R2", known=known)
    (branch,) = outcome.branches
    assert [condition_text(c) for c in branch.conditions] == ["C1 == 2*C2"]
    assert branch.values["R1"] == pytest.approx(branch.values["R2"], rel=1e-15)


def test_equality_is_told_at_sixty_digits_of_a_target() -> None:
    """Rounded to 60 digits, the Butterworth target still meets C1 = 2 C2; with a part in 1e40 more it does not."""
    known = {"C1": 20 * NANO, "C2": 10 * NANO}
    for excess, count in ((0, 1), (sympy.Rational(1, 10**40), 0), (-sympy.Rational(1, 10**40), 2)):
        w = 2400 * sympy.pi
        denominator = ((w**2 * (1 + excess)).evalf(60), (sympy.sqrt(2) * w).evalf(60), sympy.S.One)
        outcome = solve(
            problem(stages.unity_gain_low_pass(), target("low-pass", denominator), "R1 R2", known=known)
        )
        assert (len(outcome.branches) if isinstance(outcome, Solutions) else 0) == count


def test_double_root_of_any_choice_is_one_branch() -> None:
    """The ladder of equal terminations reaches its gain of 1/2 in one way only: L1 = R2 sqrt(2)/w."""
    half = sympy.Rational(1, 2)
    outcome = _solved(stages.doubly_terminated_ladder(), butterworth("low-pass", 2, half), "R1 L1 C1")
    (branch,) = outcome.branches
    assert branch.conditions == ()
    values = {"R2": 600.0}
    for equation in branch.equations:
        values[equation.part] = value(equation_text(equation.formula), values)
    w = 2400 * math.pi
    assert values["L1"] == pytest.approx(600 * math.sqrt(2) / w, rel=1e-12)
    assert values["C1"] == pytest.approx(math.sqrt(2) / (600 * w), rel=1e-12)


def test_square_roots_and_pi_in_the_stage_are_constants() -> None:
    """C1 tied to 2*sqrt(2)*C2 and R1 to R/pi: the unity-gain low-pass with fixed ratios has one frequency left."""
    ring = PolyRing(["R2", "C2", "pi"], QQ.algebraic_field(sympy.sqrt(2)))
    r2, c2, pi = ring.gens
    root = ring(ring.domain.from_sympy(2 * sympy.sqrt(2)))
    # numerator pi, with R1 = R2/pi multiplied out
    stage = TransferFunction(ring, (pi,), (pi, c2 * (r2 + pi * r2), root * r2**2 * c2**2))
    w = sympy.Integer(1000)
    q = sympy.sqrt(2 * sympy.sqrt(2) / sympy.pi) / (1 + 1 / sympy.pi)
    goal = target("low-pass", (w**2, w / q, 1))
    outcome = _solved(stage, goal, "R2", known={"C2": 10 * NANO})
    w0 = math.sqrt(math.pi / (2 * math.sqrt(2))) / 1e-8
    assert outcome.branches[0].values["R2"] == pytest.approx(w0 / 1000, rel=1e-12)


def test_parameter_known_to_be_negative_counts_with_its_sign() -> None:
    """With k = -2 the gain is -2 and the numerator's sign is met only so."""
    known = {"k": -2, "C1": 100 * NANO, "C2": 10 * NANO}
    w = 2 * math.pi * 1200
    for gain, is_met in ((-2, True), (2, False)):
        goal = target("low-pass", ((2400 * sympy.pi) ** 2, 2400 * sympy.pi * 4, 1), gain)
        outcome = solve(problem(stages.positive_feedback_low_pass(), goal, "R1 R2", known=known))
        assert isinstance(outcome, Solutions) == is_met
        for branch in outcome.branches if isinstance(outcome, Solutions) else ():
            r1, r2 = branch.values["R1"], branch.values["R2"]
            assert r1 * r2 * 1e-15 * w**2 == pytest.approx(1, rel=1e-12)
            assert 1e-8 * (r1 + r2) + 3 * r1 * 1e-7 == pytest.approx(4 / w, rel=1e-12)


def test_parameter_of_any_sign_may_come_out_negative() -> None:
    """Q below 1/3 needs k = 3 - 1/Q below 0 in the equal-parts low-pass."""
    goal = target("low-pass", (10**6, 4000, 1))
    stage = stages.equal_parts_low_pass()
    outcome = _solved(stage, goal, "R k", gain="free", known={"C": NANO}, free="k")
    assert outcome.branches[0].values["k"] == pytest.approx(-1, rel=1e-14)
    assert isinstance(solve(problem(stage, goal, "R k", gain="free", known={"C": NANO})), Refusal)


def test_coefficient_that_follows_is_met_where_the_target_agrees() -> None:
    """With R alone free, Q follows from k: k = 2 meets Q = 1, and k = 3 - sqrt(2) the Butterworth Q."""
    stage = stages.equal_parts_low_pass()
    one = target("low-pass", (10**6, 1000, 1))
    for goal, k, text in ((one, 2, "k == 2"), (butterworth("low-pass", 2), 3 - sympy.sqrt(2), "== 0")):
        outcome = _solved(stage, goal, "R", gain="free", known={"k": k})
        assert text in condition_text(outcome.branches[0].conditions[0])
        assert isinstance(solve(problem(stage, goal, "R", gain="free", known={"k": k + NANO})), Refusal)


def test_gain_that_chosen_numbers_set_is_stated_as_an_equality() -> None:
    goal = butterworth("low-pass", 2, 2)
    outcome = _solved(stages.positive_feedback_low_pass(), goal, "R1 R2", known={"k": 2})
    assert condition_text(outcome.branches[0].conditions[0]) == "k == 2"


def test_nothing_to_solve_for_is_a_solution_where_the_stage_is_the_target() -> None:
    known = {"R1": 1000, "C1": NANO}
    outcome = _solved(stages.first_order_low_pass(), target("low-pass", (10**6, 1)), "", known=known)
    assert outcome.branches[0].equations == ()
    wrong = solve(problem(stages.first_order_low_pass(), target("low-pass", (10**5, 1)), "", known=known))
    assert isinstance(wrong, Refusal)
    assert wrong.kind == "few"


def test_frequency_and_q_may_have_numbers_and_stay_symbols() -> None:
    known = {"C1": 100 * NANO, "C2": NANO, "f0": 1000, "Q": 2}
    outcome = _solved(stages.unity_gain_low_pass(), second_order("low-pass"), "R1 R2", known=known)
    assert [condition_text(c) for c in outcome.branches[0].conditions] == ["C1 >= 4*Q**2*C2"]
    product = outcome.branches[0].values["R1"] * outcome.branches[0].values["R2"] * 1e-16
    assert product == pytest.approx((2000 * math.pi) ** -2, rel=1e-12)


def test_roots_of_symbols_in_a_target_are_kept() -> None:
    """The band-pass between f1 and f2 has its centre at their geometric mean: w0^2 = 4 pi^2 f1 f2."""
    f1, f2 = sympy.symbols("f1 f2")
    w = 2 * sympy.pi * sympy.sqrt(f1 * f2)
    goal = target("low-pass", (w, 1))
    outcome = _solved(
        stages.first_order_low_pass(), goal, "R1", known={"f1": 100, "f2": 400, "C1": 10 * NANO}
    )
    assert outcome.branches[0].values["R1"] == pytest.approx(1e8 / (2 * math.pi * 200), rel=1e-14)


def test_two_stages_in_a_row_are_solved_together() -> None:
    """Both unity-gain stages' capacitors at once: the two sections of the fourth order go to either stage."""
    ring = PolyRing(["R1", "R2", "R3", "R4", "C1", "C2", "C3", "C4"], QQ)
    r1, r2, r3, r4, c1, c2, c3, c4 = ring.gens
    first, second = [ring(1), c2 * (r1 + r2), r1 * r2 * c1 * c2], [ring(1), c4 * (r3 + r4), r3 * r4 * c3 * c4]
    rows = [sum((first[i] * second[k - i] for i in range(3) if 0 <= k - i < 3), ring(0)) for k in range(5)]
    stage = TransferFunction(ring, (ring(1),), tuple(rows))
    w, root = 2000 * sympy.pi, sympy.sqrt(2)
    sections = [sympy.sqrt(2 - root), sympy.sqrt(2 + root)]
    a, b = sections
    denominator = (w**4, (a + b) * w**3, (2 + a * b) * w**2, (a + b) * w, 1)
    known = dict.fromkeys(("R1", "R2", "R3", "R4"), 10000)
    outcome = _solved(stage, target("low-pass", denominator), "C1 C2 C3 C4", known=known)
    expected = [float(s) / (2 * 10_000 * 2000 * math.pi) for s in sections]
    found = sorted(branch.values["C2"] for branch in outcome.branches)
    assert found == pytest.approx(expected, rel=1e-9)


def test_elimination_without_a_linear_equation_goes_by_resultants() -> None:
    """x^2 + y^2 = a, x^2 y^2 - x y = 1: no equation is of first degree in an unknown."""
    quantities = plain_quantities("x y", "a")
    x, y, a = quantities.ring.gens
    state = triangular([x**2 + y**2 - a, x**2 * y**2 - x * y - 1], (0, 1), quantities, Work())
    assert state is not None
    first, second = state.steps
    assert first.equation.degree(first.unknown) in (4, 8)
    assert second.unknown != first.unknown


def test_subresultants_end_in_a_common_factor() -> None:
    quantities = plain_quantities("x", "a")
    x, a = quantities.ring.gens
    last = subresultants((x - a) * (x + 1), (x - a) * (x**2 + 1), 0, Work())[-1]
    assert not last.rem(x - a)


def test_case_where_a_pivot_is_zero_is_found() -> None:
    """x (y - 1) = z (y - 1) passes over y = 1, where x + z = a and x z = 1 remain."""
    quantities = plain_quantities("x y z", "a b")
    x, y, z, a, b = quantities.ring.gens
    equations = [(x - z) * (y - 1), x + z - a, x * z - b * y]
    state = triangular(equations, (0, 1, 2), quantities, Work())
    assert state is not None
    cases: list[State] = [state, *missing_cases(state, quantities, Work())]
    degrees = sorted(max(s.equation.degree(s.unknown) for s in case.steps) for case in cases)
    assert degrees == [1, 2]


def test_equations_in_one_unknown_keep_what_they_have_in_common() -> None:
    """x^3 = a x and x^2 = a together are x^2 = a; with x^2 = b they contradict each other."""
    quantities = plain_quantities("x y", "a b")
    x, y, a, b = quantities.ring.gens
    cubic = (x**2 - a) * (x**2 + 3 * x - b)
    state = triangular([cubic, (x**2 - a) * (x**2 - x - 1), y**2 - x**3], (0, 1), quantities, Work())
    assert state is not None
    assert [step.equation for step in state.steps] == [x**2 - a, x**3 - y**2]
    assert triangular([x**2 - a, x**2 - b, y**2 - x**3], (0, 1), quantities, Work()) is None
    assert triangular([x * y - 1, x * y - 2], (0, 1), quantities, Work()) is None


def test_way_that_grows_too_long_is_left_and_given_up_where_there_is_no_other() -> None:
    quantities = plain_quantities("x y z", "a b")
    x, y, z, a, b = quantities.ring.gens
    long = (x + y + z + a + b) ** 12 - 7
    equations = [x * (1 + y + z + a) ** 6 - (y + z + b) ** 6, long, y**2 * z - a]
    with pytest.raises(Refused, match="too large"):
        triangular(equations, (0, 1, 2), quantities, Work())


def test_equations_that_leave_an_unknown_open_say_which() -> None:
    quantities = plain_quantities("x y", "a")
    x, y, a = quantities.ring.gens
    state = triangular([x * y - a, x**2 * y - a * x], (0, 1), quantities, Work())
    assert state is not None
    assert len(state.open) == 1
