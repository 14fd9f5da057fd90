"""What the prototypes without short radicals share: roots to 70 digits, factors, and the place of the edge."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence

import mpmath
import sympy

from symcirc.responses.exact import GUARD_DIGITS, KEPT_DIGITS, Coefficients, digits, product

#: With so many digits the roots and edges are computed of which 70 are kept.
WORKING_DIGITS = KEPT_DIGITS + 5 * GUARD_DIGITS

#: A monic real factor of a polynomial, ascending powers: two coefficients, or three.
Factor = tuple[mpmath.mpf, ...]


def mended_root(rising: Sequence[mpmath.mpf], start: mpmath.mpc) -> mpmath.mpc:
    """Return the root near ``start`` of a polynomial (ascending powers) by Newton's method, to the precision set.

    >>> with mpmath.workdps(30):
    ...     print(mpmath.nstr(mended_root((-2, 0, 1), mpmath.mpf(1.4)), 20))
    1.4142135623730950488
    """
    falling = rising[::-1]
    slope = [k * rising[k] for k in range(len(rising) - 1, 0, -1)]
    root = step = mpmath.mpmathify(start)
    # Each step squares the error: after one of half the digits, all digits stand.
    while abs(step) > abs(root) * mpmath.mpf(10) ** (-mpmath.mp.dps // 2):
        step = mpmath.polyval(falling, root) / mpmath.polyval(slope, root)
        root -= step
    return root


def real_factors(poles: Iterable[mpmath.mpf | mpmath.mpc]) -> list[Factor]:
    """Return the monic factors of the real poles and, for each one above the real axis, of its pair, by rising Q."""
    one = mpmath.mpf(1)
    first: list[Factor] = []
    pairs: list[Factor] = []
    for pole in poles:
        if isinstance(pole, mpmath.mpf):
            first.append((-pole, one))
        else:
            pairs.append((abs(pole) ** 2, -2 * pole.real, one))
    return [*first, *sorted(pairs, key=lambda pair: mpmath.sqrt(pair[0]) / pair[1])]


def stable_factors(squared: Sequence[mpmath.mpf], starts: Iterable[complex]) -> list[Factor]:
    """Return the factors of the stable D(s) whose |D(jω)|² is a multiple of a polynomial in ω².

    Args:
        squared: its coefficients, ascending powers of ω², positive for every real ω.
        starts: all its roots, roughly.

    The product of the factors is compared with the polynomial.

    >>> with mpmath.workdps(20):  # |D|² = 1 + ω⁴: Butterworth of order 2
    ...     print([mpmath.nstr(c, 6) for c in stable_factors((1, 0, 1), (1j, -1j))[0]])
    ['1.0', '1.41421', '1.0']
    """
    poles = []
    for start in starts:
        if start.imag < -1e-9 * abs(start):
            continue  # the conjugate of one that is kept
        is_real = abs(start.imag) <= 1e-9 * abs(start)
        root = mended_root(squared, mpmath.mpf(start.real) if is_real else mpmath.mpc(start))
        poles.append(-mpmath.sqrt(-root))  # ω² is -s²
    # Of the roots below the real axis of ω² the conjugates were taken: their poles lie above.
    factors = real_factors(p.conjugate() if isinstance(p, mpmath.mpc) and p.imag < 0 else p for p in poles)
    whole = product(factors)
    mirrored = [c * (-1) ** k for k, c in enumerate(whole)]
    found = [c * (-1) ** k * squared[-1] for k, c in enumerate(product([whole, mirrored])[::2])]
    size, tolerance = max(map(abs, squared)), mpmath.mpf(10) ** (10 - mpmath.mp.dps)
    matches = len(found) == len(squared) and all(
        abs(a - b) <= tolerance * size for a, b in zip(found, squared, strict=True)
    )
    assert matches, "the factors of a squared magnitude do not multiply to it"
    return factors


def crossing(loss: Callable[[mpmath.mpf], mpmath.mpf], goal: mpmath.mpf, high: mpmath.mpf) -> mpmath.mpf:
    """Return where a function that rises from 0 to ``high`` has the value ``goal``.

    ``high`` is doubled until the function is above the goal there; then the place is halved in, and at the end
    hit by secants that never leave the bracket.

    >>> with mpmath.workdps(20):
    ...     print(mpmath.nstr(crossing(lambda x: x * x, mpmath.mpf(9), mpmath.mpf(1)), 12))
    3.0
    """
    low, at_low, at_high = mpmath.mpf(0), loss(mpmath.mpf(0)) - goal, loss(high) - goal
    while at_high < 0:
        low, at_low, high = high, at_high, 2 * high
        at_high = loss(high) - goal
    tolerance = high * mpmath.mpf(10) ** (5 - mpmath.mp.dps)
    narrow = high * mpmath.mpf(2) ** -30
    while high - low > tolerance:
        place = (low + high) / 2
        if high - low < narrow and mpmath.isfinite(at_high):
            # A secant, a little beyond the root on the side of the end that is farther: the bracket closes on both.
            secant = low - at_low * (high - low) / (at_high - at_low)
            slack = max(min(secant - low, high - secant) / 2**20, tolerance / 4)
            place = secant + slack if high - secant > secant - low else secant - slack
        at_place = loss(place) - goal
        if at_place < 0:
            low, at_low = place, at_place
        else:
            high, at_high = place, at_place
    return high


def squared_growth(factors: Sequence[Factor], square: mpmath.mpf) -> mpmath.mpf:
    """Return |D(jω)/D(0)|² at ω² = ``square``."""
    result = mpmath.mpf(1)
    for factor in factors:
        if len(factor) == 2:
            result *= 1 + square / factor[0] ** 2
        else:
            result *= ((factor[0] - square) ** 2 + factor[1] ** 2 * square) / factor[0] ** 2
    return result


def edge_frequency(factors: Sequence[Factor], loss_db: sympy.Expr) -> mpmath.mpf:
    """Return the frequency in rad/s at which an all-pole response of growing loss has a loss of ``loss_db``."""
    ratio = working(10 ** (sympy.Rational(1, 10) * loss_db))
    return mpmath.sqrt(crossing(lambda x: squared_growth(factors, x), ratio, mpmath.mpf(1)))


def working(number: sympy.Expr) -> mpmath.mpf:
    """Return an exact number as one of mpmath, with the working digits."""
    return mpmath.mpf(str(digits(number, WORKING_DIGITS)))


def kept(factors: Iterable[Factor]) -> tuple[Coefficients, ...]:
    """Return monic factors as sections of a prototype, rounded to 70 digits."""
    return tuple((*(rounded(c) for c in factor[:-1]), sympy.Integer(1)) for factor in factors)


def kept_polynomial(coefficients: Sequence[mpmath.mpf]) -> Coefficients:
    """Return the coefficients of a monic polynomial, rounded to 70 digits."""
    return (*(rounded(c) for c in coefficients[:-1]), sympy.Integer(1))


def rounded(number: mpmath.mpf) -> sympy.Expr:
    """Return a number of mpmath with the 70 digits that are kept of it."""
    return sympy.Float(number, KEPT_DIGITS)


def scaled_factors(factors: Iterable[Factor], factor: mpmath.mpf) -> list[Factor]:
    """Return monic factors with their roots multiplied by ``factor``."""
    return [tuple(c * factor ** (len(f) - 1 - k) for k, c in enumerate(f)) for f in factors]
