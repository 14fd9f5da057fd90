"""Cascades: the target's pole pairs, zeros and gain shared out among separable stages.

The whole circuit's response, by the numeric solve with the values found, is compared with ``scipy.signal``.
"""

import math

import numpy as np
import pytest
from scipy import signal

from symcirc.complaints import Complaint
from symcirc.report.cascade_words import choice_sentence
from symcirc.report.match_json import match_json
from symcirc.report.match_text import match_text
from tests.match.sheets import EQUAL_PARTS, MULTIPLE_FEEDBACK, UNITY_GAIN, chain, designed, response

ASK = "ask H = V_out/V_in\n"
FREQUENCIES = np.array([90.0, 410.0, 930.0, 1000.0, 1270.0, 3900.0])


def departure(text, found, zeros_poles_gain, up_to_a_factor=True):
    """The largest relative departure of any solution from a reference response of scipy.signal."""
    reference = signal.freqs_zpk(*zeros_poles_gain, worN=2 * math.pi * FREQUENCIES)[1]
    worst = 0.0
    for solution in found.solutions:
        ratio = response(text, dict(solution.values), FREQUENCIES) / reference
        ratio = ratio / ratio[0] if up_to_a_factor else ratio
        worst = max(worst, float(np.abs(ratio - 1).max()))
    return worst


def qs(found):
    return [[round(pole.q, 4) for pole in match.section.poles] for match in found.cascade.stages]


def unity(capacitors, count=2):
    fixes = ", ".join(
        f"S{k}_C{c} = {v}" for k, pair in enumerate(capacitors, 1) for c, v in enumerate(pair, 1)
    )
    return UNITY_GAIN + chain(count) + f"fix {fixes}\n" + ASK


BUTTERWORTH_4 = "target H: lowpass butterworth, order 4, edge 1 kHz, gain 1\n"


def test_a_butterworth_of_order_4_goes_to_two_stages_by_the_tabulated_q_the_lowest_first():
    """The Q of every table of Butterworth sections, 0.5412 and 1.3066 (from memory)."""
    text = unity([("22n", "10n"), ("100n", "10n")]) + BUTTERWORTH_4
    found = designed(text)
    assert qs(found) == [[0.5412], [1.3066]]
    assert departure(text, found, signal.butter(4, 2000 * math.pi, analog=True, output="zpk"), False) < 1e-9


def test_every_solution_of_one_stage_goes_with_every_one_of_the_others():
    found = designed(unity([("22n", "10n"), ("100n", "10n")]) + BUTTERWORTH_4)
    sets = {tuple(round(v) for n, v in s.values.items() if "_R" in n) for s in found.solutions}
    assert len(sets) == len(found.solutions) == 4


def test_stages_that_cannot_have_the_order_of_q_are_exchanged_and_the_choice_says_why():
    found = designed(unity([("100n", "10n"), ("22n", "10n")]) + BUTTERWORTH_4)
    assert qs(found) == [[1.3066], [0.5412]]
    sentence = choice_sentence(found.cascade)
    assert "stage 2 would take the pair with Q = 1.307" in sentence
    assert "S2_C1 = 22 nF is less than" in sentence


def test_where_no_assignment_works_the_refusal_names_stage_and_condition():
    found = designed(unity([("12n", "10n"), ("12n", "10n")]) + BUTTERWORTH_4)
    assert found.solutions == ()
    assert found.refusal is not None
    assert "no assignment" in found.refusal.cause
    assert "stage 2 (n1 to out) would take the pair with Q = 1.307" in found.refusal.cause


