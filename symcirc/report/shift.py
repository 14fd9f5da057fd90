"""What real amplifiers do to ω0 and Q, or to each pole: to first order, and exactly beside it."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Any

import sympy

from symcirc.derivation import Answer, Derivation
from symcirc.match.formula import equation_text
from symcirc.report.envelope import envelope
from symcirc.report.lines import readable
from symcirc.report.numbers import expanded_answers, missing_numbers
from symcirc.report.quantities import ask_text
from symcirc.stability.pair import PairChange, PairShift, pair_shift
from symcirc.stability.perturbation import real_amplifiers
from symcirc.stability.poles import PoleShift, PoleShifts, pole_shifts
from symcirc.stability.shift import FirstOrder, first_order_shifts
from symcirc.transfer.engineering import engineering

#: Formulas with more operations than this are not factored: it could take seconds.
LONGEST_FACTORED = 400


def shifted_answers(ideal: Derivation) -> Iterator[Answer]:
    """Yield the answers that can shift: loop gains have no poles of their own."""
    return (answer for answer in expanded_answers(ideal) if answer.ask.loop is None and answer.function.order)


def shift_formulas(ideal: Derivation, real: Derivation, answer: Answer) -> tuple[FirstOrder, ...]:
    """Return the shifts of ω0 and Q in symbols, for an answer of order 2 with a natural frequency."""
    function = answer.function
    if function.order != 2 or not function.denominator[0]:
        return ()
    return first_order_shifts(ideal, real, answer.ask.name)


def shift_numbers(ideal: Derivation, real: Derivation, answer: Answer) -> PoleShifts | None:
    """Return how the poles move for the sheet's numbers, or None where one is missing."""
    expanded = real.answer(answer.ask.name)
    if missing_numbers(ideal.sheet, answer) or missing_numbers(ideal.sheet, expanded):
        return None
    return pole_shifts(ideal, real, answer.ask.name)


def shift_text(ideal: Derivation, real: Derivation) -> Iterator[str]:
    """Yield the lines of the shifts of every ask.

    Raises Complaint where no amplifier has a gain or a gbw.
    """
    yield ideal.sheet.title
    answers = list(shifted_answers(ideal))
    if not answers:
        yield ""
        yield "nothing that is asked has a pole, so nothing can shift"
    for answer in answers:
        yield ""
        yield f"{ask_text(answer.ask)}: what the real amplifiers change"
        formulas = shift_formulas(ideal, real, answer)
        if not real_amplifiers(ideal):
            yield "  nothing: no amplifier has a gain or a gbw"
            continue
        if formulas:
            yield "  to first order in one over each gain and gbw (Hz); the changes add up"
        for shift in formulas:
            yield f"    dw0/w0 by {shift.parameter}: {_shown(shift.omega0)}"
            if shift.q is not None:
                yield f"    dQ/Q   by {shift.parameter}: {_shown(shift.q)}"
        numbers = shift_numbers(ideal, real, answer)
        if numbers is None:
            yield "  (with every value fixed, the shift of each pole in numbers follows here)"
            continue
        yield from _poles_text(numbers)


def _written(formula: sympy.Expr) -> str:
    """Return a formula in plain arithmetic, its factors apart where finding them is quick."""
    short = formula.count_ops() <= LONGEST_FACTORED
    return equation_text(sympy.factor(formula) if short else formula)


def _shown(formula: sympy.Expr) -> str:
    return readable(_written(formula))


def _poles_text(shifts: PoleShifts) -> Iterator[str]:
    yield "  in numbers                          first order        exact"
    for pole, other in pole_groups(shifts.poles):
        pair = None if other is None else pair_shift(pole, other)
        if pair is None:
            yield from _single_text(pole)
        else:
            yield from _pair_text(pair)
    for extra in shifts.others:
        if extra.imag >= 0:
            yield f"    one more pole, at f = {engineering(abs(extra) / (2 * math.pi), 'Hz')}"


def pole_groups(poles: tuple[PoleShift, ...]) -> Iterator[tuple[PoleShift, PoleShift | None]]:
    """Yield complex pairs together (a stage of order 2 is one pair, real or not), real poles alone."""
    if len(poles) == 2:
        yield poles[0], poles[1]
        return
    for pole in poles:
        if pole.ideal.imag == 0:
            yield pole, None
        elif pole.ideal.imag > 0:
            yield pole, min(poles, key=lambda other: abs(other.ideal - pole.ideal.conjugate()))


def _pair_text(pair: PairShift) -> Iterator[str]:
    q = "" if pair.q is None else f", Q = {engineering(pair.q, '')}"
    yield f"    f0 = {engineering(pair.omega0 / (2 * math.pi), 'Hz')}{q}"
    yield f"      dw0/w0                       {_column(pair.first_order, 'omega0')}   {_column(pair.exact, 'omega0')}"
    yield f"      dQ/Q                         {_column(pair.first_order, 'q')}   {_column(pair.exact, 'q')}"


def _column(change: PairChange | None, what: str) -> str:
    value = None if change is None else getattr(change, what)
    return f"{'-':>14}" if value is None else f"{value:>14.5%}"


def _single_text(pole: PoleShift) -> Iterator[str]:
    yield f"    pole at f = {engineering(abs(pole.ideal) / (2 * math.pi), 'Hz')}"
    if pole.ideal:
        moves = [None if m is None else (m / pole.ideal).real for m in (pole.first_order, pole.exact)]
        shown = ["-" if m is None else f"{m:.5%}" for m in moves]
        yield f"      df/f                         {shown[0]:>14}   {shown[1]:>14}"


def shift_json(ideal: Derivation, real: Derivation) -> dict[str, Any]:
    """Return the shifts of every ask as JSON: formulas as strings, poles in rad/s as [real, imaginary]."""
    asks = {}
    for answer in shifted_answers(ideal):
        numbers = shift_numbers(ideal, real, answer)
        asks[answer.ask.name] = {
            "shift": {
                "first_order": [_formula_json(shift) for shift in shift_formulas(ideal, real, answer)],
                "poles": None if numbers is None else [_pole_json(pole) for pole in numbers.poles],
                "others": None if numbers is None else [_complex(pole) for pole in numbers.others],
            }
        }
    return envelope(ideal.sheet.title, asks, ideal.remarks)


def _formula_json(shift: FirstOrder) -> dict[str, str | None]:
    return {
        "amplifier": shift.amplifier,
        "parameter": shift.parameter,
        "omega0": _written(shift.omega0),
        "q": None if shift.q is None else _written(shift.q),
    }


def _pole_json(pole: PoleShift) -> dict[str, list[float] | None]:
    first = None if pole.first_order is None else _complex(pole.first_order)
    return {"ideal": _complex(pole.ideal), "first_order": first, "exact": _complex(pole.exact)}


def _complex(number: complex) -> list[float]:
    return [number.real, number.imag]
