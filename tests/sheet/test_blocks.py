"""Blocks and their uses."""

from __future__ import annotations

import pytest

from symcirc.sheet import Sheet
from tests.sheet.reading import complaint, read, wires

LOW = "block low (p, q)\np -- R1 -- m -- R2 -- q\nm -- C1 -- gnd\nend"


def names_in(sheet: Sheet, fixed: str) -> set[str]:
    """Return the names in what a name is tied to."""
    from symcirc.sheet.expression import names

    return {name.text for name in names(sheet.ties[fixed])}


def test_parts_and_nodes_of_a_use_get_its_name() -> None:
    sheet = read(
        LOW,
        "use low as S1 (in, out)",
        "use low as S2 (out, b)",
        "ask H = V_S1_m/V_in",
        "ask I = I_S2_R2/V_in",
    )
    assert wires(sheet) == {
        "S1_R1": ("in", "S1_m"),
        "S1_R2": ("S1_m", "out"),
        "S1_C1": ("S1_m", "gnd"),
        "S2_R1": ("out", "S2_m"),
        "S2_R2": ("S2_m", "b"),
        "S2_C1": ("S2_m", "gnd"),
    }
    assert [part.label for part in sheet.parts][:2] == ["S1.R1", "S1.R2"]
    assert sheet.node_labels["S1_m"] == "S1.m"
    assert sheet.node_labels["out"] == "out"
    assert sheet.ports == {"in", "out", "b"}
    assert sheet.parts[0].kind == "R"


def test_a_block_may_be_used_before_it_stands() -> None:
    assert wires(read("use low as S1 (in, out)", "ask H = V_out/V_in", LOW))["S1_R1"] == ("in", "S1_m")


def test_outside_the_block_its_inner_nodes_and_parts_are_named_with_an_underline() -> None:
    sheet = read(
        LOW,
        "use low as S1 (in, out)",
        "S1_m -- R9 -- gnd",
        "fix S1_R1 = 2*R9",
        "choose S1_C1",
        "ask H = V_out/V_in",
    )
    assert wires(sheet)["R9"] == ("S1_m", "gnd")
    assert set(sheet.ties) == {"S1_R1"}
    assert sheet.chosen == ("S1_C1",)
    assert sheet.node_labels["S1_m"] == "S1.m"


def test_gnd_is_everywhere_the_same_node_and_can_be_joined_to_a_port() -> None:
    sheet = read(LOW, "use low as S1 (in, gnd)", "ask Z = V_in/I_in")
    assert wires(sheet)["S1_R2"] == ("S1_m", "gnd")
    assert wires(sheet)["S1_C1"] == ("S1_m", "gnd")


def test_in_a_blocks_fixes_its_parts_are_local_and_all_other_names_are_the_sheets() -> None:
    block = "block b (p)\np -- R1 -- a -- Y3 -- gnd\nU1 opamp: plus p, minus a, drives a, gain k\n"
    fixes = "fix R1 = 2*R5, Y3 = s*C3 + 1/R3 + 1/R1, U1_gbw = 2*f1\nend"
    sheet = read(
        block + fixes,
        "use b as S (in)",
        "in -- R5 -- gnd",
        "choose k, f1",
        "fix C3 = 10 nF",
        "ask H = V_S_a/V_in",
    )
    assert names_in(sheet, "S_R1") == {"R5"}
    assert names_in(sheet, "S_Y3") == {"s", "C3", "R3", "S_R1"}
    assert names_in(sheet, "S_U1_gain") == {"k"}
    assert sheet.devices[0].parameters == {"gain": "S_U1_gain", "gbw": "S_U1_gbw"}
    assert {name: sheet.symbols[name].role for name in ("C3", "R3", "k", "S_R1", "S_U1_gain")} == {
        "C3": "free",
        "R3": "free",
        "k": "free",
        "S_R1": "part",
        "S_U1_gain": "parameter",
    }
    assert sheet.symbols["S_U1_gain"].label == "S.U1_gain"


def test_a_blocks_number_fixes_every_use() -> None:
    sheet = read(
        LOW.replace("end", "fix C1 = 2n2\nend"),
        "use low as A (in, b)",
        "use low as B (b, c)",
        "ask H = V_b/V_in",
    )
    assert [str(sheet.fixes[name].number) for name in ("A_C1", "B_C1")] == ["11/5000000000"] * 2


def test_a_blocks_fix_of_the_sheets_name_counts_once_however_often_the_block_is_used() -> None:
    uses = ("use low as A (in, b)", "use low as B (b, c)", "ask H = V_b/V_in")
    sheet = read(LOW.replace("end", "fix k = 2, R1 = k*R2\nend"), *uses)
    assert sheet.numbers["k"] == 2
    assert "`k` is fixed twice" in complaint(LOW.replace("end", "fix k = 2\nend"), "fix k = 2", *uses).cause
    assert "`k` is fixed twice" in complaint(LOW.replace("end", "fix k = R1/R2\nend"), *uses).cause


