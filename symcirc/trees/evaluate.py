"""The two polynomials for numbers: at one s in any arithmetic, or in powers of s exactly."""

from __future__ import annotations

from collections import deque
from collections.abc import Iterable, Iterator, Mapping, Sequence
from fractions import Fraction
from functools import reduce
from math import prod
from operator import add
from typing import Any

from symcirc.trees.count import count
from symcirc.trees.diagram import Diagram, Level
from symcirc.trees.laws import Weight

#: An int, Fraction, float or complex: what can be added, multiplied and negated.
Number = Any
_SMALL = 1e-100


def evaluate(diagram: Diagram, values: Mapping[str, Number], s: Number) -> tuple[Number, Number]:
    """Return both polynomials at one s.

    Args:
        diagram: as it was walked, or collected.
        values: a number for every symbol, in SI base units: int, Fraction, float or complex.
        s: complex frequency in rad/s.

    Returns:
        Over and under; their ratio is the transfer function at s. Exact where the numbers are.

    Raises:
        KeyError: a symbol has no value.

    >>> level = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1,), (-1,)))
    >>> evaluate(Diagram((level,), (1, 0), (1,), ()), {"R1": Fraction(1, 3)}, 1)
    (Fraction(2, 3), 0)
    """
    return at_roots(diagram, _last(upwards(diagram, weights(diagram, values, s))))


def response(diagram: Diagram, values: Mapping[str, float], s: complex) -> complex:
    """Return the ratio of both polynomials at one s in floating point, whatever the size of the circuit.

    Every level is scaled as a whole, so that neither polynomial can overflow or vanish.

    Raises:
        KeyError: a symbol has no value.
        ZeroDivisionError: the denominator is zero.

    >>> level = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1, 0), (1, 1)))
    >>> response(Diagram((level,), (2, 1), (1,), ()), {"R1": 3.0}, 1j)
    (0.75+0j)
    """
    found: list[complex] = list(diagram.ends)
    for level, here in zip(reversed(diagram.levels), reversed(weights(diagram, values, s)), strict=True):
        found = _above(level, here, found)
        largest = max(map(abs, found))
        if not _SMALL < largest < 1 / _SMALL:
            found = [value / largest for value in found]
    over, under = at_roots(diagram, found)
    return complex(over / under)


def polynomials(
    diagram: Diagram, values: Mapping[str, Fraction | int | float]
) -> tuple[list[Fraction], list[Fraction]]:
    """Return both polynomials in s exactly.

    Args:
        diagram: as it was walked, or collected.
        values: a number for every symbol, in SI base units; a float counts as the binary fraction that it is.

    Returns:
        The coefficients of over and under by ascending power of s; [] for zero.

    Raises:
        KeyError: a symbol has no value.

    The denominators are cleared first. Then all coefficients are packed in one integer, which is the
    polynomial at s = 2^k for a k so large that they cannot run into each other (from memory: Kronecker's
    substitution), and one pass in plain integers gives both.

    >>> level = Level("C1", (Weight(1, "C1", 1, 1), Weight()), ((1,), (-1,)))
    >>> polynomials(Diagram((level,), (1, 0), (1,), ()), {"C1": 2})
    ([Fraction(-1, 1), Fraction(2, 1)], [])
    """
    cleared = [_cleared(level, values) for level in diagram.levels]
    scale = prod(denominator for _, denominator in cleared)
    bound = (
        prod(max(map(abs, numbers)) for numbers, _ in cleared)
        * max(count(diagram))
        * max(diagram.ends, default=1)
    )
    width = bound.bit_length() // 8 + 1  # bytes for one coefficient and its sign
    packed = [
        [number << 8 * width * weight.s_power for number, weight in zip(numbers, level.weights, strict=True)]
        for (numbers, _), level in zip(cleared, diagram.levels, strict=True)
    ]
    over, under = at_roots(diagram, _last(upwards(diagram, packed)))
    return _unpacked(over, width, scale), _unpacked(under, width, scale)


def weights(diagram: Diagram, values: Mapping[str, Number], s: Number) -> list[list[Number]]:
    """Return the weight of every choice of every level as a number."""

    def number(weight: Weight) -> Number:
        found: Number = values[weight.symbol] ** weight.exponent if weight.symbol else 1
        return found * s**weight.s_power if weight.s_power else found

    return [[number(weight) for weight in level.weights] for level in diagram.levels]


def upwards(diagram: Diagram, numbers: Sequence[Sequence[Number]]) -> Iterator[list[Number]]:
    """Yield the values of the states: those of the ends first, then those of the last level, up to the first.

    Args:
        diagram: any diagram.
        numbers: for every level the weight of every choice.

    The value of a state is the sum over all ways from it to the end.
    """
    values: list[Number] = list(diagram.ends)
    yield values
    for level, here in zip(reversed(diagram.levels), reversed(numbers), strict=True):
        values = _above(level, here, values)
        yield values


def at_roots(diagram: Diagram, values: Sequence[Number]) -> tuple[Number, Number]:
    """Return the values of over and under from those of the first level's states."""
    found = [0, *values, *(-value for value in reversed(values))]
    return found[diagram.roots[0]], found[diagram.roots[1]]


def _above(level: Level, numbers: Sequence[Number], values: Sequence[Number]) -> list[Number]:
    """Return the values of a level's states from those of the next."""
    find = [0, *values, *(-value for value in reversed(values))].__getitem__
    columns: Iterator[Iterable[Number]] = (
        map(find, codes) if number == 1 else [number * find(code) for code in codes]
        for codes, number in zip(level.codes, numbers, strict=True)
    )
    return list(reduce(_added, columns))


def _added(one: Iterable[Number], other: Iterable[Number]) -> Iterable[Number]:
    return map(add, one, other)


def _last(values: Iterator[list[Number]]) -> list[Number]:
    """Return the last of them, keeping none of the others."""
    return deque(values, maxlen=1).pop()


def _cleared(level: Level, values: Mapping[str, Fraction | int | float]) -> tuple[list[int], int]:
    """Return the weights of a level, s left out, times their common denominator, and that denominator."""
    if level.symbol is None:
        return [1] * len(level.weights), 1
    numerator, denominator = Fraction(values[level.symbol]).as_integer_ratio()
    highest = max(weight.exponent for weight in level.weights)
    numbers = [numerator**w.exponent * denominator ** (highest - w.exponent) for w in level.weights]
    return numbers, denominator**highest


def _unpacked(packed: int, width: int, scale: int) -> list[Fraction]:
    """Return the coefficients that are packed with ``width`` bytes each."""
    half = 1 << 8 * width - 1
    length = packed.bit_length() // (8 * width) + 1
    # half of the range is added to every coefficient, so that none is negative while they are cut apart
    offset = half * (((1 << 8 * width * length) - 1) // ((1 << 8 * width) - 1))
    octets = (packed + offset).to_bytes(width * length + 1, "little")
    found = [
        Fraction(int.from_bytes(octets[start : start + width], "little") - half, scale)
        for start in range(0, width * length, width)
    ]
    while found and not found[-1]:
        found.pop()
    return found
