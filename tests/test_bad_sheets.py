"""Every bad sheet gets its complaint, at its place, with its words, and at once."""

from __future__ import annotations

import re
import time

import pytest

from symcirc.complaints import Complaint, Source
from symcirc.sheet import read_sheet, syntax
from symcirc.sheet.slips import Slip
from tests.bad_sheets import SHEET_ROWS, STRUCTURE_ROWS, Row

ROWS = (*SHEET_ROWS, *STRUCTURE_ROWS)
every_row = pytest.mark.parametrize("row", ROWS, ids=[row.name.replace(" ", "-") for row in ROWS])


def complaint_of(text: str) -> Complaint:
    """Return the complaint that a sheet gets."""
    with pytest.raises(Complaint) as raised:
        read_sheet(Source("bad.stage", text))
    return raised.value


@every_row
def test_a_bad_sheet_gets_its_complaint_at_its_place(row: Row) -> None:
    complaint = complaint_of(row.text)
    assert (complaint.place.line, complaint.place.column) == (row.line, row.column), str(complaint)
    assert row.cause in complaint.cause
    assert row.mend in complaint.mend


@every_row
def test_cause_and_mend_are_one_sentence_each(row: Row) -> None:
    complaint = complaint_of(row.text)
    for sentence in (complaint.cause, complaint.mend):
        assert sentence.strip() == sentence
        assert sentence
        assert "\n" not in sentence
        assert not re.search(r"[.?!] +[A-Za-z]", sentence.replace("... ", "")), sentence


@every_row
def test_the_mark_stands_under_the_place(row: Row) -> None:
    place = complaint_of(row.text).place
    shown, marks = place.excerpt().split("\n")
    column = marks.index("^")
    written = place.source.line(place.line)
    if len(written) <= 160:
        assert shown[column:] == written[place.column - 1 :]
        assert [c for c in marks[:column] if c == "\t"] == [c for c in shown[:column] if c == "\t"]
    else:
        assert written[place.column - 1 :].startswith(shown[column:])


def test_the_table_is_long_and_its_names_are_unique() -> None:
    assert len({row.name for row in ROWS}) == len(ROWS) >= 110


def test_every_slip_that_is_known_is_shown_by_a_bad_sheet(monkeypatch: pytest.MonkeyPatch) -> None:
    shown: list[Slip] = []
    say = syntax._slip

    def note_and_say(surprise: syntax.Surprise, slip: Slip, match: re.Match[str], start: int) -> Complaint:
        shown.append(slip)
        return say(surprise, slip, match, start)

    monkeypatch.setattr(syntax, "_slip", note_and_say)
    for row in SHEET_ROWS:
        complaint_of(row.text)
    assert [slip.cause for slip in syntax.SLIPS if slip not in shown] == []


def test_every_bad_sheet_is_refused_in_less_than_a_second() -> None:
    for row in ROWS:
        start = time.perf_counter()
        complaint_of(row.text)
        assert time.perf_counter() - start < 1, row.name