def test_the_real_pole_of_an_odd_order_goes_to_the_stage_of_one_pole_wherever_that_stands():
    """Butterworth order 5: a real pole, Q = 0.6180 and 1.6180 (every table, from memory)."""
    sections = UNITY_GAIN + "use section as S1 (in, n1)\nuse section as S2 (n2, out)\n"
    middle = "n1 -- R9 -- p -- C9 -- gnd\nU9 opamp: plus p, minus n2, drives n2\n"
    fixes = "fix S1_C1 = 22n, S1_C2 = 10n, S2_C1 = 150n, S2_C2 = 10n, C9 = 10n\n"
    text = sections + middle + fixes + ASK + "target H: lowpass butterworth, order 5, edge 1 kHz\n"
    found = designed(text)
    assert qs(found) == [[0.618], [0.5], [1.618]]
    assert departure(text, found, signal.butter(5, 2000 * math.pi, analog=True, output="zpk")) < 1e-9


def test_stages_with_a_gain_of_their_own_keep_it_and_one_that_is_free_takes_the_rest():
    front = "in -- Ra -- g -- Rb -- v\nU0 opamp: plus gnd, minus g, drives v\n"
    nodes = "use section as S1 (v, m)\nuse section as S2 (m, out)\n"
    target = "target H: lowpass butterworth, order 4, edge 1 kHz, gain 10\n"
    text = EQUAL_PARTS + front + nodes + "fix Ra = 1 kohm\n" + ASK + target
    found = designed(text)
    gains = [abs(float(match.gain)) for match in found.cascade.stages]
    assert gains[1:] == pytest.approx([3 - 1 / 0.541196, 3 - 1 / 1.306563], rel=1e-5)
    assert math.prod(gains) == pytest.approx(10, rel=1e-9)
    assert [match.shares for match in found.cascade.stages] == [True, False, False]
    assert found.solutions[0].gain == pytest.approx(-10, rel=1e-9)


def test_stages_whose_gain_is_free_share_it_equally():
    fixes = "fix S1_C1 = 47n, S1_C2 = 2n2, S2_C1 = 220n, S2_C2 = 1n\n"
    target = "target H: lowpass chebyshev, order 4, ripple 0.5 dB, edge 1 kHz, gain 9\n"
    text = MULTIPLE_FEEDBACK + chain(2) + fixes + ASK + target
    found = designed(text)
    at_zero = 9 * 10 ** (-0.5 / 20)
    assert [float(match.gain) for match in found.cascade.stages] == pytest.approx([math.sqrt(at_zero)] * 2)
    zeros, poles, gain = signal.cheby1(4, 0.5, 2000 * math.pi, analog=True, output="zpk")
    assert departure(text, found, (zeros, poles, 9 * gain), False) < 1e-9


def test_gains_that_do_not_come_to_the_target_s_are_refused():
    found = designed(
        EQUAL_PARTS + chain(2) + ASK + "target H: lowpass butterworth, order 4, edge 1 kHz, gain 2\n"
    )
    assert found.refusal is not None
    assert found.refusal.kind == "gain"
    assert "2.57" in found.refusal.cause  # 1.152 times 2.235


def test_a_gain_that_the_designer_chooses_is_taken_out_of_the_share_as_a_symbol():
    front = "E1 vcvs: senses in, drives v, gain k\nchoose k\n"
    stage = "v -- R1 -- m -- R2 -- n1\nm -- C1 -- n1\nU1 opamp: plus gnd, minus m, drives n1\n"
    last = "n1 -- R3 -- a -- C2 -- gnd\nU2 opamp: plus a, minus out, drives out\n"
    text = front + stage + last + "fix C1 = 10n, C2 = 10n\n" + ASK
    found = designed(text + "target H: lowpass critical, order 2, edge 1 kHz, gain 6\n")
    (shares,) = (match for match in found.cascade.stages if match.shares)
    assert str(shares.gain) == "6/k"
    assert found.solutions[0].sign == -1


