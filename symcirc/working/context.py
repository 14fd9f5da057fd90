"""Under which drives a line is judged."""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.circuit.model import CurrentDrive, LoopDrive, Setup, VoltageDrive
from symcirc.derivation import Posed
from symcirc.sheet.model import GROUND, NodeCurrent, Quantity, Voltage


@dataclass(frozen=True)
class Context:
    """A setup of the circuit, and which of its shorts are live drives of their own instead.

    ``live`` holds positions in ``setup.shorts``.
    """

    setup: Setup
    live: tuple[int, ...]

    @property
    def drives(self) -> tuple[Quantity, ...]:
        """What the drives set: the setup's own first, then the live ones."""
        place = self.setup.place
        pairs = [self.setup.shorts[k] for k in self.live]
        return (own_drive(self.setup), *(Voltage(plus, minus, place) for plus, minus in pairs))


def own_drive(setup: Setup) -> Quantity:
    """Return the quantity that a setup's drive sets to 1."""
    drive = setup.drive
    match drive:
        case VoltageDrive():
            return Voltage(drive.plus, drive.minus, setup.place)
        case CurrentDrive():
            return NodeCurrent(drive.node, setup.place)
        case LoopDrive():
            return Voltage(drive.node, GROUND, setup.place)


def delivering_nodes(posed: Posed) -> frozenset[str]:
    """Return the nodes into which some ask's drive, or a short in its place, delivers a current."""
    pairs = [pair for setup in posed.setups.values() for pair in (setup.drive.pair, *setup.shorts)]
    return frozenset(node for pair in pairs for node in pair)


def first_context(posed: Posed) -> Context:
    """Return the first ask's drive with the voltage drives of the other asks at other nodes live too.

    A node that another ask drives stays live although the first ask shorts it: its ``with`` is for its own ratio.
    """
    asks = posed.sheet.asks
    setup = posed.setups[asks[0].name]
    others = [posed.setups[ask.name].drive for ask in asks[1:]]
    pairs = {drive.pair for drive in others if isinstance(drive, VoltageDrive)}
    return Context(setup, tuple(k for k, pair in enumerate(setup.shorts) if pair in pairs))


def ask_context(posed: Posed, name: str) -> Context:
    """Return an ask's own drives, all others dead, and its ``with``."""
    return Context(posed.setups[name], ())
