"""Every kind of refusal, with the words it must have."""

import subprocess
import sys

import pytest
import sympy
from sympy import QQ
from sympy.polys.rings import PolyRing

from symcirc.match.problem import Gain, Problem, Refusal, Solutions
from symcirc.match.solve import solve
from symcirc.transfer.function import TransferFunction
from tests.match import stages
from tests.match.targets import Target, butterworth, problem, second_order, target

NANO = sympy.Rational(1, 10**9)
UNITY = stages.unity_gain_low_pass()
LOW, HIGH, BAND, NOTCH = (
    butterworth("low-pass", 2),
    butterworth("high-pass", 2),
    second_order("band-pass"),
    second_order("notch"),
)

TABLE = [
    # stage, target, unknowns, gain, known numbers, kind, words of the cause, words of the mend
    (
        UNITY,
        HIGH,
        "R1 R2",
        "exact",
        {},
        "shape",
        "a low-pass stage cannot give a high-pass response",
        "high-pass stage",
    ),
    (
        UNITY,
        BAND,
        "R1 R2",
        "free",
        {},
        "shape",
        "a low-pass stage cannot give a band-pass response",
        "band-pass stage",
    ),
    (
        UNITY,
        NOTCH,
        "R1 R2",
        "free",
        {},
        "shape",
        "a low-pass stage cannot give a band-stop response",
        "band-stop",
    ),
    (
        stages.multiple_feedback_band_pass(),
        LOW,
        "R1 R2 R3",
        "free",
        {},
        "shape",
        "a band-pass stage cannot give a low-pass response",
        "ask for a band-pass response",
    ),
    (
        stages.twin_t_notch(),
        LOW,
        "R k",
        "free",
        {},
        "shape",
        "a band-stop stage cannot give a low-pass response",
        "use a low-pass stage",
    ),
    (
        stages.bridged_notch(),
        LOW,
        "R1 R2 b",
        "free",
        {},
        "shape",
        "always has a term in s**2",
        "low-pass stage",
    ),
    (
        UNITY,
        butterworth("low-pass", 3),
        "R1 R2",
        "exact",
        {},
        "order",
        "the stage is of order 2; the target is of order 3",
        "order 2",
    ),
    (
        UNITY,
        butterworth("low-pass", 2, 2),
        "R1 R2",
        "exact",
        {},
        "gain",
        "the gain at zero frequency of this stage is 1 whatever its parts; the target asks for 2",
        "leave the gain out",
    ),
    (UNITY, butterworth("low-pass", 2, 2), "R1 R2 C1 C2", "magnitude", {}, "gain", "asks for 2", "gain"),
    (UNITY, butterworth("low-pass", 2, -1), "R1 R2", "exact", {}, "gain", "asks for -1", "gain"),
    (
        stages.multiple_feedback_low_pass(),
        butterworth("low-pass", 2, 3),
        "R1 R2 R3",
        "exact",
        {},
        "gain",
        "always negative",
        "change the sign",
    ),
    (
        stages.first_order_high_pass_with_gain(),
        target("high-pass", (5, 1), sympy.Rational(1, 2)),
        "R1 R3",
        "exact",
        {},
        "gain",
        "(R2 + R3)/R2, is never 1/2",
        "target",
    ),
    (
        stages.positive_feedback_low_pass(),
        butterworth("low-pass", 2, 2),
        "R1 R2",
        "exact",
        {"k": 3},
        "few",
        "the gain at zero frequency, k, is not left to be solved for and comes to 3; the target asks for 2",
        "let k be solved for",
    ),
    (
        stages.positive_feedback_low_pass(),
        butterworth("low-pass", 2, 2),
        "R1 R2",
        "exact",
        {},
        "few",
        "k, is not left to be solved for",
        "let k be solved for",
    ),
    (
        stages.equal_parts_low_pass(),
        butterworth("low-pass", 2),
        "R",
        "free",
        {"k": 2},
        "few",
        "follows from the others and cannot be met: only R can be solved for",
        "untie",
    ),
    (
        UNITY,
        LOW,
        "C1",
        "exact",
        {},
        "few",
        "C2*(R1 + R2), is not left to be solved for",
        "R1, R2 or C2",
    ),
    (
        UNITY,
        LOW,
        "R1 R2 C1 C2",
        "exact",
        {},
        "many",
        "the target sets 2 values, and 4 parts are free",
        "choose 2 of them: C1 and C2",
    ),
    (stages.divided_notch(), NOTCH, "R1 R2 R3 R4", "free", {}, "many", "3 values, and 4 parts", "R3; or R4"),
    (
        UNITY,
        target("low-pass", (1, -1, 1)),
        "R1 R2",
        "exact",
        {},
        "sign",
        "is always positive; the target asks for -1",
        "target",
    ),
    (
        UNITY,
        LOW,
        "R1 R2",
        "exact",
        {"C1": 10 * NANO, "C2": 22 * NANO},
        "negative",
        "C1 = 10 nF is less than 2*C2 = 44 nF",
        "C1 >= 2*C2",
    ),
    (
        stages.multiple_feedback_band_pass(),
        second_order("band-pass", 60),
        "R1 R2 R3",
        "magnitude",
        {"C1": NANO, "C2": NANO, "Q": 5},
        "negative",
        "Q = 5 is not more than 2*sqrt(15)*sqrt(C2/(C1 + C2)) = 5.47723",
        "Q > 2*sqrt(15)",
    ),
    (
        stages.ladder_low_pass(),
        LOW,
        "R1 R2",
        "exact",
        {},
        "negative",
        "no positive R1 and R2 give this target, whatever the values of C1 or C2",
        "another target",
    ),
    (
        stages.three_pole_low_pass(),
        butterworth("low-pass", 3),
        "R1 R2 R3",
        "exact",
        {"C1": 22 * NANO, "C2": 22 * NANO, "C3": 22 * NANO},
        "negative",
        "no positive",
        "other",
    ),
]


