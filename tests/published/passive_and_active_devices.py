"""Published ladders and bridges, and stages of controlled sources, transformers and conveyors; from memory."""

from __future__ import annotations

import sympy
from sympy import sqrt

from tests.published.single_amplifier import SEDRA, VAN_VALKENBURG, WILLIAMS
from tests.published.stage import C1, C2, C3, L1, L2, R1, R2, R3, Stage, s

SEDRA_CONVEYOR = (
    'Sedra and Smith, "A second-generation current conveyor and its applications", IEEE Trans. Circuit Theory CT-17 '
    "(1970) 132-134, from memory"
)
ZVEREV = 'Zverev, "Handbook of Filter Synthesis" (1967), from memory'
OTA = (
    'Geiger and Sanchez-Sinencio, "Active filter design using operational transconductance amplifiers: a tutorial", '
    "IEEE Circuits and Devices Magazine 1 (March 1985) 20-32, from memory"
)

gm1, gm2, gm = sympy.symbols("G1_gm G2_gm G1_gm")
ratio = sympy.Symbol("T1_ratio")

_LOAD = s * C3 + 1 / R2
_OTA = s**2 * C1 * C2 + s * C1 * gm2 + gm1 * gm2
_TRAP = s * C2 + 1 / (s * L2)
_MILLER = (
    1
    + s * (R1 * (C1 + C3) + R2 * (C2 + C3) + gm * R1 * R2 * C3)
    + s**2 * R1 * R2 * (C1 * C2 + C3 * (C1 + C2))
)
_TANK = s**2 + s / (R1 * C2) + 1 / (C1 * C2 * R2 * R3)

