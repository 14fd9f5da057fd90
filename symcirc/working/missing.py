"""Which nodes' current equations the answer needs and no line of a working uses.

Every true line that is linear in voltages and currents is a sum of the circuit's own laws, each times a factor, and
in one way only, as the laws are independent. What the answer needs are the laws in the sum that gives the asked
ratio; what a line uses are those in its own sum.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from symcirc.nodal import build_system
from symcirc.sheet.model import GROUND, NodeCurrent, PartCurrent, Voltage
from symcirc.working.context import own_drive
from symcirc.working.elimination import Row, solve
from symcirc.working.field import PRIME
from symcirc.working.forms import CONSTANT
from symcirc.working.residues import DRIVE, Residues, quantity_terms, row_of, short_position


class Laws:
    """The laws of a circuit under one context at one point of the field, the drives being unknowns too."""

    def __init__(self, residues: Residues) -> None:
        self._residues = residues
        circuit, context = residues.posed.circuit, residues.context
        system = build_system(circuit, context.setup)
        labels = [equation.label for equation in system.equations]
        live = {short_position(labels, context.setup, k) for k in context.live}
        self._laws: list[Row[str]] = []
        for position, equation in enumerate(system.equations):
            row = row_of(equation.terms, residues.known)
            if equation.right and not isinstance(own_drive(context.setup), NodeCurrent):
                live.add(position)
            elif equation.right:
                row[DRIVE] = PRIME - 1
            self._laws.append(row)
        self._kept = [k for k in range(len(self._laws)) if k not in live]
        nodes = [node for node in circuit.node_places if node != GROUND]
        self._node_of = dict(enumerate(nodes))  # the current laws stand first, in the nodes' order

    def nodes_in(self, row: Row[str]) -> frozenset[str]:
        """Return the nodes whose current laws a true row is made of; none where it is not made of the laws."""
        wanted = self._in_unknowns(row)
        if wanted is None:
            return frozenset()
        columns = {key for k in self._kept for key in self._laws[k]} | set(wanted)
        transposed: dict[str, Row[int]] = {column: {} for column in columns}
        for k in self._kept:
            for key, value in self._laws[k].items():
                transposed[key][k] = value
        factors = solve(list(transposed.values()), [wanted.get(c, 0) for c in transposed], tuple(self._kept))
        if factors is None:
            return frozenset()
        return frozenset(self._node_of[k] for k, factor in factors.items() if factor and k in self._node_of)

    def _in_unknowns(self, row: Row[str]) -> Row[str] | None:
        """Return a row in quantities as one in the unknowns of the nodal equations; None with a constant in it."""
        result: Row[str] = {}
        residues = self._residues
        for name, factor in row.items():
            quantity = residues.lexicon.circuit_quantity(name)
            if name == CONSTANT or quantity is None:
                return None
            terms = quantity_terms(residues.posed.circuit, residues.context.setup, quantity)
            for key, value in row_of(terms, residues.known).items():
                result[key] = (result.get(key, 0) + factor * value) % PRIME
        return result

    def answer_row(self) -> Row[str]:
        """Return the row that says what the asked ratio is, in the asked quantities."""
        setup = self._residues.context.setup
        over, under = self._residues.quantity(setup.over), self._residues.quantity(setup.under)
        row: Row[str] = {}
        for quantity, factor in ((setup.over, under), (setup.under, -over % PRIME)):
            for name, sign in _names(quantity):
                row[name] = (row.get(name, 0) + sign * factor) % PRIME
        return {name: factor for name, factor in row.items() if factor}


def _names(quantity: Voltage | PartCurrent | NodeCurrent) -> list[tuple[str, int]]:
    match quantity:
        case Voltage(plus=plus, minus=minus):
            return [(f"V_{node}", sign) for node, sign in ((plus, 1), (minus, -1)) if node != GROUND]
        case PartCurrent(part=name):
            return [(f"I_{name}", 1)]
        case NodeCurrent(node=name):
            return [(f"I_{name}", 1)]


def missing_nodes(
    answer: Residues, working: Residues, true_rows: Iterable[tuple[Row[str], bool]], tried: frozenset[str]
) -> tuple[str, ...]:
    """Return the nodes whose current law the answer needs and neither a true row nor a failed try at it uses.

    ``answer`` is under the ask's own drives, ``working`` under those that the rows were judged under; with each row
    it is told whether it was written as an equality of currents. A row of the answer's own quantities that was not
    is the answer itself, and uses a law only where it needs but one.
    """
    asked = Laws(answer)
    row_of_answer = asked.answer_row()
    needed = asked.nodes_in(row_of_answer)
    laws, used = Laws(working), set(tried)
    for row, is_of_currents in true_rows:
        nodes = laws.nodes_in(row)
        if is_of_currents or len(nodes) == 1 or not set(row) <= set(row_of_answer):
            used |= nodes
    return tuple(node for node in answer.posed.circuit.node_places if node in needed - used)


def tried_nodes(parts: frozenset[str], incident: Mapping[str, frozenset[str]]) -> frozenset[str]:
    """Return the node whose parts a failed line names: at least two, and as large a share as at any other node."""
    shares = {node: len(parts & at) / len(at) for node, at in incident.items() if len(parts & at) >= 2}
    best = max(shares.values(), default=0)
    return frozenset(node for node, share in shares.items() if share == best)
