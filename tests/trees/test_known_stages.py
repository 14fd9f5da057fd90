"""Stages whose transfer functions are in the books.

Sources, all from memory: Sedra and Smith, "Microelectronic Circuits", for the single-amplifier stages, the
instrumentation amplifier and the loop gain; Sallen and Key (1955) for the follower low-pass; Antoniou (1969)
for the general impedance converter; Tow (1968) and Thomas (1971) for the three-amplifier biquad; Sedra and
Smith (1970) for the conveyor.
"""

from __future__ import annotations

import pytest
import sympy

from symcirc.circuit.model import CurrentDrive, VoltageDrive
from symcirc.sheet.model import GROUND
from symcirc.trees.answer import determinants, ratio
from symcirc.trees.collect import collected
from symcirc.trees.count import count
from tests.trees.amplifiers import loop_setup, with_finite_gain
from tests.trees.samples import PLACE, circuit, device, node_current, part, part_current, setup, voltage

FROM_INPUT = VoltageDrive("in", GROUND)
GAIN = voltage("out"), voltage("in")


def function(made, asked) -> sympy.Expr:
    found = ratio(made, asked)
    s = sympy.Symbol("s")
    names = sympy.symbols(found.symbols)
    over, under = (
        sum(
            coefficient
            * s**power
            * sympy.prod(name**exponent for name, exponent in zip(names, each, strict=True))
            for power, polynomial in enumerate(side)
            for each, coefficient in polynomial.items()
        )
        for side in (found.numerator, found.denominator)
    )
    return over / under


def same(found: sympy.Expr, expected: str) -> bool:
    return sympy.cancel(found - sympy.sympify(expected)) == 0


def opamp(name: str, plus: str, minus: str, drives: str):
    return device(name, "opamp", plus=(plus,), minus=(minus,), drives=(drives,))


def test_inverting_amplifier():
    made = circuit([part("R1", "in", "m"), part("R2", "m", "out")], [opamp("U1", GROUND, "m", "out")])
    assert same(function(made, setup(FROM_INPUT, *GAIN)), "-R2/R1")
    assert same(function(made, setup(FROM_INPUT, voltage("in"), node_current("in"))), "R1")
    assert same(function(made, setup(FROM_INPUT, part_current("U1"), voltage("in"))), "-1/R1")


def test_non_inverting_amplifier_of_finite_gain_and_its_loop_gain():
    ideal = circuit([part("R1", "m", GROUND), part("R2", "m", "out")], [opamp("U1", "in", "m", "out")])
    real = with_finite_gain(ideal, {"U1": "A"})
    assert same(function(ideal, setup(FROM_INPUT, *GAIN)), "1 + R2/R1")
    assert same(function(real, setup(FROM_INPUT, *GAIN)), "A/(1 + A*R1/(R1 + R2))")
    loop = loop_setup(real, "T", "U1", (("in", GROUND),), PLACE)
    assert same(-sympy.Symbol("A") * function(real, loop), "A*R1/(R1 + R2)")
    assert same(function(ideal, loop_setup(ideal, "T", "U1", (("in", GROUND),), PLACE)), "-R1/(R1 + R2)")


def test_sallen_and_key_low_pass():
    parts = [part("R1", "in", "a"), part("R2", "a", "p"), part("C1", "a", "out"), part("C2", "p", GROUND)]
    made = circuit(parts, [opamp("U1", "p", "out", "out")])
    expected = "1/(s**2*R1*R2*C1*C2 + s*C2*(R1 + R2) + 1)"
    assert same(function(made, setup(FROM_INPUT, *GAIN)), expected)


def test_multiple_feedback_low_pass():
    parts = [part("R1", "in", "a"), part("R3", "a", "m"), part("C2", "m", "out")]
    parts += [part("C1", "a", GROUND), part("R2", "a", "out")]
    made = circuit(parts, [opamp("U1", GROUND, "m", "out")])
    expected = "-(R2/R1)/(s**2*C1*C2*R2*R3 + s*C2*(R2 + R3 + R2*R3/R1) + 1)"
    assert same(function(made, setup(FROM_INPUT, *GAIN)), expected)


def test_general_impedance_converter():
    chain = ["in", "a", "b", "c", "d", GROUND]
    parts = [part(f"Z{k}", chain[k - 1], chain[k]) for k in range(1, 6)]
    made = circuit(parts, [opamp("U1", "in", "b", "c"), opamp("U2", "d", "b", "a")])
    asked = setup(CurrentDrive("in"), voltage("in"), node_current("in"))
    assert same(function(made, asked), "Z1*Z3*Z5/(Z2*Z4)")


