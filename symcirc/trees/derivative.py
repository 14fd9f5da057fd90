"""The derivatives with respect to every symbol at once, by one pass back through the diagram.

Method: from memory, Griewank and Walther, "Evaluating Derivatives" (2008), the reverse mode; on a diagram it
is the sum over all ways from a root to a state, beside the sum over all ways from there to the end.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from symcirc.trees.diagram import Diagram, Level
from symcirc.trees.evaluate import Number, upwards, weights


def derivatives(
    diagram: Diagram, values: Mapping[str, Number], s: Number
) -> dict[str, tuple[Number, Number]]:
    """Return the derivatives of both polynomials with respect to every symbol.

    Args:
        diagram: as it was walked, or collected.
        values: a number for every symbol, in SI base units: int, Fraction, float or complex.
        s: complex frequency in rad/s.

    Returns:
        For every symbol of the diagram the derivatives of over and under at s. Symbols that are not in the
        diagram do not change the ratio.

    Raises:
        KeyError: a symbol has no value.

    >>> from symcirc.trees.laws import Weight
    >>> level = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1,), (-1,)))
    >>> derivatives(Diagram((level,), (1, 0), (1,), ()), {"R1": 5}, 1)
    {'R1': (-1, 0)}
    """
    numbers = weights(diagram, values, s)
    below = list(upwards(diagram, numbers))
    over, under = (_of_root(diagram, root, values, s, numbers, below) for root in diagram.roots)
    return {symbol: (over[symbol], under[symbol]) for symbol in over}


def _of_root(
    diagram: Diagram,
    root: int,
    values: Mapping[str, Number],
    s: Number,
    numbers: Sequence[Sequence[Number]],
    below: Sequence[Sequence[Number]],
) -> dict[str, Number]:
    """Return the derivatives of one polynomial; ``below`` are the states' values, ends first."""
    found: dict[str, Number] = {}
    above: dict[int, Number] = {abs(root) - 1: 1 if root > 0 else -1} if root else {}
    for number, level in enumerate(diagram.levels):
        after = below[len(diagram.levels) - number - 1]
        if level.symbol:
            found[level.symbol] = _slope(level, values[level.symbol], s, above, after)
        following: dict[int, Number] = {}
        for codes, weight in zip(level.codes, numbers[number], strict=True):
            for state, ways in above.items():
                if code := codes[state]:
                    term = weight * ways if code > 0 else -(weight * ways)
                    place = abs(code) - 1
                    following[place] = following[place] + term if place in following else term
        above = following
    return found


def _slope(
    level: Level, value: Number, s: Number, above: Mapping[int, Number], after: Sequence[Number]
) -> Number:
    """Return the derivative by a level's symbol: slopes of weights times cofactors."""
    slope: Number = 0
    for weight, codes in zip(level.weights, level.codes, strict=True):
        if weight.exponent:
            cofactor: Number = 0
            for state, ways in above.items():
                if code := codes[state]:
                    term = ways * after[abs(code) - 1]
                    cofactor = cofactor + term if code > 0 else cofactor - term
            slope = slope + weight.exponent * value ** (weight.exponent - 1) * s**weight.s_power * cofactor
    return slope
