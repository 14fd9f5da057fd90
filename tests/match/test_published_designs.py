"""Whole designs, from the circuit and the target to the parts, against the values that books print (from memory).

H&H: P. Horowitz and W. Hill, "The Art of Electronics" (1989), table of VCVS low-pass filters: for equal R and C the
gain of each section, and for Chebyshev and Bessel its frequency factor.
Williams: A. B. Williams, "Electronic Filter Design Handbook" (1981), tables of unity-gain active low-pass filters:
capacitors for resistors of 1 ohm and an edge at 1 rad/s.
Weinberg: L. Weinberg, "Network Analysis and Synthesis" (1962), tables of ladders with one termination.
"""

import math

import pytest

from tests.match.sheets import EQUAL_PARTS, UNITY_GAIN, chain, designed

ASK = "ask H = V_out/V_in\n"
EDGE = 2 * math.pi * 1000


def equal_parts(target):
    """The gain and the frequency factor (edge times RC) of each section of an equal-parts cascade, by H&H."""
    count = int(target.split("order ")[1].split(",")[0]) // 2
    found = designed(EQUAL_PARTS + chain(count) + ASK + f"target H: lowpass {target}, edge 1 kHz\n")
    assert found.solutions
    assert len(found.solutions) == 1
    values = found.solutions[0].values
    gains = [1 + values[f"S{k}_R3"] / values[f"S{k}_R4"] for k in range(1, count + 1)]
    factors = [1 / (EDGE * values[f"S{k}_R1"] * values[f"S{k}_C1"]) for k in range(1, count + 1)]
    return gains, factors


@pytest.mark.parametrize(
    ("order", "printed"),
    [
        (2, [1.586]),
        (4, [1.152, 2.235]),
        (6, [1.068, 1.586, 2.483]),
        (8, [1.038, 1.337, 1.889, 2.610]),
    ],
)
def test_equal_parts_butterworth_cascades_have_the_printed_gains(order, printed):
    """H&H, Butterworth: 1.586; 1.152, 2.235; 1.068, 1.586, 2.483; 1.038, 1.337, 1.889, 2.610.

    To one unit of the last digit: 3 - 1/Q is 2.4824 where the book has 2.483.
    """
    if order == 2:
        single = EQUAL_PARTS + chain(1) + ASK + "target H: lowpass butterworth, order 2, edge 1 kHz\n"
        values = designed(single).solutions[0].values
        gains, factors = [1 + values["S1_R3"] / values["S1_R4"]], [1.0]
    else:
        gains, factors = equal_parts(f"butterworth, order {order}")
    assert gains == pytest.approx(printed, abs=1e-3)
    assert factors == pytest.approx([1.0] * len(printed), rel=1e-9)


def test_equal_parts_chebyshev_of_half_a_decibel_has_the_printed_gains_and_frequencies():
    """H&H, Chebyshev 0.5 dB, order 4: 0.597 with 1.582, 1.031 with 2.660."""
    gains, factors = equal_parts("chebyshev, order 4, ripple 0.5 dB")
    assert gains == pytest.approx([1.582, 2.660], abs=6e-4)
    assert factors == pytest.approx([0.597, 1.031], abs=6e-4)


def test_equal_parts_bessel_has_the_printed_gains_and_the_frequencies_of_its_poles():
    """H&H, Bessel, order 4: gains 1.084 and 1.759.

    The frequencies are the sizes of the poles -1.3701 +- j0.4102 and -0.9952 +- j1.2571: A. I. Zverev, "Handbook of
    Filter Synthesis" (1967), Bessel, 3 dB at 1 rad/s.
    """
    gains, factors = equal_parts("bessel, order 4")
    assert gains == pytest.approx([1.084, 1.759], abs=6e-4)
    assert factors == pytest.approx([abs(-1.3701 + 0.4102j), abs(-0.9952 + 1.2571j)], abs=1e-4)


def test_unity_gain_butterworth_of_order_4_has_the_printed_capacitors():
    """Williams, Butterworth, order 4: 1.082 and 0.9241, 2.613 and 0.3825."""
    fixes = "fix S1_R1 = 1 kohm, S1_R2 = 1 kohm, S2_R1 = 1 kohm, S2_R2 = 1 kohm\n"
    target = "target H: lowpass butterworth, order 4, edge 1 kHz\n"
    found = designed(UNITY_GAIN + chain(2) + fixes + ASK + target)
    (solution,) = found.solutions
    scaled = [solution.values[n] * 1000 * EDGE for n in ("S1_C1", "S1_C2", "S2_C1", "S2_C2")]
    assert scaled == pytest.approx([1.082, 0.9241, 2.613, 0.3825], rel=6e-4)


