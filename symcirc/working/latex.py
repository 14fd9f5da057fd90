r"""The display mathematics of a LaTeX file as lines of a working, every character with its place.

Read are the environments equation, align and gather, starred or not, ``\[ \]`` and ``$$``; in them ``\frac``,
``\dfrac``, ``\tfrac``, ``\sqrt``, subscripts, whole exponents, ``\left \right``, ``\cdot``, ``\times``, ``\parallel``,
``\omega``, ``\pi``, upright letters in a subscript, spaces and alignment. Whatever else stands in a row makes that
row unread, with the place: nothing is guessed.
"""

from __future__ import annotations

import re
from bisect import bisect_right
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import NamedTuple

from symcirc.complaints import Complaint, Place, Source
from symcirc.working.written import Written

_OPENING = re.compile(r"\\begin\{((?:equation|align|gather)\*?)\}|\\\[|\$\$")
#: What is no mathematics: comments, labels and the like.
_ASIDE = re.compile(
    r"(?<!\\)%[^\n]*|\\(?:label|tag)\{[^{}\n]*\}|\\(?:nonumber|notag|displaystyle)(?![A-Za-z])"
)
_TOKEN = re.compile(
    r"\\\\(?:\[[^\]\n]*\])?|\\[A-Za-z]+|\\.|[A-Za-z]+|[0-9]+\.?[0-9]*|\.[0-9]+|\s+|.", re.DOTALL
)
_SPACE = {"\\,", "\\;", "\\:", "\\!", "\\ ", "~", "&", "\\quad", "\\qquad"}
_SIGNS = {"\\cdot": "*", "\\times": "*", "\\parallel": "||", "\\|": "||", "\\left": "", "\\right": ""}
_SIGNS |= {"[": "(", "]": ")", "\\pi": " pi ", "−": "-"}
_PLAIN = set("()+-*/=|")
_FRACTIONS = {"\\frac", "\\dfrac", "\\tfrac"}
_UPRIGHT = {"\\mathrm", "\\text", "\\mathit"}
_NAMED_LETTERS = {"\\omega": "omega"}
#: Names with a subscript that the working's language writes without an underscore.
_SHAPE = {("omega", "0"): "w0", ("f", "0"): "f0"}
DEEPEST_GROUPS = 50
#: A row of more pieces is not read.
MOST_TOKENS = 10_000


class _Token(NamedTuple):
    text: str
    offset: int


@dataclass
class _Row:
    """What is written so far: characters and the offset in the file that each comes from."""

    characters: list[str] = field(default_factory=list)
    offsets: list[int] = field(default_factory=list)

    def write(self, text: str, offset: int) -> None:
        self.characters += text
        self.offsets += [offset] * len(text)

    def copy(self, text: str, offset: int) -> None:
        """Write what stands at an offset as it is."""
        self.characters += text
        self.offsets += range(offset, offset + len(text))


class _Trouble(Exception):
    def __init__(self, offset: int, length: int, cause: str, mend: str) -> None:
        super().__init__(cause)
        self.offset, self.length, self.cause, self.mend = offset, length, cause, mend


def read_latex(source: Source) -> tuple[Written, ...]:
    r"""Return the rows of all displayed equations, as plain text.

    >>> row, = read_latex(Source("a.tex", r"\[ V_{out} = -\frac{R_2}{R_1} V_{in} \]"))
    >>> row.text
    'V_out = -((R2)/(R1)) V_in'
    """
    text = _ASIDE.sub(lambda match: " " * len(match.group()), source.text)
    starts = [0, *(match.end() for match in re.finditer("\n", text))]
    lines: list[Written] = []
    for start, end in _displays(text):
        for row in _joined(_rows(_tokens(text[start:end], start))):
            written = _written(row, source, starts)
            if written is not None:
                lines.append(written)
    return tuple(lines)


