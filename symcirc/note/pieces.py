"""Sentences with formulas in them, and the counting of what is numbered."""

from __future__ import annotations

import re
from collections.abc import Iterable

from symcirc.note.formulas import Statement
from symcirc.note.model import Equation, Figure, Mathematics, Pieces, Reference, Relation, Table
from symcirc.transfer.engineering import engineering
from symcirc.transfer.form import Form, Symbol

#: A word that can be a name of the sheet's formulas.
_NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]*")


class Numbering:
    """Counts equations, figures and tables through a note, and knows the anchors that are given."""

    def __init__(self) -> None:
        self._counts: dict[type, int] = {}
        self.anchors: set[str] = set()
        self.equations: list[Equation] = []

    def _next(self, kind: type, anchor: str) -> int:
        self.anchors.add(anchor)
        self._counts[kind] = self._counts.get(kind, 0) + 1
        return self._counts[kind]

    def equation(self, anchor: str, left: Form, right: Form, relation: Relation = "=") -> Equation:
        """Return the next equation."""
        return self._kept(Equation(anchor, self._next(Equation, anchor), left, relation, right))

    def statement(self, anchor: str, said: Statement) -> Equation:
        """Return a design equation or a condition as the next equation."""
        number = self._next(Equation, anchor)
        return self._kept(Equation(anchor, number, said.left, said.relation, said.right, said.root_of))

    def _kept(self, equation: Equation) -> Equation:
        self.equations.append(equation)
        return equation

    def table(
        self,
        anchor: str,
        caption: str,
        header: Iterable[str],
        rows: Iterable[tuple[Pieces, ...]],
        numeric: tuple[bool, ...],
    ) -> Table:
        """Return the next table, of plain heads."""
        heads = tuple((head,) if head else () for head in header)
        return Table(anchor, self._next(Table, anchor), caption, heads, tuple(rows), numeric)

    def figure(
        self, anchor: str, name: str, caption: str, alternative: str, svg: str, drawn_from: object
    ) -> Figure:
        """Return the next figure."""
        number = self._next(Figure, anchor)
        return Figure(anchor, number, name, caption, alternative, svg, drawn_from)


def mathematics(name: str) -> Mathematics:
    """Return a name inside a sentence.

    >>> mathematics("R1").form
    Symbol(name='R1')
    """
    return Mathematics(Symbol(name))


def sentence(words: str, names: Iterable[str] = ()) -> Pieces:
    """Return words with the names of voltages and currents, and those given, as formulas.

    >>> sentence("From the currents at a: V_a.")
    ('From the currents at a: ', Mathematics(form=Symbol(name='V_a')), '.')
    """
    known = set(names)
    pieces: list[str | Mathematics | Reference] = []
    end = 0
    for match in _NAME.finditer(words):
        name = match.group()
        if name in known or name[:2] in ("V_", "I_"):
            pieces += [words[end : match.start()], mathematics(name)]
            end = match.end()
    pieces.append(words[end:])
    return tuple(piece for piece in pieces if piece != "")


def joined(items: Iterable[Pieces], last: str = " and ", between: str = ", ") -> Pieces:
    """Return groups of pieces joined as a sentence lists things.

    >>> joined([("a",), ("b",), ("c",)])
    ('a', ', ', 'b', ' and ', 'c')
    """
    groups = list(items)
    pieces: list[str | Mathematics | Reference] = []
    for k, group in enumerate(groups):
        if k:
            pieces.append(last if k == len(groups) - 1 else between)
        pieces += group
    return tuple(pieces)


def references(anchors: Iterable[str]) -> Pieces:
    """Return references to several numbered things, joined as a sentence lists them."""
    return joined([(Reference(anchor),) for anchor in anchors])


def shown(text: str) -> str:
    """Return quantities in ASCII as print has them.

    >>> shown("4.7 kohm and 2.2 uF")
    '4.7 kΩ and 2.2 µF'
    """
    text = re.sub(r"(?<=[\d ])([pnumkMG]?)ohm\b", r"\1Ω", text)
    return re.sub(r"(?<=\d )u(?=[ΩFHSAVs])", "µ", text)


def quantity(value: float, unit: str, digits: int = 5) -> str:
    """Return a number with its unit as print has it.

    >>> quantity(4804.3, "ohm")
    '4.8043 kΩ'
    """
    return shown(engineering(value, unit, digits))


def percent(part: float, digits: int = 2) -> str:
    """Return a part of one in percent, with its sign.

    >>> percent(0.0123), percent(-0.5)
    ('+1.23 %', '-50.00 %')
    """
    return f"{100 * part:+.{digits}f} %"
