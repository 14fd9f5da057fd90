"""Workbooks recalculated by a real spreadsheet program, LibreOffice Calc, against ``match`` to 1e-9.

The program is given no value of any formula, so that all it gives back is its own work.
"""

import subprocess
from io import BytesIO

import pytest
from openpyxl import load_workbook

from symcirc.workbook.cells import Formula
from symcirc.workbook.write import workbook_bytes
from tests.match.sheets import designed, response
from tests.workbook import sheets
from tests.workbook.spreadsheet import computed, converted, find, made, recalculated

pytestmark = pytest.mark.spreadsheet

#: Relative, of a value; absolute, of dB and degrees below one.
AGREEMENT = 1e-9


def close(value):
    return pytest.approx(value, rel=AGREEMENT, abs=0)


@pytest.mark.parametrize(
    "name", ["UNITY_GAIN", "WRITTEN", "BAND", "RUMBLE", "MASK", "NOTCH", "CASCADE", "BAND_CASCADE"]
)
def test_every_formula_comes_to_the_value_that_was_written_beside_it(name, tmp_path):
    book = made(getattr(sheets, name))
    read = recalculated(book, tmp_path)
    compared = 0
    for worksheet in book:
        for (row, column), cell in worksheet.cells.items():
            if not isinstance(cell.content, Formula):
                continue
            found = read[worksheet.name].cell(row + 1, column + 1).value
            assert not (isinstance(found, str) and found.startswith(("#", "Err"))), cell.content.text
            if cell.content.value is None:
                continue
            compared += 1
            is_curve = worksheet.name.startswith("Response")
            if isinstance(cell.content.value, str):
                assert found == cell.content.value
            else:
                absolute = AGREEMENT if is_curve and column > 1 else 0
                assert found == pytest.approx(cell.content.value, rel=AGREEMENT, abs=absolute)
    assert compared > 4000


CHANGES = [
    ("UNITY_GAIN", {"edge": 4.7e3, "C2": 3.3e-9}, [("1 kHz", "4.7 kHz"), ("C2 = 10 nF", "C2 = 3.3 nF")]),
    (
        "BAND",
        {"lower_edge": 900, "upper_edge": 1100, "gain_dB": 3},
        [("350 Hz 450 Hz", "900 Hz 1100 Hz"), ("6 dB", "3 dB")],
    ),
    ("WRITTEN", {"d1": 9.5e3}, [("9e3*s", "9.5e3*s")]),
    (
        "RUMBLE",
        {"edge": 3300, "C2": 150e-9},
        [("edge 62 Hz", "edge 3.3 kHz"), ("C2 = 100 nF", "C2 = 150 nF")],
    ),
    ("MASK", {"edge": 1920, "C2": 20e-9}, [("edge 1.9 kHz", "edge 1.92 kHz"), ("C2 = 22 nF", "C2 = 20 nF")]),
    ("NOTCH", {"f0": 60, "Q": 7}, [("f0 50 Hz", "f0 60 Hz"), ("q 4", "q 7")]),
    (
        "CASCADE",
        {"edge": 2e3, "gain": 20, "C4": 4.7e-9},
        [("900 Hz", "2 kHz"), ("gain 12", "gain 20"), ("C4 = 10 nF", "C4 = 4.7 nF")],
    ),
    (
        "BAND_CASCADE",
        {"centre": 3e3, "gain": 9},
        [("centre 1 kHz, bandwidth 200 Hz, gain 4", "centre 3 kHz, bandwidth 600 Hz, gain 9")],
    ),
    ("CHOSEN", {"C1": 47e-9, "C2": 10e-9}, [("choose C1, C2", "fix C1 = 47 nF, C2 = 10 nF")]),
]


