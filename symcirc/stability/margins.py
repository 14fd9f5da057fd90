"""Unity-gain frequencies, phase margins and gain margins of a loop gain, from roots of polynomials, not from a grid.

T is a ratio of polynomials with rational coefficients, positive for negative feedback. |T(jw)| = 1 is
N(jw) N(-jw) = D(jw) D(-jw), a polynomial equation in x = w^2; T(jw) is real where the odd part of N(jw) D(-jw) is
zero, w times a polynomial in x. Their real roots are isolated exactly (Vincent, Akritas and Strzebonski's continued
fractions, as sympy has them) and narrowed to 30 digits. Margins after H. W. Bode, "Network Analysis and Feedback
Amplifier Design" (1945), stability after E. J. Routh (1877), both from memory.
"""

from __future__ import annotations

import math
from bisect import bisect_left
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise, zip_longest

import mpmath
import sympy
from sympy.polys.domains import QQ

from symcirc.stability.numbers import values_in
from symcirc.transfer.function import TransferFunction

#: The square of a frequency.
X = sympy.Dummy("x")
#: Digits of the arithmetic in which T is evaluated at a crossing, and to which a crossing is narrowed.
DIGITS, NARROWED = 50, 30

Polynomial = Sequence[Fraction]


@dataclass(frozen=True)
class UnityCrossing:
    """A frequency at which |T| = 1.

    ``omega`` is in rad/s; ``phase_deg`` is the phase of T, followed from 0 rad/s without a jump; ``margin_deg`` is
    180 degrees more, taken into -180 to 180: how far T is from -1. On a stable loop a positive margin is what may
    be lost, a negative one what may be gained (several crossings).
    """

    omega: float
    phase_deg: float
    margin_deg: float


@dataclass(frozen=True)
class PhaseCrossing:
    """A frequency in rad/s at which T is real and negative; ``margin`` is 1/|T|, by which the gain may change."""

    omega: float
    margin: float

    @property
    def margin_db(self) -> float:
        """The margin in dB: positive where the gain may rise, negative where it may fall."""
        return 20 * math.log10(self.margin)


@dataclass(frozen=True)
class Margins:
    """All crossings by ascending frequency, and whether the closed loop is stable.

    Stable: all zeros of 1 + T lie to the left, and 1 + T is positive at infinity, without which the least delay in
    the loop makes it unstable. A crossing at 0 rad/s is one of phase: T(0) < 0.
    """

    unity: tuple[UnityCrossing, ...]
    phase: tuple[PhaseCrossing, ...]
    stable: bool

    @property
    def phase_margin(self) -> UnityCrossing | None:
        """The crossing where T is nearest -1 in angle; None where |T| is 1 nowhere."""
        return min(self.unity, key=lambda crossing: abs(crossing.margin_deg), default=None)

    @property
    def gain_margin(self) -> PhaseCrossing | None:
        """The crossing where T is nearest -1 in size; None where T is real and negative nowhere."""
        return min(self.phase, key=lambda crossing: abs(math.log(crossing.margin)), default=None)


def margins(numerator: Sequence[Fraction | int], denominator: Sequence[Fraction | int]) -> Margins:
    """Return the margins of the loop gain T = numerator / denominator.

    Args:
        numerator, denominator: coefficients by ascending power of s, exact; a ``Fraction`` made from a float is
            exact for what the float is. Zeros at the end are left out.

    Raises:
        ValueError: T is zero, or its denominator is.

    T = 100/(s (1 + s/100)): |T| = 1 at w^4 + 1e4 w^2 - 1e8 = 0.

    >>> found = margins([100], [0, 1, Fraction(1, 100)])
    >>> round(found.phase_margin.omega, 4), round(found.phase_margin.margin_deg, 3), found.gain_margin
    (78.6151, 51.827, None)
    """
    above, below = _trimmed(numerator), _trimmed(denominator)
    if not above or not below:
        raise ValueError("a loop gain needs a numerator and a denominator that are not zero")
    loop = _Loop(above, below)
    return Margins(loop.unity(), loop.phase(), _is_stable(above, below))


def margins_of(function: TransferFunction, numbers: Mapping[str, sympy.Expr]) -> Margins:
    """Return the margins of a derived loop gain for a sheet's numbers.

    Raises:
        KeyError: a symbol of the function has no number.
        ValueError: the loop gain is zero.
    """
    return margins(values_in(function.numerator, numbers), values_in(function.denominator, numbers))


def _trimmed(coefficients: Sequence[Fraction | int]) -> list[Fraction]:
    exact = [Fraction(c) for c in coefficients]
    while exact and not exact[-1]:
        exact.pop()
    return exact


