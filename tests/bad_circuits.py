"""Sheets that read well, and circuits that cannot be: each with the place and the words that it must get."""

from __future__ import annotations

from tests.bad_sheets import Row

INVERTER = "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\n"
H = "ask H = V_out/V_in\n"

CIRCUITS = (
    Row(
        "hanging node",
        "in -- R1 -- out -- C1 -- gnd\nout -- R2 -- otu\n" + H,
        2, 14, "hangs on `R2` alone", "spelling",
    ),
    Row("hanging input", INVERTER.replace("plus gnd", "plus p") + H, 2, 16, "hangs on `U1` alone", "spelling"),
    Row(
        "island",
        "in -- R1 -- out -- C1 -- gnd\nx -- R2 -- y -- C2 -- x\n" + H,
        2, 1, "node `x` has no path to gnd", "join this piece",
    ),
    Row(
        "isolated secondary",
        "in -- R1 -- a\nT1 transformer: primary a, secondary b c, ratio 2\nb -- R2 -- c\nask H = V_b/V_in\n",
        2, 38, "no path to gnd", "join this piece",
    ),
    Row(
        "only inputs on a node",
        "in -- R1 -- out -- C1 -- gnd\nU1 opamp: plus x, minus o1, drives o1\nU2 opamp: plus x, minus o2, drives o2\n"
        "o1 -- R2 -- gnd\no2 -- R3 -- gnd\n" + H,
        2, 16, "only inputs stand on node `x` (U1 and U2)", "drive it",
    ),
    Row(
        "output alone",
        "in -- R1 -- m -- R2 -- gnd\nU1 opamp: plus gnd, minus m, drives out\n" + H,
        2, 1, "the output of `U1` drives nothing", "a path back to its inputs",
    ),
    Row(
        "output on gnd",
        "in -- R1 -- m -- R2 -- out -- R3 -- gnd\nU1 opamp: plus gnd, minus m, drives gnd\n" + H,
        2, 1, "the output of `U1` is on gnd", "drive the node",
    ),
    Row(
        "no feedback",
        "in -- R1 -- gnd\nU1 opamp: plus in, minus gnd, drives out\nout -- R2 -- gnd\n" + H,
        2, 1, "`U1` has no feedback", "minus input through a part",
    ),
    Row(
        "no feedback across a driven node",
        "in -- R1 -- m -- R2 -- in\nU1 opamp: plus gnd, minus m, drives out\nout -- R3 -- in\n" + H,
        2, 1, "`U1` has no feedback", "minus input",
    ),
    Row(
        "two amplifiers on one node",
        INVERTER + "U2 opamp: plus gnd, minus m2, drives out\nin -- R3 -- m2 -- R4 -- out\n" + H,
        3, 1, "fight", "by one source only",
    ),
    Row(
        "two voltage sources on one node",
        "in -- R1 -- gnd\nE1 vcvs: senses in, drives out, gain 2\nE2 vcvs: senses in, drives out, gain 3\n"
        "out -- R2 -- gnd\n" + H,
        3, 1, "`E2` and `E1` form a loop of ideal voltage sources", "put a part between them",
    ),
    Row(
        "a drive on an output",
        INVERTER + "ask K = V_m/V_out\n" + H,
        3, 13, "`U1` sets its voltage too", "driven at NODE",
    ),
    Row(
        "a short on an output",
        INVERTER + "ask H = V_m/V_in with V_out = 0\n",
        2, 1, "`U1` and the dead drive at `out`", "by one source only",
    ),
    Row(
        "equations without a solution",
        "in -- R1 -- out\nU1 opamp: plus in, minus gnd, drives out\nout -- R2 -- in\n" + H,
        2, 1, "`U1` has no feedback", "minus input",
    ),
    Row(
        "conveyor whose determinant is zero",
        "x -- R1 -- z\nK1 conveyor: x x, y gnd, z z, sign -\nask Z = V_z/I_z\n",
        3, 5, "no solution, or many", "look for",
    ),
    Row(
        "ties that make it singular",
        "out -- R1 -- gnd\nG1 vccs: senses out, drives out, gm g\nfix g = -1/R1\nask Z = V_out/I_out\n",
        4, 5, "with the sheet's fixes", "tied",
    ),
    Row(
        "a tie that divides by zero",
        "in -- R1 -- out -- R2 -- gnd\nout -- C1 -- gnd\nfix R2 = R1/(C1 - C1)\n" + H,
        3, 13, "divides by zero", "under the line",
    ),
    Row(
        "zero under the line",
        "in -- R1 -- out -- R2 -- gnd\nx -- R3 -- gnd -- R4 -- x\nask K = V_out/V_x driven at in\n",
        3, 15, "is zero, whatever the drive is", "that the drive moves",
    ),
    Row(
        "a current that nothing delivers",
        "in -- R1 -- out -- R2 -- gnd\nask Y = I_out/V_in\n",
        2, 9, "nothing delivers a current into node `out`", "with V_out = 0",
    ),
    Row(
        "the driven node shorted",
        "in -- R1 -- out -- R2 -- gnd\nask H = V_out/V_in with V_in = 0\n",
        2, 25, "cannot be dead", "remove",
    ),
    Row(
        "a node shorted and open",
        "in -- R1 -- out -- R2 -- gnd\nout -- R3 -- x -- R4 -- gnd\nask H = V_out/V_in with V_x = 0, I_x = 0\n",
        3, 25, "both shorted and open", "keep one",
    ),
)  # fmt: skip
