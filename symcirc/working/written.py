"""A line of a working as it stands in its file, whatever it was written in."""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.complaints import Complaint, Place, Source


@dataclass(frozen=True)
class Written:
    """A line as plain text, and where each of its characters comes from.

    ``spans`` gives for every character the stretch of the file that it stands for, as offsets; it is None where the
    text stands in the file as it is, on ``line`` from column 1 on. ``trouble`` is set where the line could not be
    made plain text.
    """

    text: str
    line: int
    source: Source
    spans: tuple[tuple[int, int], ...] | None = None
    trouble: Complaint | None = None

    def place(self, start: int, end: int) -> Place:
        """Return the place in the file of the characters from ``start`` to before ``end``, on its first line."""
        if self.spans is None:
            return Place(self.line, start + 1, end + 1, self.source)
        if not self.spans:
            return Place(self.line, 1, 2, self.source)
        first, last = self.stretch(start, end)
        line, column = self.source.spot(first)
        newline = self.source.text.find("\n", first, last)
        return Place(line, column, column + max(1, (last if newline < 0 else newline) - first), self.source)

    def stretch(self, start: int, end: int) -> tuple[int, int]:
        """Return the offsets in the file of the characters from ``start`` to before ``end``, where there are spans."""
        assert self.spans
        first = min(start, len(self.spans) - 1)
        last = min(max(start + 1, end), len(self.spans)) - 1
        return self.spans[first][0], max(self.spans[first][1], self.spans[last][1])

    def slice(self, first: Place, last: Place) -> str:
        """Return what stands in the file from one place to the end of another, on one line."""
        return self.source.line(first.line)[first.column - 1 : last.end - 1]

    def sides(self) -> tuple[str, ...]:
        """Return the text of the sides of an equation."""
        return tuple(side.strip() for side in self.text.split("="))