def _displays(text: str) -> Iterator[tuple[int, int]]:
    """Yield where the displayed mathematics begin and end; one that is never closed is none."""
    position = 0
    unclosed: set[str] = set()
    while (opening := _OPENING.search(text, position)) is not None:
        position = opening.end()
        closing = {"\\[": "\\]", "$$": "$$"}.get(opening.group(), f"\\end{{{opening.group(1)}}}")
        end = -1 if closing in unclosed else text.find(closing, position)
        if end < 0:
            unclosed.add(closing)
            continue
        yield position, end
        position = end + len(closing)


def _tokens(body: str, start: int) -> list[_Token]:
    return [_Token(match.group(), start + match.start()) for match in _TOKEN.finditer(body)]


def _rows(tokens: list[_Token]) -> list[list[_Token]]:
    rows: list[list[_Token]] = [[]]
    for token in tokens:
        if token.text.startswith("\\\\"):
            rows.append([])
        else:
            rows[-1].append(token)
    return rows


def _joined(rows: list[list[_Token]]) -> list[list[_Token]]:
    """Join to the row above what continues it: a row that begins with ``=``, or holds no ``=`` at all."""
    joined: list[list[_Token]] = []
    for row in map(_without_stop, rows):
        texts = [t.text for t in row if not _is_space(t)]
        if not texts:
            continue
        if joined and (texts[0] == "=" or "=" not in texts):
            joined[-1].extend(row)
        else:
            joined.append(row)
    return joined


def _is_space(token: _Token) -> bool:
    return token.text.isspace() or token.text in _SPACE


def _without_stop(row: list[_Token]) -> list[_Token]:
    """Return a row without the comma or full stop that ends it as a sentence."""
    kept = list(row)
    while kept and (_is_space(kept[-1]) or kept[-1].text in (",", ".", ";")):
        kept.pop()
    return kept


def _written(row: list[_Token], source: Source, starts: list[int]) -> Written | None:
    def spot(offset: int) -> tuple[int, int]:
        line = bisect_right(starts, offset)
        return line, offset - starts[line - 1] + 1

    first_line = spot(next(t.offset for t in row if not t.text.isspace()))[0]
    out = _Row()
    try:
        if len(row) > MOST_TOKENS:
            raise _Trouble(row[0].offset, 1, "this row is too long", "give its pieces names of their own")
        _Translator(row, out).run()
    except _Trouble as trouble:
        line, column = spot(trouble.offset)
        place = Place(line, column, column + trouble.length, source)
        raw = " ".join("".join(t.text for t in row).split())
        return Written(raw, first_line, source, (), Complaint(place, trouble.cause, trouble.mend))
    text = "".join(out.characters)
    kept = len(text.rstrip())
    lead = len(text) - len(text.lstrip())
    text, offsets = text[lead:kept], out.offsets[lead:kept]
    return Written(text, first_line, source, tuple(spot(o) for o in offsets)) if text else None