def test_a_gain_that_holds_a_part_without_a_value_is_told_with_its_stage():
    front = "in -- Ra -- g -- Rb -- v\nU0 opamp: plus gnd, minus g, drives v\n"
    stage = "v -- R1 -- a -- R2 -- b -- C2 -- gnd\na -- C1 -- n1\nU1 opamp: plus b, minus f, drives n1\n"
    more = "n1 -- R3 -- f -- R4 -- gnd\nn1 -- R5 -- c -- C5 -- gnd\nU2 opamp: plus c, minus out, drives out\n"
    text = front + stage + more + "fix R2 = R1, C2 = C1, C1 = 10n, C5 = 10n, Ra = 1k\nchoose R4\n" + ASK
    with pytest.raises(Complaint, match=r"the gain of stage 2 \(v to n1\) depends on what has no number"):
        designed(text + "target H: lowpass butterworth, order 3, edge 1 kHz, gain 4\n")


def test_the_sign_of_an_explicit_target_is_meant():
    first = "in -- R1 -- m -- R2 -- n1\nm -- C1 -- n1\nU1 opamp: plus gnd, minus m, drives n1\n"
    second = "n1 -- R3 -- m2 -- R4 -- out\nm2 -- C2 -- out\nU2 opamp: plus gnd, minus m2, drives out\n"
    text = first + second + "fix C1 = 10n, C2 = 10n\n" + ASK
    met = designed(text + "target H = 4/((1 + s/1000)*(1 + s/5000))\n")
    assert met.solutions
    missed = designed(text + "target H = -4/((1 + s/1000)*(1 + s/5000))\n")
    assert missed.solutions == ()
    assert missed.refusal.kind == "gain"


def test_a_band_pass_gives_each_stage_a_pair_and_a_zero():
    stage = """
block section (p, q)
  p -- R1 -- a -- C2 -- m -- R3 -- q
  a -- R2 -- gnd
  a -- C1 -- q
  U1 opamp: plus gnd, minus m, drives q
  fix C1 = 10n, C2 = 10n
end
"""
    target = "target H: bandpass butterworth, order 2, centre 1 kHz, bandwidth 200 Hz, gain 4\n"
    text = stage + chain(2) + ASK + target
    found = designed(text)
    assert [match.section.at_zero for match in found.cascade.stages] == [1, 1]
    centre, half = 1000.0, 100.0
    low, high = (math.sqrt(centre**2 + half**2) + sign * half for sign in (-1, 1))
    zeros, poles, gain = signal.butter(
        2, (2 * math.pi * low, 2 * math.pi * high), "bandpass", analog=True, output="zpk"
    )
    assert departure(text, found, (zeros, poles, 4 * gain), False) < 1e-9


def test_a_high_pass_of_order_4_is_met_by_two_high_pass_stages():
    stage = """
block section (p, q)
  p -- C1 -- a -- C2 -- b -- R2 -- gnd
  a -- R1 -- q
  U1 opamp: plus b, minus q, drives q
  fix C1 = 10n, C2 = 10n
end
"""
    text = stage + chain(2) + ASK + "target H: highpass butterworth, order 4, edge 1 kHz\n"
    found = designed(text)
    assert qs(found) == [[0.5412], [1.3066]]
    reference = signal.butter(4, 2000 * math.pi, "highpass", analog=True, output="zpk")
    assert departure(text, found, reference) < 1e-9


def test_zeros_go_to_the_stage_whose_numerator_has_them():
    """A twin T with its foot lifted (its Q free) and a low-pass: one pair of zeros, on the first stage only."""
    twin_t = """
in -- R1 -- a -- R2 -- t
in -- C1 -- b -- C2 -- t
a  -- C3 -- foot
b  -- R3 -- foot
U1 opamp: plus t, minus n1, drives n1
E1 vcvs: senses n1, drives foot, gain k
fix R2 = R1, R3 = R1/2, C2 = C1, C3 = 2*C1, C1 = 68 nF
solve k
use section as S1 (n1, out)
fix S1_C1 = 47n, S1_C2 = 10n
"""
    notch = "(s^2 + (100*pi)^2)/(s^2 + 100*pi*s/4 + (100*pi)^2)"
    low = "(2000*pi)^2/(s^2 + 2000*pi*s/0.8 + (2000*pi)^2)"
    text = UNITY_GAIN + twin_t + ASK + f"target H = {notch}*{low}\n"
    found = designed(text)
    assert [len(match.section.zeros) for match in found.cascade.stages] == [1, 0]
    assert found.solutions[0].values["k"] == pytest.approx(1 - 1 / 16, rel=1e-9)