PASSIVE_AND_ACTIVE_DEVICES = [
    Stage(
        id="series-rlc-low-pass",
        source="any textbook of circuits; " + SEDRA,
        sheet="""
in -- R1 -- a -- L1 -- out -- C1 -- gnd
ask H = V_out/V_in
ask Zin = V_in/I_in
""",
        ratios={"H": 1 / (s**2 * L1 * C1 + s * R1 * C1 + 1), "Zin": R1 + s * L1 + 1 / (s * C1)},
        omega0=1 / sqrt(L1 * C1),
        q=sqrt(L1 / C1) / R1,
    ),
    Stage(
        id="third-order-ladder",
        source=ZVEREV
        + ": between equal resistors 1, elements 1, 2, 1 give Butterworth's 1/2/(s^3 + 2 s^2 + 2 s + 1)",
        sheet="""
in -- R1 -- a -- L2 -- out -- R2 -- gnd
a -- C1 -- gnd
out -- C3 -- gnd
ask H = V_out/V_in
""",
        ratios={"H": 1 / ((1 + s * L2 * _LOAD) * (1 + s * R1 * C1) + R1 * _LOAD)},
        design={R1: sympy.S(1), R2: sympy.S(1), C1: sympy.S(1), L2: sympy.S(2), C3: sympy.S(1)},
        designed=sympy.Rational(1, 2) / (s**3 + 2 * s**2 + 2 * s + 1),
    ),
    Stage(
        id="third-order-ladder-with-trap",
        source=ZVEREV
        + "; "
        + WILLIAMS
        + ": the ladder whose series arm is a trap, a zero of transmission at its tune",
        sheet="""
in -- R1 -- a -- L2 -- out -- R2 -- gnd
a -- C2 -- out
a -- C1 -- gnd
out -- C3 -- gnd
ask H = V_out/V_in
""",
        ratios={"H": 1 / ((1 + _LOAD / _TRAP) * (1 + s * R1 * C1) + R1 * _LOAD)},
    ),
    Stage(
        id="twin-t-notch",
        source=WILLIAMS + "; " + VAN_VALKENBURG + ": the symmetrical twin-T",
        sheet="""
in -- R1 -- a -- R2 -- out
in -- C1 -- b -- C2 -- out
a -- C3 -- gnd
b -- R3 -- gnd
fix R2 = R1, R3 = R1/2, C2 = C1, C3 = 2*C1
ask H = V_out/V_in
""",
        ratios={"H": (s**2 * R1**2 * C1**2 + 1) / (s**2 * R1**2 * C1**2 + 4 * s * R1 * C1 + 1)},
        omega0=1 / sqrt(R1**2 * C1**2),
        q=sympy.Rational(1, 4),
    ),
    Stage(
        id="bridged-t",
        source=SEDRA + ": bridged-T network",
        sheet="""
in -- C1 -- a -- C2 -- out
a -- R1 -- gnd
in -- R2 -- out
ask H = V_out/V_in
""",
        ratios={
            "H": (s**2 * R1 * R2 * C1 * C2 + s * R1 * (C1 + C2) + 1)
            / (s**2 * R1 * R2 * C1 * C2 + s * (R1 * (C1 + C2) + R2 * C2) + 1)
        },
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
    ),
    Stage(
        id="single-tuned-transformer",
        source='Clarke and Hess, "Communication Circuits: Analysis and Design" (1971), from memory: the secondary\'s '
        "load seen at the primary is divided by the square of the turns",
        sheet="""
in -- R1 -- a -- L1 -- gnd
T1 transformer: primary a, secondary out
out -- R2 -- gnd
out -- C1 -- gnd
ask H = V_out/V_in
ask Zp = V_a/I_a with V_in = 0
""",
        ratios={
            "H": 1 / (ratio * R1 * (1 / R1 + 1 / (s * L1) + (1 / R2 + s * C1) / ratio**2)),
            "Zp": 1 / (1 / R1 + 1 / (s * L1) + (1 / R2 + s * C1) / ratio**2),
        },
        omega0=sqrt(ratio**2 / (L1 * C1)),
    ),
    Stage(
        id="transconductor-biquad",
        source=OTA
        + ": V_out = (s^2 C1 C2 V_c + s C1 gm2 V_b + gm1 gm2 V_a)/(s^2 C1 C2 + s C1 gm2 + gm1 gm2)",
        sheet="""
G1 vccs: senses a out, drives gnd x
x -- C1 -- b
G2 vccs: senses x out, drives gnd out
out -- C2 -- c
ask Lp = V_out/V_a
ask Bp = V_out/V_b
ask Hp = V_out/V_c
""",
        ratios={
            "Lp": gm1 * gm2 / _OTA,
            "Bp": s * C1 * gm2 / _OTA,
            "Hp": s**2 * C1 * C2 / _OTA,
        },
        omega0=sqrt(gm1 * gm2 / (C1 * C2)),
        q=sqrt(gm1 * C2 / (gm2 * C1)),
    ),
    Stage(
        id="transistor-with-feedback-capacitance",
        source='Gray and Meyer, "Analysis and Design of Analog Integrated Circuits", frequency response of the '
        "common-emitter stage, from memory",
        sheet="""
b -- R1 -- gnd
b -- C1 -- gnd
b -- C3 -- out
G1 vccs: senses b, drives out gnd
out -- R2 -- gnd
out -- C2 -- gnd
ask Zt = V_out/I_b
""",
        ratios={"Zt": -R1 * R2 * (gm - s * C3) / _MILLER},
    ),
    Stage(
        id="conveyor-integrator",
        source=SEDRA_CONVEYOR,
        sheet="""
K1 conveyor: x a, y in, z out, sign +
a -- R1 -- gnd
out -- C1 -- gnd
ask H = V_out/V_in
""",
        ratios={"H": 1 / (s * R1 * C1)},
    ),
    Stage(
        id="conveyor-current-amplifier",
        source=SEDRA_CONVEYOR,
        sheet="""
in -- R1 -- gnd
K1 conveyor: x a, y in, z out, sign +
a -- R2 -- gnd
out -- R3 -- gnd
ask Ai = I_R3/I_in
""",
        ratios={"Ai": R1 / R2},
    ),
    Stage(
        id="conveyor-inductor",
        source=SEDRA_CONVEYOR + ": gyrator of a conveyor of each sign, closed with a capacitor",
        sheet="""
K1 conveyor: x a, y in, z c, sign +
a -- R1 -- gnd
c -- C1 -- gnd
K2 conveyor: x b, y c, z in, sign -
b -- R2 -- gnd
ask Zin = V_in/I_in
""",
        ratios={"Zin": s * C1 * R1 * R2},
    ),
    Stage(
        id="conveyor-band-pass",
        source=SEDRA_CONVEYOR + ": the gyrator's inductance across a capacitor",
        sheet="""
in -- R1 -- out -- C2 -- gnd
K1 conveyor: x a, y out, z c, sign +
a -- R2 -- gnd
c -- C1 -- gnd
K2 conveyor: x b, y c, z out, sign -
b -- R3 -- gnd
ask H = V_out/V_in
""",
        ratios={"H": s / (R1 * C2) / _TANK},
        omega0=1 / sqrt(C1 * C2 * R2 * R3),
        q=R1 * sqrt(C2 / (C1 * R2 * R3)),
    ),
]
