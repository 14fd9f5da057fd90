"""Evaluators for what the printers write: plain arithmetic and LaTeX, read back by other code."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from typing import Any

TOKENS = re.compile(r"\s*(\*\*|[-+*/()]|[0-9]+|[A-Za-z_][A-Za-z0-9_]*)")
LATEX_TOKENS = re.compile(r"\s*(\\left\(|\\right\)|\\mathrm\{[^}]*\}|\\[a-z]+|[-+{}^_,()]|[0-9]+|[A-Za-z])")


class Reader:
    """A reader of tokens; numbers are made by ``number``, roots by ``root``."""

    def __init__(
        self,
        tokens: list[str],
        values: Mapping[str, Any],
        number: Callable[[int], Any],
        root: Callable[[Any], Any],
    ) -> None:
        self.tokens = [*tokens, ""]
        self.values = values
        self.number = number
        self.root = root
        self.at = 0

    def take(self, *wanted: str) -> str:
        token = self.tokens[self.at]
        if token not in wanted:
            return ""
        self.at += 1
        return token

    def next(self) -> str:
        self.at += 1
        return self.tokens[self.at - 1]

    def expect(self, wanted: str) -> None:
        assert self.take(wanted), (wanted, self.tokens[self.at :])

    def signed_sum(self, term: Callable[[], Any]) -> Any:
        total = -term() if self.take("-") else term()
        while sign := self.take("+", "-"):
            total = total + term() if sign == "+" else total - term()
        return total


class Plain(Reader):
    def sum(self) -> Any:
        return self.signed_sum(self.product)

    def product(self) -> Any:
        value = self.power()
        while sign := self.take("*", "/"):
            value = value * self.power() if sign == "*" else value / self.power()
        return value

    def power(self) -> Any:
        base = self.atom()
        return base ** int(self.next()) if self.take("**") else base

    def atom(self) -> Any:
        token = self.next()
        if token == "(" or token == "sqrt":
            if token == "sqrt":
                self.expect("(")
            value = self.sum()
            self.expect(")")
            return self.root(value) if token == "sqrt" else value
        return self.number(int(token)) if token.isdigit() else self.values[token]


class Latex(Reader):
    def sum(self) -> Any:
        return self.signed_sum(self.product)

    def product(self) -> Any:
        value = self.power()
        while self.tokens[self.at] not in ("", "+", "-", "}", r"\right)"):
            value = value * self.power()
        return value

    def power(self) -> Any:
        base = self.atom()
        if not self.take("^"):
            return base
        self.expect("{")
        exponent = int(self.next())
        self.expect("}")
        return base**exponent

    def group(self) -> Any:
        self.expect("{")
        value = self.sum()
        self.expect("}")
        return value

    def atom(self) -> Any:
        token = self.next()
        if token == r"\frac":
            return self.group() / self.group()
        if token == r"\sqrt":
            return self.root(self.group())
        if token == r"\left(":
            value = self.sum()
            self.expect(r"\right)")
            return value
        if token.isdigit():
            return self.number(int(token))
        return self.values[token + self.index()]

    def index(self) -> str:
        if not self.take("_"):
            return ""
        self.expect("{")
        pieces = []
        while self.tokens[self.at] != "}":
            pieces.append(self.next())
        self.expect("}")
        return "_{" + "".join(pieces) + "}"


def _read(reader: Reader, whole: Any) -> Any:
    assert reader.tokens[reader.at] == "", reader.tokens[reader.at :]
    return whole


def _tokens(pattern: re.Pattern[str], written: str) -> list[str]:
    assert pattern.sub("", written).strip() == "", pattern.sub("", written)
    return pattern.findall(written)


def value_of(
    written: str,
    values: Mapping[str, Any],
    number: Callable[[int], Any],
    root: Callable[[Any], Any] = lambda x: x,
) -> Any:
    """Return the value of plain arithmetic such as ``(1/R1 + 1/R2)/C1``."""
    reader = Plain(_tokens(TOKENS, written), values, number, root)
    return _read(reader, reader.sum())


def latex_value_of(
    written: str,
    values: Mapping[str, Any],
    number: Callable[[int], Any],
    root: Callable[[Any], Any] = lambda x: x,
) -> Any:
    """Return the value of LaTeX; ``values`` are by the names as LaTeX writes them."""
    reader = Latex(_tokens(LATEX_TOKENS, written), values, number, root)
    return _read(reader, reader.sum())