def test_three_amplifier_biquad():
    parts = [part("R1", "in", "m1"), part("R2", "m1", "out"), part("C1", "m1", "bp"), part("R3", "m1", "bp")]
    parts += [part("R4", "bp", "m2"), part("C2", "m2", "lp"), part("R5", "lp", "m3"), part("R6", "m3", "out")]
    amplifiers = [
        opamp("U1", GROUND, "m1", "bp"),
        opamp("U2", GROUND, "m2", "lp"),
        opamp("U3", GROUND, "m3", "out"),
    ]
    found = function(circuit(parts, amplifiers), setup(FROM_INPUT, *GAIN))
    expected = "-(R2/R1)/(1 + s*C2*R4*R5*R2/(R6*R3) + s**2*C1*C2*R2*R4*R5/R6)"
    assert same(found, expected)


def test_instrumentation_amplifier_has_gain_for_the_difference_only():
    parts = [part("R1", "a", "b"), part("R2", "a", "o1"), part("R3", "b", "o2"), part("R4", "p", "q")]
    amplifiers = [opamp("U1", "p", "a", "o1"), opamp("U2", "q", "b", "o2")]
    made = circuit(parts, amplifiers)
    floating = setup(VoltageDrive("p", "q"), voltage("o1", "o2"), voltage("p", "q"), (("q", GROUND),))
    assert same(function(made, floating), "1 + (R2 + R3)/R1")


def test_ideal_transformer_reflects_by_the_square_of_its_ratio():
    made = circuit(
        [part("R1", "out", GROUND)],
        [device("T1", "transformer", primary=("in", GROUND), secondary=("out", GROUND))],
    )
    assert same(function(made, setup(FROM_INPUT, *GAIN)), "1/T1_ratio")
    assert same(function(made, setup(FROM_INPUT, voltage("in"), node_current("in"))), "T1_ratio**2*R1")


def test_conveyor_follows_and_conveys():
    made = circuit(
        [part("R1", "x", GROUND), part("R2", "out", GROUND)],
        [device("K1", "conveyor", -1, x=("x",), y=("in",), z=("out",))],
    )
    assert same(function(made, setup(FROM_INPUT, voltage("x"), voltage("in"))), "1")
    # the current into x is -V/R1; into z flows minus that, out of R2's node
    assert same(function(made, setup(FROM_INPUT, *GAIN)), "-R2/R1")


def test_conveyor_with_two_trees_and_no_solution():
    """The design's example: sign -, y grounded, a resistor from x to z. Two trees that cancel."""
    made = circuit([part("R1", "x", "z")], [device("K1", "conveyor", -1, x=("x",), y=(GROUND,), z=("z",))])
    asked = setup(CurrentDrive("z"), voltage("z"), node_current("z"))
    walked = determinants(made, asked)
    assert count(walked)[1] == 2
    assert collected(walked).roots[1] == 0
    assert ratio(made, asked).denominator == []


def test_a_stage_that_loads_nothing_cancels():
    parts = [part("R1", "in", "m"), part("R2", "m", "out"), part("R3", "out", "n"), part("C4", "n", "far")]
    parts += [part("R5", "n", "far"), part("R6", "far", GROUND)]
    made = circuit(parts, [opamp("U1", GROUND, "m", "out"), opamp("U2", GROUND, "n", "far")])
    found = ratio(made, setup(FROM_INPUT, *GAIN))
    assert set(found.idle) == {"R3", "C4", "R5", "R6"}
    assert sorted(found.symbols) == ["R1", "R2"]


def test_a_long_load_on_an_output_cancels():
    parts = [part("R1", "in", "m"), part("R2", "m", "out")]
    for k in range(400):
        parts.append(part(f"R1{k:03}", f"n{k - 1}" if k else "out", f"n{k}"))
        parts.append(part(f"C1{k:03}", f"n{k}", GROUND))
    made = circuit(parts, [opamp("U1", GROUND, "m", "out")])
    assert len(ratio(made, setup(FROM_INPUT, *GAIN)).idle) == 800


def test_a_stage_without_solution_is_not_cancelled():
    parts = [part("R1", "in", "m"), part("R2", "m", "out"), part("R3", "x", "z"), part("R4", "out", "y")]
    made = circuit(
        parts, [opamp("U1", GROUND, "m", "out"), device("K1", "conveyor", -1, x=("x",), y=("y",), z=("z",))]
    )
    assert ratio(made, setup(FROM_INPUT, *GAIN)).denominator == []


@pytest.mark.parametrize("over", [voltage("a"), part_current("R1"), node_current("in")])
def test_an_asked_quantity_over_itself_is_one(over):
    made = circuit([part("R1", "in", "a"), part("C1", "a", GROUND)])
    assert same(function(made, setup(FROM_INPUT, over, over)), "1")


def test_sources_that_fight_leave_nothing():
    made = circuit([part("R1", "in", GROUND)])
    found = ratio(made, setup(FROM_INPUT, voltage("in"), voltage("in"), (("in", GROUND),)))
    assert (found.numerator, found.denominator) == ([], [])


def test_an_unknown_part_is_an_error():
    made = circuit([part("R1", "in", GROUND)])
    with pytest.raises(KeyError):
        ratio(made, setup(FROM_INPUT, part_current("R2"), voltage("in")))
