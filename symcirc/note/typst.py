"""A note as the source of a Typst document, which :mod:`symcirc.note.pdf` turns into pages.

Numbers of equations, figures and tables are the note's own. All text goes in as strings (:mod:`.typst_text`), and
what a screen reader needs goes with it: alternative texts, table headers, the language, headings that skip no level.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from datetime import date

from symcirc.note.model import (
    Block,
    Derivation,
    Document,
    Equation,
    Figure,
    Heading,
    Items,
    Listing,
    Mathematics,
    Paragraph,
    Pieces,
    Reference,
    Remark,
    Table,
)
from symcirc.note.typst_figure import INK, inked, lies, width_on_page
from symcirc.note.typst_mathematics import displayed, mathematics
from symcirc.note.typst_text import literal, pieces_of
from symcirc.transfer.text import text as plain

#: The families of letters, in the order in which they are asked for a character.
FAMILIES = ("Libertinus Serif", "DejaVu Sans")
_MATHEMATICS, _FIXED = "New Computer Modern Math", "DejaVu Sans Mono"
#: What drawings ask first: letters without serifs, as beside the letters of the plots.
_DRAWN = ("DejaVu Sans",)
#: Words longer than the first may be cut into pieces of the second: in sentences, in cells, in a listing, in a digest.
_SENTENCE, _CELL, _LISTING, _DIGEST = (24, 8), (9, 5), (24, 4), (0, 8)
#: From so many columns on a table has small letters.
_MANY_COLUMNS = 8

_STYLE = r"""
#set page(paper: "a4", margin: (x: 25mm, top: 22mm, bottom: 24mm), footer: context {
  set text(8.5pt, fill: faint)
  h(1fr)
  counter(page).display("1 of 1", both: true)
})
#set par(leading: 0.62em, spacing: 0.95em)
#set list(marker: text(fill: accent)[–], indent: 0.2em)
#set heading(numbering: none)
#show title: set text(20pt, fill: accent)
#show title: set par(leading: 0.4em)
#show heading.where(level: 1): it => block(above: 2em, below: 0.9em, sticky: true, width: 100%, {
  set text(13pt, fill: accent)
  it.body
  v(-0.55em)
  line(length: 100%, stroke: 0.5pt + pale)
})
#show heading.where(level: 2): it => block(above: 1.5em, below: 0.8em, sticky: true, text(11pt, it.body))
#show math.equation.where(block: true): set align(left)
#show math.equation.where(block: true): set block(breakable: true)
#show link: set text(fill: accent)
#set figure(gap: 0.8em)
#show figure.caption: set text(9.5pt)
#show figure.where(kind: table): set figure.caption(position: top)
#show figure.where(kind: table): set block(breakable: true)
#show figure.where(kind: table): set block(above: 1.6em, below: 1.6em)
#show figure.where(kind: table): set align(left)
#set table(
  stroke: (_, y) => (bottom: if y == 0 { 0.8pt + accent } else { 0.4pt + pale }),
  inset: (x: 0.5em, y: 0.45em),
)
#show table.cell.where(y: 0): set text(weight: "bold")

