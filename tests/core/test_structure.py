"""The questions of structure: what is refused, where and in which words; what is let through; what is remarked."""

from __future__ import annotations

import pytest

from symcirc.circuit import build_circuit, build_setup
from symcirc.circuit.structure import bias_remarks, explain_singular, refuse_structure
from symcirc.complaints import Complaint
from symcirc.derivation import derive, pose, pose_real
from tests.core.functions import posed, ratio_of, read

DIVIDER = "in -- R1 -- out -- R2 -- gnd\n"
FOLLOWER = "U1 opamp: plus a, minus out, drives out\n"

REFUSED = [
    # an amplifier whose output drives nothing
    (
        "in -- R1 -- m -- R2 -- gnd\nU1 opamp: plus gnd, minus m, drives o\nask H = V_m/V_in",
        (2, 1),
        "the output of `U1` drives nothing: node `o` has no other part",
    ),
    (
        "in -- R1 -- m -- R2 -- gnd\nU1 opamp: plus gnd, minus m, drives o\nask H = V_o/V_in",
        (2, 1),
        "the output of `U1` drives nothing",
    ),
    (
        "in -- R1 -- m -- R2 -- gnd\nU1 opamp: plus in, minus m, drives gnd\nask H = V_m/V_in",
        (2, 1),
        "the output of `U1` is on gnd",
    ),
    # a node that hangs on one terminal
    (DIVIDER + "out -- C1 -- x\nask H = V_out/V_in", (2, 14), "node `x` hangs on `C1` alone"),
    (DIVIDER + "G1 vccs: senses x, drives out\nask H = V_out/V_in", (2, 17), "node `x` hangs on `G1` alone"),
    (
        "block cell (p)\np -- R1 -- gnd\np -- C1 -- x\nend\nin -- R2 -- a\nuse cell as S1 (a)\nask H = V_a/V_in",
        (3, 12),
        "node `S1.x` hangs on `S1.C1` alone",
    ),
    # only inputs on a node
    (
        DIVIDER
        + "U1 opamp: plus x, minus out, drives out2\nG1 vccs: senses x, drives out\nout2 -- R3 -- out\n"
        "ask H = V_out/V_in",
        (2, 16),
        "only inputs stand on node `x` (G1 and U1), so nothing sets its voltage",
    ),
    (
        DIVIDER + "E1 vcvs: senses x, drives y\ny -- R3 -- gnd\nask H = V_out/V_in\nask K = V_x/V_in",
        (2, 17),
        "only inputs stand on node `x` (E1), so nothing sets its voltage",
    ),
    # no path to ground
    (DIVIDER + "x -- R3 -- y -- C1 -- x\nask H = V_out/V_in", (2, 1), "node `x` has no path to gnd"),
    (
        DIVIDER + "T1 transformer: primary out, secondary x y\nx -- R3 -- y\nask H = V_out/V_in",
        (2, 40),
        "node `x` has no path to gnd",
    ),
    (
        "in -- R1 -- a\nb -- R2 -- c\na -- R3 -- gnd\nask H = V_a/V_in\nask K = V_b/(V_b - V_c)",
        (2, 1),
        "node `b` has no path to gnd",
    ),
    ("in -- R1 -- a -- R2 -- in\nask H = V_a/I_in", (1, 1), "node `in` has no path to gnd"),
    # a voltage drive where a source sets the voltage already
    (
        "a -- R1 -- gnd\na -- R2 -- out\n" + FOLLOWER + "ask H = V_a/V_out",
        (4, 13),
        "node `out` is the drive of `H`, and `U1` sets its voltage too: two ideal sources fight",
    ),
    (
        "a -- R1 -- gnd\nE1 vcvs: senses a, drives gnd b\nb -- R2 -- a\nask H = V_a/V_b",
        (4, 13),
        "node `b` is the drive of `H`, and `E1` sets its voltage too",
    ),
    (
        "a -- R1 -- gnd\na -- R2 -- b\nF1 cccs: senses b, drives a\nask H = V_a/V_b",
        (4, 13),
        "node `b` is the drive of `H`, and `F1` sets its voltage too",
    ),
    (
        "a -- R1 -- gnd\na -- R2 -- b\nH1 ccvs: senses a, drives b\nask H = I_R2/I_R1 driven at b",
        (4, 5),
        "node `b` is the drive of `H`, and `H1` sets its voltage too",
    ),
]


