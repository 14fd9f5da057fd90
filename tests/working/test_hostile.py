"""Text that means harm, or is merely too much, is answered or refused at once; the grammar has no conflicts."""

from __future__ import annotations

import time

import pytest
from lark import Lark

from symcirc.complaints import Complaint
from symcirc.grammar import grammar_folder
from tests.working.calling import LOW_PASS, RC, checked, one


@pytest.mark.parametrize(
    "line",
    [
        "V_out = " + "(" * 200 + "1" + ")" * 200,
        "V_out = V_in^65",
        "V_out = ((((V_in^64)^64)^64)^64)^64",
        "V_out = V_in^0.5",
        "V_out = 1e31",
        "V_out = " + "9" * 5000,
        "V_out = V_in" + " + V_in" * 5000,
        "V_out = " + "sC1R1" * 100,
        "V_out = __import__('os')",
        "V_out = V_in; V_in",
        "V_out == V_in",
        "V_out = \x00",
        "V_out = (V_in",
        "V_out = V_in)",
        "V_out = V_in +",
        "= = =",
        "let",
        "let x",
        "let x = y",
        "let R1 = V_nowhere",
        "under",
        "V_out = ²",
        "A = B",
        "A + 1 = B",
        "D = D",
    ],
)
def test_a_hostile_or_broken_line_is_unread_with_its_reason(line: str) -> None:
    started = time.perf_counter()
    found = one(RC, line)
    assert found.verdict == "unread"
    assert found.note
    assert found.complaint is not None
    assert time.perf_counter() - started < 5


def test_a_million_characters_in_one_line_are_answered_at_once() -> None:
    started = time.perf_counter()
    assert one(RC, "V_out = " + "1+" * 490_000 + "1").verdict == "unread"
    with pytest.raises(Complaint, match="1,000,000 characters"):
        checked(RC, "1 = 1\n" * 200_000)
    with pytest.raises(Complaint, match="1,000 lines"):
        checked(RC, "1 = 1\n" * 1_001)
    assert time.perf_counter() - started < 5


def _verdicts_or_refusal(text: str) -> set[str]:
    try:
        return {line.verdict for line in checked(RC, text, "a.tex").lines}
    except Complaint:
        return {"refused"}


@pytest.mark.parametrize(
    "text",
    [
        "\\[" * 400_000,
        "$$" * 300_001,
        "\\begin{align}" * 60_000,
        "\\[" + "\\frac12 " * 90_000 + "\\]",
        "\\[" + "{" * 400_000 + "\\]",
        "\\begin{align}" + "= 1 \\\\" * 100_000 + "\\end{align}",
        "\\[ R_" + "{" * 400_000 + "\\]",
    ],
    ids=["brackets", "dollars", "begin", "fractions", "braces", "rows", "subscript"],
)
def test_hostile_latex_is_answered_or_refused_at_once(text: str) -> None:
    started = time.perf_counter()
    assert _verdicts_or_refusal(text) in ({"unread"}, {"refused"})
    assert time.perf_counter() - started < 5


def test_a_working_of_200_lines_is_answered_within_5_seconds() -> None:
    lines = [
        "(V_in - V_a)/R1 = V_a*s*C1 + (V_a - V_out)/R2 + V_a/R3",
        "V_a/R3 = -V_out s C2",
        "V_out/V_in = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "w0 = 1/sqrt(R2 R3 C1 C2)",
    ]
    started = time.perf_counter()
    result = checked(LOW_PASS, "\n".join(lines * 50))
    assert len(result.lines) == 200
    assert result.exit_status == 0
    assert time.perf_counter() - started < 5


def test_definitions_that_double_200_times_are_refused_at_their_bound() -> None:
    lines = ["x0 = V_in"] + [f"x{k + 1} = x{k}*x{k} + 1/x{k}" for k in range(200)]
    started = time.perf_counter()
    found = [line.verdict for line in checked(RC, "\n".join(lines)).lines]
    assert found[:5] == ["defines"] * 5
    assert "unread" in found
    assert time.perf_counter() - started < 5


def test_the_grammar_has_no_conflict() -> None:
    path = grammar_folder() / "working.lark"
    Lark.open(str(path), parser="lalr", lexer="contextual", maybe_placeholders=True, strict=True)
