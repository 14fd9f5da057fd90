"""The check of a working for people: every line with its verdict in words, the slip marked, and what to mend first."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Iterator

from symcirc.complaints import listed
from symcirc.working.records import Checked, Line

#: So many lines are named one by one.
MOST_NAMED = 12


def check_text(checked: Checked) -> Iterator[str]:
    """Yield every equality with its verdict, its slip and its mends, then a summary."""
    wide = max((len(str(line.line)) for line in checked.lines), default=1)
    for line in checked.lines:
        text, mark = _shown(line)
        yield f"{line.line:>{wide}}  {line.verdict:8} {text}"
        yield from (" " * (wide + 11) + remark for remark in (*mark, *_remarks(line)))
    yield ""
    yield from summary(checked)


def _shown(line: Line) -> tuple[str, list[str]]:
    """Return a line's text, for a false one as it stands in its file, and the mark below it."""
    if line.slip is None:
        return line.text, []
    place = line.slip.place
    text = place.source.line(place.line)
    if not place.source.file.endswith(".tex"):
        text = text.split("#", 1)[0]
    lead = len(text) - len(text.lstrip())
    before = "".join("\t" if c == "\t" else " " for c in text[lead : place.column - 1])
    width = max(1, min(place.end - place.column, len(text.rstrip()) - place.column + 1))
    return text.strip(), [before + "^" * width]


def _remarks(line: Line) -> Iterator[str]:
    if line.verdict == "holds" and line.follows is False:
        yield "a statement of its own: it does not follow from the lines above"
    if line.note:
        yield line.note
    if line.verdict == "fails" and line.slip is None:
        yield "false of the circuit; no small change to the line makes it true"
    if line.complaint is not None:
        yield f"column {line.complaint.place.column}: {line.complaint.mend}"
    for number, suggestion in enumerate(line.suggestions):
        yield f"{'mend:' if number == 0 else 'or:  '} {suggestion}"


def summary(checked: Checked) -> Iterator[str]:
    """Yield what a working comes to, in sentences."""
    counts = Counter(line.verdict for line in checked.lines)
    yield "; ".join(f"{number} {verdict}" for verdict, number in counts.items())
    wrong = next((line for line in checked.lines if line.verdict == "fails"), None)
    if wrong is not None:
        carried = tuple(dict.fromkeys(str(line.line) for line in checked.lines if line.verdict == "carried"))
        behind = f"; {_lines(carried)} {'carry' if len(carried) > 1 else 'carries'} it on" if carried else ""
        yield f"mend line {wrong.line} first: it is false of the circuit{behind}"
        yield from _after_mends(checked)
    elif counts["unread"]:
        first = next(line for line in checked.lines if line.verdict == "unread")
        yield f"line {first.line} could not be read, so nothing is said of it"
    else:
        yield "every line that could be judged is true of the circuit"
    if checked.missing:
        nodes = listed(checked.missing)
        yield f"the answer needs the current law at {nodes}, and no line uses it"


def _after_mends(checked: Checked) -> Iterator[str]:
    if checked.still_false == ():
        unread = any(line.verdict == "unread" for line in checked.lines)
        yield f"with the first mend of each line put in, every line {'that could be read ' if unread else ''}holds"
    elif checked.still_false is not None:
        yield f"with the mends put in, {_lines(map(str, checked.still_false))} would still be false"


def _lines(numbers: Iterable[str]) -> str:
    """Return lines by their numbers, in words."""
    named = list(numbers)
    if len(named) > MOST_NAMED:
        named = [*named[: MOST_NAMED - 1], f"{len(named) - MOST_NAMED + 1} more"]
    return f"line{'s' if len(named) > 1 else ''} {listed(named)}"
