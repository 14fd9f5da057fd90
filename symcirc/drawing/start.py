"""Where the search starts: devices in a row in the signal's order, nets before what they feed, parts in rows."""

from __future__ import annotations

from symcirc.drawing.flow import device_order, net_levels
from symcirc.drawing.layout import PIN, WIDE, Layout, Problem

#: Columns between nets, and rows between parts that might overlap.
COLUMN, ROW = 6, 3


def start(problem: Problem) -> Layout:
    """Return a placement that has the right order from left to right and may still have conflicts."""
    layout = Layout(problem)
    columns = _columns(problem)
    x = 0
    for number in columns:
        if number < 0:
            device = -1 - number
            layout.x[device], x = x, x + WIDE + 2
        else:
            layout.trunk[number], x = x, x + COLUMN
    _rows(layout)
    layout.forget(range(len(problem.bodies)))
    return layout


def _columns(problem: Problem) -> list[int]:
    """Return nets (by number) and devices (as -1 - number) from left to right."""
    level = net_levels(problem.bodies)
    order = device_order(problem.bodies)
    outputs: dict[int, int] = {}
    for place, device in enumerate(order):
        for pin, net in enumerate(problem.net_of[device]):
            if net >= 0 and pin >= len(problem.bodies[device].left):
                outputs[net] = place
    inputs: dict[int, int] = {}
    for place in reversed(range(len(order))):
        device = order[place]
        for net in problem.net_of[device][: len(problem.bodies[device].left)]:
            if net >= 0 and net not in outputs:
                inputs[net] = place
    stage = {**inputs, **outputs}
    loose = [n for n in range(len(problem.nets)) if n not in stage]
    for net in sorted(loose, key=lambda n: level[problem.nets[n]]):
        near = [
            stage[other]
            for body in problem.bodies_of[net]
            for other in problem.net_of[body]
            if other in inputs and other != net
        ]
        inputs[net] = stage[net] = min(near, default=0 if level[problem.nets[net]] == 0 else len(order))
    columns: list[int] = []
    for place in range(len(order) + 1):
        mine = [n for n, at in inputs.items() if at == place]
        columns += sorted(mine, key=lambda n: (level[problem.nets[n]], n))
        if place < len(order):
            columns.append(-1 - order[place])
            columns += [n for n, at in outputs.items() if at == place]
    return columns


def _rows(layout: Layout) -> None:
    problem = layout.problem
    above = below = 0
    spans = []
    for number, body in enumerate(problem.bodies):
        nets = problem.net_of[number]
        if body.is_device:
            for pin, placed in enumerate(layout.pins(number)):
                layout.jog[number][pin] = placed.y - 2 * PIN if pin % 2 == 0 else placed.y + 2 * PIN
        elif problem.turns[number]:
            low, high = sorted(layout.trunk[net] for net in nets)
            between = [d for d, b in enumerate(problem.bodies) if b.is_device and low < layout.x[d] < high]
            layout.x[number] = (low + high) // 2
            spans.append((bool(between), high - low, number))
        else:
            net = next(n for n in nets if n >= 0)
            layout.x[number] = layout.trunk[net] + (2 * below % COLUMN if problem.grounded[number] else 0)
            layout.y[number] = 1
            below += 1
            if body.is_terminal:
                layout.x[number] += COLUMN // 2 if body.kind == "output" else -COLUMN // 2
                layout.y[number] = 0
    for over, _, number in sorted(spans):
        if over:
            above += 1
            layout.y[number] = -1 - ROW * above
        else:
            layout.y[number] = -1
