"""Sheets for the tests of plots."""

from __future__ import annotations

from symcirc.complaints import Source
from symcirc.plots.curves import Curves, curves_of
from symcirc.sheet import Sheet, read_sheet
from tests.calling import EXAMPLES

LOW_PASS = "in -- R1 -- out -- C1 -- gnd\nfix R1 = 1 kohm, C1 = 1 uF\nask H = V_out/V_in\n"
REAL_BAND_PASS = """
in -- R1 -- a -- C2 -- m
a -- R2 -- gnd
a -- C1 -- out
m -- R3 -- out
U1 opamp: plus gnd, minus m, drives out, gain 100 dB, gbw 1 MHz
fix C1 = 2.2 nF, C2 = 2.2 nF
ask H = V_out/V_in
target H: bandpass, order 2, f0 12 kHz, q 8, gain 2
"""
ALL_PASS = """
in -- R1 -- p -- C1 -- gnd
in -- R2 -- m -- R3 -- out
U1 opamp: plus p, minus m, drives out
fix R2 = 10 kohm, R3 = R2, R1 = 10 kohm, C1 = 15 nF
ask H = V_out/V_in
"""


def sheet_of(text: str) -> Sheet:
    return read_sheet(Source("a.stage", text))


def curves(text: str, ask: str | None = None) -> Curves:
    return curves_of(sheet_of(text), ask)


def example(name: str, ask: str | None = None) -> Curves:
    return curves((EXAMPLES / f"{name}.stage").read_text(encoding="utf-8"), ask)
