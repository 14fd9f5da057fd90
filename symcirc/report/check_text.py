"""The check of a working for people: every line with its verdict in words, and what to look at first."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator

from symcirc.complaints import listed
from symcirc.working.records import Checked, Line


def check_text(checked: Checked) -> Iterator[str]:
    """Yield every equality with its verdict, its note and its mends, then a summary."""
    wide = max((len(str(line.line)) for line in checked.lines), default=1)
    for line in checked.lines:
        yield f"{line.line:>{wide}}  {line.verdict:8} {line.text}"
        yield from (" " * (wide + 11) + remark for remark in _remarks(line))
    yield ""
    yield from _summary(checked)


def _remarks(line: Line) -> Iterator[str]:
    if line.verdict == "holds" and line.follows is False:
        yield "a statement of its own: it does not follow from the lines above"
    if line.note:
        yield line.note
    if line.complaint is not None:
        yield f"column {line.complaint.place.column}: {line.complaint.mend}"
    for suggestion in line.suggestions:
        yield f"mend: {suggestion}"


def _summary(checked: Checked) -> Iterator[str]:
    counts = Counter(line.verdict for line in checked.lines)
    yield "; ".join(f"{number} {verdict}" for verdict, number in counts.items())
    wrong = next((line for line in checked.lines if line.verdict == "fails"), None)
    if wrong is not None:
        carried = counts["carried"]
        behind = f"; {carried} more follow from it or from lines like it" if carried else ""
        yield f"look first at line {wrong.line}: it is false of the circuit{behind}"
    elif counts["unread"]:
        first = next(line for line in checked.lines if line.verdict == "unread")
        yield f"line {first.line} could not be read, so nothing is said of it"
    else:
        yield "every line that could be judged is true of the circuit"
    if checked.missing:
        nodes = listed(checked.missing)
        yield f"the answer needs the current law at {nodes}, and no line uses it"
