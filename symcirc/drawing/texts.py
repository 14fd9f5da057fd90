"""How wide a text is, about: the fonts are the reader's, so the widest of the usual ones counts."""

from __future__ import annotations

#: Widths of characters in grid steps at 12 pixels, after DejaVu Sans, the widest font in the list of the SVG.
NARROW, USUAL, CAPITAL, WIDE = 0.24, 0.38, 0.44, 0.6


def text_width(text: str) -> float:
    """Return about how wide a text is, in grid steps.

    >>> text_width("il") < text_width("ab") < text_width("mW")
    True
    """
    return sum(map(_width, text))


def _width(character: str) -> float:
    if character in "ijl.,()I ":
        return NARROW
    if character in "mwMW%=+-" or ord(character) > 0x2E80:
        return WIDE if character not in "=+-" else 0.5
    return CAPITAL if character.isupper() else USUAL
