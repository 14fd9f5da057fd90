"""A workbook's records as a file in the format of ISO/IEC 29500 (OOXML)."""

from __future__ import annotations

from io import BytesIO
from typing import TYPE_CHECKING, Any

from symcirc.workbook.cells import Cell, Chart, Worksheet

if TYPE_CHECKING:
    from xlsxwriter import Workbook

#: What each style looks like. Values show four decimals and an exponent that is a multiple of three.
STYLES: dict[str, dict[str, Any]] = {
    "plain": {},
    "unit": {"indent": 1},
    "title": {"bold": True, "font_size": 14},
    "head": {"bold": True, "bottom": 1},
    "sentence": {"italic": True},
    "input": {"bg_color": "#FFF2CC", "border": 1, "num_format": "##0.0000E+0"},
    "number": {"num_format": "##0.0000E+0"},
    "ratio": {"num_format": "General"},
    "verdict": {"bold": True},
}
#: What a spreadsheet takes for the beginning of a formula where a text is typed in anew.
LEADS = ("=", "+", "-", "@")
#: The curves of a chart: what is, thin and dark, on the broad pale target, which shows it through in whatever order
#: a program draws them.
THIN, BROAD = {"color": "#1F3864", "width": 1.5}, {"color": "#ED7D31", "width": 6, "transparency": 60}

GRID = {"visible": True, "line": {"color": "#BFBFBF", "width": 0.5}}


def workbook_bytes(worksheets: tuple[Worksheet, ...]) -> bytes:
    """Return the file. Texts are written as texts, whatever they begin with."""
    from xlsxwriter import Workbook

    buffer = BytesIO()
    options = {"in_memory": True, "strings_to_formulas": False, "strings_to_urls": False}
    book = Workbook(buffer, options)
    styles = {name: book.add_format(look) for name, look in STYLES.items()}
    quoted = book.add_format({"quote_prefix": True})
    for worksheet in worksheets:
        sheet = book.add_worksheet(worksheet.name)
        for column, width in enumerate(worksheet.widths):
            sheet.set_column(column, column, width)
        for (row, column), cell in worksheet.cells.items():
            _write(sheet, row, column, cell, styles, quoted)
        for chart in worksheet.charts:
            sheet.insert_chart(*chart.spot, _chart(book, chart))
        sheet.set_landscape()
        sheet.fit_to_pages(1, 1 if worksheet.charts else 0)
    book.close()
    return buffer.getvalue()


def _write(sheet: Any, row: int, column: int, cell: Cell, styles: dict[str, Any], quoted: Any) -> None:
    content, style = cell.content, styles[cell.style]
    if content is None:
        sheet.write_blank(row, column, None, style)
    elif isinstance(content, str):
        sheet.write_string(row, column, content, quoted if content.startswith(LEADS) else style)
    elif isinstance(content, float):
        sheet.write_number(row, column, content, style)
    else:
        value = "" if content.value is None else content.value
        sheet.write_formula(row, column, f"={content.text}", style, value)


def _chart(book: Workbook, chart: Chart) -> Any:
    drawn = book.add_chart({"type": "scatter", "subtype": "straight"})
    for series in chart.series:
        drawn.add_series(
            {
                "name": series.name,
                "categories": f"={series.across.text}",
                "values": f"={series.up.text}",
                "line": BROAD if series.is_target else THIN,
                "marker": {"type": "none"},
            }
        )
    drawn.set_title({"name": chart.title, "name_font": {"size": 12}})
    across = {"name": "frequency, Hz", "log_base": 10, "label_position": "low"}
    drawn.set_x_axis({**across, "major_gridlines": GRID})
    drawn.set_y_axis({"name": chart.up_title, "major_gridlines": GRID})
    drawn.set_legend({"position": "bottom"})
    drawn.set_size({"width": 640, "height": 360})
    return drawn
