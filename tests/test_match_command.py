"""The verb ``match`` as a user meets it: branches, conditions, refusals, and the proof by an own numeric solve."""

import math
from dataclasses import replace

import numpy as np
import pytest

import symcirc.design
from symcirc.circuit import build_circuit, build_setup
from symcirc.complaints import Source
from symcirc.sheet import read_sheet
from symcirc.witness.agree import numeric_ratio
from tests.calling import call

UNITY_GAIN_LOW_PASS = """
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
U1 opamp: plus p, minus out, drives out
ask H = V_out/V_in
"""
BUTTERWORTH = "target H: lowpass butterworth, order 2, edge 1 kHz\n"


@pytest.fixture
def match(capsys, tmp_path):
    def run(text, *options):
        path = tmp_path / "s.stage"
        path.write_text(text, encoding="utf-8")
        return call(capsys, "match", path, *options)

    return run


def responses(text, values, frequencies):
    """The circuit's ratio with the values of a solution, by the numeric solve alone."""
    sheet = read_sheet(Source("s.stage", text))
    circuit = build_circuit(sheet)
    setup = build_setup(circuit, sheet.asks, sheet.asks[0])
    known = {**{name: float(number) for name, number in sheet.numbers.items()}, **values}
    return np.array(
        [numeric_ratio(circuit, setup, sheet.ties, known, 2j * math.pi * f)[0] for f in frequencies]
    )


def target_response(answer, frequencies):
    s = 2j * math.pi * np.asarray(frequencies)
    above, below = (
        np.polynomial.polynomial.polyval(s, answer["target"][k]) for k in ("numerator", "denominator")
    )
    return above / below


FREQUENCIES = [31.0, 480.0, 1000.0, 2750.0, 20e3]


