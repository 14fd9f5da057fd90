"""Formulas in Typst's mathematics, in lines no longer than the page.

How wide a formula will be is estimated from its letters, in em. One that is too wide is broken before a sign of its
sums, or between factors, where a person would; inside of fractions as well, which then have several lines above or
below the line. Names are set as :mod:`symcirc.transfer.naming` says.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from symcirc.note.model import Equation, Relation
from symcirc.note.typst_text import literal
from symcirc.transfer.form import (
    Decimal,
    Divided,
    Form,
    Integer,
    Negative,
    Power,
    Product,
    Root,
    Sum,
    Symbol,
    children,
    product,
)
from symcirc.transfer.naming import set_name

#: A line of a displayed equation in em, number and margins off.
LINE = 38.0
#: The relations in Typst.
_RELATIONS: dict[Relation, str] = {"=": "=", ">": ">", ">=": ">=", "<": "<", "<=": "<="}
#: Widths in em, a little on the safe side: a sign with its space, a bracket, a digit, a slanted letter, an upright
#: one, a letter of an index, the space between factors.
_SIGN, _BRACKET, _DIGIT, _SLANTED, _UPRIGHT, _INDEX, _THIN = 1.25, 0.42, 0.52, 0.72, 0.55, 0.45, 0.17
#: How far the lines after the first are indented, and how much of a line may stand before the relation.
_INDENT, _BEFORE = 1.0, 0.4
#: A fraction of more lines than these would be taller than a page.
_TALLEST = 30
_IN_BRACKETS: tuple[type[Form], ...] = (Sum, Negative)
_RAISED_IN_BRACKETS: tuple[type[Form], ...] = (Sum, Negative, Divided, Product, Power, Root, Decimal)


@dataclass(frozen=True)
class _Piece:
    """Mathematics that stays in one line. ``inside`` stands before it within a line, ``first`` at a line's start."""

    source: str
    width: float
    inside: str = ""
    first: str = ""


def mathematics(form: Form) -> str:
    """Return a form in one piece.

    >>> mathematics(Divided(Integer(1), Product((Symbol("R1"), Symbol("S1_C2")))))
    'frac(1, R_"1" thin C_"S1,2")'
    """
    return _whole(form).source


def displayed(equation: Equation, line: float = LINE) -> str:
    """Return a displayed equation without its number, in lines of at most ``line`` em where it can be broken.

    >>> displayed(Equation("eq-1", 1, Symbol("k"), ">=", Integer(2)))
    'k >= 2'
    >>> print(displayed(Equation("eq-1", 1, Symbol("k"), "=", Sum((Symbol("a"), Symbol("b"), Symbol("c")))), 5))
    k & = a + b \\
    & quad "" + c
    """
    left, right, relation = equation.left, equation.right, _RELATIONS[equation.relation]
    before = _whole(left).width + _SIGN
    if before + _whole(right).width <= line:
        return f"{mathematics(left)} {relation} {mathematics(right)}"
    if before <= _BEFORE * line:
        lines = _lines(_pieces(right, line - before), line - before)
        return f"{mathematics(left)} & {relation} {_continued(lines)}"
    above = _lines(_pieces(left, line), line - _INDENT)
    below = _lines(_pieces(right, line - _INDENT - _SIGN), line - _INDENT - _SIGN)
    return f'& {_continued(above)} \\\n& quad "" {relation} {_continued(below)}'


def _continued(lines: Sequence[str]) -> str:
    return " \\\n& quad ".join(lines)


