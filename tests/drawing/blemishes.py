"""What is over what in a drawing, measured from its SVG with a real font (DejaVu Sans, the widest of those listed)."""

from __future__ import annotations

import re
from collections.abc import Iterator
from functools import cache
from itertools import combinations, pairwise
from xml.etree import ElementTree

SVG = "{http://www.w3.org/2000/svg}"
Box = tuple[float, float, float, float]


@cache
def _ink(text: str, size: float, slanted: bool) -> Box:
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import TextPath

    font = FontProperties(family="DejaVu Sans", style="italic" if slanted else "normal")
    box = TextPath((0, 0), text, size=size, prop=font).get_extents()
    return box.x0, -box.y1, box.x1, -box.y0


def _text_box(text: ElementTree.Element) -> Box:
    left, top, right, bottom = _ink(
        text.text or "", float(text.get("font-size", "")), text.get("font-style") is not None
    )
    x, y = float(text.get("x", "")), float(text.get("y", ""))
    x -= {"start": 0, "middle": (left + right) / 2, "end": right}[text.get("text-anchor", "start")]
    return left + x, top + y, right + x, bottom + y


def _segments(root: ElementTree.Element) -> Iterator[tuple[tuple[float, float], tuple[float, float]]]:
    for path in root.iter(f"{SVG}path"):
        numbers = [float(n) for n in re.findall(r"-?\d+(?:\.\d+)?", path.get("d", ""))]
        points = list(zip(numbers[0::2], numbers[1::2], strict=True))
        if "Z" in path.get("d", ""):
            points.append(points[0])
        yield from pairwise(points)


def _through(box: Box, segment: tuple[tuple[float, float], tuple[float, float]]) -> bool:
    """Whether a segment has a point in a box (clipped after Liang and Barsky, 1984, from memory)."""
    (x, y), (u, v) = segment
    low, high = 0.0, 1.0
    for start, step, near, far in ((x, u - x, box[0], box[2]), (y, v - y, box[1], box[3])):
        if step == 0:
            if not near < start < far:
                return False
            continue
        ends = sorted(((near - start) / step, (far - start) / step))
        low, high = max(low, ends[0]), min(high, ends[1])
    return low < high


def _overlap(one: Box, other: Box) -> bool:
    return one[0] < other[2] and other[0] < one[2] and one[1] < other[3] and other[1] < one[3]


def blemishes(svg: str) -> list[str]:
    """Return what lies over what: texts over lines, over circles, over one another, and beyond the drawing's edge."""
    root = ElementTree.fromstring(svg)
    texts = [(text.text, _text_box(text)) for text in root.iter(f"{SVG}text")]
    segments = list(_segments(root))
    found = []
    for text, box in texts:
        if any(_through(box, segment) for segment in segments):
            found.append(f"{text} over a line")
        for circle in root.iter(f"{SVG}circle"):
            x, y, r = (float(circle.get(word, "")) for word in ("cx", "cy", "r"))
            if _overlap(box, (x - r, y - r, x + r, y + r)):
                found.append(f"{text} over a circle")
        if (
            box[0] < 0
            or box[1] < 0
            or box[2] > float(root.get("width", ""))
            or box[3] > float(root.get("height", ""))
        ):
            found.append(f"{text} beyond the edge")
    found += [f"{a} over {b}" for (a, one), (b, other) in combinations(texts, 2) if _overlap(one, other)]
    return found
