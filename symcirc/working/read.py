"""From a file to its lines: plain text, or the display mathematics of LaTeX."""

from __future__ import annotations

from symcirc.complaints import Complaint, Place, Source
from symcirc.working.latex import read_latex
from symcirc.working.written import Written

#: A working of more characters, or of more lines with something on them, is refused.
LARGEST_FILE, MOST_LINES = 1_000_000, 1_000


def read_lines(source: Source) -> tuple[Written, ...]:
    """Return the lines of a working that say something; a file named ``.tex`` is read as LaTeX.

    Raises Complaint for a file out of bounds, or with nothing in it.

    >>> [line.text for line in read_lines(Source("a.work", "# by hand\\nV_a = V_b   # short"))]
    ['V_a = V_b']
    """
    if len(source.text) > LARGEST_FILE:
        raise Complaint(
            Place(1, 1, 2, source),
            f"this text has more than {LARGEST_FILE:,} characters",
            "check it in pieces",
        )
    lines = read_latex(source) if source.file.endswith(".tex") else _read_plain(source)
    if not lines:
        cause = "there is no equation in this working"
        mend = (
            "put equations into equation, align or gather"
            if source.file.endswith(".tex")
            else "write one a line"
        )
        raise Complaint(Place(1, 1, 2, source), cause, mend)
    if len(lines) > MOST_LINES:
        place = Place(lines[MOST_LINES].line, 1, 2, source)
        raise Complaint(place, f"this working has more than {MOST_LINES:,} lines", "check it in pieces")
    return lines


def _read_plain(source: Source) -> tuple[Written, ...]:
    lines = []
    for number, line in enumerate(source.text.split("\n"), 1):
        text = line.split("#", 1)[0].rstrip()
        if text.strip():
            lines.append(Written(text, number, source))
    return tuple(lines)
