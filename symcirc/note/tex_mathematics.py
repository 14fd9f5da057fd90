r"""Displayed equations in LaTeX, those that are too wide broken over several lines.

Sums are broken before a sign, products between factors. A fraction or a root cannot be broken: what is too wide in it
gets a name of its own, a calligraphic letter, that the lines below explain.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from symcirc.transfer.form import (
    ONE,
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
)
from symcirc.transfer.latex import fraction_and_brackets, latex, latex_name

#: The widest formula on one line, in em of the text's size, its relation and left side included.
ROOM = 33.0
_RELATIONS = {"=": "=", ">": ">", "<": "<", ">=": r"\ge", "<=": r"\le"}
_LETTERS = "ABDEFGHKLMNPQRSTUWXYZ"


def display(left: Form, relation: str, right: Form, label: str) -> list[str]:
    r"""Return the lines of a display of ``left relation right``.

    >>> print("\n".join(display(Symbol("R2"), "=", Symbol("R1"), "eq:1")))
    \begin{equation}
      R_{2} = R_{1}
      \label{eq:1}
    \end{equation}
    """
    sign = _RELATIONS[relation]
    if width(left) + width(right) + 2 <= ROOM:
        body = f"{latex(left)} {sign} {latex(right)}"
        return [r"\begin{equation}", f"  {body}", rf"  \label{{{label}}}", r"\end{equation}"]
    rows = _rows(left, sign, right)
    lines = [rf"  {row} \notag\\" for row in rows[:-1]]
    return [r"\begin{align}", *lines, rf"  {rows[-1]}", rf"  \label{{{label}}}", r"\end{align}"]


def _rows(left: Form, sign: str, right: Form) -> list[str]:
    names = _Names()
    if width(right) + 2 > ROOM / 2 or width(left) <= ROOM / 2:
        head = names.lines(left, ROOM)
        if len(head) == 1 and width(left) <= ROOM / 3:
            first, *rest = names.lines(right, ROOM - width(left) - 2)
            rows = [f"{head[0]} &{sign} {first}", *(rf"&\quad {line}" for line in rest)]
        else:
            first, *rest = names.lines(right, ROOM - 4)
            rows = [f"&{head[0]}", *(rf"&\quad {line}" for line in head[1:])]
            rows += [rf"&\quad {sign} {first}", *(rf"&\qquad {line}" for line in rest)]
    else:
        first, *rest = names.lines(left, ROOM - width(right) - 2)
        *rest, last = [first, *rest]
        rows = [f"&{rest[0]}", *(rf"&\quad {line}" for line in rest[1:])] if rest else []
        rows.append(rf"&\quad {last} {sign} {latex(right)}")
    while names.waiting:
        name, form = names.waiting.pop(0)
        first, *more = names.lines(form, ROOM - 5)
        rows += [rf"\text{{with }}{name} &= {first}", *(rf"&\quad {line}" for line in more)]
    return rows


class _Names:
    """Lines of a formula, and what still waits to be explained."""

    def __init__(self) -> None:
        self.waiting: list[tuple[str, Form]] = []
        self._count = 0

    def lines(self, form: Form, room: float) -> list[str]:
        """Return a formula on lines of at most so many em."""
        if width(form) <= room:
            return [latex(form)]
        match form:
            case Sum():
                return self._packed([_term(term, first=k == 0) for k, term in enumerate(form.terms)], room)
            case Negative():
                inner = self._in_brackets(form.operand, room - 1)
                return [f"-{inner[0]}", *inner[1:]]
            case Product():
                return self._packed(
                    [_factor(factor, first=k == 0) for k, factor in enumerate(form.factors)], room
                )
            case Divided():
                return self._divided(form, room)
            case Power():
                return [f"{self._named(form.base)}^{{{form.exponent}}}"]
            case Root():
                return [rf"\sqrt{{{self._named(form.operand)}}}"]
        return [latex(form)]

    def _packed(self, pieces: Sequence[_Piece], room: float) -> list[str]:
        """Return pieces, each behind its sign, on as few lines as they go on in their order."""
        lines: list[str] = []
        used = room + 1
        for piece in pieces:
            wide = width(piece.form) + (1.2 if piece.in_brackets else 0) + 1.3
            if wide > room:
                bracketed = piece.in_brackets
                inner = (
                    self._in_brackets(piece.form, room - 2) if bracketed else self.lines(piece.form, room - 2)
                )
                lines += [f"{piece.sign}{inner[0]}", *inner[1:]]
                used = room + 1
                continue
            text = rf"\left({latex(piece.form)}\right)" if piece.in_brackets else latex(piece.form)
            if used + wide <= room:
                lines[-1] += f" {piece.beside}{text}"
                used += wide
            else:
                lines.append(f"{piece.sign}{text}")
                used = wide
        return lines

    def _in_brackets(self, form: Form, room: float) -> list[str]:
        """Return a sum in brackets that need not stand on one line; what is no sum without any."""
        if not isinstance(form, Sum):
            return self.lines(form, room)
        lines = self.lines(form, room - 1)
        if len(lines) == 1:
            return [rf"\left({lines[0]}\right)"]
        return [rf"\bigl({lines[0]}", *lines[1:-1], rf"{lines[-1]}\bigr)"]

    def _divided(self, form: Divided, room: float) -> list[str]:
        fraction, after = fraction_and_brackets(form)
        if after:
            return self.lines(Product((fraction, *after)), room)
        if width(form.below) <= room / 2 and form.above != ONE:
            factors = form.above.factors if isinstance(form.above, Product) else (form.above,)
            return self.lines(Product((Divided(ONE, form.below), *factors)), room)
        above = latex(form.above) if width(form.above) <= room / 2 else self._named(form.above)
        below = latex(form.below) if width(form.below) <= room / 2 else self._named(form.below)
        return [rf"\frac{{{above}}}{{{below}}}"]

    def _named(self, form: Form) -> str:
        letter = _LETTERS[self._count % len(_LETTERS)]
        again = self._count // len(_LETTERS)
        self._count += 1
        name = rf"\mathcal{{{letter}}}" + (f"_{{{again}}}" if again else "")
        self.waiting.append((name, form))
        return name


@dataclass(frozen=True)
class _Piece:
    """A term or a factor: its sign at the start of a line and ``beside`` another, and whether brackets are needed."""

    sign: str
    beside: str
    form: Form
    in_brackets: bool


def _term(term: Form, first: bool) -> _Piece:
    minus = isinstance(term, Negative)
    form = term.operand if isinstance(term, Negative) else term
    sign = ("-" if first else "- ") if minus else ("" if first else "+ ")
    return _Piece(sign, sign, form, isinstance(form, Sum | Negative))


def _factor(factor: Form, first: bool) -> _Piece:
    return _Piece("" if first else r"\times ", "", factor, isinstance(factor, Sum | Negative))


def width(form: Form) -> float:
    """Return how wide a formula is in em, rather too much than too little.

    >>> width(Symbol("R1")) < width(Symbol("R10")) < 2
    True
    """
    match form:
        case Integer():
            return 0.5 * len(str(form.value))
        case Decimal():
            return 0.5 * len(form.text) + (2.0 if "e" in form.text else 0.0)
        case Symbol():
            return _name_width(form.name)
        case Sum():
            return sum(width(term) for term in form.terms) + 1.3 * (len(form.terms) - 1)
        case Product():
            return sum(width(f) + (1.1 if isinstance(f, Sum | Negative) else 0.1) for f in form.factors)
        case Divided():
            fraction, after = fraction_and_brackets(form)
            wide = max(width(fraction.above), width(fraction.below)) + 0.3
            return wide + sum(width(bracketed) + 1.1 for bracketed in after)
        case Power():
            bare = isinstance(form.base, Symbol | Integer | Decimal)
            return width(form.base) + (0.0 if bare else 1.1) + 0.4 * len(str(form.exponent)) + 0.1
        case Negative():
            return width(form.operand) + (1.9 if isinstance(form.operand, Sum | Negative) else 0.8)
    return width(form.operand) + 1.0


def _name_width(name: str) -> float:
    r"""Return the width of a name from its LaTeX: letters before an index at full size, those in it smaller."""
    written = latex_name(name)
    own, _, index = written.partition("_{")
    letters, small = (_letters(part) for part in (own, index))
    return 0.62 * letters + 0.45 * small + 0.1


def _letters(text: str) -> int:
    return sum(
        letter.isalnum()
        for letter in text.replace(r"\mathrm", "").replace(r"\omega", "w").replace(r"\Delta", "D")
    )
