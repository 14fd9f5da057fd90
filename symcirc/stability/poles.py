"""Where real amplifiers move the poles of a stage with numbers: to first order, and exactly beside it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import mpmath
import sympy
from sympy.polys.domains import QQ

from symcirc.circuit.amplifier import gain_symbol
from symcirc.complaints import Complaint, listed
from symcirc.derivation import Derivation
from symcirc.sheet.model import Sheet
from symcirc.stability.numbers import missing_numbers, values_in
from symcirc.stability.perturbation import Coefficients, perturbation, real_amplifiers
from symcirc.witness.network import Arithmetic, complete

#: Digits of the arithmetic.
DIGITS = 40


@dataclass(frozen=True)
class PoleShift:
    """One pole in rad/s: the ideal one, its change to first order in all 1/A, and its change in truth.

    ``first_order`` is None for a multiple pole, which does not move in proportion.
    """

    ideal: complex
    first_order: complex | None
    exact: complex


@dataclass(frozen=True)
class PairShift:
    """What the changes of a pair of poles come to: omega0 in rad/s, Q, and their relative changes.

    The first-order ones are None for a double pole. Q and its changes are None where Q is infinite.
    """

    omega0: float
    q: float | None
    first_order_omega0: float | None
    first_order_q: float | None
    exact_omega0: float
    exact_q: float | None


def pole_shifts(ideal: Derivation, real: Derivation, name: str) -> tuple[tuple[PoleShift, ...], tuple[complex, ...]]:
    """Return how every pole of an ask moves for the sheet's numbers, and the poles that only the real stage has.

    The real poles are given to the ideal ones so that the sum of the distances is least. Poles are sorted by size,
    that above the real axis first.

    Args:
        ideal, real: what ``derive`` gives for one sheet, posed with ideal and with real amplifiers.
        name: an ask, no loop gain.

    Raises:
        Complaint: a number is missing, the ask is a loop gain, or no amplifier is real.
        KeyError: the answer is too big to be expanded.
    """
    sheet = ideal.sheet
    found = perturbation(ideal, real, name)
    ...
