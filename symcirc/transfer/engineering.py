"""Numbers with units as engineers write them; the sheet's language reads what is written here."""

from __future__ import annotations

import math
from decimal import Decimal

#: What stands for each power of a thousand; ``u`` is micro, so that plain ASCII is enough.
PREFIXES = {-12: "p", -9: "n", -6: "u", -3: "m", 0: "", 3: "k", 6: "M", 9: "G", 12: "T"}
#: Units that take no prefix.
BARE = ("", "dB", "%", "deg")


def engineering(value: float, unit: str, digits: int = 5) -> str:
    """Return a number with its unit, rounded to some significant digits, zeros at the end left out.

    Args:
        value: in the unit itself (ohm, F, H, Hz, rad/s, s, ...), dB, % or deg.
        unit: what to write behind; "" for a ratio. Logarithms, angles and ratios take no prefix.
        digits: how many significant digits there are.

    Below 1e-12 and above 1e15 powers of ten are written.

    >>> engineering(1200, "Hz"), engineering(22e-9, "F"), engineering(-3.0103, "dB", 3)
    ('1.2 kHz', '22 nF', '-3.01 dB')
    """
    if not math.isfinite(value):
        return _with_unit("infinite" if math.isinf(value) and value > 0 else str(value), unit)
    if value == 0:
        return _with_unit("0", unit)
    rounded = Decimal(f"{value:.{digits - 1}e}")
    exponent = rounded.adjusted() // 3 * 3
    if unit in BARE:
        return _with_unit(_plain(rounded, digits), unit)
    if exponent not in PREFIXES:
        return _with_unit(_scientific(rounded), unit)
    return f"{rounded.scaleb(-exponent).normalize():f} {PREFIXES[exponent]}{unit}"


def _with_unit(number: str, unit: str) -> str:
    return f"{number} {unit}" if unit else number


def _plain(number: Decimal, digits: int) -> str:
    """Write a number without a prefix: as it is while it is of ordinary size, else with a power of ten."""
    return f"{number.normalize():f}" if -5 <= number.adjusted() < max(digits, 6) else _scientific(number)


def _scientific(number: Decimal) -> str:
    exponent = number.adjusted()
    return f"{number.scaleb(-exponent).normalize():f}e{exponent}"
