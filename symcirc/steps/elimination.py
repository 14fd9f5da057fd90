"""Elimination as it is done by hand: one law after another is solved for one unknown, which is put into the rest.

The law that holds the fewest unknowns comes first, of equals the shortest, and in it the unknown whose factor is
simplest. Nothing is divided: a law stays a sum of polynomials times unknowns, what its factors share taken out.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

from sympy.polys.rings import PolyElement

from symcirc.transfer.common import remove_common_factor

#: Factors of unknowns.
Row = dict[str, PolyElement]


@dataclass(frozen=True)
class Relation:
    """A law as it stands: ``sum of factor * unknown = 0``; ``put_in`` are the unknowns put in since it was shown."""

    short: str
    row: Row
    put_in: tuple[str, ...] = ()

    @property
    def products(self) -> int:
        """How many products the law has."""
        return sum(map(len, self.row.values()))


@dataclass(frozen=True)
class Solved:
    """A relation solved for an unknown: ``unknown * row[unknown] = - the rest``.

    ``choice`` tells that there were others to begin with, all of which hold as many unknowns or more;
    ``earlier`` are the sums by which relations were multiplied before, and which may have to come out again.
    """

    relation: Relation
    unknown: str
    choice: bool
    earlier: tuple[PolyElement, ...] = ()

    @property
    def pivot(self) -> PolyElement:
        """The unknown's factor."""
        return self.relation.row[self.unknown]


def eliminate(
    relations: list[Relation], asked: frozenset[str], under: frozenset[str]
) -> Iterator[Solved | Relation]:
    """Yield each solved relation in turn, and at the end the one that is left, which holds asked unknowns alone.

    Where several such are left (a difference is asked), each is solved, for one that is not ``under`` the line.
    """
    pivots: list[PolyElement] = []
    while len(relations) > 1 and (solved := _next(relations, asked)):
        solved = replace(solved, earlier=tuple(pivots))
        yield solved
        relations = _rest(solved, relations)
        pivots += [solved.pivot] if len(solved.pivot) > 1 else []
    if len(relations) == 1:
        yield relations[0]
        return
    while relations and (solved := _next(relations, under) or _next(relations, frozenset())):
        solved = replace(solved, earlier=tuple(pivots))
        yield solved
        relations = _rest(solved, relations)
        pivots += [solved.pivot] if len(solved.pivot) > 1 else []


def _next(relations: list[Relation], spared: frozenset[str]) -> Solved | None:
    """Return the relation to solve next, and for what, or None where all unknowns are spared."""

    def cost(choice: tuple[int, str]) -> tuple[int, ...]:
        number, unknown = choice
        relation = relations[number]
        elsewhere = sum(unknown in other.row for other in relations) - 1
        return len(relation.row), relation.products, len(relation.row[unknown]), elsewhere, number

    choices = [(k, u) for k, relation in enumerate(relations) for u in relation.row if u not in spared]
    if not choices:
        return None
    number, unknown = min(choices, key=cost)
    return Solved(relations[number], unknown, len({k for k, _ in choices}) > 1)


def _rest(solved: Solved, relations: list[Relation]) -> list[Relation]:
    return [put_in(solved, relation) for relation in relations if relation is not solved.relation]


def put_in(solved: Solved, relation: Relation) -> Relation:
    """Return a relation without the unknown that another is solved for."""
    unknown, source = solved.unknown, solved.relation.row
    factor = relation.row.get(unknown)
    if factor is None:
        return relation
    factor, pivot, _ = remove_common_factor(factor, solved.pivot)
    zero = pivot.ring.zero
    row = {
        name: relation.row.get(name, zero) * pivot - source.get(name, zero) * factor
        for name in dict.fromkeys((*relation.row, *source))
    }
    return Relation(relation.short, reduced(row, solved.earlier), (*relation.put_in, unknown))


def reduced(row: Row, likely: tuple[PolyElement, ...] = ()) -> Row:
    """Return a row without zeros and without what all its factors share.

    What is ``likely`` to be shared is tried by division first: a common factor is slow to find where it is long,
    over a field with roots above all (compare E. H. Bareiss, "Sylvester's identity and multistep integer-preserving
    Gaussian elimination", Math. Comp. 22, 1968; from memory: there a pivot comes out again two steps later).
    """
    row = {name: factor for name, factor in row.items() if factor}
    for divisor in likely:
        row = _divided(row, divisor)
    common: PolyElement | None = None
    for factor in sorted(row.values(), key=len):
        common = factor if common is None else _common(common, factor)
    return row if common is None or common.is_ground else {n: f.exquo(common) for n, f in row.items()}


def _divided(row: Row, divisor: PolyElement) -> Row:
    """Return a row divided by a polynomial where that divides all its factors, else as it is."""
    result: Row = {}
    for name, factor in sorted(row.items(), key=lambda item: len(item[1])):
        quotient, rest = factor.div(divisor)
        if rest:
            return row
        result[name] = quotient
    return {name: result[name] for name in row}


def _common(one: PolyElement, two: PolyElement) -> PolyElement:
    """Return the greatest common divisor of two polynomials, none of them zero."""
    return remove_common_factor(one, two)[2]
