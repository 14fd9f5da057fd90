"""Every sheet in examples/ says what it is for, derives, and matches its target where it has one."""

import pytest

from symcirc.complaints import Source
from symcirc.sheet import read_sheet
from tests.calling import EXAMPLES, call

SHEETS = sorted(EXAMPLES.glob("*.stage"))


def sheet_of(path):
    return read_sheet(Source(str(path), path.read_text(encoding="utf-8")))


def test_there_are_at_least_four_sheets():
    assert len(SHEETS) >= 4


@pytest.mark.parametrize("path", SHEETS, ids=lambda p: p.stem)
def test_a_sheet_begins_with_a_comment_that_says_what_it_is_for(path):
    first, second, *_ = path.read_text(encoding="utf-8").splitlines()
    assert first.startswith("# Hive logger: ")
    assert second.startswith("# What it shows: ")


@pytest.mark.parametrize("path", SHEETS, ids=lambda p: p.stem)
def test_a_sheet_derives(path, capsys):
    called = call(capsys, "derive", path, "--json")
    assert called.status == 0
    assert set(called.json["ask"]) == {ask.name for ask in sheet_of(path).asks}


@pytest.mark.parametrize("path", [p for p in SHEETS if sheet_of(p).targets], ids=lambda p: p.stem)
def test_a_sheet_with_a_target_matches_it(path, capsys):
    called = call(capsys, "match", path, "--json")
    assert called.status == 0
    assert called.json["solutions"]
    for solution in called.json["solutions"]:
        parts = {part.name for part in sheet_of(path).parts}
        assert parts <= set(solution["values"])
        assert all(value > 0 for value in solution["values"].values())


def test_the_drawing_beside_the_demo_is_what_draw_makes_of_it(capsys, tmp_path):
    # made anew by: stagewright draw examples/hive_antialias.stage -o examples/hive_antialias.svg --replace
    called = call(capsys, "draw", EXAMPLES / "hive_antialias.stage", "-o", tmp_path / "it.svg")
    assert called.status == 0
    made, kept = (path / name for path, name in ((tmp_path, "it.svg"), (EXAMPLES, "hive_antialias.svg")))
    assert made.read_text(encoding="utf-8") == kept.read_text(encoding="utf-8")
