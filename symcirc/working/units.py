"""Do the units of a line fit? What is added must be of one unit, and so must both sides be.

A unit is three exponents, of volt, ampere and second. A name of the sheet without a unit of its own may have any,
and so may the number 0, a number that is a whole side, and one written with an exponent or with three digits and
more, which may be a value put in.
"""

from __future__ import annotations

from collections.abc import Callable
from contextlib import suppress
from dataclasses import dataclass
from fractions import Fraction

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
    names,
)
from symcirc.sheet.model import NodeCurrent, PartCurrent, Quantity, Sheet
from symcirc.working.names import Lexicon

#: Exponents of volt, ampere and second; None where any unit may stand.
Unit = tuple[Fraction, Fraction, Fraction] | None


def _unit(volt: int, ampere: int, second: int) -> tuple[Fraction, Fraction, Fraction]:
    return Fraction(volt), Fraction(ampere), Fraction(second)


PLAIN = _unit(0, 0, 0)
VOLT, AMPERE, PER_SECOND = _unit(1, 0, 0), _unit(0, 1, 0), _unit(0, 0, -1)
BY_DIMENSION: dict[str | None, Unit] = {
    "ohm": _unit(1, -1, 0),
    "S": _unit(-1, 1, 0),
    "F": _unit(-1, 1, 1),
    "H": _unit(1, -1, 1),
    "Hz": PER_SECOND,
    "s": _unit(0, 0, 1),
    "ratio": PLAIN,
}
#: One of the unit, and many of it.
WORDS = {
    PLAIN: ("a plain number", "plain numbers"),
    VOLT: ("a volt", "volts"),
    AMPERE: ("an ampere", "amperes"),
    PER_SECOND: ("a 1/s", "1/s"),
    _unit(0, 0, 1): ("a second", "seconds"),
    _unit(1, -1, 0): ("an ohm", "ohms"),
    _unit(-1, 1, 0): ("a siemens", "siemens"),
    _unit(-1, 1, 1): ("a farad", "farads"),
    _unit(1, -1, 1): ("a henry", "henries"),
}


@dataclass(frozen=True)
class _Clash(Exception):
    """Two terms of one sum that have different units."""

    node: Expression
    one: tuple[Fraction, Fraction, Fraction]
    other: tuple[Fraction, Fraction, Fraction]


def unit_trouble(left: Expression, right: Expression, lexicon: Lexicon) -> str | None:
    """Return what is wrong with the units of an equality, in words, or None."""
    units = Units(lexicon)
    try:
        one, other = units.of_side(left), units.of_side(right)
    except _Clash as clash:
        return f"the units do not fit: a sum of {word(clash.one)} and {word(clash.other)}"
    if one is None or other is None or one == other:
        return None
    return f"the units do not fit: {_described(left, one, lexicon)} that comes out in {words(other)}"


def is_of_currents(side: Expression, lexicon: Lexicon) -> bool:
    """Tell whether a side is a current."""
    try:
        return Units(lexicon).of_side(side) == AMPERE
    except _Clash:
        return False


class Units:
    """The units of names, those of definitions found once."""

    def __init__(self, lexicon: Lexicon) -> None:
        self.lexicon = lexicon
        self._defined: dict[str, Unit] = {}

    def of_side(self, side: Expression) -> Unit:
        """Return the unit of a side; a lone number may have any. Raises _Clash."""
        inner = side.operand if isinstance(side, Negative) else side
        return None if isinstance(inner, Number) else self.of(side)

    def of(self, expression: Expression) -> Unit:
        """Return the unit of an expression; raises _Clash."""
        return fold(expression, lambda node, operands: _combine(node, operands, self._of_name))

    def _of_name(self, key: str) -> Unit:
        meaning = self.lexicon.by_key(key)
        match meaning.kind:
            case "constant":
                return PLAIN if key in ("pi", "@j") else PER_SECOND
            case "symbol":
                symbol = self.lexicon.sheet.symbols.get(key)
                return BY_DIMENSION.get(symbol.dimension) if symbol is not None else PLAIN
            case "shape":
                return PLAIN if key == "Q" else PER_SECOND
            case "quantity":
                return of_quantity(meaning.quantity)
            case "ask":
                return of_ask(self.lexicon.sheet, key)
            case _:
                return self._of_definition(key)

    def _of_definition(self, key: str) -> Unit:
        if key not in self._defined:
            self._defined[key] = None
            with suppress(_Clash):  # said where it was defined
                self._defined[key] = self.of_side(self.lexicon.definitions[key])
        return self._defined[key]