class _Translator:
    """Writes one row's tokens as plain text."""

    def __init__(self, tokens: list[_Token], out: _Row) -> None:
        self.tokens = list(tokens)
        self.out = out
        self.position = 0

    def run(self) -> None:
        while self.position < len(self.tokens):
            self.item(0)

    def peek(self) -> str:
        return self.tokens[self.position].text if self.position < len(self.tokens) else ""

    def take(self) -> _Token:
        token = self.tokens[self.position]
        self.position += 1
        return token

    def item(self, depth: int) -> None:
        """Write the next thing: a sign, a number, a name with its subscript, a fraction, a root, a group."""
        token = self.take()
        text, at = token.text, token.offset
        if _is_space(token):
            self.space(at)
        elif text in _SIGNS:
            self.out.write(_SIGNS[text], at)
        elif text in _FRACTIONS:
            self.fraction(at, depth)
        elif text == "\\sqrt":
            self.out.write(" sqrt", at)
            self.argument(at, depth)
        elif text == "{":
            self.group(at, depth)
        elif text == "^":
            self.out.copy("^", at)
            self.argument(at, depth)
        elif (text.isascii() and text.isalpha()) or text in _NAMED_LETTERS:
            self.word(token)
        elif text in _PLAIN or text[0].isdigit() or (text[0] == "." and len(text) > 1):
            self.out.copy(text, at)
        else:
            raise _Trouble(
                at, len(text), f"`{text}` is not read in mathematics", "write it in the simpler signs"
            )

    def space(self, at: int) -> None:
        if self.out.characters and self.out.characters[-1] != " ":
            self.out.write(" ", at)

    def skip_spaces(self) -> None:
        while self.peek().isspace():
            self.position += 1

    def fraction(self, at: int, depth: int) -> None:
        self.out.write("(", at)
        self.argument(at, depth)
        self.out.write("/", at)
        self.argument(at, depth)
        self.out.write(")", at)

    def argument(self, at: int, depth: int) -> None:
        """Write the argument of a command in brackets: a group, or one letter or digit."""
        self.skip_spaces()
        text = self.peek()
        if text == "{":
            self.group(self.take().offset, depth)
            return
        if not text or not text[0].isalnum():
            raise _Trouble(at, 1, "the argument of a command is missing here", "write it in { }")
        token = self.take()
        if len(text) > 1:  # only the first letter or digit belongs to the command
            self.tokens.insert(self.position, _Token(text[1:], token.offset + 1))
        self.out.copy(text[0], token.offset)
        self.out.write(" ", token.offset)

    def group(self, at: int, depth: int) -> None:
        """Write what stands up to the closing brace, in brackets."""
        if depth >= DEEPEST_GROUPS:
            raise _Trouble(
                at, 1, f"groups are nested more than {DEEPEST_GROUPS} deep here", "name inner parts"
            )
        self.out.write("(", at)
        while self.peek() != "}":
            if not self.peek():
                raise _Trouble(at, 1, "this brace is never closed in its row", "close it")
            self.item(depth + 1)
        self.out.write(")", self.take().offset)

    def word(self, token: _Token) -> None:
        r"""Write letters; a subscript belongs to the last one alone, so that ``sC_1`` is s times C1."""
        text = _NAMED_LETTERS.get(token.text, token.text)
        if self.peek() != "_":
            self.out.copy(token.text, token.offset) if text == token.text else self.out.write(
                f" {text} ", token.offset
            )
            return
        before, last = ("", text) if text != token.text else (text[:-1], text[-1])
        if before:
            self.out.copy(before, token.offset)
            self.out.write(" ", token.offset)
        subscript = self.subscript()
        name = _SHAPE.get((last, subscript)) or (
            f"{last}_{subscript}" if last in "VI" else f"{last}{subscript}"
        )
        if self.out.characters and self.out.characters[-1].isalnum() and not before:
            self.out.write(" ", token.offset)
        self.out.write(name, token.offset + len(before))
        if self.peek()[:1].isalnum():
            self.out.write(" ", token.offset)

    def subscript(self) -> str:
        """Return a subscript's letters and digits; subscripts of its own are part of it."""
        at = self.take().offset  # the _
        self.skip_spaces()
        if self.peek() in _UPRIGHT:
            self.take()
        if self.peek() != "{":
            token = self.take() if self.peek() else _Token("", at)
            if not token.text[:1].isalnum() or not token.text.isascii():
                raise _Trouble(at, 1, "the subscript is missing here", "write it in { }")
            if len(token.text) > 1:
                self.tokens.insert(self.position, _Token(token.text[1:], token.offset + 1))
            return token.text[0]
        return self.braced(at)

    def braced(self, at: int) -> str:
        depth, letters = 0, ""
        while True:
            if self.position >= len(self.tokens):
                raise _Trouble(at, 1, "this subscript is never closed in its row", "close it")
            token = self.take()
            depth += (token.text == "{") - (token.text == "}")
            if depth == 0:
                break
            if token.text.isascii() and token.text.isalnum():
                letters += token.text
            elif token.text not in "{}_ " and token.text not in _UPRIGHT:
                raise _Trouble(
                    token.offset, len(token.text), f"`{token.text}` is not read in a subscript", "use letters"
                )
        if not letters:
            raise _Trouble(at, 1, "the subscript is missing here", "write it in { }")
        return letters
