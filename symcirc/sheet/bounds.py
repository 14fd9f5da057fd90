"""The bounds on a text, tested before any of it is parsed: hostile text is refused at once."""

from __future__ import annotations

import re

from symcirc.complaints import Complaint, Place, Source

LARGEST_FILE = 1_000_000
DEEPEST_BRACKETS = 100
#: Words and signs in a text; a ladder of 5,000 sections with all its values fixed has 100,000.
MOST_WORDS = 120_000
#: Signs of arithmetic in a text.
MOST_OPERATORS = 20_000
#: Square roots, pi, dB and rad in a text: what takes time to be kept exact.
MOST_IRRATIONAL = 1_000
#: Characters of a name (and of the names that blocks in blocks make).
LONGEST_NAME = 200

_PIECES = re.compile(
    r"""
    (?P<comment> \#[^\n]*+ )
  | (?P<end> \n\s*+ )
  | (?P<open> \( )
  | (?P<close> \) )
  | (?P<irrational> \b (?: sqrt | pi | dB | rad ) \b )
  | (?P<word> \w++ )
  | "[^"\n]*" | --
  | (?P<operator> [-+*/^] )
  | [^\s\w]
    """,
    re.VERBOSE,
)


def check_bounds(source: Source) -> None:
    """Raise Complaint where a text is too long, has too many words, too long ones, or brackets too deep.

    >>> try:
    ...     check_bounds(Source("a.stage", "(" * 101))
    ... except Complaint as complaint:
    ...     print(complaint.cause)
    brackets are nested more than 100 deep here
    """
    if len(source.text) > LARGEST_FILE:
        raise refuse_length(source)
    depth = words = operators = irrational = 0
    for piece in _PIECES.finditer(source.text):
        kind = piece.lastgroup
        if kind == "comment":
            continue
        if kind == "end":
            depth = 0
            continue
        words += 1
        depth += (kind == "open") - (kind == "close")
        operators += kind == "operator"
        irrational += kind == "irrational"
        if kind == "word" and piece.end() - piece.start() > LONGEST_NAME:
            raise _beyond(source, piece, f"this word has more than {LONGEST_NAME} characters", "shorten it")
        if depth > DEEPEST_BRACKETS:
            cause = f"brackets are nested more than {DEEPEST_BRACKETS} deep here"
            raise _beyond(source, piece, cause, "give inner parts names of their own")
        if irrational > MOST_IRRATIONAL or operators > MOST_OPERATORS:
            too_many = "signs of arithmetic" if operators > MOST_OPERATORS else "square roots, pi, dB and rad"
            most = MOST_OPERATORS if operators > MOST_OPERATORS else MOST_IRRATIONAL
            cause = f"this text has more than {most:,} {too_many}"
            raise _beyond(source, piece, cause, "write plain numbers, or names for what returns")
        if words > MOST_WORDS:
            cause = f"this text has more than {MOST_WORDS:,} words and signs"
            raise _beyond(source, piece, cause, "ask about a smaller piece of the circuit")


def refuse_length(source: Source) -> Complaint:
    """Return the complaint about a text that is too long."""
    return Complaint(
        Place(1, 1, 2, source),
        f"this text has more than {LARGEST_FILE:,} characters",
        "ask about a smaller piece of the circuit",
    )


def _beyond(source: Source, piece: re.Match[str], cause: str, mend: str) -> Complaint:
    offset = piece.start()
    line = source.text.count("\n", 0, offset) + 1
    column = offset - source.text.rfind("\n", 0, offset)
    return Complaint(Place(line, column, column + len(piece.group()), source), cause, mend)
