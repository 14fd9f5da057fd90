"""Formulas in presentation MathML, of the elements that MathML Core has (W3C, "MathML Core").

A product is written side by side, with the invisible operator for multiplication between its factors, so that it
is read aloud as a product and each factor stands a little apart. Names are set as :mod:`symcirc.transfer.naming` says.
"""

from __future__ import annotations

import math
from html import escape

from symcirc.note.model import Equation, Relation
from symcirc.note.widths import factor_width, fraction_parts, lines, term_width, width
from symcirc.transfer.form import (
    Decimal,
    Divided,
    Form,
    Integer,
    Negative,
    Power,
    Product,
    Sum,
    Symbol,
    children,
)
from symcirc.transfer.naming import set_name

#: Multiplication that is not seen; a thin space sets the factors apart.
_TIMES = '<mo rspace="0.17em">\u2062</mo>'
#: Multiplication before a number, which would run together with what stands before it.
_DOT = "<mo>⋅</mo>"
_RELATIONS: dict[Relation, str] = {"=": "=", ">": "&gt;", ">=": "≥", "<": "&lt;", "<=": "≤"}

#: A displayed equation wider than this is broken into lines: what a page holds of it, in em.
ROOM = 35.0
_BROAD = math.inf


def mathml(form: Form) -> str:
    """Return a form as a formula inside a sentence.

    >>> mathml(Divided(Integer(1), Symbol("R1")))
    '<math><mfrac><mn>1</mn><msub><mi>R</mi><mn>1</mn></msub></mfrac></math>'
    """
    return f"<math>{_written(form, _BROAD)}</math>"


def equation_mathml(equation: Equation) -> str:
    """Return a displayed equation, without its number; one too wide for a page is broken at its operators.

    >>> equation_mathml(Equation("eq-1", 1, Symbol("k"), ">=", Integer(2)))
    '<math display="block"><mi>k</mi><mo>≥</mo><mn>2</mn></math>'
    """
    left, right = equation.left, equation.right
    relation = f"<mo>{_RELATIONS[equation.relation]}</mo>"
    if width(left) + width(right) <= ROOM:
        written = _written(left, _BROAD) + relation + _written(right, _BROAD)
    elif width(left) > ROOM / 3:
        written = _table(
            [("", line) for line in _lines(left, ROOM)]
            + [("", relation.replace("<mo>", '<mo form="infix">') + _written(right, ROOM))]
        )
    else:
        first, *later = _lines(right, ROOM - width(left))
        head = _written(left, ROOM) + relation
        written = _table([(head, first), *(("", line) for line in later)])
    return f'<math display="block">{written}</math>'


def _table(rows: list[tuple[str, str]]) -> str:
    """Write the lines of an equation, what stands before their relation in a column of its own."""
    cells = "".join(f"<mtr><mtd>{head}</mtd><mtd>{line}</mtd></mtr>" for head, line in rows)
    return f'<mtable displaystyle="true">{cells}</mtable>'


def _stack(lines_: list[str]) -> str:
    """Write the lines of a part of an equation, if there are several, as a part of the line that it stands in."""
    if len(lines_) == 1:
        return _row(lines_[0])
    return f"<mtable>{''.join(f'<mtr><mtd>{line}</mtd></mtr>' for line in lines_)}</mtable>"


def _lines(form: Form, room: float) -> list[str]:
    """Write a form on as many lines as it needs: a sum's begin with their signs, a product's with a cross."""
    match form:
        case Sum():
            first, *later = lines(form.terms, term_width, room)
            return [_terms(first, room), *(_signed(terms, room, ' form="infix"') for terms in later)]
        case Product():
            first, *later = lines(form.factors, factor_width, room)
            return [
                _factors(first, room),
                *(f'<mo form="infix">×</mo>{_factors(factors, room)}' for factors in later),
            ]
        case Negative(operand=Product() as operand):
            first_line, *rest = _lines(operand, room)
            return [f"<mo>−</mo>{first_line}", *rest]
    return [_written(form, room)]


