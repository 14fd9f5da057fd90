"""`stagewright values` as a user calls it."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import numpy as np
import pytest
from scipy import signal

from symcirc.command.progress import ProgressLine
from symcirc.complaints import Source
from symcirc.sheet import read_sheet
from tests.calling import EXAMPLES, call
from tests.values.stages import LOW_PASS

CHOSEN = LOW_PASS + "choose C1, C2\nparts R: E24\nparts C: E6, from 1 nF to 100 nF\n"
NOTCH = """# the twin T
in -- R1 -- a -- R2 -- t
in -- C1 -- b -- C2 -- t
a  -- C3 -- foot
b  -- R3 -- foot
U1 opamp: plus t, minus out, drives out
E1 vcvs: senses out, drives foot, gain k
fix    R2 = R1, R3 = R1/2, C2 = C1, C3 = 2*C1
fix    C1 = 68 nF
solve  k
ask    H = V_out / V_in
target H: bandstop, order 2, f0 50 Hz, q 4
parts R: E24
"""


@pytest.fixture
def stage(tmp_path):
    """Return a function that writes a sheet and gives its path."""

    def write(text, name="a.stage"):
        path = tmp_path / name
        path.write_bytes(text.encode("utf-8"))
        return path

    return write


def test_the_sets_are_shown_with_what_was_searched(stage, capsys):
    called = call(capsys, "values", stage(CHOSEN), "--best", 3)
    assert called.status == 0
    assert "searched: every one of " in called.out
    assert "C1 and C2: every value of the range (169 in all" in called.out
    assert "band: 0 Hz to 1.2 kHz" in called.out
    assert "so none of them ranks among these" in called.out
    rows = [line.split() for line in called.out.splitlines() if line.lstrip()[:2] in ("1 ", "2 ", "3 ", "4 ")]
    assert [row[0] for row in rows] == ["1", "2", "3"]


def test_json_and_csv_say_the_same(stage, capsys):
    path = stage(CHOSEN)
    found = call(capsys, "values", path, "--json", "--best", 4).json
    table = list(csv.DictReader(io.StringIO(call(capsys, "values", path, "--csv", "--best", 4).out)))
    assert found["complete"] is True
    assert found["searched"] == found["size"]
    assert len(found["sets"]) == len(table) == 4
    for row, chosen in zip(table, found["sets"], strict=True):
        assert float(row["departure_db"]) == chosen["departure"]
        assert {name: float(row[name]) for name in chosen["preferred"]} == {
            name: choice["value"] for name, choice in chosen["preferred"].items()
        }
        assert float(row["q_shift_1"]) == chosen["poles"][0]["q_shift"]
        assert row["search_complete"] == "yes"


def test_the_written_sheet_derives_to_the_departure_that_was_said(stage, tmp_path, capsys):
    new = tmp_path / "bought.stage"
    found = call(capsys, "values", stage(CHOSEN), "--json", "--write", new, "--take", 2).json
    derived = call(capsys, "derive", new, "--values", "--json").json["ask"]["H"]
    w = np.geomspace(1, 2 * np.pi * 1200, 2000)
    _, ours = signal.freqs(derived["numerator"][::-1], derived["denominator"][::-1], w)
    _, target = signal.freqs(*signal.butter(2, 2 * np.pi * 1200, analog=True), w)
    worst = np.abs(20 * np.log10(np.abs(ours / target))).max()
    assert worst == pytest.approx(found["sets"][1]["departure"], rel=1e-3)


def test_the_written_sheet_keeps_every_line_and_adds_a_fix_block(stage, tmp_path, capsys):
    text = CHOSEN.replace("choose C1, C2", "  choose C1,C2   # as small as may be")
    new = tmp_path / "bought.stage"
    found = call(capsys, "values", stage(text), "--json", "--write", new).json["sets"][0]
    written = new.read_text(encoding="utf-8")
    assert written.startswith(text)
    numbers = read_sheet(Source("new", written)).numbers
    assert {name: float(numbers[name]) for name in found["preferred"]} == {
        name: choice["value"] for name, choice in found["preferred"].items()
    }


def test_a_number_that_is_moved_is_changed_in_its_place(stage, tmp_path, capsys):
    fixes = "fix C1=22n , C2 = 2.2e-9  # first guess, C2 = 1 nF\nparts R: E96\nparts C: E24"
    new = tmp_path / "bought.stage"
    called = call(
        capsys, "values", stage(LOW_PASS + fixes), "--json", "--together", "--window", 2, "--write", new
    )
    values = {n: c["value"] for n, c in called.json["sets"][0]["preferred"].items()}
    written = new.read_text(encoding="utf-8")
    line = next(line for line in written.splitlines() if line.startswith("fix C1"))
    assert line.endswith("  # first guess, C2 = 1 nF")
    assert " , C2 = " in line
    numbers = read_sheet(Source("new", written)).numbers
    assert float(numbers["C1"]) == pytest.approx(values["C1"], rel=1e-12)
    assert float(numbers["C2"]) == pytest.approx(values["C2"], rel=1e-12)


def test_what_was_solved_for_and_cannot_be_bought_is_fixed_to_its_exact_number(stage, tmp_path, capsys):
    new = tmp_path / "bought.stage"
    found = call(capsys, "values", stage(NOTCH), "--json", "--write", new).json["sets"][0]
    written = new.read_text(encoding="utf-8")
    assert "# found below: solve  k\n" in written
    assert found["held"]["k"] == pytest.approx(1 - 1 / 16)
    numbers = read_sheet(Source("new", written)).numbers
    assert float(numbers["k"]) == found["held"]["k"]
    assert found["values"]["R3"] == pytest.approx(found["values"]["R1"] / 2)
    assert call(capsys, "derive", new, "--values", "--json").status == 0


def test_the_departure_of_a_notch_is_that_over_both_its_pass_bands(stage, tmp_path, capsys):
    new = tmp_path / "bought.stage"
    found = call(capsys, "values", stage(NOTCH), "--json", "--write", new).json
    derived = call(capsys, "derive", new, "--values", "--json").json["ask"]["H"]
    (_, low), (high, _) = found["band"]
    w0 = 2 * np.pi * 50
    # a notch of Q 4 is 3 dB down at f0 (sqrt(1 + 1/(4 Q^2)) -+ 1/(2 Q))
    edges = 50 * (np.sqrt(1 + 1 / 64) + np.array([-1, 1]) / 8)
    assert [low, high] == pytest.approx(list(edges), rel=1e-6)
    w = 2 * np.pi * np.concatenate([np.geomspace(0.5, low, 2000), np.geomspace(high, 5000, 2000)])
    _, ours = signal.freqs(derived["numerator"][::-1], derived["denominator"][::-1], w)
    _, target = signal.freqs([1, 0, w0**2], [1, w0 / 4, w0**2], w)
    levels = 20 * np.log10(np.abs(ours / target))
    assert found["sets"][0]["departure"] == pytest.approx((levels.max() - levels.min()) / 2, rel=1e-3)


def test_the_other_names_of_a_solve_line_stay(stage, tmp_path, capsys):
    text = NOTCH.replace("solve  k", "solve  other, k  # both") + "ask D = V_b/V_in\nchoose third\n"
    new = tmp_path / "bought.stage"
    call(capsys, "values", stage(text), "--write", new)
    assert "solve  other  # both\n" in new.read_text(encoding="utf-8")


def test_line_ends_of_the_other_kind_stay(stage, tmp_path, capsys):
    new = tmp_path / "bought.stage"
    text = CHOSEN.rstrip("\n").replace("\n", "\r\n")
    assert call(capsys, "values", stage(text), "--write", new).status == 0
    data = new.read_bytes()
    assert data.startswith(text.encode())
    assert data.count(b"\n") == data.count(b"\r\n")


def test_pairs_are_written_exactly(stage, tmp_path, capsys):
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E12, from 1k to 100k, pairs\n"
    new = tmp_path / "bought.stage"
    found = call(capsys, "values", stage(text), "--json", "--write", new).json["sets"][0]["preferred"]
    assert {choice["joined"] for choice in found.values()} & {"series", "parallel"}
    numbers = read_sheet(Source("new", new.read_text(encoding="utf-8"))).numbers
    for name, choice in found.items():
        assert float(numbers[name]) == pytest.approx(choice["value"], rel=1e-14)


def test_a_file_is_not_written_over_unless_that_is_asked_for(stage, tmp_path, capsys):
    new = stage("mine", "new.stage")
    refused = call(capsys, "values", stage(CHOSEN), "--write", new)
    assert refused.status == 2
    assert "is there already" in refused.err
    assert "--replace" in refused.err
    assert new.read_text() == "mine"
    assert call(capsys, "values", stage(CHOSEN), "--write", new, "--replace").status == 0
    assert "preferred values" in new.read_text()
    assert sorted(p.name for p in tmp_path.iterdir()) == ["a.stage", "new.stage"]


def test_a_file_that_appears_during_the_search_is_not_written_over(stage, tmp_path, monkeypatch, capsys):
    new = tmp_path / "new.stage"
    monkeypatch.setattr(
        ProgressLine, "__call__", lambda self, line: new.write_text("mine") if "searched" in line else None
    )
    refused = call(capsys, "values", stage(CHOSEN), "--write", new)
    assert refused.status == 2
    assert "is there already" in refused.err
    assert new.read_text() == "mine"
    assert sorted(p.name for p in tmp_path.iterdir()) == ["a.stage", "new.stage"]


def test_a_drawer_with_too_few_pieces_gives_no_set_and_writes_nothing(stage, tmp_path, capsys):
    (tmp_path / "drawer.csv").write_text("value,count\n10 kohm,2\n", encoding="utf-8")
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: stock drawer.csv"
    new = tmp_path / "bought.stage"
    called = call(capsys, "values", stage(text), "--write", new)
    assert called.status == 1
    assert "no set was found: there are too few pieces in stock" in called.out
    assert not new.exists()


def test_parts_of_blocks_are_fixed_by_their_names_outside(stage, tmp_path, capsys):
    text = """
    block section (p, q)
      p -- R1 -- x -- C1 -- gnd
      U1 opamp: plus x, minus q, drives q
    end
    use section as S1 (in, mid)
    use section as S2 (mid, out)
    fix S1_C1 = 10 nF, S2_C1 = 10 nF
    ask H = V_out/V_in
    target H: lowpass critical, order 2, edge 1 kHz
    parts R: E24
    """
    new = tmp_path / "bought.stage"
    found = call(capsys, "values", stage(text), "--json", "--write", new)
    assert found.status == 0
    numbers = read_sheet(Source("new", new.read_text(encoding="utf-8"))).numbers
    assert float(numbers["S2_R1"]) == found.json["sets"][0]["preferred"]["S2_R1"]["value"]


def test_a_folder_that_is_not_there_is_refused(stage, tmp_path, capsys):
    refused = call(capsys, "values", stage(CHOSEN), "--write", tmp_path / "none" / "new.stage")
    assert refused.status == 2
    assert "cannot be written" in refused.err


def test_ctrl_c_shows_the_best_so_far_and_writes_nothing(stage, tmp_path, monkeypatch, capsys):
    def stop(self, line):
        if "searched" in line:
            raise KeyboardInterrupt

    monkeypatch.setattr(ProgressLine, "__call__", stop)
    new = tmp_path / "new.stage"
    called = call(capsys, "values", stage(CHOSEN), "--best", 2, "--write", new)
    assert called.status == 130
    assert "STOPPED: the best of " in called.out
    assert "the first set" in called.out
    assert "was not written" in called.err
    assert not new.exists()
    assert call(capsys, "values", stage(CHOSEN), "--json").json["complete"] is False
    assert call(capsys, "values", stage(CHOSEN), "--csv").out.splitlines()[1].endswith(",no")


def test_the_example_takes_its_values_from_the_drawer(capsys):
    path = EXAMPLES / "hive_queen.stage"
    rows = list(csv.DictReader(io.StringIO(Path(EXAMPLES / "hive_drawer.csv").read_text(encoding="utf-8"))))
    held = {1000 * float(r["value"].split()[0]): int(r["count"]) for r in rows if "kohm" in r["value"]}
    found = call(capsys, "values", path, "--json", "--best", 5).json
    for chosen in found["sets"]:
        pieces = [piece for choice in chosen["preferred"].values() for piece in choice["pieces"]]
        assert all(pieces.count(piece) <= held[piece] for piece in pieces)
    assert found["sets"][0]["departure"] < 0.2


REFUSED = [
    (
        "no target",
        LOW_PASS.split("target")[0] + "parts R: E12",
        "has no target",
        "add a line such as: target H",
    ),
    ("no parts", LOW_PASS, "does not say what can be bought", "parts R: E96"),
    ("all fixed", LOW_PASS + "fix R1=1k, R2=1k, R3=1k, C1=1n, C2=1n\nparts R: E12", "is fixed", "--together"),
    ("no such kind", LOW_PASS + "fix C1=1n, C2=1n\nparts L: E12", "no part of kind L", "`parts` line"),
    (
        "C has no number",
        LOW_PASS + "choose C1\nfix C2=2n2\nparts R: E12",
        "`C1` has no number",
        "parts C: E12",
    ),
    (
        "all chosen",
        LOW_PASS + "choose R1, R2, R3, C1, C2\nparts R: E12, from 1k to 2k",
        "nothing is left for the design equations",
        "out of `fix` and `choose`",
    ),
    ("C is to be found", LOW_PASS + "fix R3 = 10k, C1 = 22 nF\nparts R: E12", "no `parts C` line", "fix C2"),
    (
        "no range",
        LOW_PASS + "choose C1, C2\nparts R: E12\nparts C: E12",
        "no range for it",
        "from LOW to HIGH",
    ),
    (
        "none is real",
        LOW_PASS + "choose C1, C2\nparts R: E12\nparts C: E12, from 10 nF to 22 nF",
        "real and positive: the first solution needs C1 >= 4*C2",
        "widen the range",
    ),
    ("no list", LOW_PASS + "fix C1=22n, C2=2n2\nparts R: stock none.csv", "no such file", "CSV file"),
    (
        "empty range",
        LOW_PASS + "fix C1=22n, C2=2n2\nparts R: E3, from 2.3k to 4.6k",
        "lies in the range",
        "widen",
    ),
    (
        "too many pairs",
        LOW_PASS + "fix C1=22n, C2=2n2\nparts R: E192, from 1 mohm to 1 Gohm, pairs",
        "too many pairs",
        "leave out `pairs`",
    ),
    (
        "a parameter",
        LOW_PASS.replace("gain 1", "gain g") + "choose g\nfix C1=22n, C2=2n2\nparts R: E3",
        "`g` has no number",
        "fix g",
    ),
    ("not met", LOW_PASS + "fix C1 = 2n2, C2 = 22n\nparts R: E12", "C1 = 2.2 nF is less", "C1 >= 4*C2"),
]


@pytest.mark.parametrize(
    ("text", "cause", "mend"), [row[1:] for row in REFUSED], ids=[row[0] for row in REFUSED]
)
def test_a_sheet_without_what_is_needed_is_refused_with_help(stage, capsys, text, cause, mend):
    called = call(capsys, "values", stage(text))
    assert called.status == 2
    assert cause in called.err
    assert mend in called.err
    assert called.out == ""


def test_too_many_combinations_are_refused(stage, capsys):
    text = LOW_PASS + "choose C1, C2\nparts R: E12\nparts C: E192, from 1 pF to 1 mF"
    called = call(capsys, "values", stage(text))
    assert called.status == 2
    assert "combinations, more than" in called.err


def test_to_take_a_set_needs_a_file_to_write(stage, capsys):
    called = call(capsys, "values", stage(CHOSEN), "--take", 2)
    assert called.status == 2
    assert "--write FILE is missing" in called.err


def test_to_take_a_set_that_is_not_there_is_refused(stage, tmp_path, capsys):
    text = LOW_PASS + "fix C1=22n, C2=2n2\nparts R: E3, from 1k to 2k"
    called = call(capsys, "values", stage(text), "--take", 5, "--write", tmp_path / "b.stage")
    assert called.status == 2
    assert "set 5 is asked for" in called.err
