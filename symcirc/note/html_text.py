"""Plain text and sentences in HTML."""

from __future__ import annotations

import unicodedata
from collections.abc import Mapping
from html import escape

from symcirc.note.mathml import mathml
from symcirc.note.model import Mathematics, Pieces, Reference
from symcirc.transfer.text import text

#: What may not stand in HTML: control characters are shown by their pictures (Unicode, "Control Pictures"), others
#: that Unicode gives to no character by the replacement character.
_SHOWN = {
    **dict.fromkeys((*range(0x80, 0xA0), *range(0xD800, 0xE000), *range(0xFDD0, 0xFDF0)), "\ufffd"),
    **{plane + last: "\ufffd" for plane in range(0, 0x110000, 0x10000) for last in (0xFFFE, 0xFFFF)},
    **{code: chr(0x2400 + code) for code in range(0x20) if chr(code) not in "\t\n"},
    0x7F: "\u2421",
}

#: What a reference is shown as, by anchor: ``(1)`` for an equation, ``Figure 1``, ``Table 1``.
Names = Mapping[str, str]


def plain(words: str) -> str:
    """Return text so that it is read as it stands, in an element or an attribute.

    >>> plain('<b> & "c"')
    '&lt;b&gt; &amp; &quot;c&quot;'
    """
    return escape(words.replace("\r\n", "\n").translate(_SHOWN))


def pieces(sentence: Pieces, names: Names) -> str:
    """Return a sentence; its references are links. Raises KeyError for one to what the note does not hold.

    >>> pieces(("See ", Reference("eq-1"), "."), {"eq-1": "(1)"})
    'See <a href="#eq-1" aria-label="equation (1)">(1)</a>.'
    """
    return "".join(_piece(piece, names) for piece in sentence)


def _piece(piece: str | Mathematics | Reference, names: Names) -> str:
    match piece:
        case Mathematics():
            return mathml(piece.form)
        case Reference():
            name = names[piece.anchor]
            read = f' aria-label="equation {name}"' if name.startswith("(") else ""
            return f'<a href="#{place(piece.anchor)}"{read}>{name}</a>'
    return plain(piece)


def place(anchor: str) -> str:
    """Return the id of what has an anchor; an id has no spaces.

    >>> place("step-1-standard form")
    'step-1-standard-form'
    """
    return plain("-".join(anchor.split()))


def head(sentence: Pieces, names: Names) -> str:
    """Return the head of a row or column; a formula in it has a name, which a table is read aloud by.

    >>> from symcirc.transfer.form import Symbol
    >>> head((Mathematics(Symbol("k")),), {})
    '<math aria-label="k"><mi>k</mi></math>'
    """
    return "".join(
        f'<math aria-label="{plain(text(piece.form))}">{mathml(piece.form).removeprefix("<math>")}'
        if isinstance(piece, Mathematics)
        else _piece(piece, names)
        for piece in sentence
    )


def direction(*sentence: object) -> str:
    """Return the attribute that text with letters written from the right needs, to begin at its own side.

    >>> direction("R1"), direction("\u05de")
    ('', ' dir="auto"')
    """
    letters = (letter for piece in sentence if isinstance(piece, str) for letter in piece)
    return ' dir="auto"' if any(unicodedata.bidirectional(x) in ("R", "AL") for x in letters) else ""
