"""Numbers as an engineer writes them: SI prefixes and units, and the value codes of IEC 60062."""

from __future__ import annotations

import re
from fractions import Fraction

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet.expression import LARGEST, SMALLEST

MICROS = ("u", "\N{MICRO SIGN}", "\N{GREEK SMALL LETTER MU}")
#: SI's prefixes that the trade uses, as powers of ten.
PREFIXES = {
    "f": -15,
    "p": -12,
    "n": -9,
    **dict.fromkeys(MICROS, -6),
    "m": -3,
    "": 0,
    "k": 3,
    "M": 6,
    "G": 9,
    "T": 12,
}
#: How a unit may be written behind a prefix, and what it is.
UNITS = {
    "ohm": "ohm",
    "\N{OHM SIGN}": "ohm",
    "\N{GREEK CAPITAL LETTER OMEGA}": "ohm",
    "F": "F",
    "H": "H",
    "S": "S",
    "Hz": "Hz",
    "rad/s": "rad/s",
    "s": "s",
}
BARE_UNITS = {"dB": "dB", "%": "%", "deg": "deg", "\N{DEGREE SIGN}": "deg"}
#: The letters of IEC 60062 that stand in the place of the decimal point.
CODE_LETTERS = {"R": 0, "F": 0, "K": 3} | {p: power for p, power in PREFIXES.items() if p not in ("", "f")}
#: A value code without its first digits.
CODE_TAIL = r"[RFKkMGTmunp\u00B5\u03BC][0-9]+"
#: Units that people write out in full.
IN_WORDS = {
    "ohms": "ohm",
    "farad": "F",
    "farads": "F",
    "henry": "H",
    "henries": "H",
    "siemens": "S",
    "mho": "S",
    "hertz": "Hz",
    "sec": "s",
    "second": "s",
    "seconds": "s",
    "rad": "rad/s",
    "rads": "rad/s",
    "percent": "%",
    "degree": "deg",
    "degrees": "deg",
}
#: A number of more characters than this is refused before it is made.
LONGEST_NUMBER = 200


def read_number(text: str, place: Place) -> Fraction:
    """Return the exact value of a plain number such as ``4.7`` or ``8e3``.

    Raises Complaint where it lies outside 1e-30 to 1e30 (and is not 0): found from the digits and the
    exponent, before a huge number is made.

    >>> from symcirc.complaints import Source
    >>> read_number("2.2e-9", Place(1, 1, 7, Source("a.stage", "2.2e-9")))
    Fraction(11, 5000000000)
    """
    if len(text) <= 30 and text.isdecimal():
        return Fraction(int(text))
    if len(text) > LONGEST_NUMBER:
        raise _too_long(place)
    mantissa, _, power = text.lower().partition("e")
    value, exponent = Fraction(mantissa), int(power or "0")
    if value != 0 and abs(exponent) > 2 * LONGEST_NUMBER:
        raise _out_of_range(place)
    return in_range(value * Fraction(10) ** exponent, place) if value else value


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


def _too_long(place: Place) -> Complaint:
    return Complaint(
        place,
        f"this number has more than {LONGEST_NUMBER} characters",
        "write fewer digits, or a power of ten as 8e3",
    )


def read_code(text: str, place: Place) -> tuple[Fraction, str]:
    """Return the value of a code after IEC 60062 and its letter.

    >>> from symcirc.complaints import Source
    >>> read_code("4k7", Place(1, 1, 4, Source("a.stage", "4k7")))
    (Fraction(4700, 1), 'k')
    """
    if len(text) > LONGEST_NUMBER:
        raise _too_long(place)
    letter = next(c for c in text if c in CODE_LETTERS)
    whole, _, decimals = text.partition(letter)
    mantissa = f"{whole}.{decimals}" if decimals else whole
    return in_range(Fraction(mantissa) * Fraction(10) ** CODE_LETTERS[letter], place), letter


def read_unit(text: str, number: str, place: Place) -> tuple[Fraction, str]:
    """Return the factor of the prefix and the unit, as the design names it.

    Raises Complaint for what is no unit; ``number`` is what stood before it, with the blank between.

    >>> from symcirc.complaints import Source
    >>> read_unit("nF", "22 ", Place(1, 4, 6, Source("a.stage", "22 nF")))
    (Fraction(1, 1000000000), 'F')
    """
    if text in BARE_UNITS:
        return Fraction(1), BARE_UNITS[text]
    for prefix in (text[:1], ""):
        unit = UNITS.get(text[len(prefix) :])
        if prefix in PREFIXES and unit:
            return Fraction(10) ** PREFIXES[prefix], unit
    glued = number == number.rstrip()
    raise Complaint(place, *_unknown_unit(text, number.rstrip(), glued))


def _unknown_unit(text: str, number: str, glued: bool) -> tuple[str, str]:
    """Return what is wrong with a word that stands where a unit does, and how it is mended."""
    if text in PREFIXES or text in CODE_LETTERS:
        unit = {"K": "kohm", "R": "ohm"}.get(text, f"{text}F" if PREFIXES.get(text, 0) < 0 else f"{text}ohm")
        with_unit = f"{number} {unit}"
        if glued and number.isdigit():
            return (
                f"the value code `{number}{text}` stands where no code can: a code takes no sign and no arithmetic",
                f"write it alone, or as a number: {with_unit} or the like",
            )
        if glued:
            return (
                f"`{number}{text}` is not a value code",
                f"write it as 4{text}7, or with its unit as {with_unit}",
            )
        codes = f"{number}{text} or " if text in CODE_LETTERS else ""
        return (
            f"`{text}` alone is not a unit, and a prefix alone must be glued to its digits",
            f"write {codes}{with_unit}",
        )
    code = re.match(CODE_TAIL, text)
    if glued and code:
        return (
            f"`{number}{text}` is neither a value code nor a number with a unit",
            f"write the code alone, {number}{code.group()}, or a number with its unit as 4.7 kohm",
        )
    if re.fullmatch(r"[A-Za-z]+[0-9_][A-Za-z0-9_]*", text):
        return f"`{text}` is not a unit", f"if it is a name, write the product with *: {number}*{text}"
    return f"`{text}` is not a unit of a stage sheet", _unit_hint(text)


def _unit_hint(text: str) -> str:
    for prefix in ("", text[:1]):
        unit = IN_WORDS.get(text[len(prefix) :].lower())
        if unit and prefix in PREFIXES:
            return f"write the unit as {prefix}{unit}"
    spellings = [prefix + unit for unit in UNITS for prefix in PREFIXES if unit.isascii()] + list(BARE_UNITS)
    known = "use ohm, F, H, S, Hz, rad/s or s with an SI prefix, or dB, % or deg"
    folded = any(text.lower() == spelling.lower() for spelling in spellings)
    return (nearest(text, spellings) if folded or len(text) > 2 else "") or known
