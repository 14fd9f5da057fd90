"""The whole check of a working: verdicts, mends for the false lines, and whether the rest holds with these."""

from __future__ import annotations

from dataclasses import replace

import mpmath

from symcirc.complaints import Source
from symcirc.derivation import Posed
from symcirc.slips.mending import mended
from symcirc.working.check import Checker
from symcirc.working.measured import DIGITS
from symcirc.working.read import read_lines
from symcirc.working.records import Checked, Line
from symcirc.working.written import Written

#: A working with more lines is not judged a second time with its mends put in.
MOST_LINES = 150


def check_and_mend(posed: Posed, source: Source) -> Checked:
    """Check a working against a sheet that is made ready, its amplifiers ideal or real, and look for its slips.

    Raises Complaint for a sheet that cannot be solved, and a working out of bounds or without any line.
    """
    written = read_lines(source)
    with mpmath.workdps(DIGITS):
        checker = Checker(posed)
        found = mended(checker, checker.run(written))
        if not any(line.suggestions for line in found.lines) or len(written) > MOST_LINES:
            return found
        again = Checker(posed).run(read_lines(_with_mends(source, found.lines)))
    still = tuple(dict.fromkeys(line.line for line in again.lines if line.verdict in ("fails", "carried")))
    return replace(found, still_false=still)


def _with_mends(source: Source, lines: tuple[Line, ...]) -> Source:
    """Return a working with the first suggestion for each of its false lines put in."""
    text = source.text
    done: set[tuple[int, int]] = set()
    for line in reversed(lines):
        if line.suggestions and line.equation is not None:
            start, end = _stretch(line.equation.written, source)
            if (start, end) not in done:
                done.add((start, end))
                text = text[:start] + line.suggestions[0] + text[end:]
    return Source(source.file, text)


def _stretch(written: Written, source: Source) -> tuple[int, int]:
    """Return the offsets of a line in its file."""
    if written.spans is not None:
        return written.stretch(0, len(written.text))
    start = sum(len(line) + 1 for line in source.text.split("\n")[: written.line - 1])
    return start, start + len(written.text)
