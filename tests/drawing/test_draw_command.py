"""The verb draw: files written whole, never over another, in three formats."""

from __future__ import annotations

import pytest

from symcirc.drawing import draw_svg
from tests.calling import call
from tests.drawing.samples import sheet_of

TEXT = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"


@pytest.fixture
def sheet(tmp_path):
    path = tmp_path / "a.stage"
    path.write_text(TEXT, encoding="utf-8")
    return path


def test_an_svg_is_what_the_function_for_the_note_returns(capsys, sheet, tmp_path):
    called = call(capsys, "draw", sheet, "-o", tmp_path / "a.svg")
    assert (called.status, called.out, called.err) == (0, "", "")
    assert (tmp_path / "a.svg").read_text(encoding="utf-8") == draw_svg(sheet_of(TEXT, str(sheet)))
    assert sorted(path.name for path in tmp_path.iterdir()) == ["a.stage", "a.svg"]


@pytest.mark.parametrize(("suffix", "magic"), [("png", b"\x89PNG"), ("PDF", b"%PDF")])
def test_a_png_and_a_pdf_are_the_same_bytes_every_time(capsys, sheet, tmp_path, suffix, magic):
    files = [tmp_path / f"{n}.{suffix}" for n in (1, 2)]
    for file in files:
        assert call(capsys, "draw", sheet, "-o", file, "--symbols", "ieee315").status == 0
    first, second = (file.read_bytes() for file in files)
    assert first == second
    assert first.startswith(magic)


def test_a_file_that_is_there_is_written_over_only_when_told(capsys, sheet, tmp_path):
    there = tmp_path / "a.svg"
    there.write_text("mine")
    called = call(capsys, "draw", sheet, "-o", there)
    assert called.status == 2
    assert "is there already" in called.err
    assert "--replace" in called.err
    assert there.read_text() == "mine"
    assert call(capsys, "draw", sheet, "-o", there, "--replace").status == 0
    assert there.read_text().startswith("<svg")


@pytest.mark.parametrize(
    ("name", "cause"),
    [("a.gif", "of no kind that can be drawn"), ("a", "of no kind"), ("none/a.svg", "cannot be written")],
)
def test_what_cannot_be_written_is_refused_and_nothing_is_left(capsys, sheet, tmp_path, name, cause):
    called = call(capsys, "draw", sheet, "-o", tmp_path / name)
    assert called.status == 2
    assert cause in called.err
    assert [path.name for path in tmp_path.iterdir()] == ["a.stage"]


def test_a_folder_in_the_way_is_refused(capsys, sheet, tmp_path):
    (tmp_path / "a.svg").mkdir()
    called = call(capsys, "draw", sheet, "-o", tmp_path / "a.svg", "--replace")
    assert called.status == 2
    assert "cannot be written" in called.err
    assert len(list(tmp_path.iterdir())) == 2
