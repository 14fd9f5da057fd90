"""Published stages with one amplifier. All formulas are from memory of the sources named."""

from __future__ import annotations

from sympy import sqrt

from tests.published.stage import C1, C2, C3, R1, R2, R3, R4, R5, R6, Z1, G, Q, Stage, k, s, w0

SALLEN_KEY = (
    'Sallen and Key, "A practical method of designing RC active filters", IRE Trans. Circuit Theory CT-2 (1955) '
    "74-85, from memory"
)
HUELSMAN = 'Huelsman, "Active and Passive Analog Filter Design" (1993), chapter 5, from memory'
VAN_VALKENBURG = 'Van Valkenburg, "Analog Filter Design" (1982), from memory'
FRANCO = 'Franco, "Design with Operational Amplifiers and Analog Integrated Circuits", from memory'
WILLIAMS = 'Williams and Taylor, "Electronic Filter Design Handbook", from memory'
SEDRA = 'Sedra and Smith, "Microelectronic Circuits", from memory'

STANDARD = s**2 + s * w0 / Q + w0**2
#: The gain of an amplifier with R4 from output to minus and R3 from there to ground.
K = 1 + R4 / R3

_SK_LOW = s**2 * R1 * R2 * C1 * C2 + s * (R1 * C2 + R2 * C2 + R1 * C1 * (1 - K)) + 1
_SK_HIGH = s**2 + s * (1 / (R2 * C1) + 1 / (R2 * C2) + (1 - K) / (R1 * C1)) + 1 / (R1 * R2 * C1 * C2)
_SK_BAND = (
    s**2
    + s * (1 / (R1 * C1) + (1 - K) / (R2 * C1) + 1 / (R5 * C1) + 1 / (R5 * C2))
    + (R1 + R2) / (R1 * R2 * R5 * C1 * C2)
)
_MFB_BAND = s**2 + s * (C1 + C2) / (R3 * C1 * C2) + (1 / R1 + 1 / R2) / (R3 * C1 * C2)
_WIEN = s**2 * R1 * R2 * C1 * C2 + s * (R1 * C1 + R2 * C2 + R2 * C1) + 1
_DIVIDED = R4 / (R3 + R4)

