"""The workbook as a file, read by another library (openpyxl): texts stay texts, what it holds, how it is written."""

from io import BytesIO

import pytest
from openpyxl import load_workbook

from symcirc.workbook.cells import Formula
from symcirc.workbook.write import workbook_bytes
from tests.calling import call
from tests.match.sheets import designed
from tests.workbook.sheets import CASCADE, CHOSEN, LOW_PASS, RUMBLE, UNITY_GAIN
from tests.workbook.spreadsheet import find, made

#: The beginnings that a spreadsheet takes for a formula (OWASP, "CSV injection", from memory).
LEADS = ["=1+1", "+1+1", "-1+1", "@SUM(1)", '=HYPERLINK("x";"y")', "{=1+1}"]


def opened(text, **options):
    return load_workbook(BytesIO(workbook_bytes(made(text))), **options)


@pytest.mark.parametrize("lead", LEADS)
def test_a_title_that_begins_like_a_formula_stays_text(lead):
    title = lead.replace('"', "'")
    first = opened(f'stage "{title}"\n{UNITY_GAIN}').worksheets[0]
    assert first["A1"].value == title
    assert first["A1"].data_type == "s"
    assert first["A1"].quotePrefix is (title[0] in "=+-@")


def test_only_cells_meant_to_be_formulas_are_formulas():
    book = made(UNITY_GAIN)
    read = load_workbook(BytesIO(workbook_bytes(book)))
    for worksheet in book:
        for (row, column), cell in worksheet.cells.items():
            is_formula = read[worksheet.name].cell(row + 1, column + 1).data_type == "f"
            assert is_formula == isinstance(cell.content, Formula)


def test_each_solution_has_its_worksheets_and_each_root_its_own():
    assert opened(UNITY_GAIN).sheetnames == ["Inputs", "Solution 1", "Response 1", "Solution 2", "Response 2"]
    assert opened(RUMBLE).sheetnames == ["Inputs", "Solution", "Response", "Root 1"]


def test_the_values_written_beside_the_formulas_are_those_of_the_match():
    read = opened(UNITY_GAIN, data_only=True)
    for number, solution in enumerate(designed(UNITY_GAIN).solutions, 1):
        sheet = read[f"Solution {number}"]
        for name, value in solution.values.items():
            assert sheet.cell(find(sheet, name), 2).value == pytest.approx(value, rel=1e-13)


def test_formulas_and_inputs_are_those_of_the_hand():
    sheet = opened(CASCADE)["Solution"]
    assert sheet.cell(find(sheet, "R8"), 5).value == "R8 = Q_3*R9"
    assert sheet.cell(find(sheet, "R8"), 2).value.startswith("='Inputs'!$B$")
    inputs = opened(CASCADE)["Inputs"]
    assert inputs.cell(find(inputs, "edge"), 2).value == 900
    assert inputs.cell(find(inputs, "edge"), 3).value == "Hz"


def test_the_caution_is_on_the_first_worksheet():
    texts = [row[0].value for row in opened(UNITY_GAIN)["Inputs"].iter_rows(max_col=1)]
    assert "They say nothing of insulation, ratings, surge, or functional safety." in texts


def test_there_are_charts_of_magnitude_and_phase():
    read = opened(UNITY_GAIN)
    assert [len(sheet._charts) for sheet in read.worksheets] == [1, 2, 0, 2, 0]


def test_a_value_that_the_designer_has_to_choose_leaves_its_cell_empty():
    inputs = opened(CHOSEN, data_only=True)["Inputs"]
    assert inputs.cell(find(inputs, "C1"), 2).value is None
    assert inputs.cell(find(inputs, "Solution 1"), 2).value == "open"


# the command ------------------------------------------------------------------------------------------------


@pytest.fixture
def sheet_path(tmp_path):
    path = tmp_path / "s.stage"
    path.write_text(UNITY_GAIN, encoding="utf-8")
    return path


def test_the_command_prints_as_before_and_writes_the_workbook(capsys, sheet_path):
    path = sheet_path.parent / "out.xlsx"
    called = call(capsys, "match", sheet_path, "--workbook", path, "--json")
    assert called.status == 0
    assert len(called.json["solutions"]) == 2
    assert load_workbook(path).sheetnames[0] == "Inputs"


def test_a_file_that_is_there_is_written_over_only_when_told(capsys, sheet_path):
    path = sheet_path.parent / "out.xlsx"
    path.write_bytes(b"mine")
    refused = call(capsys, "match", sheet_path, "--workbook", path)
    assert (refused.status, refused.out) == (2, "")
    assert "is there already" in refused.err
    assert path.read_bytes() == b"mine"
    assert call(capsys, "match", sheet_path, "--workbook", path, "--replace").status == 0
    assert path.read_bytes()[:2] == b"PK"


def test_a_name_of_another_kind_is_refused(capsys, sheet_path):
    called = call(capsys, "match", sheet_path, "--workbook", sheet_path.parent / "out.ods")
    assert called.status == 2
    assert ".xlsx" in called.err


def test_replace_alone_is_refused(capsys, sheet_path):
    assert call(capsys, "match", sheet_path, "--replace").status == 2


def test_no_solution_writes_no_workbook(capsys, tmp_path):
    sheet = tmp_path / "s.stage"
    sheet.write_text(
        LOW_PASS + "fix C1 = 10 nF, C2 = 22 nF\ntarget H: lowpass butterworth, order 2, edge 1 kHz\n"
    )
    called = call(capsys, "match", sheet, "--workbook", tmp_path / "out.xlsx")
    assert called.status == 1
    assert "was not written" in called.err
    assert not (tmp_path / "out.xlsx").exists()
