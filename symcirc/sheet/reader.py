"""From the trees of ``grammars/sheet.lark`` to statements, each with its place."""

from __future__ import annotations

import re
from dataclasses import replace
from fractions import Fraction
from typing import Any, NoReturn

from lark import Token

from symcirc.complaints import Complaint, Place
from symcirc.sheet import statements as st
from symcirc.sheet.arithmetic import Children, ExpressionReader
from symcirc.sheet.expression import Expression, Name, Negative, Number
from symcirc.sheet.model import Value
from symcirc.sheet.quantity import CODE_TAIL, LONGEST_NUMBER, in_range, read_code, read_number, read_unit


class SheetReader(ExpressionReader):
    """One method a rule of the sheet's grammar."""

    def _names(self, children: Children) -> tuple[Name, ...]:
        """Return the names among the children of a list (words and punctuation aside)."""
        return tuple(self.name(c) for c in children if _is(c, "NAME", "NODE_WORD"))

    # values -------------------------------------------------------------------------------------------------

    def value(self, children: Children) -> Value:
        """A value: a code, or an expression with or without a unit."""
        first, unit = children[0], children[1] if len(children) == 2 else None
        if _is(first, "CODE"):
            return self._coded(first)
        expression = self.expression(first)
        if unit is None:
            return Value(expression, None, expression.place)
        number = expression.operand if isinstance(expression, Negative) else expression
        self._refuse_code_in_arithmetic(unit)
        if not isinstance(number, Number):
            raise _unit_behind_expression(self.name(unit), expression)
        return self._measured(expression is not number, number, unit, expression.place)

    def _refuse_code_in_arithmetic(self, unit: Token) -> None:
        """Raise Complaint for a value code behind a sign, which is read as a number with an odd unit."""
        place = self.place(unit)
        start = max(0, place.end - 2 * LONGEST_NUMBER)
        code = re.search(
            rf"(?<![\w.])[0-9]+{CODE_TAIL}$", self.source.line(place.line)[start : place.end - 1]
        )
        if code:
            raise Complaint(
                replace(place, column=start + code.start() + 1),
                f"`{code.group()}` is a value code, and a value code stands alone, without a sign",
                "write plain numbers in arithmetic, in SI base units, as in -4700",
            )

    def measure(self, children: Children) -> Value:
        """A number with or without a unit, or a code."""
        if len(children) == 1:
            return self._coded(children[0])
        minus, token, unit = children
        place = self.place(token)
        number = Number(read_number(str(token), place), place)
        start = place if minus is None else replace(place, column=self.place(minus).column)
        return self._measured(minus is not None, number, unit, start)

    def _coded(self, token: Token) -> Value:
        place = self.place(token)
        amount, letter = read_code(str(token), place)
        return Value(Number(amount, place), None, place, letter)

    def _measured(self, negative: bool, number: Number, unit: Token | None, place: Place) -> Value:
        factor, name = Fraction(1), None
        if unit is not None:
            at = self.place(unit)
            line = self.source.line(place.line)
            written = line[number.place.column - 1 : at.column - 1]
            factor, name = read_unit(str(unit), written, at)
            place = replace(place, end=at.end)
        amount = in_range((-1 if negative else 1) * number.value * factor, place)
        return Value(Number(amount, place), name, place)

    # the circuit --------------------------------------------------------------------------------------------

    def stage(self, children: Children) -> st.StageLine:
        """``stage "title"``."""
        return st.StageLine(str(children[1])[1:-1], self.place(children[0]))

    def chain(self, children: Children) -> st.Chain:
        """``node -- part -- node``."""
        return st.Chain(self._names(children))

    def device(self, children: Children) -> st.DeviceLine:
        """``NAME KIND: terminal, parameter``."""
        return st.DeviceLine(
            self.name(children[0]),
            self.name(children[1]),
            tuple(c for c in children if isinstance(c, st.Terminal)),
            tuple(c for c in children if isinstance(c, st.Parameter)),
            tuple(c for c in children if isinstance(c, st.Sign)),
        )

    def terminal(self, children: Children) -> st.Terminal:
        """``role node node``."""
        return st.Terminal(self.name(children[0]), tuple(self.name(c) for c in children[1:]))

    def parameter(self, children: Children) -> st.Parameter:
        """``word value``."""
        return st.Parameter(self.name(children[0]), children[1])

    def polarity(self, children: Children) -> st.Sign:
        """``sign +``."""
        return st.Sign(1 if _is(children[1], "PLUS") else -1, self.place(children[0]))

    def block(self, children: Children) -> st.Block:
        """``block NAME (port, ...)`` to ``end``."""
        name, *ports = self._names(children)
        body = tuple(c for c in children if not isinstance(c, Token))
        return st.Block(name, tuple(ports), body)

    def use(self, children: Children) -> st.UseLine:
        """``use BLOCK as NAME (node, ...)``."""
        block, name, *nodes = self._names(children)
        return st.UseLine(block, name, tuple(nodes))

    def setting(self, children: Children) -> st.Setting:
        """``NAME = value``."""
        return st.Setting(self.name(children[0]), children[2])

    def fix(self, children: Children) -> st.FixLine:
        """``fix setting, ...``."""
        return st.FixLine(tuple(c for c in children if isinstance(c, st.Setting)))

    def choose(self, children: Children) -> st.ChooseLine:
        """``choose NAME, ...``."""
        return st.ChooseLine(self._names(children))

    def solve(self, children: Children) -> st.SolveLine:
        """``solve NAME, ...``."""
        return st.SolveLine(self._names(children))

    # what is asked ------------------------------------------------------------------------------------------

    def quantity(self, children: Children) -> st.RawQuantity:
        """``V_n``, ``I_n`` or ``(V_n - V_m)``."""
        first, *rest = [self.name(c) for c in children if _is(c, "QUANTITY")]
        last = first if len(children) == 1 else self.name(children[-1])
        place = replace(self.place(children[0]), end=last.place.end)
        return st.RawQuantity(first, rest[0] if rest else None, place)

    def ratio(self, children: Children) -> st.Ratio:
        """``quantity/quantity``."""
        return st.Ratio(children[0], children[2])

    def loop(self, children: Children) -> st.Loop:
        """``loop(NAME)``."""
        return st.Loop(self.name(children[2]))

    def condition(self, children: Children) -> st.Condition:
        """``V_n = 0``."""
        quantity, number = self.name(children[0]), self.expression(children[2])
        is_zero = isinstance(number, Number) and number.value == 0
        return st.Condition(quantity, is_zero, replace(quantity.place, end=number.place.end))

    def dead(self, children: Children) -> tuple[st.Condition, ...]:
        """``with condition, ...``."""
        return tuple(c for c in children if isinstance(c, st.Condition))

    def driven(self, children: Children) -> Name:
        """``driven at NODE``."""
        return self.name(children[2])

    def ask(self, children: Children) -> st.AskLine:
        """``ask NAME = ...``."""
        modifiers = children[4:]
        return st.AskLine(
            self.name(children[1]),
            children[3],
            tuple(c for m in modifiers if isinstance(m, tuple) for c in m),
            next((m for m in modifiers if isinstance(m, Name)), None),
        )

    # what it must be ----------------------------------------------------------------------------------------

    def shape(self, children: Children) -> tuple[Name, ...]:
        """``KIND FAMILY``."""
        return tuple(self.name(c) for c in children if c is not None)

    def requirement(self, children: Children) -> st.Requirement:
        """``word value``, or ``edge value at value``."""
        return st.Requirement(self.name(children[0]), children[1], children[3])

    def edges(self, children: Children) -> st.Edges:
        """``edges value value``."""
        return st.Edges(children[1], children[2], self.place(children[0]))

    def meet(self, children: Children) -> st.Meet:
        """``meet limits``."""
        return st.Meet(self.place(children[0]))

    def target(self, children: Children) -> st.TargetLine:
        """``target NAME: ...`` or ``target NAME = ...``."""
        name = self.name(children[1])
        if _is(children[2], "EQUALS"):
            return st.FormulaLine(name, self.expression(children[3]))
        return st.ShapeLine(
            name,
            children[3],
            tuple(c for c in children if isinstance(c, st.Requirement)),
            tuple(c for c in children if isinstance(c, st.Edges)),
            tuple(c for c in children if isinstance(c, st.Meet)),
        )

    def between(self, children: Children) -> tuple[Value | None, Value | None]:
        """``from value to value``."""
        return children[1], children[3]

    def below(self, children: Children) -> tuple[Value | None, Value | None]:
        """``below value``."""
        return None, children[1]

    def above(self, children: Children) -> tuple[Value | None, Value | None]:
        """``above value``."""
        return children[1], None

    def limit(self, children: Children) -> st.LimitLine:
        """``limit NAME: loss <= value ...``."""
        loss, (low, high) = children[5], children[6]
        return st.LimitLine(self.name(children[1]), str(children[4]), loss, low, high)

    def parts(self, children: Children) -> st.PartsLine:
        """``parts KIND: SERIES ...`` or ``parts KIND: stock FILE ...``."""
        behind = children[4:]
        return st.PartsLine(
            self.name(children[1]),
            children[3],
            tuple(c for c in behind if isinstance(c, tuple)),
            tuple(self.name(c) for c in behind if _is(c, "PAIRS")),
        )

    def series(self, children: Children) -> st.Series:
        """``SERIES tolerance``."""
        return st.Series(self.name(children[0]), children[1])

    def stock(self, children: Children) -> st.Stock:
        """``stock FILE``."""
        path = self.name(children[1])
        return st.Stock(replace(path, text=path.text.strip('"')))

    def note(self, children: Children) -> st.NoteLine:
        """``note "..."``."""
        return st.NoteLine(str(children[1])[1:-1])

    def start(self, children: Children) -> tuple[st.Statement, ...]:
        """All statements of a sheet."""
        return tuple(c for c in children if not isinstance(c, Token))

    def __default__(self, data: Any, children: Children, meta: Any) -> NoReturn:
        raise TypeError(f"the grammar has a rule without a reader: {data}")


def _is(child: object, *types: str) -> bool:
    return isinstance(child, Token) and child.type in types


def _unit_behind_expression(unit: Name, expression: Expression) -> Complaint:
    if isinstance(expression, Name):
        return Complaint(
            unit.place,
            f"`{unit.text}` follows the name `{expression.text}`, and a unit stands behind a number only",
            f"write a product with *: {expression.text}*{unit.text}",
        )
    return Complaint(
        unit.place,
        f"`{unit.text}` stands behind an expression, and a unit stands behind a plain number only",
        "write the expression in SI base units without a unit, or a product with *",
    )
