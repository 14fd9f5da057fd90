"""What is said when something is wrong: one family, each with its place, its cause and its mend.

A :class:`Complaint` is the user's to mend (exit status 2). A :class:`Remark` is odd but solvable and is only
shown. An :class:`InternalFault` is the program's own and asks to be reported (exit status 70).
"""

from __future__ import annotations

import difflib
import re
from bisect import bisect_right
from collections.abc import Callable, Iterable
from dataclasses import dataclass, field
from functools import cached_property
from typing import TypeVar

T = TypeVar("T")

#: A word longer than this is shown by its beginning only.
LONGEST_SHOWN = 200
#: A word longer than this has no near ones, and among more words than this none is near: a search takes time.
LONGEST_COMPARED, MOST_COMPARED = 40, 2_000


@dataclass(frozen=True)
class Source:
    """A text that was read, with the name it is known by in complaints."""

    file: str
    text: str

    @cached_property
    def lines(self) -> tuple[str, ...]:
        """The lines without their line ends."""
        return tuple(line.rstrip("\r") for line in self.text.split("\n"))

    @cached_property
    def _starts(self) -> list[int]:
        return [0, *(match.end() for match in re.finditer("\n", self.text))]

    def spot(self, offset: int) -> tuple[int, int]:
        """Return the line and the column of a character of the text, by its offset."""
        line = bisect_right(self._starts, offset)
        return line, offset - self._starts[line - 1] + 1

    def line(self, number: int) -> str:
        """Return line ``number`` (counted from 1) without its line end; empty where there is none."""
        return self.lines[number - 1] if 0 < number <= len(self.lines) else ""


@dataclass(frozen=True, order=True)
class Place:
    """A stretch of one line of a source. Lines and columns count from 1; ``end`` is the column after it."""

    line: int
    column: int
    end: int
    source: Source = field(repr=False, compare=False)

    def excerpt(self) -> str:
        """Return the line and, under it, a mark below the place.

        >>> print(Place(1, 5, 7, Source("a.stage", "fix R1 = 2 k")).excerpt())
            1 | fix R1 = 2 k
              |     ^^
        """
        text = self.source.line(self.line)
        shown, before = text, text[: self.column - 1]
        if len(text) > 160:  # a hostile line of a million characters is shown around the place only
            start = max(0, self.column - 60)
            shown, before = text[start : start + 120], text[start : self.column - 1]
        indent = "".join("\t" if c == "\t" else " " for c in before)
        width = max(1, min(self.end - self.column, 120, max(1, len(shown) - len(before))))
        return f"{self.line:5} | {shown}\n      | {indent}{'^' * width}"


class Complaint(Exception):
    """Something in the user's text cannot be used.

    ``cause`` says in one sentence what is wrong, ``mend`` in one what would mend it; a word of a million
    characters is cut short in both.
    """

    def __init__(self, place: Place, cause: str, mend: str) -> None:
        self.place = place
        self.cause = _clipped(cause)
        self.mend = _clipped(mend)
        super().__init__(self.cause)

    def __str__(self) -> str:
        where = f"{self.place.source.file}:{self.place.line}:{self.place.column}"
        return f"{where}: {self.cause}\n{self.place.excerpt()}\nmend: {self.mend}"

    def as_json(self) -> dict[str, object]:
        """Return the complaint as the design's JSON ``error`` object."""
        return {
            "file": self.place.source.file,
            "line": self.place.line,
            "column": self.place.column,
            "message": self.cause,
            "help": self.mend,
        }


def _clipped(sentence: str) -> str:
    return re.sub(rf"(\S{{{LONGEST_SHOWN}}})\S+", r"\1...", sentence)


class Complaints:
    """Gathers complaints of steps that do not need each other, so that the first in the file can be shown."""

    def __init__(self) -> None:
        self._found: list[Complaint] = []

    def attempt(self, step: Callable[[], T]) -> T | None:
        """Return what a step returns, or None where it raises a complaint, which is kept."""
        try:
            return step()
        except Complaint as complaint:
            self._found.append(complaint)
            return None

    def raise_first(self) -> None:
        """Raise the gathered complaint that stands first in the file, if there is one."""
        if self._found:
            raise min(self._found, key=lambda complaint: complaint.place)


@dataclass(frozen=True)
class Remark:
    """A warning: odd, but solvable."""

    place: Place
    message: str

    def __str__(self) -> str:
        where = f"{self.place.source.file}:{self.place.line}:{self.place.column}"
        return f"{where}: warning: {self.message}"

    def as_json(self) -> dict[str, object]:
        """Return the remark as an entry of the design's JSON ``warnings`` list."""
        return {"line": self.place.line, "column": self.place.column, "message": self.message}


class InternalFault(Exception):
    """The program contradicts itself; no input should cause this."""


def nearest(word: str, known: Iterable[str]) -> str:
    """Return a phrase that offers the known words nearest to ``word``, or an empty string.

    >>> nearest("R12", ["R1", "R2", "out"])
    'did you mean R1 or R2?'
    >>> nearest("zzz", ["R1"])
    ''
    """
    candidates = sorted(set(known) - {word})
    if len(candidates) > MOST_COMPARED or len(word) > LONGEST_COMPARED:
        return ""
    folded = [c for c in candidates if c.lower() == word.lower()]
    close = folded or _closest(word, candidates)
    return f"did you mean {listed(sorted(close), 'or')}?" if close else ""


def _closest(word: str, candidates: list[str]) -> list[str]:
    cutoff = 0.6
    if len(word) < 3:  # R1 for R2, and not C2 for R2
        cutoff, candidates = 0.5, [c for c in candidates if c[0].lower() == word[:1].lower()]
    close = difflib.get_close_matches(word, candidates, n=3, cutoff=cutoff)
    likeness = {c: difflib.SequenceMatcher(None, c, word).ratio() for c in close}
    return [c for c in close if likeness[c] > max(likeness.values()) - 0.1]


def choices(known: Iterable[str]) -> str:
    """Return a phrase that says which words could be used, a dozen of them at most.

    >>> choices(["H"]), choices(["R1", "R2"])
    ('use H', 'use R1 or R2')
    """
    words = list(known)
    return f"use {listed(words, 'or')}" if len(words) < 13 else f"use one of {', '.join(words[:12])}, ..."


def listed(words: Iterable[str], last: str = "and") -> str:
    """Join words as a sentence does.

    >>> listed(["R1", "R2", "C1"])
    'R1, R2 and C1'
    """
    items = list(words)
    if len(items) < 2:
        return "".join(items)
    return ", ".join(items[:-1]) + f" {last} " + items[-1]
