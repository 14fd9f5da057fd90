"""Every kind of part obeys the law that the design gives it, signs and directions of current included.

The expected functions are worked by hand from the law alone.
"""

from __future__ import annotations

import pytest
import sympy

from symcirc.derivation import derive, pose
from tests.core.functions import as_expression, expression_of, is_equal, read, s

R1, R2, R3, C1, L1, Z1, Y1 = sympy.symbols("R1 R2 R3 C1 L1 Z1 Y1")
g = sympy.Symbol

LAWS = [
    ("resistor", "in -- R1 -- gnd\nask H = I_R1/V_in", 1 / R1),
    ("resistor, written the other way", "gnd -- R1 -- in\nask H = I_R1/V_in", -1 / R1),
    ("capacitor", "in -- C1 -- gnd\nask H = I_C1/V_in", s * C1),
    ("inductor", "in -- L1 -- gnd\nask H = I_L1/V_in", 1 / (s * L1)),
    ("impedance", "in -- Z1 -- gnd\nask H = I_Z1/V_in", 1 / Z1),
    ("admittance", "in -- Y1 -- gnd\nask H = I_Y1/V_in", Y1),
    (
        "opamp: V+ = V-, no current into its inputs",
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in",
        -R2 / R1,
    ),
    (
        "opamp: its current counts out of its output",
        "U1 opamp: plus in, minus out, drives out\nout -- R1 -- gnd\nask H = I_U1/V_in",
        1 / R1,
    ),
    (
        "vcvs",
        "in -- R1 -- gnd\nE1 vcvs: senses in, drives out\nout -- R2 -- gnd\nask H = V_out/V_in",
        g("E1_gain"),
    ),
    (
        "vcvs: its current counts from the first driven node to the second, through the source",
        "in -- R1 -- gnd\nE1 vcvs: senses in, drives out\nout -- R2 -- gnd\nask H = I_E1/V_in",
        -g("E1_gain") / R2,
    ),
    (
        "vccs: the current flows through the part from the first driven node",
        "in -- R1 -- gnd\nG1 vccs: senses in, drives out\nout -- R2 -- gnd\nask H = V_out/V_in",
        -g("G1_gm") * R2,
    ),
    (
        "vccs: I_ is the driven current",
        "in -- R1 -- gnd\nG1 vccs: senses gnd in, drives out\nout -- R2 -- gnd\nask H = I_G1/V_in",
        -g("G1_gm"),
    ),
    (
        "cccs: senses the current from the first node to the second, at zero volts",
        "in -- R1 -- a\nF1 cccs: senses a, drives out\nout -- R2 -- gnd\nask H = V_out/V_in",
        -g("F1_gain") * R2 / R1,
    ),
    (
        "cccs: I_ is the driven current",
        "in -- R1 -- a\nF1 cccs: senses a, drives out\nout -- R2 -- gnd\nask H = I_F1/V_in",
        g("F1_gain") / R1,
    ),
    (
        "ccvs",
        "in -- R1 -- a\nH1 ccvs: senses a, drives out\nout -- R2 -- gnd\nask H = V_out/V_in",
        g("H1_rm") / R1,
    ),
    (
        "ccvs: I_ flows through the driven branch, first node to second",
        "in -- R1 -- a\nH1 ccvs: senses a, drives out\nout -- R2 -- gnd\nask H = I_H1/V_in",
        -g("H1_rm") / (R1 * R2),
    ),
    (
        "transformer: primary turns over secondary turns",
        "T1 transformer: primary in, secondary out\nout -- R2 -- gnd\nask H = V_out/V_in",
        1 / g("T1_ratio"),
    ),
    (
        "transformer: an impedance is seen n squared times as large",
        "T1 transformer: primary in, secondary out\nout -- R2 -- gnd\nask H = V_in/I_in",
        g("T1_ratio") ** 2 * R2,
    ),
    (
        "transformer: I_ flows through the primary, first node to second",
        "T1 transformer: primary in, secondary out\nout -- R2 -- gnd\nask H = I_T1/V_in",
        1 / (g("T1_ratio") ** 2 * R2),
    ),
    (
        "conveyor +: what flows into x flows into z",
        "K1 conveyor: x a, y in, z out, sign +\na -- R1 -- gnd\nout -- R2 -- gnd\nask H = V_out/V_in",
        R2 / R1,
    ),
    (
        "conveyor -: it flows out of z",
        "K1 conveyor: x a, y in, z out, sign -\na -- R1 -- gnd\nout -- R2 -- gnd\nask H = V_out/V_in",
        -R2 / R1,
    ),
    (
        "conveyor: I_ counts into x",
        "K1 conveyor: x a, y in, z out, sign +\na -- R1 -- gnd\nout -- R2 -- gnd\nask H = I_K1/V_in",
        -1 / R1,
    ),
    (
        "conveyor: no current flows into y",
        "in -- R3 -- b\nK1 conveyor: x a, y b, z out, sign +\na -- R1 -- gnd\nout -- R2 -- gnd\nask H = I_R3/V_in",
        sympy.S.Zero,
    ),
    (
        "conveyor: its x may be driven where its y is set otherwise",
        "K1 conveyor: x in, y out, z out, sign -\nout -- R1 -- gnd\nin -- R2 -- gnd\nask H = I_in/V_in",
        1 / R2 + 1 / R1,
    ),
]

