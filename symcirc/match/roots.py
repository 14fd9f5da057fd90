"""Real roots of polynomials with real coefficients in decimals: how many there are, and where.

They are counted with Sturm's sequence (C. Sturm, "Mémoire sur la résolution des équations numériques", 1829, from
memory), in arithmetic of 250 digits on the coefficients as they are given, to 60 digits and more, so that rounding
is far below what decides. A remainder whose coefficients are all below 1e-50 of those it came from counts as zero:
the sequence then ends in the factor of the roots that are multiple, and each of these counts once.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise
from typing import Any

from mpmath import MPContext

from symcirc.match.decimals import reals

#: The arithmetic of Sturm's sequence.
wide: Any = MPContext()
wide.dps = 250
#: What counts as zero beside 1; for complex polynomials at a random point less is asked.
_ZERO, _ALIKE = reals.mpf(10) ** -50, reals.mpf(10) ** -40

Polynomial = list[Any]  # ascending powers, the last one not zero


def positive_roots(coefficients: Sequence[Any]) -> list[Any]:
    """Return the positive roots of a polynomial, rising, multiple ones once.

    Args:
        coefficients: decimals, ascending powers.

    >>> [reals.nstr(root, 70) for root in positive_roots([reals.mpf(c) for c in (-6, 11, -6, 1)])]
    ['1.0', '2.0', '3.0']
    >>> positive_roots([reals.mpf(c) for c in (1, -2, 1)])
    [mpf('1.0')]
    """
    kept = list(coefficients)
    while kept and not kept[-1]:
        kept.pop()
    while kept and not kept[0]:
        kept.pop(0)
    if len(kept) < 2:
        return []
    size, scaled = _scaled(kept)
    simple, sequence = _simple(scaled)
    decimals = [reals.mpf(c) for c in simple]
    return [size * _refined(decimals, reals.mpf(low), reals.mpf(high)) for low, high in _isolated(sequence)]


def simple_part(coefficients: Sequence[Any]) -> list[Any]:
    """Return a polynomial with the same roots, real or complex, each once, to 250 digits.

    Args:
        coefficients: ascending powers; neither the first nor the last is zero.

    >>> found = simple_part([wide.mpf(c) for c in (-2, 3, 0, -1)])  # -(x - 1)^2 (x + 2)
    >>> [round(c / found[-1]) for c in found]
    [-2, 1, 1]
    """
    size, scaled = _scaled(coefficients)
    simple, _ = _simple(scaled)
    return [c / wide.mpf(size) ** k for k, c in enumerate(simple)]


def _scaled(coefficients: Sequence[Any]) -> tuple[Any, Polynomial]:
    """Return the size of the roots (the geometric mean), and the polynomial of the roots over it."""
    size = reals.root(abs(reals.mpf(coefficients[0]) / reals.mpf(coefficients[-1])), len(coefficients) - 1)
    return size, _normal([wide.mpf(c) * wide.mpf(size) ** k for k, c in enumerate(coefficients)])


def _simple(polynomial: Polynomial) -> tuple[Polynomial, list[Polynomial]]:
    """Return a polynomial without multiple roots, and its sequence."""
    sequence = sturm_sequence(polynomial)
    if len(sequence[-1]) == 1:
        return polynomial, sequence
    simple = _normal(_long_division(polynomial, sequence[-1])[0])
    return simple, sturm_sequence(simple)


def real_roots(coefficients: Sequence[Any]) -> list[Any]:
    """Return all real roots of a polynomial, rising, multiple ones once.

    >>> [reals.nstr(root, 70) for root in real_roots([reals.mpf(c) for c in (0, -1, 0, 1)])]
    ['-1.0', '0.0', '1.0']
    """
    mirrored = [c * (-1) ** k for k, c in enumerate(coefficients)]
    zero = [] if coefficients[0] else [reals.mpf(0)]
    return [-r for r in reversed(positive_roots(mirrored))] + zero + positive_roots(coefficients)


def sturm_sequence(polynomial: Polynomial) -> list[Polynomial]:
    """Return Sturm's sequence of a polynomial whose largest coefficient is of size 1.

    >>> [[int(c) for c in p] for p in sturm_sequence([reals.mpf(c) for c in (1, 0, -1)])]
    [[1, 0, -1], [0, -1], [-1]]
    """
    sequence = [polynomial, _normal([k * c for k, c in enumerate(polynomial)][1:])]
    while len(sequence[-1]) > 1:
        rest = _long_division(sequence[-2], sequence[-1])[1]
        while rest and abs(rest[-1]) <= _ZERO:
            rest.pop()
        if not rest:
            break
        sequence.append(_normal([-c for c in rest]))
    return sequence


def _normal(polynomial: Polynomial) -> Polynomial:
    """Divide by the size of the largest coefficient."""
    largest = max(map(abs, polynomial))
    return [c / largest for c in polynomial]


def _value(polynomial: Polynomial, x: Any) -> Any:
    total = wide.mpf(0)
    for c in reversed(polynomial):
        total = total * x + c
    return total


def _changes(sequence: list[Polynomial], x: Any) -> int:
    """Return the number of changes of sign along the sequence at ``x``."""
    signs = [v > 0 for v in (_value(p, x) for p in sequence) if v]
    return sum(a != b for a, b in pairwise(signs))


def _isolated(sequence: list[Polynomial]) -> list[tuple[Any, Any]]:
    """Return, for each positive root, an interval open below that holds it alone."""
    bound = 1 + max(map(abs, sequence[0][:-1])) / abs(sequence[0][-1])  # Cauchy's bound
    zero = wide.mpf(0)
    waiting = [(zero, _changes(sequence, zero), bound, _changes(sequence, bound))]
    intervals = []
    while waiting:
        low, at_low, high, at_high = waiting.pop()
        if at_low - at_high == 1 or (at_low > at_high and high - low <= _ZERO * high):
            intervals.append((low, high))
        elif at_low > at_high:
            middle = (low + high) / 2
            at_middle = _changes(sequence, middle)
            waiting += [(middle, at_middle, high, at_high), (low, at_low, middle, at_middle)]
    return intervals


def _refined(coefficients: list[Any], below: Any, above: Any) -> Any:
    """Return the root in an interval that holds one, to the working precision, by halving it."""
    falling = coefficients[::-1]
    side = reals.sign(reals.polyval(falling, above))
    if not side:
        return above
    for _ in range(reals.prec + 8):
        middle = (below + above) / 2
        sign = reals.sign(reals.polyval(falling, middle))
        if not sign:
            return middle
        if sign == side:
            above = middle
        else:
            below = middle
    return (below + above) / 2


def complex_roots(coefficients: Sequence[Any]) -> list[Any]:
    """Return the roots, each once, of a polynomial with complex coefficients, ascending powers, the last not zero.

    >>> [reals.nstr(root, 5) for root in complex_roots([reals.mpf(4), reals.mpf(0), reals.mpf(1)])]
    ['(0.0 - 2.0j)', '(0.0 + 2.0j)']
    """
    degree = len(coefficients) - 1
    if degree == 1:
        return [-coefficients[0] / coefficients[1]]
    if not coefficients[0]:
        return [reals.mpf(0), *complex_roots(coefficients[1:])]
    size = reals.root(abs(coefficients[0] / coefficients[-1]), degree)
    scaled = [c * size**k for k, c in enumerate(coefficients)]
    simple = _without_multiples([c / max(map(abs, scaled)) for c in scaled])
    return [size * root for root in reals.polyroots(simple[::-1], maxsteps=200, extraprec=200)]


def _without_multiples(coefficients: list[Any]) -> list[Any]:
    """Return a polynomial, its largest coefficient of size 1, with each root once (by Euclid's algorithm)."""
    one, other = coefficients, [k * c for k, c in enumerate(coefficients)][1:]
    while len(other) > 1:
        rest = _long_division(one, other)[1]
        size = max(map(abs, other))
        while rest and abs(rest[-1]) <= _ALIKE * size:
            rest.pop()
        if not rest:
            return _long_division(coefficients, other)[0]
        one, other = other, [c / max(map(abs, rest)) for c in rest]
    return coefficients


def _long_division(one: list[Any], other: list[Any]) -> tuple[list[Any], list[Any]]:
    """Return quotient and remainder; the remainder's leading coefficients may be zero."""
    rest, quotient = list(one), []
    for shift in range(len(one) - len(other), -1, -1):
        factor = rest[-1] / other[-1]
        quotient.append(factor)
        for k, c in enumerate(other):
            rest[k + shift] -= factor * c
        rest.pop()
    return quotient[::-1], rest
