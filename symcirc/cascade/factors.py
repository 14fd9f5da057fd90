"""A target taken apart into pole pairs and zeros, each a real polynomial of first or second degree.

The roots are found to 80 digits and multiplied out again; what does not come back to the target is not used.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import sympy
from mpmath.libmp import NoConvergence

from symcirc.goal import Goal
from symcirc.match.decimals import decimal, exact, reals

#: By how much a product of the factors may depart from the target, relative to each coefficient.
AGREEMENT = reals.mpf(10) ** -45
#: The size below which a part of a root is the rounding of zero, relative to the root.
ROUNDING = reals.mpf(10) ** -40

Row = tuple[Any, ...]


@dataclass(frozen=True)
class Factor:
    """A monic real factor: ``coefficients`` ascending, ``omega`` in rad/s (at 1 for a target's own symbol), ``q``.

    ``q`` is 0.5 for a real root, infinite for a pair on the frequency axis, negative for one on the right.
    """

    coefficients: tuple[sympy.Expr, ...]
    omega: float
    q: float

    @property
    def degree(self) -> int:
        """1 for a real root, 2 for a pair."""
        return len(self.coefficients) - 1


@dataclass(frozen=True)
class Factored:
    """A target as ``leading`` s^``at_zero`` (zeros) / (poles), the poles by rising Q, then by rising frequency."""

    poles: tuple[Factor, ...]
    zeros: tuple[Factor, ...]
    at_zero: int
    leading: sympy.Expr


def factored(goal: Goal) -> Factored | None:
    """Return the factors of a target; None where it is in symbols that do not scale it, or resists.

    A target may hold one symbol, as a frequency that scales all its poles and zeros alike, and any in its gain.

    >>> import sympy
    >>> from symcirc.complaints import Source
    >>> from symcirc.goal import build_goal
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", '''in -- R1 -- out -- C1 -- gnd
    ... ask H = V_out/V_in
    ... target H: lowpass butterworth, order 4, edge 1 kHz'''))
    >>> [round(pole.q, 4) for pole in factored(build_goal(sheet, sheet.targets[0])).poles]
    [0.5412, 1.3066]
    """
    unit = _unit(goal)
    if unit is None:
        return None
    held = next((k for k, c in enumerate(goal.numerator) if c != 0), 0)
    degree = max(k for k, c in enumerate(goal.numerator) if c != 0)
    leading = goal.numerator[degree]
    poles = _factors(goal.denominator, unit)
    zeros = _factors([sympy.cancel(c / leading) for c in goal.numerator[held : degree + 1]], unit)
    if poles is None or zeros is None or any(pole.omega == 0 for pole in poles):
        return None
    return Factored(tuple(sorted(poles, key=lambda p: (p.q, p.omega))), tuple(zeros), held, leading)


def _unit(goal: Goal) -> sympy.Expr | None:
    """Return the symbol that scales the frequency of a target, 1 where it has only numbers; None for others."""
    symbols = {x for c in goal.denominator for x in c.free_symbols}
    if len(symbols) > 1:
        return None
    return next(iter(symbols), sympy.S.One)


def _factors(coefficients: Sequence[sympy.Expr], unit: sympy.Expr) -> list[Factor] | None:
    degree = len(coefficients) - 1
    plain = [sympy.cancel(c / unit ** (degree - k)) for k, c in enumerate(coefficients)]
    if any(c.free_symbols for c in plain):
        return None
    row = tuple(decimal(c) for c in plain)
    base, power = _power_root(row)
    found = _pairs(base)
    if found is None:
        return None
    factors = [_factor(pair, unit) for pair in found for _ in range(power)]
    product: Row = (reals.mpf(1),)
    for pair in found * power:
        product = _times(product, pair)
    close = all(
        abs(p - c) <= AGREEMENT * max(abs(c), _size(row, k))
        for k, (p, c) in enumerate(zip(product, row, strict=True))
    )
    return factors if close else None


def _size(row: Row, power: int) -> Any:
    """Return the size that a coefficient of this power has where all roots are as large as their mean."""
    degree = len(row) - 1
    return abs(row[0]) ** (reals.mpf(degree - power) / degree) if degree else reals.mpf(1)


def _power_root(row: Row) -> tuple[Row, int]:
    """Return the polynomial of which this one is the highest power, and that power.

    Coincident roots, as of a critically damped target, cannot be found to many digits one by one.
    """
    degree = len(row) - 1
    for power in range(degree, 1, -1):
        if degree % power:
            continue
        base = _root_series(row, power)
        product: Row = (reals.mpf(1),)
        for _ in range(power):
            product = _times(product, base)
        if all(
            abs(p - c) <= AGREEMENT * _size(row, k) for k, (p, c) in enumerate(zip(product, row, strict=True))
        ):
            return base, power
    return row, 1


def _root_series(row: Row, power: int) -> Row:
    """Return the first terms, from the highest down, of the power series of a monic polynomial's root."""
    falling = row[::-1]
    terms = [reals.mpf(1)]
    for n in range(1, (len(row) - 1) // power + 1):
        # from Q' P = (1/power) P' Q for Q = P^(1/power)
        total = sum((reals.mpf(k) / power - (n - k)) * falling[k] * terms[n - k] for k in range(1, n + 1))
        terms.append(total / n)
    return tuple(terms[::-1])


def _pairs(row: Row) -> list[Row] | None:
    """Return the real factors of first and second degree of a monic polynomial."""
    if len(row) == 1:
        return []
    if len(row) == 2:
        return [row]
    scale = abs(row[0]) ** (reals.mpf(1) / (len(row) - 1)) or reals.mpf(1)
    scaled = [c * scale**k for k, c in enumerate(row)]
    try:
        roots = reals.polyroots(scaled[::-1], maxsteps=400, extraprec=400)
    except NoConvergence:
        return None
    found: list[Row] = []
    one = reals.mpf(1)
    for root in roots:
        real, imaginary = scale * reals.re(root), scale * reals.im(root)
        if abs(imaginary) <= ROUNDING * scale:
            found.append((-real, one))
        elif imaginary > 0:
            real = reals.mpf(0) if abs(real) <= ROUNDING * scale else real
            found.append((real**2 + imaginary**2, -2 * real, one))
    return found if sum(len(pair) - 1 for pair in found) == len(row) - 1 else None


def _times(one: Row, other: Row) -> Row:
    result = [reals.mpf(0)] * (len(one) + len(other) - 1)
    for i, a in enumerate(one):
        for j, b in enumerate(other):
            result[i + j] += a * b
    return tuple(result)


def _factor(row: Row, unit: sympy.Expr) -> Factor:
    degree = len(row) - 1
    coefficients = tuple(exact(c) * unit ** (degree - k) for k, c in enumerate(row))
    if degree == 1:
        return Factor(coefficients, float(abs(row[0])), 0.5)
    omega = reals.sqrt(row[0])
    return Factor(coefficients, float(omega), float(omega / row[1]) if row[1] else float("inf"))
