"""What the two ways to an answer hand over: a quotient of two polynomials in s and the parts, as plain records."""

from __future__ import annotations

from dataclasses import dataclass

#: One coefficient of a power of s: exponents over the ratio's symbols, and the whole number before the product.
Coefficient = dict[tuple[int, ...], int]


@dataclass(frozen=True)
class Ratio:
    """``numerator / denominator``; each is a coefficient for every power of s, ascending from power 0.

    ``symbols`` are free and independent: what is tied is put in later.
    """

    symbols: tuple[str, ...]
    numerator: tuple[Coefficient, ...]
    denominator: tuple[Coefficient, ...]
