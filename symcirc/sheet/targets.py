"""Targets, limits and what can be bought: words and units checked, values kept as written."""

from __future__ import annotations

from collections.abc import Mapping

from symcirc.complaints import Complaint, Place, listed, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.expression import Name, Number
from symcirc.sheet.fixes import check_names, check_size
from symcirc.sheet.model import Ask, Buyable, Limit, Symbol, Target, Value

KINDS = ("lowpass", "highpass", "bandpass", "bandstop", "allpass")
#: Each family with the words it needs besides its order and its edge.
FAMILIES: dict[str, tuple[str, ...]] = {
    "butterworth": (),
    "chebyshev": ("ripple",),
    "inverse chebyshev": ("stop",),
    "elliptic": ("ripple", "stop"),
    "bessel": (),
    "gaussian": (),
    "legendre": (),
    "linear phase": ("ripple",),
    "critical": (),
}
SERIES = ("E3", "E6", "E12", "E24", "E48", "E96", "E192")
HIGHEST_ORDER = 20
UNITS: dict[str, tuple[str | None, ...]] = {
    "order": (None,),
    "edge": ("Hz", "rad/s", None),
    "lower edge": ("Hz", "rad/s", None),
    "upper edge": ("Hz", "rad/s", None),
    "centre": ("Hz", "rad/s", None),
    "bandwidth": ("Hz", "rad/s", None),
    "f0": ("Hz", "rad/s", None),
    "q": (None,),
    "ripple": ("dB", "deg"),
    "stop": ("dB",),
    "edge loss": ("dB",),
    "gain": ("dB", None),
    "loss": ("dB",),
    "tolerance": ("%",),
}


def read_targets(
    lines: list[st.TargetLine], asks: tuple[Ask, ...], symbols: Mapping[str, Symbol]
) -> tuple[Target, ...]:
    """Return the targets; raises Complaint for words, units or names that do not fit together."""
    targets: dict[str, Target] = {}
    for line in lines:
        _known_ask(line.name, asks)
        if line.name.text in targets:
            first = targets[line.name.text].place.line
            raise Complaint(
                line.name.place,
                f"`{line.name.text}` has two targets: one is on line {first} already",
                "keep one, or ask the same ratio under a second name",
            )
        targets[line.name.text] = (
            _read_expression(line, symbols) if line.expression else _read_shape(line, symbols)
        )
    return tuple(targets.values())


def _known_ask(name: Name, asks: tuple[Ask, ...]) -> None:
    known = [ask.name for ask in asks]
    if name.text not in known:
        hint = nearest(name.text, known)
        raise Complaint(
            name.place, f"nothing called `{name.text}` is asked", hint or f"the asks are: {', '.join(known)}"
        )


def _read_expression(line: st.TargetLine, symbols: Mapping[str, Symbol]) -> Target:
    assert line.expression is not None
    check_names(line.expression, symbols, s_allowed=True)
    check_size(line.expression)
    return Target(line.name.text, None, None, {}, False, line.expression, line.place)


def _read_shape(line: st.TargetLine, symbols: Mapping[str, Symbol]) -> Target:
    kind, *family_words = line.shape
    if kind.text not in KINDS:
        raise Complaint(
            kind.place,
            f"`{kind.text}` is not a kind of response",
            nearest(kind.text, KINDS) or f"use {listed(KINDS, 'or')}",
        )
    family = " ".join(word.text for word in family_words) or None
    if family is not None and family not in FAMILIES:
        raise Complaint(
            family_words[0].place,
            f"`{family}` is not a family of responses",
            nearest(family, FAMILIES) or f"use {listed(FAMILIES, 'or')}",
        )
    words = _words(line, symbols)
    target = Target(line.name.text, kind.text, family, words, line.meet_limits, None, line.place)
    _check_words(target)
    return target


def _words(line: st.TargetLine, symbols: Mapping[str, Symbol]) -> dict[str, Value]:
    words: dict[str, Value] = {}

    def add(word: str, value: Value, place: Place) -> None:
        if word in words:
            raise Complaint(place, f"`{word}` is given twice", "remove one of the two")
        check_word_unit(word, value)
        check_names(value.expression, symbols, s_allowed=False)
        check_size(value.expression)
        words[word] = value

    for name, value, at in line.requirements:
        add(name.text, value, name.place)
        if at is not None:
            if name.text != "edge":
                raise Complaint(
                    at.place, f"`at` belongs to `edge`, not to `{name.text}`", "write: edge 1 kHz at 1 dB"
                )
            add("edge loss", at, at.place)
    for low, high, place in line.edges:
        add("lower edge", low, place)
        add("upper edge", high, place)
    _check_order(words.get("order"))
    return words


def check_word_unit(word: str, value: Value) -> None:
    """Raise Complaint where a value's unit does not fit the word before it, or where it needs one."""
    allowed = UNITS[word]
    if value.unit in allowed and value.code != "F" and (value.code != "R" or None in allowed):
        return
    units = [unit or "a plain number" for unit in allowed]
    found = f"the unit {value.unit} does not fit" if value.unit else "a unit is missing"
    raise Complaint(
        value.place, f"{found}: `{word}` is in {listed(units, 'or')}", f"write the value in {units[0]}"
    )


