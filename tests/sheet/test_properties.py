"""What holds for every sheet and every expression: drawn at random, with the same draws in every run."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import sympy
from hypothesis import given, settings
from hypothesis import strategies as st

from symcirc.complaints import Complaint, Source
from symcirc.sheet import read_sheet
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import Expression, Number, children
from symcirc.sheet.parse import parse_sheet
from symcirc.sheet.statements import FixLine
from symcirc.sheet.trial import free, try_out
from tests.sheet.reading import BASE, wires
from tests.sheet.strategies import ARITHMETIC, LETTERS, PIECES, Arithmetic, RandomSheet, random_sheets

seeded = settings(derandomize=True, deadline=None, database=None)
WHOLE = (Path(__file__).parent / "everything.stage").read_text("utf-8")


def expression_of(text: str) -> Expression:
    """Return the expression that a text is read as."""
    (line,) = parse_sheet(Source("a.stage", f"fix k = {text}"))
    assert isinstance(line, FixLine)
    return line.settings[0].value.expression


def fraction(number: sympy.Expr) -> Fraction:
    return Fraction(int(number.p), int(number.q))


@seeded
@given(random_sheets())
def test_a_grammatical_sheet_is_read_as_it_was_written(drawn: RandomSheet) -> None:
    sheet = read_sheet(Source("random.stage", drawn.text))
    assert wires(sheet) == drawn.parts
    assert {device.name: device.kind for device in sheet.devices} == drawn.devices
    read_numbers = {name: fraction(n) for name, n in sheet.numbers.items() if name in drawn.parts}
    assert read_numbers == drawn.numbers
    for part in sheet.parts:
        line = sheet.source.line(part.place.line)
        assert line[part.place.column - 1 : part.place.end - 1] == part.label


def refusal(text: str) -> Complaint | None:
    """Return the complaint that a text gets, None where it is read; nothing else may be raised."""
    try:
        read_sheet(Source("slip.stage", text))
    except Complaint as complaint:
        return complaint
    return None


@settings(seeded, max_examples=250)
@given(st.integers(0, len(WHOLE) - 1), st.integers(0, 2), LETTERS)
def test_a_slip_of_one_character_is_read_or_gets_a_complaint(position: int, removed: int, put: str) -> None:
    text = WHOLE[:position] + put + WHOLE[position + removed :]
    complaint = refusal(text)
    if complaint is not None:
        assert complaint.cause
        assert complaint.mend
        assert 1 <= complaint.place.line <= text.count("\n") + 1
        assert "^" in str(complaint)


@settings(seeded, max_examples=150)
@given(st.lists(st.sampled_from(PIECES), max_size=25).map("".join))
def test_any_text_is_read_or_gets_a_complaint(text: str) -> None:
    complaint = refusal(text)
    assert complaint is None or "^" in str(complaint)


@settings(seeded, max_examples=200)
@given(ARITHMETIC)
def test_arithmetic_is_exact_and_binds_as_written(drawn: Arithmetic) -> None:
    assert fraction(exact_number(expression_of(drawn.text))) == drawn.value


@settings(seeded, max_examples=100)
@given(ARITHMETIC)
def test_the_place_of_an_expression_is_where_it_is_written(drawn: Arithmetic) -> None:
    line = f"fix k = {drawn.text}"
    waiting = [expression_of(drawn.text)]
    assert (waiting[0].place.column, waiting[0].place.end) == (9, len(line) + 1)
    while waiting:
        node = waiting.pop()
        waiting.extend(children(node))
        if isinstance(node, Number):
            written = line[node.place.column - 1 : node.place.end - 1].strip("() ")
            assert Fraction(written) == node.value


@settings(seeded, max_examples=80)
@given(ARITHMETIC, ARITHMETIC)
def test_what_is_zero_for_every_value_is_found_to_be_zero_and_nothing_else_is(
    a: Arithmetic, b: Arithmetic
) -> None:
    names = {"x": free("x", positive=True), "y": free("y", positive=True)}
    first, second = f"({a.text})", f"({b.text})"
    zero = f"({first}*x + {second}*y)^2 - {first}^2*x^2 - {second}^2*y^2 - 2*{first}*{second}*x*y"
    assert try_out(expression_of(zero), names).is_zero
    assert not try_out(expression_of(f"{zero} + x/1e25"), names).is_zero


def test_the_sheet_that_slips_are_made_in_is_good() -> None:
    assert len(read_sheet(Source("everything.stage", WHOLE)).asks) == 5
    assert read_sheet(Source("base.stage", BASE)).parts
