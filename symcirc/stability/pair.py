"""What the shifts of a pair of poles come to in omega0 and Q."""

from __future__ import annotations

import math
from dataclasses import dataclass

from symcirc.stability.poles import PoleShift

#: A pair whose 1/Q is smaller than this is taken for undamped.
UNDAMPED = 1e-12


@dataclass(frozen=True)
class PairChange:
    """Relative changes of omega0 and Q; that of Q is None where Q is infinite."""

    omega0: float
    q: float | None


@dataclass(frozen=True)
class PairShift:
    """A pair of poles: omega0 in rad/s, Q (None: infinite), and their changes to first order and in truth.

    ``first_order`` is None for a double pole, ``exact`` where the poles of the real stage have no omega0.
    """

    omega0: float
    q: float | None
    first_order: PairChange | None
    exact: PairChange | None


def pair_shift(one: PoleShift, other: PoleShift) -> PairShift | None:
    """Return what the shifts of two poles do to their omega0 and Q, or None where the ideal pair has no omega0.

    omega0^2 is the product of the poles and omega0/Q minus their sum.

    >>> pair = pair_shift(PoleShift(-1 + 1j, -0.1j, -0.1j), PoleShift(-1 - 1j, 0.1j, 0.1j))
    >>> round(pair.q, 4), round(pair.first_order.omega0, 4), round(pair.exact.omega0, 4)
    (0.7071, -0.05, -0.0487)
    """
    square, damping = (one.ideal * other.ideal).real, -(one.ideal + other.ideal).real
    if square <= 0:
        return None
    omega0 = math.sqrt(square)
    damped = abs(damping) > UNDAMPED * omega0

    def of_damping(move: complex, other_move: complex) -> float | None:
        return -(move + other_move).real / damping if damped else None

    first = exact = None
    if one.first_order is not None and other.first_order is not None:
        product = one.first_order * other.ideal + other.first_order * one.ideal
        first = _first(product.real / square, of_damping(one.first_order, other.first_order))
    product = one.exact * other.ideal + other.exact * one.ideal + one.exact * other.exact
    if product.real > -square:
        exact = _exact(product.real / square, of_damping(one.exact, other.exact))
    return PairShift(omega0, omega0 / damping if damped else None, first, exact)


def _first(of_square: float, of_damping: float | None) -> PairChange:
    return PairChange(of_square / 2, None if of_damping is None else of_square / 2 - of_damping)


def _exact(of_square: float, of_damping: float | None) -> PairChange:
    """Return the changes without loss of digits where they are small."""
    of_omega0 = of_square / (1 + math.sqrt(1 + of_square))
    if of_damping is None or of_damping == -1:
        return PairChange(of_omega0, None)
    return PairChange(of_omega0, (of_omega0 - of_damping) / (1 + of_damping))
