"""Hundreds of random circuits of all kinds of parts, ties and asks: the program's ways agree with a third.

The outside: numpy's complex solve (in the witness) and a sparse tableau in a finite field, see ``tableau.py``. The
long run is ``python -m tests.random_circuits --count 100000``.
"""

from __future__ import annotations

import dataclasses
import random
import re
from collections import Counter
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from symcirc.complaints import Complaint
from symcirc.derivation import Answer, Derivation, Posed, derive
from symcirc.witness.network import Network
from tests.core import three_ways
from tests.core.three_ways import Disagreement, compare_sheet, judge_refusal, read
from tests.random_circuits import PARAMETERS, random_sheet

STRIDE = 40


@pytest.mark.parametrize("first", range(1, 321, STRIDE))
def test_random_circuits_give_one_answer_in_three_ways(first: int) -> None:
    verdicts: Counter[str] = Counter()
    for seed in range(first, first + STRIDE):
        rng = random.Random(seed)
        text = random_sheet(rng)
        try:
            verdicts += compare_sheet(text, rng)
        except (
            Exception
        ) as fault:  # whatever it is, it is raised again with the seed and the sheet that show it
            raise AssertionError(f"seed {seed}: {fault}\n{text}") from fault
    answered = sum(number for verdict, number in verdicts.items() if verdict.endswith("agree"))
    assert answered > STRIDE / 2  # most of the sheets can be solved, or the comparison would prove little
    assert not any("ill-conditioned" in verdict for verdict in verdicts)


@settings(max_examples=60, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
@given(st.randoms(use_true_random=False))
def test_small_circuits_that_hypothesis_draws_give_one_answer(rng: random.Random) -> None:
    compare_sheet(random_sheet(rng), random.Random(1))


def test_the_generator_draws_every_kind_of_part_tie_and_ask() -> None:
    texts = "".join(random_sheet(random.Random(seed)) for seed in range(1500))
    wanted = [
        *(rf"\b{kind}: " for kind in ("opamp", "conveyor", *PARAMETERS)),
        *(rf"-- {letter}\d+ --" for letter in "RCLZY"),
        r"sign \+",
        r"sign -",
        r"gain 100 dB",
        r"gbw 1 MHz",
        r"block cell \(p1, q1, r1\)",
        r"use cell as S2",
        r"R\d+ = 2\*R\d+",
        r"C\d+ = C\d+\b",
        r"sqrt\(2\)\*",
        r"sqrt\(3\)",
        r"= pi\*",
        r"= k\*",
        r"\(k \+ 1\)\*",
        r"/\(k - 1\)",
        r"Z\d+ = .*1/\(s\*C",
        r"Y\d+ = 1/\(R",
        r"s\^2\*C\d+\*tau",
        r"_(gain|gm|rm|ratio) = k/\(1 \+ s\*tau\)",
        r"= V_\w+/V_\w+\n",
        r"= \(V_\w+ - V_\w+\)/V_",
        r"/\(V_\w+ - V_\w+\)",
        *(rf"= I_{letter}\d+/" for letter in "RCLZYUEGFHTK"),
        r"= I_S1_\w+/",
        r"= V_(\w+)/I_\1\n",
        r"= V_(\w+)/I_\1 with V_\w+ = 0",
        r"= I_(\w+)/V_\w+ with V_\1 = 0",
        r"/I_\w+ driven at",
        r"/V_\w+ driven at",
        r"with [VI]_\w+ = 0, [VI]_\w+ = 0",
        r"loop\(U\d\) with V_",
        r"(choose|solve) k",
        r"\n    -- ",
    ]
    assert [pattern for pattern in wanted if not re.search(pattern, texts)] == []


def test_one_seed_gives_one_sheet_and_every_sheet_can_be_read() -> None:
    for seed in range(200):
        text = random_sheet(random.Random(seed))
        assert text == random_sheet(random.Random(seed))
        sheet = read(text)
        assert 1 <= len(sheet.parts) + len(sheet.devices) <= 24
        assert 1 <= len(sheet.asks) <= 3


# the comparison can fail ---------------------------------------------------------------------------------------

SHEET = "in -- R1 -- out -- C1 -- gnd\nout -- R2 -- gnd\nask H = V_out/V_in\n"


def test_a_wrong_transfer_function_is_noticed(monkeypatch: pytest.MonkeyPatch) -> None:
    def wrong(posed: Posed, wanted: set[str]) -> Derivation:
        derivation = derive(posed, wanted)
        (answer,) = derivation.answers
        assert isinstance(answer, Answer)
        function = answer.function
        slipped = dataclasses.replace(function, numerator=tuple(-c for c in function.numerator))
        return dataclasses.replace(derivation, answers=(dataclasses.replace(answer, function=slipped),))

    monkeypatch.setattr(three_ways, "derive", wrong)
    with pytest.raises(Disagreement, match="differs from the tableau"):
        compare_sheet(SHEET, random.Random(1))


def test_a_wrong_witness_is_noticed(monkeypatch: pytest.MonkeyPatch) -> None:
    class Slipping(Network):
        def ratio(self, *rest: Any) -> Any:
            return super().ratio(*rest) * (1 + 1e-7)

    monkeypatch.setattr(three_ways, "Network", Slipping)
    with pytest.raises(Disagreement, match="the witness says"):
        compare_sheet(SHEET, random.Random(1))


def test_a_refusal_of_a_circuit_that_can_be_solved_is_noticed() -> None:
    sheet = read(SHEET)
    complaint = Complaint(sheet.asks[0].place, "node `out` has no path to gnd", "mend it")
    with pytest.raises(Disagreement, match="every ask can be solved"):
        judge_refusal(sheet, complaint, random.Random(1))
    hanging = Complaint(sheet.asks[0].place, "node `out` hangs on `R1` alone", "mend it")
    with pytest.raises(Disagreement, match="no node hangs"):
        judge_refusal(sheet, hanging, random.Random(1))
    idle = Complaint(sheet.asks[0].place, "the output of `U1` drives nothing", "mend it")
    with pytest.raises(Disagreement, match="every output drives something"):
        judge_refusal(sheet, idle, random.Random(1))


def test_a_wrong_blame_is_noticed() -> None:
    text = (
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nin -- R3 -- gnd\n"
        "U2 opamp: plus in, minus gnd, drives b\nb -- R4 -- gnd\nask H = V_out/V_in\n"
    )
    sheet = read(text)
    ask = sheet.ask("H")

    def blame(words: str) -> str:
        complaint = Complaint(ask.place, words, "mend it")
        return three_ways.judge_no_answer(sheet, ask, complaint, random.Random(1), real=False)

    assert blame("`U2` has no feedback") == "singular: no feedback"
    for words, notice in [
        ("`U1` has no feedback", "`U1` has feedback"),
        ("`U1` and `U2` form a loop of ideal voltage sources: they fight", "no loop of sources fights"),
        ("what stands under the line of `H` is zero, whatever the drive is", "the ratio is blamed"),
        (
            "with the sheet's fixes the equations for `H` have no solution",
            "without the fixes it is singular too",
        ),
    ]:
        with pytest.raises(Disagreement, match=notice):
            blame(words)
