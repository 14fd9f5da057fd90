"""Hand derivations as books and papers print them: equations only, typed as workings.

All are from memory of the sources named, in the order in which these reduce the circuit; the sheets are those of
``tests/published``, by the stage's id.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Derivation:
    """A derivation, the published stage it is of, where it is printed, and its lines."""

    stage: str
    source: str
    lines: str


DERIVATIONS = [
    Derivation(
        "sallen-key-low-pass-unity",
        'Sedra and Smith, "Microelectronic Circuits", chapter on filters, from memory',
        """
let Vi = V_in, Va = V_a, Vo = V_out
V_p = Vo                                     # a follower
Vo = Va/(1 + s R2 C2)
Va = Vo (1 + s R2 C2)
(Vi - Va)/R1 = (Va - Vo)/R2 + s C1 (Va - Vo)
Vi = Va + R1 (Va - Vo)(1/R2 + s C1)
Vi = Vo (1 + s C2 (R1 + R2) + s^2 R1 R2 C1 C2)
H = 1/(1 + s C2 (R1 + R2) + s^2 R1 R2 C1 C2)
w0 = 1/sqrt(R1 R2 C1 C2)
Q = sqrt(R1 R2 C1 C2)/(C2 (R1 + R2)) = (sqrt(R1/R2) + sqrt(R2/R1))^-1 sqrt(C1/C2)
""",
    ),
    Derivation(
        "sallen-key-low-pass-with-gain",
        'Sallen and Key, "A practical method of designing RC active filters", IRE Trans. Circuit Theory CT-2 (1955), '
        "from memory",
        """
K = 1 + R4/R3
V_f = V_out R3/(R3 + R4) = V_out/K
V_p = V_f
(V_in - V_a)/R1 + (V_out - V_a) s C1 + (V_p - V_a)/R2 = 0
(V_a - V_p)/R2 = V_p s C2
V_a = (V_out/K)(1 + s C2 R2)
V_out/V_in = K/(s^2 R1 R2 C1 C2 + s (R1 C2 + R2 C2 + R1 C1 (1 - K)) + 1)
1/Q = sqrt(R2 C2/(R1 C1)) + sqrt(R1 C2/(R2 C1)) + (1 - K) sqrt(R1 C1/(R2 C2))
""",
    ),
    Derivation(
        "multiple-feedback-low-pass",
        'Huelsman, "Active and Passive Analog Filter Design" (1993), chapter 5, from memory',
        """
let G1 = 1/R1, G2 = 1/R2, G3 = 1/R3
V_a (G1 + G2 + G3 + s C1) - G1 V_in - G2 V_out = 0
G3 V_a + s C2 V_out = 0
V_a = -s C2 V_out/G3
V_out/V_in = -G1 G3/(s^2 C1 C2 + s C2 (G1 + G2 + G3) + G2 G3)
H = -(R2/R1)/(s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)
w0^2 = G2 G3/(C1 C2)
w0/Q = (G1 + G2 + G3)/C1
""",
    ),
    Derivation(
        "multiple-feedback-band-pass",
        'Van Valkenburg, "Analog Filter Design" (1982), chapter on biquads with one amplifier, from memory',
        """
I_R1 = (V_in - V_a)/R1
I_R1 = V_a/R2 + s C1 (V_a - V_out) + s C2 V_a
s C2 V_a = -V_out/R3
V_a = -V_out/(s R3 C2)
V_out/V_in = -(s/(R1 C1))/(s^2 + s (C1 + C2)/(R3 C1 C2) + (1/R1 + 1/R2)/(R3 C1 C2))
w0 = 1/sqrt((R1 || R2) R3 C1 C2)
Q = sqrt(R3 C1 C2/(R1 || R2))/(C1 + C2)
""",
    ),
    Derivation(
        "wien-network-band-pass",
        'Sedra and Smith, "Microelectronic Circuits", the Wien-bridge oscillator, from memory',
        """
Zs = R1 + 1/(s C1)
Zp = R2 // (1/(s C2))
Zp = R2/(1 + s R2 C2)
V_p/V_in = Zp/(Zp + Zs)
V_p/V_in = 1/(1 + R1/R2 + C2/C1 + s C2 R1 + 1/(s C1 R2))
V_out = (1 + R4/R3) V_p
V_out/V_in = (1 + R4/R3)/(1 + R1/R2 + C2/C1 + j (w C2 R1 - 1/(w C1 R2)))
w0^2 = 1/(R1 R2 C1 C2)
""",
    ),
    Derivation(
        "all-pass-first-order",
        'Horowitz and Hill, "The Art of Electronics", the phase shifter, from memory',
        """
V_p = V_in/(1 + j w R3 C1)
(V_in - V_m)/R1 = (V_m - V_out)/R1
V_out = 2 V_p - V_in
V_out/V_in = 2/(1 + j w R3 C1) - 1 = (1 - j w R3 C1)/(1 + j w R3 C1)
""",
    ),
    Derivation(
        "difference-amplifier",
        'Franco, "Design with Operational Amplifiers and Analog Integrated Circuits", from memory',
        """
V_p = R4/(R3 + R4) V_b
(V_a - V_m)/R1 = (V_m - V_out)/R2
V_m = V_p
V_out = (1 + R2/R1) V_p - (R2/R1) V_a
V_out = ((1 + R2/R1)/(1 + R3/R4)) V_b - (R2/R1) V_a
V_out = Ab V_b + Aa V_a
""",
    ),
    Derivation(
        "deboo-integrator",
        'Deboo, "A novel integrator results by grounding its capacitor", Electronic Design 15 (1967), from memory',
        """
