"""What a sheet's target comes to: an exact response, from its family and words or from its expression."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import sympy

from symcirc.complaints import Complaint
from symcirc.match.problem import Gain
from symcirc.responses import (
    FAMILIES,
    Prototype,
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
    nominal gain is 1. ``nominal`` is the nominal gain, None for an expression. ``order`` is the prototype's order
    where the limits have chosen it.
    """

    target: Target
    numerator: Coefficients
    denominator: Coefficients
    gain: Gain
    nominal: sympy.Expr | None
    order: int | None = None


def build_goal(sheet: Sheet, target: Target) -> Goal:
    """Return the response that a target of the sheet describes.

    ``meet limits`` takes the least order with which the sheet's limits are met.

    Raises Complaint for values that make no response, and for limits that no order meets.
    """
    if target.expression is not None:
        return _written(target, target.expression)
    order = None
    try:
        if target.meet_limits:
            order = _met_order(sheet, target)
        response = _response(target, order)
    except ResponseError as error:
        raise Complaint(target.place, error.cause, error.mend) from None
    gain = target.words.get("gain")
    factor = sympy.Integer(1) if gain is None else _gain(gain)
    numerator = tuple(factor * c for c in response.numerator)
    how: Gain = "free" if gain is None else "magnitude"
    return Goal(target, numerator, response.denominator, how, factor, order)


def _response(target: Target, met_order: int | None) -> Response:
    words = target.words
    if target.family is None:
        return second_order(str(target.kind), _frequency("f0", words["f0"]), _positive("q", words["q"]))
    prototype = _prototype(target, met_order or int(exact_number(words["order"].expression)))
    if target.kind in ("bandpass", "bandstop"):
        transform = bandpass if target.kind == "bandpass" else bandstop
        return transform(prototype, *_band(words))
    single: dict[str, Callable[..., Response]] = {
        "lowpass": lowpass,
        "highpass": highpass,
        "allpass": allpass,
    }
    return single[str(target.kind)](prototype, _frequency("edge", words["edge"]))


def _prototype(target: Target, order: int) -> Prototype:
    """Return the prototype of the target's family, its edge where the words put it."""
    words = target.words
    family = FAMILIES[str(target.family)]
    prototype = family.build(order, *(_number(word, words[word]) for word in family.needs))
    if "edge loss" in words:
        prototype = edge_at(prototype, _number("edge loss", words["edge loss"]))
    return prototype


def _met_order(sheet: Sheet, target: Target) -> int:
    """Return the least order with which the target meets its limits; its frequencies must have numbers."""
    from symcirc.masks.mask import read_mask
    from symcirc.masks.meeting import least_order
    from symcirc.masks.placing import Spot

    if target.kind == "allpass":
        raise Complaint(
            target.place,
            "an all-pass has no loss, so limits of loss choose no order",
            "write the order: order 2",
        )
    if target.kind in ("bandpass", "bandstop"):
        centre, size = (_valued(sheet, target, x) for x in _band(target.words))
        spot = Spot(str(target.kind), size, centre)
    else:
        spot = Spot(str(target.kind), _valued(sheet, target, _frequency("edge", target.words["edge"])), None)
    return least_order(read_mask(sheet, target.ask), spot, lambda order: _prototype(target, order))


def _valued(sheet: Sheet, target: Target, number: sympy.Expr) -> float:
    value = number.subs({symbol(name): known for name, known in sheet.numbers.items()})
    if not value.is_number:
        names_left = ", ".join(sorted(map(str, value.free_symbols)))
        raise Complaint(
            target.place,
            f"`meet limits` needs numbers, and {names_left} has none",
            f"fix {names_left} = value",
        )
    return float(value)


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
