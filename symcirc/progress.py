"""How long work tells how far it has come: it calls what it was given with a line of words."""

from __future__ import annotations

from collections.abc import Callable

#: Takes a line about how far the work has come.
Progress = Callable[[str], None]


def silent(line: str) -> None:
    """Take a line of progress and show it nowhere."""
