"""The determinant of a circuit with numbers in it, every amplifier as w_t/s: exact polynomials, block by block."""

from __future__ import annotations

import math
from collections import deque
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

import networkx as nx
from sympy.polys.domains import QQ, ZZ
from sympy.polys.fields import FracElement, FracField
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import Circuit, Setup
from symcirc.elimination.minors import maximal_minors
from symcirc.nodal import System, build_system
from symcirc.nodal.equations import Equation, Term, Weight
from symcirc.progress import silent
from symcirc.sheet.expression import Expression
from symcirc.sheet.model import Device
from symcirc.stability.numbers import PI, root_of
from symcirc.transfer.ties import Quotient
from symcirc.witness.network import Arithmetic, complete

#: Polynomials in s and e = s/w_t, over the rationals and with whole coefficients; what a tie with s comes to.
RING = PolyRing("s,e", QQ, lex)
WHOLE = PolyRing("s,e", ZZ, lex)
FIELD = FracField("s", QQ, lex)
S, E = RING.gens
ONE = Quotient(RING.one, RING.one)

Row = dict[int, PolyElement]


@dataclass(frozen=True)
class Loop:
    """Equations that must be solved together and hold an amplifier's law: its determinant is a factor of the whole.

    ``columns`` numbers the unknowns that they are solved for; the other unknowns come from other equations.
    ``laws`` gives for each amplifier, by name, the place of its own law.
    """

    equations: tuple[Equation, ...]
    columns: Mapping[str, int]
    laws: Mapping[str, int]


@dataclass(frozen=True)
class Block:
    """A loop with numbers in it."""

    rows: tuple[Row, ...]
    laws: Mapping[str, int]

    def determinant(self, exchanged: Iterable[str] = ()) -> dict[tuple[int, int], int]:
        """Return the coefficients by (power of s, power of e), plus and minus of some amplifiers exchanged.

        An amplifier's law is V+ - V- = e V_out: to exchange its inputs is to turn the sign of its own e.
        """
        turned = {self.laws[name] for name in exchanged}
        rows = [_turned(row) if k in turned else row for k, row in enumerate(self.rows)]
        size = len(rows)
        found = maximal_minors(rows, size + 1, WHOLE, {size}, silent).get(size, WHOLE.zero)
        return {monomial: int(coefficient) for monomial, coefficient in found.terms()}


def _turned(row: Row) -> Row:
    def turn(entry: PolyElement) -> PolyElement:
        return WHOLE.from_dict({m: -c if m[1] % 2 else c for m, c in entry.items()})

    return {column: turn(entry) for column, entry in row.items()}


def amplifiers(circuit: Circuit) -> list[Device]:
    """Return the amplifiers of a circuit, ideal or not."""
    return [device for device in circuit.devices if device.kind in ("opamp", "amplifier")]


# structure -------------------------------------------------------------------------------------------------------


def loops(circuit: Circuit, setup: Setup) -> list[Loop]:
    """Return the loops of a circuit in which amplifiers stand.

    The equations can be put in order so that each block is solved after the ones before it (the blocks of Dulmage
    and Mendelsohn; Duff, Erisman and Reid, "Direct Methods for Sparse Matrices", 1986, chapter 6, from memory):
    what stands in no loop with an amplifier has no part in how it settles.

    Args:
        circuit: its amplifiers ideal or not; the gain of every one of them is a symbol of its own here.
        setup: what is applied to it; only which drives and shorts there are matters.

    Returns:
        The loops; none where the equations have no solution whatever the numbers are.
    """
    gains = {d.name: gain_symbol(d.name) for d in amplifiers(circuit)}
    devices = tuple(
        replace(d, kind="amplifier", parameters={"gain": gains[d.name]}) if d.name in gains else d
        for d in circuit.devices
    )
    system = build_system(replace(circuit, devices=devices), setup)
    laws = _laws(system, {symbol: name for name, symbol in gains.items()})
    found = []
    for members in _strong_blocks(system):
        inside = {laws[row]: k for k, (row, _) in enumerate(members) if row in laws}
        if inside:
            equations = tuple(system.equations[row] for row, _ in members)
            found.append(Loop(equations, {unknown: k for k, (_, unknown) in enumerate(members)}, inside))
    return found


def _laws(system: System, amplifier: Mapping[str, str]) -> dict[int, str]:
    """Return the amplifier whose law an equation is, by the equation's place; ``amplifier`` is by gain symbol."""
    return {
        row: amplifier[term.weight.symbol]
        for row, equation in enumerate(system.equations)
        for term in equation.terms
        if term.weight.symbol in amplifier
    }


