"""A line of a working as it stands in its file, whatever it was written in."""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.complaints import Complaint, Place, Source


@dataclass(frozen=True)
class Written:
    """A line as plain text, and where each of its characters comes from.

    ``origins`` gives (line, column) in the file for every character; it is None where the text stands in the file
    as it is, on ``line`` from column 1 on. ``trouble`` is set where the line could not be made plain text.
    """

    text: str
    line: int
    source: Source
    origins: tuple[tuple[int, int], ...] | None = None
    trouble: Complaint | None = None

    def place(self, start: int, end: int) -> Place:
        """Return the place in the file of the characters from ``start`` to before ``end``."""
        if self.origins is None:
            return Place(self.line, start + 1, end + 1, self.source)
        if not self.origins:
            return Place(self.line, 1, 2, self.source)
        line, column = self.origins[min(start, len(self.origins) - 1)]
        last_line, last = self.origins[min(max(start, end - 1), len(self.origins) - 1)]
        return Place(line, column, max(column, last) + 1 if last_line == line else column + 1, self.source)

    def slice(self, first: Place, last: Place) -> str:
        """Return what stands in the file from one place to the end of another, on one line."""
        return self.source.line(first.line)[first.column - 1 : last.end - 1]

    def sides(self) -> tuple[str, ...]:
        """Return the text of the sides of an equation."""
        return tuple(side.strip() for side in self.text.split("="))
