"""Do the steps end at the answer? The answer's own function is put through the same eliminations and must vanish.

This is done at one random point modulo a prime of 61 bits: a wrong step is not seen with a probability of d/2^60
for polynomials of degree d (J. T. Schwartz, "Fast probabilistic algorithms for verification of polynomial
identities", J. ACM 27, 1980; from memory).
"""

from __future__ import annotations

from symcirc.steps.elimination import Row
from symcirc.transfer.residues import Residues


def values(point: Residues, row: Row) -> dict[str, int]:
    """Return the factor of every unknown at a point."""
    return {name: point.polynomial(factor) for name, factor in row.items()}


class Proof:
    """What is left of ``denominator * over - numerator * under`` when the solved unknowns are put in."""

    def __init__(self, point: Residues, goal: Row) -> None:
        self.point = point
        self.left = values(point, goal)

    def put_in(self, row: Row, unknown: str) -> None:
        """Put in an unknown for which a relation, ``sum of row = 0``, is solved."""
        prime, known = self.point.prime, values(self.point, row)
        factor = self.left.get(unknown, 0) * pow(known[unknown], -1, prime)
        for name, value in known.items():
            self.left[name] = (self.left.get(name, 0) - factor * value) % prime

    @property
    def done(self) -> bool:
        """Whether nothing is left."""
        return not any(self.left.values())
