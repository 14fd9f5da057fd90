"""Where the grammars are: inside the installed package, or beside it in a clone."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from lark import Lark


def grammar_folder() -> Path:
    """Return the folder of the ``.lark`` files.

    A wheel carries them as ``symcirc/grammars``; a clone, installed editable or not at all, has them beside
    the package.
    """
    package = Path(__file__).parent
    inside = package / "grammars"
    return inside if inside.is_dir() else package.parent / "grammars"


@cache
def parser(name: str) -> Lark:
    """Return the LALR parser of ``name.lark``, built once a process (50 ms)."""
    from lark import Lark

    return Lark.open(
        str(grammar_folder() / f"{name}.lark"),
        parser="lalr",
        lexer="contextual",
        maybe_placeholders=True,
    )