#: A loop of two integrators fed forward by C3 and R3: zeros on the frequency axis, off the poles' frequency.
#: P. E. Fleischer and J. Tow, "Design formulas for biquad active filters using three operational amplifiers" (1973).
FED_FORWARD = """
block section (p, q)
  p -- C3 -- x -- R1 -- q
  x -- C1 -- q
  x -- R2 -- z
  U1 opamp: plus gnd, minus x, drives q
  q -- R4 -- y -- C2 -- low
  p -- R3 -- y
  U2 opamp: plus gnd, minus y, drives low
  low -- R5 -- w -- R6 -- z
  U3 opamp: plus gnd, minus w, drives z
  fix C1 = 10n, C2 = 10n, R4 = R2, R5 = 10 kohm, R6 = R5
end
"""


def test_an_elliptic_cascade_gives_the_highest_q_the_nearest_zeros():
    zeros, poles, gain = signal.ellip(4, 0.5, 40, 2000 * math.pi, analog=True, output="zpk")

    def quadratics(roots):
        return "*".join(
            f"(s^2 + {float(-2 * r.real)!r}*s + {float(abs(r) ** 2)!r})" for r in roots if r.imag > 0
        )

    zeros = 1j * np.imag(zeros)  # on the axis, whatever rounding says
    target = f"target H = {float(gain)!r}*{quadratics(zeros)}/({quadratics(poles)})\n".replace(
        "-0.0*s", "0*s"
    )
    text = FED_FORWARD + chain(2) + ASK + target
    found = designed(text)
    first, second = (match.section for match in found.cascade.stages)
    assert first.poles[0].q < second.poles[0].q
    assert first.zeros[0].omega > second.zeros[0].omega
    assert [match.shares for match in found.cascade.stages] == [True, True]
    assert departure(text, found, (zeros, poles, gain), False) < 1e-9


def test_a_follower_in_front_is_a_stage_without_poles():
    front = "in -- R9 -- p\nU9 opamp: plus p, minus n0, drives n0\n"
    nodes = "use section as S1 (n0, n1)\nuse section as S2 (n1, out)\n"
    fixes = "fix S1_C1 = 22n, S1_C2 = 10n, S2_C1 = 100n, S2_C2 = 10n\n"
    found = designed(UNITY_GAIN + front + nodes + fixes + ASK + BUTTERWORTH_4)
    assert qs(found) == [[], [0.5412], [1.3066]]


def test_parts_that_move_nothing_need_no_value_for_the_proof():
    text = "in -- R1 -- out -- C1 -- gnd\nin -- R8 -- gnd\nin -- R9 -- gnd\nfix R9 = 2*R8, C1 = 10n\n" + ASK
    (solution,) = designed(text + "target H: lowpass butterworth, order 1, edge 1 kHz\n").solutions
    assert solution.sign == 1
    assert "R8" not in solution.values


def test_an_all_pass_pairs_each_pole_with_its_own_mirrored_zero():
    stage = """
block section (p, q)
  p -- R1 -- x -- C1 -- gnd
  p -- R2 -- m -- R3 -- q
  U1 opamp: plus x, minus m, drives q
  fix C1 = 10n, R2 = 10 kohm
end
"""
    text = stage + chain(2) + ASK
    found = designed(text + "target H = (1 - s/1000)*(1 - s/3000)/((1 + s/1000)*(1 + s/3000))\n")
    (solution,) = found.solutions
    assert [solution.values["S1_R1"], solution.values["S2_R1"]] == pytest.approx([1e5, 1e5 / 3])


