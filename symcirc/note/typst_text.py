"""Text of any kind as Typst has it: always as a string, never as markup, so that nothing in it means anything."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterator

#: Joiners that shape letters; other characters that cannot be seen are shown by their code points.
_JOINERS = "\u200c\u200d"
_UNSEEN = ("Cc", "Cf", "Cs", "Co", "Zl", "Zp")


def literal(text: str) -> str:
    r"""Return a string of Typst. A character that cannot be seen, as one that turns the line, is shown.

    >>> print(literal('say "R1\\C1"'))
    "say \"R1\\C1\""
    >>> print(literal("a\u202eb"))
    "a⟨U+202E⟩b"
    """
    one_line = re.sub(r"[\r\n\t]", " ", text)
    seen = "".join(code_points(c) if _is_unseen(c) else c for c in one_line)
    return '"' + seen.replace("\\", "\\\\").replace('"', '\\"') + '"'


def code_points(characters: str) -> str:
    """Return what is shown in the place of characters that cannot be.

    >>> code_points("二階")
    '⟨U+4E8C U+968E⟩'
    """
    return "⟨" + " ".join(f"U+{ord(c):04X}" for c in characters) + "⟩"


def pieces_of(text: str, longest: int, piece: int) -> Iterator[str]:
    """Yield a text in pieces between which a line may end: words of more than ``longest`` characters are cut.

    >>> list(pieces_of("a very longish word", longest=6, piece=4))
    ['a very long', 'ish word']
    """
    start = 0
    for word in re.finditer(rf"\S{{{longest + 1},}}", text):
        for cut in range(word.start() + piece, word.end(), piece):
            while cut < word.end() and unicodedata.combining(text[cut]):
                cut += 1
            if start < cut < word.end():
                yield text[start:cut]
                start = cut
    yield text[start:]


def _is_unseen(character: str) -> bool:
    return unicodedata.category(character) in _UNSEEN and character not in _JOINERS
