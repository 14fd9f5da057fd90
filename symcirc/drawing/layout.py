"""A placement on the grid: where every body stands, where every net's trunk runs, and what follows from that.

The unit is one step of the grid; x grows to the right and y downwards. Every net has one trunk, a vertical line at its
x; each pin is joined to it by a horizontal line in the pin's own row. A pin that looks away from its net's trunk is
led around its device in a row of its own (a jog). A series part that lies in its row between the two trunks has only
a row; so the wires of a drawing have few bends whatever the search tries.
"""

from __future__ import annotations

from collections.abc import Iterable
from math import ceil, floor
from typing import NamedTuple

from symcirc.drawing.bodies import Body
from symcirc.drawing.schematic import Schematic
from symcirc.drawing.texts import text_width
from symcirc.sheet.model import GROUND

#: Directions as bits: what leaves a point to the left, to the right, up and down.
LEFT, RIGHT, UP, DOWN = 1, 2, 4, 8
EITHER = 0
#: Half the length of a two-terminal symbol with its leads along a row, and its whole length where it stands.
HALF, STANDING = 1.5, 3
#: The width of a device, and the distance of its upper and lower pins from its middle.
WIDE, PIN = 4, 1
Box = tuple[float, float, float, float]


class Placed(NamedTuple):
    """A pin where it stands: body, number of the pin, x, y, the side from which its net must come, and its lead."""

    body: int
    number: int
    x: float
    y: int
    side: int
    lead: int


class Shape(NamedTuple):
    """What a body or a net covers: boxes of a body; rows (y, x, x) and columns (x, y, y) of a net's wires."""

    bounds: Box
    boxes: tuple[Box, ...]
    rows: tuple[tuple[int, float, float], ...] = ()
    columns: tuple[tuple[float, int, int], ...] = ()


def overlap(one: Box, other: Box) -> bool:
    """Whether two boxes have an inner point in common."""
    return one[0] < other[2] and other[0] < one[2] and one[1] < other[3] and other[1] < one[3]


class Problem:
    """What does not change while the search goes on: bodies, nets by number, and the pins of every net."""

    def __init__(self, schematic: Schematic) -> None:
        self.schematic = schematic
        self.bodies = schematic.bodies
        self.nets = schematic.nets
        index = {net: number for number, net in enumerate(self.nets)}
        self.net_of = [[index.get(pin.net, -1) for pin in body.pins] for body in self.bodies]
        self.bodies_of: list[list[int]] = [[] for _ in self.nets]
        for number, nets in enumerate(self.net_of):
            for net in set(nets) - {-1}:
                self.bodies_of[net].append(number)
        self.grounded = [not b.is_device and any(p.net == GROUND for p in b.pins) for b in self.bodies]
        self.turns = [
            len(b.pins) == 2 and not b.is_drive and not self.grounded[n] for n, b in enumerate(self.bodies)
        ]
        self.caption = [beside(body) for body in self.bodies]
        self.text = [text_width(caption) for caption in self.caption]
        self.stacked = [max(text_width(b.label), text_width(b.value)) for b in self.bodies]
        self.span = [max(2 * HALF + 1, ceil(width) + 1) for width in self.text]


def caption_start(width: float) -> float:
    """Return where the text below a device begins, from its left pins: so that it never reaches beyond them."""
    return max(0.3, (WIDE - width) / 2)


def beside(body: Body) -> str:
    """Return the text in one line beside a body, a device's name inside it left out."""
    if body.kind == "opamp":
        return body.value
    if body.is_device:
        return body.label if body.kind == "conveyor" else " ".join(filter(None, (body.label, body.value)))
    return f"{body.label} = {body.value}" if body.value else body.label


