"""Where real amplifiers move the poles of a stage with numbers: to first order, and exactly beside it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import mpmath
import sympy

from symcirc.circuit.amplifier import gain_symbol
from symcirc.derivation import Derivation
from symcirc.sheet.expression import names
from symcirc.stability.numbers import as_fraction, values_in
from symcirc.stability.perturbation import Coefficients, Perturbation, needed_ties, perturbation
from symcirc.transfer.roots import roots
from symcirc.witness.network import Arithmetic, complete

#: Digits of the arithmetic; a sum that is smaller than this share of its terms' sizes is taken for zero.
DIGITS, ROUNDING = 40, 1e-10


@dataclass(frozen=True)
class PoleShift:
    """One pole in rad/s: the ideal one, its change to first order in all 1/A, and its change in truth.

    ``first_order`` is None for a multiple pole, which does not move in proportion.
    """

    ideal: complex
    first_order: complex | None
    exact: complex


@dataclass(frozen=True)
class PoleShifts:
    """All poles of an ask by ascending size, and the ``others`` in rad/s that only the real stage has."""

    poles: tuple[PoleShift, ...]
    others: tuple[complex, ...]


def pole_shifts(ideal: Derivation, real: Derivation, name: str) -> PoleShifts:
    """Return how every pole of an ask moves, for the sheet's numbers.

    To first order a pole p moves by -sum E_k(p) / (A_k(p) P'(p)), where the ideal denominator P gets the terms
    E_k/A_k. The real poles are given to the ideal ones so that the sum of their distances is least.

    Args:
        ideal, real: what ``derive`` gives for one sheet, posed with ideal and with real amplifiers.
        name: an ask, no loop gain.

    Raises:
        Complaint: the ask is a loop gain, or no amplifier is real.
        KeyError: a number is missing, or the answer is too big to be expanded.

    An integrator with an amplifier of 1 MHz: its pole at 0 stays, and one more comes.

    >>> from symcirc.complaints import Source
    >>> from symcirc.derivation import derive, pose, pose_real
    >>> from symcirc.sheet import read_sheet
    >>> text = '''in -- R1 -- m -- C1 -- out
    ... U1 opamp: plus gnd, minus m, drives out, gbw 1 MHz
    ... fix R1 = 10k, C1 = 10n
    ... ask H = V_out/V_in'''
    >>> sheet = read_sheet(Source("a.stage", text))
    >>> found = pole_shifts(derive(pose(sheet)), derive(pose_real(sheet)), "H")
    >>> found.poles[0].exact, [f"{pole.real:.6g}" for pole in found.others]
    (0j, ['-6.29319e+06'])
    """
    disturbed = perturbation(ideal, real, name)
    numbers = ideal.sheet.numbers
    before = roots(list(values_in(disturbed.ideal, numbers)))
    after = roots(list(values_in(real.answer(name).function.denominator, numbers)))
    partners = _partners(before, after)
    shifts = tuple(
        PoleShift(pole, _first_order(pole, disturbed, real), after[partner] - pole)
        for pole, partner in zip(before, partners, strict=True)
    )
    return PoleShifts(shifts, tuple(pole for k, pole in enumerate(after) if k not in partners))


def _partners(before: Sequence[complex], after: Sequence[complex]) -> list[int]:
    """Return for each ideal pole the place of the real one that it has become."""
    from scipy.optimize import linear_sum_assignment

    distances = [[abs(pole - other) for other in after] for pole in before]
    return [int(k) for k in linear_sum_assignment(distances)[1]] if before else []


def _first_order(pole: complex, disturbed: Perturbation, real: Derivation) -> complex | None:
    numbers = real.sheet.numbers
    with mpmath.workdps(DIGITS):
        s = mpmath.mpmathify(pole)
        own, hidden = (_numbers(part, numbers) for part in (disturbed.ideal, disturbed.hidden))
        slope = [k * c for k, c in enumerate(own)][1:]
        if _vanishes(hidden, s) or _vanishes(slope, s):
            return None
        changes = (
            _inverse_gain(gain_symbol(name), s, real) * _value(_numbers(change, numbers), s)
            for name, change in disturbed.first.items()
        )
        return complex(-mpmath.fsum(changes) / (_value(hidden, s) * _value(slope, s)))


def _numbers(coefficients: Coefficients, numbers: Mapping[str, sympy.Expr]) -> list[Any]:
    return [mpmath.mpf(c.numerator) / c.denominator for c in values_in(coefficients, numbers)]


def _value(coefficients: Sequence[Any], s: Any) -> Any:
    return mpmath.polyval(list(coefficients)[::-1], s)


def _vanishes(coefficients: Sequence[Any], s: Any) -> bool:
    """Tell whether a polynomial is zero at s, which is right to the rounding of a float."""
    return bool(abs(_value(coefficients, s)) <= ROUNDING * _value([abs(c) for c in coefficients], abs(s)))


def _inverse_gain(symbol: str, s: Any, real: Derivation) -> Any:
    """Return 1/A at a complex frequency; 0 where A has a pole there."""
    ties = needed_ties(symbol, real.ties)
    exact = Arithmetic(lambda x: mpmath.mpf(x.numerator) / x.denominator, +mpmath.pi, mpmath.sqrt)
    held = {name.text for tie in ties.values() for name in names(tie)} - {*ties, "s", "pi"}
    values = {name: exact.number(as_fraction(real.sheet.numbers[name])) for name in held}
    try:
        return 1 / complete(values, ties, s, exact)[symbol]
    except ZeroDivisionError:
        return mpmath.mpf(0)
