"""Numbers as an engineer writes them: SI prefixes and units, and the value codes of IEC 60062."""

from __future__ import annotations

import re
from fractions import Fraction

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet.expression import LARGEST, SMALLEST

PREFIXES = {
    "p": -12,
    "n": -9,
    "u": -6,
    "µ": -6,  # micro sign
    "μ": -6,  # Greek mu
    "m": -3,
    "": 0,
    "k": 3,
    "M": 6,
    "G": 9,
    "T": 12,
}
#: How a unit may be written, and what it is.
UNITS = {
    "ohm": "ohm",
    "Ω": "ohm",
    "Ω": "ohm",
    "F": "F",
    "H": "H",
    "S": "S",
    "Hz": "Hz",
    "rad/s": "rad/s",
    "s": "s",
}
BARE_UNITS = {"dB": "dB", "%": "%", "deg": "deg", "°": "deg"}
#: The letters of IEC 60062 that stand in the place of the decimal point.
CODE_LETTERS = {"R": 0, "F": 0, "K": 3} | {prefix: power for prefix, power in PREFIXES.items() if prefix}


def read_number(text: str, place: Place) -> Fraction:
    """Return the exact value of a plain number such as ``4.7`` or ``8e3``.

    Raises Complaint where it lies outside 1e-30 to 1e30 (and is not 0): found from the digits and the exponent,
    before a huge number is made.

    >>> from symcirc.complaints import Source
    >>> read_number("2.2e-9", Place(1, 1, 7, Source("a.stage", "2.2e-9")))
    Fraction(11, 5000000000)
    """
    mantissa, _, power = text.lower().partition("e")
    if len(mantissa) > 200 or len(power) > 6:
        raise _out_of_range(place)
    value = Fraction(mantissa)
    exponent = int(power or "0")
    if abs(exponent) > 300:
        if value == 0:
            return value
        raise _out_of_range(place)
    return in_range(value * Fraction(10) ** exponent, place)


def in_range(value: Fraction, place: Place) -> Fraction:
    """Return ``value`` if it is 0 or its size is from 1e-30 to 1e30; raise Complaint otherwise."""
    if value != 0 and not SMALLEST <= abs(value) <= LARGEST:
        raise _out_of_range(place)
    return value


def _out_of_range(place: Place) -> Complaint:
    return Complaint(
        place,
        "this number is out of range",
        "use a number between 1e-30 and 1e30 in size, or 0 where 0 makes sense",
    )


def read_code(text: str, place: Place) -> tuple[Fraction, str]:
    """Return the value of a code after IEC 60062 and its letter.

    >>> from symcirc.complaints import Source
    >>> read_code("4k7", Place(1, 1, 4, Source("a.stage", "4k7")))
    (Fraction(4700, 1), 'k')
    """
    letter = next(c for c in text if c in CODE_LETTERS)
    whole, _, decimals = text.partition(letter)
    mantissa = whole if not decimals else f"{whole}.{decimals}"
    if len(mantissa) > 200:
        raise _out_of_range(place)
    return in_range(Fraction(mantissa) * Fraction(10) ** CODE_LETTERS[letter], place), letter


def read_unit(text: str, number: str, place: Place) -> tuple[Fraction, str]:
    """Return the factor of the prefix and the unit, as the design names it.

    Raises Complaint for what is no unit; ``number`` is what stood before it, for the mend.

    >>> from symcirc.complaints import Source
    >>> read_unit("nF", "22", Place(1, 4, 6, Source("a.stage", "22 nF")))
    (Fraction(1, 1000000000), 'F')
    """
    if text in BARE_UNITS:
        return Fraction(1), BARE_UNITS[text]
    for prefix in (text[:1], ""):
        unit = UNITS.get(text[len(prefix) :])
        if prefix in PREFIXES and unit:
            return Fraction(10) ** PREFIXES[prefix], unit
    raise _unknown_unit(text, number, place)


def _unknown_unit(text: str, number: str, place: Place) -> Complaint:
    if text in CODE_LETTERS:
        return Complaint(
            place,
            f"`{text}` alone is not a unit; a prefix alone must be glued to its digits",
            f"write {number}{text}, or {number} {text if text in PREFIXES else ''}ohm (F, H, Hz) with the unit",
        )
    if text[:1] == "K" and text[1:] in UNITS:
        return Complaint(
            place, f"`{text}` is not a unit: SI writes kilo as a small k", f"write {number} k{text[1:]}"
        )
    if re.fullmatch(r"[A-Za-z]+[0-9_][A-Za-z0-9_]*", text):
        return Complaint(
            place, f"`{text}` is not a unit", f"if it is a name, write the product with *: {number}*{text}"
        )
    spellings = [prefix + unit for unit in UNITS for prefix in PREFIXES] + list(BARE_UNITS)
    hint = nearest(text, spellings)
    known = "ohm, F, H, S, Hz, rad/s, s, dB, % or deg, with an SI prefix"
    return Complaint(place, f"`{text}` is not a unit", hint or f"use {known}")
