"""Stages whose workbooks are tested: every way in which a workbook is made differs in one of them."""

from pathlib import Path

from tests.calling import EXAMPLES

LOW_PASS = """
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
U1 opamp: plus p, minus out, drives out
ask H = V_out/V_in
"""


def example(name: str) -> str:
    return (Path(EXAMPLES) / f"{name}.stage").read_text(encoding="utf-8")


#: Two solutions with a square root and a condition.
UNITY_GAIN = LOW_PASS + "fix C1 = 22 nF, C2 = 10 nF\ntarget H: lowpass butterworth, order 2, edge 1 kHz\n"
#: Capacitors that the designer is to fill in.
CHOSEN = LOW_PASS + "choose C1, C2\ntarget H: lowpass, order 2, f0 1 kHz, q 0.8\n"
#: A target as an expression: its coefficients are the inputs.
WRITTEN = LOW_PASS + "fix C1 = 22 nF, C2 = 10 nF\ntarget H = 4e7/(s^2 + 9e3*s + 4e7)\n"
#: A gain in dB and a band by its edges.
BAND = """
in -- R1 -- a -- C1 -- out
a -- R2 -- gnd
a -- C2 -- m
m -- R3 -- out
U1 opamp: plus gnd, minus m, drives out
fix C1 = 22 nF, C2 = 22 nF
ask H = V_out/V_in
target H: bandpass butterworth, order 1, edges 350 Hz 450 Hz, gain 6 dB
"""
#: A third-order stage: an equation of third degree, found by a search.
RUMBLE = example("hive_rumble")
#: An equation of sixth degree, two roots.
MASK = example("hive_mask")
#: A parameter to be solved for, ties.
NOTCH = example("hive_hum_notch")
#: Three stages that share the gain.
CASCADE = example("hive_cascade")
#: Two stages of a band, whose frequencies follow the centre.
BAND_CASCADE = """
block section (p, q)
  p -- R1 -- a -- C1 -- q
  a -- R2 -- gnd
  a -- C2 -- m
  m -- R3 -- q
  U1 opamp: plus gnd, minus m, drives q
  fix C1 = 10 nF, C2 = 10 nF
end
use section as S1 (in, n1)
use section as S2 (n1, out)
ask H = V_out/V_in
target H: bandpass butterworth, order 2, centre 1 kHz, bandwidth 200 Hz, gain 4
"""