@pytest.mark.parametrize(("stage", "goal", "unknowns", "gain", "known", "kind", "cause", "mend"), TABLE)
def test_refusal_names_its_cause_and_a_mend(
    stage: TransferFunction,
    goal: Target,
    unknowns: str,
    gain: Gain,
    known: dict[str, object],
    kind: str,
    cause: str,
    mend: str,
) -> None:
    free = "k" if "k" in unknowns.split() else ""
    refusal = solve(problem(stage, goal, unknowns, gain, known, free))
    assert isinstance(refusal, Refusal)
    assert (refusal.kind, cause in refusal.cause, mend in refusal.mend) == (kind, True, True), refusal


def test_groups_to_choose_would_all_do_and_have_capacitors_first() -> None:
    refusal = solve(problem(UNITY, LOW, "R1 R2 C1 C2"))
    assert isinstance(refusal, Refusal)
    assert refusal.groups[0] == ("C1", "C2")
    assert len(refusal.groups) == 6
    for group in refusal.groups:
        rest = [name for name in ("R1", "R2", "C1", "C2") if name not in group]
        assert isinstance(solve(problem(UNITY, LOW, " ".join(rest))), Solutions)


def test_groups_leave_out_what_cannot_be_chosen_together() -> None:
    """R4/R3 sets the numerator of the divided notch: exactly one of the two has to be chosen, as R1 and R2 must not."""
    refusal = solve(problem(stages.divided_notch(), NOTCH, "R1 R2 R3 R4", "free"))
    assert isinstance(refusal, Refusal)
    assert refusal.groups == (("R3",), ("R4",))


def test_target_that_holds_an_unknown_is_refused() -> None:
    refusal = solve(problem(stages.equal_parts_low_pass(), second_order("low-pass"), "R k Q", "free"))
    assert isinstance(refusal, Refusal)
    assert refusal.kind == "target"
    assert refusal.mend == "choose Q"


def test_target_that_is_no_real_number_is_refused() -> None:
    refusal = solve(problem(UNITY, target("low-pass", (sympy.I, 1, 1)), "R1 R2"))
    assert isinstance(refusal, Refusal)
    assert refusal.kind == "target"