def test_unity_gain_butterworth_of_order_5_has_the_printed_capacitors():
    """Williams, Butterworth, order 5: 1.354, 1.753, 0.4214 around the three-pole stage, then 3.235 and 0.3089."""
    text = """
in -- R1 -- a -- R2 -- b -- R3 -- p -- C3 -- gnd
a -- C1 -- gnd
b -- C2 -- m
U1 opamp: plus p, minus m, drives m
m -- R4 -- c -- R5 -- d -- C5 -- gnd
c -- C4 -- out
U2 opamp: plus d, minus out, drives out
fix R1 = 1 kohm, R2 = 1 kohm, R3 = 1 kohm, R4 = 1 kohm, R5 = 1 kohm
"""
    found = designed(text + ASK + "target H: lowpass butterworth, order 5, edge 1 kHz\n")
    assert [match.stage.order for match in found.cascade.stages] == [3, 2]
    printed = {"C1": 1.354, "C2": 1.753, "C3": 0.4214, "C4": 3.235, "C5": 0.3089}
    scaled = [{n: s.values[n] * 1000 * EDGE for n in printed} for s in found.solutions]
    assert any(one == pytest.approx(printed, rel=1e-3) for one in scaled)


@pytest.mark.parametrize(
    ("order", "printed"),
    [(3, [1.5, 1.3333, 0.5]), (4, [1.5307, 1.5772, 1.0824, 0.3827])],
)
def test_ladders_with_one_termination_have_the_printed_elements(order, printed):
    """Weinberg, Butterworth, from an ideal source: 3/2, 4/3, 1/2; 1.5307, 1.5772, 1.0824, 0.3827."""
    if order == 3:
        ladder = "in -- L1 -- a -- L3 -- out -- R1 -- gnd\na -- C2 -- gnd\n"
    else:
        ladder = "in -- L1 -- a -- L3 -- out -- R1 -- gnd\na -- C2 -- gnd\nout -- C4 -- gnd\n"
    target = f"target H: lowpass butterworth, order {order}, edge 1 kHz\n"
    (solution,) = designed(ladder + "fix R1 = 1 kohm\n" + ASK + target).solutions
    names = ["L1", "C2", "L3", "C4"][:order]
    scaled = [solution.values[n] * EDGE * (1000.0 if n[0] == "C" else 1 / 1000) for n in names]
    assert scaled == pytest.approx(printed, abs=6e-5)


def test_unity_gain_high_pass_has_the_printed_resistors():
    """Williams, Butterworth high-pass of order 2 from the low-pass capacitors 1.414, 0.7071: R is 1/C."""
    text = """
in -- C1 -- a -- C2 -- p -- R2 -- gnd
a -- R1 -- out
U1 opamp: plus p, minus out, drives out
fix C1 = 10 nF, C2 = C1
"""
    found = designed(text + ASK + "target H: highpass butterworth, order 2, edge 1 kHz\n")
    (solution,) = found.solutions
    scaled = [solution.values[n] * 10e-9 * EDGE for n in ("R1", "R2")]
    assert scaled == pytest.approx([0.7071, 1.4142], abs=6e-5)


def test_gain_of_two_with_equal_capacitors_has_the_printed_resistors():
    """L. P. Huelsman and P. E. Allen (1980): for the gain 2 and C1 = C2 = C, R1 = Q/(w C) and R2 = 1/(Q w C)."""
    text = """
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
U1 opamp: plus p, minus f, drives out
out -- R3 -- f -- R4 -- gnd
fix R3 = 10 kohm, R4 = R3, C1 = 10 nF, C2 = C1
"""
    found = designed(text + ASK + "target H: lowpass, order 2, f0 1 kHz, q 2.5, gain 2\n")
    (solution,) = found.solutions
    assert solution.gain == pytest.approx(2)
    ratios = [solution.values[n] * 10e-9 * EDGE for n in ("R1", "R2")]
    assert ratios == pytest.approx([2.5, 0.4], rel=1e-9)