class Layout:
    """A placement, which the search changes in place.

    ``flip`` of a device has bit 1 where its left pins are exchanged and bit 2 where its right pins are; that of
    another body says that its text stands on the other side (below; left).
    """

    def __init__(self, problem: Problem) -> None:
        count = len(problem.bodies)
        self.problem = problem
        self.x = [0] * count
        self.y = [0] * count
        self.flip = [0] * count
        self.standing = [int(not turns) for turns in problem.turns]
        self.trunk = [0] * len(problem.nets)
        self.jog = [[0] * len(body.pins) for body in problem.bodies]
        self._pins: dict[int, list[Placed]] = {}

    def forget(self, bodies: Iterable[int]) -> None:
        """Forget where the pins of bodies are: after each change of their places, or of a trunk they are on."""
        for body in bodies:
            self._pins.pop(body, None)

    def middle(self, body: int) -> float:
        """Return the x of a lying part's middle: as near to its own x as its trunks allow."""
        first, second = (self.trunk[net] for net in self.problem.net_of[body])
        low, high = min(first, second), max(first, second)
        half = self.problem.span[body] / 2
        if high - low < 2 * half:
            return (low + high) / 2
        return min(max(self.x[body], low + half), high - half)

    def pins(self, body: int) -> list[Placed]:
        """Return the pins of a body where they stand, those on ground too."""
        found = self._pins.get(body)
        if found is None:
            found = self._pins[body] = self._find_pins(body)
        return found

    def _find_pins(self, body: int) -> list[Placed]:
        x, y, flip = self.x[body], self.y[body], self.flip[body]
        it = self.problem.bodies[body]
        if it.is_device:
            return self._device_pins(body)
        if it.is_terminal:
            return [Placed(body, 0, x, y, *((LEFT, RIGHT) if it.left else (RIGHT, LEFT)))]
        if not self.standing[body]:
            x_middle = self.middle(body)
            first, second = (self.trunk[net] for net in self.problem.net_of[body])
            left, right = (0, 1) if first <= second else (1, 0)
            return [
                Placed(body, left, x_middle - HALF, y, LEFT, RIGHT),
                Placed(body, right, x_middle + HALF, y, RIGHT, LEFT),
            ]
        nets = self.problem.net_of[body]
        upside = nets[0] == -1 or (nets[1] != -1 and flip & 2)
        top, bottom = (1, 0) if upside else (0, 1)
        return [Placed(body, top, x, y, EITHER, DOWN), Placed(body, bottom, x, y + STANDING, EITHER, UP)]

    def _device_pins(self, body: int) -> list[Placed]:
        it = self.problem.bodies[body]
        x, y, flip = self.x[body], self.y[body], self.flip[body]
        placed = []
        start = 0
        for side, pins, bit, px, lead in ((LEFT, it.left, 1, x, RIGHT), (RIGHT, it.right, 2, x + WIDE, LEFT)):
            rows = [y] if len(pins) == 1 else [y - PIN, y + PIN]
            if flip & bit:
                rows.reverse()
            placed += [Placed(body, start + n, px, row, side, lead) for n, row in enumerate(rows)]
            start += len(pins)
        return placed

    def body_shape(self, body: int) -> Shape:
        """Return the boxes that a body covers with its text, leads and ground symbols."""
        it, x, y = self.problem.bodies[body], self.x[body], self.y[body]
        if it.is_device:
            boxes = self._device_boxes(body)
        elif it.is_terminal:
            wide = self.problem.text[body] + 0.5
            boxes = (
                [(x + 0.1, y - 0.5, x + wide, y + 0.5)]
                if it.left
                else [(x - wide, y - 0.5, x - 0.1, y + 0.5)]
            )
        elif self.standing[body]:
            boxes = [(x - 0.6, y + 0.1, x + 0.6, y + 2.9)]
            wide = self.problem.stacked[body] + 0.2
            left = self.flip[body] & 1
            low, high = (x - 0.6 - wide, x - 0.6) if left else (x + 0.6, x + 0.6 + wide)
            boxes.append((low, y + 0.7, high, y + 2.3))
            if self.problem.grounded[body]:
                boxes.append((x - 0.6, y + 2.9, x + 0.6, y + 4.2))
        else:
            c, half = self.middle(body), self.problem.text[body] / 2
            boxes = [(c - HALF + 0.1, y - 0.6, c + HALF - 0.1, y + 0.6)]
            low, high = (y + 0.55, y + 1.3) if self.flip[body] & 1 else (y - 1.3, y - 0.55)
            boxes.append((c - half, low, c + half, high))
        return Shape(_around(boxes), tuple(boxes))

    def _device_boxes(self, body: int) -> list[Box]:
        x, y = self.x[body], self.y[body]
        boxes: list[Box] = [(x + 0.3, y - 2.1, x + WIDE - 0.3, y + 2.1)]
        if self.problem.caption[body]:
            left = x + caption_start(self.problem.text[body])
            boxes.append((left, y + 2.1, left + self.problem.text[body], y + 2.9))
        for pin in self.pins(body):
            if self.problem.net_of[body][pin.number] == -1:
                end = pin.x - 1 if pin.side == LEFT else pin.x + 1
                low, high = min(end - 0.5, pin.x - 0.1), max(end + 0.5, pin.x + 0.1)
                boxes.append((low, pin.y - 0.1, high, pin.y + 1.2))
        return boxes

    def jogs(self, pin: Placed) -> bool:
        """Whether a pin's net comes from behind, so that its wire goes around."""
        trunk = self.trunk[self.problem.net_of[pin.body][pin.number]]
        return (pin.side == LEFT and trunk > pin.x) or (pin.side == RIGHT and trunk < pin.x)

    def net_pins(self, net: int) -> list[Placed]:
        """Return the pins of a net where they stand."""
        net_of = self.problem.net_of
        return [
            pin
            for body in self.problem.bodies_of[net]
            for pin in self.pins(body)
            if net_of[body][pin.number] == net
        ]


def between_lines(boxes: list[Box], room: float) -> Box:
    """Return the box around others, with some room, whose edges run between the grid's lines, where no wire lies."""
    left, top, right, bottom = _around(boxes)
    return (
        floor(left - room - 0.5) + 0.5,
        floor(top - room - 0.5) + 0.5,
        ceil(right + room + 0.5) - 0.5,
        ceil(bottom + room + 0.5) - 0.5,
    )


def _around(boxes: list[Box]) -> Box:
    return (
        min(b[0] for b in boxes),
        min(b[1] for b in boxes),
        max(b[2] for b in boxes),
        max(b[3] for b in boxes),
    )
