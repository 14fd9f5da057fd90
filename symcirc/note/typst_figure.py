"""Drawings on the page of a Typst document: their ink and letters, their size, and which of them turn the page."""

from __future__ import annotations

import re
from collections.abc import Sequence

from symcirc.note.model import Figure

#: The colour of drawings, where they leave it to what is around them.
INK = "#1b1f24"
#: Width and height that a drawing may have, in points, on an upright page and on one that lies.
_UPRIGHT, _LYING = (453.0, 600.0), (700.0, 370.0)
#: A drawing that an upright page would make smaller than this gets a page that lies, where it is wide enough.
_SMALLEST = 0.55
#: Points in one of an SVG's units.
_UNITS = {"": 0.75, "px": 0.75, "pt": 1.0, "in": 72.0, "mm": 72 / 25.4, "cm": 72 / 2.54}


def inked(svg: str, families: Sequence[str]) -> str:
    """Return a drawing in the page's own ink and letters.

    >>> inked('<svg stroke="currentColor" font-family="Arial"/>', ["DejaVu Sans"])
    '<svg font-family="DejaVu Sans" stroke="#1b1f24" />'
    """
    without = re.sub(r"""\bfont-family\s*(=\s*("[^"]*"|'[^']*')|:[^;"'}]*;?)""", "", svg)
    coloured = re.sub("currentcolor", INK, without, flags=re.IGNORECASE)
    return re.sub(r"<svg\b", f'<svg font-family="{", ".join(families)}"', coloured, count=1)


def lies(figure: Figure) -> bool:
    """Say whether a figure is on a page that lies, so that its letters can be read."""
    return _scale(figure, _UPRIGHT) < _SMALLEST and _scale(figure, _LYING) > 1.2 * _scale(figure, _UPRIGHT)


def width_on_page(figure: Figure) -> float:
    """Return how wide a figure is on its page, in points: as drawn, or smaller.

    >>> width_on_page(Figure("a", 1, "a", "", "", '<svg width="320" height="120"></svg>'))
    240.0
    """
    return _size(figure)[0] * _scale(figure, _LYING if lies(figure) else _UPRIGHT)


def _scale(figure: Figure, room: tuple[float, float]) -> float:
    return min(1.0, *(most / drawn for most, drawn in zip(room, _size(figure), strict=True)))


def _size(figure: Figure) -> tuple[float, float]:
    """Return the width and height that a drawing gives itself, in points; the page's where it gives none."""
    head = figure.svg[: figure.svg.find(">")]
    found = [re.search(rf'\s{word}="([0-9.]+)([a-z]*)"', head) for word in ("width", "height")]
    width, height = (
        float(x[1]) * _UNITS.get(x[2], 0.75) if x else most for x, most in zip(found, _UPRIGHT, strict=True)
    )
    return width, height