class _Loop:
    """T on the imaginary axis: N(jw) D(-jw) = real(x) + j w odd(x), with x = w^2."""

    def __init__(self, above: Polynomial, below: Polynomial) -> None:
        self.above, self.below = above, below
        (p, q), (u, v) = _parts(above), _parts(below)
        self.size = _sum(
            _sum(_product(p, p), _shifted(_product(q, q))),
            _negative(_sum(_product(u, u), _shifted(_product(v, v)))),
        )
        self.real = _sum(_product(p, u), _shifted(_product(q, v)))
        self.odd = _sum(_product(q, u), _negative(_product(p, v)))
        self.turns = sorted({*_positive_roots(self.real), *_positive_roots(self.odd)})
        self.followed = self.follow()

    def unity(self) -> tuple[UnityCrossing, ...]:
        return tuple(self.crossing(x) for x in _positive_roots(self.size))

    def crossing(self, x: Fraction) -> UnityCrossing:
        here = self.phase_at(x)
        phase = _near(here, self.followed[bisect_left(self.turns, x)])
        return UnityCrossing(_root(x), phase, here + 180 if here <= 0 else here - 180)

    def phase(self) -> tuple[PhaseCrossing, ...]:
        found = []
        if self.below[0] and self.above[0] / self.below[0] < 0:
            found.append(PhaseCrossing(0.0, float(-self.below[0] / self.above[0])))
        for x in _positive_roots(_without_common(self.odd, self.real)):
            value = self.value_at(x)
            if value.real < 0:
                found.append(PhaseCrossing(_root(x), float(1 / abs(value))))
        return tuple(found)

    def value_at(self, x: Fraction) -> mpmath.mpc:
        with mpmath.workdps(DIGITS):
            s = mpmath.mpc(0, mpmath.sqrt(mpmath.mpf(x.numerator) / x.denominator))
            return _value(self.above, s) / _value(self.below, s)

    def phase_at(self, x: Fraction) -> float:
        """Return the phase in degrees, above -180 and up to 180."""
        return round(float(mpmath.degrees(mpmath.arg(self.value_at(x)))), 12) + 0.0

    def follow(self) -> list[float]:
        """Return the phase, without jumps, at one place in each quadrant that T goes through.

        T changes the quadrant at the roots of its real and odd part only, so that from one place to the next the
        phase moves by less than 180 degrees; where T passes through 0 or infinity it jumps by 180 either way.
        """
        ends = [Fraction(0), *self.turns]
        places = [(a + b) / 2 for a, b in pairwise(ends)] + [2 * ends[-1] + 1]
        zeros, poles = (next(k for k, c in enumerate(p) if c) for p in (self.above, self.below))
        phase = 90.0 * (zeros - poles) - (0 if self.above[zeros] / self.below[poles] > 0 else 180)
        followed = []
        for x in places:
            phase = _near(self.phase_at(x), phase)
            followed.append(phase)
        return followed


def _near(angle: float, other: float) -> float:
    """Return an angle in degrees plus the whole turns that bring it nearest to another."""
    return angle + 360 * round((other - angle) / 360)


def _value(polynomial: Polynomial, s: mpmath.mpc) -> mpmath.mpc:
    return mpmath.polyval([mpmath.mpf(c.numerator) / c.denominator for c in reversed(polynomial)], s)


def _root(x: Fraction) -> float:
    with mpmath.workdps(NARROWED):
        return float(mpmath.sqrt(mpmath.mpf(x.numerator) / x.denominator))


# polynomials -----------------------------------------------------------------------------------------------------


def _parts(polynomial: Polynomial) -> tuple[list[Fraction], list[Fraction]]:
    """Return P and Q of P(x) + jw Q(x), the polynomial at s = jw with x = w^2."""
    signed = [c * (-1) ** (k // 2) for k, c in enumerate(polynomial)]
    return signed[0::2], signed[1::2]


def _sum(a: Polynomial, b: Polynomial) -> list[Fraction]:
    return [x + y for x, y in zip_longest(a, b, fillvalue=Fraction(0))]


def _negative(a: Polynomial) -> list[Fraction]:
    return [-c for c in a]


def _shifted(a: Polynomial) -> list[Fraction]:
    """Return x times a polynomial."""
    return [Fraction(0), *a]


def _product(a: Polynomial, b: Polynomial) -> list[Fraction]:
    product = [Fraction(0)] * (len(a) + len(b))
    for i, x in enumerate(a):
        for j, y in enumerate(b):
            product[i + j] += x * y
    return product


def _exact(polynomial: Polynomial) -> sympy.Poly:
    terms = [QQ(c.numerator, c.denominator) for c in reversed(polynomial)]
    return sympy.Poly.from_list(terms or [QQ(0)], gens=X, domain=QQ)


def _without_common(polynomial: Polynomial, other: Polynomial) -> list[Fraction]:
    """Return a polynomial without the roots that it has in common with another, whatever their multiplicity."""
    left, right = _exact(polynomial), _exact(other)
    while not left.is_zero and (common := left.gcd(right)).degree() > 0:
        left = left.exquo(common)
    return [Fraction(int(c.p), int(c.q)) for c in reversed(left.all_coeffs())]


def _positive_roots(polynomial: Polynomial) -> list[Fraction]:
    """Return the positive roots, ascending, each once and to 30 digits; none for zero."""
    lowest = next((k for k, c in enumerate(polynomial) if c), None)
    if lowest is None:
        return []
    exact = _exact(polynomial[lowest:]).sqf_part()
    return [_narrowed(exact, *ends) for ends, _ in exact.intervals(inf=0)]


def _narrowed(polynomial: sympy.Poly, low: sympy.Rational, high: sympy.Rational) -> Fraction:
    """Return the only root between two ends."""
    while not low:
        low, high = polynomial.refine_root(low, high, steps=1)
    low, high = polynomial.refine_root(low, high, eps=low / 10**NARROWED)
    middle = (low + high) / 2
    return Fraction(int(middle.p), int(middle.q))


def _is_stable(above: Polynomial, below: Polynomial) -> bool:
    closed = _trimmed(_sum(above, below))
    if len(above) <= len(below) and (len(closed) < len(below) or closed[-1] * below[-1] < 0):
        return False
    return _hurwitz(closed)


def _hurwitz(polynomial: Polynomial) -> bool:
    """Tell whether all roots lie in the open left half-plane: Routh's first column is of one sign, without zeros."""
    descending = polynomial[::-1]
    upper, lower = descending[0::2], descending[1::2]
    while lower:
        if upper[0] * lower[0] <= 0:
            return False
        factor = upper[0] / lower[0]
        following = [u - factor * v for u, v in zip_longest(upper[1:], lower[1:], fillvalue=Fraction(0))]
        upper, lower = lower, following
    return bool(upper)
