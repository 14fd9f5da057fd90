"""What comes out for a unit step, from the state equations by the matrix exponential.

The ratio is taken apart into real sections of first and second order in a row, so that no state is much larger than
another, and multiple poles need no care.
"""

from __future__ import annotations

import numpy as np

from symcirc.plots.rational import Complexes, Floats, Rational
from symcirc.responses.state_space import exponential, state_space

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
    under = _sections(ratio.poles / ratio.frequency)
    over = _above(_sections(ratio.zeros / ratio.frequency), [len(section) - 1 for section in under])
    state, drive, output, direct = state_space(
        list(zip(over, under, strict=True)), float(ratio.numerator[-1])
    )
    order = len(drive)
    # the step is a state of its own, which stays at 1: no steady state is needed, so that poles at 0 do no harm
    whole = np.zeros((order + 1, order + 1))
    whole[:order, :order], whole[:order, order] = state, drive
    advance = exponential(whole * (end * ratio.frequency / (count - 1)))
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
