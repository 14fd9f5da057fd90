"""The design note as a document: what it holds and in which order, whatever it will be written in.

It is built once (``build.py``) and written by one small writer for each form: ``latex.py``, ``html.py``, ``typst.py``.
All text is plain: a writer makes it harmless in its own language. Formulas are the trees of ``transfer/form.py``.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from symcirc.transfer.form import Form


@dataclass(frozen=True)
class Mathematics:
    """A formula inside a sentence."""

    form: Form


@dataclass(frozen=True)
class Reference:
    """A reference to a numbered equation, a figure or a table, by its ``anchor``."""

    anchor: str


#: What a sentence is made of, in order.
Pieces = tuple[str | Mathematics | Reference, ...]


@dataclass(frozen=True)
class Heading:
    """The heading of a section (``level`` 1) or of a part of one (2)."""

    level: int
    text: str


@dataclass(frozen=True)
class Paragraph:
    """Sentences."""

    pieces: Pieces


@dataclass(frozen=True)
class Items:
    """A list of short paragraphs, without numbers."""

    items: tuple[Pieces, ...]


Relation = Literal["=", ">", ">=", "<", "<="]


@dataclass(frozen=True)
class Equation:
    """A displayed equation ``left relation right`` with a number, which references name by its ``anchor``.

    ``number`` counts from 1 through the note. ``root_of`` is set for a part that a polynomial determines: then the
    equation says that the polynomial, ``left``, is 0, and ``root_of`` is the part's name.
    """

    anchor: str
    number: int
    left: Form
    relation: Relation
    right: Form
    root_of: str | None = None


@dataclass(frozen=True)
class Step:
    """One step of a derivation: a sentence, and the equation that it comes to."""

    words: Pieces
    equation: Equation


@dataclass(frozen=True)
class Derivation:
    """Steps in order; a writer that can folds them away one by one."""

    steps: tuple[Step, ...]


@dataclass(frozen=True)
class Table:
    """Rows under a header. ``numeric`` says of every column whether it is aligned as numbers."""

    anchor: str
    number: int
    caption: str
    header: tuple[Pieces, ...]
    rows: tuple[tuple[Pieces, ...], ...]
    numeric: tuple[bool, ...]


@dataclass(frozen=True)
class Figure:
    """A picture as SVG text, self-contained. ``alternative`` says in words what it shows.

    ``drawn_from`` is what the picture was made of, a drawing or curves, for a writer that needs another format.
    """

    anchor: str
    number: int
    name: str
    caption: str
    alternative: str
    svg: str
    drawn_from: object = field(default=None, repr=False, compare=False)


@dataclass(frozen=True)
class Remark:
    """A sentence that must not be overlooked: a warning of the sheet, or the caution."""

    kind: Literal["warning", "caution"]
    pieces: Pieces


@dataclass(frozen=True)
class Listing:
    """Text as it stands in a file, line by line."""

    text: str


Block = Heading | Paragraph | Items | Equation | Derivation | Table | Figure | Remark | Listing


@dataclass(frozen=True)
class Document:
    """A note: ``title``, ``date`` (ISO 8601), the sheet's file and the SHA-256 of its text, and its blocks."""

    title: str
    date: str
    file: str
    digest: str
    blocks: tuple[Block, ...]
