"""Stages of the handbooks as sheets, with their amplifiers' inputs as they must be.

The circuits are common practice; where one has a name of its own it stands beside it. From memory: Sallen and Key,
"A practical method of designing RC active filters" (1955); Kerwin, Huelsman and Newcomb, "State-variable synthesis
for insensitive integrated circuit transfer functions" (1967); Tow (1968), Thomas (1971); Akerberg and Mossberg, "A
versatile active RC building block with inherent compensation" (1974); Antoniou (1969); Bruton, "Network transfer
functions using the concept of frequency-dependent negative resistance" (1969); Fliege (1973); Deboo (1967).
"""

from __future__ import annotations

STAGES = {
    "follower": """
        in -- R1 -- p -- R2 -- gnd
        U1 opamp: plus p, minus out, drives out
        ask H = V_out / V_in""",
    "inverting amplifier": """
        in -- R1 -- m -- R2 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in
        ask Zin = V_in / I_in""",
    "non-inverting amplifier": """
        gnd -- R1 -- m -- R2 -- out
        in -- R3 -- gnd
        U1 opamp: plus in, minus m, drives out
        ask H = V_out / V_in""",
    "difference amplifier": """
        a -- R1 -- m -- R2 -- out
        b -- R3 -- p -- R4 -- gnd
        U1 opamp: plus p, minus m, drives out
        fix R3 = R1, R4 = R2
        ask A = V_out / V_a
        ask B = V_out / V_b""",
    "instrumentation amplifier": """
        x -- R1 -- ma -- Rg -- mb -- R2 -- y
        a -- Ra -- gnd
        b -- Rb -- gnd
        x -- R3 -- m -- R4 -- out
        y -- R5 -- p -- R6 -- gnd
        U1 opamp: plus a, minus ma, drives x
        U2 opamp: plus b, minus mb, drives y
        U3 opamp: plus p, minus m, drives out
        ask A = V_out / V_a
        ask B = V_out / V_b""",
    "two-amplifier instrumentation amplifier": """
        gnd -- R1 -- ma -- R2 -- x -- R3 -- mb -- R4 -- out
        ma -- Rg -- mb
        a -- Ra -- gnd
        b -- Rb -- gnd
        U1 opamp: plus a, minus ma, drives x
        U2 opamp: plus b, minus mb, drives out
        ask A = V_out / V_a
        ask B = V_out / V_b""",
    "integrator": """
        in -- R1 -- m -- C1 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in""",
    "Deboo integrator": """
        in -- R1 -- p -- C1 -- gnd
        p -- R2 -- out
        gnd -- R3 -- m -- R4 -- out
        U1 opamp: plus p, minus m, drives out
        fix R4 = R3*R2/R1
        ask H = V_out / V_in""",
    "differentiator": """
        in -- C1 -- m -- R2 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in""",
    "transimpedance amplifier": """
        m -- R1 -- out
        m -- C1 -- out
        m -- C2 -- gnd
        U1 opamp: plus gnd, minus m, drives out
        ask Z = V_out / I_m""",
    "all-pass, first order": """
        in -- R1 -- m -- R2 -- out
        in -- R3 -- p -- C1 -- gnd
        U1 opamp: plus p, minus m, drives out
        fix R2 = R1
        ask H = V_out / V_in""",
    "multiple-feedback low-pass": """
        in -- R1 -- a -- R3 -- m -- C2 -- out
        a -- C1 -- gnd
        a -- R2 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in
        ask Zin = V_in / I_in""",
    "multiple-feedback high-pass": """
        in -- C1 -- a -- C3 -- m -- R2 -- out
        a -- R1 -- gnd
        a -- C2 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in""",
    "multiple-feedback band-pass": """
        in -- R1 -- a -- C2 -- m -- R3 -- out
        a -- R2 -- gnd
        a -- C1 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in""",
    "band-pass with positive feedback (Delyiannis and Friend)": """
        in -- R1 -- a -- C2 -- m -- R3 -- out
        a -- C1 -- out
        out -- R4 -- p -- R5 -- gnd
        U1 opamp: plus p, minus m, drives out
        ask H = V_out / V_in""",
    "Sallen-Key low-pass, unity gain": """
        in -- R1 -- a -- R2 -- p -- C2 -- gnd
        a -- C1 -- out
        U1 opamp: plus p, minus out, drives out
        ask H = V_out / V_in
        ask Zin = V_in / I_in""",
    "Sallen-Key low-pass, gain k": """
        in -- R1 -- a -- R2 -- p -- C2 -- gnd
        a -- C1 -- out
        out -- R3 -- m -- R4 -- gnd
        U1 opamp: plus p, minus m, drives out
        fix R3 = (k - 1)*R4
        choose k
        ask H = V_out / V_in""",
    "Sallen-Key high-pass": """
        in -- C1 -- a -- C2 -- p -- R2 -- gnd
        a -- R1 -- out
        out -- R3 -- m -- R4 -- gnd
        U1 opamp: plus p, minus m, drives out
        ask H = V_out / V_in""",
    "Sallen-Key band-pass": """
        in -- R1 -- a -- C2 -- p -- R2 -- gnd
        a -- C1 -- gnd
        a -- R3 -- out
        out -- R4 -- m -- R5 -- gnd
        U1 opamp: plus p, minus m, drives out
        ask H = V_out / V_in""",
    "third-order low-pass, one amplifier": """
        in -- R1 -- a -- R2 -- b -- R3 -- p -- C3 -- gnd
        a -- C1 -- gnd
        b -- C2 -- out
        U1 opamp: plus p, minus out, drives out
        ask H = V_out / V_in""",
    "Wien band-pass": """
        in -- R1 -- p -- C1 -- gnd
        p -- R2 -- gnd
        p -- C2 -- x -- R3 -- out
        out -- R4 -- m -- R5 -- gnd
        U1 opamp: plus p, minus m, drives out
        ask H = V_out / V_in""",
    "twin-T notch, bootstrapped": """
        in -- R1 -- a -- R2 -- t
        in -- C1 -- b -- C2 -- t
        a -- C3 -- foot
        b -- R3 -- foot
        out -- R4 -- q -- R5 -- gnd
        U1 opamp: plus t, minus out, drives out
        U2 opamp: plus q, minus foot, drives foot
        ask H = V_out / V_in""",
    "Tow-Thomas": """
        in -- R1 -- m1 -- R2 -- bp
        m1 -- C1 -- bp
        bp -- R3 -- m2 -- C2 -- lp
        lp -- R4 -- m3 -- R5 -- inv
        inv -- R6 -- m1
        U1 opamp: plus gnd, minus m1, drives bp
        U2 opamp: plus gnd, minus m2, drives lp
        U3 opamp: plus gnd, minus m3, drives inv
        ask B = V_bp / V_in
        ask L = V_lp / V_in""",
    "Akerberg-Mossberg": """
        in -- R1 -- m1 -- R2 -- bp
        m1 -- C1 -- bp
        bp -- R3 -- m2 -- C2 -- y
        y -- R5 -- x -- R4 -- lp
        lp -- R6 -- m1
        U1 opamp: plus gnd, minus m1, drives bp
        U2 opamp: plus m2, minus gnd, drives lp
        U3 opamp: plus gnd, minus x, drives y
        ask B = V_bp / V_in""",
    "state variable (Kerwin, Huelsman and Newcomb)": """
        in -- R1 -- p -- R2 -- bp
        lp -- R3 -- m -- R4 -- hp
        hp -- R5 -- m2 -- C1 -- bp
        bp -- R6 -- m3 -- C2 -- lp
        U1 opamp: plus p, minus m, drives hp
        U2 opamp: plus gnd, minus m2, drives bp
        U3 opamp: plus gnd, minus m3, drives lp
        ask H = V_hp / V_in
        ask B = V_bp / V_in
        ask L = V_lp / V_in""",
    "inductance by two amplifiers (Antoniou)": """
        in -- R1 -- b -- R2 -- c -- R3 -- d -- C4 -- e -- R5 -- gnd
        U1 opamp: plus in, minus c, drives d
        U2 opamp: plus e, minus c, drives b
        ask Z = V_in / I_in""",
    "band-pass with simulated inductance": """
        src -- R0 -- in -- C0 -- gnd
        in -- R1 -- b -- R2 -- c -- R3 -- d -- C4 -- e -- R5 -- gnd
        U1 opamp: plus in, minus c, drives d
        U2 opamp: plus e, minus c, drives b
        ask H = V_d / V_src""",
    "low-pass with frequency-dependent negative resistance (Bruton)": """
        src -- R0 -- in
        in -- C1 -- b -- R2 -- c -- R3 -- d -- R4 -- e -- C5 -- gnd
        U1 opamp: plus in, minus c, drives d
        U2 opamp: plus e, minus c, drives b
        ask H = V_in / V_src""",
    "high-pass with simulated inductance": """
        src -- C0 -- in -- R0 -- gnd
        in -- R1 -- b -- R2 -- c -- R3 -- d -- C4 -- e -- R5 -- gnd
        U1 opamp: plus in, minus c, drives d
        U2 opamp: plus e, minus c, drives b
        ask H = V_in / V_src
        ask Zin = V_src / I_src""",
    "notch by Bainter": """
        in -- R1 -- m1 -- R2 -- x
        x -- R3 -- m2 -- C1 -- y
        out -- R4 -- m2
        y -- R5 -- p -- C2 -- in
        p -- R6 -- gnd
        U1 opamp: plus gnd, minus m1, drives x
        U2 opamp: plus gnd, minus m2, drives y
        U3 opamp: plus p, minus out, drives out
        ask H = V_out / V_in""",
    "third-order leapfrog low-pass": """
        in -- R1 -- m1 -- C1 -- a
        m1 -- R2 -- a
        c -- R3 -- m1
        a -- R4 -- m2 -- C2 -- b
        e -- R5 -- m2
        b -- R6 -- m3 -- R7 -- c
        c -- R8 -- m4 -- C4 -- d
        m4 -- R9 -- d
        d -- R10 -- m5 -- R11 -- e
        U1 opamp: plus gnd, minus m1, drives a
        U2 opamp: plus gnd, minus m2, drives b
        U3 opamp: plus gnd, minus m3, drives c
        U4 opamp: plus gnd, minus m4, drives d
        U5 opamp: plus gnd, minus m5, drives e
        fix R11 = R10
        ask H = V_d / V_in""",
    "amplifier with a servo for its direct voltage": """
        in -- R0 -- gnd
        out -- R2 -- m -- R1 -- gnd
        s1 -- R3 -- m
        out -- R4 -- q -- C2 -- gnd
        gnd -- R5 -- n -- C1 -- s1
        U1 opamp: plus in, minus m, drives out
        U2 opamp: plus q, minus n, drives s1
        fix C2 = C1, R5 = R4
        ask H = V_out / V_in""",
    "integrator of two amplifiers in one loop": """
        in -- R1 -- m -- C1 -- out
        out -- R3 -- n -- R4 -- gnd
        U1 opamp: plus gnd, minus m, drives x
        U2 opamp: plus x, minus n, drives out
        ask H = V_out / V_in""",
    "current source with a transistor": """
        in -- R1 -- gnd
        b -- Rpi -- e -- Re -- gnd
        c -- RL -- gnd
        Q1 vccs: senses b e, drives c e, gm 40 mS
        U1 opamp: plus in, minus e, drives b
        ask G = I_RL / V_in""",
    "voltage follower with a load behind a transformer": """
        in -- R1 -- gnd
        out -- R2 -- x
        T1 transformer: primary x gnd, secondary y gnd, ratio 2
        y -- C1 -- gnd
        y -- R3 -- gnd
        U1 opamp: plus in, minus x, drives out
        ask H = V_y / V_in""",
    "inductor in the feedback": """
        in -- R1 -- m -- R2 -- x -- L1 -- out
        U1 opamp: plus gnd, minus m, drives out
        ask H = V_out / V_in""",
    "general impedances in multiple feedback": """
        in -- Y1 -- a -- Y3 -- m -- Y5 -- out
        a -- Y2 -- gnd
        a -- Y4 -- out
        U1 opamp: plus gnd, minus m, drives out
        fix Y1 = 1/R1, Y2 = s*C2 + 1/R2, Y3 = 1/R3, Y4 = 1/R4, Y5 = s*C5 + 1/R5
        ask H = V_out / V_in""",
    "improved Howland current source": """
        in -- R1 -- p -- R2 -- load
        gnd -- R3 -- m -- R4 -- out
        out -- R5 -- load -- RL -- gnd
        U1 opamp: plus p, minus m, drives out
        fix R1 = 10k, R2 = 9900 ohm, R3 = 10k, R4 = 10k, R5 = 100 ohm, RL = 200 ohm
        ask G = I_RL / V_in""",
    "negative-impedance converter, driven by a voltage": """
        in -- R1 -- out -- R2 -- m -- R3 -- gnd
        U1 opamp: plus in, minus m, drives out
        ask H = V_out / V_in""",
    "follower that drives the feet of its own input network": """
        in -- R0 -- p -- C1 -- x
        x -- R1 -- out
        p -- R2 -- x2
        x2 -- R3 -- out
        p -- R4 -- gnd
        U1 opamp: plus p, minus out, drives out
        ask H = V_out / V_in""",
    "low-pass of two equal blocks": """
        block section (p, q)
          p -- R1 -- x -- R2 -- y -- C2 -- gnd
          x -- C1 -- q
          U1 opamp: plus y, minus q, drives q
        end
        use section as S1 (in, mid)
        use section as S2 (mid, out)
        ask H = V_out / V_in""",
}
