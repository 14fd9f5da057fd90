"""What comes out for a unit step, from the state equations by the matrix exponential.

The ratio is taken apart into real sections of first and second order in a row, so that no state is much larger than
another, and multiple poles need no care. Scaling and squaring: Moler and Van Loan, "Nineteen dubious ways to compute
the exponential of a matrix", SIAM Review 20 (1978) 801-836, method 3 (from memory).
"""

from __future__ import annotations

import numpy as np

from symcirc.plots.rational import Complexes, Floats, Rational

#: Terms of the exponential's series after scaling to a norm of 1/4 at most.
_TERMS = 14
#: A response has settled when it stays within this part of its largest value from its final one.
_SETTLED = 0.01
#: Points of the search for that, and decays of the slowest pole within which it lies.
_SEARCHED, _DECAYS = 4000, 12.0
#: What is shown of a response that does not settle: so many decades of growth, so many radians of ringing.
_GROWTH, _RADIANS = 3.0, 60.0


def step_response(ratio: Rational, end: float, count: int) -> Floats:
    """Return the response to a unit step at ``count`` times from 0 to ``end`` seconds, equally spaced.

    At 0 it is the value just after the step. The ratio must be proper.

    >>> from symcirc.plots.rational import rational
    >>> step_response(rational([1.0], [1.0, 1e-3]), 2e-3, 3).round(6)
    array([0.      , 0.632121, 0.864665])
    """
    assert ratio.is_proper
    state, drive, output, direct = _state_space(ratio)
    order = len(drive)
    # the step is a state of its own, which stays at 1: no steady state is needed, so that poles at 0 do no harm
    whole = np.zeros((order + 1, order + 1))
    whole[:order, :order], whole[:order, order] = state, drive
    advance = _exponential(whole * (end * ratio.frequency / (count - 1)))
    block = np.zeros((order + 1, 1))
    block[order] = 1.0
    while block.shape[1] < count:
        block = np.concatenate([block, advance @ block], axis=1)
        advance = advance @ advance
    return np.asarray(np.append(output, direct) @ block[:, :count])


def step_length(ratio: Rational) -> float:
    """Return for how many seconds a step response is worth a look: until it has settled, and a little more."""
    poles = ratio.poles
    if not len(poles):
        return 1.0 / ratio.frequency
    growth, size = float(np.max(poles.real)), float(np.max(np.abs(poles)))
    if growth > 0:
        return _GROWTH * float(np.log(10.0)) / growth
    decaying = -poles.real[poles.real < 0]
    if not len(decaying) or np.any((poles.real == 0) & (poles.imag != 0)):
        return _RADIANS / size if size else 1.0
    end = _DECAYS / float(np.min(decaying))
    if np.any(poles == 0):
        return end
    response = step_response(ratio, end, _SEARCHED)
    outside = np.abs(response - response[-1]) > _SETTLED * np.max(np.abs(response))
    last = int(np.flatnonzero(outside)[-1]) + 1 if outside.any() else _SEARCHED
    return 1.4 * end * last / _SEARCHED


def _state_space(ratio: Rational) -> tuple[Floats, Floats, Floats, float]:
    """Return the matrices of sections in a row, time in units of 1/frequency: x' = A x + b u, y = c x + d u."""
    under = _sections(ratio.poles / ratio.frequency)
    over = _above(_sections(ratio.zeros / ratio.frequency), [len(section) - 1 for section in under])
    order = len(ratio.denominator) - 1
    state, drive = np.zeros((order, order)), np.zeros(order)
    output, direct, first = np.zeros(order), ratio.numerator[-1], 0
    for above, below in zip(over, under, strict=True):
        n = len(below) - 1
        own, last = slice(first, first + n), first + n - 1
        for k in range(first, last):
            state[k, k + 1] = 1.0
        state[last, own] = -below[:n]
        state[last] += output  # the last row is driven by what comes from the section before
        drive[last] = direct
        output = above[n] * output
        output[own] = above[:n] - above[n] * below[:n]
        direct *= above[n]
        first += n
    return state, drive, output, float(direct)


def _sections(roots: Complexes) -> list[Floats]:
    """Return monic polynomials, ascending: one for each pair of roots (real ones paired by size), the odd one last."""
    real = sorted((float(r.real) for r in roots if r.imag == 0), key=abs)
    pairs = [np.array([abs(r) ** 2, -2 * r.real, 1.0]) for r in roots if r.imag > 0]
    pairs += [np.array([a * b, -a - b, 1.0]) for a, b in zip(real[::2], real[1::2], strict=False)]
    pairs.sort(key=lambda section: float(abs(section[0])))
    return [*pairs, *([np.array([-real[-1], 1.0])] if len(real) % 2 else [])]


def _above(sections: list[Floats], degrees: list[int]) -> list[Floats]:
    """Return a numerator for every section of poles, as many coefficients as its denominator has.

    There are no more zeros than poles, so that every pair finds a section of order 2 and a single one what is left.
    """
    pairs = [section for section in sections if len(section) == 3]
    single = [section for section in sections if len(section) == 2]
    found = []
    for degree in degrees:
        waiting = pairs if degree == 2 and pairs else single
        own = waiting.pop(0) if waiting else np.array([1.0])
        found.append(np.concatenate([own, np.zeros(degree + 1 - len(own))]))
    return found


def _exponential(matrix: Floats) -> Floats:
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