def _whole(form: Form) -> _Piece:
    """Return a form in one piece."""
    match form:
        case Integer():
            return _Piece(str(form.value), _DIGIT * len(str(form.value)))
        case Decimal():
            return _decimal(form.text)
        case Symbol():
            return _name(form.name)
        case Sum():
            return _beside(_sum_pieces(form, None))
        case Negative():
            inner = _enclosed(form.operand, _IN_BRACKETS)
            return _Piece(f"-{inner.source}", _SIGN + inner.width)
        case Product():
            return _beside(_product_pieces(form.factors, None))
        case Divided():
            return _divided(form, None)
        case Power():
            base = _enclosed(form.base, _RAISED_IN_BRACKETS)
            exponent = str(form.exponent)
            return _Piece(f"{base.source}^{exponent}", base.width + _INDEX * len(exponent))
    inner = _whole(form.operand)
    return _Piece(f"sqrt({inner.source})", inner.width + 2 * _BRACKET)


def _pieces(form: Form, line: float | None) -> list[_Piece]:
    """Return a form in pieces that each fit a line where they can; as one where it fits, or nothing is said of it."""
    whole = _whole(form)
    if line is None or whole.width <= line:
        return [whole]
    match form:
        case Sum():
            return _sum_pieces(form, line)
        case Negative():
            first, *rest = _enclosed_pieces(form.operand, _IN_BRACKETS, line - _SIGN)
            return [_before("-", first, _SIGN), *rest]
        case Product():
            return _product_pieces(form.factors, line)
        case Divided():
            return _quotient_pieces(form, line)
        case Power():
            *rest, last = _enclosed_pieces(form.base, _RAISED_IN_BRACKETS, line - 1)
            return [*rest, replace(last, source=f"{last.source}^{form.exponent}", width=last.width + _INDEX)]
        case Root():
            inner = _stacked(form.operand, line - 2 * _BRACKET)
            return [_Piece(f"sqrt({inner.source})", inner.width + 2 * _BRACKET)]
    return [whole]


def _sum_pieces(form: Sum, line: float | None) -> list[_Piece]:
    pieces = _pieces(form.terms[0], line)
    for term in form.terms[1:]:
        sign, kinds = ("-", _IN_BRACKETS) if isinstance(term, Negative) else ("+", (Sum,))
        operand = term.operand if isinstance(term, Negative) else term
        room = None if line is None else line - _SIGN
        first, *rest = _enclosed_pieces(operand, kinds, room)
        # the empty text keeps the sign's space where nothing stands before it in its line
        signed = _Piece(f"{sign} {first.source}", _SIGN + first.width, inside=" ", first='"" ')
        pieces += [signed, *rest]
    return pieces


def _product_pieces(factors: Sequence[Form], line: float | None) -> list[_Piece]:
    pieces: list[_Piece] = []
    for factor in factors:
        first, *rest = _enclosed_pieces(factor, _IN_BRACKETS, line)
        if pieces:
            between = " dot.op " if _begins_with_number(factor) else " thin "
            first = replace(first, width=first.width + _THIN, inside=between, first='"" dot.op ')
        pieces += [first, *rest]
    return pieces


def _enclosed(form: Form, in_brackets: tuple[type[Form], ...]) -> _Piece:
    return _enclosed_pieces(form, in_brackets, None)[0]


def _enclosed_pieces(form: Form, in_brackets: tuple[type[Form], ...], line: float | None) -> list[_Piece]:
    """Return a form in pieces, in brackets where it is of one of the kinds."""
    if not isinstance(form, in_brackets):
        return _pieces(form, line)
    room = None if line is None else line - 2 * _BRACKET
    pieces = _pieces(form, room)
    if len(pieces) == 1:
        return [_Piece(f"({pieces[0].source})", pieces[0].width + 2 * _BRACKET)]
    high = "lr(size: #2.4em, {})" if _holds_fraction(form) else "{}"
    first, *rest, last = pieces
    closed = replace(last, source=f"{last.source} {high.format('paren.r')}", width=last.width + _BRACKET)
    return [_before(high.format("paren.l"), first, _BRACKET), *rest, closed]


def _before(source: str, piece: _Piece, width: float) -> _Piece:
    return replace(piece, source=f"{source} {piece.source}", width=piece.width + width)


