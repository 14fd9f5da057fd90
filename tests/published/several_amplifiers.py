"""Published stages with two amplifiers and more. All formulas are from memory of the sources named."""

from __future__ import annotations

from sympy import sqrt

from tests.published.single_amplifier import FRANCO, SEDRA, STANDARD, VAN_VALKENBURG
from tests.published.stage import (
    C1,
    C2,
    C4,
    C5,
    C6,
    R1,
    R2,
    R3,
    R4,
    R5,
    R6,
    R7,
    R8,
    Z1,
    Z2,
    Z3,
    Z4,
    Z5,
    G,
    Q,
    Stage,
    s,
    w0,
)

ANTONIOU = (
    'Antoniou, "Realisation of gyrators using operational amplifiers, and their use in RC-active-network synthesis", '
    "Proc. IEE 116 (1969) 1838-1850, from memory"
)
FLIEGE = (
    'Fliege, "A new class of second-order RC-active filters with two operational amplifiers", '
    "Nachrichtentechnische Zeitschrift 26 (1973) 279-282, from memory"
)

_TOW = s**2 + s / (R1 * C1) + R6 / (R5 * R2 * R3 * C1 * C2)
_KHN = s**2 + s * (1 + R2 / R1) * R3 / ((R3 + R4) * R5 * C1) + (R2 / R1) / (R5 * R6 * C1 * C2)
_KHN_GAIN = (1 + R2 / R1) * R4 / (R3 + R4)
_AKERBERG = s**2 + s / (R1 * C1) + R5 / (R6 * R2 * R3 * C1 * C2)
_FLEISCHER = s**2 + s / (R1 * C1) + R8 / (R2 * R3 * R7 * C1 * C2)
#: The inductance of the converter with its capacitor C2 second.
_L = C2 * R1 * R3 * R5 / R4
_GIC = s**2 + s / (R6 * C6) + 1 / (_L * C6)

