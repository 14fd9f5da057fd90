"""The shapes of lines that the reports share."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.transfer.layout import WIDTH, broken


def readable(arithmetic: str) -> str:
    """Return plain arithmetic as people write it on a terminal: ^ for powers."""
    return arithmetic.replace("**", "^")


def hanging(head: str, arithmetic: str) -> Iterator[str]:
    """Yield arithmetic behind a head, broken over lines within the width, the later lines set in below its start.

    >>> list(hanging("  R1 = ", "R2**2"))
    ['  R1 = R2^2']
    """
    first, *rest = broken(arithmetic, WIDTH - len(head))
    yield head + readable(first)
    yield from (" " * len(head) + readable(line) for line in rest)


def aligned(rows: list[str]) -> Iterator[str]:
    """Yield rows as one LaTeX display."""
    yield r"\begin{align*}"
    yield from (f"  {row} \\\\" for row in rows[:-1])
    yield f"  {rows[-1]}"
    yield r"\end{align*}"


def counted(number: int, word: str) -> str:
    """Return a number of things in words.

    >>> counted(1, "product"), counted(10946, "product")
    ('1 product', '10,946 products')
    """
    return f"{number:,} {word}" if number == 1 else f"{number:,} {word}s"
