"""Numbers with units as sentences have them."""

from __future__ import annotations

from math import floor, log10

_PREFIXES = {-12: "p", -9: "n", -6: "u", -3: "m", 0: "", 3: "k", 6: "M", 9: "G"}


def engineering(value: float, unit: str) -> str:
    """Return a value with four digits and an SI prefix where it has a unit, else as a plain number.

    >>> engineering(4.4e-8, "F"), engineering(-1234.56, "ohm"), engineering(0.70710678, "")
    ('44 nF', '-1.235 kohm', '0.707107')
    """
    if not unit:
        return f"{value:.6g}"
    if not value:
        return f"0 {unit}"
    power = min(max(3 * floor(log10(abs(value)) / 3 + 1e-9), -12), 9)
    return f"{value / 10**power:.4g} {_PREFIXES[power]}{unit}"
