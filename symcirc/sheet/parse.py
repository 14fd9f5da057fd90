"""From text to statements: the grammar's tree turned at once into records with places."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any, NoReturn

from lark import Token, Transformer_NonRecursive, v_args
from lark.exceptions import UnexpectedInput, VisitError

from symcirc.complaints import Complaint, Place, Source
from symcirc.grammar import parser
from symcirc.sheet import statements as st
from symcirc.sheet.expression import (
    LARGEST_EXPONENT,
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
)
from symcirc.sheet.model import Value
from symcirc.sheet.quantity import in_range, read_code, read_number, read_unit
from symcirc.sheet.syntax import explain

if TYPE_CHECKING:
    from lark.tree import Meta

LARGEST_FILE = 1_000_000
DEEPEST_BRACKETS = 100


def parse_sheet(source: Source) -> tuple[st.Statement, ...]:
    """Return the statements of a sheet.

    Raises Complaint at the first place that is not the sheet's language, or beyond its bounds on size and depth.

    >>> statement, = parse_sheet(Source("a.stage", "choose C1, k"))
    >>> [name.text for name in statement.names]
    ['C1', 'k']
    """
    check_bounds(source)
    try:
        tree = parser("sheet").parse(source.text + "\n")
    except UnexpectedInput as error:
        raise explain(error, source) from None
    try:
        result: tuple[st.Statement, ...] = _Reader(source).transform(tree)
    except VisitError as error:  # lark wraps what a reader's method raises
        raise error.orig_exc from None
    return result


def check_bounds(source: Source) -> None:
    """Raise Complaint where a text is too long or its brackets too deep, before any of it is parsed."""
    if len(source.text) > LARGEST_FILE:
        raise Complaint(
            Place(1, 1, 2, source),
            "this text has more than 1,000,000 characters",
            "split it into several sheets",
        )
    depth, line, start = 0, 1, 0
    for match in re.finditer(r'"[^"\n]*"|#[^\n]*|[()\n]', source.text):
        mark = match.group()
        if mark == "\n":
            depth, line, start = 0, line + 1, match.end()
        elif mark == "(":
            depth += 1
            if depth > DEEPEST_BRACKETS:
                column = match.start() - start + 1
                raise Complaint(
                    Place(line, column, column + 1, source),
                    f"brackets are nested more than {DEEPEST_BRACKETS} deep here",
                    "give inner parts names of their own",
                )
        elif mark == ")":
            depth -= 1


@v_args(meta=True)
class _Reader(Transformer_NonRecursive[Token, Any]):
    """One method a grammar rule; children arrive as tokens or as the records made below them."""

    def __init__(self, source: Source) -> None:
        super().__init__()
        self._source = source

    def _place(self, meta: Meta | Token) -> Place:
        line, column = meta.line or 1, meta.column or 1
        end = meta.end_column if meta.end_line == line and meta.end_column else column + 1
        return Place(line, column, end, self._source)

    def _name(self, token: Token) -> Name:
        return Name(str(token), self._place(token))

    def _names(self, children: list[Any]) -> tuple[Name, ...]:
        return tuple(
            self._name(c) for c in children if isinstance(c, Token) and c.type in ("NAME", "NODE_WORD")
        )

    # expressions -----------------------------------------------------------------------------------------------

    def sum(self, meta: Meta, children: list[Any]) -> Expression:
        terms = [children[0]]
        for sign, term in zip(children[1::2], children[2::2], strict=True):
            terms.append(Negative(term, self._place(sign)) if sign.type == "MINUS" else term)
        return terms[0] if len(terms) == 1 else Sum(tuple(terms), self._place(meta))

    def product(self, meta: Meta, children: list[Any]) -> Expression:
        factors = [children[0]]
        for sign, factor in zip(children[1::2], children[2::2], strict=True):
            factors.append(Reciprocal(factor, self._place(sign)) if sign.type == "OVER" else factor)
        return factors[0] if len(factors) == 1 else Product(tuple(factors), self._place(meta))

    def signed(self, meta: Meta, children: list[Any]) -> Expression:
        operand: Expression = children[-1]
        minus = sum(1 for sign in children[:-1] if sign.type == "MINUS") % 2
        return Negative(operand, self._place(meta)) if minus else operand

    def power(self, meta: Meta, children: list[Any]) -> Expression:
        base: Expression = children[0]
        exponent = children[-1]
        if exponent is None:
            return base
        signs = [c for c in children[2:-1] if isinstance(c, Token)]
        return Power(base, self._exponent(exponent, signs), self._place(meta))

    def _exponent(self, exponent: Expression, signs: list[Token]) -> int:
        sign = -1 if sum(1 for s in signs if s.type == "MINUS") % 2 else 1
        while isinstance(exponent, Negative):
            sign, exponent = -sign, exponent.operand
        if not isinstance(exponent, Number) or exponent.value.denominator != 1:
            raise Complaint(
                exponent.place,
                "an exponent must be a whole number",
                "write a root as sqrt(...), a power as x^2",
            )
        if exponent.value > LARGEST_EXPONENT:
            raise Complaint(
                exponent.place,
                f"exponents larger than {LARGEST_EXPONENT} are refused",
                f"use an exponent from -{LARGEST_EXPONENT} to {LARGEST_EXPONENT}",
            )
        return sign * int(exponent.value)

    def atom(self, meta: Meta, children: list[Any]) -> Expression:
        child = children[0]
        if not isinstance(child, Token):
            return child  # type: ignore[no-any-return]  # a bracket or a root, already an Expression
        place = self._place(child)
        return (
            Number(read_number(str(child), place), place)
            if child.type == "NUMBER"
            else Name(str(child), place)
        )

    def root(self, meta: Meta, children: list[Any]) -> Expression:
        return Root(children[2], self._place(meta))

    def bracket(self, meta: Meta, children: list[Any]) -> Expression:
        return children[1]  # type: ignore[no-any-return]  # an Expression

    # values ----------------------------------------------------------------------------------------------------

    def value(self, meta: Meta, children: list[Any]) -> Value:
        first, unit = children[0], children[1] if len(children) > 1 else None
        place = self._place(meta)
        if isinstance(first, Token):
            return self._coded(first)
        if unit is None:
            return Value(first, None, place)
        sign, number = (-1, first.operand) if isinstance(first, Negative) else (1, first)
        if not isinstance(number, Number):
            raise Complaint(
                self._place(unit),
                "a unit stands behind a plain number only",
                "write the expression in SI base units, without a unit",
            )
        return self._measured(sign, number, unit, place)

    def measure(self, meta: Meta, children: list[Any]) -> Value:
        if len(children) == 1:
            return self._coded(children[0])
        minus, token, unit = children
        number = Number(read_number(str(token), self._place(token)), self._place(token))
        return self._measured(-1 if minus else 1, number, unit, self._place(meta))

    def _coded(self, token: Token) -> Value:
        place = self._place(token)
        amount, letter = read_code(str(token), place)
        return Value(Number(amount, place), None, place, letter)

    def _measured(self, sign: int, number: Number, unit: Token | None, place: Place) -> Value:
        factor, name = 1, None
        if unit is not None:
            line = self._source.line(number.place.line)
            written = line[number.place.column - 1 : number.place.end - 1]
            factor, name = read_unit(str(unit), written, self._place(unit))
        amount = in_range(sign * number.value * factor, place)
        return Value(Number(amount, place), name, place)

    # the circuit -----------------------------------------------------------------------------------------------

    def stage(self, meta: Meta, children: list[Any]) -> st.StageLine:
        return st.StageLine(str(children[1])[1:-1], self._place(meta))

    def chain(self, meta: Meta, children: list[Any]) -> st.Chain:
        return st.Chain(self._names(children), self._place(children[0]))

    def device(self, meta: Meta, children: list[Any]) -> st.DeviceLine:
        items = [c for c in children[2:] if not isinstance(c, Token)]
        return st.DeviceLine(
            self._name(children[0]),
            self._name(children[1]),
            tuple(item for tag, item in items if tag == "terminal"),
            tuple(item for tag, item in items if tag == "parameter"),
            tuple(item for tag, item in items if tag == "sign"),
            self._place(children[0]),
        )

    def terminal(self, meta: Meta, children: list[Any]) -> tuple[str, object]:
        return "terminal", (
            self._name(children[0]),
            tuple(self._name(c) for c in children[1:] if c is not None),
        )

    def parameter(self, meta: Meta, children: list[Any]) -> tuple[str, object]:
        return "parameter", (self._name(children[0]), children[1])

    def polarity(self, meta: Meta, children: list[Any]) -> tuple[str, object]:
        return "sign", (1 if children[1].type == "PLUS" else -1, self._place(meta))

    def block(self, meta: Meta, children: list[Any]) -> st.Block:
        name, *ports = self._names(children)
        body = tuple(c for c in children if not isinstance(c, Token))
        return st.Block(name, tuple(ports), body, name.place)

    def use(self, meta: Meta, children: list[Any]) -> st.UseLine:
        block, name, *nodes = self._names(children)
        return st.UseLine(block, name, tuple(nodes), self._place(meta))

    def setting(self, meta: Meta, children: list[Any]) -> st.Setting:
        return st.Setting(self._name(children[0]), children[2])

    def fix(self, meta: Meta, children: list[Any]) -> st.FixLine:
        return st.FixLine(tuple(c for c in children if isinstance(c, st.Setting)), self._place(meta))

    def choose(self, meta: Meta, children: list[Any]) -> st.ChooseLine:
        return st.ChooseLine(self._names(children), self._place(meta))

    def solve(self, meta: Meta, children: list[Any]) -> st.SolveLine:
        return st.SolveLine(self._names(children), self._place(meta))

    # what is asked ---------------------------------------------------------------------------------------------

    def quantity(self, meta: Meta, children: list[Any]) -> st.RawQuantity:
        first, *rest = [self._name(c) for c in children if c is not None and c.type == "QUANTITY"]
        return st.RawQuantity(first, rest[0] if rest else None, self._place(meta))

    def ratio(self, meta: Meta, children: list[Any]) -> tuple[st.RawQuantity, st.RawQuantity]:
        return children[0], children[2]

    def loop(self, meta: Meta, children: list[Any]) -> Name:
        return self._name(children[2])

    def condition(self, meta: Meta, children: list[Any]) -> st.Condition:
        zero = read_number(str(children[2]), self._place(children[2])) == 0
        return st.Condition(self._name(children[0]), zero, self._place(meta))

    def dead(self, meta: Meta, children: list[Any]) -> tuple[st.Condition, ...]:
        return tuple(c for c in children if isinstance(c, st.Condition))

    def driven(self, meta: Meta, children: list[Any]) -> st.UseLine | Name:
        return self._name(children[2])

    def ask(self, meta: Meta, children: list[Any]) -> st.AskLine:
        what, modifiers = children[3], children[4:]
        over, under = what if isinstance(what, tuple) else (None, None)
        return st.AskLine(
            self._name(children[1]),
            over,
            under,
            what if isinstance(what, Name) else None,
            tuple(c for m in modifiers if isinstance(m, tuple) for c in m),
            tuple(m for m in modifiers if isinstance(m, Name)),
            self._place(meta),
        )

    # what it must be -------------------------------------------------------------------------------------------

    def shape(self, meta: Meta, children: list[Any]) -> tuple[Name, ...]:
        return tuple(self._name(c) for c in children if c is not None)

    def requirement(self, meta: Meta, children: list[Any]) -> tuple[Name, Value, Value | None]:
        return self._name(children[0]), children[1], children[3]

    def edges(self, meta: Meta, children: list[Any]) -> tuple[Value, Value, Place]:
        return children[1], children[2], self._place(meta)

    def meet(self, meta: Meta, children: list[Any]) -> str:
        return "meet"

    def target(self, meta: Meta, children: list[Any]) -> st.TargetLine:
        rest = [c for c in children[2:] if not isinstance(c, Token)]
        written = children[2].type == "EQUALS"
        items = [] if written else rest[1:]
        return st.TargetLine(
            self._name(children[1]),
            () if written else rest[0],
            tuple(i for i in items if isinstance(i, tuple) and isinstance(i[0], Name)),
            tuple(i for i in items if isinstance(i, tuple) and isinstance(i[0], Value)),
            "meet" in items,
            rest[0] if written else None,
            self._place(children[1]),
        )

    def between(self, meta: Meta, children: list[Any]) -> tuple[Value | None, Value | None]:
        return children[1], children[3]

    def below(self, meta: Meta, children: list[Any]) -> tuple[Value | None, Value | None]:
        return None, children[1]

    def above(self, meta: Meta, children: list[Any]) -> tuple[Value | None, Value | None]:
        return children[1], None

    def limit(self, meta: Meta, children: list[Any]) -> st.LimitLine:
        loss, (low, high) = children[5], children[6]
        return st.LimitLine(self._name(children[1]), str(children[4]), loss, low, high, self._place(meta))

    def parts(self, meta: Meta, children: list[Any]) -> st.PartsLine:
        kind, series = self._name(children[1]), self._name(children[3])
        tolerance = children[4]
        low, high = children[7], children[9]
        return st.PartsLine(kind, series, tolerance, low, high, self._place(meta))

    def note(self, meta: Meta, children: list[Any]) -> st.NoteLine:
        return st.NoteLine(str(children[1])[1:-1], self._place(meta))

    def start(self, meta: Meta, children: list[Any]) -> tuple[st.Statement, ...]:
        return tuple(c for c in children if not isinstance(c, Token))

    def __default__(self, data: Any, children: list[Any], meta: Meta) -> NoReturn:
        raise TypeError(f"the grammar has a rule without a reader: {data}")
