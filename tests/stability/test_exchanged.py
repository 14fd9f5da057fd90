"""Exchanged amplifier inputs are seen on all stages, and nothing else is taken for them."""

from __future__ import annotations

import random
import time
from itertools import combinations

import pytest

from symcirc.stability.exchanged import exchanged_inputs
from tests.published.stages import STAGES as PUBLISHED_STAGES
from tests.stability.modes import (
    amplifiers,
    ordinary_values,
    read,
    runaway_count,
    setups,
    with_exchanged,
)
from tests.stability.stages import STAGES

#: Published stages whose outcome the amplifier's inputs do not decide, seen from the node that is asked about: a
#: negative impedance is stable with its node shorted or with its node open, whichever way round the inputs are.
EITHER_WAY = {"negative-impedance-converter"}
PUBLISHED = {stage.id: stage.sheet for stage in PUBLISHED_STAGES if stage.id not in EITHER_WAY}
EVERY_STAGE = pytest.mark.parametrize("text", (STAGES | PUBLISHED).values(), ids=STAGES | PUBLISHED)
OWN_STAGE = pytest.mark.parametrize("text", STAGES.values(), ids=STAGES)


def remarks(text: str, *exchanged: str) -> list[str]:
    sheet = with_exchanged(read(text), *exchanged)
    return [remark.message.rpartition(": ")[2] for remark in exchanged_inputs(sheet, *setups(sheet))]


@EVERY_STAGE
def test_a_stage_as_it_must_be_raises_no_remark(text: str) -> None:
    assert remarks(text) == []


@EVERY_STAGE
def test_each_amplifier_exchanged_in_turn_is_named_alone(text: str) -> None:
    sheet = read(text)
    labels = {device.name: device.label for device in sheet.devices}
    for name in amplifiers(sheet):
        assert remarks(text, name) == [f"are plus and minus of `{labels[name]}` exchanged?"]


@OWN_STAGE
def test_the_remark_stands_just_where_numeric_modes_run_away(text: str) -> None:
    # The argument principle on the numeric witness's matrix; no code is shared with what is tested.
    rng = random.Random(text)
    plain = read(text)
    names = amplifiers(plain)
    for size in range(len(names) + 1 if len(names) < 4 else 2):
        for chosen in combinations(names, size):
            sheet = with_exchanged(plain, *chosen)
            circuit, asked = setups(sheet)
            free = ordinary_values(sheet, rng)
            count = runaway_count(sheet, circuit, asked[0], free)
            assert bool(remarks(text, *chosen)) == bool(count), (chosen, count)


# what is no exchange ---------------------------------------------------------------------------------------------

CONVERTER = """
    in -- R1 -- out -- R2 -- m -- R3 -- gnd
    U1 opamp: plus in, minus m, drives out"""
HOWLAND = """
    in -- R1 -- m -- R2 -- out
    gnd -- R3 -- p -- R4 -- out
    p -- RL -- gnd
    U1 opamp: plus p, minus m, drives out
    ask G = I_RL / V_in"""


@pytest.mark.parametrize("exchanged", [(), ("U1",)])
def test_a_negative_impedance_asked_at_its_own_node_is_right_either_way(exchanged: tuple[str, ...]) -> None:
    assert remarks(CONVERTER + "\nask Zin = V_in / I_in", *exchanged) == []
    assert remarks(CONVERTER + "\nask Yin = I_in / V_in", *exchanged) == []


def test_a_negative_impedance_driven_by_a_current_is_positive_feedback() -> None:
    assert remarks(CONVERTER + "\nask Z = V_out / I_in") == ["are plus and minus of `U1` exchanged?"]
    assert remarks(CONVERTER + "\nask Z = V_out / I_in", "U1") == []


@pytest.mark.parametrize("exchanged", [(), ("U1",)])
def test_a_balance_that_the_values_decide_is_not_judged(exchanged: tuple[str, ...]) -> None:
    assert remarks(HOWLAND, *exchanged) == []


@pytest.mark.parametrize("load", ["1 kohm", "100 kohm", "1 Mohm"])
def test_a_balanced_current_source_is_judged_at_its_numbers(load: str) -> None:
    fixed = HOWLAND + f"\nfix R1 = 10k, R2 = 10k, R3 = 10k, R4 = 10k, RL = {load}"
    assert remarks(fixed) == []
    assert remarks(fixed, "U1") == ["are plus and minus of `U1` exchanged?"]


