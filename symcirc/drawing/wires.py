"""The wires of a net in a placement: its trunk, its rows, its jogs, and how they meet."""

from __future__ import annotations

from typing import NamedTuple

from symcirc.drawing.layout import DOWN, EITHER, LEFT, RIGHT, UP, Layout, Shape

Point = tuple[float, int]


class Wires(NamedTuple):
    """A net's wires.

    ``arms`` has, for every point where something ends or meets, what leaves it as bits, leads included;
    ``crowded`` counts what goes wrong inside the net itself: wires on one another and crossings of its own.
    ``jogs`` counts the pins whose net comes from behind, ``outgoing_jogs`` those of them at the right of a device.
    """

    shape: Shape
    arms: dict[Point, int]
    crowded: int
    jogs: int
    outgoing_jogs: int


def route(layout: Layout, net: int) -> Wires:
    """Return the wires of a net."""
    trunk = layout.trunk[net]
    rows: dict[int, list[float]] = {}
    arms: dict[Point, int] = {}
    stubs: list[tuple[int, float, float]] = []
    outgoing = 0
    columns: list[tuple[float, int, int]] = []
    for pin in layout.net_pins(net):
        x, y = pin.x, pin.y
        arms[(x, y)] = arms.get((x, y), 0) | pin.lead
        if layout.jogs(pin):
            outgoing += pin.side == RIGHT
            aside = x - 1 if pin.side == LEFT else x + 1
            row = layout.jog[pin.body][pin.number]
            stubs.append((y, min(x, aside), max(x, aside)))
            arms[(x, y)] |= LEFT if aside < x else RIGHT
            corner = arms.get((aside, y), 0) | (RIGHT if aside < x else LEFT)
            if row != y:
                columns.append((aside, min(y, row), max(y, row)))
                arms[(aside, row)] = arms.get((aside, row), 0) | (DOWN if y > row else UP)
                corner |= UP if y > row else DOWN
            arms[(aside, y)] = corner
            rows.setdefault(row, []).append(aside)
        else:
            rows.setdefault(y, []).append(x)
    top, bottom = min(rows), max(rows)
    ends: list[tuple[int, float, float]] = []
    for y, stops in rows.items():
        if top != bottom:
            stops.append(trunk)
        low, high = min(stops), max(stops)
        if low < high:
            ends.append((y, low, high))
        for x in stops:
            bits = arms.get((x, y), 0) | (LEFT if low < x else EITHER) | (RIGHT if high > x else EITHER)
            if x == trunk:
                bits |= (UP if y > top else EITHER) | (DOWN if y < bottom else EITHER)
            arms[(x, y)] = bits
    crowded = _crowded(ends, stubs, columns, trunk, top, bottom)
    if top != bottom:
        columns.append((trunk, top, bottom))
    lines = (*ends, *stubs)
    xs = [x for _, low, high in lines for x in (low, high)] + [x for x, _, _ in columns]
    ys = [y for y, _, _ in lines] + [top, bottom] + [y for _, low, high in columns for y in (low, high)]
    at = next(iter(rows.values()))[0]
    bounds = (min(xs, default=at), min(ys), max(xs, default=at), max(ys))
    return Wires(Shape(bounds, (), lines, tuple(columns)), arms, crowded, len(stubs), outgoing)


def _crowded(
    rows: list[tuple[int, float, float]],
    stubs: list[tuple[int, float, float]],
    columns: list[tuple[float, int, int]],
    trunk: int,
    top: int,
    bottom: int,
) -> int:
    """Count overlaps and crossings among the wires of one net, which would read wrongly or look odd."""
    wrong = 0
    for y, low, high in stubs:
        wrong += sum(1 for other, a, b in rows if other == y and a <= high and low <= b)
        wrong += low <= trunk <= high and top <= y <= bottom
    for number, (x, low, high) in enumerate(columns):
        wrong += sum(1 for y, a, b in rows if low < y < high and a <= x <= b)
        wrong += x == trunk and top != bottom and low < bottom and top < high
        wrong += sum(1 for other, a, b in columns[:number] if other == x and a <= high and low <= b)
    return int(wrong)
