"""One line of a working: from its text to equations, every node of their trees with its place."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Any

from lark import Token
from lark.exceptions import UnexpectedCharacters, UnexpectedToken, VisitError

from symcirc.complaints import Complaint, Place
from symcirc.grammar import parser
from symcirc.sheet.arithmetic import Children, ExpressionReader
from symcirc.sheet.expression import Expression, Name, Product, Reciprocal, Sum
from symcirc.working.names import Lexicon
from symcirc.working.written import Written

#: A line longer than this, or with brackets deeper, is not read.
LONGEST_LINE, DEEPEST_BRACKETS = 10_000, 100
_WITH_S = re.compile(r"([A-Za-z][A-Za-z0-9_]*)(\(\s*s\s*\))")


@dataclass(frozen=True)
class Chain:
    """``a = b = c``: the sides as trees and as they were written."""

    sides: tuple[Expression, ...]
    texts: tuple[str, ...]


@dataclass(frozen=True)
class Let:
    """``let NAME = expression, ...``: each name, its expression, and the text of both."""

    bindings: tuple[tuple[Name, Expression, str], ...]


@dataclass(frozen=True)
class Under:
    """``under NAME``: the ask whose drives apply from here on."""

    ask: Name


Statement = Chain | Let | Under


def parse_line(written: Written, lexicon: Lexicon) -> Statement:
    """Return what a line says; names in its trees are the lexicon's keys, unknown ones as they are written.

    Raises Complaint for a line that cannot be read.
    """
    _check_bounds(written)
    text = _without_s(written.text, lexicon)
    interactive: Any = parser("working").parse_interactive(text)
    try:
        for token in _split_tokens(interactive.lexer_thread.lex(interactive.parser_state), written, lexicon):
            interactive.feed_token(token)
        tree = interactive.feed_eof()
    except UnexpectedCharacters as error:
        raise _explain(written, error.column - 1, text) from None
    except UnexpectedToken as error:
        column = len(text.rstrip()) if error.token.type == "$END" else (error.token.column or 1) - 1
        raise _explain(written, column, text) from None
    try:
        result: Statement = _Reader(written, lexicon).transform(tree)
    except VisitError as error:  # lark wraps what a reader's method raises
        raise error.orig_exc from None
    return result


def _check_bounds(written: Written) -> None:
    if len(written.text) > LONGEST_LINE:
        place = written.place(LONGEST_LINE - 1, LONGEST_LINE)
        raise Complaint(
            place,
            f"this line has more than {LONGEST_LINE:,} characters",
            "give its pieces names of their own",
        )
    depth = 0
    for position, character in enumerate(written.text):
        depth += (character == "(") - (character == ")")
        if depth > DEEPEST_BRACKETS:
            place = written.place(position, position + 1)
            cause = f"brackets are nested more than {DEEPEST_BRACKETS} deep here"
            raise Complaint(place, cause, "give inner parts names of their own")


def _without_s(text: str, lexicon: Lexicon) -> str:
    """Blank the ``(s)`` that stands directly after a quantity's name; columns stay as they are."""

    def blanked(match: re.Match[str]) -> str:
        name, bracket = match.groups()
        is_quantity = name != "sqrt" and lexicon.may_be_followed_by_s(name)
        return name + (" " * len(bracket) if is_quantity else bracket)

    return _WITH_S.sub(blanked, text)


def _split_tokens(tokens: Iterator[Token], written: Written, lexicon: Lexicon) -> Iterator[Token]:
    """Yield the tokens with names that are run together taken apart; what a ``let`` names is left whole."""
    before, is_let = "", False
    for token in tokens:
        is_let = is_let or token.type == "LET"
        whole = before == "UNDER" or (is_let and before in ("LET", "COMMA"))
        before = token.type
        if token.type != "NAME" or whole:
            yield token
            continue
        column = (token.column or 1) - 1
        for piece in lexicon.split(str(token), written.place(column, column + len(token))):
            yield Token(
                "NAME", piece, line=1, column=column + 1, end_line=1, end_column=column + len(piece) + 1
            )
            column += len(piece)


