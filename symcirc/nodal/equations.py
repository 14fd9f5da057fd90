"""Symbolic nodal equations: the current law at every node, and the law of every source and device.

The unknowns are the node voltages ``V_n`` and the currents of the branches whose voltage is set (drives, shorts,
amplifier outputs and the like): modified nodal analysis after Ho, Ruehli and Brennan, "The modified nodal approach
to network analysis", IEEE Trans. Circuits and Systems 22 (1975), from memory.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable
from dataclasses import dataclass

from symcirc.circuit.model import Circuit, CurrentDrive, Setup, VoltageDrive
from symcirc.sheet.model import GROUND, Device, NodeCurrent, Part, PartCurrent, Quantity, Voltage


@dataclass(frozen=True)
class Weight:
    """What stands before an unknown: ``sign`` times a symbol that enters in the way of its kind.

    ``kind`` is R or Z (1/symbol), C (s*symbol), L (1/(s*symbol)), Y or gain (the symbol itself), or one (no
    symbol).
    """

    sign: int
    kind: str
    symbol: str

    def negative(self) -> Weight:
        """Return minus this weight."""
        return Weight(-self.sign, self.kind, self.symbol)


ONE = Weight(1, "one", "")
MINUS_ONE = Weight(-1, "one", "")


@dataclass(frozen=True)
class Term:
    """A weight times an unknown, or times the difference of two: ``weight * (plus - minus)``."""

    weight: Weight
    plus: str
    minus: str | None = None


@dataclass(frozen=True)
class Equation:
    """``sum of terms = right``, where ``right`` is 1 in the one equation that the drive stands in, else 0."""

    label: str
    terms: tuple[Term, ...]
    right: int = 0


@dataclass(frozen=True)
class System:
    """The equations of one ask. ``over`` and ``under`` are the asked quantities as terms in the unknowns."""

    setup: Setup
    unknowns: tuple[str, ...]
    equations: tuple[Equation, ...]
    over: tuple[Term, ...]
    under: tuple[Term, ...]


def voltage(node: str) -> str:
    """Return the unknown for a node's voltage."""
    return f"V_{node}"


def current(name: str, role: str = "") -> str:
    """Return the unknown for the current of a branch."""
    return f"I_{name}.{role}" if role else f"I_{name}"


def build_system(circuit: Circuit, setup: Setup) -> System:
    """Return the nodal equations of a circuit under one ask's drive.

    There are as many equations as unknowns; each node but ``gnd`` has its current law, currents that leave the
    node counting positive.
    """
    writer = _Writer(circuit, setup)
    return writer.system()


