"""State equations of real sections in a row, and the matrix exponential that solves them; numpy is imported here.

Scaling and squaring: Moler and Van Loan, "Nineteen dubious ways to compute the exponential of a matrix", SIAM Review 20
(1978) 801-836, method 3 (from memory).
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

import numpy as np

Floats = np.ndarray[Any, np.dtype[np.float64]]
Coefficients = Sequence[float] | Floats

#: Terms of the exponential's series after scaling to a norm of 1/4 at most.
_TERMS = 15


def state_space(
    sections: Iterable[tuple[Coefficients, Coefficients]], gain: float = 1.0
) -> tuple[Floats, Floats, Floats, float]:
    """Return A, b, c, d of x' = A x + b u, y = c x + d u for sections in a row.

    A section is (numerator, denominator) with coefficients in ascending powers, as many above as below, the
    denominator monic. ``gain`` multiplies the whole.

    >>> state_space([([2.0, 0.0], [1.0, 1.0])])
    (array([[-1.]]), array([1.]), array([2.]), 0.0)
    """
    sections = list(sections)
    order = sum(len(below) - 1 for _, below in sections)
    state, drive = np.zeros((order, order)), np.zeros(order)
    output, direct, first = np.zeros(order), gain, 0
    for above, below in sections:
        over, under = np.array(above), np.array(below)
        n = len(under) - 1
        own, last = slice(first, first + n), first + n - 1
        for k in range(first, last):
            state[k, k + 1] = 1.0
        state[last, own] = -under[:n]
        state[last] += output  # the last row is driven by what comes from the section before
        drive[last] = direct
        output = over[n] * output
        output[own] = over[:n] - over[n] * under[:n]
        direct *= over[n]
        first += n
    return state, drive, output, float(direct)


def exponential(matrix: Floats) -> Floats:
    """Return e to a matrix by scaling and squaring of the series.

    >>> exponential(np.array([[0.0, 1.0], [0.0, 0.0]]))
    array([[1., 1.],
           [0., 1.]])
    """
    norm = float(np.max(np.abs(matrix).sum(axis=1)))
    halvings = max(0, int(np.ceil(np.log2(norm))) + 2) if norm > 0 else 0
    small = matrix / 2.0**halvings
    result = term = np.eye(len(matrix))
    for k in range(1, _TERMS + 1):
        term = term @ small / k
        result = result + term
    for _ in range(halvings):
        result = result @ result
    return np.asarray(result)
