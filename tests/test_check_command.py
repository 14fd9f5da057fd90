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


def test_the_words_mark_the_slip_mend_it_and_say_what_to_mend_first(capsys):
    called = call(capsys, "check", STAGE, EXAMPLES / "hive_antialias_slip.work")
    rows = called.out.splitlines()
    wrong = next(k for k, row in enumerate(rows) if "fails" in row)
    assert rows[wrong].index("Vo)/R2") == rows[wrong + 1].index("^^")
    assert rows[wrong + 2].strip() == "the sign of the current through R2 at node a is wrong"
    assert rows[wrong + 3].strip() == "mend: (Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3"
    assert "mend line 3 first: it is false of the circuit; line 5 carries it on" in called.out
    assert "with the first mend of each line put in, every line holds" in called.out


def test_suggestions_are_whole_lines_in_the_json(capsys):
    called = call(capsys, "check", STAGE, EXAMPLES / "hive_antialias_slip.work", "--json")
    wrong = next(line for line in called.json["lines"] if line["verdict"] == "fails")
    assert wrong["suggestions"] == ["(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3"]
    assert wrong["note"] == "the sign of the current through R2 at node a is wrong"


def test_latex_shows_every_equality_with_its_verdict(capsys):
    called = call(capsys, "check", STAGE, EXAMPLES / "hive_antialias_slip.work", "--latex")
    assert called.status == 1
    assert r"\frac{Vi - Va}" not in called.out
    assert called.out.count(r"&& \text{") == 3
    assert r"\text{carried}" in called.out
    assert called.out.rstrip().splitlines()[-1].startswith("% ")


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
