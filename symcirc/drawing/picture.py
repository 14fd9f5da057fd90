"""A drawing as PNG or PDF, from the same lines as the SVG."""

from __future__ import annotations

from io import BytesIO
from typing import Any

from symcirc.drawing.primitives import Circle, Drawing, Line, Point, Text

#: Pixels of the drawing in an inch, points in an inch, and dots in an inch of a PNG.
PIXELS, POINTS, DOTS = 96.0, 72.0, 192
#: Widths of lines in pixels: of all, of dashed ones.
STROKE, DASHED = 1.3, 0.9
SCALE = POINTS / PIXELS


def picture(drawing: Drawing, kind: str) -> bytes:
    """Return a drawing as ``png`` (two dots to a pixel, on white) or ``pdf``, the same bytes at every call."""
    from matplotlib.figure import Figure

    size = (drawing.width / PIXELS, drawing.height / PIXELS)
    figure = Figure(figsize=size, facecolor="white")
    axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    axes.set_xlim(0, drawing.width)
    axes.set_ylim(drawing.height, 0)
    axes.axis("off")
    for frame, name in drawing.frames:
        _line(axes, frame)
        _text(axes, name)
    for wire in drawing.wires:
        _line(axes, Line(wire))
    for symbol in drawing.symbols:
        for lead in symbol.leads:
            _line(axes, Line(lead.points))
        for shape in symbol.body:
            _circle(axes, shape) if isinstance(shape, Circle) else _line(axes, shape)
        for text in (*symbol.inside, *symbol.texts):
            _text(axes, text)
    for joint in drawing.joints:
        _circle(axes, Circle(joint, 2.6, True))
    for name in drawing.node_names:
        _text(axes, name)
    made = BytesIO()
    undated: dict[str, Any] = (
        {"Software": None} if kind == "png" else {"CreationDate": None, "Title": drawing.title}
    )
    figure.savefig(made, format=kind, dpi=DOTS if kind == "png" else POINTS, metadata=undated)
    return made.getvalue()


def _line(axes: Any, line: Line) -> None:
    from matplotlib.patches import Polygon

    axes.add_patch(
        Polygon(
            line.points,
            closed=line.closed,
            fill=line.filled,
            facecolor="black",
            edgecolor="black",
            linewidth=(DASHED if line.dashed else STROKE) * SCALE,
            linestyle=(0, (5, 4)) if line.dashed else "-",
            capstyle="round",
            joinstyle="round",
        )
    )


def _circle(axes: Any, circle: Circle) -> None:
    from matplotlib.patches import Circle as Disc

    look = (
        {"facecolor": "black", "linewidth": 0}
        if circle.filled
        else {"fill": False, "linewidth": STROKE * SCALE}
    )
    axes.add_patch(Disc(circle.centre, circle.radius, edgecolor="black", **look))


def _text(axes: Any, text: Text) -> None:
    at: Point = text.at
    axes.text(
        *at,
        text.text,
        ha={"start": "left", "middle": "center", "end": "right"}[text.anchor],
        va="baseline",
        fontsize=text.size * SCALE,
        fontfamily="DejaVu Sans",
        style="italic" if text.slanted else "normal",
        parse_math=False,
    )
