"""A workbook as plain records: worksheets of cells and charts, before anything is written."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

#: What a cell looks like and, for an input, that it is meant to be changed.
Style = Literal["plain", "unit", "title", "head", "sentence", "input", "number", "ratio", "verdict"]
#: Cells are counted from 0: (row, column).
Spot = tuple[int, int]


@dataclass(frozen=True)
class Formula:
    """A live formula without its equals sign, and what it comes to as the workbook is written; None: unknown."""

    text: str
    value: float | str | None


#: Text is text whatever it begins with; only a :class:`Formula` is ever computed.
Content = str | float | Formula | None


@dataclass(frozen=True)
class Cell:
    """What stands in a cell, and how it looks."""

    content: Content
    style: Style = "plain"


@dataclass(frozen=True)
class Area:
    """The cells of one column of a worksheet, first and last row included."""

    worksheet: str
    column: int
    first: int
    last: int

    @property
    def text(self) -> str:
        """The area as a formula has it.

        >>> Area("Solution 1", 1, 0, 9).text
        "'Solution 1'!$B$1:$B$10"
        """
        letter = column_letters(self.column)
        return f"'{self.worksheet}'!${letter}${self.first + 1}:${letter}${self.last + 1}"


@dataclass(frozen=True)
class Series:
    """A curve of a chart."""

    name: str
    across: Area
    up: Area
    is_target: bool = False


@dataclass(frozen=True)
class Chart:
    """Curves over a logarithmic frequency axis in Hz; ``spot`` is the cell at its upper left corner."""

    title: str
    up_title: str
    series: tuple[Series, ...]
    spot: Spot


@dataclass(frozen=True)
class Worksheet:
    """Cells by their spots, charts, and the widths of columns in characters."""

    name: str
    cells: Mapping[Spot, Cell]
    charts: tuple[Chart, ...] = ()
    widths: tuple[int, ...] = ()


@dataclass
class Page:
    """A worksheet being filled from the top down."""

    name: str
    row: int = 0
    cells: dict[Spot, Cell] = field(default_factory=dict)

    def put(self, column: int, content: Content, style: Style = "plain") -> None:
        """Put something into the row at hand."""
        self.cells[self.row, column] = Cell(content, style)

    def line(self, *contents: Content, style: Style = "plain") -> None:
        """Fill a row from the left, in one style, and go to the next."""
        for column, content in enumerate(contents):
            if content is not None:
                self.put(column, content, style)
        self.row += 1

    def here(self, column: int) -> str:
        """Return the reference of a cell of the row at hand, from any worksheet."""
        return reference(self.row, column, self.name)

    def area(self, column: int, first: int) -> Area:
        """Return the cells of a column from a row down to the one above the row at hand."""
        return Area(self.name, column, first, self.row - 1)

    def finished(self, charts: tuple[Chart, ...] = (), widths: tuple[int, ...] = ()) -> Worksheet:
        """Return the worksheet as it stands."""
        return Worksheet(self.name, dict(self.cells), charts, widths)


def column_letters(column: int) -> str:
    """Return how a spreadsheet names a column.

    >>> column_letters(0), column_letters(25), column_letters(26)
    ('A', 'Z', 'AA')
    """
    letters = ""
    number = column + 1
    while number:
        number, digit = divmod(number - 1, 26)
        letters = chr(ord("A") + digit) + letters
    return letters


def reference(row: int, column: int, worksheet: str = "") -> str:
    """Return an absolute reference to a cell, of another worksheet where that is named.

    >>> reference(4, 1), reference(4, 1, "Inputs")
    ('$B$5', "'Inputs'!$B$5")
    """
    own = f"${column_letters(column)}${row + 1}"
    return f"'{worksheet}'!{own}" if worksheet else own
