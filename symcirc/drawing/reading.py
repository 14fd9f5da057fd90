"""A drawing read back: from the lines of an SVG to what they join, as a person reads them.

This is the proof that a drawing is the circuit. It shares no code with what places, wires and draws, and looks at
the written SVG only: at lines, dots and symbols, at the marks inside a symbol, never at a name of a net. The rules are
those of IEC 61082-1 (from memory): lines that end on each other are joined, more than two only with a dot, lines that
cross are not joined, and a dot on a crossing of four is not used.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass
from xml.etree import ElementTree

Point = tuple[float, float]
Segment = tuple[Point, Point]
Box = tuple[float, float, float, float]

SVG = "{http://www.w3.org/2000/svg}"
#: Coordinates are written to a hundredth of a pixel.
NEAR = 0.05


@dataclass(frozen=True)
class Sign:
    """A symbol as it stands in the SVG: its leads by terminal, from the outside in, its body's lines and letters."""

    kind: str
    name: str
    leads: dict[str, Segment]
    lines: tuple[tuple[tuple[Point, ...], bool], ...]
    discs: tuple[tuple[Point, float], ...]
    letters: tuple[tuple[Point, str], ...]

    @property
    def box(self) -> Box:
        """What the body covers: left, top, right, bottom."""
        points = [p for line, _ in self.lines for p in line]
        points += [(x + d, y + e) for (x, y), r in self.discs for d, e in ((-r, -r), (r, r))]
        xs, ys = [x for x, _ in points], [y for _, y in points]
        return min(xs), min(ys), max(xs), max(ys)


@dataclass(frozen=True)
class Picture:
    """The geometry of an SVG: wires, dots, symbols, and names of nodes with about the box of their letters."""

    wires: tuple[Segment, ...]
    dots: tuple[Point, ...]
    signs: tuple[Sign, ...]
    names: tuple[tuple[Segment, str], ...]


@dataclass(frozen=True)
class Reading:
    """What a picture says.

    ``nets`` are the groups of (symbol's name, terminal) that are joined, and ``grounded`` the group that is joined to
    signs of ground. ``names`` are the names of nodes, each with the group whose wire it stands beside. ``ambiguous``
    says where a reader could not tell, and ``crossings`` counts crossing wires.
    """

    nets: frozenset[frozenset[tuple[str, str]]]
    grounded: frozenset[tuple[str, str]]
    names: tuple[tuple[str, frozenset[tuple[str, str]]], ...]
    ambiguous: tuple[str, ...]
    crossings: int


def read_picture(svg: str) -> Picture:
    """Return the geometry of an SVG as this package writes it."""
    root = ElementTree.fromstring(svg)
    wires = tuple(_ends(path) for path in root.findall(f"{SVG}path[@class='wire']"))
    dots = tuple(_centre(circle) for circle in root.findall(f"{SVG}circle[@class='joint']"))
    signs = tuple(_sign(group) for group in root.findall(f"{SVG}g[@class='symbol']"))
    names = tuple((_letters_box(text), text.text or "") for text in root.findall(f"{SVG}text[@class='node']"))
    return Picture(wires, dots, signs, names)


def _letters_box(text: ElementTree.Element) -> Segment:
    x, y, size = (float(text.get(word, "")) for word in ("x", "y", "font-size"))
    wide = 0.5 * size * len(text.text or "")
    left = x - {"start": 0.0, "middle": wide / 2, "end": wide}[text.get("text-anchor", "start")]
    return (left, y - 0.7 * size), (left + wide, y)


def _points(path: ElementTree.Element) -> tuple[Point, ...]:
    numbers = [float(word) for word in re.findall(r"-?\d+(?:\.\d+)?", path.get("d", ""))]
    return tuple(zip(numbers[0::2], numbers[1::2], strict=True))


def _ends(path: ElementTree.Element) -> Segment:
    first, second = _points(path)
    return first, second


def _centre(circle: ElementTree.Element) -> Point:
    return float(circle.get("cx", "")), float(circle.get("cy", ""))


def _sign(group: ElementTree.Element) -> Sign:
    leads, lines = {}, []
    for path in group.findall(f"{SVG}path"):
        if path.get("class") == "lead":
            leads[path.get("data-terminal", "")] = _ends(path)
        else:
            lines.append((_points(path), path.get("fill") is not None))
    discs = tuple((_centre(c), float(c.get("r", ""))) for c in group.findall(f"{SVG}circle"))
    letters = tuple(
        ((float(t.get("x", "")), float(t.get("y", ""))), t.text or "")
        for t in group.findall(f"{SVG}text[@class='inside']")
    )
    return Sign(group.get("data-kind", ""), group.get("data-name", ""), leads, tuple(lines), discs, letters)


