"""The figures of a note as PDF, from the lines or the curves that their SVG was made of."""

from __future__ import annotations

import re

from symcirc.complaints import InternalFault
from symcirc.drawing.primitives import Drawing
from symcirc.note.model import Block, Document, Figure

#: Points in an inch, over pixels in one.
_POINTS = {"px": 0.75, "": 0.75, "pt": 1.0, "in": 72.0, "mm": 72 / 25.4, "cm": 720 / 25.4}


def figures_of(document: Document) -> list[Figure]:
    """Return the figures of a note, in their order."""
    blocks: tuple[Block, ...] = document.blocks
    return [block for block in blocks if isinstance(block, Figure)]


def figure_pdf(figure: Figure) -> bytes:
    """Return a figure as a PDF of one page; raises InternalFault for one that was made of neither lines nor curves."""
    if isinstance(figure.drawn_from, Drawing):
        from symcirc.drawing.picture import picture as drawing_picture

        return drawing_picture(figure.drawn_from, "pdf")
    from symcirc.plots.curves import Curves
    from symcirc.plots.picture import picture as curves_picture

    if not isinstance(figure.drawn_from, Curves):
        raise InternalFault(f"the figure {figure.name} was drawn from nothing")
    return curves_picture(figure.drawn_from, figure.drawn_from.shown(), "pdf")


def natural_width(figure: Figure) -> float | None:
    """Return how wide the SVG says it is, in points; None where it does not say.

    >>> natural_width(Figure("a", 1, "a", "", "", '<svg width="96" height="48"></svg>'))
    72.0
    """
    head = figure.svg[: figure.svg.find(">")]
    found = re.search(r'\bwidth="([0-9.]+)([a-z]*)"', head)
    if found is None or found[2] not in _POINTS:
        return None
    return float(found[1]) * _POINTS[found[2]]
