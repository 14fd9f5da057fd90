"""What the check of a working says, as plain records that map one to one onto the design's JSON."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from symcirc.complaints import Complaint, Place
from symcirc.sheet.expression import Expression
from symcirc.working.context import Context
from symcirc.working.names import Lexicon
from symcirc.working.written import Written

Verdict = Literal["holds", "carried", "fails", "defines", "unread"]


@dataclass(frozen=True)
class Equation:
    """The two sides of an equality, every node with its place, and the drives that it is judged under.

    It is number ``position`` of the equalities that ``written`` says, with the names that ``lexicon`` knew then.
    """

    left: Expression
    right: Expression
    context: Context
    written: Written
    position: int
    lexicon: Lexicon


@dataclass(frozen=True)
class Slip:
    """Where a line goes wrong, and how, in one sentence."""

    place: Place
    sentence: str


@dataclass(frozen=True)
class Line:
    """One equality with its verdict.

    ``follows`` tells whether it follows from the lines above as algebra alone, None where that is no linear
    question. ``equation`` is None for what could not be read; ``complaint`` then says why and where.
    """

    line: int
    text: str
    verdict: Verdict
    follows: bool | None
    note: str | None
    suggestions: tuple[str, ...] = ()
    slip: Slip | None = field(default=None, compare=False)
    equation: Equation | None = field(default=None, repr=False, compare=False)
    complaint: Complaint | None = field(default=None, repr=False, compare=False)

    def as_json(self) -> dict[str, object]:
        """Return the line as an entry of the design's JSON."""
        return {
            "line": self.line,
            "text": self.text,
            "verdict": self.verdict,
            "follows": self.follows,
            "note": self.note,
            "suggestions": list(self.suggestions),
        }


@dataclass(frozen=True)
class Checked:
    """A working with its verdicts; ``missing`` names nodes whose current law the answer needs and no line uses.

    ``still_false`` are the lines of the file that are false when the first mend of each line is put in; None where
    that was not tried.
    """

    lines: tuple[Line, ...]
    missing: tuple[str, ...]
    still_false: tuple[int, ...] | None = None

    @property
    def exit_status(self) -> int:
        """0 where nothing fails, is carried or unread; 1 where something is; 2 where nothing could be read."""
        verdicts = {line.verdict for line in self.lines}
        if verdicts <= {"unread"}:
            return 2
        return 1 if verdicts & {"fails", "carried", "unread"} else 0

    def as_json(self) -> dict[str, object]:
        """Return the design's JSON object."""
        return {"lines": [line.as_json() for line in self.lines], "missing": list(self.missing)}
