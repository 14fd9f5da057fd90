"""What a placement costs: what must not be, and what a reader would rather not see.

Costs are sums over single bodies and nets, over pairs of them, and over the whole picture, so that a small move is
judged by what it changes.
"""

from __future__ import annotations

from itertools import combinations, pairwise

from symcirc.drawing.flow import device_order, forward_parts
from symcirc.drawing.frames import frame_boxes
from symcirc.drawing.layout import WIDE, Layout, Problem, Shape, overlap
from symcirc.drawing.wires import Wires, route
from symcirc.sheet.model import GROUND

#: What must not be: bodies, wires and texts over one another, wires that touch, joints of four.
FORBIDDEN, SHORTED, FOUR_ARMS = 40.0, 60.0, 20.0
#: Wires: a crossing, a bend, a wire that goes around a device (from its input; from its output), a step of length.
CROSSING, BEND, JOG, OUTGOING_JOG, LENGTH = 9.0, 0.9, 1.5, 4.0, 0.22
#: A step of the picture's width and height, of a block's frame, and a body in a frame that is not its own.
WIDTH, HEIGHT, FRAME, STRANGER = 0.25, 0.25, 0.3, 14.0
#: A series part that leads the signal backwards, is not in line with the one before it, stands upright (on the
#: signal's way; elsewhere), or lies a step off the middle of its row.
BACKWARD, OUT_OF_LINE, FORWARD_STANDING, STANDING_PART, OFF_MIDDLE = 4.0, 2.0, 10.0, 5.0, 0.05
#: A device with plus above minus, and one with ground at an upper pin.
PLUS_ABOVE, GROUND_ABOVE = 1.5, 4.0
#: Feedback below an amplifier whose minus is above, and other feedback below.
FEEDBACK_BELOW, OTHER_BELOW = 3.0, 0.4
#: A text on its second side.
TEXT_LEFT, TEXT_BELOW = 0.3, 0.8
#: A drive a step inside the picture, an output too, and an output close to its trunk or out of its device's row.
DRIVE_INSIDE, OUTPUT_INSIDE, OUTPUT_ODD = 1.5, 0.4, 1.5
#: Devices out of the signal's order, a step closer than they should be, not in one row, and a step apart in rows.
OUT_OF_ORDER, CLOSE, ROW_LEFT, ROW_APART = 2.0, 0.4, 1.5, 0.25


