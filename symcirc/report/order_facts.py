"""What the ways to write a selection of orders share."""

from __future__ import annotations

from math import ceil, log10, pi

from symcirc.masks.order import Row, Selection
from symcirc.transfer.engineering import engineering

#: Digits of a frequency in a target, at least and at most: enough that rounding keeps it inside its room.
_FEWEST, _MOST = 5, 12


def target_line(selection: Selection, row: Row) -> str:
    """Return the statement that asks for a row's response: it can be put into the sheet as it is."""
    spot = row.placing.spot
    spare = max(row.placing.room - 1, 10.0**-_MOST)
    count = min(max(ceil(1 - log10(spare)) + 2, _FEWEST), _MOST)
    size = engineering(spot.size / (2 * pi), "Hz", count)
    where = f"edge {size}"
    if spot.centre is not None:
        where = f"centre {engineering(spot.centre / (2 * pi), 'Hz', count)}, bandwidth {size}"
    candidate = row.candidate
    return f"target {selection.mask.ask}: {spot.kind} {candidate.family}, order {row.order}, {where}{candidate.words}"