def _explain(written: Written, position: int, text: str) -> Complaint:
    """Return the complaint about the first thing that the grammar does not expect, at a position of the line."""
    found = re.match(r"[A-Za-z0-9_.]+|.", text[position:])
    place = written.place(position, position + max(1, len(found.group()) if found else 1))
    before = text[:position].rstrip()
    if found is None and "=" not in text:
        return Complaint(place, "there is no `=` in this line", "a line is an equation: a = b")
    if found is None:
        return Complaint(place, "the line ends too early", "finish the expression")
    if found.group()[0].isdigit() and before[-1:].isdigit():
        return Complaint(place, "two numbers stand side by side", "write the product with *")
    if found.group()[0].isdigit() and (before[-1:].isalnum() or before[-1:] in ")_"):
        return Complaint(
            place, f"the number `{found.group()}` stands behind a factor", "write it in front, or with *"
        )
    if found.group() == ")":
        return Complaint(place, "this bracket was never opened", "remove it, or open it before")
    if text.count("(") > text.count(")"):
        return Complaint(
            place, f"`{found.group()}` was not expected inside a bracket", "close the bracket before it"
        )
    return Complaint(place, f"`{found.group()}` was not expected here", "write an equation: a = b")


@dataclass(frozen=True)
class _Implied:
    """A factor that stands behind a space, or directly behind another."""

    factor: Expression


class _Reader(ExpressionReader):
    """One method a rule; tokens' columns are turned into places of the file."""

    def __init__(self, written: Written, lexicon: Lexicon) -> None:
        super().__init__(written.source)
        self._written = written
        self._lexicon = lexicon

    def place(self, token: Token) -> Place:
        """Return the place of a token in the file."""
        column = (token.column or 1) - 1
        return self._written.place(column, column + len(token))

    def expression(self, child: Token | Expression) -> Expression:
        """Return a child as an expression, a name by its key."""
        expression = super().expression(child)
        if not (isinstance(child, Token) and isinstance(expression, Name)):
            return expression
        meaning = self._lexicon.meaning(expression.text)
        return expression if meaning is None else replace(expression, text=meaning.key)

    def implied(self, children: Children) -> _Implied:
        """A factor without a sign of multiplication before it."""
        return _Implied(self.expression(children[0]) if len(children) == 1 else self.power(children))

    def product(self, children: Children) -> Expression:
        """``a*b/c d``, left to right."""
        plain: list[Any] = []
        for child in children:
            if isinstance(child, _Implied):
                plain += [Token("TIMES", "*", line=1, column=1), child.factor]
            else:
                plain.append(child)
        return super().product(plain)

    def parallel(self, children: Children) -> Expression:
        """``a || b``: one over the sum of their reciprocals, all at the place of the whole."""
        branches = [self.expression(child) for child in children[::2]]
        first, last = branches[0].place, branches[-1].place
        place = Place(first.line, first.column, last.end, first.source)
        inverted = tuple(Reciprocal(branch, branch.place) for branch in branches)
        return Product((Reciprocal(Sum(inverted, place), place),), place)

    def binding(self, children: Children) -> tuple[Name, Expression, str]:
        """``NAME = expression``."""
        name, value = self.name(children[0]), self.expression(children[2])
        return name, value, self._written.slice(name.place, value.place)

    def let(self, children: Children) -> Let:
        """A line of definitions."""
        return Let(tuple(child for child in children if isinstance(child, tuple)))

    def under(self, children: Children) -> Under:
        """A change of drives."""
        return Under(self.name(children[1]))

    def chain(self, children: Children) -> Chain:
        """Equalities."""
        sides = tuple(self.expression(child) for child in children[::2])
        return Chain(sides, self._written.sides())

    def start(self, children: Children) -> Statement:
        """The line."""
        statement: Statement = children[0]
        return statement
