"""Workbooks in a real spreadsheet program: LibreOffice Calc without its windows."""

import subprocess
from collections.abc import Mapping
from io import BytesIO
from pathlib import Path

from openpyxl import Workbook, load_workbook

from symcirc.workbook.build import worksheets
from symcirc.workbook.cells import Worksheet
from symcirc.workbook.write import workbook_bytes
from tests.match.sheets import designed


def made(text: str) -> tuple[Worksheet, ...]:
    return worksheets(designed(text))


def find(sheet, label: str, column: int = 0) -> int:
    """Return the row, from 1, of the first cell of a column that says this."""
    return next(row[0].row for row in sheet.iter_rows() if row[column].value == label)


def recalculated(
    book: tuple[Worksheet, ...], folder: Path, changes: Mapping[str, object] | None = None
) -> Workbook:
    """Return a workbook's values after the spreadsheet program has computed all of them anew.

    The program is given no values of formulas, so that every one that comes back is its own; ``changes`` are new
    contents of cells of the first worksheet, by the text in front of them.
    """
    opened = load_workbook(BytesIO(workbook_bytes(book)))
    first = opened.worksheets[0]
    for label, value in (changes or {}).items():
        first.cell(find(first, label), 2).value = value
    return computed(opened, folder)


def computed(opened: Workbook, folder: Path) -> Workbook:
    """Return the values of a workbook that has none yet, as the program computes them."""
    path = folder / "given.xlsx"
    opened.save(path)
    converted(path, folder / "out", "xlsx")
    return load_workbook(folder / "out" / "given.xlsx", data_only=True)


def converted(path: Path, folder: Path, kind: str) -> None:
    """Have the spreadsheet program write a file in another format; it has a profile of its own in the folder."""
    profile = f"-env:UserInstallation=file://{folder.parent / 'profile'}"
    command = ["soffice", profile, "--headless", "--convert-to", kind, "--outdir", str(folder), str(path)]
    subprocess.run(command, check=True, capture_output=True, timeout=180)
