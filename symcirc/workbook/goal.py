"""A target with names in place of its numbers, so that these can be inputs of a workbook."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

import sympy

from symcirc.goal import Goal, build_goal, symbol
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import Expression, Name, Number, names
from symcirc.sheet.model import Sheet, Value

#: The words of a target whose numbers become inputs, and what they mean.
LIVE_WORDS = {
    "f0": "the target's f0",
    "q": "the target's Q",
    "edge": "the target's edge",
    "centre": "the target's centre",
    "bandwidth": "the target's bandwidth",
    "lower edge": "the target's lower edge",
    "upper edge": "the target's upper edge",
    "gain": "the target's gain, a ratio",
}


@dataclass(frozen=True)
class Quantity:
    """A number that formulas hold: an input where ``formula`` is None, else computed from inputs.

    ``value`` is the number as the sheet has it, None where it has none; ``exact`` is the same, exactly.
    """

    name: str
    unit: str
    exact: sympy.Expr | None
    formula: sympy.Expr | None
    meaning: str

    @property
    def value(self) -> float | None:
        """The number in floating point."""
        return None if self.exact is None else float(sympy.N(self.exact, 20))


def live_goal(sheet: Sheet, goal: Goal) -> tuple[Goal, tuple[Quantity, ...]]:
    """Return a target in names, and what these stand for.

    The numbers behind the words of a family or a shape get names; those that already hold names keep them. The
    order, ripple and stop-band loss of a family stay numbers: they decide what formulas there are. A target that
    is written as an expression has a name for every coefficient.
    """
    target = goal.target
    if target.expression is not None:
        return _written(sheet, goal)
    quantities: list[Quantity] = []
    words = dict(target.words)
    for word in LIVE_WORDS:
        if word in words and not _names(words[word].expression):
            name = fresh({"q": "Q"}.get(word, word.replace(" ", "_")), sheet.symbols)
            quantities += _inputs(name, word, words[word])
            unit = None if words[word].unit == "dB" else words[word].unit
            words[word] = replace(words[word], expression=Name(name, words[word].place), unit=unit)
    if "lower edge" in words:
        quantities += _from_edges(sheet, words, quantities)
    if goal.order is not None:
        words["order"] = Value(Number(Fraction(goal.order), target.place), None, target.place)
    named = replace(target, words=words, meet_limits=False)
    return build_goal(sheet, named), tuple(quantities)


def _names(expression: Expression) -> list[str]:
    return [name.text for name in names(expression) if name.text != "pi"]


def fresh(name: str, taken: Iterable[str]) -> str:
    """Return a name that is not taken.

    >>> fresh("gain", ["gain", "gain_"])
    'gain__'
    """
    known = set(taken)
    while name in known:
        name += "_"
    return name


def _inputs(name: str, word: str, value: Value) -> list[Quantity]:
    number = exact_number(value.expression, {})
    meaning = LIVE_WORDS[word]
    if value.unit != "dB":
        unit = "" if word in ("q", "gain") else "rad/s" if value.unit == "rad/s" else "Hz"
        return [Quantity(name, unit, number, None, meaning)]
    decibels = f"{name}_dB"
    ratio = sympy.Integer(10) ** (symbol(decibels) / 20)
    return [
        Quantity(decibels, "dB", number, None, "the target's gain"),
        Quantity(name, "", sympy.Integer(10) ** (number / 20), ratio, meaning),
    ]


def _from_edges(sheet: Sheet, words: dict[str, Value], inputs: list[Quantity]) -> list[Quantity]:
    """Put a band's centre and width in place of its edges, and return how they come of them."""
    low, high = words.pop("lower edge"), words.pop("upper edge")
    symbols = {n: symbol(n) for value in (low, high) for n in _names(value.expression)}
    lower, upper = (exact_number(value.expression, symbols) for value in (low, high))
    known = {symbol(q.name): q.exact for q in inputs} | {symbol(n): x for n, x in sheet.numbers.items()}
    made = []
    for word, formula in (("centre", sympy.sqrt(lower * upper)), ("bandwidth", upper - lower)):
        name = fresh(word, sheet.symbols)
        unit = "rad/s" if low.unit == "rad/s" else "Hz"
        value = formula.subs(known)
        made.append(Quantity(name, unit, value if value.is_number else None, formula, LIVE_WORDS[word]))
        words[word] = replace(low, expression=Name(name, low.place))
    return made


def _written(sheet: Sheet, goal: Goal) -> tuple[Goal, tuple[Quantity, ...]]:
    """Name the coefficients of a target that is an expression; signs stay, zeros and the leading 1 too."""
    quantities: list[Quantity] = []

    def named(letter: str, side: str, row: Iterable[sympy.Expr]) -> tuple[sympy.Expr, ...]:
        found = []
        for power, c in enumerate(row):
            if c == 0 or c.free_symbols or (letter == "d" and c == 1):
                found.append(c)
                continue
            name = fresh(f"{letter}{power}", sheet.symbols)
            meaning = f"the target's {side}, coefficient of s^{power}, without sign"
            quantities.append(Quantity(name, "SI", abs(c), None, meaning))
            found.append(symbol(name) if c.is_positive else -symbol(name))
        return tuple(found)

    above = named("n", "numerator", goal.numerator)
    below = named("d", "denominator", goal.denominator)
    return replace(goal, numerator=above, denominator=below), tuple(quantities)


def known_numbers(quantities: Iterable[Quantity]) -> Mapping[str, sympy.Expr]:
    """Return the exact numbers of those quantities that have one."""
    return {q.name: q.exact for q in quantities if q.exact is not None}


def fixed_words(goal: Goal) -> list[str]:
    """Return the words of a target whose numbers stay in the formulas, with these numbers."""
    words = {word: value for word, value in goal.target.words.items() if word not in LIVE_WORDS}
    numbers = {w: f"{float(exact_number(v.expression, {})):g} {v.unit or ''}" for w, v in words.items()}
    if goal.order is not None:
        numbers["order"] = str(goal.order)
    return [f"{word} {number}".rstrip() for word, number in numbers.items()]
