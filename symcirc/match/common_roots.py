"""The common roots of polynomials from the algebra of polynomials modulo them, multiple ones too.

A number t that is a sum of the unknowns takes another value at every root. The traces of its powers, times each
unknown, give the polynomial whose roots these values are, and each unknown as a rational function of t; where roots
are multiple it is the polynomial without its multiple factors. Source, from memory: F. Rouillier, "Solving
zero-dimensional systems through the rational univariate representation" (1999).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal, localcontext
from itertools import count
from typing import Any

from symcirc.match.decimals import reals
from symcirc.match.quotient import WIDE, Algebra, Matrix, Vector, applied
from symcirc.match.roots import positive_roots, real_roots, simple_part, wide


@dataclass(frozen=True)
class CommonRoots:
    """The real roots, each once, as decimals in the order of the unknowns; ``distinct`` counts the complex ones."""

    real: tuple[list[Any], ...]
    distinct: int


def common_roots(found: Algebra, all_positive: bool) -> CommonRoots:
    """Return the roots of the equations that an algebra was made of.

    Where ``all_positive`` is set only roots whose unknowns have a positive sum, each in its scale, are looked for.
    """
    with localcontext(WIDE):
        traces = _traces(found)
        weights = [w / s for w, s in zip(_weights(), _scales(found, traces), strict=False)]
        powers = _powers(found, weights)
        sums = [_dot(traces, power) for power in powers]
        simple = simple_part([_real(c) for c in _characteristic(sums)])
        order = len(simple) - 1
        below = _numerator([_real(s) for s in sums[:order]], simple)
        above = []
        for matrix in found.columns:
            moved = [_real(_dot(traces, applied(matrix, power))) for power in powers[:order]]
            above.append(_numerator(moved, simple))
    find: Callable[[Sequence[Any]], list[Any]] = positive_roots if all_positive else real_roots
    roots = []
    for root in find(simple):
        under = reals.polyval(below[::-1], root)
        roots.append([reals.polyval(over[::-1], root) / under for over in above])
    return CommonRoots(tuple(roots), order)


def _real(value: Decimal) -> Any:
    """Return a decimal in the arithmetic of :mod:`roots`, digits kept."""
    return wide.mpf(str(value))


def _weights() -> Iterator[Decimal]:
    """Yield numbers between 1 and 2 without a simple relation: by the golden ratio."""
    return (1 + Decimal(k) * Decimal("0.6180339887") % 1 for k in count(1))


def _scales(found: Algebra, traces: Vector) -> Vector:
    """Return the size of each unknown: its mean over the roots, or the root of its mean square."""
    one = [Decimal(1), *[Decimal(0)] * (found.dimension - 1)]
    scales = []
    for matrix in found.columns:
        once = applied(matrix, one)
        mean, square = (abs(_dot(traces, v)) / found.dimension for v in (once, applied(matrix, once)))
        scales.append(max(mean, square.sqrt()) or Decimal(1))
    return scales


def _traces(found: Algebra) -> Vector:
    """Return the trace of the multiplication by each basis element."""
    dimension = found.dimension
    columns = [[Decimal(k == j) for k in range(dimension)] for j in range(dimension)]
    known: dict[int, Matrix] = {0: columns}
    while len(known) < dimension:
        before = dict(known)
        for k, multiplication in before.items():
            for matrix in found.columns:
                product = _place(matrix[k])
                if product is not None and product not in known:
                    known[product] = [applied(matrix, column) for column in multiplication]
    return [sum((known[k][j][j] for j in range(dimension)), start=Decimal(0)) for k in range(dimension)]


def _place(column: Vector) -> int | None:
    """Return the place of a basis element that a column is, None where it is none."""
    places = [k for k, entry in enumerate(column) if entry]
    return places[0] if len(places) == 1 and column[places[0]] == 1 else None


def _powers(found: Algebra, weights: Sequence[Decimal]) -> list[Vector]:
    """Return the powers of t from 0 to the number of roots."""
    powers = [[Decimal(1), *[Decimal(0)] * (found.dimension - 1)]]
    for _ in range(found.dimension):
        parts = [applied(matrix, powers[-1]) for matrix in found.columns]
        powers.append([_dot(weights, entries) for entries in zip(*parts, strict=True)])
    return powers


def _dot(one: Sequence[Decimal], other: Sequence[Decimal]) -> Decimal:
    return sum((a * b for a, b in zip(one, other, strict=True) if a and b), start=Decimal(0))


def _characteristic(sums: Vector) -> Vector:
    """Return the monic polynomial, ascending, whose roots have these power sums (Newton's identities).

    >>> [int(c) for c in _characteristic([Decimal(2), Decimal(3), Decimal(5)])]
    [2, -3, 1]
    """
    falling = [Decimal(1)]
    for k in range(1, len(sums)):
        falling.append(-_dot(falling, sums[k:0:-1]) / k)
    return falling[::-1]


def _numerator(sums: Sequence[Any], simple: Sequence[Any]) -> list[Any]:
    """Return the sum over k of ``sums[k]`` times what is left of ``simple`` above its power k + 1, ascending."""
    order = len(simple) - 1
    return [
        wide.fsum(sums[k] * simple[k + power + 1] for k in range(order - power)) for power in range(order)
    ]
