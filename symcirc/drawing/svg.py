"""A drawing as SVG: self-contained, in the colour of the text around it, with a title and a description."""

from __future__ import annotations

from collections.abc import Iterator
from xml.sax.saxutils import escape, quoteattr

from symcirc.drawing.primitives import Circle, Drawing, Lead, Line, Point, Symbol, Text

FONTS = "Helvetica, Arial, 'Liberation Sans', 'DejaVu Sans', sans-serif"


def svg_text(drawing: Drawing) -> str:
    """Return the SVG document of a drawing. Its geometry alone says what is joined: wires have no names."""
    return "\n".join(_lines(drawing)) + "\n"


def _lines(drawing: Drawing) -> Iterator[str]:
    wide, high = _number(drawing.width), _number(drawing.height)
    yield (
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{wide}" height="{high}" viewBox="0 0 {wide} {high}" role="img"'
        f' fill="none" stroke="currentColor" stroke-width="1.3" stroke-linecap="round" stroke-linejoin="round"'
        f' font-family="{FONTS}">'
    )
    yield f"<title>{escape(drawing.title)}</title>"
    yield f"<desc>{escape(drawing.description)}</desc>"
    for frame, name in drawing.frames:
        yield f'<g class="frame">{_shape(frame)}{_text(name)}</g>'
    for a, b in drawing.wires:
        yield f'<path class="wire" d="{_path((a, b))}"/>'
    for symbol in drawing.symbols:
        yield from _symbol(symbol)
    for joint in drawing.joints:
        yield _circle(Circle(joint, 2.6, True), "joint")
    for name in drawing.node_names:
        yield _text(name, "node")
    yield "</svg>"


def _symbol(symbol: Symbol) -> Iterator[str]:
    name = f" data-name={quoteattr(symbol.name)}" if symbol.name else ""
    yield f'<g class="symbol" data-kind="{symbol.kind}"{name}>'
    for lead in symbol.leads:
        yield _lead(lead)
    for shape in symbol.body:
        yield _shape(shape)
    for text in symbol.inside:
        yield _text(text, "inside")
    for text in symbol.texts:
        yield _text(text, "beside")
    yield "</g>"


def _lead(lead: Lead) -> str:
    return f'<path class="lead" data-terminal="{lead.role}" d="{_path(lead.points)}"/>'


def _shape(shape: Line | Circle) -> str:
    if isinstance(shape, Circle):
        return _circle(shape)
    filled = ' fill="currentColor"' if shape.filled else ""
    dashed = ' stroke-dasharray="5 4" stroke-width="0.9"' if shape.dashed else ""
    return f'<path d="{_path(shape.points)}{" Z" if shape.closed else ""}"{filled}{dashed}/>'


def _circle(circle: Circle, name: str = "") -> str:
    known = f' class="{name}"' if name else ""
    filled = ' fill="currentColor" stroke="none"' if circle.filled else ""
    x, y = circle.centre
    return f'<circle{known} cx="{_number(x)}" cy="{_number(y)}" r="{_number(circle.radius)}"{filled}/>'


def _text(text: Text, name: str = "name") -> str:
    slanted = ' font-style="italic"' if text.slanted else ""
    anchor = "" if text.anchor == "start" else f' text-anchor="{text.anchor}"'
    x, y = text.at
    return (
        f'<text class="{name}" x="{_number(x)}" y="{_number(y)}" font-size="{_number(text.size)}"{anchor}{slanted}'
        f' fill="currentColor" stroke="none">{escape(text.text)}</text>'
    )


def _path(points: tuple[Point, ...]) -> str:
    return "M" + " L".join(f"{_number(x)} {_number(y)}" for x, y in points)


def _number(value: float) -> str:
    return f"{value:.2f}".rstrip("0").rstrip(".")
