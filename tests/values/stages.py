"""Stages for the tests of values, each with its transfer function from a textbook, written by hand."""

from __future__ import annotations

from symcirc.complaints import Source
from symcirc.sheet import read_sheet

#: Multiple-feedback low-pass; H after many handbooks, such as Zverev, "Handbook of Filter Synthesis" (from memory).
LOW_PASS = """
in -- R1 -- a -- R3 -- m -- C2 -- out
a  -- C1 -- gnd
a  -- R2 -- out
U1 opamp: plus gnd, minus m, drives out
ask    H = V_out / V_in
target H: lowpass butterworth, order 2, edge 1.2 kHz, gain 1
"""
#: All-pass of first order: H = (1 - s R3 C1)/(1 + s R3 C1) where R1 = R2.
ALL_PASS = """
in -- R1 -- m -- R2 -- out
in -- R3 -- p -- C1 -- gnd
U1 opamp: plus p, minus m, drives out
ask H = V_out/V_in
target H: allpass bessel, order 1, edge 1 kHz
"""


def low_pass_by_hand(v, s):
    r1, r2, r3, c1, c2 = (v[name] for name in ("R1", "R2", "R3", "C1", "C2"))
    return -(r2 / r1) / (s * s * c1 * c2 * r2 * r3 + s * c2 * (r2 + r3 + r2 * r3 / r1) + 1)


def all_pass_by_hand(v, s):
    at_plus = 1 / (1 + s * v["R3"] * v["C1"])
    return at_plus * (1 + v["R2"] / v["R1"]) - v["R2"] / v["R1"]


def sheet(text, file="here.stage"):
    return read_sheet(Source(str(file), text))