def refuse(text: str) -> Complaint:
    sheet = read(text)
    circuit = build_circuit(sheet)
    with pytest.raises(Complaint) as caught:
        refuse_structure(circuit, sheet.asks, tuple(build_setup(circuit, sheet.asks, a) for a in sheet.asks))
    return caught.value


@pytest.mark.parametrize(("text", "place", "words"), REFUSED)
def test_a_structure_that_no_circuit_may_have_is_refused_at_its_place(
    text: str, place: tuple[int, int], words: str
) -> None:
    complaint = refuse(text)
    assert words in complaint.cause
    assert (complaint.place.line, complaint.place.column) == place
    assert complaint.mend


LET_THROUGH = [
    # asked, driven, shorted and port nodes may hang on one terminal
    DIVIDER + "out -- C1 -- x\nask H = V_x/V_in",
    DIVIDER + "out -- C1 -- x\nask H = (V_out - V_x)/V_in",
    DIVIDER + "in -- R3 -- gnd\nout -- C1 -- x\nask H = V_out/V_x",
    DIVIDER + "in -- R3 -- gnd\nout -- C1 -- x\nask H = V_out/I_x",
    DIVIDER + "in -- R3 -- gnd\nout -- C1 -- x\nask H = I_R1/I_R2 driven at x",
    DIVIDER + "out -- C1 -- x\nask H = V_out/V_in with V_x = 0",
    DIVIDER + "out -- C1 -- x\nask H = V_out/V_in with I_x = 0",
    DIVIDER + "block cell (p)\np -- R1 -- gnd\nend\nuse cell as S1 (x)\nask H = V_out/V_in",
    # an output may drive its own input alone
    "in -- R1 -- a -- R2 -- gnd\n" + FOLLOWER + "ask H = V_out/V_in",
    # an input at the drive alone; a transformer's secondary on gnd; an island that the drive joins
    "U1 opamp: plus in, minus out, drives out\nout -- R1 -- gnd\nask H = V_out/V_in",
    DIVIDER + "T1 transformer: primary out, secondary x\nx -- R3 -- y -- C1 -- gnd\nask H = V_y/V_in",
    "in -- R1 -- a -- R2 -- b\nask H = V_a/V_in with V_b = 0",
    # a drive at an output whose law gives way, and at the x of a conveyor, whose voltage y may set
    "a -- R1 -- gnd\na -- R2 -- out\nU1 opamp: plus gnd, minus a, drives out, gain 1e5\nask T = loop(U1) with I_a = 0",
    "K1 conveyor: x in, y out, z out, sign -\nout -- R1 -- gnd\nin -- R2 -- gnd\nask H = I_in/V_in",
    # a current drive at an output
    "a -- R1 -- gnd\na -- R2 -- out\nU1 opamp: plus gnd, minus a, drives out\nask Zout = V_out/I_out",
]


@pytest.mark.parametrize("text", LET_THROUGH)
def test_a_structure_that_can_be_solved_is_let_through(text: str) -> None:
    derivation = derive(pose(read(text)))
    assert [answer.ask.name for answer in derivation.answers] == [ask.name for ask in read(text).asks]


def test_a_node_on_which_nothing_stands_is_named_so() -> None:
    text = DIVIDER + "block cell (p, q)\np -- R1 -- gnd\nend\nuse cell as S1 (out, x)\nask H = V_out/V_in"
    complaint = refuse(text)
    assert "node `x`" in complaint.cause
    assert "()" not in complaint.cause
    assert (complaint.place.line, complaint.place.column) == (5, 22)


# why equations are singular ------------------------------------------------------------------------------------

