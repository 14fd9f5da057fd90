"""What a sheet's target comes to: an exact response, from its family and words or from its expression."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import sympy

from symcirc.complaints import Complaint
from symcirc.match.problem import Gain
from symcirc.responses import (
    FAMILIES,
    Response,
    ResponseError,
    allpass,
    bandpass,
    bandstop,
    edge_at,
    highpass,
    lowpass,
    second_order,
)
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import Expression, Name, names
from symcirc.sheet.model import Sheet, Target, Value

Coefficients = tuple[sympy.Expr, ...]
#: A gain in dB beyond this is refused: its ratio would be out of the range of numbers.
MOST_DECIBELS = 400


@dataclass(frozen=True)
class Goal:
    """A target as numerator and monic denominator, ascending powers of s in rad/s.

    Coefficients are exact numbers, or expressions in parameters of the sheet (positive symbols). ``gain`` says how
    the numerator is meant: "exact" with sign and size, "magnitude" with its size alone, "free" as a shape whose
    nominal gain is 1. ``nominal`` is the nominal gain, None for an expression.
    """

    target: Target
    numerator: Coefficients
    denominator: Coefficients
    gain: Gain
    nominal: sympy.Expr | None


def build_goal(sheet: Sheet, target: Target) -> Goal:
    """Return the response that a target of the sheet describes.

    Raises Complaint for a family that is not there yet, and for values that make no response.
    """
    if target.expression is not None:
        return _written(target, target.expression)
    if target.meet_limits:
        raise Complaint(
            target.place, "`meet limits` cannot choose the order yet", "write the order: order 2, and so on"
        )
    try:
        response = _response(target)
    except ResponseError as error:
        raise Complaint(target.place, error.cause, error.mend) from None
    gain = target.words.get("gain")
    factor = sympy.Integer(1) if gain is None else _gain(gain)
    numerator = tuple(factor * c for c in response.numerator)
    return Goal(target, numerator, response.denominator, "free" if gain is None else "magnitude", factor)


def _response(target: Target) -> Response:
    words = target.words
    if target.family is None:
        return second_order(str(target.kind), _frequency("f0", words["f0"]), _positive("q", words["q"]))
    family = FAMILIES.get(target.family)
    if family is None:
        ready = ", ".join(FAMILIES)
        raise Complaint(target.place, f"the family `{target.family}` is not built yet", f"use one of {ready}")
    if target.kind not in family.kinds:
        raise Complaint(
            target.place,
            f"a {target.family} response has no {target.kind} form",
            f"it has {', '.join(family.kinds)}",
        )
    order = int(exact_number(words["order"].expression))
    prototype = family.build(order, *(_number(word, words[word]) for word in family.needs))
    if "edge loss" in words:
        prototype = edge_at(prototype, _number("edge loss", words["edge loss"]))
    if target.kind in ("bandpass", "bandstop"):
        transform = bandpass if target.kind == "bandpass" else bandstop
        return transform(prototype, *_band(words))
    single: dict[str, Callable[..., Response]] = {
        "lowpass": lowpass,
        "highpass": highpass,
        "allpass": allpass,
    }
    return single[str(target.kind)](prototype, _frequency("edge", words["edge"]))


def _band(words: Mapping[str, Value]) -> tuple[sympy.Expr, sympy.Expr]:
    """Return the geometric centre and the bandwidth, in rad/s."""
    if "centre" in words:
        return _frequency("centre", words["centre"]), _frequency("bandwidth", words["bandwidth"])
    low, high = _frequency("lower edge", words["lower edge"]), _frequency("upper edge", words["upper edge"])
    if not (high - low).is_positive:
        raise Complaint(
            words["upper edge"].place, "the upper edge is not above the lower one", "write edges LOW HIGH"
        )
    return sympy.sqrt(low * high), high - low


def _frequency(word: str, value: Value) -> sympy.Expr:
    """Return a frequency in rad/s."""
    number = _positive(word, value)
    return number if value.unit == "rad/s" else 2 * sympy.pi * number


def _positive(word: str, value: Value) -> sympy.Expr:
    number = _number(word, value)
    if number.is_number and not number.is_positive:
        raise Complaint(value.place, f"`{word}` must be greater than zero", f"give a positive {word}")
    return number


def _gain(value: Value) -> sympy.Expr:
    """Return a gain as a ratio; in dB it may have either sign, but no size beyond reason."""
    number = _number("gain", value)
    if value.unit != "dB":
        return _positive("gain", value)
    if number.is_number and abs(number) > MOST_DECIBELS:
        raise Complaint(value.place, "this gain is out of range", f"use a gain within {MOST_DECIBELS} dB")
    return sympy.Integer(10) ** (number / 20)


def _number(word: str, value: Value) -> sympy.Expr:
    return exact_number(value.expression, _symbols(value.expression))


def _symbols(expression: Expression) -> dict[str, sympy.Expr]:
    return {name.text: symbol(name.text) for name in names(expression) if name.text != "pi"}


def symbol(name: str) -> sympy.Symbol:
    """Return the sympy symbol for a name of the sheet in a target: s is complex, all others positive."""
    return sympy.Symbol(name) if name == "s" else sympy.Symbol(name, positive=True)


def _written(target: Target, expression: Expression) -> Goal:
    """A ratio of polynomials in s, meant exactly."""
    s = symbol("s")
    above, below = sympy.fraction(
        sympy.cancel(sympy.together(exact_number(expression, _symbols(expression))))
    )
    over, under = sympy.Poly(above, s), sympy.Poly(below, s)
    leading = under.LC()
    numerator = tuple(sympy.cancel(c / leading) for c in reversed(over.all_coeffs()))
    denominator = tuple(sympy.cancel(c / leading) for c in reversed(under.all_coeffs()))
    if len(denominator) == 1 and len(numerator) == 1 and numerator[0] == 0:
        raise Complaint(target.place, "this target is zero", "write the ratio that the ask must become")
    return Goal(target, numerator, denominator, "exact", None)


def target_symbols(target: Target) -> list[Name]:
    """Return the names that a target holds, ``s`` and ``pi`` aside."""
    expressions = [value.expression for value in target.words.values()]
    if target.expression is not None:
        expressions.append(target.expression)
    return [name for e in expressions for name in names(e) if name.text not in ("s", "pi")]
