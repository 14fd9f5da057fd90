"""The ranges in which parts may lie, and the preferred values in them."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Any

from symcirc.match.ranges import Range
from symcirc.sheet.model import Sheet
from symcirc.transfer.engineering import engineering
from symcirc.values.series import values_between

#: The series whose values are named where the sheet says nothing of what can be bought (common practice).
SERIES = {"F": "E12", "H": "E12", "ohm": "E24"}
#: How far beyond the one end of a range that has no other end its values are looked for.
DECADE = 10


def range_json(found: Range) -> dict[str, Any]:
    """Return the intervals of a part as an entry; an end is null where there is none.

    >>> range_json(Range("C1", ((1e-8, math.inf),)))
    {'part': 'C1', 'intervals': [[1e-08, None]]}
    """
    return {
        "part": found.part,
        "intervals": [[low, None if math.isinf(high) else high] for low, high in found.intervals],
    }


def range_lines(sheet: Sheet, ranges: tuple[Range, ...]) -> Iterator[str]:
    """Yield a line for each part: the ends of its range, and which values of the part's series lie in it."""
    for found in ranges:
        unit = sheet.symbols[found.part].dimension or ""
        series = _series(sheet, found.part, unit)
        pieces = [f"{_ends(*i, unit)} ({_values(*i, series, unit)})" for i in found.intervals]
        yield f"{found.part} {' or '.join(pieces) or 'of no value'}"


def _series(sheet: Sheet, part: str, unit: str) -> str:
    """Return the series that the sheet's ``parts`` lines give for this part, or the usual one."""
    kind = {"F": "C", "H": "L", "ohm": "R"}[unit]
    given = {b.kind: b.series for b in sheet.buyables if b.series is not None}
    return given.get(part, given.get(kind, SERIES[unit]))


def _ends(low: float, high: float, unit: str) -> str:
    """Return a range in words.

    >>> _ends(0, 3.31e-9, "F"), _ends(1e-9, 2e-9, "F"), _ends(1e3, math.inf, "ohm"), _ends(0, math.inf, "F")
    ('up to 3.31 nF', 'from 1 nF to 2 nF', 'from 1 kohm', 'of any value')
    """
    if not low:
        return "of any value" if math.isinf(high) else f"up to {engineering(high, unit)}"
    upper = "" if math.isinf(high) else f" to {engineering(high, unit)}"
    return f"from {engineering(low, unit)}{upper}"


def _values(low: float, high: float, series: str, unit: str) -> str:
    """Return which values of a series lie in a range.

    >>> _values(13.1e-9, 68e-9, "E12", "F"), _values(1.6e-9, 1.7e-9, "E12", "F"), _values(0, 5e-9, "E6", "F")
    ('E12: 15 nF to 68 nF', 'no E12 value', 'E6: up to 4.7 nF')
    """
    if not low and math.isinf(high):
        return f"every {series} value"
    inside = values_between(series, low or high / DECADE, low * DECADE if math.isinf(high) else high)
    if not inside:
        return f"no {series} value"
    first, last = (engineering(float(value), unit) for value in (inside[0], inside[-1]))
    if math.isinf(high):
        return f"{series}: {first} and up"
    if not low:
        return f"{series}: up to {last}"
    return f"{series}: {first}" + (f" to {last}" if len(inside) > 1 else "")
