"""The values behind a target's and a limit's words: their units, and what they may be."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from fractions import Fraction

from symcirc.complaints import Complaint, listed
from symcirc.sheet.expression import Expression, Name, Negative, Number, Product, Reciprocal, Sum
from symcirc.sheet.fixes import Settled
from symcirc.sheet.formulas import check_names, check_size
from symcirc.sheet.model import Symbol, Value
from symcirc.sheet.trial import try_out

HIGHEST_ORDER = 20
_FREQUENCY = ("Hz", "rad/s", None)
#: The units of each word, the one to offer first.
UNITS: dict[str, tuple[str | None, ...]] = {
    "order": (None,),
    "edge": _FREQUENCY,
    "lower edge": _FREQUENCY,
    "upper edge": _FREQUENCY,
    "centre": _FREQUENCY,
    "bandwidth": _FREQUENCY,
    "f0": _FREQUENCY,
    "q": (None,),
    "ripple": ("dB", "deg"),
    "stop": ("dB",),
    "edge loss": ("dB",),
    "gain": (None, "dB"),
    "loss": ("dB",),
    "tolerance": ("%",),
}
#: A value of each word, for mends.
EXAMPLES = {
    "order": "order 2",
    "edge": "edge 1 kHz",
    "lower edge": "edges 900 Hz 1.1 kHz",
    "upper edge": "edges 900 Hz 1.1 kHz",
    "centre": "centre 1 kHz",
    "bandwidth": "bandwidth 200 Hz",
    "f0": "f0 1 kHz",
    "q": "q 0.8",
    "ripple": "ripple 0.5 dB",
    "stop": "stop 40 dB",
    "edge loss": "edge 1 kHz at 1 dB",
    "gain": "gain 2",
    "loss": "loss <= 1 dB",
    "tolerance": "E96 1 %",
}


def check_word_unit(word: str, value: Value) -> None:
    """Raise Complaint where a value's unit does not fit the word before it, or where it needs one."""
    allowed = UNITS[word]
    if value.unit in allowed and value.code not in ("R", "F"):
        return
    if value.code in ("R", "F"):
        found = f"the letter {value.code} in a value code does not fit"
    else:
        found = f"the unit {value.unit} does not fit" if value.unit else "a unit is missing"
    units = [unit or "a plain number" for unit in allowed]
    raise Complaint(value.place, f"{found}: `{word}` is in {listed(units, 'or')}", f"write: {EXAMPLES[word]}")


def check_word(word: str, value: Value, symbols: Mapping[str, Symbol], settled: Settled) -> None:
    """Raise Complaint for a wrong unit, an unknown name, and what is not greater than zero."""
    check_word_unit(word, value)
    check_names(value.expression, symbols, s_allowed=False)
    check_size(value.expression, settled.sizes)
    trial = try_out(value.expression, settled.trials)
    if word in ("loss", "order") or (word == "gain" and value.unit == "dB"):
        return
    if trial.is_zero or trial.sign == -1:
        mend = (
            "give its magnitude, as a family ignores the sign"
            if word == "gain"
            else f"write: {EXAMPLES[word]}"
        )
        raise Complaint(value.place, f"`{word}` must be greater than zero", mend)


def read_order(value: Value, settled: Settled) -> Value:
    """Return an order as a plain number; raises Complaint unless it is whole and from 1 to 20."""
    order = try_out(value.expression, settled.trials).whole
    if order is None or order < 1:
        raise Complaint(value.place, "an order is a whole number from 1", "write: order 2")
    if order > HIGHEST_ORDER:
        raise Complaint(
            value.place,
            f"orders above {HIGHEST_ORDER} are refused",
            "split the response into several cascades",
        )
    return replace(value, expression=Number(Fraction(order), value.expression.place))


def refuse_empty(low: Value, high: Value, settled: Settled) -> None:
    """Raise Complaint where a range, of which both ends have a number, does not end above its beginning."""
    length = Sum((_in_hertz(high), Negative(_in_hertz(low), low.place)), low.place)
    trial = try_out(length, settled.trials)
    if trial.is_known and (trial.is_zero or trial.sign == -1):
        raise Complaint(high.place, "the range ends before it begins", "write the lower value first")


def _in_hertz(value: Value) -> Expression:
    """Return a value as it is, and a frequency in rad/s divided by 2 pi."""
    if value.unit != "rad/s":
        return value.expression
    place = value.place
    turn = Product((Number(Fraction(2), place), Name("pi", place)), place)
    return Product((value.expression, Reciprocal(turn, place)), place)
