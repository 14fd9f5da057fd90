"""The preferred values of IEC 60063, exact."""

from __future__ import annotations

from fractions import Fraction
from math import floor, log10

#: E24 is older than its rule: these are the standard's own numbers, two digits.
_E24 = (10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91)
#: The series that take every so many-th value of E24.
_STEPS = {"E3": 8, "E6": 4, "E12": 2, "E24": 1}
#: The series of three digits: 10^(n/N), rounded.
_ROUNDED = {"E48": 48, "E96": 96, "E192": 192}
#: E192 holds 9.20 where its rule gives 9.19.
_IRREGULAR = {("E192", 919): 920}


def decade(series: str) -> tuple[Fraction, ...]:
    """Return the values of a series from 1 to below 10, ascending.

    Args:
        series: E3, E6, E12, E24, E48, E96 or E192; KeyError for another name.

    Source: IEC 60063, Preferred number series for resistors and capacitors (from memory).

    >>> [float(value) for value in decade("E6")]
    [1.0, 1.5, 2.2, 3.3, 4.7, 6.8]
    >>> len(decade("E192"))
    192
    """
    if series in _STEPS:
        return tuple(Fraction(two, 10) for two in _E24[:: _STEPS[series]])
    count = _ROUNDED[series]
    three = [floor(100 * 10 ** (n / count) + 0.5) for n in range(count)]
    return tuple(Fraction(_IRREGULAR.get((series, digits), digits), 100) for digits in three)


def values_between(series: str, low: float | Fraction, high: float | Fraction) -> tuple[Fraction, ...]:
    """Return the values of a series from low to high, both included, ascending.

    Args:
        series: E3 to E192.
        low, high: positive, in the unit that the values shall have.

    >>> [int(value) for value in values_between("E3", 220, 4700)]
    [220, 470, 1000, 2200, 4700]
    """
    first, last = floor(log10(low)) - 1, floor(log10(high)) + 1
    mantissas = decade(series)
    values = (Fraction(10) ** power * mantissa for power in range(first, last + 1) for mantissa in mantissas)
    return tuple(value for value in values if low <= value <= high)
