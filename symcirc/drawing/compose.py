"""From a placement to the drawing: symbols put in their places, wires between them, dots, names and frames."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from math import floor

from symcirc.drawing import primitives as pr
from symcirc.drawing.bodies import Body
from symcirc.drawing.device_symbols import device_body, reach
from symcirc.drawing.frames import true_frames
from symcirc.drawing.layout import HALF, LEFT, STANDING, Box, Layout, Placed, beside, caption_start
from symcirc.drawing.names import Names
from symcirc.drawing.symbols import ground, two_terminal
from symcirc.drawing.texts import text_width
from symcirc.drawing.wires import route

#: Pixels in a grid step, and the margin around the drawing.
STEP, MARGIN = 20.0, 16.0
GridPoint = tuple[float, float]
Move = Callable[[GridPoint], GridPoint]


def compose(layout: Layout, standard: str) -> pr.Drawing:
    """Return the drawing of a placement; ``standard`` says whose symbols are drawn."""
    problem = layout.problem
    symbols = [s for number in range(len(problem.bodies)) for s in _symbols(layout, number, standard)]
    wires, joints = _wires(layout)
    boxes = true_frames(layout)
    names = Names(layout, boxes)
    block_names = names.of_blocks()
    frames = tuple((_frame(box), block_names[label]) for label, box in boxes.items())
    schematic = problem.schematic
    grid = pr.Drawing(
        schematic.title,
        _described(layout),
        0.0,
        0.0,
        wires,
        joints,
        tuple(symbols),
        tuple(names.of_nodes()),
        frames,
    )
    return _to_pixels(grid)


def _frame(box: Box) -> pr.Line:
    left, top, right, bottom = box
    return pr.Line(((left, top), (right, top), (right, bottom), (left, bottom)), closed=True, dashed=True)


def _described(layout: Layout) -> str:
    """Return the circuit in words, for a reader who does not see it."""
    bodies = [b for b in layout.problem.bodies if not b.is_terminal]
    words = [
        f"{beside(b) or b.label} joins {' and '.join(_pin_words(b))}" for b in bodies if len(b.pins) == 2
    ]
    words += [f"{b.label}, {b.kind}, joins {', '.join(_pin_words(b))}" for b in bodies if b.is_device]
    return "Circuit diagram. " + "; ".join(words) + "."


def _pin_words(body: Body) -> list[str]:
    return [f"{pin.role} {pin.net}" if body.is_device else pin.net for pin in body.pins]


def _symbols(layout: Layout, number: int, standard: str) -> list[pr.Symbol]:
    body = layout.problem.bodies[number]
    if body.is_device:
        made = _device(layout, number)
    elif body.is_terminal:
        made = _terminal(layout, number)
    else:
        made = _two_terminal(layout, number, standard)
    return [made, *_grounds(layout, number)]


def _two_terminal(layout: Layout, number: int, standard: str) -> pr.Symbol:
    body = layout.problem.bodies[number]
    pins = {pin.number: pin for pin in layout.pins(number)}
    standing = layout.standing[number]
    half, shapes = two_terminal(body.kind, standard)
    first, second = pins[0], pins[1]
    middle = ((first.x + second.x) / 2, (first.y + second.y) / 2)
    along = (
        (1.0 if second.x > first.x else -1.0, 0.0)
        if not standing
        else (0.0, 1.0 if second.y > first.y else -1.0)
    )

    def put(point: GridPoint) -> GridPoint:
        u, v = point
        if not standing:  # text and bumps stay upright
            return middle[0] + along[0] * u, middle[1] + v
        return middle[0] - v, middle[1] + along[1] * u

    reach_ = (STANDING if standing else 2 * HALF) / 2
    leads = (
        pr.Lead(body.pins[0].role, (put((-reach_, 0)), put((-half, 0)))),
        pr.Lead(body.pins[1].role, (put((reach_, 0)), put((half, 0)))),
    )
    moved = tuple(_moved(shape, put) for shape in shapes)
    return pr.Symbol(body.kind, body.name, leads, moved, texts=_beside(layout, number, middle))


def _moved(shape: pr.Line | pr.Circle, put: Move) -> pr.Line | pr.Circle:
    return replace(shape, centre=put(shape.centre)) if isinstance(shape, pr.Circle) else _line(shape, put)


def _line(line: pr.Line, put: Move) -> pr.Line:
    return replace(line, points=tuple(put(point) for point in line.points))


def _beside(layout: Layout, number: int, middle: GridPoint) -> tuple[pr.Text, ...]:
    body, (x, y) = layout.problem.bodies[number], middle
    if not layout.standing[number]:
        return (pr.Text((x, y + 1.18 if layout.flip[number] & 1 else y - 0.68), beside(body), "middle"),)
    at, anchor = (x - 0.75, "end") if layout.flip[number] & 1 else (x + 0.75, "start")
    if not body.value:
        return (pr.Text((at, y + 0.2), body.label, anchor),)
    value = body.value if body.value[0].isdigit() and " " in body.value else f"= {body.value}"
    return pr.Text((at, y - 0.12), body.label, anchor), pr.Text((at, y + 0.58), value, anchor)


def _terminal(layout: Layout, number: int) -> pr.Symbol:
    body, x, y = layout.problem.bodies[number], layout.x[number], layout.y[number]
    out = bool(body.left)
    away = 1.0 if out else -1.0
    lead = pr.Lead("at", ((x, y), (x + 0.1 * away, y)))
    text = pr.Text((x + 0.55 * away, y + 0.2), body.label, "start" if out else "end", slanted=True)
    return pr.Symbol(body.kind, body.name, (lead,), (pr.Circle((x + 0.25 * away, y), 0.15),), texts=(text,))


def _device(layout: Layout, number: int) -> pr.Symbol:
    body, x, y, flip = layout.problem.bodies[number], layout.x[number], layout.y[number], layout.flip[number]
    left, right = reach(body.kind)

    def put(point: GridPoint) -> GridPoint:
        return point[0] + x, point[1] + y

    leads = tuple(
        pr.Lead(body.pins[p.number].role, ((p.x, p.y), (p.x + left if p.side == LEFT else p.x - right, p.y)))
        for p in layout.pins(number)
    )
    shapes, letters = device_body(body.kind, flip, body.value)
    inside = tuple(replace(letter, at=put(letter.at)) for letter in letters)
    if body.kind == "opamp":
        inside += (pr.Text(put((1.75, 0.2)), body.label, "middle"),)
    caption = layout.problem.caption[number]
    start = caption_start(layout.problem.text[number])
    texts = (pr.Text(put((start, 2.6)), caption),) if caption else ()
    return pr.Symbol(body.kind, body.name, leads, tuple(_moved(s, put) for s in shapes), inside, texts)


def _grounds(layout: Layout, number: int) -> list[pr.Symbol]:
    body = layout.problem.bodies[number]
    made = []
    for pin in layout.pins(number):
        if layout.problem.net_of[number][pin.number] < 0:
            x = pin.x if not body.is_device else _aside(pin)
            depth, bars = ground()
            lead = pr.Lead("at", ((x, pin.y), (x, pin.y + depth)))
            moved = tuple(
                replace(bar, points=tuple((x + u, pin.y + v) for u, v in bar.points))
                for bar in bars
                if isinstance(bar, pr.Line)
            )
            made.append(pr.Symbol("ground", "", (lead,), moved))
    return made


def _aside(pin: Placed) -> float:
    """Return the x of the sign of ground beside a device's pin."""
    return pin.x - 1 if pin.side == LEFT else pin.x + 1


