"""Tables in LaTeX: as wide as their cells where these fit on the page, else with broken or with smaller lines."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from symcirc.note.model import Table
from symcirc.note.tex_text import tex

#: The width of the text in em, and what stands between two columns.
TEXT, BETWEEN = 40.0, 1.2
Measure = tuple[float, float]


def table_lines(
    table: Table,
    label: str,
    header: Sequence[str],
    rows: Sequence[Sequence[str]],
    measured: Sequence[Sequence[Measure]],
) -> Iterator[str]:
    """Yield the lines of a table.

    Args:
        table: what it is.
        label: its label.
        header, rows: its cells in LaTeX.
        measured: for the header and every row how wide each cell is, and how wide at least, in em.
    """
    natural = [max(row[k][0] for row in measured) for k in range(len(header))]
    least = [max(row[k][1] for row in measured) for k in range(len(header))]
    room = TEXT - BETWEEN * len(header)
    if sum(least) > room:
        yield from _small(table, label, header, rows)
        return
    columns = _columns(table, natural, least, room)
    head = f"{' & '.join(header)} \\\\"
    yield rf"\setcounter{{table}}{{{table.number - 1}}}"
    yield rf"\begin{{longtable}}{{{columns}}}"
    yield rf"  \caption{{{tex(table.caption)}}}\label{{{label}}}\\"
    yield rf"  \toprule {head} \midrule \endfirsthead"
    yield rf"  \toprule {head} \midrule \endhead"
    yield r"  \bottomrule \endfoot"
    yield from (rf"  {' & '.join(row)} \\" for row in rows)
    yield r"\end{longtable}"


def _columns(table: Table, natural: Sequence[float], least: Sequence[float], room: float) -> str:
    """Return the columns: plain ones where all fit, else those of text broken, what is left shared by their need."""
    if sum(natural) <= room:
        return "".join("r" if numeric else "l" for numeric in table.numeric)
    widths = list(least)
    for _ in range(40):  # grow the neediest column by steps
        needy = max(range(len(widths)), key=lambda k: natural[k] / widths[k] if widths[k] else 0.0)
        step = (room - sum(least)) / 40
        widths[needy] = min(natural[needy], widths[needy] + step) or step
    return "".join(
        rf">{{\{'raggedleft' if numeric else 'raggedright'}\arraybackslash}}p{{{wide:.1f}em}}"
        for wide, numeric in zip(widths, table.numeric, strict=True)
    )


def _small(table: Table, label: str, header: Sequence[str], rows: Sequence[Sequence[str]]) -> Iterator[str]:
    yield r"\begin{table}[htbp]"
    yield r"  \centering"
    yield rf"  \setcounter{{table}}{{{table.number - 1}}}"
    yield rf"  \caption{{{tex(table.caption)}}}\label{{{label}}}"
    yield r"  \resizebox{\linewidth}{!}{%"
    yield rf"  \begin{{tabular}}{{{''.join('r' if numeric else 'l' for numeric in table.numeric)}}}"
    yield rf"    \toprule {' & '.join(header)} \\ \midrule"
    yield from (rf"    {' & '.join(row)} \\" for row in rows)
    yield r"    \bottomrule"
    yield r"  \end{tabular}}"
    yield r"\end{table}"
