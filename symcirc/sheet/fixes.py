"""Settings: which names formulas may hold, and what each is set to."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from fractions import Fraction

import sympy

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.devices import DIMENSIONS
from symcirc.sheet.exact import exact_number, is_number
from symcirc.sheet.expand import Flat, FlatSetting
from symcirc.sheet.expression import (
    LARGEST,
    SMALLEST,
    Expression,
    Name,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    children,
    fold,
    names,
    rename,
)
from symcirc.sheet.model import Fix, Symbol, Value

PART_DIMENSIONS = {"R": "ohm", "C": "F", "L": "H", "Z": "ohm", "Y": "S"}
#: Names that mean something in every formula.
RESERVED = {"s": "the complex frequency", "pi": "the number pi", "sqrt": "the square root"}
#: A tie with more products than this, or a higher power, is refused before it is multiplied out.
MOST_PRODUCTS, HIGHEST_POWER = 5_000, 200


def check_name(name: str, place: Place) -> None:
    """Raise Complaint for a name that formulas keep for themselves."""
    if name in RESERVED or name.startswith(("V_", "I_")):
        meaning = RESERVED.get(name, "a voltage or a current")
        raise Complaint(place, f"`{name}` is kept for {meaning}", "choose another name")


def declare(flat: Flat, chosen: Iterable[Name], solved: Iterable[Name]) -> dict[str, Symbol]:
    """Return every name that formulas may hold, parts first, in the sheet's order.

    Raises Complaint for a name that is reserved or that means two things.
    """
    symbols: dict[str, Symbol] = {}

    def add(symbol: Symbol) -> None:
        check_name(symbol.name, symbol.place)
        if symbol.name in symbols:
            raise Complaint(
                symbol.place,
                f"`{symbol.label}` already means something else",
                "give one of the two another name",
            )
        symbols[symbol.name] = symbol

    for part in flat.parts:
        add(Symbol(part.name, part.label, "part", PART_DIMENSIONS[part.kind], part.place))
    settings = {setting.name: setting.place for setting in flat.settings}
    declared = settings | {name.text: name.place for name in (*chosen, *solved)}
    for device in flat.devices:
        optional = ("gain", "gbw") if device.kind == "opamp" else ()
        words = list(device.parameters) + [w for w in optional if w not in device.parameters]
        for word in words:
            name = f"{device.name}_{word}"
            if word in device.parameters or name in declared:
                add(Symbol(name, f"{device.label}_{word}", "parameter", DIMENSIONS[word], device.place))
    outside = {s.name for s in flat.settings if _free_name(s, symbols) not in symbols}
    for setting in flat.settings:
        name = _free_name(setting, symbols)
        if name not in symbols and setting.name in outside:
            add(Symbol(name, name, "free", None, setting.place))
    for word_ in (*chosen, *solved):
        if word_.text not in symbols:
            add(Symbol(word_.text, word_.text, "free", None, word_.place))
    for setting in flat.settings:
        _bring_in(setting, symbols)
    return symbols


def _free_name(setting: FlatSetting, symbols: Mapping[str, Symbol]) -> str:
    """Return the flat name that a setting means: the block's own part or device, else the sheet's name."""
    if setting.name in symbols:
        return setting.name
    return setting.name.removeprefix(setting.scope.prefix)


def _bring_in(setting: FlatSetting, symbols: dict[str, Symbol]) -> None:
    """Declare the parts inside a general impedance or admittance: ``fix Y3 = s*C3 + 1/R3`` brings in C3 and R3."""
    target = symbols[_free_name(setting, symbols)]
    if target.role != "part" or target.name.removeprefix(setting.scope.prefix)[:1] not in ("Z", "Y"):
        return
    for name in names(setting.value.expression):
        known = setting.scope.prefix + name.text in symbols or name.text in symbols
        if not known and name.text[0] in "RCL" and len(name.text) > 1 and name.text not in RESERVED:
            dimension = PART_DIMENSIONS[name.text[0]]
            symbols[name.text] = Symbol(name.text, name.text, "free", dimension, name.place)


def settle(flat: Flat, symbols: Mapping[str, Symbol]) -> dict[str, Fix]:
    """Return what each fixed name is set to.

    Raises Complaint for a name fixed twice, an unknown name, a unit that does not fit, a value that cannot be, an
    expression out of bounds and a loop of fixes.
    """
    fixes: dict[str, Fix] = {}
    for setting in flat.settings:
        symbol = symbols[_free_name(setting, symbols)]
        if symbol.name in fixes:
            first = fixes[symbol.name].place
            raise Complaint(
                setting.place,
                f"`{symbol.label}` is fixed twice: it is fixed on line {first.line} already",
                "remove one of the two",
            )
        fixes[symbol.name] = _fix(setting, symbol, symbols)
    _refuse_loops(fixes)
    _check_tied_values(fixes, symbols)
    return fixes


def _fix(setting: FlatSetting, symbol: Symbol, symbols: Mapping[str, Symbol]) -> Fix:
    value = setting.value
    prefix = setting.scope.prefix

    def flat_name(name: Name) -> str:
        return prefix + name.text if prefix + name.text in symbols else name.text

    expression = rename(value.expression, flat_name)
    check_unit(value, symbol)
    if is_number(expression):
        number = _in_base_units(exact_number(expression), value, symbol)
        check_value(number, symbol, value.place)
        return Fix(symbol.name, expression, number, value.unit, setting.place)
    takes_s = (
        symbol.role == "parameter" and symbol.dimension != "Hz" or symbol.name.removeprefix(prefix)[0] in "ZY"
    )
    check_names(expression, symbols, s_allowed=takes_s and symbol.role != "free")
    check_size(expression)
    return Fix(symbol.name, expression, None, None, setting.place)


def check_names(expression: Expression, symbols: Mapping[str, Symbol], *, s_allowed: bool) -> None:
    """Raise Complaint for a name that is not declared, and for ``s`` or a root of names where none may be."""
    for name in names(expression):
        if name.text == "pi" or (name.text == "s" and s_allowed):
            continue
        if name.text == "s":
            raise Complaint(
                name.place,
                "`s` cannot stand here",
                "only Z, Y, an amplifier's gain and a target may depend on s",
            )
        if name.text not in symbols:
            hint = nearest(name.text, symbols)
            raise Complaint(
                name.place,
                f"`{name.text}` is not declared",
                hint or f"declare it: fix {name.text} = value, or choose {name.text}",
            )
    for root in _roots(expression):
        if not is_number(root):
            raise Complaint(
                root.place,
                "a square root of names is not a ratio of polynomials",
                "name the root itself (choose q) and write its square where the name stood (k = q^2)",
            )


def _roots(expression: Expression) -> Iterable[Root]:
    waiting = [expression]
    while waiting:
        node = waiting.pop()
        if isinstance(node, Root):
            yield node
        waiting.extend(children(node))


def check_size(expression: Expression) -> None:
    """Raise Complaint where multiplying out would make too many products or too high a power, before it is done."""

    def combine(node: Expression, sizes: list[tuple[int, int, int]]) -> tuple[int, int, int]:
        above, below, degree = _size(node, sizes)
        if max(above, below) > MOST_PRODUCTS or degree > HIGHEST_POWER:
            raise Complaint(
                node.place,
                "this expression is too large when multiplied out",
                "name its inner parts, or simplify it",
            )
        return above, below, degree

    fold(expression, combine)


def _size(node: Expression, sizes: list[tuple[int, int, int]]) -> tuple[int, int, int]:
    """Bound (products above the line, products below it, degree) of a node from those of its operands."""
    match node:
        case Number():
            return 1, 1, 0
        case Name():
            return 1, 1, 1
        case Sum():
            below = math.prod(b for _, b, _ in sizes)
            degree = max(d for _, _, d in sizes) if below == 1 else sum(d for _, _, d in sizes)
            return sum(a * (below // b) for a, b, _ in sizes), below, degree
        case Product():
            return (
                math.prod(a for a, _, _ in sizes),
                math.prod(b for _, b, _ in sizes),
                sum(d for _, _, d in sizes),
            )
        case Power(exponent=exponent):
            above, below, degree = sizes[0]
            e = abs(exponent)
            powers = math.comb(above + e - 1, e), math.comb(below + e - 1, e)
            return (*(powers if exponent >= 0 else powers[::-1]), degree * e)
        case Reciprocal():
            above, below, degree = sizes[0]
            return below, above, degree
        case _:
            return sizes[0]


# units and values ----------------------------------------------------------------------------------------------


def check_unit(value: Value, symbol: Symbol) -> None:
    """Raise Complaint where the unit or the code's letter contradicts the name."""
    allowed = {
        "ratio": (None, "dB", "%"),
        "Hz": (None, "Hz", "rad/s"),
        None: (None, "ohm", "F", "H", "S", "Hz", "rad/s", "s", "dB", "%"),
    }.get(symbol.dimension, (None, symbol.dimension))
    if value.unit not in allowed:
        wanted = {"ratio": "is a ratio", "Hz": "is a frequency, in Hz"}.get(
            symbol.dimension or "", f"is in {symbol.dimension}"
        )
        wanted = wanted if symbol.dimension else "is a parameter"
        raise Complaint(
            value.place,
            f"the unit {value.unit} does not fit: `{symbol.label}` {wanted}",
            _unit_mend(symbol.dimension),
        )
    code_units = {"R": "ohm", "F": "F"}
    fits = code_units.get(value.code or "", symbol.dimension)
    if symbol.dimension is not None and fits != symbol.dimension:
        raise Complaint(
            value.place,
            f"the code letter {value.code} means {fits}, and `{symbol.label}` is not in {fits}",
            _unit_mend(symbol.dimension),
        )


