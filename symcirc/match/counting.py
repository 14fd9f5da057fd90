"""How many coefficients the unknown parts can set, and which parts to choose where there are too many.

The count is the rank of the Jacobian of the coefficients, each group up to a common factor, with respect to the
unknowns. It is taken at a random point modulo a large prime, which can only be too low, and that with odds of
about the degree to the prime (Schwartz, "Fast probabilistic algorithms for verification of polynomial
identities", 1980, from memory).
"""

from __future__ import annotations

import random
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import combinations, islice

from sympy.polys.rings import PolyElement

from symcirc.match.decimals import fraction_near
from symcirc.match.names import natural
from symcirc.match.quantities import Quantities
from symcirc.match.system import Coefficient, System

PRIME = 2**61 - 1
#: How many groups of parts to choose are offered, and how many are tried to find them.
MOST_GROUPS, MOST_TRIALS = 8, 3000

Row = list[int]


@dataclass(frozen=True)
class Count:
    """The coefficients that can be set each by itself, those that then follow, and the matrix behind it.

    ``rank`` counts what the unknowns can set. ``references`` are the coefficients (one a group) that the others
    are measured against. ``slopes`` has a row for each unknown.
    """

    rank: int
    references: tuple[Coefficient, ...]
    independent: tuple[Coefficient, ...]
    dependent: tuple[Coefficient, ...]
    values: tuple[Row, ...]
    slopes: Mapping[int, Row]


def count(system: System) -> Count:
    """Return what the unknowns of a system can set, the denominator's coefficients first."""
    quantities = system.quantities
    point = modular_point(quantities)
    columns = system.coefficients
    rows = []
    for group in system.groups:
        rows.append([_modulo(c.stage, point) if c in group else 0 for c in columns])
    slopes = {k: [_modulo(c.stage.diff(k), point) for c in columns] for k in quantities.unknowns}
    matrix = [*rows, *slopes.values()]
    references = tuple(_reference(group) for group in system.groups)
    order = sorted(range(len(columns)), key=lambda k: columns[k] not in references)
    basis = _column_basis(matrix, order)
    rest = [k for k in order if columns[k] not in references]
    return Count(
        rank=len(basis) - len(references),
        references=references,
        independent=tuple(columns[k] for k in rest if k in basis),
        dependent=tuple(columns[k] for k in rest if k not in basis),
        values=tuple(rows),
        slopes=slopes,
    )


def groups_to_choose(system: System, found: Count, units: Mapping[str, str]) -> tuple[tuple[str, ...], ...]:
    """Return groups of unknowns of which one has to be chosen so that the rest is determined.

    Groups of capacitors come first, as these come in few values; then of resistors.
    """
    quantities = system.quantities
    surplus = len(quantities.unknowns) - found.rank
    ranked = sorted(
        quantities.unknowns, key=lambda k: _ease(quantities.name(k), k in quantities.signless, units)
    )
    groups = islice(_choices(ranked, surplus, found), MOST_GROUPS)
    return tuple(tuple(sorted((quantities.name(k) for k in group), key=natural)) for group in groups)


def _choices(ranked: Sequence[int], surplus: int, found: Count) -> Iterator[tuple[int, ...]]:
    full = found.rank + len(found.references)
    for group in islice(combinations(ranked, surplus), MOST_TRIALS):
        kept = [row for k, row in found.slopes.items() if k not in group]
        if len(_column_basis([*found.values, *kept], range(len(found.values[0])))) == full:
            yield group


def _ease(name: str, signless: bool, units: Mapping[str, str]) -> tuple[int, object]:
    """Return a key that sorts what is rather chosen than solved for first."""
    order = {"F": 0, "ohm": 1, "H": 2}
    return (4 if signless else order.get(units.get(name, ""), 3), natural(name))


def _reference(group: Sequence[Coefficient]) -> Coefficient:
    """Return the coefficient with the shortest formula among those that may not be zero."""
    present = [c for c in group if c.target.above]
    return min(present, key=lambda c: (c.where != "denominator", len(c.stage), c.power))


def modular_point(quantities: Quantities) -> list[int]:
    """Return a value modulo the prime for each generator, the known ones where they are short fractions."""
    generator = random.Random(1934)
    point = [generator.randrange(1, PRIME) for _ in range(quantities.ring.ngens)]
    for position, number in quantities.numbers.items():
        fraction = fraction_near(number)
        if fraction is not None:
            point[position] = fraction.numerator * pow(fraction.denominator, -1, PRIME) % PRIME
    return point


def _modulo(polynomial: PolyElement, point: Sequence[int]) -> int:
    total = 0
    for monomial, coefficient in polynomial.items():
        term = int(coefficient)
        for value, exponent in zip(point, monomial, strict=True):
            if exponent:
                term = term * pow(value, exponent, PRIME) % PRIME
        total += term
    return total % PRIME


def _column_basis(matrix: Sequence[Row], order: Sequence[int]) -> set[int]:
    """Return the first columns, in this order, that span all of them (Gauss elimination modulo the prime)."""
    rows = [list(row) for row in matrix]
    basis: set[int] = set()
    for column in order:
        pivot = next((row for row in rows if row[column]), None)
        if pivot is None:
            continue
        rows.remove(pivot)
        inverse = pow(pivot[column], -1, PRIME)
        for row in rows:
            factor = row[column] * inverse % PRIME
            if factor:
                for k in order:
                    row[k] = (row[k] - factor * pivot[k]) % PRIME
        basis.add(column)
    return basis