SINGLE_AMPLIFIER = [
    Stage(
        id="sallen-key-low-pass-unity",
        source=SALLEN_KEY + "; the design for equal resistors after " + FRANCO,
        sheet="""
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
U1 opamp: plus p, minus out, drives out
ask H = V_out/V_in
""",
        ratios={"H": 1 / (s**2 * R1 * R2 * C1 * C2 + s * C2 * (R1 + R2) + 1)},
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
        q=sqrt(R1 * R2 * C1 / C2) / (R1 + R2),
        design={R2: R1, C1: 2 * Q / (w0 * R1), C2: 1 / (2 * Q * w0 * R1)},
        designed=w0**2 / STANDARD,
    ),
    Stage(
        id="sallen-key-low-pass-with-gain",
        source=SALLEN_KEY
        + "; the design for equal resistors and equal capacitors, gain 3 - 1/Q, after "
        + FRANCO,
        sheet="""
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
out -- R4 -- f -- R3 -- gnd
U1 opamp: plus p, minus f, drives out
ask H = V_out/V_in
""",
        ratios={"H": K / _SK_LOW},
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
        q=sqrt(R1 * R2 * C1 * C2) / (R1 * C2 + R2 * C2 + R1 * C1 * (1 - K)),
        design={R1: 1 / (w0 * C1), R2: 1 / (w0 * C1), C2: C1, R4: (2 - 1 / Q) * R3},
        designed=(3 - 1 / Q) * w0**2 / STANDARD,
    ),
    Stage(
        id="sallen-key-high-pass-with-gain",
        source=SALLEN_KEY,
        sheet="""
in -- C1 -- a -- C2 -- p -- R2 -- gnd
a -- R1 -- out
out -- R4 -- f -- R3 -- gnd
U1 opamp: plus p, minus f, drives out
ask H = V_out/V_in
""",
        ratios={"H": K * s**2 / _SK_HIGH},
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
        design={R1: 1 / (w0 * C1), R2: 1 / (w0 * C1), C2: C1, R4: (2 - 1 / Q) * R3},
        designed=(3 - 1 / Q) * s**2 / STANDARD,
    ),
    Stage(
        id="sallen-key-band-pass",
        source=SALLEN_KEY + "; " + VAN_VALKENBURG,
        sheet="""
in -- R1 -- a -- C2 -- p -- R5 -- gnd
a -- C1 -- gnd
a -- R2 -- out
out -- R4 -- f -- R3 -- gnd
U1 opamp: plus p, minus f, drives out
ask H = V_out/V_in
""",
        ratios={"H": K * s / (R1 * C1) / _SK_BAND},
        omega0=sqrt((R1 + R2) / (R1 * R2 * R5 * C1 * C2)),
    ),
    Stage(
        id="unity-gain-low-pass-third-order",
        source=WILLIAMS + ": unity-gain three-pole low-pass, equal resistors",
        sheet="""
in -- R1 -- a -- R2 -- b -- R3 -- p -- C3 -- gnd
a -- C1 -- gnd
b -- C2 -- out
U1 opamp: plus p, minus out, drives out
fix R2 = R1, R3 = R1
ask H = V_out/V_in
""",
        ratios={
            "H": 1
            / (s**3 * R1**3 * C1 * C2 * C3 + 2 * s**2 * R1**2 * C3 * (C1 + C2) + s * R1 * (C1 + 3 * C3) + 1)
        },
    ),
    Stage(
        id="multiple-feedback-low-pass",
        source=HUELSMAN,
        sheet="""
in -- R1 -- a -- R3 -- m -- C2 -- out
a -- C1 -- gnd
a -- R2 -- out
U1 opamp: plus gnd, minus m, drives out
ask H = V_out/V_in
""",
        ratios={
            "H": -(R2 / R1) / (s**2 * R2 * R3 * C1 * C2 + s * C2 * (R2 + R3 + R2 * R3 / R1) + 1),
        },
        omega0=1 / sqrt(R2 * R3 * C1 * C2),
        q=sqrt(C1 / C2) / (sqrt(R3 / R2) + sqrt(R2 / R3) + sqrt(R2 * R3) / R1),
        # C1 = 4 Q^2 (1 + G) C2 makes the root of the quadratic for R2 vanish
        design={
            C1: 4 * Q**2 * (1 + G) * C2,
            R2: 1 / (2 * Q * w0 * C2),
            R1: 1 / (2 * Q * w0 * C2 * G),
            R3: 1 / (2 * Q * w0 * C2 * (1 + G)),
        },
        designed=-G * w0**2 / STANDARD,
    ),
    Stage(
        id="multiple-feedback-high-pass",
        source=HUELSMAN + "; the design for C2 = C1/G, C3 = C1 after " + FRANCO,
        sheet="""
in -- C1 -- a -- C3 -- m -- R2 -- out
a -- R1 -- gnd
a -- C2 -- out
U1 opamp: plus gnd, minus m, drives out
ask H = V_out/V_in
""",
        ratios={
            "H": -(C1 / C2) * s**2 / (s**2 + s * (C1 + C2 + C3) / (R2 * C2 * C3) + 1 / (R1 * R2 * C2 * C3)),
        },
        omega0=1 / sqrt(R1 * R2 * C2 * C3),
        q=sqrt(R2 * C2 * C3 / R1) / (C1 + C2 + C3),
        design={
            C3: C1,
            C2: C1 / G,
            R1: 1 / (w0 * Q * C1 * (2 + 1 / G)),
            R2: Q * (2 * G + 1) / (w0 * C1),
        },
        designed=-G * s**2 / STANDARD,
    ),
    Stage(
        id="multiple-feedback-band-pass",
        source=HUELSMAN + "; the design for equal capacitors, G the gain at the centre, after " + WILLIAMS,
        sheet="""
in -- R1 -- a -- C2 -- m -- R3 -- out
a -- R2 -- gnd
a -- C1 -- out
U1 opamp: plus gnd, minus m, drives out
ask H = V_out/V_in
""",
        ratios={"H": -s / (R1 * C1) / _MFB_BAND},
        omega0=sqrt((R1 + R2) / (R1 * R2 * R3 * C1 * C2)),
        q=sqrt((R1 + R2) * R3 * C1 * C2 / (R1 * R2)) / (C1 + C2),
        design={
            C2: C1,
            R1: Q / (G * w0 * C1),
            R2: Q / ((2 * Q**2 - G) * w0 * C1),
            R3: 2 * Q / (w0 * C1),
        },
        designed=-G * s * w0 / Q / STANDARD,
    ),
    Stage(
        id="delyiannis-friend-band-pass",
        source='Delyiannis, "High-Q factor circuit with reduced sensitivity", Electronics Letters 4 (1968) 577-579; '
        'Friend, Harris and Hilberman, "STAR: an active biquadratic filter section", IEEE Trans. Circuits and '
        "Systems CAS-22 (1975) 115-121, from memory",
        sheet="""
in -- R1 -- a -- C2 -- m -- R2 -- out
a -- C1 -- out
out -- R5 -- p -- R4 -- gnd
U1 opamp: plus p, minus m, drives out
ask H = V_out/V_in
""",
        ratios={
            "H": -(1 + R4 / R5)
            * s
            / (R1 * C1)
            / (s**2 + s * ((1 / C1 + 1 / C2) / R2 - (R4 / R5) / (R1 * C1)) + 1 / (R1 * R2 * C1 * C2))
        },
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
    ),
    Stage(
        id="delyiannis-all-pass",
        source='Delyiannis, "RC active all-pass sections", Electronics Letters 5 (1969) 59-60, from memory; '
        "the design for equal capacitors worked by hand",
        sheet="""
in -- R1 -- a -- C2 -- m -- R2 -- out
a -- C1 -- out
in -- R3 -- p -- R4 -- gnd
U1 opamp: plus p, minus m, drives out
ask H = V_out/V_in
""",
        ratios={
            "H": _DIVIDED
            * (s**2 + s * ((1 / C1 + 1 / C2) / R2 - R3 / (R4 * R1 * C1)) + 1 / (R1 * R2 * C1 * C2))
            / (s**2 + s * (1 / C1 + 1 / C2) / R2 + 1 / (R1 * R2 * C1 * C2))
        },
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
        q=sqrt(R2 * C1 * C2 / R1) / (C1 + C2),
        design={C2: C1, R1: 1 / (2 * Q * w0 * C1), R2: 2 * Q / (w0 * C1), R3: R4 / Q**2},
        designed=Q**2 / (1 + Q**2) * (s**2 - s * w0 / Q + w0**2) / STANDARD,
    ),
    Stage(
        id="all-pass-first-order",
        source=SEDRA + ": first-order all-pass",
        sheet="""
in -- R1 -- m -- R2 -- out
in -- R3 -- p -- C1 -- gnd
U1 opamp: plus p, minus m, drives out
fix R2 = R1
ask H = V_out/V_in
""",
        ratios={"H": (1 - s * R3 * C1) / (1 + s * R3 * C1)},
    ),
    Stage(
        id="deboo-integrator",
        source='Deboo, "A novel integrator results by grounding its capacitor", Electronic Design 15 (1967), '
        "from memory",
        sheet="""
in -- R1 -- p -- R2 -- out
p -- C1 -- gnd
gnd -- R3 -- m -- R4 -- out
U1 opamp: plus p, minus m, drives out
fix R4 = R2*R3/R1
ask H = V_out/V_in
""",
        ratios={"H": (1 + R2 / R1) / (s * R1 * C1)},
    ),
    Stage(
        id="howland-current-source",
        source=FRANCO + ": Howland current pump, output current and output resistance with unmatched arms",
        sheet="""
in -- R1 -- p -- R2 -- out
gnd -- R3 -- m -- R4 -- out
U1 opamp: plus p, minus m, drives out
ask Gm = I_p/V_in with V_p = 0
ask Zout = V_p/I_p with V_in = 0
""",
        # I_p is the current that the short delivers into p, minus the current that the source gives
        ratios={"Gm": -1 / R1, "Zout": R1 / (1 - R1 * R4 / (R2 * R3))},
    ),
    Stage(
        id="negative-impedance-converter",
        source='Huelsman, "Theory and Design of Active RC Circuits" (1968): negative-impedance converter, from memory',
        sheet="""
in -- R1 -- out -- R2 -- m -- Z1 -- gnd
U1 opamp: plus in, minus m, drives out
ask Zin = V_in/I_in
""",
        ratios={"Zin": -Z1 * R1 / R2},
    ),
    Stage(
        id="difference-amplifier",
        source=FRANCO,
        sheet="""
a -- R1 -- m -- R2 -- out
b -- R3 -- p -- R4 -- gnd
U1 opamp: plus p, minus m, drives out
ask Ab = V_out/V_b
ask Aa = V_out/V_a
""",
        ratios={"Ab": (1 + R2 / R1) / (1 + R3 / R4), "Aa": -R2 / R1},
    ),
    Stage(
        id="three-zero-compensator",
        source='Venable, "The k factor: a new mathematical tool for stability analysis and synthesis", Powercon 10 '
        "(1983): the type 3 amplifier, from memory",
        sheet="""
in -- R1 -- m
in -- R3 -- b -- C3 -- m
m -- R2 -- c -- C1 -- out
m -- C2 -- out
U1 opamp: plus gnd, minus m, drives out
ask H = V_out/V_in
""",
        ratios={
            "H": -(1 + s * R2 * C1)
            * (1 + s * (R1 + R3) * C3)
            / (s * R1 * (C1 + C2) * (1 + s * R3 * C3) * (1 + s * R2 * C1 * C2 / (C1 + C2)))
        },
    ),
    Stage(
        id="charge-amplifier",
        source=FRANCO + ": charge amplifier with its discharge resistor",
        sheet="""
in -- C1 -- gnd
in -- C2 -- out
in -- R1 -- out
U1 opamp: plus gnd, minus in, drives out
ask Zt = V_out/I_in
""",
        ratios={"Zt": -R1 / (1 + s * R1 * C2)},
    ),
    Stage(
        id="wien-bridge-loop-gain",
        source=SEDRA
        + ": Wien-bridge oscillator; the loop gain's sign is the design's, positive for negative feedback",
        sheet="""
out -- R2 -- b -- C2 -- p
p -- R1 -- gnd
p -- C1 -- gnd
out -- R4 -- m -- R3 -- in
U1 opamp: plus p, minus m, drives out, gain k
choose k
ask T = loop(U1) with V_in = 0
""",
        # the bridge's balance: beta of the minus input less beta of the plus input
        ratios={
            "T": k
            * (
                R3 / (R3 + R4)
                - s * R1 * C2 / (s**2 * R1 * R2 * C1 * C2 + s * (R1 * C1 + R2 * C2 + R1 * C2) + 1)
            )
        },
    ),
    Stage(
        id="wien-network-band-pass",
        source=SEDRA + ": the Wien network before an amplifier of gain 1 + R4/R3",
        sheet="""
in -- R1 -- a -- C1 -- p
p -- R2 -- gnd
p -- C2 -- gnd
out -- R4 -- m -- R3 -- gnd
U1 opamp: plus p, minus m, drives out
ask H = V_out/V_in
""",
        ratios={"H": K * s * R2 * C1 / _WIEN},
        omega0=1 / sqrt(R1 * R2 * C1 * C2),
        q=sqrt(R1 * R2 * C1 * C2) / (R1 * C1 + R2 * C2 + R2 * C1),
    ),
    Stage(
        id="twin-t-with-bootstrapped-foot",
        source=WILLIAMS + ": twin-T notch, its foot driven by a part of the output; Q = 1/(4 (1 - part))",
        sheet="""
in -- R1 -- a -- R2 -- t
in -- C1 -- b -- C2 -- t
a -- C3 -- foot
b -- R3 -- foot
U1 opamp: plus t, minus out, drives out
out -- R5 -- d -- R6 -- gnd
U2 opamp: plus d, minus foot, drives foot
fix R2 = R1, R3 = R1/2, C2 = C1, C3 = 2*C1
ask H = V_out/V_in
""",
        ratios={
            "H": (s**2 + 1 / (R1 * C1) ** 2)
            / (s**2 + 4 * (1 - R6 / (R5 + R6)) * s / (R1 * C1) + 1 / (R1 * C1) ** 2)
        },
        omega0=1 / sqrt(R1**2 * C1**2),
        q=(R5 + R6) / (4 * R5),
    ),
]
