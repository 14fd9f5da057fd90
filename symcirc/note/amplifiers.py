"""The section on real amplifiers: what their gain and gbw move, to first order and exactly."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

import sympy

from symcirc.complaints import Complaint
from symcirc.derivation import Derivation, derive, pose, pose_real
from symcirc.note.formulas import expression_form
from symcirc.note.material import Material
from symcirc.note.model import Block, Paragraph, Pieces
from symcirc.note.pieces import Numbering, mathematics, quantity
from symcirc.report.numbers import expanded_answers
from symcirc.report.shift import LONGEST_FACTORED, pole_groups, shift_formulas, shift_numbers, shifted_answers
from symcirc.stability.pair import PairChange, pair_shift
from symcirc.stability.perturbation import real_amplifiers
from symcirc.stability.poles import PoleShifts
from symcirc.transfer.form import Divided, Symbol

#: Formulas with more operations than this are left out: no person reads them.
LONGEST = 120


@dataclass(frozen=True)
class Move:
    """One pole or pair of an ask, in words, and the relative moves of f0 and Q as text: first order, exact."""

    ask: str
    pole: str
    f0: tuple[str, str]
    q: tuple[str, str] | None
    largest: float


@dataclass(frozen=True)
class Real:
    """The derivations of a sheet with its values, amplifiers ideal and real, and how the poles move in numbers.

    ``trouble`` says why there is no answer with real amplifiers; then all else is empty.
    """

    ideal: Derivation
    real: Derivation
    moves: tuple[Move, ...]
    trouble: str = ""


def real_of(material: Material) -> Real | None:
    """Return what real amplifiers do to the sheet with the values put in; None where no amplifier is real."""
    ideal = derive(pose(material.valued))
    if not real_amplifiers(ideal):
        return None
    try:
        real = derive(pose_real(material.valued))
        expanded_answers(real)
        return Real(ideal, real, tuple(_all_moves(ideal, real)))
    except Complaint as complaint:  # the note of the ideal circuit stands without them
        return Real(ideal, ideal, (), f"The real amplifiers are not counted: {complaint.cause}.")


def amplifier_blocks(found: Real | None, numbering: Numbering) -> Iterator[Block]:
    """Yield the shifts of every ask with poles; nothing where no amplifier has a gain or a gbw."""
    if found is None:
        return
    if found.trouble:
        yield Paragraph((found.trouble,))
        return
    for answer in shifted_answers(found.ideal):
        yield from _formulas(found.ideal, found.real, answer.ask.name, numbering)
    if found.moves:
        yield Paragraph(
            ("What the amplifiers' gain and gain-bandwidth product move, to first order and exactly:",)
        )
        yield _table(found.moves, numbering)


def _formulas(ideal: Derivation, real: Derivation, ask: str, numbering: Numbering) -> Iterator[Block]:
    answer = ideal.answer(ask)
    try:
        shifts = shift_formulas(ideal, real, answer)
    except Complaint:  # a natural mode in the way, or a gain that depends on s: numbers say more
        return
    first = True
    for shift in shifts:
        for what, name, formula in (("w0", "ω0", shift.omega0), ("Q", "Q", shift.q)):
            if formula is None or formula.count_ops() > LONGEST:
                continue
            if first:
                yield Paragraph(
                    (
                        f"Of {ask}, to first order in one over each gain and gain-bandwidth product (in Hz), the "
                        "relative changes, which add up:",
                    )
                )
                first = False
            left = Divided(Symbol(f"Δ{name}"), Symbol(name))
            yield numbering.equation(
                f"shift-{ask}-{what}-{shift.parameter}", left, expression_form(_tidy(formula))
            )


def _tidy(formula: sympy.Expr) -> sympy.Expr:
    return sympy.factor(formula) if formula.count_ops() <= LONGEST_FACTORED else formula


def _all_moves(ideal: Derivation, real: Derivation) -> Iterator[Move]:
    """Yield how the poles of every ask move, for those with numbers."""
    for answer in shifted_answers(ideal):
        numbers = shift_numbers(ideal, real, answer)
        if numbers is not None:
            yield from _moves(answer.ask.name, numbers)


def _moves(ask: str, shifts: PoleShifts) -> Iterator[Move]:
    for pole, other in pole_groups(shifts.poles):
        pair = None if other is None else pair_shift(pole, other)
        if pair is not None:
            where = f"f0 = {quantity(pair.omega0 / (2 * math.pi), 'Hz')}"
            where += "" if pair.q is None else f", Q = {quantity(pair.q, '')}"
            f0 = (_written(pair.first_order, "omega0"), _written(pair.exact, "omega0"))
            q = (_written(pair.first_order, "q"), _written(pair.exact, "q"))
            yield Move(ask, where, f0, q, abs(pair.exact.omega0) if pair.exact else 0.0)
        elif pole.ideal:
            first = None if pole.first_order is None else (pole.first_order / pole.ideal).real
            exact = (pole.exact / pole.ideal).real
            where = f"real, {quantity(abs(pole.ideal) / (2 * math.pi), 'Hz')}"
            yield Move(
                ask, where, ("–" if first is None else _percent(first), _percent(exact)), None, abs(exact)
            )


def _written(change: PairChange | None, what: str) -> str:
    value = None if change is None else getattr(change, what)
    return "–" if value is None else _percent(value)


def _table(moves: tuple[Move, ...], numbering: Numbering) -> Block:
    rows: list[tuple[Pieces, ...]] = []
    for move in moves:
        q = move.q or ("", "")
        rows.append(((mathematics(move.ask),), (move.pole,), *((text,) for text in (*move.f0, *q))))
    header = ("Ask", "Pole", "f0, first order", "f0, exact", "Q, first order", "Q, exact")
    return numbering.table(
        "shifts", "Shifts by the real amplifiers", header, rows, (False, False, *(True,) * 4)
    )


def _percent(part: float) -> str:
    return f"{100 * part + 0.0:+.3g} %"  # no minus before zero