def test_a_target_with_a_symbol_for_its_edge_gives_formulas_in_that_symbol():
    text = UNITY_GAIN + chain(2) + "choose S1_C1, S1_C2, S2_C1, S2_C2, F\n" + ASK
    found = designed(text + "target H: lowpass butterworth, order 4, edge F\n")
    conditions = {str(c.left) for s in found.solutions for c in s.branch.conditions}
    assert conditions == {"S1_C1", "S2_C1"}
    assert all(s.sign == 1 for s in found.solutions)


def test_coincident_poles_are_found_to_many_digits():
    """A critically damped target has one pole as often as its order says."""
    first = "in -- R9 -- p -- C9 -- gnd\nU9 opamp: plus p, minus n0, drives n0\n"
    nodes = "use section as S1 (n0, n1)\nuse section as S2 (n1, out)\n"
    fixes = "fix S1_C1 = 22n, S1_C2 = 10n, S2_C1 = 22n, S2_C2 = 10n, C9 = 10n\n"
    text = UNITY_GAIN + first + nodes + fixes + ASK
    found = designed(text + "target H = 1/(1 + s/5000)^5\n")
    assert found.solutions[0].values["R9"] == pytest.approx(1 / (5000 * 10e-9), rel=1e-12)


def test_stages_tied_to_each_other_are_solved_as_one():
    text = """
in -- R1 -- a -- C1 -- gnd
U1 opamp: plus a, minus n1, drives n1
n1 -- R2 -- out -- C2 -- gnd
fix R2 = R1, C1 = 10 nF
"""
    found = designed(text + ASK + "target H = 1/((1 + s/1000)*(1 + s/5000))\n")
    assert found.cascade is None
    assert sorted(s.values["C2"] for s in found.solutions) == pytest.approx([2e-9, 50e-9])


def test_too_many_free_parts_are_told_with_the_stage_they_are_in():
    text = UNITY_GAIN + chain(2) + "fix S1_C1 = 22n, S1_C2 = 10n, S2_C2 = 10n\n" + ASK + BUTTERWORTH_4
    with pytest.raises(Complaint, match=r"in stage 2 \(n1 to out\), .* 3 parts are free"):
        designed(text)


def test_other_orders_than_the_stages_have_are_refused_with_both_numbers():
    found = designed(
        unity([("22n", "10n"), ("100n", "10n")]) + "target H: lowpass butterworth, order 5, edge 1 kHz\n"
    )
    assert found.refusal.kind == "order"
    assert "together have 4 poles, the target has 5" in found.refusal.cause


def test_a_cascade_of_order_10_is_matched_in_all_its_solutions():
    qualities = [1 / (2 * math.cos((2 * k - 1) * math.pi / 20)) for k in range(1, 6)]
    capacitors = [(f"{math.ceil(5 * q * q)}n", "1n") for q in qualities]
    text = unity(capacitors, 5) + "target H: lowpass butterworth, order 10, edge 1 kHz\n"
    found = designed(text)
    json = match_json(found)
    assert len(json["solutions"]) == 32
    assert departure(text, found, signal.butter(10, 2000 * math.pi, analog=True, output="zpk")) < 1e-8


def test_json_names_the_stages_and_the_choice_beside_the_fixed_keys():
    found = designed(unity([("22n", "10n"), ("100n", "10n")]) + BUTTERWORTH_4)
    json = match_json(found)
    assert {"ask", "target", "chosen", "solutions", "warnings"} <= set(json)
    assert [(entry["from"], entry["to"]) for entry in json["stages"]] == [(None, "n1"), ("n1", "out")]
    assert json["stages"][1]["q"] == pytest.approx([1.306563], rel=1e-6)
    assert "the order of Q" in json["choice"]


def test_text_shows_each_stage_with_its_part_of_the_target_and_the_proof():
    text = "\n".join(match_text(designed(unity([("22n", "10n"), ("100n", "10n")]) + BUTTERWORTH_4)))
    assert "stage 2 (n1 to out): poles at 1 kHz with Q = 1.3066, gain 1" in text
    assert "any solution of a stage goes with any of the others" in text
    assert "numeric solve of the stages and of the whole circuit gives the target" in text