class Judge:
    """Judges a placement."""

    def __init__(self, layout: Layout) -> None:
        self.layout = layout
        self.problem: Problem = layout.problem
        bodies = self.problem.bodies
        self.count = len(bodies)
        self.order = device_order(bodies)
        self.drives = [n for n, b in enumerate(bodies) if b.is_drive or b.kind == "input"]
        self.outputs = [n for n, b in enumerate(bodies) if b.kind == "output"]
        self.blocks = {label: set(members) for label, members in self.problem.schematic.blocks.items()}
        self.feedback = _feedback(self.problem)
        index = {net: number for number, net in enumerate(self.problem.nets)}
        self.forward = {n: (index[a], index[b]) for n, (a, b) in forward_parts(bodies).items()}
        ends = self.forward.items()
        self.lines = [(a, b) for a, (_, end) in ends for b, (begin, _) in ends if end == begin]
        self._known: dict[int, tuple[object, tuple[Shape, float]]] = {}  # what each net was last time
        self.setter = [self._setter(n) for n in self.outputs]

    def _setter(self, output: int) -> tuple[int, int] | None:
        """Return the device that sets the net of an output terminal, and the number of its pin there."""
        net = self.problem.net_of[output][0]
        for number in self.problem.bodies_of[net]:
            body = self.problem.bodies[number]
            if body.is_device and net in self.problem.net_of[number][len(body.left) :]:
                return number, self.problem.net_of[number].index(net, len(body.left))
        return None

    def object(self, number: int) -> tuple[Shape, float]:
        """Return the shape and the own cost of a body, or of a net where the number is beyond the bodies."""
        if number < self.count:
            return self.layout.body_shape(number), self.body_cost(number)
        net = number - self.count
        pins = self.layout.net_pins(net)
        key = (self.layout.trunk[net], pins, [self.layout.jog[pin.body][pin.number] for pin in pins])
        known = self._known.get(net)
        if known is None or known[0] != key:
            wires = route(self.layout, net)
            known = self._known[net] = (key, (wires.shape, net_cost(wires)))
        return known[1]

    def is_sound(self) -> bool:
        """Whether the placement is free of what must not be."""
        layout, nets = self.layout, range(len(self.problem.nets))
        wires = [route(layout, net) for net in nets]
        if any(w.crowded or any(arms.bit_count() > 3 for arms in w.arms.values()) for w in wires):
            return False
        if any(self.body_cost(number) >= FORBIDDEN for number in range(self.count)):
            return False
        shapes = [*map(layout.body_shape, range(self.count)), *(w.shape for w in wires)]
        return all(pair_cost(a, b) < FORBIDDEN for n, a in enumerate(shapes) for b in shapes[:n])

    def body_cost(self, number: int) -> float:
        """Return what a body costs by itself."""
        layout, body = self.layout, self.problem.bodies[number]
        flip = layout.flip[number]
        if body.is_device:
            sides = ((body.left, flip & 1), (body.right, flip & 2))
            above = sum(len(pins) == 2 and pins[1 if turned else 0].net == GROUND for pins, turned in sides)
            return GROUND_ABOVE * above + PLUS_ABOVE * flip.bit_count()
        if not self.problem.turns[number]:
            return TEXT_LEFT if flip & 1 else 0.0
        if layout.standing[number]:
            standing = FORWARD_STANDING if number in self.forward else STANDING_PART
            return standing + (TEXT_LEFT if flip & 1 else 0.0)
        return self._lying_cost(number) + (TEXT_BELOW if flip & 1 else 0.0)

    def _lying_cost(self, number: int) -> float:
        """Return what a series part costs that lies between its trunks."""
        layout = self.layout
        first, second = (layout.trunk[net] for net in self.forward.get(number, self.problem.net_of[number]))
        short = self.problem.span[number] - abs(first - second)
        cost = FORBIDDEN + 10 * short if short > 0 else 0.0
        cost += OFF_MIDDLE * abs(layout.middle(number) - (first + second) / 2)
        if number in self.forward and first > second:
            cost += BACKWARD
        for device, role in self.feedback.get(number, ()):
            if layout.y[number] > layout.y[device]:
                cost += FEEDBACK_BELOW if role == "minus" and not layout.flip[device] & 1 else OTHER_BELOW
        return cost

    def whole(self) -> float:
        """Return what the picture costs as a whole: its size, where drive and output stand, the devices' row."""
        layout = self.layout
        left, right = min(layout.x + layout.trunk), max(layout.x + layout.trunk)
        cost = WIDTH * (right - left) + HEIGHT * (max(layout.y) - min(layout.y))
        cost += sum(DRIVE_INSIDE * (layout.x[n] - left) for n in self.drives)
        for n, setter in zip(self.outputs, self.setter, strict=True):
            cost += OUTPUT_INSIDE * (right - layout.x[n])
            cost += OUTPUT_ODD * (layout.x[n] - layout.trunk[self.problem.net_of[n][0]] < 2)
            cost += OUTPUT_ODD * (setter is not None and layout.y[n] != layout.pins(setter[0])[setter[1]].y)
        cost += sum(OUT_OF_LINE * (layout.y[a] != layout.y[b]) for a, b in self.lines)
        for first, second in pairwise(self.order):
            gap = layout.x[second] - layout.x[first] - WIDE - 2
            cost += OUT_OF_ORDER - CLOSE * gap if gap < 0 else 0.0
            apart = abs(layout.y[first] - layout.y[second])
            cost += ROW_LEFT * (apart > 0) + ROW_APART * apart
        return cost

    def strangers(self, shapes: list[Shape]) -> float:
        """Return the cost of the blocks' frames: their size, and the bodies inside that are not part of them."""
        if not self.blocks:
            return 0.0
        cost = 0.0
        boxes = frame_boxes(self.problem, shapes)
        for one, other in combinations(boxes, 2):
            nested = other.startswith(f"{one}.") or one.startswith(f"{other}.")
            a, b = boxes[one], boxes[other]
            if not nested and a[0] <= b[2] and b[0] <= a[2] and a[1] <= b[3] and b[1] <= a[3]:
                cost += STRANGER
        for label, box in boxes.items():
            inside = self.blocks[label]
            cost += FRAME * (box[2] - box[0] + box[3] - box[1])
            for number in range(self.count):
                if number not in inside and overlap(box, shapes[number].bounds):
                    cost += STRANGER
        return cost


