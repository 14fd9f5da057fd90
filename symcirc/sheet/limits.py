"""Limits and what can be bought: units and ranges checked, values kept as written."""

from __future__ import annotations

from collections.abc import Mapping

from symcirc.complaints import Complaint, Place, choices, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.expression import Name
from symcirc.sheet.fixes import Settled
from symcirc.sheet.formulas import check_names
from symcirc.sheet.model import Buyable, Limit, Symbol, Value
from symcirc.sheet.trial import try_out
from symcirc.sheet.units import EXAMPLES
from symcirc.sheet.words import check_word, check_word_unit, refuse_empty

SERIES = ("E3", "E6", "E12", "E24", "E48", "E96", "E192")
#: The dimension of each kind of part that can be bought, and the code letters that it cannot have.
BUYABLE = {"R": ("ohm", "F"), "C": ("F", "R"), "L": ("H", "RF")}


def known_ask(name: Name, asks: Mapping[str, Place]) -> None:
    """Raise Complaint for a name that is not asked; ``asks`` has the names and places of the asks."""
    if name.text not in asks:
        mend = nearest(name.text, asks) or choices(asks)
        raise Complaint(name.place, f"nothing called `{name.text}` is asked", mend)


def read_limits(
    lines: list[st.LimitLine], asks: Mapping[str, Place], symbols: Mapping[str, Symbol], settled: Settled
) -> tuple[Limit, ...]:
    """Return the mask; raises Complaint for an unknown ask, a unit that does not fit, a band that is none."""
    limits = []
    for line in lines:
        known_ask(line.name, asks)
        check_word("loss", line.loss, symbols, settled)
        for edge in (line.low, line.high):
            if edge is not None:
                check_word("edge", edge, symbols, settled)
        if line.low and line.high:
            refuse_empty(line.low, line.high, settled)
        limits.append(Limit(line.name.text, line.sense, line.loss, line.low, line.high, line.name.place))
    return tuple(limits)


def read_buyables(
    lines: list[st.PartsLine], symbols: Mapping[str, Symbol], settled: Settled
) -> tuple[Buyable, ...]:
    """Return what can be bought; raises Complaint for an unknown kind or series, or a wrong unit."""
    buyables: dict[str, Buyable] = {}
    for line in lines:
        kind = line.kind.text
        if kind not in BUYABLE:
            raise Complaint(
                line.kind.place,
                f"`{kind}` is not a kind of part to buy",
                nearest(kind, BUYABLE) or "write parts R:, parts C: or parts L:",
            )
        if kind in buyables:
            first = buyables[kind].place.line
            raise Complaint(
                line.kind.place,
                f"parts {kind} is given twice: it is on line {first} already",
                "keep one of the two lines",
            )
        low, high = _range(line, symbols, settled)
        pairs, place = bool(line.pairs), line.kind.place
        match line.bought:
            case st.Series(name=series, tolerance=tolerance):
                if series.text not in SERIES:
                    raise Complaint(
                        series.place, f"{series.text} is not a series of IEC 60063", choices(SERIES)
                    )
                if tolerance is not None:
                    _check_tolerance(tolerance, settled)
                bought = Buyable(kind, series.text, tolerance, low, high, place, pairs=pairs)
            case st.Stock(path=path):
                bought = Buyable(kind, None, None, low, high, place, path.text, path.place, pairs)
        buyables[kind] = bought
    return tuple(buyables.values())


def _range(
    line: st.PartsLine, symbols: Mapping[str, Symbol], settled: Settled
) -> tuple[Value | None, Value | None]:
    """Return the range of a line, or two Nones; raises Complaint for what is said twice, and for no range."""
    if len(line.ranges) > 1:
        raise Complaint(line.ranges[1][0].place, "the range is given twice", "keep one of the two")
    if len(line.pairs) > 1:
        raise Complaint(line.pairs[1].place, "`pairs` is said twice", "remove one of the two")
    if not line.ranges:
        return None, None
    low, high = line.ranges[0]
    for value in (low, high):
        _check_bought(line.kind.text, value, symbols, settled)
    refuse_empty(low, high, settled)
    return low, high


def _check_tolerance(value: Value, settled: Settled) -> None:
    check_word_unit("tolerance", value)
    trial = try_out(value.expression, settled.trials)
    if not 0 <= trial.value < 100:
        raise Complaint(value.place, "a tolerance lies between 0 % and 100 %", "write: E96 1 %")


def _check_bought(kind: str, value: Value, symbols: Mapping[str, Symbol], settled: Settled) -> None:
    dimension, wrong_letters = BUYABLE[kind]
    if value.unit not in (None, dimension) or (value.code and value.code in wrong_letters):
        found = value.unit or f"the code letter {value.code}"
        raise Complaint(
            value.place,
            f"{found} does not fit parts {kind}, which are in {dimension}",
            f"write a value such as {EXAMPLES[dimension]}",
        )
    check_names(value.expression, symbols, s_allowed=False)
    trial = try_out(value.expression, settled.trials)
    if not trial.is_known:
        raise Complaint(value.place, "a range of parts is given in numbers", "fix the names in it")
    if trial.is_zero or trial.sign == -1:
        raise Complaint(value.place, "this must be greater than zero", "give a positive value")
