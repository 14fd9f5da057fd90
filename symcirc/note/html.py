"""A note as one HTML file: formulas in MathML, pictures inside, no script, nothing fetched.

Its look is in ``note.css`` beside this module.
"""

from __future__ import annotations

from collections.abc import Iterator
from importlib.resources import files

from symcirc.note.html_figure import inline_svg, keeps_colours
from symcirc.note.html_text import Names, direction, head, pieces, place, plain
from symcirc.note.mathml import equation_mathml
from symcirc.note.model import (
    Block,
    Derivation,
    Document,
    Equation,
    Figure,
    Heading,
    Items,
    Listing,
    Paragraph,
    Pieces,
    Remark,
    Table,
)

#: What a page may do, told to the browser: show its own style. Nothing is run, nothing fetched, whatever is in it.
_POLICY = "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'"
#: A word with more letters than this is long.
_LONG = 24
#: A table with more columns than this is set smaller on paper, where it cannot scroll.
_MANY = 7
_REMARKS = {"warning": "Warning", "caution": "Caution"}


def html(document: Document) -> str:
    """Return a note as an HTML file.

    Raises:
        KeyError: a reference is to what the note does not hold.

    >>> from symcirc.note.model import Paragraph
    >>> page = html(Document("Low-pass", "2026-12-01", "a.stage", "0f", (Paragraph(("Gain < 1",)),)))
    >>> "<p>Gain &lt; 1</p>" in page
    True
    """
    return "\n".join(_lines(document)) + "\n"


def _lines(document: Document) -> Iterator[str]:
    title = plain(document.title)
    yield "<!DOCTYPE html>"
    yield '<html lang="en">'
    yield "<head>"
    yield '<meta charset="utf-8">'
    yield f'<meta http-equiv="Content-Security-Policy" content="{_POLICY}">'
    yield '<meta name="viewport" content="width=device-width, initial-scale=1">'
    yield '<meta name="color-scheme" content="light dark">'
    yield f"<title>{title or 'Design note'}</title>"
    yield f"<style>\n{files('symcirc.note').joinpath('note.css').read_text(encoding='utf-8')}</style>"
    yield "</head>"
    yield "<body>"
    yield '<a class="skip" href="#note">Skip to the note</a>'
    yield from _head(document)
    yield from _contents(document)
    yield '<main id="note" tabindex="-1">'
    names = _names(document)
    for number, block in enumerate(document.blocks, 1):
        yield from _block(block, number, names)
    yield "</main>"
    yield "</body>"
    yield "</html>"


def _head(document: Document) -> Iterator[str]:
    yield "<header>"
    yield f"<h1{direction(document.title)}>{plain(document.title)}</h1>"
    yield "<dl>"
    yield f'<div><dt>Date</dt><dd><time datetime="{plain(document.date)}">{plain(document.date)}</time></dd></div>'
    yield f"<div><dt>Sheet</dt><dd{direction(document.file)}>{plain(document.file)}</dd></div>"
    yield f'<div><dt>SHA-256 of its text</dt><dd class="digest">{plain(document.digest)}</dd></div>'
    yield "</dl>"
    yield "</header>"


def _contents(document: Document) -> Iterator[str]:
    sections = [
        (number, block)
        for number, block in enumerate(document.blocks, 1)
        if isinstance(block, Heading) and block.level == 1
    ]
    if len(sections) > 1:
        yield '<nav aria-label="Contents">'
        yield "<ol>"
        for number, heading in sections:
            yield f'<li{direction(heading.text)}><a href="#part-{number}">{plain(heading.text)}</a></li>'
        yield "</ol>"
        yield "</nav>"


def _names(document: Document) -> Names:
    """Return what a reference is shown as, by anchor."""
    names = {}
    for block in document.blocks:
        match block:
            case Equation():
                names[block.anchor] = f"({block.number})"
            case Derivation():
                names |= {step.equation.anchor: f"({step.equation.number})" for step in block.steps}
            case Figure():
                names[block.anchor] = f"Figure {block.number}"
            case Table():
                names[block.anchor] = f"Table {block.number}"
    return names