#let displayed(anchor, number, words, body) = [#block(width: 100%, inset: (left: 1.4em), layout(size => {
  let it = math.equation(block: true, alt: words, numbering: _ => text(number), body)
  let wide = measure(it).width
  if wide > size.width { scale(size.width / wide * 100%, reflow: true, it) } else { it }
}))#label(anchor)]
#let step(words, equation) = {
  block(sticky: true, below: 0.7em, words)
  equation
}
#let remark(kind, colour, body) = block(
  width: 100%, outset: (left: -1.25pt), stroke: (left: 2.5pt + colour), inset: (left: 0.9em, y: 0.4em), {
    text(fill: colour, weight: "bold", kind)
    [ ]
    body
  },
)
#let cut = box()
#let numbered(..lines) = {
  set text(8pt)
  set par(leading: 0.5em)
  grid(
    columns: (auto, 1fr), column-gutter: 1em, row-gutter: 0.55em, align: (right, left),
    ..lines.pos().enumerate().map(((k, it)) => (pdf.artifact(text(fill: faint, str(k + 1))), it)).flatten()
  )
}
"""


def typst(document: Document, more_families: Sequence[str] = ()) -> str:
    """Return the Typst source of a note. Its pages look the same wherever the families of letters are found.

    ``more_families`` are asked for the characters that :data:`FAMILIES` lack.

    >>> note = Document("Low-pass", "2026-12-01", "a.stage", "00", (Heading(1, "Summary"), Paragraph(("5 %",))))
    >>> print(typst(note)[-41:].strip())
    #heading(level: 1)[#"Summary"]
    <BLANKLINE>
    #"5 %"
    """
    families = (*FAMILIES, *more_families)
    return "\n".join([*_head(document, families), *_body(document, (*_DRAWN, *families))]) + "\n"


def _head(document: Document, families: Sequence[str]) -> Iterator[str]:
    day = date.fromisoformat(document.date[:10])
    dated = f"datetime(year: {day.year}, month: {day.month}, day: {day.day})"
    yield f"#set document(title: {literal(document.title)}, date: {dated})"
    yield '#let (accent, faint, pale) = (rgb("#27485c"), rgb("#5d666d"), rgb("#b9c3c9"))'
    yield f'#set text(font: {_array(families)}, size: 10.5pt, lang: "en", fallback: false, fill: rgb("{INK}"))'
    yield f"#show math.equation: set text(font: {_array((_MATHEMATICS, *families))}, fallback: false)"
    yield f"#show raw: set text(font: {_array((_FIXED, *families))}, fallback: false)"
    yield _STYLE
    yield f"#title[{_text(document.title, _SENTENCE)}]"
    yield (
        "#block(below: 1.6em, { set text(9pt, fill: faint); set par(leading: 0.5em); ["
        f"{_text(document.date, _SENTENCE)} #h(1em) {_raw(document.file, _SENTENCE)} \\\n"
        f"SHA-256 {_raw(document.digest, _DIGEST)}] }})"
    )


def _array(strings: Sequence[str]) -> str:
    return f"({', '.join(literal(string) for string in strings)},)"


def _body(document: Document, families: Sequence[str]) -> Iterator[str]:
    names = dict(_names(document.blocks))
    level = 0
    upright = True
    for block, after in zip(document.blocks, (*document.blocks[1:], None), strict=True):
        lying = _lies(block) or (isinstance(block, Heading) and _lies(after))
        if lying == upright:
            yield f"#set page(flipped: {str(lying).lower()})"
            upright = not lying
        match block:
            case Heading():
                level = min(block.level, level + 1)
                yield f"\n#heading(level: {level})[{_text(block.text, _SENTENCE)}]"
            case Figure():
                yield "\n" + _figure(block, families)
            case _:
                yield "\n" + _block(block, names)


def _lies(block: Block | None) -> bool:
    return isinstance(block, Figure) and lies(block)


def _names(blocks: Sequence[Block]) -> Iterator[tuple[str, str]]:
    """Yield every anchor with the name by which sentences call what is there."""
    for block in blocks:
        match block:
            case Equation():
                yield block.anchor, f"({block.number})"
            case Derivation():
                yield from _names([step.equation for step in block.steps])
            case Table():
                yield block.anchor, f"Table {block.number}"
            case Figure():
                yield block.anchor, f"Figure {block.number}"


def _block(
    block: Paragraph | Items | Equation | Derivation | Table | Remark | Listing, names: Mapping[str, str]
) -> str:
    match block:
        case Paragraph():
            return _sentence(block.pieces, names) + "\n"
        case Items():
            return f"#list({', '.join(f'[{_sentence(item, names)}]' for item in block.items)})"
        case Equation():
            return "#" + _equation(block)
        case Derivation():
            steps = ((_sentence(step.words, names), _equation(step.equation)) for step in block.steps)
            return "\n".join(f"#step([{words}], {equation})" for words, equation in steps)
        case Table():
            return _table(block, names)
        case Remark():
            kind, colour = _REMARKS[block.kind]
            return f"#remark({literal(kind)}, {colour}, [{_sentence(block.pieces, names)}])"
        case Listing():
            return _listing(block)


_REMARKS = {"warning": ("Warning", 'rgb("#8a4b08")'), "caution": ("Caution", "accent")}


def _sentence(pieces: Pieces, names: Mapping[str, str], cuts: tuple[int, int] = _SENTENCE) -> str:
    return "".join(_piece(piece, names, cuts) for piece in pieces)


def _piece(piece: str | Mathematics | Reference, names: Mapping[str, str], cuts: tuple[int, int]) -> str:
    match piece:
        case str():
            return _text(piece, cuts)
        case Mathematics():
            return f"#math.equation(alt: {literal(plain(piece.form))}, ${mathematics(piece.form)}$)"
        case Reference():
            return f"#link(label({literal(piece.anchor)}))[#{literal(names[piece.anchor])}]"


def _text(text: str, cuts: tuple[int, int]) -> str:
    """Return text in a row of strings, between which a line may end inside of long words."""
    return "#cut".join(f"#{literal(piece)}" for piece in pieces_of(text, *cuts))


def _raw(text: str, cuts: tuple[int, int]) -> str:
    return "#cut".join(f"#raw({literal(piece)})" for piece in pieces_of(text, *cuts))


def _equation(equation: Equation) -> str:
    words = f"{plain(equation.left)} {equation.relation} {plain(equation.right)}"
    number = literal(f"({equation.number})")
    return f"displayed({literal(equation.anchor)}, {number}, {literal(words)}, $\n{displayed(equation)}\n$)"


def _table(table: Table, names: Mapping[str, str]) -> str:
    align = ", ".join("right" if numeric else "left" for numeric in table.numeric)
    small = "8pt" if len(table.header) >= _MANY_COLUMNS else "9.5pt"

    def row(cells: Sequence[Pieces]) -> str:
        return ", ".join(f"[{_sentence(cell, names, _CELL)}]" for cell in cells)

    rows = "".join(f"  {row(cells)},\n" for cells in table.rows)
    return (
        f'#[#show table: set text({small}, number-width: "tabular")\n'
        f"{_captioned('table', 'Table', table.number, table.caption)}, table(\n"
        f"  columns: {len(table.header)}, align: ({align},), table.header({row(table.header)}),\n{rows}))"
        f"#label({literal(table.anchor)})]"
    )


def _figure(figure: Figure, families: Sequence[str]) -> str:
    head = _captioned("image", "Figure", figure.number, figure.caption)
    words = literal(figure.alternative)
    drawing = literal(inked(figure.svg, families))
    image = f'image(bytes({drawing}), format: "svg", width: {width_on_page(figure):.2f}pt, alt: {words})'
    return f"{head}, alt: {words}, {image})#label({literal(figure.anchor)})"


def _captioned(kind: str, supplement: str, number: int, caption: str) -> str:
    """Return the beginning of a figure or a table, with its number and its caption."""
    return (
        f'#figure(kind: {kind}, supplement: "{supplement}", numbering: _ => "{number}", '
        f"caption: [{_text(caption, _SENTENCE)}]"
    )


def _listing(listing: Listing) -> str:
    lines = listing.text.removesuffix("\n").split("\n")
    return f"#numbered({', '.join(f'[{_raw(line.expandtabs(4) or chr(32), _LISTING)}]' for line in lines)})"