def _quotient_pieces(form: Divided, line: float) -> list[_Piece]:
    above, after = _parted(form)
    if sum(_whole(side).width for side in (above, form.below)) > _TALLEST * line:
        return _slashed_pieces(form, line)
    fraction = _divided(Divided(above, form.below), line)
    if not after:
        return [fraction]
    first, *rest = _product_pieces(after, line)
    return [fraction, replace(first, inside=" thin ", first='"" dot.op '), *rest]


def _slashed_pieces(form: Divided, line: float) -> list[_Piece]:
    """Return a fraction that is too tall for a page, with a slash, in pieces between which a page may end."""
    over = _enclosed_pieces(form.above, _IN_BRACKETS, line)
    first, *rest = _enclosed_pieces(form.below, (*_IN_BRACKETS, Divided, Product), line - _SIGN)
    return [*over, replace(_before("slash", first, _SIGN), inside=" ", first='"" '), *rest]


def _divided(form: Divided, line: float | None) -> _Piece:
    """Write a fraction; sums of fractions above the line are written as brackets after it instead."""
    above, after = _parted(form)
    over, under = _stacked(above, line), _stacked(form.below, line)
    fraction = _Piece(f"frac({over.source}, {under.source})", max(over.width, under.width) + 0.3)
    return _beside([fraction, *(replace(_enclosed(x, (Sum,)), inside=" thin ") for x in after)])


def _parted(form: Divided) -> tuple[Form, list[Form]]:
    """Return what stands above the line, and the sums of fractions that are written after the fraction."""
    factors = list(form.above.factors) if isinstance(form.above, Product) else [form.above]
    after: list[Form] = [factor for factor in factors if isinstance(factor, Sum) and _holds_fraction(factor)]
    return product([factor for factor in factors if factor not in after]), after


def _stacked(form: Form, line: float | None) -> _Piece:
    """Return a form as one piece, which may have several lines."""
    pieces = _pieces(form, line)
    if line is None or len(pieces) == 1:
        return pieces[0]
    return _Piece(" \\ ".join(_lines(pieces, line)), line)


def _lines(pieces: Sequence[_Piece], line: float) -> list[str]:
    """Return pieces in lines, each as full as it can be."""
    lines: list[list[_Piece]] = []
    filled = 0.0
    for piece in pieces:
        if not lines or filled + piece.width > line:
            lines.append([])
            filled = 0.0
        lines[-1].append(piece)
        filled += piece.width
    starts = ("", *(each[0].first for each in lines[1:]))
    return [start + _beside(each).source for start, each in zip(starts, lines, strict=True)]


def _beside(pieces: Sequence[_Piece]) -> _Piece:
    first, *rest = pieces
    source = first.source + "".join(piece.inside + piece.source for piece in rest)
    return replace(first, source=source, width=sum(piece.width for piece in pieces))


def _begins_with_number(form: Form) -> bool:
    match form:
        case Integer() | Decimal():
            return True
        case Product() | Power():
            return _begins_with_number(children(form)[0])
    return False


def _holds_fraction(form: Form) -> bool:
    return isinstance(form, Divided) or any(_holds_fraction(child) for child in children(form))


def _decimal(text: str) -> _Piece:
    mantissa, _, exponent = text.partition("e")
    if not exponent:
        return _Piece(mantissa, _DIGIT * len(mantissa))
    return _Piece(f"{mantissa} dot.op 10^({int(exponent)})", _DIGIT * (len(mantissa) + 2) + _SIGN + 1)


def _name(name: str) -> _Piece:
    written = set_name(name)
    slanted = len(written.base) == 1
    base = written.base if slanted and written.base.isalpha() else literal(written.base)
    below = ",".join(written.indices)
    source = f"{base}_{literal(below)}" if below else base
    return _Piece(source, (_SLANTED if slanted else _UPRIGHT) * len(written.base) + _INDEX * len(below))
