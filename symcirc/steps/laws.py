"""The laws of a circuit under one ask, in quantities that have a name in a working.

The nodal equations hold currents that no name stands for: what a controlled source senses, what a source between
two nodes delivers. The first are written by what they drive; the second cancel when the current laws of both nodes
are added up.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

from symcirc.circuit.model import Circuit, CurrentDrive, Setup
from symcirc.nodal import System, build_system
from symcirc.nodal.equations import MINUS_ONE, ONE, Equation, Term, voltage
from symcirc.sheet.model import GROUND, Device, PartCurrent, Quantity, Voltage
from symcirc.steps.currents import DRIVE, UNNAMED, names_of_currents, opposite, renamed, summed
from symcirc.steps.model import Kind

#: How the current law of a node is named.
AT = "the currents at "


@dataclass(frozen=True)
class Law:
    """``sum of terms = 0``: ``short`` names it, as in "the currents at a"; ``words`` is its sentence, if it needs one.

    A law of kind ``current`` or ``device`` says what its first term is.
    """

    kind: Kind
    short: str
    words: str
    terms: tuple[Term, ...]

    @property
    def equal(self) -> tuple[str, str | None] | None:
        """The two voltages that the law says are equal, the second None for 0; or None for another law."""
        if len(self.terms) != 1 or self.terms[0].weight.kind != "one":
            return None
        return self.terms[0].plus, self.terms[0].minus


def laws_of(circuit: Circuit, setup: Setup) -> tuple[Law, ...]:
    """Return the laws of a circuit under one ask, the drive's own left out, and those of the asked currents."""
    system = build_system(circuit, setup)
    names = names_of_currents(circuit, setup)
    laws = [*_node_laws(circuit, setup, system), *_device_laws(circuit, setup, system)]
    laws = [replace(law, terms=summed(renamed(term, names) for term in law.terms)) for law in laws]
    for quantity in dict.fromkeys((setup.over, setup.under)):
        laws += _asked(circuit, setup, quantity, names)
    return tuple(_without_unnamed([law for law in laws if law.terms]))


# the laws as the nodal equations have them --------------------------------------------------------------------


def _node_laws(circuit: Circuit, setup: Setup, system: System) -> list[Law]:
    nodes = [node for node in circuit.node_places if node != GROUND]
    laws = []
    for node, equation in zip(nodes, system.equations, strict=False):  # the nodes' equations come first
        terms = equation.terms
        if isinstance(setup.drive, CurrentDrive) and node == setup.drive.node:
            terms = (*terms, Term(MINUS_ONE, DRIVE))
        laws.append(Law("law", AT + circuit.node_labels[node], "", terms))
    return laws


def _device_laws(circuit: Circuit, setup: Setup, system: System) -> list[Law]:
    devices = {device.label: device for device in circuit.devices}
    count = sum(node != GROUND for node in circuit.node_places)
    shorts = iter(setup.shorts)
    laws = []
    for equation in system.equations[count:]:
        if equation.right:
            continue  # the drive's own
        device = devices.get(equation.label.rsplit(": ", 1)[0])
        laws.append(_short_law(circuit, next(shorts), equation) if device is None else _law(device, equation))
    return laws


def _short_law(circuit: Circuit, pair: tuple[str, str], equation: Equation) -> Law:
    first, second = (circuit.node_labels.get(node, node) for node in pair)
    if pair[1] == GROUND:
        words, short = f"Node {first} is shorted to ground here.", f"the short at {first}"
    else:
        words, short = f"Nodes {first} and {second} are shorted here.", f"the short of {first} and {second}"
    return Law("dead", short, words, equation.terms)


def _law(device: Device, equation: Equation) -> Law:
    if device.kind == "opamp":
        return _ideal_amplifier(device)
    rule = "rule" if device.kind == "conveyor" else "law"
    return Law("device", f"the {rule} of {device.label}", _device_words(device, equation), equation.terms)


def _ideal_amplifier(device: Device) -> Law:
    (plus,), (minus,) = device.terminals["plus"], device.terminals["minus"]
    held, at = (plus, minus) if minus == GROUND else (minus, plus)
    target = None if at == GROUND else voltage(at)
    words = f"{device.label} holds {voltage(held)} at {target or '0'} and takes no current there."
    return Law("amplifier", f"the rule of {device.label}", words, (Term(ONE, voltage(held), target),))


def _device_words(device: Device, equation: Equation) -> str:
    label = device.label
    if equation.label.endswith("zero volts across what it senses"):
        over = device.parameters["gain" if device.kind == "cccs" else "rm"]
        return f"{label} senses without a voltage drop a current that is what it drives over {over}."
    match device.kind:
        case "amplifier":
            return f"{label} drives its gain times the difference of its inputs, which take no current."
        case "transformer":
            return f"{label} transforms the voltage; its secondary carries minus the ratio times I_{device.name}."
        case "conveyor":
            x, y = (voltage(device.terminals[role][0]) for role in ("x", "y"))
            return f"{label} holds {x} at {y}, takes no current at y, and passes the current into x on to z."
        case _:
            return f"{label} drives its gain times the voltage that it senses."


# asked currents, and currents without a name ---------------------------------------------------------------------


def _asked(circuit: Circuit, setup: Setup, quantity: Quantity, names: Mapping[str, Term]) -> list[Law]:
    """Return the law of an asked current that is no unknown itself: what it is in terms of those."""
    if isinstance(quantity, Voltage):
        return []
    own = quantity.part if isinstance(quantity, PartCurrent) else quantity.node
    itself = Term(ONE, f"I_{own}")
    terms = tuple(renamed(term, names) for term in build_system(circuit, replace(setup, over=quantity)).over)
    if terms == (itself,):
        return []
    labels = {part.name: part.label for part in circuit.parts}
    labels |= {device.name: device.label for device in circuit.devices}
    short = f"the current of {labels[own]}" if own in labels else ""
    return [Law("current", short or "the drive", "", (itself, *opposite(terms)))]


def _without_unnamed(laws: list[Law]) -> list[Law]:
    """Return laws that hold no unnamed current: where two do, their sum or difference stands for them."""
    while True:
        unnamed = next((t.plus for law in laws for t in law.terms if t.plus.startswith(UNNAMED)), None)
        if unnamed is None:
            return laws
        holding = [law for law in laws if any(term.plus == unnamed for term in law.terms)]
        first = holding[0]
        rest = [law for law in laws if law not in holding]
        laws = [*rest, *(_joined(law, first, unnamed) for law in holding[1:])]


def _joined(law: Law, other: Law, unnamed: str) -> Law:
    """Return the sum of two current laws, or their difference, in which an unnamed current cancels."""
    one, two = (next(t.weight.sign for t in either.terms if t.plus == unnamed) for either in (law, other))
    terms = summed((*law.terms, *(other.terms if one != two else opposite(other.terms))))
    at = [either.short.removeprefix(AT) for either in (other, law) if either.kind == "law"]
    return Law("law", AT + " and ".join(at), "", terms)
