"""A selection of orders for people: one table, and what to take."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.masks.order import Row, Selection
from symcirc.report.order_facts import target_line
from symcirc.transfer.engineering import engineering

_HEADS = ("family", "order", "pass loss", "stop loss", "highest Q", "delay varies", "settles to 1 %")


def order_text(title: str, selection: Selection) -> Iterator[str]:
    """Yield the lines: the mask, a row for each family that meets it, the others with their reasons, the choice."""
    yield title
    yield ""
    yield f"{selection.mask.ask} must be a {selection.kind}:"
    yield from (f"  {band.words}" for band in selection.mask.bands)
    yield ""
    yield from _table([_HEADS, *(_cells(row) for row in selection.rows)])
    if selection.failures:
        yield ""
    reasons = dict.fromkeys(failure.reason for failure in selection.failures)
    for reason in reasons:
        those = [f.candidate.family + f.candidate.words for f in selection.failures if f.reason == reason]
        yield f"{reason}: {'; '.join(those)}"
    yield ""
    yield f"take {selection.reason}"
    yield f"  {target_line(selection, selection.recommended)}"


def _cells(row: Row) -> tuple[str, ...]:
    return (
        row.candidate.family + row.candidate.words,
        str(row.order),
        engineering(row.pass_loss_db, "dB", 4),
        engineering(row.stop_loss_db, "dB", 4),
        engineering(row.highest_q, "", 4),
        engineering(row.delay_variation, "s", 4),
        engineering(row.settling, "s", 4),
    )


def _table(rows: list[tuple[str, ...]]) -> Iterator[str]:
    """Yield rows in columns, the first to the left and the others to the right."""
    wide = [max(map(len, column)) for column in zip(*rows, strict=True)]
    for first, *others in rows:
        cells = [f"{cell:>{w}}" for cell, w in zip(others, wide[1:], strict=True)]
        yield "  ".join([f"{first:{wide[0]}}", *cells])