V_m = V_out R3/(R3 + R4)
V_p = V_m = V_out R1/(R1 + R2)
s C1 V_p = (V_in - V_p)/R1 + (V_out - V_p)/R2
V_out = (1 + R2/R1) V_p
s C1 V_p = V_in/R1
H = (1 + R2/R1)/(s R1 C1)
""",
    ),
    Derivation(
        "howland-current-source",
        'Franco, "Design with Operational Amplifiers and Analog Integrated Circuits", the Howland pump, from memory',
        """
under Zout
V_m = V_p
V_m = V_out R3/(R3 + R4)
I_p = V_p/R1 + (V_p - V_out)/R2
V_out = V_p (1 + R4/R3)
I_p = V_p/R1 - V_p R4/(R2 R3)
Zout = 1/(1/R1 - R4/(R2 R3)) = R1/(1 - R1 R4/(R2 R3))
""",
    ),
    Derivation(
        "negative-impedance-converter",
        'Huelsman, "Theory and Design of Active RC Circuits" (1968), from memory',
        """
V_m = V_in
V_out = V_in (1 + R2/Z1)
I_in = (V_in - V_out)/R1
I_in = -V_in R2/(R1 Z1)
Zin = -Z1 R1/R2
""",
    ),
    Derivation(
        "three-zero-compensator",
        'Venable, "The k factor: a new mathematical tool for stability analysis and synthesis", Powercon 10 (1983), '
        "from memory",
        """
Zi = R1 || (R3 + 1/(s C3))
Zf = (R2 + 1/(s C1)) || 1/(s C2)
Zi = R1 (1 + s R3 C3)/(1 + s (R1 + R3) C3)
Zf = (1 + s R2 C1)/(s (C1 + C2) (1 + s R2 C1 C2/(C1 + C2)))
V_in/Zi = -V_out/Zf
V_out/V_in = -Zf/Zi
H = -(1 + s R2 C1)(1 + s (R1 + R3) C3)/(s R1 (C1 + C2)(1 + s R3 C3)(1 + s R2 C1 C2/(C1 + C2)))
""",
    ),
    Derivation(
        "tow-thomas-biquad",
        'Thomas, "The biquad: part I, some practical design considerations", IEEE Trans. Circuit Theory CT-18 (1971), '
        "from memory",
        """
let V1 = V_bp, V2 = V_lp, V3 = V_inv
V1 (1/R1 + s C1) = -V_in/R4 - V3/R2
V2 = -V1/(s R3 C2)
V3 = -(R6/R5) V2
V1 = -s R3 C2 V2
V2/V_in = (1/(R3 R4 C1 C2))/(s^2 + s/(R1 C1) + R6/(R5 R2 R3 C1 C2))
w0 = sqrt(R6/(R5 R2 R3 C1 C2))
Q = w0 R1 C1
""",
    ),
    Derivation(
        "state-variable-filter",
        'Kerwin, Huelsman and Newcomb, "State-variable synthesis for insensitive integrated circuit transfer '
        'functions", IEEE J. Solid-State Circuits SC-2 (1967), from memory',
        """
V_p = (R4 V_in + R3 V_bp)/(R3 + R4)
V_hp = (1 + R2/R1) V_p - (R2/R1) V_lp
V_bp = -V_hp/(s R5 C1)
V_lp = -V_bp/(s R6 C2)
V_lp = V_hp/(s^2 R5 R6 C1 C2)
D = s^2 + s (1 + R2/R1) R3/((R3 + R4) R5 C1) + (R2/R1)/(R5 R6 C1 C2)
V_hp/V_in = s^2 (1 + R2/R1) R4/((R3 + R4) D)
Hp = s^2 (1 + R2/R1) R4/((R3 + R4) D)
Lp = Hp/(s^2 R5 R6 C1 C2)
""",
    ),
    Derivation(
        "general-impedance-converter",
        'Antoniou, "Realisation of gyrators using operational amplifiers, and their use in RC-active-network '
        'synthesis", Proc. IEE 116 (1969), from memory',
        """
V_b = V_in
V_d = V_in
(V_c - V_d)/Z4 = V_d/Z5
V_c = V_in (1 + Z4/Z5)
(V_a - V_b)/Z2 = (V_b - V_c)/Z3
V_a = V_in (1 - Z2 Z4/(Z3 Z5))
I_in = (V_in - V_a)/Z1
Zin = V_in/I_in = Z1 Z3 Z5/(Z2 Z4)
""",
    ),
    Derivation(
        "instrumentation-amplifier",
        'Sedra and Smith, "Microelectronic Circuits", the instrumentation amplifier, from memory',
        """
V_c = V_a
V_d = V_b
I1 = (V_b - V_a)/R1
I1 = (V_f - V_d)/R2
I1 = (V_c - V_e)/R2
V_f - V_e = (1 + 2 R2/R1)(V_b - V_a)
V_out = (R6/R4)(V_f - V_e)
V_out = (R6/R4)(1 + 2 R2/R1)(V_b - V_a)
""",
    ),
    Derivation(
        "twin-t-with-bootstrapped-foot",
        'Williams and Taylor, "Electronic Filter Design Handbook", from memory',
        """
k = R6/(R5 + R6)
V_foot = k V_out
V_t = V_out
(V_in - V_a)/R1 + (V_out - V_a)/R1 = 2 s C1 (V_a - k V_out)
s C1 (V_in - V_b) + s C1 (V_out - V_b) = 2 (V_b - k V_out)/R1
(V_a - V_out)/R1 + s C1 (V_b - V_out) = 0
H = (s^2 + 1/(R1 C1)^2)/(s^2 + 4 (1 - k) s/(R1 C1) + 1/(R1 C1)^2)
Q = 1/(4 (1 - k))
""",
    ),
]