def test_a_block_may_use_blocks() -> None:
    pair = (
        "block pair (p, q)\nuse low as A (p, a)\nuse low as B (a, q)\na -- C9 -- A_m\nfix A_R1 = 2*B_R1\nend"
    )
    sheet = read(LOW, pair, "use pair as S (in, out)", "fix S_B_C1 = 1n", "ask H = V_S_A_m/V_in")
    assert wires(sheet)["S_A_R2"] == ("S_A_m", "S_a")
    assert wires(sheet)["S_B_R1"] == ("S_a", "S_B_m")
    assert wires(sheet)["S_C9"] == ("S_a", "S_A_m")
    assert names_in(sheet, "S_A_R1") == {"S_B_R1"}
    assert sheet.node_labels["S_A_m"] == "S.A.m"
    assert {part.label for part in sheet.parts} >= {"S.A.R1", "S.C9"}


def test_a_block_that_uses_itself_by_way_of_others_is_refused() -> None:
    refused = complaint(
        "block a (p)\nuse b as S (p)\nend\nblock b (p)\nuse c as S (p)\nend\nblock c (p)\nuse a as S (p)\nend"
    )
    assert refused.cause == "block `a` uses itself"
    assert refused.place.line == 8


def test_clashes_of_names_made_by_uses_are_refused() -> None:
    assert (
        "`R1.R2` stands twice"
        in complaint(
            "in -- R1_R2 -- gnd", "block b (p)\np -- R2 -- gnd\nend", "use b as R1 (in)", "ask H = V_in/I_in"
        ).cause
    )
    assert "already" in complaint(LOW, "use low as S1 (in, out)", "ask S1_R1 = V_out/V_in").cause
    assert (
        "have one name, a_b_c"
        in complaint(
            "block x (p)\np -- R1 -- b_c -- R2 -- gnd\nend",
            "block y (p)\np -- R1 -- c -- R2 -- gnd\nend",
            "use x as a (in)",
            "use y as a_b (in)",
            "ask H = V_in/I_in",
        ).cause
    )


def test_an_inner_node_may_be_named_before_the_use_that_makes_it() -> None:
    sheet = read("S1_m -- R9 -- gnd", LOW, "use low as S1 (in, out)", "ask H = V_out/V_in")
    assert wires(sheet)["R9"] == ("S1_m", "gnd")
    assert sheet.node_labels["S1_m"] == "S1.m"


@pytest.mark.parametrize(
    ("line", "column"),
    [
        ("in -- R1 -- out", 1),
        ("fix k = 2", 5),
        ("U1 opamp: plus in, minus out, drives out", 1),
        ("use big as B (in)", 12),
    ],
)
def test_more_than_fifty_thousand_parts_and_fixes_are_refused_before_they_are_made(
    line: str, column: int
) -> None:
    big = "block big (p)\n" + "p -- R1 -- gnd\n" * 224 + "end"
    bigger = "block bigger (p)\n" + "\n".join(f"use big as U{i} (p)" for i in range(222)) + "\nend"
    refused = complaint(big, bigger, "use bigger as A (in)", *["fix k = 2"] * 49, line)
    assert "50,000 parts and fixes" in refused.cause
    assert refused.place.column == column


def test_blocks_that_nothing_uses_count_too() -> None:
    doubling = "".join(f"block b{i + 1} (p)\nuse b{i} as A (p)\nuse b{i} as B (p)\nend\n" for i in range(60))
    refused = complaint("block b0 (p)\np -- R1 -- gnd\nend", doubling, "in -- R1 -- gnd", "ask H = V_in/I_in")
    assert "50,000 parts" in refused.cause


def test_a_use_and_a_node_may_share_a_name() -> None:
    assert read(LOW, "use low as a (in, a)", "ask H = V_a/V_in").ports == {"in", "a"}


def test_a_block_that_nothing_uses_is_remarked() -> None:
    (remark,) = read(LOW, "in -- R1 -- gnd", "ask H = V_in/I_in").remarks
    assert remark.message == "block `low` is never used"
    assert remark.place.line == 1


def test_a_block_used_only_by_a_block_that_nothing_uses_is_not_remarked_itself() -> None:
    outer = "block outer (p)\nuse low as A (p, q)\nend"
    remarks = read(LOW, outer, "in -- R1 -- gnd", "ask H = V_in/I_in").remarks
    assert [remark.message for remark in remarks] == ["block `outer` is never used"]
