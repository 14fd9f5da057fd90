r"""The display mathematics of a LaTeX file as lines of a working, every character with its place.

Read are the environments equation, align and gather, starred or not, with split, aligned and gathered in them,
``\[ \]`` and ``$$``; in them ``\frac``, ``\dfrac``, ``\tfrac``, ``\sqrt``, subscripts, whole exponents, ``\left``,
``\right``, ``\bigl`` and the like, ``\cdot``, ``\times``, ``\parallel``, ``\omega``, ``\pi``, names as
``symcirc.transfer.latex`` writes them, spaces and alignment. A row that is ``\text{under } NAME`` or
``\text{under NAME}`` alone says under which ask's drives the rows after it stand. Whatever else stands in a row makes
that row unread, with the place: nothing is guessed.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import NamedTuple

from symcirc.complaints import Complaint, Place, Source
from symcirc.transfer.latex import PARAMETERS
from symcirc.working.written import Written

_OPENING = re.compile(r"\\begin\{((?:equation|align|gather)\*?)\}|\\\[|\$\$")
#: What says how large the bracket behind it is.
_SIZE = re.compile(r"\\(?:left|right|[bB]igg?[lr]?)")
#: What is no mathematics: comments, labels and the like.
_ASIDE = re.compile(
    r"(?<!\\)%[^\n]*|\\(?:label|tag)\{[^{}\n]*\}|\\(?:nonumber|notag|displaystyle)(?![A-Za-z])"
    r"|\\(?:begin|end)\{(?:split|aligned|gathered)\}"
)
_TOKEN = re.compile(
    r"\\\\(?:\[[^\]\n]*\])?|\\[A-Za-z]+|\\.|[A-Za-z]+|[0-9]+\.?[0-9]*|\.[0-9]+|\s+|.", re.DOTALL
)
_SPACE = {"\\,", "\\;", "\\:", "\\!", "\\ ", "~", "&", "\\quad", "\\qquad"}
_SIGNS = {"\\cdot": "*", "\\times": "*", "\\parallel": "||", "\\|": "||"}
_SIGNS |= {"[": "(", "]": ")", "\\pi": " pi ", "−": "-"}
_PLAIN = set("()+-*/=|")
_FRACTIONS = {"\\frac", "\\dfrac", "\\tfrac"}
_UPRIGHT = {"\\mathrm", "\\text", "\\mathit"}
#: What a name outside a subscript may stand in; what stands in ``\text`` there is prose.
_NAMING = {"\\mathrm", "\\mathit"}
#: How a row begins that names an ask. ``\mathrm{under}`` with no space in it is a parameter of that name.
_UNDER = re.compile(r"[\s&]*\\(?:text\s*\{\s*under(?![A-Za-z0-9])|mathrm\s*\{\s*under(?=[\s~]))")
_UNDER_LINE = re.compile(r"under [A-Za-z][A-Za-z0-9_]*")
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
    """What is written so far: characters, and the offsets of what each stands for in the file."""

    characters: list[str] = field(default_factory=list)
    spans: list[tuple[int, int]] = field(default_factory=list)

    def write(self, text: str, start: int, end: int) -> None:
        self.characters += text
        self.spans += [(start, end)] * len(text)

    def copy(self, text: str, start: int) -> None:
        """Write what stands at an offset as it is."""
        self.characters += text
        self.spans += [(start + k, start + k + 1) for k in range(len(text))]


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
    lines: list[Written] = []
    for start, end in _displays(text):
        for row in _joined(_rows(_tokens(text[start:end], start))):
            written = _written(row, source)
            if written is not None:
                lines.append(written)
    return tuple(lines)


def is_latex(text: str) -> bool:
    r"""Tell whether a text has displayed mathematics in it.

    >>> is_latex(r"\[ V_a = V_b \]"), is_latex("V_a = V_b")
    (True, False)
    """
    return _OPENING.search(text) is not None


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
    """Join to the row above what continues it: a row that begins with ``=``, or holds no ``=`` at all.

    A row that names an ask continues nothing, and nothing continues it.
    """
    joined: list[list[_Token]] = []
    is_open = False
    for row in map(_without_stop, rows):
        texts = [t.text for t in row if not _is_space(t)]
        if not texts:
            continue
        names_ask = _is_under(row)
        if is_open and not names_ask and (texts[0] == "=" or "=" not in texts):
            joined[-1].extend(row)
        else:
            joined.append(row)
            is_open = not names_ask
    return joined


def _is_under(row: list[_Token]) -> bool:
    return _UNDER.match("".join(t.text for t in row)) is not None


def _is_space(token: _Token) -> bool:
    return token.text.isspace() or token.text in _SPACE


def _without_stop(row: list[_Token]) -> list[_Token]:
    """Return a row without the comma or full stop that ends it as a sentence."""
    kept = list(row)
    while kept and (_is_space(kept[-1]) or kept[-1].text in (",", ".", ";")):
        kept.pop()
    return kept


def _written(row: list[_Token], source: Source) -> Written | None:
    first_line = source.spot(next(t.offset for t in row if not t.text.isspace()))[0]
    out = _Row()
    try:
        if len(row) > MOST_TOKENS:
            raise _Trouble(row[0].offset, 1, "this row is too long", "give its pieces names of their own")
        _Translator(row, out).run()
    except _Trouble as trouble:
        line, column = source.spot(trouble.offset)
        place = Place(line, column, column + trouble.length, source)
        raw = " ".join("".join(t.text for t in row).split())
        return Written(raw, first_line, source, (), Complaint(place, trouble.cause, trouble.mend))
    text = "".join(out.characters)
    kept = len(text.rstrip())
    lead = len(text) - len(text.lstrip())
    text, spans = text[lead:kept], out.spans[lead:kept]
    return Written(text, first_line, source, tuple(spans)) if text else None


class _Translator:
    """Writes one row's tokens as plain text."""

    def __init__(self, tokens: list[_Token], out: _Row) -> None:
        self.tokens = list(tokens)
        self.out = out
        self.position = 0
        self.sized = -1  # where a bracket's \\left or \\right stands, when the bracket itself comes next

    def run(self) -> None:
        if _is_under(self.tokens):
            self.under()
        else:
            self.rest()

    def rest(self) -> None:
        while self.position < len(self.tokens):
            self.item(0)

    def under(self) -> None:
        r"""Write ``\text{under NAME}`` or ``\text{under } NAME``, which has to be all of its row."""
        while self.peek() not in _UPRIGHT:
            self.take()
        command = self.take()
        at = command.offset
        while self.take().text != "under":
            pass
        self.out.write("under ", at, self.end())
        while self.peek() and _is_space(self.tokens[self.position]):
            self.take()
        start, name = self.end(), self.letters(at)
        if name:
            self.out.write(f"{name} ", start, self.end() - len("}"))
        self.rest()
        if not _UNDER_LINE.fullmatch("".join(self.out.characters).rstrip()):
            raise _Trouble(
                at, len(command.text), "an ask's name alone belongs after `under`", "give it a row of its own"
            )

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
            return
        if _SIZE.fullmatch(text):
            self.sized = at
            return
        if text in _SIGNS:
            self.out.write(_SIGNS[text], self.sized if self.sized >= 0 else at, at + len(text))
        elif text in _FRACTIONS:
            self.fraction(at, depth)
        elif text == "\\sqrt":
            self.out.write(" sqrt", at, at + len(text))
            self.argument(at, depth)
        elif text == "{":
            self.group(at, depth)
        elif text == "^":
            self.out.copy("^", at)
            self.argument(at, depth)
        elif (text.isascii() and text.isalpha()) or text in _NAMED_LETTERS:
            self.word(token)
        elif text in _NAMING:
            self.upright(token)
        elif text in "()" and self.sized >= 0:
            self.out.write(text, self.sized, at + 1)
        elif text in _PLAIN or text[0].isdigit() or (text[0] == "." and len(text) > 1):
            self.out.copy(text, at)
        else:
            raise _Trouble(
                at, len(text), f"`{text}` is not read in mathematics", "write it in the simpler signs"
            )
        self.sized = -1

    def space(self, at: int) -> None:
        if self.out.characters and self.out.characters[-1] != " ":
            self.out.write(" ", at, at + 1)

    def skip_spaces(self) -> None:
        while self.peek().isspace():
            self.position += 1

    def fraction(self, at: int, depth: int) -> None:
        self.out.write("(", at, at + 1)
        self.argument(at, depth)
        self.out.write("/", at, at + 1)
        self.argument(at, depth)
        self.out.write(")", at, self.end())

    def end(self) -> int:
        """Return the offset behind what was taken last."""
        last = self.tokens[self.position - 1]
        return last.offset + len(last.text)

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
            self.tokens[self.position - 1] = _Token(text[0], token.offset)
            self.tokens.insert(self.position, _Token(text[1:], token.offset + 1))
        self.out.copy(text[0], token.offset)
        self.out.write(" ", token.offset, token.offset + 1)

    def group(self, at: int, depth: int) -> None:
        """Write what stands up to the closing brace, in brackets."""
        if depth >= DEEPEST_GROUPS:
            raise _Trouble(
                at, 1, f"groups are nested more than {DEEPEST_GROUPS} deep here", "name inner parts"
            )
        self.out.write("(", at, at + 1)
        while self.peek() != "}":
            if not self.peek():
                raise _Trouble(at, 1, "this brace is never closed in its row", "close it")
            self.item(depth + 1)
        closing = self.take().offset
        self.out.write(")", closing, closing + 1)

    def word(self, token: _Token) -> None:
        r"""Write letters; a subscript belongs to the last one alone, so that ``sC_1`` is s times C1."""
        text = _NAMED_LETTERS.get(token.text, token.text)
        start = token.offset
        if self.peek() != "_":
            if text == token.text:
                self.out.copy(text, start)
            else:
                self.out.write(f" {text} ", start, start + len(token.text))
            return
        before, last = ("", text) if text != token.text else (text[:-1], text[-1])
        if before:
            self.out.copy(before, start)
            self.out.write(" ", start, start + 1)
            start += len(before)
        self.name(self.indexed(last), start)

    def upright(self, token: _Token) -> None:
        r"""Write a name in upright letters: ``\mathrm{gain}_{\mathrm{U1}}`` is U1_gain, ``\mathrm{r\_min}`` r_min."""
        at, length = token.offset, len(token.text)
        self.skip_spaces()
        if self.peek() != "{":
            raise _Trouble(at, length, "the letters of a name are missing here", "write them in { }")
        self.take()
        self.skip_spaces()
        name = self.letters(at)
        if not name[:1].isalpha():
            raise _Trouble(at, length, "a name begins with a letter", "write numbers without a command")
        if self.peek() == "_":
            if len(name) == 1:
                name = self.indexed(name)
            elif name in PARAMETERS:
                name = "_".join([*self.blocks(self.subscript(), at), name])
            else:
                raise _Trouble(
                    at,
                    length,
                    f"`{name}` is no parameter of a device, and has a subscript",
                    f"a device's are {', '.join(PARAMETERS)}; write other names without a subscript",
                )
        elif len(name) == 1 and name != "j":  # upright as ISO 80000-2 has it
            raise _Trouble(
                at, length, f"`{name}` in upright letters can be a unit", f"write the name as {name}"
            )
        self.name(name, at)

    def name(self, name: str, start: int) -> None:
        """Write a whole name, apart from letters and digits before and behind it."""
        if self.out.characters and (self.out.characters[-1].isalnum() or self.out.characters[-1] == "_"):
            self.out.write(" ", start, start)
        self.out.write(name, start, self.end())
        if self.peek()[:1].isalnum():
            self.out.write(" ", self.end(), self.end())

    def letters(self, at: int) -> str:
        r"""Return the letters, digits and ``\_`` up to the closing brace, spaces before it left out."""
        kept: list[_Token] = []
        while self.peek() != "}":
            if not self.peek():
                raise _Trouble(at, 1, "this brace is never closed in its row", "close it")
            kept.append(self.take())
        self.take()
        while kept and _is_space(kept[-1]):
            kept.pop()
        return "".join(map(_letters, kept))

    def indexed(self, letter: str) -> str:
        """Return the name that a letter with the subscript behind it is: blocks, then what belongs to the letter."""
        at = self.tokens[self.position].offset
        *blocks, index = self.subscript()
        blocks = self.blocks(blocks, at)
        if letter in "VI":
            return "_".join([letter, *blocks, index])
        own = _SHAPE.get((letter, index), letter + index) if not blocks else letter + index
        return "_".join([*blocks, own])

    def blocks(self, names: list[str], at: int) -> list[str]:
        """Return the names of a block, of a block in it and so on."""
        if names and not names[0][0].isalpha():
            raise _Trouble(
                at, 1, f"`{names[0]}` in this subscript is no block's name", "begin it with a letter"
            )
        return names

    def subscript(self) -> list[str]:
        """Return a subscript's letters and digits between its commas; subscripts of its own are part of it."""
        at = self.take().offset  # the _
        self.skip_spaces()
        if self.peek() in _UPRIGHT:
            self.take()
        if self.peek() != "{":
            token = self.take() if self.peek() else _Token("", at)
            if not token.text[:1].isalnum() or not token.text.isascii():
                raise _Trouble(at, 1, "the subscript is missing here", "write it in { }")
            if len(token.text) > 1:
                self.tokens[self.position - 1] = _Token(token.text[0], token.offset)
                self.tokens.insert(self.position, _Token(token.text[1:], token.offset + 1))
            return [token.text[0]]
        return self.braced(at)

    def braced(self, at: int) -> list[str]:
        depth, pieces, is_nested = 0, [""], False
        while True:
            if self.position >= len(self.tokens):
                raise _Trouble(at, 1, "this subscript is never closed in its row", "close it")
            token = self.take()
            depth += (token.text == "{") - (token.text == "}")
            if depth == 0:
                break
            if token.text == "_":
                is_nested = True
            elif token.text == "," and not is_nested:
                pieces.append("")
            elif token.text not in ("{", "}") and not token.text.isspace() and token.text not in _UPRIGHT:
                pieces[-1] += _letters(token)
        if not all(pieces):
            raise _Trouble(at, 1, "the subscript is missing here", "write it in { }")
        return pieces


def _letters(token: _Token) -> str:
    """Return the letters and digits that a piece of a name is."""
    if token.text.isascii() and token.text.isalnum():
        return token.text
    if token.text == "\\_":
        return "_"
    raise _Trouble(token.offset, len(token.text), f"`{token.text}` is not read in a name", "use letters")
