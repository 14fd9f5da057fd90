"""The symbols of parts with more than two terminals, in grid steps from the upper left pin's column and the middle row.

The amplifier is the triangle of the textbooks, a controlled source the diamond, with the marks of the ideal sources of
IEC 60617 (02-16, from memory) inside; the current conveyor is a box with its letters.
"""

from __future__ import annotations

from symcirc.drawing.layout import PIN, WIDE
from symcirc.drawing.primitives import Line, Point, Text
from symcirc.drawing.symbols import Body, arc, arrow, line, minus, plus

#: Where a lead ends, from the left pins' column and from the right pins' column.
REACH = {"opamp": (0.5, 0.5), "transformer": (1.35, 1.35)}
#: The middle and half the size of a controlled source's diamond.
DIAMOND, HALF = 2.55, 0.55


def reach(kind: str) -> tuple[float, float]:
    """Return how long the leads at the left and at the right are."""
    return REACH.get(kind, (0.6, 0.6))


def device_body(kind: str, flip: int, sign: str) -> tuple[Body, tuple[Text, ...]]:
    """Return a device's body and the letters inside it.

    Args:
        kind: the device's kind.
        flip: bit 1 where its left pins are exchanged, bit 2 where its right pins are.
        sign: a conveyor's sign as it is written.
    """
    first = PIN if flip & 1 else -PIN
    if kind == "opamp":
        triangle = line((0.5, -1.9), (0.5, 1.9), (WIDE - 0.5, 0), closed=True)
        return (triangle, *minus(0.95, first), *plus(0.95, -first)), ()
    if kind == "transformer":
        return _transformer(flip), ()
    if kind == "conveyor":
        letters = [Text((0.85, first + 0.2), "y"), Text((0.85, 0.2 - first), "x")]
        letters.append(Text((WIDE - 0.85, 0.2), "z", "end"))
        letters.append(Text((WIDE / 2 - 0.1, 0.2), f"CC{sign}", "middle"))
        return (_frame(),), tuple(letters)
    driven = PIN if flip & 2 else -PIN
    return (_frame(), *_sensing(kind, first), *_driving(kind, driven)), ()


def _frame() -> Line:
    return line((0.6, -1.8), (WIDE - 0.6, -1.8), (WIDE - 0.6, 1.8), (0.6, 1.8), closed=True)


def _sensing(kind: str, first: float) -> Body:
    if kind in ("vcvs", "vccs"):
        return (*plus(0.95, first), *minus(0.95, -first))
    branch: tuple[Point, ...] = ((0.6, -PIN), (1.0, -PIN), (1.0, PIN), (0.6, PIN))
    return (Line(branch), *arrow((1.3, 0.35 * first), (1.3, -0.35 * first)))


def _driving(kind: str, first: float) -> Body:
    x, edge = DIAMOND, WIDE - 0.6
    body: list[Line] = [
        line((edge, -PIN), (x, -PIN), (x, -HALF)),
        line((edge, PIN), (x, PIN), (x, HALF)),
        line((x, -HALF), (x + HALF, 0), (x, HALF), (x - HALF, 0), closed=True),
    ]
    if kind in ("vcvs", "ccvs"):
        body.append(line((x, -HALF), (x, HALF)))
        return (*body, *plus(x - 0.4, 0.75 * first, 0.14))
    body.append(line((x - HALF, 0), (x + HALF, 0)))
    return (*body, *arrow((x - 0.72, 0.45 * first), (x - 0.72, -0.45 * first)))


def _transformer(flip: int) -> Body:
    body: list[Line] = [line((1.9, -1.1), (1.9, 1.1)), line((2.1, -1.1), (2.1, 1.1))]
    for x, start, end in ((1.35, -90, 90), (WIDE - 1.35, 270, 90)):
        humps = [arc((x, -0.75 + 0.5 * n), 0.25, start, end) for n in range(4)]
        body.append(Line(tuple(p for hump in humps for p in hump)))
    for x, bit in ((1.05, 1), (WIDE - 1.05, 2)):
        y = 0.7 if flip & bit else -0.7
        body.append(Line(arc((x, y), 0.11, 0, 360), closed=True, filled=True))
    return tuple(body)
