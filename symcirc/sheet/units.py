"""Does a unit fit the name that it is given to, and what is the value in SI base units?"""

from __future__ import annotations

import sympy

from symcirc.complaints import Complaint
from symcirc.sheet.model import Symbol, Value

#: The units that may be written for each dimension, the base unit first; None is a bare number.
FITTING: dict[str | None, tuple[str | None, ...]] = {
    "ohm": ("ohm", None),
    "F": ("F", None),
    "H": ("H", None),
    "S": ("S", None),
    "Hz": ("Hz", "rad/s", None),
    "ratio": (None, "dB", "%"),
    None: (None, "ohm", "F", "H", "S", "Hz", "rad/s", "s", "dB", "%"),
}
EXAMPLES = {
    "ohm": "4.7 kohm or 4k7",
    "F": "22 nF or 22n",
    "H": "10 mH or 10m",
    "S": "2 mS",
    "Hz": "1 MHz or 6e6 rad/s",
    "ratio": "10, or 20 dB",
}
#: The code letters that say a unit as well.
CODE_UNITS = {"R": "ohm", "F": "F"}
#: 1e30 as a ratio, in decibels.
LARGEST_DB = 600


def check_unit(value: Value, symbol: Symbol) -> None:
    """Raise Complaint where the unit or the code's letter contradicts the name."""
    dimension = symbol.dimension
    meant = {None: "is a parameter", "ratio": "is a ratio"}.get(dimension, f"is in {dimension}")
    mend = f"write a value such as {EXAMPLES[dimension]}" if dimension else "use another unit, or none"
    if value.unit not in FITTING[dimension]:
        raise Complaint(value.place, f"the unit {value.unit} does not fit, as `{symbol.label}` {meant}", mend)
    coded = CODE_UNITS.get(value.code or "")
    if coded and dimension is not None and coded != dimension:
        raise Complaint(
            value.place,
            f"the letter {value.code} in a value code means {coded}, and `{symbol.label}` {meant}",
            mend,
        )


def in_base_units(number: sympy.Expr, value: Value, symbol: Symbol) -> sympy.Expr:
    """Return a number in SI base units: a ratio where it is in dB or %, hertz for a frequency in rad/s."""
    if value.unit == "dB":
        if abs(number) > LARGEST_DB:
            raise Complaint(
                value.place,
                f"the value of `{symbol.label}` is out of range",
                f"use a ratio from -{LARGEST_DB} dB to {LARGEST_DB} dB",
            )
        return sympy.Integer(10) ** (number / 20)
    if value.unit == "%":
        return number / 100
    if value.unit == "rad/s" and symbol.dimension == "Hz":
        return number / (2 * sympy.pi)
    return number