def read_back(picture: Picture) -> Reading:
    """Return what a picture joins, and where it is ambiguous."""
    leads = [(n, role) for n, sign in enumerate(picture.signs) for role in sign.leads]
    segments = [*picture.wires, *(picture.signs[n].leads[role] for n, role in leads)]
    first_lead = len(picture.wires)
    groups = _Groups(len(segments))
    ambiguous: list[str] = []
    crossings = 0
    for i in range(len(segments)):
        for j in range(i):
            meeting = _meet(segments[i], segments[j], picture.dots)
            if meeting == "joined":
                groups.join(i, j)
            elif meeting == "crossing":
                crossings += 1
                if i >= first_lead:
                    ambiguous.append(
                        f"a line crosses a lead of {picture.signs[leads[i - first_lead][0]].name}"
                    )
            elif meeting:
                ambiguous.append(f"{meeting} at {segments[i][0]}")
    ambiguous += _odd_points(segments, first_lead, picture.dots)
    ambiguous += _strayed(picture)
    nets: dict[int, set[tuple[str, str]]] = {}
    grounds = set()
    for number, (sign, role) in enumerate(leads, first_lead):
        root = groups.find(number)
        if picture.signs[sign].kind == "ground":
            grounds.add(root)
        else:
            nets.setdefault(root, set()).add((picture.signs[sign].name, role))
    grounded = frozenset(pin for root in grounds for pin in nets.pop(root, set()))
    names = []
    for box, name in picture.names:
        nearest = min(range(first_lead), key=lambda n: _gap(box, segments[n]))
        names.append((name, frozenset(nets.get(groups.find(nearest), ()))))
    found = frozenset(map(frozenset, nets.values()))
    return Reading(found, grounded, tuple(names), tuple(ambiguous), crossings)


def _gap(box: Segment, line: Segment) -> float:
    """Return the distance of a box and an upright or level line."""
    apart = []
    for axis in (0, 1):
        low, high = sorted((line[0][axis], line[1][axis]))
        apart.append(max(0.0, low - box[1][axis], box[0][axis] - high))
    return math.hypot(*apart)


class _Groups:
    """Numbers in groups that can be joined (a union-find forest)."""

    def __init__(self, size: int) -> None:
        self.parent = list(range(size))

    def find(self, number: int) -> int:
        while self.parent[number] != number:
            number = self.parent[number]
        return number

    def join(self, one: int, other: int) -> None:
        self.parent[self.find(one)] = self.find(other)


def _close(one: Point, other: Point) -> bool:
    return abs(one[0] - other[0]) < NEAR and abs(one[1] - other[1]) < NEAR


def _on(point: Point, segment: Segment) -> bool:
    """Whether a point lies on an upright or level segment, its ends included."""
    (a, b), (c, d) = segment
    return min(a, c) - NEAR < point[0] < max(a, c) + NEAR and min(b, d) - NEAR < point[1] < max(b, d) + NEAR


def _meet(one: Segment, other: Segment, dots: tuple[Point, ...]) -> str:
    """Return how two segments meet: "", joined, crossing, or words for what is ambiguous."""
    level = [abs(s[0][1] - s[1][1]) < NEAR for s in (one, other)]
    shared = [p for p in one if _on(p, other)] + [p for p in other if _on(p, one)]
    if level[0] == level[1] and len(shared) >= 2 and not all(_close(shared[0], p) for p in shared):
        return "two lines lie on one another"
    if shared:
        at = shared[0]
        both_end = any(_close(at, p) for p in one) and any(_close(at, p) for p in other)
        if both_end or any(_close(at, dot) for dot in dots):
            return "joined"
        return "a line ends on another without a dot"
    if level[0] == level[1]:
        return ""
    flat, upright = (one, other) if level[0] else (other, one)
    at = (upright[0][0], flat[0][1])
    if not (_on(at, flat) and _on(at, upright)):
        return ""
    return "a dot on a crossing" if any(_close(at, dot) for dot in dots) else "crossing"


def _odd_points(segments: list[Segment], first_lead: int, dots: tuple[Point, ...]) -> Iterator[str]:
    """Yield what is wrong with the ends of lines and the dots: three that meet without one, four, ends in the air.

    The inner end of a lead belongs to its symbol and does not count.
    """
    ends: list[Point] = []
    for number, segment in enumerate(segments):
        for end in segment if number < first_lead else segment[:1]:
            if not any(_close(end, known) for known in ends):
                ends.append(end)
    for point in ends:
        arms = sum(_arms(point, segment, number < first_lead) for number, segment in enumerate(segments))
        dotted = any(_close(point, dot) for dot in dots)
        if arms == 1:
            yield f"a line ends in the air at {point}"
        elif arms > 3 or (arms == 3) != dotted:
            yield f"{arms} lines meet at {point} with{'' if dotted else 'out'} a dot"
    for dot in dots:
        if not any(_close(dot, end) for end in ends):
            yield f"a dot where no line ends at {dot}"


def _arms(point: Point, segment: Segment, is_wire: bool) -> int:
    """Return how many arms a segment has at a point: none, one at its end, two on its way."""
    if any(_close(point, end) for end in (segment if is_wire else segment[:1])):
        return 1
    return 2 if _on(point, segment) else 0


def _strayed(picture: Picture) -> Iterator[str]:
    """Yield the wires that run through a symbol, and the symbols that lie on one another."""
    boxes = [(sign.name or "a sign of ground", sign.box) for sign in picture.signs]
    for (a, b), (c, d) in picture.wires:
        wire = (min(a, c), min(b, d), max(a, c), max(b, d))
        yield from (f"a wire runs through {name}" for name, box in boxes if _cover(wire, box))
    for number, (name, box) in enumerate(boxes):
        yield from (f"{name} lies on {other}" for other, under in boxes[:number] if _cover(box, under))


def _cover(one: Box, other: Box) -> bool:
    """Whether two boxes have more in common than an edge; a line is a box without width."""
    return all(one[axis] < other[axis + 2] - NEAR and other[axis] + NEAR < one[axis + 2] for axis in (0, 1))
