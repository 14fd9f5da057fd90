"""The two polynomials for many sets of part values at once, in numpy.

Values are real, so the states are polynomials in s with real coefficients, and s itself comes in at the very
end. The sets are taken in slices so short that all that is at hand at a time stays in the processor's cache:
that, more than the count of operations, decides the speed. Where all ways of a polynomial pass through one
state, the polynomial is a product, and is left one.
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import reduce
from operator import mul

import numpy as np
from numpy.typing import ArrayLike, NDArray

from symcirc.trees.diagram import Diagram, Level, narrows

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
#: A polynomial in s: {power: coefficient}, one number for each set, or one for all of them.
Sparse = dict[int, "Real | int"]

#: So many sets are in a slice.
_SLICE = 8192


def responses(diagram: Diagram, values: Mapping[str, ArrayLike], s: complex) -> Complex:
    """Return the ratio of both polynomials at one s for many sets of part values.

    Args:
        diagram: as it was walked, or collected.
        values: for every symbol one number for each set, or one for all; SI base units.
        s: complex frequency in rad/s.

    Returns:
        The transfer function at s, one complex number for each set; infinite or nan where the denominator is
        zero.

    Raises:
        KeyError: a symbol has no value.
        ValueError: the symbols have values for different numbers of sets.

    >>> from symcirc.trees.laws import Weight
    >>> level = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1, 0), (1, 1)))
    >>> responses(Diagram((level,), (2, 1), (1,), ()), {"R1": [1.0, 3.0]}, 1j)
    array([0.5 +0.j, 0.75+0.j])
    """
    arrays = {
        level.symbol: np.asarray(values[level.symbol], float) for level in diagram.levels if level.symbol
    }
    count = np.broadcast_shapes((1,), *(array.shape for array in arrays.values()))[0]
    cuts = narrows(diagram)
    found = np.empty(count, np.complex128)
    with np.errstate(divide="ignore", invalid="ignore"):
        for start in range(0, count, _SLICE):
            end = min(start + _SLICE, count)
            part = {name: array[start:end] if array.size > 1 else array for name, array in arrays.items()}
            over, under = (
                reduce(mul, (_at(factor, s, end - start) for factor in factors))
                for factors in _factors(diagram, part, cuts)
            )
            np.divide(over, under, out=found[start:end])
    return found


def _factors(
    diagram: Diagram, values: Mapping[str, Real], cuts: Mapping[int, tuple[int, int]]
) -> tuple[list[Sparse], list[Sparse]]:
    """Return over and under, each as a list of factors.

    Args:
        diagram: any diagram.
        values: for every symbol the values of one slice.
        cuts: the levels at which each of both has only one state (see :func:`narrows`).
    """
    found: tuple[list[Sparse], list[Sparse]] = [], []
    states: list[Sparse] = [{0: end} for end in diagram.ends]
    for number, level in reversed(list(enumerate(diagram.levels))):
        states = [_above(level, state, values, states) for state in range(level.size)]
        for state, factors in zip(cuts.get(number, ()), found, strict=False):
            factors.append(states[state])
        for state in cuts.get(number, ()):
            states[state] = {0: 1}
    for root, factors in zip(diagram.roots, found, strict=True):
        factors.append(_signed(states[abs(root) - 1], root) if root else {})
    return found


def _signed(polynomial: Sparse, code: int) -> Sparse:
    return polynomial if code > 0 else {power: -coefficient for power, coefficient in polynomial.items()}


def _above(level: Level, state: int, values: Mapping[str, Real], after: list[Sparse]) -> Sparse:
    """Return the polynomial of one state from those of the next level.

    What other states may share is never changed; sums that are this state's own grow in place.
    """
    total: Sparse = {}
    own: set[int] = set()
    for weight, codes in zip(level.weights, level.codes, strict=True):
        code = codes[state]
        if not code:
            continue
        factor = values[weight.symbol] ** weight.exponent if weight.symbol else None
        for power, coefficient in _signed(after[abs(code) - 1], code).items():
            place = power + weight.s_power
            term = coefficient if factor is None else factor * coefficient
            if place not in total:
                total[place] = term
                if factor is not None:
                    own.add(place)
            elif place in own:
                total[place] += term
            else:
                total[place] = total[place] + term
                own.add(place)
    return total


def _at(polynomial: Sparse, s: complex, count: int) -> Complex:
    """Return the values of a polynomial at s, real and imaginary parts summed apart."""
    found = np.zeros(count, np.complex128)
    for power, coefficient in polynomial.items():
        unit = s**power
        if unit.real:
            found.real += unit.real * coefficient
        if unit.imag:
            found.imag += unit.imag * coefficient
    return found
