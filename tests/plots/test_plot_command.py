"""The verb plot: files written whole, numbers as CSV and JSON, what is refused."""

from __future__ import annotations

import csv
import io
import json
import subprocess
import sys

import numpy as np
import pytest

from symcirc.plots.picture import svg_of
from tests.calling import EXAMPLES, call
from tests.plots.sheets import LOW_PASS, REAL_BAND_PASS, curves, example


@pytest.fixture
def sheet(tmp_path):
    path = tmp_path / "a.stage"
    path.write_text(LOW_PASS, encoding="utf-8")
    return path


def columns(text):
    head, *rows = csv.reader(io.StringIO(text))
    filled = zip(*rows, strict=True)
    return {name: [float(cell) for cell in cells if cell] for name, cells in zip(head, filled, strict=True)}


def test_an_svg_is_what_the_function_for_the_note_returns(capsys, tmp_path):
    called = call(capsys, "plot", EXAMPLES / "hive_mask.stage", "-o", tmp_path / "a.svg")
    assert (called.status, called.out, called.err) == (0, "", "")
    found = example("hive_mask")
    assert (tmp_path / "a.svg").read_text(encoding="utf-8") == svg_of(found, found.shown())
    assert [path.name for path in tmp_path.iterdir()] == ["a.svg"]


@pytest.mark.parametrize(("name", "magic"), [("a.png", b"\x89PNG"), ("a.PDF", b"%PDF"), ("a.svg", b"<svg")])
def test_the_suffix_says_what_is_written(capsys, sheet, tmp_path, name, magic):
    called = call(
        capsys, "plot", sheet, "--what", "magnitude", "--what", "phase,poles", "-o", tmp_path / name
    )
    assert (called.status, called.err) == (0, "")
    assert (tmp_path / name).read_bytes().startswith(magic)


def test_csv_has_the_curves_numbers(capsys, tmp_path):
    path = tmp_path / "b.stage"
    path.write_text(REAL_BAND_PASS, encoding="utf-8")
    called = call(capsys, "plot", path, "--csv", "--what", "magnitude,phase,delay,step,poles")
    found = curves(REAL_BAND_PASS)
    table = columns(called.out)
    assert (called.status, called.err) == (0, "")
    assert table["frequency_hz"] == found.frequencies.tolist()
    assert table["time_s"] == found.times.tolist()
    for trace in found.traces:
        assert table[f"{trace.name}_gain_db"] == trace.gain_db.tolist()
        assert table[f"{trace.name}_phase_deg"] == trace.phase_deg.tolist()
        assert table[f"{trace.name}_delay_s"] == trace.delay_s.tolist()
        assert table[f"{trace.name}_step"] == trace.step.tolist()
        assert table[f"{trace.name}_pole_real_rad_per_s"] == trace.poles.real.tolist()
        assert table[f"{trace.name}_zero_imaginary_rad_per_s"] == trace.zeros.imag.tolist()


def test_csv_goes_to_a_file_too(capsys, sheet, tmp_path):
    printed = call(capsys, "plot", sheet, "--csv")
    written = call(capsys, "plot", sheet, "--csv", "-o", tmp_path / "a.csv")
    assert (written.status, written.out) == (0, "")
    assert (tmp_path / "a.csv").read_text(encoding="utf-8") == printed.out
    assert list(columns(printed.out))[:2] == ["frequency_hz", "stage_gain_db"]


def test_json_has_columns_limits_and_warnings(capsys):
    called = call(capsys, "plot", EXAMPLES / "hive_hum_notch.stage", "--json", "--what", "magnitude")
    assert called.err == ""
    assert list(called.json["columns"]) == ["frequency_hz", "target_gain_db", "stage_gain_db"]
    assert "natural mode" in called.json["warnings"][0]["message"]
    mask = call(capsys, "plot", EXAMPLES / "hive_mask.stage", "--json").json
    assert [(area["excluded"], area["gain_db"]) for area in mask["limits"]] == [("below", -1), ("above", -40)]
    assert mask["limits"][1]["to_hz"] is None


def test_a_ratio_with_a_unit_says_so_in_its_columns(capsys):
    called = call(
        capsys, "plot", EXAMPLES / "hive_charge.stage", "--ask", "Zt", "--csv", "--what", "magnitude"
    )
    assert columns(called.out)["stage_gain_db_ohm"][0] == pytest.approx(160, abs=0.1)


def test_a_target_that_cannot_be_met_gives_its_picture_and_status_1(capsys, sheet, tmp_path):
    text = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\ntarget H: lowpass butterworth, order 2, edge 1 kHz\n"
    sheet.write_text(text, encoding="utf-8")
    called = call(capsys, "plot", sheet, "-o", tmp_path / "a.svg")
    assert called.status == 1
    assert "the target is shown alone" in called.err
    assert (tmp_path / "a.svg").exists()


def test_a_file_that_is_there_is_written_over_only_when_told(capsys, sheet, tmp_path):
    there = tmp_path / "a.svg"
    there.write_text("mine")
    called = call(capsys, "plot", sheet, "-o", there)
    assert called.status == 2
    assert "is there already" in called.err
    assert there.read_text() == "mine"
    assert call(capsys, "plot", sheet, "-o", there, "--replace").status == 0
    assert there.read_text().startswith("<svg")


@pytest.mark.parametrize(
    ("words", "cause"),
    [
        (["-o", "a.gif"], "of no kind that can be plotted"),
        (["-o", "a"], "of no kind"),
        (["-o", "a.csv"], "or add --csv"),
        (["--csv", "-o", "a.svg"], "let its name end in .csv"),
        (["-o", "none/a.svg"], "cannot be written"),
        (["-o", "a.svg", "--what", "magnitude,fase"], "did you mean phase?"),
        (["-o", "a.svg", "--what", ""], "use magnitude, passband"),
        (["-o", "a.svg", "--ask", "G"], "nothing called `G` is asked"),
        ([], "where to?"),
        (["--json", "-o", "a.svg"], "leave one of them out"),
    ],
)
def test_what_cannot_be_done_is_refused_and_nothing_is_left(
    capsys, sheet, tmp_path, monkeypatch, words, cause
):
    monkeypatch.chdir(tmp_path)
    called = call(capsys, "plot", sheet, *words)
    assert called.status == 2
    assert cause in called.err
    assert [path.name for path in tmp_path.iterdir()] == ["a.stage"]


def test_numbers_need_no_drawing_library(sheet):
    code = (
        "import sys; from symcirc.command import main; "
        f"status = main(['plot', {str(sheet)!r}, '--json']); "
        "assert not [m for m in ('matplotlib', 'scipy') if m in sys.modules]; sys.exit(status)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, timeout=60, check=False)
    assert done.returncode == 0, done.stderr
    found = json.loads(done.stdout)["columns"]
    assert np.interp(159.155, found["frequency_hz"], found["stage_gain_db"]) == pytest.approx(-3.01, abs=0.01)
