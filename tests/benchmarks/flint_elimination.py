"""Fraction-free elimination of an RC ladder's nodal equations in python-flint's multivariate polynomials.

Method: from memory, Bareiss, "Sylvester's identity and multistep integer-preserving Gaussian elimination"
(1968).
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from flint import fmpz_mpoly


def ladder_determinant(sections: int) -> int:
    """Return the number of products in the expanded determinant of the ladder's nodal matrix."""
    return len(_determinant(_nodal_matrix(sections)))


def _nodal_matrix(sections: int) -> list[list[fmpz_mpoly]]:
    from flint import Ordering, fmpz_mpoly_ctx

    names = [f"{kind}{k}" for kind in "GC" for k in range(1, sections + 1)]
    context = fmpz_mpoly_ctx.get([*names, "s"], Ordering.lex)
    *gens, s = context.gens()
    conductance, capacitance = gens[:sections], gens[sections:]
    zero = context.constant(0)
    matrix = [[zero] * sections for _ in range(sections)]
    for k in range(sections):
        matrix[k][k] = (
            conductance[k] + s * capacitance[k] + (conductance[k + 1] if k + 1 < sections else zero)
        )
        if k:
            matrix[k][k - 1] = matrix[k - 1][k] = -conductance[k]
    return matrix


def _determinant(matrix: list[list[fmpz_mpoly]]) -> fmpz_mpoly:
    last = None
    for k in range(len(matrix) - 1):
        pivot = matrix[k][k]
        for i in range(k + 1, len(matrix)):
            for j in range(k + 1, len(matrix)):
                minor = pivot * matrix[i][j] - matrix[i][k] * matrix[k][j]
                matrix[i][j] = minor if last is None else minor // last
        last = pivot
    return matrix[-1][-1]