def test_both_branches_of_a_unity_gain_low_pass_are_given_and_meet_the_target(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 22 nF, C2 = 10 nF\n" + BUTTERWORTH
    called = match(text, "--json")
    assert called.status == 0
    first, second = called.json["solutions"]
    assert first["values"]["R1"] == pytest.approx(second["values"]["R2"], rel=1e-12)
    assert first["values"]["R1"] != pytest.approx(second["values"]["R1"], rel=0.1)
    for solution in (first, second):
        assert solution["conditions"] == ["C1 >= 2*C2"]
        ratio = responses(text, solution["values"], FREQUENCIES) / target_response(called.json, FREQUENCIES)
        assert np.abs(ratio - 1).max() < 1e-9


def test_exchanged_capacitors_give_exit_1_and_the_condition_with_its_numbers(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 10 nF, C2 = 22 nF\n" + BUTTERWORTH
    called = match(text, "--json")
    assert called.status == 1
    assert called.json["solutions"] == []
    message = called.json["warnings"][-1]["message"]
    assert "C1 = 10 nF is less than 2*C2 = 44 nF" in message
    assert "C1 >= 2*C2" in match(text).out


def test_values_at_the_edge_of_the_condition_are_one_solution(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 20 nF, C2 = 10 nF\n" + BUTTERWORTH
    (solution,) = match(text, "--json").json["solutions"]
    assert solution["values"]["R1"] == pytest.approx(solution["values"]["R2"], rel=1e-12)


def test_symbols_of_the_target_stand_in_equations_and_conditions(match):
    text = UNITY_GAIN_LOW_PASS + "choose C1, C2, F, Q\ntarget H: lowpass, order 2, f0 F, q Q\n"
    called = match(text, "--json")
    assert called.json["chosen"] == ["C1", "C2", "F", "Q"]
    for solution in called.json["solutions"]:
        assert solution["conditions"] == ["C1 >= 4*Q**2*C2"]
        assert "F" in solution["equations"][0]["text"]
        assert solution["values"] == {}


def test_a_low_pass_stage_is_told_that_it_cannot_give_a_high_pass(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 22 nF, C2 = 10 nF\n" + BUTTERWORTH.replace("lowpass", "highpass")
    called = match(text)
    assert called.status == 1
    assert "a low-pass stage cannot give a high-pass" in called.out


def test_too_many_free_parts_are_answered_with_the_groups_to_choose(match):
    called = match(UNITY_GAIN_LOW_PASS + BUTTERWORTH, "--json")
    assert called.status == 2
    assert "4 parts are free" in called.json["error"]["message"]
    assert "C1 and C2" in called.json["error"]["help"]


def test_too_few_free_parts_are_answered_with_what_cannot_be_met(match):
    called = match(UNITY_GAIN_LOW_PASS + "fix R1 = 1k, R2 = 2k, C1 = 10n\n" + BUTTERWORTH)
    assert called.status == 1
    assert "cannot be met" in called.out


def test_a_gain_that_the_stage_cannot_have_is_refused(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 22 nF, C2 = 10 nF\n" + BUTTERWORTH.replace("kHz", "kHz, gain 2")
    called = match(text)
    assert called.status == 1
    assert "gain" in called.out


def test_without_a_gain_the_gain_of_the_stage_is_reported(match):
    text = """
in -- R1 -- m -- R2 -- out
m -- C1 -- out
U1 opamp: plus gnd, minus m, drives out
fix C1 = 10 nF, R1 = 10 kohm
ask H = V_out/V_in
target H: lowpass butterworth, order 1, edge 1 kHz
"""
    (solution,) = match(text, "--json").json["solutions"]
    assert solution["gain"] == pytest.approx(-solution["values"]["R2"] / 10e3, rel=1e-12)
    assert "the stage inverts" in match(text).out


def test_an_expression_is_meant_exactly_sign_included(match):
    stage = "in -- R1 -- m -- R2 -- out\nm -- C1 -- out\nU1 opamp: plus gnd, minus m, drives out\nfix C1 = 10 nF\n"
    stage += "ask H = V_out/V_in\n"
    good = match(stage + "target H = -2/(1 + s/6000)\n", "--json")
    assert good.status == 0
    (solution,) = good.json["solutions"]
    assert solution["values"]["R2"] == pytest.approx(1 / (6000 * 10e-9), rel=1e-12)
    assert match(stage + "target H = 2/(1 + s/6000)\n").status == 1


def test_two_targets_ask_for_the_name_of_one(match):
    text = UNITY_GAIN_LOW_PASS + "ask G = V_a/V_in\nfix C1 = 22n, C2 = 10n\n" + BUTTERWORTH
    text += "target G: lowpass butterworth, order 2, edge 1 kHz\n"
    called = match(text)
    assert called.status == 2
    assert "--ask" in called.err
    assert match(text, "--ask", "H").status == 0
    assert "there is no target for `K`" in match(text, "--ask", "K").err


def test_a_sheet_without_a_target_is_answered_with_a_line_to_add(match):
    called = match(UNITY_GAIN_LOW_PASS)
    assert called.status == 2
    assert "add a line such as: target H:" in called.err


def test_latex_holds_an_equation_for_each_part(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 22 nF, C2 = 10 nF\n" + BUTTERWORTH
    called = match(text, "--latex")
    assert called.out.count(r"\begin{align*}") == 2
    assert "R_{1} &=" in called.out
    assert r"\ge" in called.out


@pytest.mark.parametrize(
    ("given", "said"),
    [("fix C1 = 22 nF, C2 = 10 nF", "do not give the values"), ("choose C1, C2", "departs from the target")],
)
def test_a_solution_that_the_circuit_contradicts_is_a_fault_and_no_result(match, monkeypatch, given, said):
    solve = symcirc.design.solve

    def corrupted(problem, **options):
        found = solve(problem, **options)
        branch = found.branches[0]
        wrong = replace(branch.equations[0], formula=branch.equations[0].formula * 2)
        return replace(
            found, branches=(replace(branch, equations=(wrong, *branch.equations[1:]), conditions=()),)
        )

    monkeypatch.setattr(symcirc.design, "solve", corrupted)
    called = match(f"{UNITY_GAIN_LOW_PASS}{given}\n{BUTTERWORTH}", "--json")
    assert called.status == 70
    assert called.out == ""
    assert said in called.err


def test_a_name_in_the_target_cannot_be_solved_for(match):
    called = match(
        UNITY_GAIN_LOW_PASS + "fix C1 = 22n, C2 = 10n\ntarget H = 1/(1 + s*R1*C1 + s^2*R1*R2*C1*C2)\n"
    )
    assert called.status == 2
    assert "`R1` stands in the target" in called.err


def test_tied_parts_get_values_too(match):
    text = UNITY_GAIN_LOW_PASS + "fix C1 = 22 nF, R2 = R1\n" + BUTTERWORTH
    (solution,) = match(text, "--json").json["solutions"]
    assert solution["values"]["R2"] == solution["values"]["R1"]
    assert solution["values"]["C2"] == pytest.approx(11e-9, rel=1e-12)