def _block(block: Block, number: int, names: Names) -> Iterator[str]:
    match block:
        case Heading():
            level = block.level + 1
            yield f'<h{level} id="part-{number}"{direction(block.text)}>{plain(block.text)}</h{level}>'
        case Paragraph():
            yield f"<p{direction(*block.pieces)}>{pieces(block.pieces, names)}</p>"
        case Items():
            yield "<ul>"
            yield from (f"<li{direction(*item)}>{pieces(item, names)}</li>" for item in block.items)
            yield "</ul>"
        case Equation():
            yield from _equation(block)
        case Derivation():
            yield from _derivation(block, names)
        case Table():
            yield from _table(block, names)
        case Figure():
            yield from _figure(block)
        case Remark():
            word = _REMARKS[block.kind]
            yield f'<div class="remark {block.kind}" role="note" aria-label="{word}">'
            yield f"<p{direction(*block.pieces)}><strong>{word}.</strong> {pieces(block.pieces, names)}</p>"
            yield "</div>"
        case Listing():
            lines = plain(block.text.removesuffix("\n")).split("\n")
            yield "<pre><code>" + "".join(f"<span>{line}\n</span>" for line in lines) + "</code></pre>"


def _equation(equation: Equation) -> Iterator[str]:
    """Write an equation in a box of its own, which scrolls where the page is narrower, with the keyboard too."""
    yield f'<div class="equation" id="{place(equation.anchor)}">'
    yield f'<div class="wide" role="group" aria-label="Equation {equation.number}" tabindex="0">'
    yield f"{equation_mathml(equation)}</div>"
    yield f'<span class="number">({equation.number})</span>'
    yield "</div>"


def _derivation(derivation: Derivation, names: Names) -> Iterator[str]:
    """Write what each step says, with its equation folded below it.

    The box that shows all of them works by the style alone, so it is there where the browser's style can.
    """
    yield '<div class="derivation">'
    yield '<p class="all"><label><input type="checkbox"> Show the equation of every step</label></p>'
    yield "<ol>"
    for step in derivation.steps:
        yield f"<li><p{direction(*step.words)}>{pieces(step.words, names)}</p>"
        yield f"<details><summary>Equation ({step.equation.number})</summary>"
        yield from _equation(step.equation)
        yield "</details></li>"
    yield "</ol>"
    yield "</div>"


def _table(table: Table, names: Names) -> Iterator[str]:
    name = f"Table {table.number}"
    yield f'<div class="wide table" role="group" aria-label="{name}" tabindex="0">'
    many = ' class="many"' if len(table.header) > _MANY else ""
    yield f'<table id="{place(table.anchor)}"{many}>'
    yield f"<caption{direction(table.caption)}><span><b>{name}.</b> {plain(table.caption)}</span></caption>"
    cells = (_cell("col", *cell, names) for cell in zip(table.header, table.numeric, strict=True))
    yield f"<thead><tr>{''.join(cells)}</tr></thead>"
    yield "<tbody>"
    for row in table.rows:
        first, *rest = zip(row, table.numeric, strict=True)
        cells = (_cell("", *cell, names) for cell in rest)
        yield f"<tr>{_cell('row', *first, names)}{''.join(cells)}</tr>"
    yield "</tbody>"
    yield "</table>"
    yield "</div>"


def _cell(scope: str, words: Pieces, numeric: bool, names: Names) -> str:
    """Write a cell; one with nothing in it is no head."""
    kinds = [*(["numeric"] if numeric else []), *(["long"] if _has_long_word(words) else [])]
    attributes = (f' class="{" ".join(kinds)}"' if kinds else "") + direction(*words)
    if scope and (written := head(words, names)):
        return f'<th scope="{scope}"{attributes}>{written}</th>'
    return f"<td{attributes}>{pieces(words, names)}</td>"


def _has_long_word(words: Pieces) -> bool:
    """Return whether a cell must be broken inside a word, lest it make its column wider than a phone."""
    return any(len(word) > _LONG for piece in words if isinstance(piece, str) for word in piece.split())


def _figure(figure: Figure) -> Iterator[str]:
    name = f"Figure {figure.number}"
    paper = " paper" if keeps_colours(figure.svg) else ""
    yield f'<figure id="{place(figure.anchor)}">'
    yield f'<div class="wide{paper}" role="group" aria-label="{name}, picture" tabindex="0">'
    yield inline_svg(figure.svg, f"picture-{figure.number}", figure.alternative)
    yield "</div>"
    yield f"<figcaption{direction(figure.caption)}><b>{name}.</b> {plain(figure.caption)}</figcaption>"
    yield "</figure>"