def _written(form: Form, room: float) -> str:
    match form:
        case Integer():
            return f"<mn>{form.value}</mn>"
        case Decimal():
            return _decimal(form.text)
        case Symbol():
            return _name(form.name)
        case Sum() | Product():
            return _stack(_lines(form, room))
        case Negative():
            return _row("<mo>−</mo>" + _factor(form.operand, (Sum, Negative), room))
        case Divided():
            return _divided(form, room)
        case Power():
            return _power(form, room)
    return f"<msqrt>{_written(form.operand, room)}</msqrt>"


def _row(inside: str) -> str:
    return f"<mrow>{inside}</mrow>"


def _factor(form: Form, in_brackets: tuple[type[Form], ...], room: float) -> str:
    written = _written(form, room)
    return _bracketed(written) if isinstance(form, in_brackets) else written


def _bracketed(written: str) -> str:
    """Put brackets around what is written; around one line they do not grow, since those that can take more room."""
    mark = "" if any(tall in written for tall in ("<mfrac", "<mtable")) else ' stretchy="false"'
    return _row(f"<mo{mark}>(</mo>{written}<mo{mark}>)</mo>")


def _terms(terms: list[Form], room: float) -> str:
    return _written(terms[0], room) + _signed(terms[1:], room)


def _signed(terms: list[Form], room: float, form: str = "") -> str:
    """Write terms each with the sign before it; ``form`` keeps the space around a sign that begins a line."""
    written = ""
    for term in terms:
        mark = f"<mo{'' if written else form}>"
        if isinstance(term, Negative):
            written += f"{mark}−</mo>" + _factor(term.operand, (Sum, Negative), room)
        else:
            written += f"{mark}+</mo>" + _factor(term, (Sum,), room)
    return written


def _factors(factors: list[Form], room: float) -> str:
    written = _factor(factors[0], (Sum, Negative), room)
    for factor in factors[1:]:
        written += (_DOT if _begins_with_number(factor) else _TIMES) + _factor(factor, (Sum, Negative), room)
    return written


def _begins_with_number(form: Form) -> bool:
    match form:
        case Integer() | Decimal():
            return True
        case Product() | Power():
            return _begins_with_number(children(form)[0])
    return False


def _divided(form: Divided, room: float) -> str:
    """Write a fraction; sums of fractions above the line are written as brackets after it instead."""
    above, after = fraction_parts(form)
    fraction = f"<mfrac>{_written(above, room)}{_written(form.below, room)}</mfrac>"
    brackets = (_factor(factor, (Sum,), room) for factor in after)
    return _row(_TIMES.join([fraction, *brackets])) if after else fraction


def _power(form: Power, room: float) -> str:
    exponent = f"<mn>{form.exponent}</mn>"
    if isinstance(form.base, Symbol):
        base, below = _base_and_index(form.base.name)
        return f"<msubsup>{base}{below}{exponent}</msubsup>" if below else f"<msup>{base}{exponent}</msup>"
    base = _written(form.base, room)
    plain = isinstance(form.base, Integer) or (isinstance(form.base, Decimal) and "e" not in form.base.text)
    return f"<msup>{base if plain else _bracketed(base)}{exponent}</msup>"


def _decimal(text: str) -> str:
    mantissa, _, exponent = text.partition("e")
    if not exponent:
        return f"<mn>{mantissa}</mn>"
    power = int(exponent)
    written = f"<mn>{power}</mn>" if power >= 0 else _row(f"<mo>−</mo><mn>{-power}</mn>")
    return _row(f"<mn>{mantissa}</mn>{_DOT}<msup><mn>10</mn>{written}</msup>")


def _name(name: str) -> str:
    base, below = _base_and_index(name)
    return f"<msub>{base}{below}</msub>" if below else base


def _base_and_index(name: str) -> tuple[str, str]:
    """Return a name's letter or word and what stands below it, which is upright; nothing where nothing does."""
    written = set_name(name)
    below = '<mo separator="true">,</mo>'.join(map(_index, written.indices))
    return f"<mi>{escape(written.base)}</mi>", _row(below) if len(written.indices) > 1 else below


def _index(index: str) -> str:
    if index.isdigit():
        return f"<mn>{index}</mn>"
    upright = ' mathvariant="normal"' if len(index) == 1 else ""
    return f"<mi{upright}>{escape(index)}</mi>"
