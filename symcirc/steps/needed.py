"""Which laws an answer needs: all others are left unwritten.

Without the drive's own law the laws leave one free size, and ``over - H under`` is zero whatever it is. As the laws
are independent, that is one sum of multiples of them; a law whose multiple is zero says nothing of the answer. The
multiples are found at one random point modulo a prime.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

#: The factor of each unknown, modulo a prime.
Row = Mapping[str, int]


def multiples(rows: Sequence[Row], target: Row, prime: int) -> list[int]:
    """Return the factor of each row in the sum of rows that gives ``target``; the rows are independent.

    Raises ValueError where no sum gives it.

    >>> multiples([{"a": 1, "b": 1}, {"b": 1}, {"c": 5}], {"a": 1}, 101)
    [1, 100, 0]
    """
    # Gauss and Jordan on the columns of the transposed system: one equation for each unknown
    unknowns = sorted({name for row in (*rows, target) for name in row})
    equations = [[*(row.get(name, 0) for row in rows), target.get(name, 0)] for name in unknowns]
    count = len(rows)
    for column in range(count):
        pivot = next((k for k in range(column, len(equations)) if equations[k][column] % prime), None)
        if pivot is None:
            raise ValueError("the laws depend on each other")
        equations[column], equations[pivot] = equations[pivot], equations[column]
        scale = pow(equations[column][column], -1, prime)
        top = equations[column] = [value * scale % prime for value in equations[column]]
        for k, equation in enumerate(equations):
            if k != column and (factor := equation[column] % prime):
                equations[k] = [(a - factor * b) % prime for a, b in zip(equation, top, strict=True)]
    if any(equation[count] % prime for equation in equations[count:]):
        raise ValueError("the laws do not give the answer")
    return [equations[k][count] for k in range(count)]
