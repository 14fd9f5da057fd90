"""Names and wires."""

from __future__ import annotations

import pytest

from symcirc.sheet.syntax import STATEMENTS
from tests.sheet.reading import BASE, complaint, read, wires

WORDS = [
    *STATEMENTS,
    *(
        "as",
        "loop",
        "with",
        "driven",
        "at",
        "edges",
        "meet",
        "limits",
        "loss",
        "from",
        "to",
        "below",
        "above",
    ),
    *("sign", "plus", "minus", "drives", "senses", "x", "gain", "order", "q", "opamp", "sqrt", "s", "pi"),
    *("V_out", "I_R1", "E12"),
]


@pytest.mark.parametrize("word", WORDS)
def test_the_words_of_the_language_can_be_nodes_anywhere(word: str) -> None:
    sheet = read(
        f"{word} -- R1 -- a -- R2 -- {word}",
        f"a -- R3 -- {word}",
        f"{word}\n -- R4 -- gnd",
        f"U1 opamp: plus {word}, minus a, drives b",
        f"E1 vcvs: senses {word} a, drives c {word}, gain 2",
        f"block part ({word})\n{word} -- R5 -- gnd\nend",
        f"use part as S1 ({word})",
        f"ask H = V_a/V_{word}",
        f"ask K = V_a/V_b driven at {word}",
    )
    assert wires(sheet)["R1"] == (word, "a")
    assert wires(sheet)["R4"] == (word, "gnd")
    assert wires(sheet)["S1_R5"] == (word, "gnd")


@pytest.mark.parametrize("word", [w for w in WORDS if w not in ("s", "pi", "sqrt", "V_out", "I_R1")])
def test_the_words_of_the_language_can_be_parameters_and_asks(word: str) -> None:
    sheet = read(
        BASE,
        f"fix {word} = 2, R1 = {word}*R2",
        "out -- R2 -- gnd",
        f"target H: lowpass bessel, order 2, edge {word} at 3 dB, gain 2*{word}",
        f"limit H: loss <= 1 dB from {word} to 10*{word}",
    )
    assert set(sheet.symbols) == {"R1", "C1", "R2", word}
    assert read(BASE, f"ask {word} = V_out/V_in").asks[1].name == word


def test_a_name_is_an_ascii_letter_then_letters_digits_and_underlines() -> None:
    assert wires(read("N_1a__ -- Rload_2 -- gnd", "ask H = V_N_1a__/I_N_1a__")) == {
        "Rload_2": ("N_1a__", "gnd")
    }
    assert (
        "`_a` " in complaint("_a -- R1 -- gnd").cause or "not expected" in complaint("_a -- R1 -- gnd").cause
    )


def test_capitals_count_in_names() -> None:
    assert wires(read("a -- R1 -- A -- Ra -- gnd", "a -- RA -- gnd", "ask H = V_A/V_a"))["R1"] == ("a", "A")


def test_nodes_have_a_namespace_of_their_own() -> None:
    sheet = read(
        BASE,
        "fix out = 2, in = out",
        "ask gnd = V_out/V_in",
        "fix k = in*out",
        "solve q",
        "fix R1 = k*q*R2",
        "out -- R2 -- gnd",
    )
    assert sheet.remarks == ()


def test_a_part_and_a_node_cannot_share_a_name() -> None:
    assert "part and a node" in complaint(BASE, "C1 -- R2 -- gnd").cause
    assert "part and a node" in complaint(BASE, "in opamp: plus in, minus out, drives out").cause
    assert "reference node" in complaint(BASE, "gnd opamp: plus in, minus out, drives out").cause


@pytest.mark.parametrize("name", ["s", "pi", "sqrt", "V_a", "I_a"])
def test_formula_names_are_reserved_for_parts_parameters_and_asks(name: str) -> None:
    for line in (
        f"fix {name} = 2",
        f"choose {name}",
        f"solve {name}",
        f"ask {name} = V_out/V_in",
        f"{name} opamp: plus in, minus out, drives out",
        f"block b (p)\np -- R1 -- gnd\nend\nuse b as {name} (in)",
    ):
        refused = complaint(line, BASE)
        assert f"`{name}` is kept for" in refused.cause, line


@pytest.mark.parametrize(
    ("name", "kind"), [("R1", "R"), ("Cload", "C"), ("L", "L"), ("Z_1", "Z"), ("Y3", "Y")]
)
def test_a_parts_first_letter_says_what_it_is(name: str, kind: str) -> None:
    assert read(f"in -- {name} -- gnd", "ask H = V_in/I_in").parts[0].kind == kind


def test_a_line_that_begins_with_a_link_continues_the_chain_above() -> None:
    expected = {"R1": ("in", "a"), "R2": ("a", "b"), "C1": ("b", "gnd")}
    ask = "ask H = V_b/V_in"
    for text in (
        "in -- R1 -- a\n-- R2 -- b\n  -- C1 -- gnd",
        "in -- R1\n -- a -- R2\n -- b -- C1\n -- gnd",
        "in -- R1 -- a  # first\n\n  # a comment\n\t\n -- R2 -- b -- C1 -- gnd",
        "in\n-- R1 -- a -- R2 -- b -- C1 -- gnd",
        "in -- R1 -- a\r\n\r\n -- R2 -- b\r\n# c\r\n -- C1 -- gnd\r\n",
    ):
        assert wires(read(text, ask)) == expected, text


def test_links_need_no_blanks() -> None:
    assert wires(read("in--R1--out--C1--gnd", "ask H=V_out/V_in")) == wires(read(BASE))


def test_a_part_stands_in_exactly_one_place() -> None:
    for second in (
        "a -- R1 -- b",
        "R1 opamp: plus in, minus out, drives out",
        "block b (p)\nend\nuse b as R1 (in)",
    ):
        assert complaint(BASE, second).cause.startswith("`R1`")
    assert "`U1` stands twice" in complaint(*["U1 opamp: plus in, minus out, drives out"] * 2, BASE).cause


def test_a_node_with_a_parts_name_is_remarked() -> None:
    sheet = read("in -- R1 -- R2 -- C1 -- out", "ask H = V_out/V_in")
    (remark,) = sheet.remarks
    assert (remark.place.line, remark.place.column) == (1, 13)
    assert "is a node missing behind `R1`" in remark.message
