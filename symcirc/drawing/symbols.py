"""The symbols of two-terminal parts, drives and signs, in grid steps about the middle of the part.

After IEC 60617 (resistor and general impedance 04-01-01, capacitor 04-02-01, inductor 04-03-01, ideal current and
voltage source 02-16-01 and 02-16-02, earth 02-15-01; from memory), and IEEE 315 for the zigzag resistor (from memory).
"""

from __future__ import annotations

from math import cos, pi, sin

from symcirc.drawing.primitives import Circle, Line, Point

Body = tuple[Line | Circle, ...]

STANDARDS = ("iec60617", "ieee315")


def line(*points: Point, closed: bool = False, filled: bool = False) -> Line:
    """Return a line through points."""
    return Line(points, closed, filled)


def arc(centre: Point, radius: float, start: float, end: float, steps: int = 12) -> tuple[Point, ...]:
    """Return points of an arc; angles in degrees, counted from the x axis towards the y axis."""
    x, y = centre
    turn = [pi / 180 * (start + (end - start) * n / steps) for n in range(steps + 1)]
    return tuple((x + radius * cos(t), y + radius * sin(t)) for t in turn)


def plus(x: float, y: float, size: float = 0.2) -> Body:
    """Return a plus sign."""
    return line((x - size, y), (x + size, y)), line((x, y - size), (x, y + size))


def minus(x: float, y: float, size: float = 0.2) -> Body:
    """Return a minus sign."""
    return (line((x - size, y), (x + size, y)),)


def arrow(tail: Point, tip: Point, size: float = 0.26) -> Body:
    """Return an arrow along a row or a column."""
    (a, b), (x, y) = tail, tip
    dx, dy = (x > a) - (x < a), (y > b) - (y < b)
    base = (x - size * dx, y - size * dy)
    one = (base[0] - 0.6 * size * dy, base[1] + 0.6 * size * dx)
    two = (base[0] + 0.6 * size * dy, base[1] - 0.6 * size * dx)
    return line(tail, base), line(one, tip, two, closed=True, filled=True)


def two_terminal(kind: str, standard: str) -> tuple[float, Body]:
    """Return half the length of a two-terminal symbol's body along the x axis, and the body."""
    if kind == "R" and standard == "ieee315":
        return 1.0, _zigzag()
    if kind in "RZY":
        high = 0.35 if kind == "R" else 0.45
        return 1.0, (line((-1, -high), (1, -high), (1, high), (-1, high), closed=True),)
    if kind == "C":
        return 0.16, (line((-0.16, -0.52), (-0.16, 0.52)), line((0.16, -0.52), (0.16, 0.52)))
    if kind == "L":
        humps = [arc((-0.75 + 0.5 * n, 0), 0.25, 180, 360) for n in range(4)]
        return 1.0, (Line(tuple(p for hump in humps for p in hump)),)
    if kind == "voltage":
        return 0.6, (Circle((0, 0), 0.6), line((-0.6, 0), (0.6, 0)), *plus(-0.95, -0.4, 0.17))
    return 0.6, (Circle((0, 0), 0.6), line((0, -0.6), (0, 0.6)), *arrow((-0.7, -0.45), (-1.25, -0.45)))


def _zigzag() -> Body:
    peaks = [(-1 + (2 * n + 1) / 6, 0.35 if n % 2 else -0.35) for n in range(6)]
    return (line((-1, 0), *peaks, (1, 0)),)


def ground() -> tuple[float, Body]:
    """Return the depth at which the sign of ground begins below its terminal, and the sign."""
    bars = ((0.5, 0.45), (0.67, 0.29), (0.84, 0.12))
    return 0.5, tuple(line((-half, y), (half, y)) for y, half in bars)