def _check_order(value: Value | None) -> None:
    if value is None:
        return
    number = value.expression.value if isinstance(value.expression, Number) else None
    if number is None or number.denominator != 1 or number < 1:
        raise Complaint(value.place, "an order is a whole number from 1", "write order 2")
    if number > HIGHEST_ORDER:
        raise Complaint(
            value.place,
            f"orders above {HIGHEST_ORDER} are refused",
            "split the response into several cascades",
        )


def _check_words(target: Target) -> None:
    wanted, allowed = _wanted_words(target)
    for word, value in target.words.items():
        if word not in allowed:
            raise Complaint(
                value.place,
                f"`{word}` does not belong to a {target.kind}{' ' + target.family if target.family else ''} target",
                f"it takes {listed(sorted(allowed))}",
            )
    for choice in wanted:
        if not any(all(word in target.words for word in group) for group in choice):
            forms = " or ".join(" and ".join(group) for group in choice)
            raise Complaint(
                target.place,
                f"the target lacks {forms}",
                "for example: lowpass butterworth, order 2, edge 1 kHz",
            )
    if target.kind == "allpass" and target.family not in (None, "bessel"):
        raise Complaint(
            target.place, "an all-pass family is bessel", "write: allpass bessel, order 2, edge 1 kHz"
        )
    if target.family is None and _order(target) not in (None, 2):
        raise Complaint(
            target.words["order"].place,
            "f0 and q describe order 2",
            "name a family for another order, or write order 2",
        )
    _check_ripple_unit(target)


def _order(target: Target) -> int | None:
    value = target.words.get("order")
    return int(value.expression.value) if value and isinstance(value.expression, Number) else None


def _wanted_words(target: Target) -> tuple[list[list[tuple[str, ...]]], set[str]]:
    """Return the words that must stand (each a choice of groups) and all words that may."""
    if target.family is None:
        return [[("order",)], [("f0",)], [("q",)]], {"order", "f0", "q", "gain"}
    band = target.kind in ("bandpass", "bandstop")
    frequencies: list[tuple[str, ...]] = (
        [("centre", "bandwidth"), ("lower edge", "upper edge")] if band else [("edge",)]
    )
    needs = FAMILIES[target.family]
    wanted = [frequencies, *([(word,)] for word in needs)]
    if not target.meet_limits:
        wanted.append([("order",)])
    allowed = {"order", "gain", *needs, *(word for group in frequencies for word in group)}
    return wanted, allowed | (set() if band else {"edge loss"})


def _check_ripple_unit(target: Target) -> None:
    ripple = target.words.get("ripple")
    unit = "deg" if target.family == "linear phase" else "dB"
    if ripple is not None and ripple.unit != unit:
        raise Complaint(
            ripple.place, f"the ripple of {target.family} is in {unit}", f"write ripple 0.5 {unit}"
        )


def read_limits(
    lines: list[st.LimitLine], asks: tuple[Ask, ...], symbols: Mapping[str, Symbol]
) -> tuple[Limit, ...]:
    """Return the mask; raises Complaint for an unknown ask, a unit that does not fit, a band that is none."""
    limits = []
    for line in lines:
        _known_ask(line.name, asks)
        check_word_unit("loss", line.loss)
        for edge in (line.low, line.high):
            if edge is not None:
                check_word_unit("edge", edge)
                check_names(edge.expression, symbols, s_allowed=False)
        _check_range(line.low, line.high, line.place)
        limits.append(Limit(line.name.text, line.sense, line.loss, line.low, line.high, line.place))
    return tuple(limits)


def _check_range(low: Value | None, high: Value | None, place: Place) -> None:
    numbers = [v.expression.value if v and isinstance(v.expression, Number) else None for v in (low, high)]
    for value, number in zip((low, high), numbers, strict=True):
        if value is not None and number is not None and number <= 0:
            raise Complaint(value.place, "this must be greater than zero", "give a positive value")
    same_unit = low is not None and high is not None and low.unit == high.unit
    if same_unit and numbers[0] is not None and numbers[1] is not None and numbers[0] >= numbers[1]:
        raise Complaint(
            place, "the range ends before it begins", "write the lower value first: from LOW to HIGH"
        )


def read_buyables(lines: list[st.PartsLine]) -> tuple[Buyable, ...]:
    """Return what can be bought; raises Complaint for an unknown kind or series, or a unit that does not fit."""
    units = {"R": "ohm", "C": "F", "L": "H"}
    seen: set[str] = set()
    buyables = []
    for line in lines:
        kind = line.kind.text
        if kind not in units:
            raise Complaint(
                line.kind.place, f"`{kind}` is not a kind of part to buy", "write parts R:, C: or L:"
            )
        if kind in seen:
            raise Complaint(
                line.kind.place, f"the parts of kind {kind} are given twice", "keep one of the two lines"
            )
        seen.add(kind)
        if line.series.text not in SERIES:
            raise Complaint(
                line.series.place,
                f"{line.series.text} is not a series of IEC 60063",
                f"use {listed(SERIES, 'or')}",
            )
        if line.tolerance is not None:
            check_word_unit("tolerance", line.tolerance)
        for value in (line.low, line.high):
            if value is not None and (value.unit not in (None, units[kind])):
                raise Complaint(
                    value.place,
                    f"the unit {value.unit} does not fit parts of kind {kind}",
                    f"write it in {units[kind]}",
                )
        _check_range(line.low, line.high, line.place)
        buyables.append(Buyable(kind, line.series.text, line.tolerance, line.low, line.high, line.place))
    return tuple(buyables)