@pytest.mark.parametrize(("name", "changes", "edits"), CHANGES, ids=[c[0] for c in CHANGES])
def test_a_changed_input_gives_what_the_match_of_the_changed_sheet_gives(name, changes, edits, tmp_path):
    text = getattr(sheets, name)
    changed = text
    for old, new in edits:
        assert old in changed
        changed = changed.replace(old, new)
    read = recalculated(made(text), tmp_path, changes)
    solutions = designed(changed).solutions
    names = [n for n in read.sheetnames if n.startswith("Solution")]
    assert len(names) == len(solutions)
    left = list(solutions)
    for sheet in (read[n] for n in names):
        assert sheet.cell(find(sheet, "all of these"), 2).value == "met"
        rows = {row[0].value: row[1].value for row in sheet.iter_rows(max_col=2) if row[0].value}
        match = next(s for s in left if all(rows[n] == close(v) for n, v in s.values.items() if n in rows))
        left.remove(match)
        assert set(match.branch.values) <= rows.keys()
        table = read[sheet.title.replace("Solution", "Response")]
        frequencies, decibels = (
            [row[0].value for row in table.iter_rows(min_row=2, min_col=c, max_col=c)]
            for c in (1, find_column(table, "whole, dB"))
        )
        some = range(0, 401, 57)
        solved = response(changed, match.values | solved_parameters(match), [frequencies[k] for k in some])
        for k, value in zip(some, solved, strict=True):
            assert 10 ** (decibels[k] / 20) == close(abs(value))


def solved_parameters(solution):
    return {name: value for name, value in solution.branch.values.items() if name not in solution.values}


def find_column(table, label):
    return next(cell.column for cell in table[1] if cell.value == label)


def test_a_condition_that_a_changed_input_violates_says_not_met(tmp_path):
    read = recalculated(made(sheets.UNITY_GAIN), tmp_path, {"C2": 22e-9})  # C1 >= 2*C2 is needed
    sheet = read["Solution 1"]
    assert sheet.cell(find(sheet, "C1 >= 2*C2"), 2).value == "not met"
    assert sheet.cell(find(sheet, "all of these"), 2).value == "not met"
    assert read["Inputs"].cell(find(read["Inputs"], "Solution 1"), 2).value == "not met"


def test_a_value_as_built_moves_the_response_and_not_the_design(tmp_path):
    text = sheets.NOTCH
    (solution,) = designed(text).solutions
    opened = load_workbook(BytesIO(workbook_bytes(made(text))))
    sheet = opened["Solution"]
    sheet.cell(find(sheet, "R1"), 4).value = 47e3
    read = computed(opened, tmp_path)
    assert read["Solution"].cell(find(sheet, "R1"), 2).value == close(solution.values["R1"])
    assert read["Solution"].cell(find(sheet, "R2"), 4).value == close(47e3)  # tied to R1
    table = read["Response"]
    frequency = table.cell(300, 1).value
    built = {name: value for name, value in solution.values.items() if not name.startswith("R")}
    built |= {"R1": 47e3, "R2": 47e3, "R3": 23.5e3}
    (expected,) = response(text, built, [frequency])
    assert 10 ** (table.cell(300, find_column(table, "whole, dB")).value / 20) == close(abs(expected))


def test_an_input_that_is_emptied_leaves_the_conditions_open(tmp_path):
    read = recalculated(made(sheets.UNITY_GAIN), tmp_path, {"C2": None})
    assert read["Inputs"].cell(find(read["Inputs"], "Solution 1"), 2).value == "open"


def test_a_hostile_title_is_shown_as_text_by_the_program(tmp_path):
    read = recalculated(made('stage "=1+1"\n' + sheets.UNITY_GAIN), tmp_path)
    assert read.worksheets[0]["A1"].value == "=1+1"


def test_the_charts_show_in_the_program(tmp_path):
    """The first page is drawn by the program; its chart holds the dark curve over the pale one of the target."""
    import numpy as np
    from matplotlib.image import imread

    path = tmp_path / "book.xlsx"
    path.write_bytes(workbook_bytes(made(sheets.UNITY_GAIN)))
    converted(path, tmp_path / "out", "pdf")
    page = tmp_path / "page"
    command = ["pdftoppm", "-r", "60", "-png", "-l", "1", "-singlefile", tmp_path / "out" / "book.pdf", page]
    subprocess.run(command, check=True, timeout=60)
    pixels = np.asarray(imread(f"{page}.png"))[..., :3]
    red, green, blue = (pixels[..., k] for k in range(3))
    pale = (
        (red - blue > 0.25) & (red > 0.85) & (green < 0.85)
    )  # the target: orange, unlike the inputs' yellow
    across = pale.any(axis=0).sum()
    assert across > 0.3 * pale.shape[1]
    assert pale.any(axis=1).sum() > 0.1 * pale.shape[0]  # it falls: it is no flat line
