"""A tiny evaluator of plain arithmetic, as an engineer's script would have it: no names but those given."""

import ast
import math
import operator
from collections.abc import Mapping
from functools import cache

_OPERATORS = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
    ast.Pow: operator.pow,
}
_RELATIONS = {">": operator.gt, ">=": operator.ge, "<": operator.lt, "<=": operator.le}


def value(text: str, names: Mapping[str, float]) -> float:
    """Return the value of a formula; not a number where it takes the root of a negative number."""
    return _value(_parsed(text), names)


@cache
def _parsed(text: str) -> ast.expr:
    return ast.parse(text, mode="eval").body


def _value(node: ast.expr, names: Mapping[str, float]) -> float:
    match node:
        case ast.BinOp(left, op, right):
            return _OPERATORS[type(op)](_value(left, names), _value(right, names))
        case ast.UnaryOp(ast.USub(), operand):
            return -_value(operand, names)
        case ast.Call(ast.Name("sqrt"), [operand], []):
            inner = _value(operand, names)
            return math.sqrt(inner) if inner >= 0 else math.nan
        case ast.Name("pi"):
            return math.pi
        case ast.Name(name):
            return float(names[name])
        case ast.Constant(number):
            return float(number)
    raise AssertionError(f"no plain arithmetic: {ast.dump(node)}")


def holds(text: str, names: Mapping[str, float]) -> bool:
    """Tell whether an inequality holds; not where a side is no number."""
    left, relation, right = next(text.partition(f" {r} ") for r in (">=", "<=", ">", "<") if f" {r} " in text)
    return _RELATIONS[relation.strip()](value(left, names), value(right, names))
