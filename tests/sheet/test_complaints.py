"""Complaints, remarks and their places, whatever they are about."""

from __future__ import annotations

from functools import partial

import pytest

from symcirc.complaints import Complaint, Complaints, Place, Remark, Source, choices, listed, nearest
from tests.sheet.reading import BASE, complaint

SHEET = Source("low.stage", "fix R1 = 2 k\r\n\tfix\tC1 = 3\n\nlast")


def test_a_complaint_shows_file_line_column_mark_cause_and_mend() -> None:
    assert str(complaint("fix R1 = 2 k", BASE)).split("\n") == [
        "test.stage:1:12: `k` alone is not a unit, and a prefix alone must be glued to its digits",
        "    1 | fix R1 = 2 k",
        "      |            ^",
        "mend: write 2k or 2 kohm",
    ]


def test_a_complaint_as_json_has_the_designs_fields() -> None:
    refused = Complaint(Place(1, 5, 7, SHEET), "this is wrong", "write it right")
    assert refused.as_json() == {
        "file": "low.stage",
        "line": 1,
        "column": 5,
        "message": "this is wrong",
        "help": "write it right",
    }
    assert Remark(Place(4, 1, 5, SHEET), "odd").as_json() == {"line": 4, "column": 1, "message": "odd"}
    assert str(Remark(Place(4, 1, 5, SHEET), "odd")) == "low.stage:4:1: warning: odd"


def test_the_mark_stands_below_the_place_behind_tabs_too() -> None:
    assert Place(2, 6, 8, SHEET).excerpt() == "    2 | \tfix\tC1 = 3\n      | \t   \t^^"
    assert Place(1, 10, 13, SHEET).excerpt() == "    1 | fix R1 = 2 k\n      |          ^^^"
    assert Place(4, 5, 6, SHEET).excerpt() == "    4 | last\n      |     ^"
    assert Place(9, 1, 2, SHEET).excerpt() == "    9 | \n      | ^"


@pytest.mark.parametrize("column", [1, 30, 100, 5_000, 9_999])
def test_of_a_long_line_only_the_surroundings_are_shown(column: int) -> None:
    text = "".join(chr(ord("a") + i % 26) for i in range(10_000))
    shown, marks = Place(1, column, column + 3, Source("a.stage", text)).excerpt().split("\n")
    assert len(shown) < 140
    assert shown[marks.index("^")] == text[column - 1]


def test_a_word_of_a_million_characters_is_cut_short_in_sentences() -> None:
    refused = Complaint(Place(1, 1, 2, SHEET), f"`{'a' * 10**6}` is odd", f"write {'b' * 10**6}")
    assert len(str(refused)) < 600
    assert refused.cause.endswith("... is odd")


def test_lines_end_with_a_newline_and_may_have_a_carriage_return() -> None:
    assert [SHEET.line(n) for n in range(6)] == ["", "fix R1 = 2 k", "\tfix\tC1 = 3", "", "last", ""]


@pytest.mark.parametrize(
    ("word", "known", "offer"),
    [
        ("opmap", ["opamp", "vcvs"], "did you mean opamp?"),
        ("Out", ["out", "Outer"], "did you mean out?"),
        ("R12", ["R1", "R2", "out"], "did you mean R1 or R2?"),
        ("R3", ["R1", "C3", "r3"], "did you mean r3?"),
        ("R3", ["R1", "C3"], "did you mean R1?"),
        ("lowpas", ["allpass", "lowpass"], "did you mean lowpass?"),
        ("R1", ["R1"], ""),
        ("zzz", ["R1"], ""),
        ("", ["R1"], ""),
        ("node", [f"node{i}" for i in range(5_000)], ""),
        ("n" * 1_000, ["n"], ""),
    ],
)
def test_the_nearest_names_are_offered(word: str, known: list[str], offer: str) -> None:
    assert nearest(word, known) == offer


def test_words_are_joined_as_in_a_sentence() -> None:
    assert [listed([]), listed(["a"]), listed(["a", "b"], "or")] == ["", "a", "a or b"]
    assert (
        choices(f"n{i}" for i in range(20)) == "use one of " + ", ".join(f"n{i}" for i in range(12)) + ", ..."
    )


def test_of_several_complaints_the_first_in_the_file_is_raised() -> None:
    def refuse(line: int, column: int) -> None:
        raise Complaint(Place(line, column, column + 1, SHEET), f"{line}:{column}", "mend")

    complaints = Complaints()
    complaints.raise_first()
    assert complaints.attempt(lambda: 3) == 3
    for line, column in ((4, 1), (2, 6), (2, 2)):
        complaints.attempt(partial(refuse, line, column))
    with pytest.raises(Complaint, match="2:2"):
        complaints.raise_first()