def _strong_blocks(system: System) -> Iterator[list[tuple[int, str]]]:
    """Yield the blocks as pairs of an equation and the unknown that it is solved for; none if they cannot be."""
    held = [
        list(dict.fromkeys(u for term in equation.terms for u in (term.plus, term.minus) if u is not None))
        for equation in system.equations
    ]
    row_of = _matching(held)
    if len(row_of) < len(held):
        return
    uses: nx.DiGraph = nx.DiGraph()
    uses.add_nodes_from(range(len(held)))
    uses.add_edges_from((row, row_of[unknown]) for row, unknowns in enumerate(held) for unknown in unknowns)
    unknown_of = {row: unknown for unknown, row in row_of.items()}
    for component in nx.strongly_connected_components(uses):
        yield [(row, unknown_of[row]) for row in sorted(component)]


def _matching(held: Sequence[Sequence[str]]) -> dict[str, int]:
    """Return as many pairs of an unknown and an equation that holds it as there can be, by unknown.

    Shortest augmenting paths, one equation after another, without recursion; ``networkx`` has the same with it.
    """
    row_of: dict[str, int] = {}
    for start in range(len(held)):
        came_from: dict[str, int] = {}
        waiting = deque([start])
        free = None
        while waiting and free is None:
            row = waiting.popleft()
            for unknown in held[row]:
                if unknown in came_from:
                    continue
                came_from[unknown] = row
                if unknown not in row_of:
                    free = unknown
                    break
                waiting.append(row_of[unknown])
        previous = {row_of[u]: u for u in came_from if u in row_of}
        while free is not None:
            row = came_from[free]
            row_of[free] = row
            free = previous.get(row)
    return row_of


# numbers in ------------------------------------------------------------------------------------------------------


def with_numbers(loop: Loop, known: Mapping[str, Quotient]) -> Block:
    """Return a loop with numbers in it, every amplifier as A = w_t/s = 1/e.

    Args:
        loop: of the circuit.
        known: from :func:`known_quotients`.

    Raises:
        ZeroDivisionError: the admittance of a part divides by zero.
    """
    integrating = {gain_symbol(name): Quotient(RING.one, E) for name in loop.laws}
    every = {**known, **integrating}
    return Block(tuple(_row(equation.terms, loop.columns, every) for equation in loop.equations), loop.laws)


def known_quotients(ties: Mapping[str, Expression], values: Mapping[str, Fraction]) -> dict[str, Quotient]:
    """Return the values of all names as quotients of polynomials in s, most of them plain numbers.

    Raises:
        ZeroDivisionError: a tie divides by zero.
    """
    exact = Arithmetic(_rational, _rational(PI), lambda x: _rational(root_of(x)))
    numbers = {name: _rational(value) for name, value in values.items()}
    return {name: _quotient(value) for name, value in complete(numbers, ties, FIELD.gens[0], exact).items()}


def _rational(value: Fraction) -> Any:
    return QQ(value.numerator, value.denominator)


def _quotient(value: Any) -> Quotient:
    if not isinstance(value, FracElement):
        return Quotient(RING(value), RING.one)
    above, below = ({(power, 0): x for (power,), x in p.items()} for p in (value.numer, value.denom))
    return _divided(RING.from_dict(above), RING.from_dict(below))


def _divided(above: PolyElement, below: PolyElement) -> Quotient:
    """Return a quotient, 1 under the line where that was a number."""
    if not below:
        raise ZeroDivisionError
    return Quotient(above.quo_ground(below.LC), RING.one) if below.is_ground else Quotient(above, below)


def _row(terms: Sequence[Term], columns: Mapping[str, int], known: Mapping[str, Quotient]) -> Row:
    """Return one equation's coefficients times what clears their fractions.

    An amplifier's law becomes e V_out = V+ - V-; a polynomial in s alone adds only roots that stay where they are.
    """
    weights = [_weight(term.weight, known) for term in terms]
    below = list(dict.fromkeys(weight.below for weight in weights if weight.below != 1))
    entries: Row = {}
    for term, weight in zip(terms, weights, strict=True):
        others = (factor for factor in below if factor != weight.below)
        cleared = math.prod(others, start=weight.above.mul_ground(term.weight.sign))
        for unknown, sign in ((term.plus, 1), (term.minus, -1)):
            if unknown is not None and unknown in columns:
                column = columns[unknown]
                entries[column] = entries.get(column, RING.zero) + cleared.mul_ground(sign)
    scale = math.lcm(*(int(x.denominator) for entry in entries.values() for x in entry.values()))
    return {column: _whole(entry, scale) for column, entry in entries.items() if entry}


def _whole(entry: PolyElement, scale: int) -> PolyElement:
    return WHOLE.from_dict({m: int(x.numerator) * (scale // int(x.denominator)) for m, x in entry.items()})


def _weight(weight: Weight, known: Mapping[str, Quotient]) -> Quotient:
    """Return what stands before an unknown, its sign aside."""
    if weight.kind == "one":
        return ONE
    value = known[weight.symbol]
    match weight.kind:
        case "R" | "Z":
            return _divided(value.below, value.above)
        case "C":
            return Quotient(S * value.above, value.below)
        case "L":
            return _divided(value.below, S * value.above)
        case _:
            return value
