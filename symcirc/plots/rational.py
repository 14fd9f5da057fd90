"""A ratio of polynomials in s with numbers for coefficients: its values, roots, phase and group delay.

Coefficients are kept in units of a frequency among the poles, so that those of a stage of order 20 neither overflow
nor vanish. The group delay is that of the polynomials, -d(arg H)/dω = Re(D'(s)/D(s) - N'(s)/N(s)) at s = jω, nothing
is differentiated on a grid.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
import sympy
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Complexes = NDArray[np.complex128]

#: A term that at every frequency is smaller than this part of another is what rounding has left of nothing.
_ROUNDING = 1e-12
#: A root is taken to lie on the frequency axis where its real part is smaller than this part of its size.
_ON_AXIS = 1e-9


@dataclass(frozen=True)
class Rational:
    """Numerator over monic denominator, ascending powers of s/frequency; ``frequency`` in rad/s."""

    numerator: tuple[float, ...]
    denominator: tuple[float, ...]
    frequency: float

    def at(self, omega: Floats) -> Complexes:
        """Return the values at frequencies in rad/s."""
        s = np.asarray(1j * omega / self.frequency, np.complex128)
        with np.errstate(all="ignore"):
            return np.asarray(_value(self.numerator, s) / _value(self.denominator, s), np.complex128)

    @property
    def poles(self) -> Complexes:
        """The poles in rad/s, by size."""
        return self.frequency * _roots(self.denominator)

    @property
    def zeros(self) -> Complexes:
        """The finite zeros in rad/s, by size."""
        return self.frequency * _roots(self.numerator)

    @property
    def is_proper(self) -> bool:
        """Whether it stays finite at infinite frequency."""
        return len(self.numerator) <= len(self.denominator)


def rational(numerator: Sequence[Any], denominator: Sequence[Any]) -> Rational:
    """Return a ratio of polynomials in s.

    Args:
        numerator, denominator: coefficients of ascending powers of s in rad/s: floats, fractions, numbers of sympy
            or of mpmath. The last of the denominator is not zero.

    >>> rational([1.0], [1.0, 2e-3, 1e-6])
    Rational(numerator=(1.0,), denominator=(1.0, 2.0, 1.0), frequency=1000.0)
    """
    with mpmath.workdps(40):
        over, under = ([_number(c) for c in side] for side in (numerator, denominator))
        while len(over) > 1 and not over[-1]:
            over.pop()
        frequency = _mean_size(under) or _mean_size(over) or mpmath.mpf(1)
        leading = under[-1] * frequency ** (len(under) - 1)
        above, below = ([float(c * frequency**k / leading) for k, c in enumerate(s)] for s in (over, under))
        return Rational(_rounded(above), _rounded(below), float(frequency))


def _number(value: Any) -> Any:
    if isinstance(value, Fraction):
        return mpmath.mpf(value.numerator) / value.denominator
    return mpmath.mpf(sympy.N(value, 40)) if isinstance(value, sympy.Basic) else mpmath.mpf(value)


def _mean_size(coefficients: list[Any]) -> Any:
    """Return the geometric mean of the roots' sizes, those at zero left out; 0 where there is none."""
    least = next((k for k, c in enumerate(coefficients) if c), 0)
    count = len(coefficients) - 1 - least
    return abs(coefficients[least] / coefficients[-1]) ** (mpmath.mpf(1) / count) if count else mpmath.mpf(0)


def _rounded(coefficients: list[float]) -> tuple[float, ...]:
    """Return coefficients with zero for what rounding has left of nothing.

    A notch whose parts are exact has the numerator s² + ω0²; a middle term of 1e-17 would set its zeros beside the
    frequency axis and put a spike into the delay.
    """
    sizes = [abs(c) for c in coefficients]
    return tuple(c if sizes[k] > _ROUNDING * _between(sizes, k) else 0.0 for k, c in enumerate(coefficients))


def _between(sizes: list[float], k: int) -> float:
    """Return the most that terms on both sides leave of a term's share at the frequency where it counts most."""
    pairs = ((i, j) for i in range(k) for j in range(k + 1, len(sizes)))
    return max(
        (sizes[i] ** ((j - k) / (j - i)) * sizes[j] ** ((k - i) / (j - i)) for i, j in pairs), default=0.0
    )


def _value(coefficients: Sequence[float], s: Complexes) -> Complexes:
    return np.asarray(np.polynomial.polynomial.polyval(s, np.asarray(coefficients)), complex)


def _roots(coefficients: Sequence[float]) -> Complexes:
    """Return the roots by size; those that are on the frequency axis but for rounding exactly there."""
    least = next((k for k, c in enumerate(coefficients) if c), len(coefficients) - 1)
    found = np.asarray(np.polynomial.polynomial.polyroots(coefficients[least:]), complex)
    on_axis = np.abs(found.real) <= _ON_AXIS * np.abs(found)
    found = np.where(on_axis, 1j * found.imag, found)
    order = np.lexsort((found.imag, np.round(np.abs(found), 9)))
    return np.concatenate([np.zeros(least, complex), found[order]])


def decibels(ratio: Rational, omega: Floats) -> Floats:
    """Return the gain in dB."""
    with np.errstate(divide="ignore"):
        return np.asarray(20 * np.log10(np.abs(ratio.at(omega))))


def continuous_phase(ratio: Rational, omega: Floats) -> Floats:
    """Return the phase in degrees without jumps of whole turns, but for a free multiple of 360.

    The polynomials give the angle, the roots the whole turns. Over a zero on the frequency axis the phase rises by
    180 degrees, as it does when that zero lies a little to the left.

    >>> double_integrator = rational([1.0], [0.0, 0.0, 1.0, 1.0])
    >>> continuous_phase(double_integrator, np.array([1e-3, 1e3])).round(1)
    array([-180.1, -269.9])
    """
    angle = np.angle(ratio.at(omega))
    roots = [(z, 1) for z in ratio.zeros] + [(p, -1) for p in ratio.poles]
    turned = np.zeros_like(omega)
    for root, sense in roots:
        turned += sense * _direction(root, omega)
    if ratio.numerator[-1] < 0:
        turned += np.pi
    with np.errstate(invalid="ignore"):
        whole = np.round((turned - angle) / (2 * np.pi))
    return np.asarray(np.degrees(angle + 2 * np.pi * whole))


def _direction(root: complex, omega: Floats) -> Floats:
    """Return the angle of jω - root, which is continuous in ω."""
    if root.real > 0:
        return np.asarray(np.pi - np.arctan2(omega - root.imag, root.real))
    return np.asarray(np.arctan2(omega - root.imag, -root.real))


def group_delay(ratio: Rational, omega: Floats) -> Floats:
    """Return the group delay in seconds; not a number at a zero or a pole on the frequency axis.

    >>> first_order = rational([1.0], [1.0, 1e-3])
    >>> group_delay(first_order, np.array([0.0, 1000.0])).round(9)
    array([0.001 , 0.0005])
    """
    s = np.asarray(1j * omega / ratio.frequency, np.complex128)
    with np.errstate(all="ignore"):
        slopes = [_value(_derivative(p), s) / _value(p, s) for p in (ratio.denominator, ratio.numerator)]
        return np.asarray((slopes[0] - slopes[1]).real / ratio.frequency)


def _derivative(coefficients: Sequence[float]) -> list[float]:
    return [k * c for k, c in enumerate(coefficients)][1:] or [0.0]
