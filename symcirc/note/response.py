"""The curves of a note: of each target with the values that the note settles on, and what the limits leave to spare."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from symcirc.complaints import Complaint
from symcirc.note.model import Block, Figure, Paragraph, Pieces, Table
from symcirc.note.pieces import Numbering, quantity, shown
from symcirc.plots.curves import Curves, Forbidden, curves_of
from symcirc.progress import Progress
from symcirc.sheet.model import Sheet

#: More pictures than this make no note.
MOST_PICTURES = 4


@dataclass(frozen=True)
class Response:
    """The curves of an ask."""

    ask: str
    curves: Curves


@dataclass(frozen=True)
class Reached:
    """A limit and the worst loss of a curve within its band, both in dB; ``spare_db`` below 0: it is missed."""

    words: str
    loss_db: float
    at_hz: float
    spare_db: float


def responses_of(sheet: Sheet, progress: Progress) -> tuple[Response, ...]:
    """Return the curves of what has a target or limits, or of all that is asked; what lacks numbers is left out."""
    aimed = [target.ask for target in sheet.targets] + [limit.ask for limit in sheet.limits]
    names = list(dict.fromkeys(aimed or [ask.name for ask in sheet.asks]))
    found = []
    for name in names[:MOST_PICTURES]:
        try:
            found.append(Response(name, curves_of(sheet, name, progress)))
        except Complaint:  # without numbers there is no curve, and the note says nothing of it
            continue
    return tuple(found)


def response_blocks(responses: tuple[Response, ...], values: str, numbering: Numbering) -> Iterator[Block]:
    """Yield a figure of each response, and of each with limits a table of what they leave to spare."""
    for response in responses:
        yield _figure(response, values, numbering)
        rows = reached(response.curves)
        if rows:
            yield _table(response, rows, numbering)
            yield Paragraph((_frequencies(response.curves),))


def _figure(response: Response, values: str, numbering: Numbering) -> Figure:
    from symcirc.plots.picture import description_of, svg_of

    what = response.curves.shown()
    caption = shown(f"Response of {response.curves.ask}{values}.")
    described = shown(description_of(response.curves, what))
    svg = svg_of(response.curves, what)
    return numbering.figure(
        f"response-{response.ask}", f"response-{response.ask}", caption, described, svg, response.curves
    )


def _table(response: Response, rows: list[Reached], numbering: Numbering) -> Table:
    cells: list[tuple[Pieces, ...]] = [
        (
            (words_of(row.words),),
            (quantity(row.loss_db, "dB", 4),),
            (quantity(row.at_hz, "Hz"),),
            (quantity(row.spare_db, "dB", 3),),
        )
        for row in rows
    ]
    header = ("Limit", "Worst loss", "at", "To spare")
    caption = f"The limits of {response.ask} and {_subject(response.curves)}"
    return numbering.table(f"limits-{response.ask}", caption, header, cells, (False, True, True, True))


def words_of(limit: str) -> str:
    """Return a limit's words with its relation spelled out.

    >>> words_of("loss <= 1 dB below 2 kHz")
    'loss at most 1 dB below 2 kHz'
    """
    return shown(limit.replace("<=", "at most").replace(">=", "at least"))


def _subject(curves: Curves) -> str:
    names = [trace.name for trace in curves.traces]
    if "real" in names:
        return "the stage with real amplifiers"
    return "the stage" if "stage" in names else "the target, as the stage has no values"


def _frequencies(curves: Curves) -> str:
    first, last = (quantity(float(hertz), "Hz") for hertz in curves.frequencies[[0, -1]])
    return (
        f"Losses are relative to the nominal gain of {quantity(round(curves.reference_db, 9) + 0.0, 'dB', 4)}, at "
        f"{len(curves.frequencies):,} frequencies from {first} to {last}."
    )


def reached(curves: Curves) -> list[Reached]:
    """Return for every limit the worst loss within its band: of the real stage, else the ideal, else the target."""
    order = {"real": 0, "stage": 1, "target": 2}
    trace = min(curves.traces, key=lambda trace: order.get(trace.name, 3))
    rows = []
    for area in curves.forbidden:
        inside = (curves.frequencies >= area.low * (1 - 1e-9)) & (
            curves.frequencies <= area.high * (1 + 1e-9)
        )
        if inside.any():
            rows.append(_reached(area, curves, trace.gain_db[inside], curves.frequencies[inside]))
    return rows


def _reached(area: Forbidden, curves: Curves, gains: object, frequencies: object) -> Reached:
    import numpy as np

    level, hertz = np.asarray(gains, float), np.asarray(frequencies, float)
    k = int(np.argmin(level) if area.passes else np.argmax(level))
    spare = float(level[k]) - area.level_db
    loss = curves.reference_db - float(level[k])
    return Reached(area.words, loss, float(hertz[k]), spare if area.passes else -spare)