def test_match_is_given_up_where_the_work_is_beyond_its_bound_or_is_stopped() -> None:
    def asked(**bounds: object) -> Refusal | Solutions:
        return solve(problem(stages.three_pole_low_pass(), butterworth("low-pass", 3), "R1 R2 R3"), **bounds)

    for bounds in ({"bound": 100}, {"should_stop": lambda: True}):
        refusal = asked(**bounds)
        assert isinstance(refusal, Refusal)
        assert refusal.kind == "given up"
    calls: list[int] = []
    assert isinstance(asked(should_stop=lambda: bool(calls.append(1))), Solutions)
    assert len(calls) > 20


def test_violated_condition_comes_with_the_refusal() -> None:
    known = {"C1": 10 * NANO, "C2": 22 * NANO}
    refusal = solve(problem(UNITY, LOW, "R1 R2", known=known))
    assert isinstance(refusal, Refusal)
    assert refusal.condition is not None
    assert str(refusal.condition.left) == "C1"


def test_tied_part_that_would_be_negative_is_a_condition() -> None:
    """R3 tied to (k - 1)*R4 needs k > 1, which the gain of an attenuating target contradicts."""
    stage = stages.positive_feedback_low_pass()
    for gain, is_met in ((2, True), (sympy.Rational(3, 5), False)):
        asked = problem(
            stage, butterworth("low-pass", 2, gain), "R1 R2 k", free="k", known={"C1": 100 * NANO, "C2": NANO}
        )
        k = sympy.Symbol("k")
        tied = Problem(**{**asked.__dict__, "positives": {"R3": (k - 1) * sympy.Symbol("R4")}})
        assert isinstance(solve(asked), Solutions)
        outcome = solve(tied)
        assert isinstance(outcome, Solutions) == is_met
        if isinstance(outcome, Refusal):
            assert "no positive R1, R2, k and R3 give this target" in outcome.cause


def test_constant_stage_is_matched_by_its_gain() -> None:
    """An inverting amplifier, -R2/R1: no s at all."""
    ring = PolyRing(["R1", "R2"], QQ)
    r1, r2 = ring.gens
    stage = TransferFunction(ring, (-r2,), (r1,))
    outcome = solve(problem(stage, ((sympy.Integer(-5),), (sympy.S.One,)), "R2", known={"R1": 1000}))
    assert isinstance(outcome, Solutions)
    assert outcome.branches[0].values == {"R2": 5000.0}
    refusal = solve(problem(stage, ((sympy.Integer(5),), (sympy.S.One,)), "R2"))
    assert isinstance(refusal, Refusal)
    assert "always negative" in refusal.cause


def test_match_imports_no_heavy_numeric_library() -> None:
    code = "import sys, symcirc.match.solve; sys.exit('scipy' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_term_that_a_denominator_lacks_is_named() -> None:
    """L and C without a resistor: no term in s, so that no damped response can be had."""
    ring = PolyRing(["L1", "C1"], QQ)
    l1, c1 = ring.gens
    lossless = TransferFunction(ring, (ring(1),), (ring(1), ring(0), l1 * c1))
    refusal = solve(problem(lossless, LOW, "L1"))
    assert isinstance(refusal, Refusal)
    assert refusal.cause == "the denominator of the stage has no term in s, that of the target has"
    undamped = target("low-pass", (100, 0, 1))
    refusal = solve(problem(UNITY, undamped, "R1 R2"))
    assert isinstance(refusal, Refusal)
    assert refusal.cause == "the denominator of the target has no term in s, that of the stage has"
    outcome = solve(problem(lossless, undamped, "L1"))
    assert isinstance(outcome, Solutions)


def test_term_that_a_numerator_lacks_is_named() -> None:
    refusal = solve(problem(UNITY, second_order("all-pass"), "R1 R2", "free"))
    assert isinstance(refusal, Refusal)
    assert refusal.cause == "the numerator of the stage has no term in s and s**2, as the target's has"


def test_part_without_influence_has_to_be_chosen() -> None:
    """C2 is in no coefficient."""
    ring = PolyRing(["R1", "C1", "C2"], QQ)
    r1, c1, _ = ring.gens
    stage = TransferFunction(ring, (ring(1),), (ring(1), r1 * c1))
    refusal = solve(problem(stage, target("low-pass", (100, 1)), "R1 C2"))
    assert isinstance(refusal, Refusal)
    assert refusal.groups == (("C2",),)
