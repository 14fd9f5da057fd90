"""The dashed frames of blocks."""

from __future__ import annotations

from collections.abc import Sequence

from symcirc.drawing.layout import Box, Layout, Problem, Shape, between_lines, overlap
from symcirc.drawing.wires import route

#: The room inside a frame, and how much more for every frame within.
ROOM, DEEPER = 0.2, 1.0


def frame_boxes(problem: Problem, shapes: Sequence[Shape]) -> dict[str, Box]:
    """Return the box of every block's frame; ``shapes`` are those of all bodies, then of all nets."""
    blocks = problem.schematic.blocks
    found = {}
    for label, members in blocks.items():
        depth = label.count(".")
        inner = max(
            (other.count(".") - depth for other in blocks if other.startswith(label + ".")), default=0
        )
        own = set(members)
        nets = [n for n, bodies in enumerate(problem.bodies_of) if own.issuperset(bodies)]
        boxes = [shapes[n].bounds for n in members] + [shapes[len(problem.bodies) + n].bounds for n in nets]
        found[label] = between_lines(boxes, ROOM + DEEPER * inner)
    return found


def true_frames(layout: Layout) -> dict[str, Box]:
    """Return the frame of every block whose parts stand apart from all others, in grid steps.

    A frame that would hold a part of another block would tell an untruth and is left out; the names of the parts
    still say where they belong.
    """
    problem = layout.problem
    shapes = [layout.body_shape(n) for n in range(len(problem.bodies))]
    boxes = frame_boxes(problem, [*shapes, *(route(layout, n).shape for n in range(len(problem.nets)))])
    found = {}
    for label, box in boxes.items():
        own = set(problem.schematic.blocks[label])
        if not any(overlap(box, shape.bounds) for n, shape in enumerate(shapes) if n not in own):
            found[label] = box
    return found
