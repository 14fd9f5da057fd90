"""Sheets that are drawn in tests, and what reads them."""

from __future__ import annotations

from symcirc.complaints import Source
from symcirc.sheet import Sheet, read_sheet
from tests.calling import EXAMPLES, ROOT

#: One part of every kind, with values, in circuits that mean nothing.
KINDS = """
in -- R1 -- a -- L1 -- b -- C1 -- gnd
a -- Z1 -- c -- Y1 -- gnd
E1 vcvs: senses a b, drives d gnd, gain 2
d -- R2 -- gnd
G1 vccs: senses gnd a, drives e gnd, gm 2 mS
e -- R3 -- gnd
F1 cccs: senses b f, drives g gnd, gain k
f -- R4 -- gnd
g -- R5 -- gnd
H1 ccvs: senses e h, drives gnd m, rm 3 kohm
h -- R6 -- gnd
m -- R7 -- n
T1 transformer: primary n gnd, secondary gnd q, ratio 2
q -- R8 -- v
K1 conveyor: x v, y in, z w, sign -
w -- R9 -- gnd
U1 opamp: plus w, minus y, drives out, gain 100 dB, gbw 1 MHz
out -- R10 -- y -- R11 -- gnd
choose k
ask H = V_out/V_in
"""
#: Nineteen parts: three amplifiers in a loop and a stage behind them.
NINETEEN = """
in -- R4 -- m1 -- C1 -- bp
m1 -- R1 -- bp
U1 opamp: plus gnd, minus m1, drives bp
bp -- R3 -- m2 -- C2 -- lp
U2 opamp: plus gnd, minus m2, drives lp
lp -- R5 -- m3 -- R6 -- inv
U3 opamp: plus gnd, minus m3, drives inv
inv -- R2 -- m1
lp -- R7 -- a -- R8 -- p -- C8 -- gnd
a -- C7 -- out
U4 opamp: plus p, minus f, drives out
out -- R9 -- f -- R10 -- gnd
out -- R11 -- gnd
ask H = V_out/V_in
"""
SALLEN_KEY = """
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
out -- R4 -- f -- R3 -- gnd
U1 opamp: plus p, minus f, drives out
fix R1 = 4k7, R2 = R1
ask H = V_out/V_in
"""
EXAMPLE_SHEETS = sorted(EXAMPLES.glob("*.stage"))
EVERYTHING = (ROOT / "tests" / "sheet" / "everything.stage").read_text(encoding="utf-8")


def sheet_of(text: str, name: str = "test.stage") -> Sheet:
    return read_sheet(Source(name, text))