def _wires(layout: Layout) -> tuple[tuple[tuple[GridPoint, GridPoint], ...], tuple[GridPoint, ...]]:
    wires: list[tuple[GridPoint, GridPoint]] = []
    joints: list[GridPoint] = []
    for net in range(len(layout.problem.nets)):
        found = route(layout, net)
        wires += [((low, y), (high, y)) for y, low, high in found.shape.rows]
        wires += [((x, low), (x, high)) for x, low, high in found.shape.columns]
        joints += [point for point, arms in found.arms.items() if arms.bit_count() > 2]
    for number, body in enumerate(layout.problem.bodies):
        if body.is_device:
            for pin in layout.pins(number):
                if layout.problem.net_of[number][pin.number] < 0:
                    wires.append(((pin.x, pin.y), (_aside(pin), pin.y)))
    return tuple(wires), tuple(joints)


def _to_pixels(grid: pr.Drawing) -> pr.Drawing:
    """Return the drawing scaled, and moved so that its margins are alike."""
    points = [p for wire in grid.wires for p in wire] + [p for s in grid.symbols for p in extent(s)]
    points += [p for text in grid.node_names for p in corners(text)]
    points += [p for line, text in grid.frames for p in (*line.points, *corners(text))]
    left = floor(min(x for x, _ in points) * STEP) / STEP  # so that the grid falls on whole pixels
    top = floor(min(y for _, y in points) * STEP) / STEP
    right, bottom = max(x for x, _ in points), max(y for _, y in points)

    def put(point: GridPoint) -> GridPoint:
        return (round((point[0] - left) * STEP + MARGIN, 2), round((point[1] - top) * STEP + MARGIN, 2))

    def shape(it: pr.Line | pr.Circle) -> pr.Line | pr.Circle:
        if isinstance(it, pr.Circle):
            return replace(it, centre=put(it.centre), radius=it.radius * STEP)
        return _moved(it, put)

    def text(it: pr.Text) -> pr.Text:
        return replace(it, at=put(it.at))

    symbols = tuple(
        pr.Symbol(
            s.kind,
            s.name,
            tuple(pr.Lead(lead.role, (put(lead.points[0]), put(lead.points[1]))) for lead in s.leads),
            tuple(shape(it) for it in s.body),
            tuple(text(it) for it in s.inside),
            tuple(text(it) for it in s.texts),
        )
        for s in grid.symbols
    )
    return pr.Drawing(
        grid.title,
        grid.description,
        round((right - left) * STEP + 2 * MARGIN, 2),
        round((bottom - top) * STEP + 2 * MARGIN, 2),
        tuple((put(a), put(b)) for a, b in grid.wires),
        tuple(put(point) for point in grid.joints),
        symbols,
        tuple(text(it) for it in grid.node_names),
        tuple((_line(line, put), text(name)) for line, name in grid.frames),
    )


def extent(symbol: pr.Symbol) -> list[GridPoint]:
    """Return points that enclose a symbol and its texts, in grid steps."""
    points = [p for lead in symbol.leads for p in lead.points]
    for it in symbol.body:
        if isinstance(it, pr.Circle):
            (x, y), r = it.centre, it.radius
            points += [(x - r, y - r), (x + r, y + r)]
        else:
            points += it.points
    return points + [p for text in symbol.texts for p in corners(text)]


def corners(text: pr.Text) -> tuple[GridPoint, GridPoint]:
    """Return two corners of a text, in grid steps."""
    wide = text_width(text.text)
    left = text.at[0] - {"start": 0.0, "middle": wide / 2, "end": wide}[text.anchor]
    return (left, text.at[1] - 0.5), (left + wide, text.at[1] + 0.15)
