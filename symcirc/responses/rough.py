"""Prototypes in doubles, for a search over families and orders; what is found is then made exactly.

Each family's exact form and this one share only the family's definition, so that they check each other.
"""

from __future__ import annotations

from cmath import exp
from dataclasses import dataclass
from math import asinh, cos, cosh, pi, sin, sinh, sqrt

from symcirc.responses.bessel_polynomial import reverse_bessel


@dataclass(frozen=True)
class Rough:
    """A low-pass prototype in doubles, on a frequency scale of its own.

    ``poles`` are all of them; ``zeros`` are the positive frequencies in rad/s at which nothing passes.
    ``loss_at_zero_db`` is relative to the nominal gain: 0 dB, or the ripple where an even order has it there.
    """

    poles: tuple[complex, ...]
    zeros: tuple[float, ...] = ()
    loss_at_zero_db: float = 0.0


def rough_butterworth(order: int) -> Rough:
    """Return the prototype with half power at 1 rad/s.

    >>> [round(p.imag, 3) for p in rough_butterworth(3).poles]
    [0.866, 0.0, -0.866]
    """
    angles = [pi * (0.5 + (2 * k - 1) / (2 * order)) for k in range(1, order + 1)]
    return Rough(tuple(exp(1j * angle) for angle in angles))


def ellipse_poles(order: int, height: float) -> tuple[complex, ...]:
    """Return the poles on the ellipse with the half axes sinh(height) and cosh(height)."""
    angles = [pi * (2 * k - 1) / (2 * order) for k in range(1, order + 1)]
    return tuple(complex(-sinh(height) * sin(a), cosh(height) * cos(a)) for a in angles)


def rough_chebyshev(order: int, ripple_db: float) -> Rough:
    """Return the prototype with the end of its pass band at 1 rad/s."""
    height = asinh(1 / sqrt(10 ** (ripple_db / 10) - 1)) / order
    return Rough(ellipse_poles(order, height), loss_at_zero_db=0.0 if order % 2 else ripple_db)


def rough_inverse_chebyshev(order: int, stop_db: float) -> Rough:
    """Return the prototype with the beginning of its stop band at 1 rad/s."""
    height = asinh(sqrt(10 ** (stop_db / 10) - 1)) / order
    poles = tuple(1 / p for p in ellipse_poles(order, height))
    return Rough(poles, tuple(1 / cos(pi * (2 * k - 1) / (2 * order)) for k in range(1, order // 2 + 1)))


def rough_bessel(order: int) -> Rough:
    """Return the prototype with a delay of 1 s at zero."""
    import numpy as np

    return Rough(tuple(complex(p) for p in np.roots([float(c) for c in reverse_bessel(order)[::-1]])))


def rough_critical(order: int) -> Rough:
    """Return the prototype with all its poles at -1."""
    return Rough((-1 + 0j,) * order)