def _unit_mend(dimension: str | None) -> str:
    examples = {
        "ohm": "write 4.7 kohm or 4k7",
        "F": "write 22 nF or 22n",
        "H": "write 10 mH or 10m",
        "S": "write 2 mS",
        "Hz": "write 1 MHz or 6e6 rad/s",
        "ratio": "write 10, or 20 dB",
    }
    return examples.get(dimension or "", "use ohm, F, H, S, Hz, rad/s, s, dB, %, or no unit")


def _in_base_units(number: sympy.Expr, value: Value, symbol: Symbol) -> sympy.Expr:
    if value.unit == "dB":
        return sympy.Integer(10) ** (number / 20)
    if value.unit == "%":
        return number / 100
    if value.unit == "rad/s" and symbol.dimension == "Hz":
        return number / (2 * sympy.pi)
    return number


def check_value(number: sympy.Expr, symbol: Symbol, place: Place) -> None:
    """Raise Complaint for a value that the name cannot have."""
    must_be_positive = (
        symbol.role == "part" or symbol.dimension in ("ohm", "F", "H", "Hz") and symbol.role == "free"
    )
    amplifier = symbol.role == "parameter" and (symbol.dimension == "Hz" or symbol.name.endswith("_ratio"))
    if (must_be_positive and not number.is_positive) or (amplifier and number.is_zero):
        what = "zero" if number.is_zero else "negative"
        raise Complaint(
            place,
            f"`{symbol.label}` cannot be {what}",
            "give it a value greater than zero, or leave the part out",
        )
    if number.is_zero:
        return
    size = abs(sympy.N(number, 20))
    if not sympy.Rational(SMALLEST.numerator, SMALLEST.denominator) <= size <= sympy.Integer(int(LARGEST)):
        raise Complaint(
            place,
            f"the value of `{symbol.label}` is out of range",
            "use a value between 1e-30 and 1e30 in size",
        )