SINGULAR = [
    # no feedback
    (
        "in -- R1 -- p -- R2 -- gnd\nU1 opamp: plus p, minus gnd, drives out\nout -- R3 -- gnd\nask H = V_out/V_in",
        (2, 1),
        "`U1` has no feedback",
    ),
    (
        "in -- R1 -- m -- R2 -- gnd\nU1 opamp: plus gnd, minus m, drives a\na -- R3 -- b -- R4 -- gnd\n"
        "U2 opamp: plus b, minus out, drives out\nask H = V_out/V_in",
        (2, 1),
        "`U1` has no feedback",
    ),
    # the drive holds the only input that feedback could move
    (
        "in -- R1 -- out\nU1 opamp: plus gnd, minus in, drives out\nask H = V_out/V_in",
        (2, 1),
        "`U1` has no feedback",
    ),
    # sources that fight
    (
        "in -- R1 -- m -- R2 -- out -- R3 -- gnd\nU1 opamp: plus gnd, minus m, drives out\n"
        "U2 opamp: plus in, minus m, drives out\nask H = V_out/V_in",
        (3, 1),
        "`U2` and `U1` form a loop of ideal voltage sources: they fight",
    ),
    (
        "in -- R1 -- gnd\nE1 vcvs: senses in, drives a b\nE2 vcvs: senses in, drives b\nE3 vcvs: senses in, drives a\n"
        "a -- R2 -- b\nask H = V_a/V_in",
        (4, 1),
        "`E3`, `E1` and `E2` form a loop of ideal voltage sources: they fight",
    ),
    (
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_m/V_in with V_out = 0",
        (2, 1),
        "`U1` and the dead drive at `out` form a loop of ideal voltage sources: they fight",
    ),
    (
        "in -- R1 -- a\na -- R2 -- b\nF1 cccs: senses a b, drives in\nF2 cccs: senses b a, drives in\nb -- R3 -- gnd\n"
        "ask H = V_a/V_in",
        (4, 1),
        "`F2` and `F1` form a loop of ideal voltage sources: they fight",
    ),
    # the sign makes it singular: there is no cause in the structure
    (
        "in -- R1 -- a\nK1 conveyor: x a, y gnd, z b, sign -\na -- R2 -- b\nask H = V_b/V_in",
        (4, 5),
        "the equations for `H` have no solution, or many, whatever the parts' values are",
    ),
    # a sensed branch across an amplifier's output is not a fight as such: its current is the output's
    (
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nF1 cccs: senses out, drives x\n"
        "x -- R3 -- gnd\nask H = V_x/V_in",
        (5, 5),
        "the equations for `H` have no solution, or many",
    ),
]


@pytest.mark.parametrize(("text", "place", "words"), SINGULAR)
def test_singular_equations_are_explained_at_their_cause(
    text: str, place: tuple[int, int], words: str
) -> None:
    name = read(text).asks[0].name
    assert ratio_of(text, name) is None
    complaint = explain_singular(*posed(text, name))
    assert words in complaint.cause
    assert (complaint.place.line, complaint.place.column) == place
    with pytest.raises(Complaint):
        derive(pose(read(text)))


def test_a_ratio_of_two_voltages_in_a_singular_circuit_is_refused_too() -> None:
    # both minors exist, and their quotient is finite, though the circuit itself has no solution
    text = "a -- R1 -- b\nb -- R2 -- c\nc -- R3 -- gnd\nU1 opamp: plus gnd, minus in, drives a\nin -- R4 -- gnd\n"
    with pytest.raises(Complaint, match="no feedback"):
        derive(pose(read(text + "ask K = V_b/V_a driven at in")))


def test_what_is_zero_under_the_line_is_named() -> None:
    text = (
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask K = V_out/V_m driven at in"
    )
    with pytest.raises(Complaint, match="what stands under the line of `K` is zero") as caught:
        derive(pose(read(text)))
    assert (caught.value.place.line, caught.value.place.column) == (3, 15)


NULLOR_SWAPS = [
    # amplifiers in a loop of two: each output reaches its own inputs only through the other
    "in -- R1 -- m1 -- R2 -- o2\nU1 opamp: plus gnd, minus m1, drives o1\no1 -- R3 -- m2 -- R4 -- o2\n"
    "U2 opamp: plus gnd, minus m2, drives o2\nask H = V_o2/V_in",
    # a composite amplifier: U1's output feeds U2's plus, the feedback ends on U1's minus
    "U1 opamp: plus in, minus m, drives a\na -- R1 -- gnd\nU2 opamp: plus a, minus b, drives out\n"
    "out -- R2 -- b -- R3 -- gnd\nout -- R4 -- m -- R5 -- gnd\nask H = V_out/V_in",
    # the impedance converter, its outputs exchanged: a nullor's norators are interchangeable
    "in -- R1 -- a -- R2 -- b -- R3 -- c -- R4 -- d -- R5 -- gnd\nU1 opamp: plus in, minus b, drives a\n"
    "U2 opamp: plus d, minus b, drives c\nask H = V_in/I_in",
    # an inverter in the feedback: U2's plus is the node that closes
    "in -- R1 -- p -- R2 -- w\nU1 opamp: plus p, minus gnd, drives out\nout -- R3 -- m -- R4 -- w\n"
    "U2 opamp: plus gnd, minus m, drives w\nask H = V_out/V_in",
    # an amplifier whose output current, not its voltage, is what comes back: through a sensed branch
    "in -- R1 -- m\nU1 opamp: plus gnd, minus m, drives a\na -- R2 -- b\nF1 cccs: senses b, drives gnd m\n"
    "ask H = V_a/V_in",
    # through a transformer and a conveyor
    "in -- R1 -- m -- R2 -- b\nU1 opamp: plus gnd, minus m, drives a\nT1 transformer: primary a, secondary b\n"
    "ask H = V_a/V_in",
    "in -- R1 -- m\nU1 opamp: plus gnd, minus m, drives a\nK1 conveyor: x x1, y a, z m, sign +\nx1 -- R2 -- gnd\n"
    "a -- R3 -- gnd\nask H = V_a/V_in",
]


