"""The coefficients of a stage on their way into the ring of a match."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from math import lcm

import sympy
from sympy.polys.domains import ZZ
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.match.constants import Constants
from symcirc.transfer.function import TransferFunction


class StageInRing:
    """A stage with numbers put in for some of its symbols, pi among them.

    ``names`` are the symbols that are left, ``expressions`` what else the ring has to hold.
    """

    def __init__(
        self, function: TransferFunction, numbers: Mapping[str, sympy.Expr], constants: Constants
    ) -> None:
        self.function = function
        source = function.ring
        rows = (*function.numerator, *function.denominator)
        used = [k for k in range(source.ngens) if any(m[k] for row in rows for m in row)]
        meanings = {**numbers, "pi": sympy.pi}
        self._replaced = {
            k: constants.rational(meanings[str(source.symbols[k])])
            for k in used
            if str(source.symbols[k]) in meanings
        }
        self.names = {str(source.symbols[k]) for k in used if k not in self._replaced}
        coefficients = {c for row in rows for c in row.values()}
        self._coefficients = {c: constants.rational(source.domain.to_sympy(c)) for c in coefficients}
        self.expressions = [*self._replaced.values(), *self._coefficients.values()]

    def in_ring(self, ring: PolyRing) -> dict[str, list[PolyElement]]:
        """Return both rows of coefficients over the integers, multiplied by what that takes."""
        positions = {str(s): k for k, s in enumerate(ring.symbols)}
        factors = {c: ring.from_expr(e) for c, e in self._coefficients.items()}
        generators = [
            ring.from_expr(self._replaced[k])
            if k in self._replaced
            else ring.gens[positions[str(s)]]
            if str(s) in positions
            else ring.one
            for k, s in enumerate(self.function.ring.symbols)
        ]
        rows = {
            "numerator": [_converted(p, factors, generators, ring) for p in self.function.numerator],
            "denominator": [_converted(p, factors, generators, ring) for p in self.function.denominator],
        }
        common = lcm(*(int(c.denominator) for row in rows.values() for p in row for c in p.values()))
        integers = ring.clone(domain=ZZ)
        return {where: [(p * common).set_ring(integers) for p in row] for where, row in rows.items()}


def _converted(
    polynomial: PolyElement,
    factors: Mapping[object, PolyElement],
    generators: Sequence[PolyElement],
    ring: PolyRing,
) -> PolyElement:
    total = ring.zero
    for monomial, coefficient in polynomial.items():
        term = factors[coefficient]
        for generator, exponent in zip(generators, monomial, strict=True):
            if exponent:
                term = term * generator**exponent
        total += term
    return total
