"""A placement that is always sound, if not pretty: every net in a column of its own, every part in rows of its own."""

from __future__ import annotations

from math import ceil

from symcirc.drawing.layout import PIN, STANDING, WIDE, Layout, Problem

#: Rows from one device to the next, and from one part to the next.
BAND, ROW = 12, 3


def spread(problem: Problem) -> Layout:
    """Return a placement without a conflict: wires cross, and nothing lies on anything else.

    Devices stand in a column at the left, each in a band of rows; right of them run the trunks, between which the
    series parts lie in rows above all devices; further right stand the parts to ground and the drives, each further
    one higher, so that its wire passes above those before it.
    """
    layout = Layout(problem)
    step = ceil(max(problem.span, default=4)) + 2
    first = WIDE + 5 + ceil(max(problem.text, default=0))
    for net in range(len(problem.nets)):
        layout.trunk[net] = first + step * net
    right = first + step * len(problem.nets)
    row, depth = -3 * ROW, 0
    wide = ceil(max(problem.stacked, default=0)) + 4
    standing = []
    for number, body in enumerate(problem.bodies):
        if body.is_device:
            layout.y[number] = depth
            for pin in range(len(body.pins)):
                upper = pin == 0
                layout.jog[number][pin] = depth - 3 * PIN if upper else depth + 4 * PIN
            depth += BAND
        elif problem.turns[number]:
            layout.y[number] = row
            layout.x[number] = min(layout.trunk[net] for net in problem.net_of[number]) + step // 2
            row -= ROW
        elif body.kind == "input":
            layout.x[number], layout.y[number] = -4, row
            row -= ROW
        else:
            standing.append(number)
    for place, number in enumerate(sorted(standing, key=lambda n: problem.bodies[n].is_terminal)):
        row -= STANDING + 2
        layout.x[number], layout.y[number] = right + wide * (place + 1), row
    layout.forget(range(len(problem.bodies)))
    return layout
