"""From nodal equations to the asked ratio, exactly, over a polynomial ring."""

from __future__ import annotations

from sympy.polys.domains import ZZ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.elimination.minors import maximal_minors
from symcirc.nodal.equations import System, Term, Weight
from symcirc.progress import Progress, silent
from symcirc.ratio import Coefficient, Ratio

#: How each kind of symbol's weight reads in exponents of (symbol, s): the weight of a resistor is 1/R.
EXPONENTS = {"R": (-1, 0), "Z": (-1, 0), "C": (1, 1), "L": (-1, -1), "Y": (1, 0), "gain": (1, 0)}


def solve(system: System, progress: Progress = silent) -> Ratio | None:
    """Return the asked ratio ``over / under`` of a nodal system, or None where the equations are singular.

    Where ``under`` is zero whatever the drive is, the ratio's denominator is empty. By Cramer's rule over the
    integers, in one ring generator for the weight of each part, so that no entry is a fraction; the weights turn
    into powers of the parts and of s at the end.
    """
    weights = _weights(system)
    names = list(weights)
    ring = PolyRing(names or ["one"], ZZ, lex)
    generators = dict(zip(names, ring.gens, strict=False))
    columns = {unknown: k for k, unknown in enumerate(system.unknowns)}
    over, under = (_row(_undriven(asked), columns, ring, generators) for asked in (system.over, system.under))
    rows = [_row(equation.terms, columns, ring, generators) for equation in system.equations]
    size = len(columns)
    for row, equation in zip(rows, system.equations, strict=True):
        if equation.right:
            row[size] = ring(equation.right)
    minors = maximal_minors(rows, size + 1, ring, {size, *over, *under}, progress)
    determinant = minors.get(size)
    if determinant is None:
        return None
    numerator = _value(over, minors, size) + determinant * _driven(system.over)
    denominator = _value(under, minors, size) + determinant * _driven(system.under)
    return _ratio(numerator, denominator, weights) if denominator else Ratio(tuple(names), (), ())


def _weights(system: System) -> dict[str, str]:
    """Return the kind of every symbol that stands in the equations, by name."""
    terms = [t for equation in system.equations for t in equation.terms] + [*system.over, *system.under]
    return {t.weight.symbol: t.weight.kind for t in terms if t.weight.symbol}


def _undriven(asked: tuple[Term, ...]) -> list[Term]:
    return [term for term in asked if term.plus != "drive"]


def _driven(asked: tuple[Term, ...]) -> int:
    """Return how often the drive's own current, whose size is 1, stands in what is asked."""
    return sum(1 for term in asked if term.plus == "drive")


def _value(wanted: dict[int, PolyElement], minors: dict[int, PolyElement], size: int) -> PolyElement:
    """Return an asked quantity times the determinant, as the drive's size is 1.

    With the right side as one column more, x_k = (-1)^(n-1-k) M_k / M_n, where M_k is the minor without column k.
    """
    ring = minors[size].ring
    value = ring.zero
    for column, entry in wanted.items():
        minor = minors.get(column, ring.zero)
        value += entry * (minor if (size - 1 - column) % 2 == 0 else -minor)
    return value


def _row(
    terms: list[Term] | tuple[Term, ...],
    columns: dict[str, int],
    ring: PolyRing,
    generators: dict[str, PolyElement],
) -> dict[int, PolyElement]:
    row: dict[int, PolyElement] = {}
    for term in terms:
        weight = _weight(term.weight, ring, generators)
        for name, sign in ((term.plus, 1), (term.minus, -1)):
            if name is not None:
                column = columns[name]
                row[column] = row.get(column, ring.zero) + sign * weight
    return {column: entry for column, entry in row.items() if entry}


def _weight(weight: Weight, ring: PolyRing, generators: dict[str, PolyElement]) -> PolyElement:
    return weight.sign * (generators[weight.symbol] if weight.symbol else ring.one)


def _ratio(numerator: PolyElement, denominator: PolyElement, kinds: dict[str, str]) -> Ratio:
    """Turn weights into powers of the parts and of s; both sides get the same factor, so that none is negative."""
    names = tuple(kinds)
    steps = [EXPONENTS[kinds[name]] for name in names]

    def convert(polynomial: PolyElement) -> dict[tuple[int, ...], int]:
        converted = {}
        for monomial, coefficient in polynomial.terms():
            exponents = [e * step for e, (step, _) in zip(monomial, steps, strict=False)]
            power = sum(e * of_s for e, (_, of_s) in zip(monomial, steps, strict=False))
            converted[(*exponents, power)] = int(coefficient)
        return converted

    above, below = convert(numerator), convert(denominator)
    lowest = [min(e) for e in zip(*above, *below, strict=True)]

    def by_power(polynomial: dict[tuple[int, ...], int]) -> tuple[Coefficient, ...]:
        top = max((m[-1] - lowest[-1] for m in polynomial), default=-1)
        powers: list[Coefficient] = [{} for _ in range(top + 1)]
        for monomial, coefficient in polynomial.items():
            *exponents, power = (e - low for e, low in zip(monomial, lowest, strict=True))
            powers[power][tuple(exponents)] = coefficient
        return tuple(powers)

    return Ratio(names, by_power(above), by_power(below))