def of_quantity(quantity: Quantity | None) -> Unit:
    """Return volt or ampere."""
    return AMPERE if isinstance(quantity, PartCurrent | NodeCurrent) else VOLT


def of_ask(sheet: Sheet, name: str) -> Unit:
    """Return the unit of an asked ratio."""
    ask = sheet.ask(name)
    if ask.loop is not None:
        return PLAIN
    over, under = of_quantity(ask.over), of_quantity(ask.under)
    assert over is not None
    assert under is not None
    return over[0] - under[0], over[1] - under[1], over[2] - under[2]


def _combine(node: Expression, operands: list[Unit], of_name: Callable[[str], Unit]) -> Unit:
    match node:
        case Number():
            return PLAIN if _is_count(node) else None
        case Name():
            return of_name(node.text)
        case Sum():
            return _common(node, operands)
        case Product():
            return _multiplied(operands)
        case Negative():
            return operands[0]
        case Reciprocal():
            return _raised(operands[0], Fraction(-1))
        case Power():
            return _raised(operands[0], Fraction(node.exponent))
        case Root():
            return _raised(operands[0], Fraction(1, 2))


def _is_count(number: Number) -> bool:
    """Tell whether a number counts things, as in 2 pi f, and so has no unit."""
    place = number.place
    written = place.source.line(place.line)[place.column - 1 : place.end - 1].lower()
    return number.value != 0 and "e" not in written and sum(c.isdigit() for c in written.lstrip("0.")) < 3


def _common(node: Expression, operands: list[Unit]) -> Unit:
    known = [operand for operand in operands if operand is not None]
    for operand in known[1:]:
        if operand != known[0]:
            raise _Clash(node, known[0], operand)
    return known[0] if known else None


def _multiplied(operands: list[Unit]) -> Unit:
    total = list(PLAIN)
    for operand in operands:
        if operand is None:
            return None
        total = [a + b for a, b in zip(total, operand, strict=True)]
    return total[0], total[1], total[2]


def _raised(unit: Unit, exponent: Fraction) -> Unit:
    return None if unit is None else (unit[0] * exponent, unit[1] * exponent, unit[2] * exponent)


def _described(side: Expression, unit: tuple[Fraction, Fraction, Fraction], lexicon: Lexicon) -> str:
    """Return a side in words: a ratio of voltages, or its unit."""
    kinds = _kinds(side, lexicon) if unit == PLAIN else set()
    if kinds == {VOLT}:
        return "a ratio of voltages"
    return "a ratio of currents" if kinds == {AMPERE} else word(unit)


def _kinds(side: Expression, lexicon: Lexicon) -> set[Unit]:
    """Return whether an expression holds voltages, currents or both, definitions and asks put in."""
    kinds: set[Unit] = set()
    waiting, seen = [name.text for name in names(side)], set()
    while waiting:
        key = waiting.pop()
        if key in seen:
            continue
        seen.add(key)
        meaning = lexicon.by_key(key)
        if meaning.kind == "quantity":
            kinds.add(of_quantity(meaning.quantity))
        elif meaning.kind == "ask":
            ask = lexicon.sheet.ask(key)
            kinds |= {of_quantity(quantity) for quantity in (ask.over, ask.under)}
        elif meaning.kind == "defined":
            waiting += [name.text for name in names(lexicon.definitions[key])]
    return kinds


def word(unit: tuple[Fraction, Fraction, Fraction]) -> str:
    """Return one of a unit in words.

    >>> word(_unit(1, -1, 0)), word(_unit(2, 0, 1))
    ('an ohm', 'a V^2*s')
    """
    return WORDS[unit][0] if unit in WORDS else f"a {_product(unit)}"


def words(unit: tuple[Fraction, Fraction, Fraction]) -> str:
    """Return many of a unit in words."""
    return WORDS[unit][1] if unit in WORDS else _product(unit)


def _product(unit: tuple[Fraction, Fraction, Fraction]) -> str:
    powers = [(letter, exponent) for letter, exponent in zip("VAs", unit, strict=True) if exponent]
    over = "*".join(_power(letter, exponent) for letter, exponent in powers if exponent > 0) or "1"
    under = [_power(letter, -exponent) for letter, exponent in powers if exponent < 0]
    return over + "".join(f"/{factor}" for factor in under)


def _power(letter: str, exponent: Fraction) -> str:
    if exponent == 1:
        return letter
    return f"{letter}^{exponent}" if exponent.denominator == 1 else f"{letter}^({exponent})"
