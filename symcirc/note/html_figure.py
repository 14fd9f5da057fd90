"""A picture made as a file of its own, put into an HTML page.

In a page the ids of all pictures share one namespace, and a picture's style sheet would reach every other element:
each gets the picture's own prefix. Scripts and links to elsewhere do not get in.
"""

from __future__ import annotations

import re
import xml.etree.ElementTree as ElementTree

SVG = "http://www.w3.org/2000/svg"
_XLINK = "http://www.w3.org/1999/xlink"
#: What has no place in a page: what the page says itself, what runs, what may hold HTML.
_DROPPED = {f"{{{SVG}}}{name}" for name in ("title", "desc", "metadata", "script", "foreignObject")}
_TO_PIXELS = {"": 1.0, "px": 1.0, "pt": 96 / 72, "in": 96.0, "mm": 96 / 25.4, "cm": 96 / 2.54}
#: A picture is made no smaller than this, so that its letters can be read; then it scrolls.
_LEAST = 0.6


def inline_svg(svg: str, prefix: str, alternative: str) -> str:
    """Return a picture as an element of a page, which is read aloud as ``alternative``.

    Args:
        svg: an SVG document.
        prefix: what its ids begin with, so that they are like no other picture's.
        alternative: what the picture shows, in words.

    Raises:
        xml.etree.ElementTree.ParseError: ``svg`` is not well-formed.

    >>> inline_svg('<svg xmlns="http://www.w3.org/2000/svg" width="10"><title>T</title></svg>', "a", "A dot.")
    '<svg width="10" id="a" role="img" aria-label="A dot." style="min-width:min(6px, 44rem)" />'
    """
    root = ElementTree.fromstring(svg)
    _clean(root)
    for element in root.iter():
        _make_own(element, prefix)
    root.set("id", prefix)
    for name in [name for name in root.attrib if name.startswith("aria-")]:
        del root.attrib[name]
    root.attrib |= {"role": "img", "aria-label": alternative}
    if wide := _pixels(root.get("width", "")):
        root.set("style", f"min-width:min({_LEAST * wide:.0f}px, 44rem)")
    return _without_namespace(root)


def keeps_colours(svg: str) -> bool:
    """Return whether a picture has colours of its own, and so needs paper below it, and not the text's colour."""
    return "currentColor" not in svg


def _clean(element: ElementTree.Element) -> None:
    for child in list(element):
        if child.tag in _DROPPED or not child.tag.startswith(f"{{{SVG}}}"):
            element.remove(child)
        else:
            _clean(child)


def _make_own(element: ElementTree.Element, prefix: str) -> None:
    """Give an element's id, and its references to ids, the prefix; leave out handlers and links to elsewhere."""
    for name, text in list(element.attrib.items()):
        if name == "id":
            element.set(name, f"{prefix}-{text}")
        elif name in ("href", f"{{{_XLINK}}}href"):
            del element.attrib[name]
            if text.startswith("#"):
                element.set("href", f"#{prefix}-{text[1:]}")
        elif name.startswith(("on", "{")):
            del element.attrib[name]
        else:
            element.set(name, text.replace("url(#", f"url(#{prefix}-"))
    if element.tag == f"{{{SVG}}}style":
        element.text = f"#{prefix} {{ {element.text} }}"


def _pixels(length: str) -> float | None:
    match = re.fullmatch(r"([\d.]+)([a-z]*)", length)
    return float(match[1]) * _TO_PIXELS[match[2]] if match and match[2] in _TO_PIXELS else None


def _without_namespace(root: ElementTree.Element) -> str:
    """Return an element as text; HTML knows the namespace by the element's name."""
    for element in root.iter():
        element.tag = element.tag.removeprefix(f"{{{SVG}}}")
    root.tail = None
    return ElementTree.tostring(root, encoding="unicode")
