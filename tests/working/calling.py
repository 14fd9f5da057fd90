"""Shared by the tests of workings: sheets as text, and a check in one call."""

from __future__ import annotations

from symcirc.complaints import Source
from symcirc.sheet import read_sheet
from symcirc.sheet.model import Sheet
from symcirc.working import Checked, Line, check

#: The design's example: the low-pass with multiple feedback.
LOW_PASS = """
in -- R1 -- a -- R3 -- m -- C2 -- out
a  -- C1 -- gnd
a  -- R2 -- out
U1 opamp: plus gnd, minus m, drives out
ask H = V_out / V_in
"""
#: The same with the values of the demo.
WITH_VALUES = LOW_PASS + "fix R1 = 10 kohm, R2 = 10 kohm, R3 = 4k7, C1 = 22 nF, C2 = 2n2\n"
#: A resistor and a capacitor.
RC = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"
#: Two drives, and impedances with drives of their own.
TWO_DRIVES = """
a -- R1 -- out -- R2 -- b
out -- C1 -- gnd
ask Ha = V_out/V_a
ask Hb = V_out/V_b
ask Zout = V_out/I_out with V_a = 0
ask Zb = V_b/I_b with V_a = 0
"""


def sheet_of(text: str) -> Sheet:
    return read_sheet(Source("a.stage", text))


def checked(sheet: str, working: str, file: str = "a.work") -> Checked:
    return check(sheet_of(sheet), Source(file, working))


def one(sheet: str, working: str) -> Line:
    """Return the last line of a working."""
    return checked(sheet, working).lines[-1]


def verdicts(sheet: str, working: str) -> list[str]:
    return [line.verdict for line in checked(sheet, working).lines]
