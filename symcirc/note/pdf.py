"""A note as PDF, made by the ``typst`` package alone: no TeX, no browser, no network.

Letters come from the fonts inside of that package and from those of matplotlib; a character that none of them has is
looked for in the fonts of the system, and where those lack it too, its code point is shown. The file is tagged after
PDF/UA-1 (ISO 14289-1), under which a character without a glyph is an error and cannot be lost.
"""

from __future__ import annotations

import importlib.util
import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

from symcirc.complaints import Complaint, Place, Source
from symcirc.note.model import Document, Remark
from symcirc.note.typst import typst
from symcirc.note.typst_text import code_points

if TYPE_CHECKING:
    from typst import FontInfo

_UNSHOWN = (
    "No font at hand has some characters of the sheet; their Unicode code points stand in their place, as in "
)


def pdf(document: Document) -> bytes:
    """Return a note as a PDF file, the same bytes at every call on one machine: its date is the note's.

    Raises :class:`Complaint` where the ``typst`` package is not installed.
    """
    try:
        import typst as compiler
    except ImportError:
        place = Place(1, 1, 2, Source(document.file, ""))
        cause = "a note in PDF is made by the package `typst`, which is not installed"
        mend = "install it with `pip install 'stagewright[pdf]'`, or write the note as .html or .tex"
        raise Complaint(place, cause, mend) from None

    missing = _missing(typst(document))
    families: list[str] = []
    if missing:
        fonts = compiler.Fonts(include_system_fonts=True, font_paths=[_shipped_fonts()])
        families, missing = _families_for(missing, fonts.fonts())
    else:
        fonts = compiler.Fonts(include_system_fonts=False, font_paths=[_shipped_fonts()])
    shown = document
    if missing:
        example = Remark("warning", (f"{_UNSHOWN}{code_points(min(missing))}.",))
        shown = replace(document, blocks=(example, *document.blocks))
    source = _with_code_points(typst(shown, families), missing)
    return compiler.compile(source.encode(), font_paths=fonts, pdf_standards=["ua-1"])


def _shipped_fonts() -> Path:
    """Return the folder of matplotlib's fonts, found without importing it."""
    found = importlib.util.find_spec("matplotlib")
    assert found is not None, "matplotlib is a dependency"
    return Path(str(found.origin)).parent / "mpl-data" / "fonts" / "ttf"


def _missing(source: str) -> set[str]:
    """Return the characters of a source that the shipped fonts lack."""
    beyond = {c for c in source if c > "\x7e"}
    return beyond - _characters(_shipped_fonts() / "DejaVuSans.ttf", 0) if beyond else set()


def _characters(path: Path | str, index: int) -> set[str]:
    from fontTools.ttLib import TTFont

    with open(path, "rb") as file, TTFont(file, fontNumber=index, lazy=True) as font:
        return {chr(point) for point in font.getBestCmap() or {}}


def _families_for(missing: set[str], fonts: Iterable[FontInfo]) -> tuple[list[str], set[str]]:
    """Return families that have missing characters, the one that has most of them first, and what is missing still."""
    having = {family: characters & missing for family, characters in _upright(fonts)}
    chosen: list[str] = []
    left = set(missing)
    while left:
        best = max(having, key=lambda family: len(having[family] & left), default="")
        if not best or not having[best] & left:
            break
        chosen.append(best)
        left -= having[best]
    return chosen, left


def _upright(fonts: Iterable[FontInfo]) -> Iterator[tuple[str, set[str]]]:
    """Yield the families of fonts on the system, in the order of their names, with the characters they have."""
    from fontTools.ttLib import TTLibError

    regular = [font for font in fonts if font.path and font.style == "normal" and font.weight == 400]
    own = str(_shipped_fonts())
    for font in sorted(regular, key=lambda font: (font.family, str(font.path), font.index)):
        if str(font.path).startswith(own):
            continue
        try:
            yield font.family, _characters(str(font.path), font.index)
        except (TTLibError, OSError):  # a broken font on the system is no concern of the note's
            continue


def _with_code_points(source: str, missing: Sequence[str] | set[str]) -> str:
    """Return a source with code points in the place of characters: they stand in its strings only."""
    if not missing:
        return source
    run = f"[{''.join(re.escape(c) for c in sorted(missing))}]+"
    return re.sub(run, lambda found: code_points(found.group()), source)