SEVERAL_AMPLIFIERS = [
    Stage(
        id="tow-thomas-biquad",
        source='Tow, "Active RC filters: a state-space realization", Proc. IEEE 56 (1968) 1137-1139; Thomas, "The '
        'biquad: part I, some practical design considerations", IEEE Trans. Circuit Theory CT-18 (1971) 350-357, '
        "from memory",
        sheet="""
in -- R4 -- m1 -- C1 -- bp
m1 -- R1 -- bp
U1 opamp: plus gnd, minus m1, drives bp
bp -- R3 -- m2 -- C2 -- lp
U2 opamp: plus gnd, minus m2, drives lp
lp -- R5 -- m3 -- R6 -- inv
U3 opamp: plus gnd, minus m3, drives inv
inv -- R2 -- m1
ask Lp = V_lp/V_in
ask Bp = V_bp/V_in
""",
        ratios={"Lp": 1 / (R3 * R4 * C1 * C2) / _TOW, "Bp": -s / (R4 * C1) / _TOW},
        omega0=sqrt(R6 / (R2 * R3 * R5 * C1 * C2)),
        q=R1 * sqrt(C1 * R6 / (R2 * R3 * R5 * C2)),
        design={
            C2: C1,
            R2: 1 / (w0 * C1),
            R3: 1 / (w0 * C1),
            R1: Q / (w0 * C1),
            R4: 1 / (G * w0 * C1),
            R6: R5,
        },
        designed=G * w0**2 / STANDARD,
    ),
    Stage(
        id="state-variable-filter",
        source='Kerwin, Huelsman and Newcomb, "State-variable synthesis for insensitive integrated circuit transfer '
        'functions", IEEE J. Solid-State Circuits SC-2 (1967) 87-92, from memory',
        sheet="""
lp -- R1 -- m -- R2 -- hp
in -- R3 -- p -- R4 -- bp
U1 opamp: plus p, minus m, drives hp
hp -- R5 -- m2 -- C1 -- bp
U2 opamp: plus gnd, minus m2, drives bp
bp -- R6 -- m3 -- C2 -- lp
U3 opamp: plus gnd, minus m3, drives lp
ask Hp = V_hp/V_in
ask Bp = V_bp/V_in
ask Lp = V_lp/V_in
""",
        ratios={
            "Hp": _KHN_GAIN * s**2 / _KHN,
            "Bp": -_KHN_GAIN * s / (R5 * C1) / _KHN,
            "Lp": _KHN_GAIN / (R5 * R6 * C1 * C2) / _KHN,
        },
        omega0=sqrt(R2 / (R1 * R5 * R6 * C1 * C2)),
        q=(R3 + R4) / R3 / (1 + R2 / R1) * sqrt(R2 * R5 * C1 / (R1 * R6 * C2)),
        design={
            R2: R1,
            C2: C1,
            R5: 1 / (w0 * C1),
            R6: 1 / (w0 * C1),
            R4: (2 * Q - 1) * R3,
        },
        designed=(2 - 1 / Q) * s**2 / STANDARD,
    ),
    Stage(
        id="akerberg-mossberg-biquad",
        source='Akerberg and Mossberg, "A versatile active RC building block with inherent compensation for the finite '
        'bandwidth of the amplifier", IEEE Trans. Circuits and Systems CAS-21 (1974) 75-78, from memory',
        sheet="""
in -- R4 -- m1 -- C1 -- bp
m1 -- R1 -- bp
U1 opamp: plus gnd, minus m1, drives bp
bp -- R3 -- p2 -- C2 -- w
U2 opamp: plus p2, minus gnd, drives lp
lp -- R5 -- m3 -- R6 -- w
U3 opamp: plus gnd, minus m3, drives w
lp -- R2 -- m1
ask Lp = V_lp/V_in
ask Bp = V_bp/V_in
""",
        ratios={
            "Lp": -(R5 / R6) / (R3 * R4 * C1 * C2) / _AKERBERG,
            "Bp": -s / (R4 * C1) / _AKERBERG,
        },
        omega0=sqrt(R5 / (R2 * R3 * R6 * C1 * C2)),
        q=R1 * sqrt(C1 * R5 / (R2 * R3 * R6 * C2)),
    ),
    Stage(
        id="fleischer-tow-biquad",
        source='Fleischer and Tow, "Design formulas for biquad active filters using three operational amplifiers", '
        "Proc. IEEE 61 (1973) 662-663, from memory",
        sheet="""
in -- R4 -- m1 -- C1 -- v1
m1 -- R1 -- v1
U1 opamp: plus gnd, minus m1, drives v1
v1 -- R7 -- m3 -- R8 -- out
in -- R6 -- m3
U3 opamp: plus gnd, minus m3, drives out
out -- R2 -- m2 -- C2 -- v2
in -- R5 -- m2
U2 opamp: plus gnd, minus m2, drives v2
v2 -- R3 -- m1
ask H = V_out/V_in
""",
        ratios={
            "H": -(
                (R8 / R6) * s**2
                + (1 / (R1 * C1)) * (R8 / R6 - R1 * R8 / (R4 * R7)) * s
                + R8 / (R3 * R5 * R7 * C1 * C2)
            )
            / _FLEISCHER
        },
        omega0=sqrt(R8 / (R2 * R3 * R7 * C1 * C2)),
        q=R1 * sqrt(C1 * R8 / (R2 * R3 * R7 * C2)),
    ),
    Stage(
        id="general-impedance-converter",
        source=ANTONIOU,
        sheet="""
in -- Z1 -- a -- Z2 -- b -- Z3 -- c -- Z4 -- d -- Z5 -- gnd
U1 opamp: plus in, minus b, drives c
U2 opamp: plus d, minus b, drives a
ask Zin = V_in/I_in
""",
        ratios={"Zin": Z1 * Z3 * Z5 / (Z2 * Z4)},
    ),
    Stage(
        id="simulated-inductor",
        source=ANTONIOU,
        sheet="""
in -- R1 -- a -- R2 -- b -- R3 -- c -- C4 -- d -- R5 -- gnd
U1 opamp: plus in, minus b, drives c
U2 opamp: plus d, minus b, drives a
ask Zin = V_in/I_in
""",
        ratios={"Zin": s * C4 * R1 * R3 * R5 / R2},
    ),
    Stage(
        id="frequency-dependent-negative-resistance",
        source='Bruton, "Network transfer functions using the concept of frequency-dependent negative resistance", '
        "IEEE Trans. Circuit Theory CT-16 (1969) 406-408, from memory",
        sheet="""
in -- C1 -- a -- R2 -- b -- R3 -- c -- R4 -- d -- C5 -- gnd
U1 opamp: plus in, minus b, drives c
U2 opamp: plus d, minus b, drives a
ask Zin = V_in/I_in
""",
        ratios={"Zin": R3 / (s**2 * C1 * C5 * R2 * R4)},
    ),
    Stage(
        id="converter-band-pass",
        source=SEDRA + ": band-pass with the Antoniou inductor, output behind gain 1 + R4/R5; " + FLIEGE,
        sheet="""
in -- R6 -- r -- C6 -- gnd
r -- R1 -- a -- C2 -- b -- R3 -- out -- R4 -- d -- R5 -- gnd
U1 opamp: plus r, minus b, drives out
U2 opamp: plus d, minus b, drives a
ask H = V_out/V_in
""",
        ratios={"H": (1 + R4 / R5) * s / (R6 * C6) / _GIC},
        omega0=sqrt(R4 / (C2 * C6 * R1 * R3 * R5)),
        q=R6 * sqrt(C6 * R4 / (C2 * R1 * R3 * R5)),
        design={
            C6: C2,
            R1: 1 / (w0 * C2),
            R3: 1 / (w0 * C2),
            R4: R5,
            R6: Q / (w0 * C2),
        },
        designed=2 * s * w0 / Q / STANDARD,
    ),
    Stage(
        id="converter-high-pass",
        source=SEDRA + ": high-pass with the Antoniou inductor; " + FLIEGE,
        sheet="""
in -- C6 -- r -- R6 -- gnd
r -- R1 -- a -- C2 -- b -- R3 -- out -- R4 -- d -- R5 -- gnd
U1 opamp: plus r, minus b, drives out
U2 opamp: plus d, minus b, drives a
ask H = V_out/V_in
""",
        ratios={"H": (1 + R4 / R5) * s**2 / _GIC},
        omega0=sqrt(R4 / (C2 * C6 * R1 * R3 * R5)),
    ),
    Stage(
        id="fliege-notch",
        source=FLIEGE + "; with four equal resistors, two equal capacitors and Q = RQ/(2 R)",
        sheet="""
in -- C6 -- r
in -- R6 -- r -- R7 -- gnd
r -- R1 -- a -- C2 -- b -- R3 -- out -- R4 -- d -- R5 -- in
U1 opamp: plus r, minus b, drives out
U2 opamp: plus d, minus b, drives a
fix R3 = R1, R4 = R1, R5 = R1, C6 = C2, R7 = R6
ask H = V_out/V_in
""",
        ratios={
            "H": (s**2 + 1 / (R1 * C2) ** 2) / (s**2 + 2 * s / (R6 * C2) + 1 / (R1 * C2) ** 2),
        },
        omega0=1 / sqrt(R1**2 * C2**2),
        q=R6 / (2 * R1),
    ),
    Stage(
        id="converter-all-pass",
        source=SEDRA + ": second-order all-pass with the Antoniou inductor",
        sheet="""
in -- C6 -- r -- R6 -- gnd
r -- R1 -- a -- C2 -- b -- R3 -- out -- R4 -- d -- R5 -- in
U1 opamp: plus r, minus b, drives out
U2 opamp: plus d, minus b, drives a
fix R5 = R4
ask H = V_out/V_in
""",
        ratios={
            "H": (s**2 - s / (R6 * C6) + 1 / (C2 * C6 * R1 * R3))
            / (s**2 + s / (R6 * C6) + 1 / (C2 * C6 * R1 * R3))
        },
        omega0=1 / sqrt(C2 * C6 * R1 * R3),
        q=R6 * sqrt(C6 / (C2 * R1 * R3)),
    ),
    Stage(
        id="riordan-inductor",
        source='Riordan, "Simulated inductors using differential amplifiers", Electronics Letters 3 (1967) 50-51, '
        "from memory",
        sheet="""
gnd -- R1 -- m1 -- R2 -- x
U1 opamp: plus in, minus m1, drives x
x -- R3 -- m2 -- C4 -- w
U2 opamp: plus in, minus m2, drives w
in -- R5 -- w
ask Zin = V_in/I_in
""",
        ratios={"Zin": s * C4 * R1 * R3 * R5 / R2},
    ),
    Stage(
        id="bainter-notch",
        source='Bainter, "Active filter has stable notch, and response can be regulated", Electronics (2 October 1975) '
        "115-117, the structure from memory; the formula in these names worked by hand; " + VAN_VALKENBURG,
        sheet="""
in -- R1 -- m1 -- R2 -- v1
U1 opamp: plus gnd, minus m1, drives v1
v1 -- R3 -- m2 -- C2 -- v2
out -- R4 -- m2
U2 opamp: plus gnd, minus m2, drives v2
in -- C1 -- p -- R5 -- v2
p -- R6 -- gnd
U3 opamp: plus p, minus out, drives out
ask H = V_out/V_in
""",
        ratios={
            "H": (s**2 + (R2 / R1) / (R3 * R5 * C1 * C2))
            / (s**2 + s * (1 / R5 + 1 / R6) / C1 + 1 / (R4 * R5 * C1 * C2))
        },
        omega0=1 / sqrt(R4 * R5 * C1 * C2),
    ),
    Stage(
        id="instrumentation-amplifier",
        source=FRANCO + "; " + SEDRA + ": the amplifier of three, gain (1 + 2 R2/R1)(R6/R4)",
        sheet="""
U1 opamp: plus a, minus c, drives e
U2 opamp: plus b, minus d, drives f
e -- R2 -- c -- R1 -- d -- R3 -- f
e -- R4 -- m -- R6 -- out
f -- R5 -- p -- R7 -- gnd
U3 opamp: plus p, minus m, drives out
fix R3 = R2, R5 = R4, R7 = R6
ask Ab = V_out/V_b
ask Aa = V_out/V_a
""",
        # one input driven, the other dead: the two gains are opposite, so nothing of what is common comes through
        ratios={"Ab": (1 + 2 * R2 / R1) * R6 / R4, "Aa": -(1 + 2 * R2 / R1) * R6 / R4},
    ),
]
