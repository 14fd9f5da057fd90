"""The verb ``check`` as a user meets it."""

import pytest

from tests.calling import EXAMPLES, call, run

STAGE = EXAMPLES / "hive_antialias.stage"


def test_a_right_working_holds_line_by_line(capsys):
    called = call(capsys, "check", STAGE, EXAMPLES / "hive_antialias.work", "--json")
    assert called.status == 0
    assert {line["verdict"] for line in called.json["lines"]} == {"defines", "holds"}
    assert called.json["missing"] == []


def test_a_slip_fails_and_what_follows_from_it_is_carried(capsys):
    called = call(capsys, "check", STAGE, EXAMPLES / "hive_antialias_slip.work", "--json")
    assert called.status == 1
    verdicts = {line["line"]: line["verdict"] for line in called.json["lines"]}
    assert verdicts == {2: "defines", 3: "fails", 4: "holds", 5: "carried"}


def test_the_words_say_which_line_to_look_at_first(capsys):
    called = call(capsys, "check", STAGE, EXAMPLES / "hive_antialias_slip.work")
    assert "look first at line 3" in called.out
    assert "carried" in called.out


@pytest.mark.parametrize(
    ("working", "status"), [("V_a/R3 = -V_out s C2\n", 0), ("V_a = ((\n", 2), ("V_a = V_out\n", 1)]
)
def test_the_exit_status_follows_the_verdicts(working, status):
    called = run("check", STAGE, "-", "--json", stdin=working)
    assert called.status == status
    assert len(called.json["lines"]) == 1


def test_a_line_that_cannot_be_read_says_where_and_the_others_are_judged(capsys, tmp_path):
    path = tmp_path / "hand.work"
    path.write_text("V_a = 2 3\nV_a/R3 = -V_out s C2\n", encoding="utf-8")
    called = call(capsys, "check", STAGE, path)
    assert called.status == 1
    assert "unread" in called.out
    assert "holds" in called.out


def test_a_working_that_leaves_out_a_node_is_told_which(capsys, tmp_path):
    path = tmp_path / "hand.work"
    path.write_text("V_a/R3 = -V_out s C2\n", encoding="utf-8")
    assert call(capsys, "check", STAGE, path, "--json").json["missing"] == ["a"]


def test_a_law_used_on_either_side_of_under_is_not_missing(capsys, tmp_path):
    sheet = tmp_path / "s.stage"
    sheet.write_text(STAGE.read_text(encoding="utf-8") + "ask Zin = V_in/I_in\n", encoding="utf-8")
    working = tmp_path / "s.work"
    working.write_text(
        "V_a/R3 + s C2 V_out = 0\nunder Zin\nI_in = (V_in - V_a)/R1\n"
        "(V_in - V_a)/R1 = V_a s C1 + V_a/R3 + (V_a - V_out)/R2\n",
        encoding="utf-8",
    )
    called = call(capsys, "check", sheet, working, "--json")
    assert called.json["missing"] == []
