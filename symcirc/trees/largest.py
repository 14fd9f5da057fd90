"""The largest products of every coefficient for given numbers, found without expanding.

For every state it is known what the largest product from there to the end is, for every power of s that is
left. So the search always knows how much a half-made product can still become, and the first complete one is
the largest, the next the second (from memory: Hart, Nilsson and Raphael (1968), best-first search with an
exact estimate).
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from heapq import heappop, heappush
from itertools import count, islice

from symcirc.trees.diagram import Diagram

#: Logarithms that agree to so many decimals are a tie. Of ties the longest way is followed first: circuits with equal
#: stages have so many that going abreast would never end.
TIE_DIGITS = 9
#: For every power of s that is left, the logarithm of the largest product from a state to the end.
_Best = dict[int, float]
#: Choices taken, the last one first: (level, choice, all before), or None.
_Path = tuple[int, int, "_Path"] | None


@dataclass(frozen=True)
class Product:
    """One product of a coefficient: ``coefficient`` times the symbols to their powers, and its value."""

    coefficient: int
    factors: tuple[tuple[str, int], ...]
    value: Fraction


def largest(
    diagram: Diagram, root: int, values: Mapping[str, Fraction | int | float], most: int
) -> list[list[Product]]:
    """Return the products of largest size in every coefficient.

    Args:
        diagram: a collected diagram (see :func:`symcirc.trees.collect.collected`).
        root: one of its roots.
        values: a number for every symbol, in SI base units.
        most: how many products are wanted of each coefficient.

    Returns:
        For every power of s at most ``most`` products, the largest first. Products that are zero are left
        out.

    Raises:
        KeyError: a symbol has no value.

    >>> from symcirc.trees.diagram import Level
    >>> from symcirc.trees.laws import Weight
    >>> level = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1,), (-1,)))
    >>> [[(p.factors, p.value) for p in each] for each in largest(Diagram((level,), (1, 0), (1,), ()), 1, {"R1": 5}, 1)]
    [[((('R1', 1),), Fraction(-5, 1))]]
    """
    exact = {level.symbol: Fraction(values[level.symbol]) for level in diagram.levels if level.symbol}
    search = _Search(diagram, exact)
    found = [list(islice(search.products(root, power), most)) for power in search.powers(root)]
    return [sorted(products, key=lambda product: -abs(product.value)) for products in found]


class _Search:
    """What is known of all states, and the search from a root."""

    def __init__(self, diagram: Diagram, values: Mapping[str, Fraction]) -> None:
        self._levels = diagram.levels
        self._ends = diagram.ends
        self._values = values
        sizes = {name: math.log(abs(value)) if value else -math.inf for name, value in values.items()}
        self._sizes = [
            [sizes[weight.symbol] * weight.exponent if weight.symbol else 0.0 for weight in level.weights]
            for level in diagram.levels
        ]
        self._best: list[list[_Best]] = [[{0: math.log(end)} for end in diagram.ends]]
        for level, size in zip(reversed(diagram.levels), reversed(self._sizes), strict=True):
            after = self._best[-1]
            here: list[_Best] = [{} for _ in range(level.size)]
            for weight, codes, own in zip(level.weights, level.codes, size, strict=True):
                for best, code in zip(here, codes, strict=True):
                    for power, below in after[abs(code) - 1].items() if code else ():
                        place = power + weight.s_power
                        best[place] = max(best.get(place, -math.inf), own + below)
            self._best.append(here)
        self._best.reverse()

    def powers(self, root: int) -> range:
        """Return the powers of s of a root, up to its degree."""
        return range(1 + max(self._best[0][abs(root) - 1])) if root else range(0)

    def products(self, root: int, power: int) -> Iterator[Product]:
        """Yield the products of one coefficient, the largest first."""
        tie = count()
        heap: list[tuple[float, int, int, int, int, int, float, int, _Path]] = []

        def offer(level: int, code: int, left: int, before: float, sign: int, path: _Path) -> None:
            best = self._best[level][abs(code) - 1].get(left, -math.inf) if code else -math.inf
            if before + best > -math.inf:
                entry = (
                    -round(before + best, TIE_DIGITS),
                    -level,
                    next(tie),
                    level,
                    abs(code) - 1,
                    left,
                    before,
                    sign if code > 0 else -sign,
                    path,
                )
                heappush(heap, entry)

        offer(0, root, power, 0.0, 1, None)
        while heap:
            _, _, _, number, state, left, before, sign, path = heappop(heap)
            if number == len(self._levels):
                yield self._product(sign * self._ends[state], path)
                continue
            level = self._levels[number]
            for choice, (weight, codes) in enumerate(zip(level.weights, level.codes, strict=True)):
                size = before + self._sizes[number][choice]
                offer(number + 1, codes[state], left - weight.s_power, size, sign, (number, choice, path))

    def _product(self, coefficient: int, path: _Path) -> Product:
        factors = []
        value = Fraction(coefficient)
        while path is not None:
            number, choice, path = path
            weight = self._levels[number].weights[choice]
            if weight.symbol:
                factors.append((weight.symbol, weight.exponent))
                value *= self._values[weight.symbol] ** weight.exponent
        return Product(coefficient, tuple(reversed(factors)), value)