def _feedback(problem: Problem) -> dict[int, list[tuple[int, str]]]:
    """Return the series parts from an amplifier's output to one of its inputs: (amplifier, input's role)."""
    found: dict[int, list[tuple[int, str]]] = {}
    for device, body in enumerate(problem.bodies):
        if body.kind != "opamp":
            continue
        out = problem.net_of[device][2]
        for number, turns in enumerate(problem.turns):
            nets = problem.net_of[number]
            if turns and out in nets:
                other = nets[0] if nets[1] == out else nets[1]
                inputs = zip(body.left, problem.net_of[device], strict=False)
                ends = [(device, pin.role) for pin, net in inputs if net == other]
                found.setdefault(number, []).extend(ends)
    return {number: ends for number, ends in found.items() if ends}


def net_cost(wires: Wires) -> float:
    """Return what a net costs by itself: length, bends, joints of four arms, jogs."""
    length = sum(high - low for _, low, high in wires.shape.rows)
    length += sum(high - low for _, low, high in wires.shape.columns)
    cost = LENGTH * length + JOG * wires.jogs + OUTGOING_JOG * wires.outgoing_jogs + FORBIDDEN * wires.crowded
    for arms in wires.arms.values():
        count = arms.bit_count()
        if count == 2 and arms not in (3, 12):
            cost += BEND
        elif count == 4:
            cost += FOUR_ARMS
    return cost


def pair_cost(one: Shape, other: Shape) -> float:
    """Return what two bodies or nets cost together."""
    a, b = one.bounds, other.bounds
    if a[0] > b[2] or b[0] > a[2] or a[1] > b[3] or b[1] > a[3]:
        return 0.0
    if one.boxes:
        return _boxes_boxes(one, other) if other.boxes else _boxes_wires(one, other)
    return _boxes_wires(other, one) if other.boxes else _wires_wires(one, other)


def _boxes_boxes(one: Shape, other: Shape) -> float:
    cost = 0.0
    for a in one.boxes:
        for b in other.boxes:
            if overlap(a, b):
                across = min(a[2], b[2]) - max(a[0], b[0])
                down = min(a[3], b[3]) - max(a[1], b[1])
                cost += FORBIDDEN + 4 * min(across, down)
    return cost


def _boxes_wires(body: Shape, net: Shape) -> float:
    cost = 0.0
    for left, top, right, bottom in body.boxes:
        for y, low, high in net.rows:
            if top < y < bottom and low < right and left < high:
                cost += FORBIDDEN
        for x, low, high in net.columns:
            if left < x < right and low < bottom and top < high:
                cost += FORBIDDEN
    return cost


def _wires_wires(one: Shape, other: Shape) -> float:
    cost = 0.0
    for y, a, b in one.rows:
        for row, c, d in other.rows:
            if y == row and a <= d and c <= b:
                cost += SHORTED
    for x, a, b in one.columns:
        for column, c, d in other.columns:
            if x == column and a <= d and c <= b:
                cost += SHORTED
    return cost + _across(one, other) + _across(other, one)


def _across(one: Shape, other: Shape) -> float:
    cost = 0.0
    for y, low, high in one.rows:
        for x, top, bottom in other.columns:
            if low <= x <= high and top <= y <= bottom:
                cost += CROSSING if low < x < high and top < y < bottom else SHORTED
    return cost