class _Writer:
    """Gathers the terms of every node's current law while it goes through the parts and devices."""

    def __init__(self, circuit: Circuit, setup: Setup) -> None:
        self.circuit = circuit
        self.setup = setup
        self.leaving: dict[str, list[Term]] = {node: [] for node in circuit.node_places if node != GROUND}
        self.laws: list[Equation] = []
        self.currents: list[str] = []
        self.delivered: dict[str, list[Term]] = defaultdict(list)
        self.part_currents: dict[str, tuple[Term, ...]] = {}

    def system(self) -> System:
        for part in self.circuit.parts:
            self.add_part(part)
        for device in self.circuit.devices:
            self.add_device(device)
        self.add_drives()
        nodes = tuple(self.leaving)
        equations = [
            Equation(f"currents at {self.circuit.node_labels[n]}", tuple(self.leaving[n])) for n in nodes
        ]
        if isinstance(self.setup.drive, CurrentDrive):
            position = nodes.index(self.setup.drive.node)
            equations[position] = Equation(equations[position].label, equations[position].terms, 1)
        unknowns = (*(voltage(n) for n in nodes), *self.currents)
        over, under = self.asked(self.setup.over), self.asked(self.setup.under)
        return System(self.setup, unknowns, (*equations, *self.laws), over, under)

    # what a current through a branch does -----------------------------------------------------------------------

    def flows(self, terms: Iterable[Term], first: str, second: str) -> None:
        """A current of these terms leaves ``first`` and enters ``second``."""
        for term in terms:
            if first != GROUND:
                self.leaving[first].append(term)
            if second != GROUND:
                self.leaving[second].append(Term(term.weight.negative(), term.plus, term.minus))

    def branch_current(self, name: str, first: str, second: str) -> Term:
        """Declare an unknown current that flows through a branch from ``first`` to ``second``."""
        self.currents.append(name)
        term = Term(ONE, name)
        self.flows([term], first, second)
        return term

    @staticmethod
    def across(weight: Weight, plus: str, minus: str) -> tuple[Term, ...]:
        """Return the terms of ``weight * (V_plus - V_minus)``, ``gnd`` left out."""
        if plus == minus:
            return ()
        if minus == GROUND:
            return (Term(weight, voltage(plus)),)
        if plus == GROUND:
            return (Term(weight.negative(), voltage(minus)),)
        return (Term(weight, voltage(plus), voltage(minus)),)

    # parts ------------------------------------------------------------------------------------------------------

    def add_part(self, part: Part) -> None:
        through = self.across(Weight(1, part.kind, part.name), part.first, part.second)
        self.part_currents[part.name] = through
        if part.first != GROUND:
            self.leaving[part.first] += through
        if part.second != GROUND:
            self.leaving[part.second] += self.across(Weight(1, part.kind, part.name), part.second, part.first)

    def add_device(self, device: Device) -> None:
        getattr(self, f"add_{device.kind}")(device)

    def law(self, device: Device, what: str, terms: Iterable[Term]) -> None:
        self.laws.append(Equation(f"{device.label}: {what}", tuple(terms)))

    def add_opamp(self, device: Device) -> None:
        (plus,), (minus,), (out,) = (device.terminals[role] for role in ("plus", "minus", "drives"))
        self.output(device, out)
        self.law(device, "V+ = V-", self.across(ONE, plus, minus))

    def add_amplifier(self, device: Device) -> None:
        (plus,), (minus,), (out,) = (device.terminals[role] for role in ("plus", "minus", "drives"))
        self.output(device, out)
        gain = Weight(-1, "gain", device.parameters["gain"])
        self.law(
            device, "V_out = A (V+ - V-)", (*self.across(ONE, out, GROUND), *self.across(gain, plus, minus))
        )

    def output(self, device: Device, node: str) -> None:
        self.part_currents[device.name] = (self.branch_current(current(device.name), GROUND, node),)

    def add_vcvs(self, device: Device) -> None:
        senses, drives = device.terminals["senses"], device.terminals["drives"]
        self.part_currents[device.name] = (self.branch_current(current(device.name), *drives),)
        gain = Weight(-1, "gain", device.parameters["gain"])
        self.law(device, "driven voltage", (*self.across(ONE, *drives), *self.across(gain, *senses)))

    def add_vccs(self, device: Device) -> None:
        driven = self.across(Weight(1, "gain", device.parameters["gm"]), *device.terminals["senses"])
        self.flows(driven, *device.terminals["drives"])
        self.part_currents[device.name] = driven

    def add_cccs(self, device: Device) -> None:
        name = current(device.name, "senses")
        self.branch_current(name, *device.terminals["senses"])
        self.law(device, "zero volts across what it senses", self.across(ONE, *device.terminals["senses"]))
        driven = (Term(Weight(1, "gain", device.parameters["gain"]), name),)
        self.flows(driven, *device.terminals["drives"])
        self.part_currents[device.name] = driven

    def add_ccvs(self, device: Device) -> None:
        name = current(device.name, "senses")
        self.branch_current(name, *device.terminals["senses"])
        self.law(device, "zero volts across what it senses", self.across(ONE, *device.terminals["senses"]))
        self.part_currents[device.name] = (
            self.branch_current(current(device.name), *device.terminals["drives"]),
        )
        driven = Term(Weight(-1, "gain", device.parameters["rm"]), name)
        self.law(device, "driven voltage", (*self.across(ONE, *device.terminals["drives"]), driven))

    def add_transformer(self, device: Device) -> None:
        primary, secondary = device.terminals["primary"], device.terminals["secondary"]
        name = current(device.name)
        self.part_currents[device.name] = (self.branch_current(name, *primary),)
        ratio = Weight(-1, "gain", device.parameters["ratio"])
        self.flows([Term(ratio, name)], *secondary)  # the secondary's current is -n times the primary's
        self.law(device, "turns", (*self.across(ONE, *primary), *self.across(ratio, *secondary)))

    def add_conveyor(self, device: Device) -> None:
        (x,), (y,), (z,) = (device.terminals[role] for role in ("x", "y", "z"))
        into_x = self.branch_current(current(device.name), x, GROUND)
        self.part_currents[device.name] = (into_x,)
        self.flows([Term(ONE if device.sign > 0 else MINUS_ONE, into_x.plus)], z, GROUND)
        self.law(device, "V_x = V_y", self.across(ONE, x, y))

    # drives and what is asked -----------------------------------------------------------------------------------

    def add_drives(self) -> None:
        """Add shorts and the drive. Where the live drive is at a node, what is delivered there is its own current."""
        drive = self.setup.drive
        for plus, minus in self.setup.shorts:
            self.deliver(self.source(plus, minus, f"{plus} is shorted", 0), plus, minus)
        if isinstance(drive, VoltageDrive):
            delivered = self.source(drive.plus, drive.minus, f"the drive at {drive.plus}", 1)
            self.delivered |= {drive.plus: [], drive.minus: []}
            self.deliver(delivered, drive.plus, drive.minus)
        elif isinstance(drive, CurrentDrive):
            self.delivered[drive.node] = [Term(ONE, "drive")]
        else:
            self.drive_loop(drive.amplifier, drive.node)

    def source(self, plus: str, minus: str, label: str, value: int) -> Term:
        """An ideal source of ``value`` volts; return the current that it delivers into ``plus``, an unknown."""
        name = current(plus)
        delivered = self.branch_current(current(plus, minus) if name in self.currents else name, minus, plus)
        self.laws.append(Equation(label, self.across(ONE, plus, minus), value))
        return delivered

    def deliver(self, delivered: Term, plus: str, minus: str) -> None:
        """Note a current that a source delivers into ``plus`` and takes from ``minus``."""
        self.delivered[plus].append(delivered)
        self.delivered[minus].append(Term(delivered.weight.negative(), delivered.plus))

    def drive_loop(self, amplifier: str, node: str) -> None:
        """The amplifier's own law gives way to the drive at its output."""
        device = next(d for d in self.circuit.devices if d.name == amplifier)
        prefix = f"{device.label}: "
        position = next(i for i, law in enumerate(self.laws) if law.label.startswith(prefix))
        self.laws[position] = Equation(f"{prefix}its output is the drive", self.across(ONE, node, GROUND), 1)

    def asked(self, quantity: Quantity) -> tuple[Term, ...]:
        match quantity:
            case Voltage(plus=plus, minus=minus):
                return self.across(ONE, plus, minus)
            case PartCurrent(part=part):
                return self.part_currents[part]
            case NodeCurrent(node=node):
                return tuple(self.delivered[node])
