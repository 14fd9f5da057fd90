"""From a sheet to its drawing, proved to be the circuit."""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.complaints import Complaint, Place
from symcirc.drawing.compose import compose
from symcirc.drawing.place import place
from symcirc.drawing.primitives import Drawing
from symcirc.drawing.proof import prove
from symcirc.drawing.schematic import build_schematic
from symcirc.drawing.svg import svg_text
from symcirc.drawing.symbols import STANDARDS
from symcirc.sheet.model import Sheet

#: More parts than this make no picture that a person would read.
MOST_PARTS = 120


@dataclass(frozen=True)
class Drawn:
    """A drawing that was proved to be the circuit: its lines, its SVG, and how many wires cross."""

    drawing: Drawing
    svg: str
    crossings: int


def draw(sheet: Sheet, symbols: str = STANDARDS[0]) -> Drawn:
    """Return the drawing of a sheet's circuit, the same at every call.

    Args:
        sheet: the sheet.
        symbols: ``iec60617``, or ``ieee315`` for the zigzag resistor.

    Raises Complaint for more than 120 parts, and InternalFault where the drawing, read back from its SVG, is not
    the circuit.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> draw(sheet).svg.startswith("<svg"), draw(sheet).crossings
    (True, 0)
    """
    count = len(sheet.parts) + len(sheet.devices)
    if count > MOST_PARTS:
        raise Complaint(
            _first_place(sheet),
            f"the circuit has {count:,} parts, and a drawing holds {MOST_PARTS} at most",
            "draw one of its blocks from a sheet of its own",
        )
    schematic = build_schematic(sheet)
    drawing = compose(place(schematic), symbols)
    svg = svg_text(drawing)
    return Drawn(drawing, svg, prove(svg, schematic.bodies, schematic.node_labels).crossings)


def draw_svg(sheet: Sheet, symbols: str = STANDARDS[0]) -> str:
    """Return the drawing of a sheet's circuit as SVG; arguments and errors are those of :func:`draw`."""
    return draw(sheet, symbols).svg


def _first_place(sheet: Sheet) -> Place:
    return min([*(part.place for part in sheet.parts), *(device.place for device in sheet.devices)])