# ties ----------------------------------------------------------------------------------------------------------


def _refuse_loops(fixes: Mapping[str, Fix]) -> None:
    finished: set[str] = set()
    for start in fixes:
        path: list[str] = []
        waiting = [(start, False)]
        while waiting:
            name, leaving = waiting.pop()
            if leaving:
                finished.add(path.pop())
            elif name in path:
                loop = " -> ".join([*path[path.index(name) :], name])
                raise Complaint(
                    fixes[name].place,
                    f"these fixes go in a loop: {loop}",
                    "set one of them to a value, or choose it",
                )
            elif name not in finished and name in fixes and fixes[name].number is None:
                path.append(name)
                waiting.append((name, True))
                waiting.extend((n.text, False) for n in names(fixes[name].expression))


def tie_order(ties: Mapping[str, Expression]) -> list[str]:
    """Return the tied names so that each comes after the tied names that its expression holds.

    >>> tie_order({})
    []
    """
    order: list[str] = []
    waiting = [(name, False) for name in reversed(ties)]
    while waiting:
        name, leaving = waiting.pop()
        if name in order or name not in ties:
            continue
        if leaving:
            order.append(name)
        else:
            waiting.append((name, True))
            waiting.extend((n.text, False) for n in names(ties[name]))
    return order


def _check_tied_values(fixes: Mapping[str, Fix], symbols: Mapping[str, Symbol]) -> None:
    """Where every name of a tie has a number, the tied value must be one that the name can have."""
    known = {name: fix.number for name, fix in fixes.items() if fix.number is not None}
    for name in tie_order({n: f.expression for n, f in fixes.items() if f.number is None}):
        expression = fixes[name].expression
        if all(n.text in known or n.text == "pi" for n in names(expression)):
            number = exact_number(expression, known)
            check_value(number, symbols[name], fixes[name].place)
            known[name] = number


def number_of(value: Value) -> Fraction | None:
    """Return a value's number where it was written as a plain one, else None."""
    return value.expression.value if isinstance(value.expression, Number) else None


def all_names(lines: Iterable[st.ChooseLine | st.SolveLine]) -> list[Name]:
    """Return the names of several lines in turn."""
    return [name for line in lines for name in line.names]
