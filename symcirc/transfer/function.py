"""The rational function in s that an ask comes to: coefficients are polynomials in the parts, kept exact."""

from __future__ import annotations

from dataclasses import dataclass

from sympy.polys.rings import PolyElement, PolyRing


@dataclass(frozen=True)
class TransferFunction:
    """Numerator and denominator, each a coefficient for every power of s, ascending, without common factors.

    The coefficients lie in ``ring``, a polynomial ring in the parts and parameters (not in s) over the rationals,
    or over the rationals with the square roots that the sheet's ties hold; ``pi`` is one of its generators where
    a tie holds it. The last entry of each list is not zero; a function that is zero has the numerator ``()``.
    """

    ring: PolyRing
    numerator: tuple[PolyElement, ...]
    denominator: tuple[PolyElement, ...]

    @property
    def order(self) -> int:
        """The degree of the denominator in s."""
        return len(self.denominator) - 1


def symbols_in(function: TransferFunction) -> set[str]:
    """Return the names that the function's coefficients hold."""
    gens = function.ring.symbols
    coefficients = (*function.numerator, *function.denominator)
    return {str(gens[k]) for c in coefficients for monomial in c for k, e in enumerate(monomial) if e}
