"""Names of blocks and of nodes beside their lines, wherever there is room."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping

from symcirc.drawing.layout import Box, Layout, Shape, overlap
from symcirc.drawing.primitives import Text
from symcirc.drawing.texts import text_width
from symcirc.drawing.wires import Wires, route

#: The height of a name, how far it stays from its node's wires, and how far from those of others.
HEIGHT, GAP, FAR = 0.6, 0.1, 0.35
#: Half the room of a dot.
DOT = 0.18
#: A place for a name: x, the y of its baseline, and its anchor.
Place = tuple[float, float, str]


class Names:
    """Places names one after the other where nothing else is."""

    def __init__(self, layout: Layout, frames: Mapping[str, Box]) -> None:
        self.problem = layout.problem
        self.frames = frames
        self.wires = [route(layout, net) for net in range(len(self.problem.nets))]
        self.taken = [box for n in range(len(self.problem.bodies)) for box in layout.body_shape(n).boxes]
        self.taken += [box for frame in frames.values() for box in _edges(frame)]
        self.taken += [dot for wires in self.wires for dot in _dots(wires)]
        self.near = [list(_around(wires.shape, GAP / 2)) for wires in self.wires]
        self.far = [list(_around(wires.shape, FAR)) for wires in self.wires]

    def of_blocks(self) -> dict[str, Text]:
        """Return the names of the frames, each outside at its frame's corner or along its edge."""
        wires = [box for boxes in self.near for box in boxes]
        found = {}
        for label, frame in self.frames.items():
            text = self._first_free(label, _along_frame(frame), wires)
            found[label] = text or Text((frame[0], frame[1] - 0.25), label)
        return found

    def of_nodes(self) -> Iterator[Text]:
        """Yield the names of nodes for which there is room, the asked ones first."""
        schematic = self.problem.schematic
        terminals = {pin.net for body in self.problem.bodies if body.is_terminal for pin in body.pins}
        rest = [net for net in self.problem.nets if net not in schematic.shown and net not in terminals]
        for net in (*schematic.shown, *rest):
            number = self.problem.nets.index(net)
            others = [box for n, boxes in enumerate(self.far) if n != number for box in boxes]
            places = _along_wires(self.wires[number].shape)
            text = self._first_free(
                schematic.node_labels[net], places, [*others, *self.near[number]], slanted=True
            )
            if text is not None:
                yield text

    def _first_free(
        self, label: str, places: Iterable[Place], wires: list[Box], slanted: bool = False
    ) -> Text | None:
        wide = text_width(label)
        for x, y, anchor in places:
            left = x - {"start": 0.0, "middle": wide / 2, "end": wide}[anchor]
            box = (left - 0.05, y - HEIGHT, left + wide + 0.05, y + 0.15)
            if not any(overlap(box, other) for other in (*self.taken, *wires)):
                self.taken.append(box)
                return Text((x, y), label, anchor, slanted=slanted)
        return None


def _around(shape: Shape, room: float) -> Iterator[Box]:
    for y, low, high in shape.rows:
        yield low - room, y - room, high + room, y + room
    for x, low, high in shape.columns:
        yield x - room, low - room, x + room, high + room


def _dots(wires: Wires) -> Iterator[Box]:
    for (x, y), arms in wires.arms.items():
        if arms.bit_count() > 2:
            yield x - DOT, y - DOT, x + DOT, y + DOT


def _edges(frame: Box) -> Iterator[Box]:
    left, top, right, bottom = frame
    for x in (left, right):
        yield x - 0.1, top, x + 0.1, bottom
    for y in (top, bottom):
        yield left, y - 0.1, right, y + 0.1


def _along_frame(frame: Box) -> Iterator[Place]:
    left, top, right, bottom = frame
    for step in range(int(2 * (right - left))):
        yield left + step / 2, top - 0.26, "start"
    for step in range(int(2 * (right - left))):
        yield left + step / 2, bottom + 0.75, "start"


def _along_wires(shape: Shape) -> Iterator[Place]:
    """Yield places for a net's name, the better first: above its rows, beside its columns, below its rows."""
    for level, low, high in shape.rows:
        for x in _along(low, high):
            yield x, level - GAP - 0.15, "start" if x == low else "end" if x == high else "middle"
    for column, low, high in shape.columns:
        for y in _along(low, high):
            for row in (y + 0.3, y - 0.2):
                yield column + 0.2, row, "start"
                yield column - 0.2, row, "end"
    for level, low, high in shape.rows:
        for x in _along(low, high):
            yield x, level + HEIGHT + GAP, "start" if x == low else "end" if x == high else "middle"


def _along(low: float, high: float) -> Iterator[float]:
    yield low
    yield high
    for step in range(1, int(2 * (high - low))):
        yield low + step / 2
