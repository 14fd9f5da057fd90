"""What a drawing is made of, the same for every way of writing it: lines, circles and texts, in groups with a meaning.

All lengths are in pixels, x to the right and y downwards.
"""

from __future__ import annotations

from dataclasses import dataclass

Point = tuple[float, float]


@dataclass(frozen=True)
class Line:
    """A line through points; ``closed`` joins the last to the first, ``filled`` fills what it encloses."""

    points: tuple[Point, ...]
    closed: bool = False
    filled: bool = False
    dashed: bool = False


@dataclass(frozen=True)
class Circle:
    """A circle; ``filled`` makes it a dot."""

    centre: Point
    radius: float
    filled: bool = False


@dataclass(frozen=True)
class Text:
    """A text whose baseline begins, is centred or ends at a point; ``anchor`` is start, middle or end."""

    at: Point
    text: str
    anchor: str = "start"
    size: float = 12.0
    slanted: bool = False


@dataclass(frozen=True)
class Lead:
    """The line from a symbol's terminal, its first point, to the symbol's body."""

    role: str
    points: tuple[Point, Point]


Shape = Line | Circle | Text


@dataclass(frozen=True)
class Symbol:
    """A part of the circuit, a drive, an open terminal or a ground sign: its leads, its body and its texts.

    ``kind`` is a body's kind or ``ground``; ``name`` is empty for a ground sign.
    """

    kind: str
    name: str
    leads: tuple[Lead, ...]
    body: tuple[Line | Circle, ...]
    inside: tuple[Text, ...] = ()
    texts: tuple[Text, ...] = ()


@dataclass(frozen=True)
class Drawing:
    """A whole drawing: wires (each from end to end), joints, symbols, names of nodes, and frames with their names."""

    title: str
    description: str
    width: float
    height: float
    wires: tuple[tuple[Point, Point], ...]
    joints: tuple[Point, ...]
    symbols: tuple[Symbol, ...]
    node_names: tuple[Text, ...]
    frames: tuple[tuple[Line, Text], ...]
