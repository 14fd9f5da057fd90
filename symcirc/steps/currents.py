"""Names for the currents of the nodal equations, as a working can write them.

What a controlled source senses is written by what it drives, and what a source delivers by the node into which it
does; where no one node says it (a source between two nodes that others drive too) the current stays without a name.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import replace

from symcirc.circuit.model import Circuit, CurrentDrive, Setup, VoltageDrive
from symcirc.nodal import build_system
from symcirc.nodal.equations import ONE, Term, Weight, voltage
from symcirc.sheet.model import GROUND, NodeCurrent

#: What the nodal equations call the current of a current drive.
DRIVE = "drive"
#: Stands before an unknown of the nodal equations that no name of a working stands for.
UNNAMED = "?"


def opposite(terms: Iterable[Term]) -> tuple[Term, ...]:
    """Return minus a sum of terms."""
    return tuple(Term(term.weight.negative(), term.plus, term.minus) for term in terms)


def names_of_currents(circuit: Circuit, setup: Setup) -> dict[str, Term]:
    """Return what each unknown current of the nodal equations is in named quantities, where it is not one itself."""
    names: dict[str, Term] = {}
    if isinstance(setup.drive, CurrentDrive):
        names[DRIVE] = Term(ONE, f"I_{setup.drive.node}")
    for device in circuit.devices:
        sensed = f"I_{device.name}.senses"
        if device.kind == "cccs":
            names[sensed] = Term(Weight(1, "R", device.parameters["gain"]), f"I_{device.name}")
        elif device.kind == "ccvs":
            names[sensed] = _across(Weight(1, "R", device.parameters["rm"]), *device.terminals["drives"])
    delivered: dict[str, Term] = {}
    for node, terms in _delivered(circuit, setup):
        for term in terms:
            delivered.setdefault(term.plus, Term(ONE, UNNAMED + term.plus))
            if len(terms) == 1 and delivered[term.plus].plus.startswith(UNNAMED):
                delivered[term.plus] = Term(term.weight, f"I_{node}")
    return names | delivered


def _delivered(circuit: Circuit, setup: Setup) -> Iterator[tuple[str, tuple[Term, ...]]]:
    """Yield the nodes at which sources stand, those first whose currents are asked, and what is delivered there."""
    pairs = [*setup.shorts, *([setup.drive.pair] if isinstance(setup.drive, VoltageDrive) else [])]
    asked = [q.node for q in (setup.over, setup.under) if isinstance(q, NodeCurrent)]
    at = dict.fromkeys(node for pair in pairs for node in pair if node != GROUND)
    for node in dict.fromkeys([*(node for node in asked if node in at), *at]):
        yield node, build_system(circuit, replace(setup, over=NodeCurrent(node, setup.place))).over


def _across(weight: Weight, plus: str, minus: str) -> Term:
    if minus == GROUND:
        return Term(weight, voltage(plus))
    if plus == GROUND:
        return Term(weight.negative(), voltage(minus))
    return Term(weight, voltage(plus), voltage(minus))


def renamed(term: Term, names: Mapping[str, Term]) -> Term:
    """Return a term with the name of its current put in."""
    known = names.get(term.plus)
    if known is None:
        return term
    one, two = term.weight, known.weight
    sign = one.sign * two.sign
    if "one" in (one.kind, two.kind):
        outer = two if one.kind == "one" else one
        return Term(Weight(sign, outer.kind, outer.symbol), known.plus, known.minus)
    assert one.symbol == two.symbol  # a source's gain times what it drives over that gain
    return Term(Weight(sign, "one", ""), known.plus, known.minus)


def summed(terms: Iterable[Term]) -> tuple[Term, ...]:
    """Return terms without those that cancel each other."""
    kept: list[Term] = []
    for term in terms:
        opposite = Term(term.weight.negative(), term.plus, term.minus)
        if opposite in kept:
            kept.remove(opposite)
        else:
            kept.append(term)
    return tuple(kept)
