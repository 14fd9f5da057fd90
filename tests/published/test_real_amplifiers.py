"""Amplifiers of finite gain and bandwidth give the textbook's functions.

The formulas are Sedra and Smith's, "Microelectronic Circuits", chapter on operational amplifiers (effect of finite
open-loop gain and bandwidth), from memory.
"""

from __future__ import annotations

import pytest
import sympy

from symcirc.complaints import Source
from symcirc.derivation import derive, pose_real
from symcirc.sheet import read_sheet
from tests.published.stage import C1, R1, R2, s
from tests.published.test_published_stages import assert_equal

gain, gbw, pi = sympy.symbols("U1_gain U1_gbw pi")

INVERTING = "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out{}\n"
FOLLOWER = "in -- R1 -- gnd\nU1 opamp: plus in, minus out, drives out{}\n"
NON_INVERTING = "gnd -- R1 -- m -- R2 -- out\nin -- R3 -- gnd\nU1 opamp: plus in, minus m, drives out{}\n"
INTEGRATOR = "in -- R1 -- m -- C1 -- out\nU1 opamp: plus gnd, minus m, drives out{}\n"
GAIN, GBW, BOTH = ", gain 1e5", ", gbw 1 MHz", ", gain 1e5, gbw 1 MHz"

POLE = gain / (1 + s * gain / (2 * pi * gbw))
NOISE_GAIN = 1 + R2 / R1

REAL = [
    (INVERTING, GAIN, "V_out/V_in", -(R2 / R1) / (1 + NOISE_GAIN / gain)),
    (NON_INVERTING, GAIN, "V_out/V_in", NOISE_GAIN / (1 + NOISE_GAIN / gain)),
    (INVERTING, GBW, "V_out/V_in", -(R2 / R1) / (1 + s * NOISE_GAIN / (2 * pi * gbw))),
    (NON_INVERTING, GBW, "V_out/V_in", NOISE_GAIN / (1 + s * NOISE_GAIN / (2 * pi * gbw))),
    (FOLLOWER, GBW, "V_out/V_in", 1 / (1 + s / (2 * pi * gbw))),
    (FOLLOWER, GAIN, "V_out/V_in", gain / (1 + gain)),
    (FOLLOWER, BOTH, "V_out/V_in", POLE / (1 + POLE)),
    (INTEGRATOR, GAIN, "V_out/V_in", -gain / (1 + s * R1 * C1 * (1 + gain))),
    (INVERTING, GAIN, "V_in/I_in", R1 + R2 / (1 + gain)),
    (INVERTING, GAIN, "loop(U1) with V_in = 0", gain * R1 / (R1 + R2)),
    (INVERTING, GAIN, "loop(U1) with I_in = 0", gain),
    (INVERTING, BOTH, "loop(U1) with V_in = 0", POLE * R1 / (R1 + R2)),
]


@pytest.mark.parametrize(("stage", "amplifier", "asked", "expected"), REAL)
def test_a_real_amplifier_gives_the_textbooks_function(
    stage: str, amplifier: str, asked: str, expected: sympy.Expr
) -> None:
    sheet = read_sheet(Source("real.stage", stage.format(amplifier) + f"ask H = {asked}"))
    assert_equal(derive(pose_real(sheet)).answer("H").function, expected)