DRIVES = [
    ("voltage ratio", "in -- R1 -- out -- R2 -- gnd\nask H = V_out/V_in", R2 / (R1 + R2)),
    ("input impedance", "in -- R1 -- out -- R2 -- gnd\nask H = V_in/I_in", R1 + R2),
    ("transfer impedance", "in -- R1 -- out -- R2 -- gnd\nask H = V_out/I_in", R2),
    (
        "output impedance: the source is a short",
        "in -- R1 -- out -- R2 -- gnd\nask H = V_out/I_out with V_in = 0",
        R1 * R2 / (R1 + R2),
    ),
    (
        "with I_in = 0 the source is open though another ask drives it",
        "in -- R1 -- out -- R2 -- gnd\nask A = V_out/V_in\nask H = V_out/I_out with I_in = 0",
        R2,
    ),
    (
        "another ask's voltage drive is a short",
        "in -- R1 -- out -- R2 -- gnd\nask A = V_out/V_in\nask H = V_out/I_out",
        R1 * R2 / (R1 + R2),
    ),
    (
        "another ask's current drive is open",
        "in -- R1 -- out -- R2 -- gnd\nask A = V_in/I_in\nask H = V_out/I_out",
        R2,
    ),
    ("difference over the line", "in -- R1 -- out -- R2 -- gnd\nask H = (V_in - V_out)/V_in", R1 / (R1 + R2)),
    (
        "difference under the line: a drive between two nodes",
        "a -- R1 -- gnd\nb -- R2 -- gnd\na -- R3 -- b\nask H = V_a/(V_a - V_b)",
        R1 / (R1 + R2),
    ),
    (
        "ratio of two voltages, driven elsewhere",
        "in -- R1 -- a -- R2 -- b -- R3 -- gnd\nask H = V_b/V_a driven at in",
        R3 / (R2 + R3),
    ),
    (
        "ratio of two currents, driven elsewhere",
        "in -- R1 -- a -- R2 -- gnd\na -- R3 -- gnd\nask H = I_R3/I_R1 driven at in",
        R2 / (R2 + R3),
    ),
    (
        "the current that a short delivers into its node",
        "in -- R1 -- out -- R2 -- gnd\nask H = I_out/V_in with V_out = 0",
        -1 / R1,
    ),
    ("the current that the drive delivers", "in -- R1 -- out -- R2 -- gnd\nask H = I_in/V_in", 1 / (R1 + R2)),
    (
        "a drive between two nodes takes from the second what it delivers into the first",
        "a -- R1 -- b\nb -- R2 -- gnd\nask H = I_b/(V_a - V_b)",
        -1 / R1,
    ),
    (
        "two shorts at one node each deliver their own current",
        "in -- R1 -- a -- R2 -- b -- R3 -- in\nask A = V_in/(V_a - V_b)\nask H = I_b/V_in with V_a = 0",
        -1 / R3,
    ),
    (
        "under the line the drive's own current stands, whatever a dead drive beside it does",
        "in -- R1 -- gnd\nin -- R2 -- a -- R3 -- gnd\nask A = V_in/(V_a - V_in)\nask H = V_in/I_in",
        R1 * R3 / (R1 + R3),
    ),
]


@pytest.mark.parametrize(
    ("name", "text", "expected"), [*LAWS, *DRIVES], ids=lambda x: x if " " in str(x) else None
)
def test_a_law_holds_by_elimination_and_through_the_whole_program(
    name: str, text: str, expected: sympy.Expr
) -> None:
    assert is_equal(expression_of(text), expected)
    assert is_equal(as_expression(derive(pose(read(text))).answer("H").function), expected)
