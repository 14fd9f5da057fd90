"""Which stage of a cascade takes which poles and zeros, the order of Q first.

The stages stand in the order of the signal. In the first assignment the lowest Q comes first, so that no stage in
front overloads where a later one peaks, and the pair of the highest Q takes the zeros that are nearest to it
(common practice, no source).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from itertools import combinations
from math import log

from symcirc.cascade.factors import Factor, Factored
from symcirc.responses.exact import product
from symcirc.transfer.function import TransferFunction


@dataclass(frozen=True)
class Section:
    """What one stage takes of the target: poles, zeros, and how many zeros at s = 0."""

    poles: tuple[Factor, ...]
    zeros: tuple[Factor, ...]
    at_zero: int


@dataclass(frozen=True)
class Shape:
    """What a stage can take: ``order`` poles, and a numerator with these powers of s."""

    order: int
    powers: frozenset[int]

    @property
    def at_zero(self) -> int:
        """How many zeros it always has at s = 0."""
        return min(self.powers)

    @property
    def finite(self) -> int:
        """How many other finite zeros it has."""
        return max(self.powers) - min(self.powers)

    def takes(self, zeros: Sequence[Factor]) -> bool:
        """Tell whether a product of zeros lacks the powers that the numerator lacks."""
        row = product(zero.coefficients for zero in zeros)
        return all(c == 0 for k, c in enumerate(row) if k + self.at_zero not in self.powers)


def shape_of(function: TransferFunction) -> Shape:
    """Return the shape of a stage, by the powers of s in its numerator."""
    return Shape(function.order, frozenset(k for k, c in enumerate(function.numerator) if c))


#: Tells whether the stage at this place can give a section.
Fits = Callable[[int, Section], bool]
Poles = tuple[Factor, ...]


def assignments(shapes: Sequence[Shape], target: Factored, fits: Fits) -> Iterator[tuple[Section, ...]]:
    """Yield every way to share the target out that the shapes allow and each stage fits, best first.

    ``fits`` is asked once or more for each section; where it says no, all that holds that section is passed over.

    >>> low_pass = Shape(2, frozenset({0}))
    >>> pairs = tuple(Factor((1, b, 1), 1.0, 1 / b) for b in (1.85, 0.77))
    >>> ways = assignments([low_pass, low_pass], Factored(pairs, (), 0, 1), lambda stage, section: True)
    >>> [[round(section.poles[0].q, 2) for section in way] for way in ways]
    [[0.54, 1.3], [1.3, 0.54]]
    """
    for poles in _poles(0, shapes, target.poles, fits, set()):
        ranked = sorted(range(len(shapes)), key=lambda k: -max((p.q for p in poles[k]), default=0))
        for zeros in _zeros(ranked, shapes, poles, target.zeros, fits):
            yield tuple(Section(poles[k], zeros[k], shape.at_zero) for k, shape in enumerate(shapes))


def _poles(
    place: int, shapes: Sequence[Shape], left: Poles, fits: Fits, dead: set[tuple[int, Poles]]
) -> Iterator[tuple[Poles, ...]]:
    """Yield the poles of each stage from a place on; ``dead`` holds what is known to lead nowhere."""
    if place == len(shapes):
        if not left:
            yield ()
        return
    if (place, left) in dead:
        return
    shape, found = shapes[place], False
    for taken, rest in _subsets(left, shape.order):
        if shape.finite or fits(place, Section(taken, (), shape.at_zero)):
            for others in _poles(place + 1, shapes, rest, fits, dead):
                found = True
                yield (taken, *others)
    if not found:
        dead.add((place, left))


def _zeros(
    ranked: Sequence[int], shapes: Sequence[Shape], poles: Sequence[Poles], left: Poles, fits: Fits
) -> Iterator[dict[int, Poles]]:
    """Yield the zeros of each stage, the ranked ones in turn, nearest to its poles first."""
    if not ranked:
        if not left:
            yield {}
        return
    place, *others = ranked
    shape = shapes[place]
    near = sorted(_subsets(left, shape.finite), key=lambda pair: _distance(poles[place], pair[0]))
    for taken, rest in near:
        if shape.finite and not (
            shape.takes(taken) and fits(place, Section(poles[place], taken, shape.at_zero))
        ):
            continue
        for chosen in _zeros(others, shapes, poles, rest, fits):
            yield {place: taken, **chosen}


def _subsets(factors: Poles, degree: int) -> Iterator[tuple[Poles, Poles]]:
    """Yield every subset of that degree with the rest, in order; equal factors count once."""
    seen = set()
    for count in range(degree // 2 + degree % 2, degree + 1) if degree else (0,):
        for chosen in combinations(range(len(factors)), count):
            taken = tuple(factors[k] for k in chosen)
            if sum(f.degree for f in taken) == degree and taken not in seen:
                seen.add(taken)
                yield taken, tuple(f for k, f in enumerate(factors) if k not in chosen)


def _distance(poles: Poles, zeros: Poles) -> float:
    """Return how far zeros lie from poles: the ratio of frequencies, and for pairs off the axis that of Q."""
    if not poles or not zeros:
        return 0.0
    peak = max(poles, key=lambda pole: pole.q)
    return sum(
        abs(log(zero.omega / peak.omega)) + (0 if zero.q == float("inf") else abs(abs(zero.q) - peak.q))
        for zero in zeros
    )