def test_an_unbalanced_current_source_is_positive_feedback_with_a_light_load() -> None:
    for load, positive in (("1 kohm", False), ("1 Mohm", True)):
        fixed = HOWLAND + f"\nfix R1 = 10k, R2 = 10k, R3 = 12k, R4 = 10k, RL = {load}"
        assert bool(remarks(fixed)) == positive


def test_a_comparator_with_hysteresis_is_positive_feedback() -> None:
    text = "in -- R1 -- p -- R2 -- out\nU1 opamp: plus p, minus gnd, drives out\nask H = V_out / V_in"
    assert remarks(text) == ["are plus and minus of `U1` exchanged?"]


def test_an_amplifier_that_is_too_fast_for_its_network_is_not_taken_for_an_exchanged_one() -> None:
    # Two lags in the feedback and a third in the amplifier: three roots of s^3 = -const run away, two to the right.
    text = """
        out -- R1 -- a -- R2 -- m -- C2 -- gnd
        a -- C1 -- gnd
        in -- R3 -- gnd
        U1 opamp: plus in, minus m, drives out
        ask H = V_out / V_in"""
    assert remarks(text) == []
    assert remarks(text, "U1") == ["are plus and minus of `U1` exchanged?"]


def test_a_sheet_without_amplifiers_raises_no_remark() -> None:
    assert remarks("in -- R1 -- out -- C1 -- gnd\nask H = V_out / V_in") == []


def test_several_asks_make_one_remark() -> None:
    text = STAGES["state variable (Kerwin, Huelsman and Newcomb)"] + "\nask Zin = V_in / I_in"
    assert remarks(text, "U2") == ["are plus and minus of `U2` exchanged?"]


def test_a_loop_gain_is_judged_with_its_loop_closed() -> None:
    text = """
        in -- R1 -- m -- R2 -- out
        U1 opamp: plus gnd, minus m, drives out, gbw 1 MHz
        ask T = loop(U1) with V_in = 0"""
    assert remarks(text) == []
    assert remarks(text, "U1") == ["are plus and minus of `U1` exchanged?"]


def test_roots_and_pi_among_the_fixes_are_no_hindrance() -> None:
    text = """
        in -- R1 -- a -- R2 -- p -- C2 -- gnd
        a -- C1 -- out
        U1 opamp: plus p, minus out, drives out
        fix C2 = 10 nF, C1 = 2*C2, R1 = 1/(2*pi*1000*1e-8*sqrt(2)), R2 = sqrt(2)*R1
        ask H = V_out / V_in"""
    assert remarks(text) == []
    assert remarks(text, "U1") == ["are plus and minus of `U1` exchanged?"]


def test_parts_that_cannot_all_be_positive_have_no_verdict() -> None:
    text = """
        in -- R1 -- m -- R2 -- out
        U1 opamp: plus m, minus gnd, drives out
        choose k
        fix R2 = -k*R1
        ask H = V_out / V_in"""
    assert remarks(text) == []


def test_each_of_two_separate_loops_is_named() -> None:
    text = STAGES["low-pass of two equal blocks"]
    assert remarks(text, "S1_U1", "S2_U1") == [
        "are plus and minus of `S1.U1` exchanged?",
        "are plus and minus of `S2.U1` exchanged?",
    ]


def test_the_remark_stands_at_the_amplifier() -> None:
    sheet = with_exchanged(read(STAGES["Tow-Thomas"]), "U2")
    (remark,) = exchanged_inputs(sheet, *setups(sheet))
    assert remark.place == next(device.place for device in sheet.devices if device.name == "U2")


def test_a_usual_stage_costs_less_than_fifty_milliseconds() -> None:
    for exchanged in ([], ["U1"]):
        sheet = with_exchanged(read(STAGES["multiple-feedback low-pass"]), *exchanged)
        circuit, asked = setups(sheet)
        spent = []
        for _ in range(5):
            start = time.process_time()
            exchanged_inputs(sheet, circuit, asked)
            spent.append(time.process_time() - start)
        assert min(spent) < 0.05


def test_a_long_ladder_before_a_follower_costs_no_determinant_of_its_own() -> None:
    wires = [f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd" for k in range(2000)]
    text = "\n".join([*wires, "U1 opamp: plus n2000, minus out, drives out", "ask H = V_out / V_n0"])
    assert remarks(text) == []