@pytest.mark.parametrize("text", NULLOR_SWAPS)
def test_feedback_through_other_parts_is_feedback(text: str) -> None:
    sheet = read(text)
    assert derive(pose(sheet)).answer(sheet.asks[0].name).function.denominator


def test_only_the_amplifier_without_feedback_is_named_among_three() -> None:
    text = (
        "in -- R1 -- m -- R2 -- a\nU1 opamp: plus gnd, minus m, drives a\na -- R3 -- b\nb -- R5 -- gnd\n"
        "U2 opamp: plus b, minus gnd, drives c\nc -- R4 -- gnd\nU3 opamp: plus c, minus out, drives out\n"
        "ask H = V_out/V_in"
    )
    assert explain_singular(*posed(text, "H")).cause.startswith("`U2` has no feedback")


def test_a_drive_between_two_nodes_does_not_cut_the_feedback_through_them() -> None:
    text = (
        "c -- R1 -- gnd\na -- R2 -- b\nU1 opamp: plus gnd, minus b, drives a\n"
        "U2 opamp: plus c, minus gnd, drives d\nd -- R3 -- gnd\nask H = V_d/(V_b - V_c)"
    )
    assert explain_singular(*posed(text, "H")).cause.startswith("`U2` has no feedback")


def test_an_amplifier_whose_loop_gain_is_asked_is_not_blamed_for_having_no_feedback() -> None:
    text = (
        "in -- R1 -- m\nm -- R2 -- gnd\nU1 opamp: plus gnd, minus m, drives a, gain k\na -- R3 -- gnd\n"
        "U2 opamp: plus m, minus gnd, drives b\nb -- R4 -- gnd\nchoose k\nask T = loop(U1) with V_in = 0"
    )
    assert explain_singular(*posed(text, "T")).cause.startswith("`U2` has no feedback")


def test_a_real_amplifier_needs_no_feedback() -> None:
    text = (
        "in -- R1 -- p -- R2 -- gnd\nU1 opamp: plus p, minus gnd, drives out, gain k\nout -- R3 -- gnd\nchoose k\n"
        "ask H = V_out/V_in"
    )
    with pytest.raises(Complaint, match="no feedback"):
        derive(pose(read(text)))
    assert derive(pose_real(read(text))).answer("H").function.order == 0


# bias currents -------------------------------------------------------------------------------------------------

BIAS = [
    # (sheet, the inputs that lack a path)
    ("in -- C1 -- p -- R1 -- gnd\nU1 opamp: plus p, minus out, drives out\nask H = V_out/V_in", []),
    ("in -- C1 -- p -- C2 -- gnd\nU1 opamp: plus p, minus out, drives out\nask H = V_out/V_in", ["plus"]),
    ("in -- R1 -- m -- C1 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in", []),
    ("in -- C2 -- m -- C1 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in", ["minus"]),
    (
        "in -- C2 -- m -- C1 -- out\nm -- L1 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in",
        [],
    ),
    (
        "in -- R1 -- a\nT1 transformer: primary a, secondary p\nU1 opamp: plus p, minus out, drives out\n"
        "ask H = V_out/V_in",
        [],
    ),
    (
        "in -- R1 -- a -- R2 -- gnd\nG1 vccs: senses a, drives p\np -- C1 -- gnd\n"
        "U1 opamp: plus p, minus out, drives out\nask H = V_out/V_in",
        ["plus"],
    ),
]


@pytest.mark.parametrize(("text", "inputs"), BIAS)
def test_an_input_without_a_direct_current_path_is_remarked(text: str, inputs: list[str]) -> None:
    circuit, setup = posed(text, "H")
    remarks = bias_remarks(circuit, (setup,))
    assert [remark.message for remark in remarks] == [
        f"the {name} input of `U1` has no direct-current path for its bias current" for name in inputs
    ]
