"""What is to be drawn: the bodies of a sheet's circuit, their pins and labels, and the nets that join them."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

from symcirc.circuit import Circuit, Setup, build_circuit, build_setup
from symcirc.circuit.model import CurrentDrive, VoltageDrive
from symcirc.drawing.bodies import Body, Pin
from symcirc.drawing.flow import net_levels
from symcirc.drawing.values import value_text
from symcirc.sheet.model import GROUND, Device, NodeCurrent, Sheet, Voltage

#: The pins of each kind of device by side, upper before lower: (role, number of the node in the role).
LEFT = {
    "opamp": (("minus", 0), ("plus", 0)),
    "conveyor": (("y", 0), ("x", 0)),
    "transformer": (("primary", 0), ("primary", 1)),
}
RIGHT = {
    "opamp": (("drives", 0),),
    "conveyor": (("z", 0),),
    "transformer": (("secondary", 0), ("secondary", 1)),
}
SENSES, DRIVES = (("senses", 0), ("senses", 1)), (("drives", 0), ("drives", 1))


@dataclass(frozen=True)
class Schematic:
    """All bodies of a drawing, the nets whose names must be shown, and the title."""

    title: str
    bodies: tuple[Body, ...]
    shown: tuple[str, ...]
    node_labels: dict[str, str]

    @property
    def nets(self) -> tuple[str, ...]:
        """The nets but ground, in the order in which the bodies name them."""
        return tuple(dict.fromkeys(p.net for b in self.bodies for p in b.pins if p.net != GROUND))

    @cached_property
    def blocks(self) -> dict[str, list[int]]:
        """The numbers of the bodies inside every placed block, by the block's label."""
        found: dict[str, list[int]] = {}
        for number, body in enumerate(self.bodies):
            words = body.label.split(".")[:-1]
            for depth in range(1, len(words) + 1):
                found.setdefault(".".join(words[:depth]), []).append(number)
        return found


def build_schematic(sheet: Sheet) -> Schematic:
    """Return what is to be drawn of a sheet: its parts, the drives of its asks, and the asked nodes.

    The first ask's drive is drawn as an ideal source, and so is the voltage drive of every other ask; a current
    drive of another ask, dead while the first is live, is open and leaves only its node's name. A node that is
    asked for becomes an output terminal if it is the last one over a line along the signal path, else it is named.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> [(body.name, body.kind) for body in build_schematic(sheet).bodies]
    [('R1', 'R'), ('C1', 'C'), ('V_in', 'voltage'), ('out', 'output')]
    """
    circuit = build_circuit(sheet)
    setups = [build_setup(circuit, sheet.asks, ask) for ask in sheet.asks]
    bodies = [*_parts(circuit, sheet), *_drives(setups)]
    shown = tuple(dict.fromkeys(_asked(setups)))
    bodies += _terminals(sheet, bodies)
    labelled = {pin.net for body in bodies if body.is_terminal for pin in body.pins}
    return Schematic(
        sheet.title, tuple(bodies), tuple(n for n in shown if n not in labelled), dict(sheet.node_labels)
    )


def _parts(circuit: Circuit, sheet: Sheet) -> Iterator[Body]:
    for part in circuit.parts:
        pins = (Pin("first", part.first),), (Pin("second", part.second),)
        yield Body(part.name, part.label, value_text(sheet, part.name), part.kind, *pins)
    for device in circuit.devices:
        yield _device(sheet, device)


def _device(sheet: Sheet, device: Device) -> Body:
    def pins(layout: tuple[tuple[str, int], ...]) -> tuple[Pin, ...]:
        return tuple(
            Pin(
                role if len(device.terminals[role]) == 1 else f"{role} {'pm'[number]}",
                device.terminals[role][number],
            )
            for role, number in layout
        )

    words = {word: value_text(sheet, name) for word, name in device.parameters.items()}
    value = ", ".join(f"{word} {text}" for word, text in words.items() if text)
    if device.kind == "conveyor":
        value = "+" if device.sign > 0 else "\N{MINUS SIGN}"
    left, right = LEFT.get(device.kind, SENSES), RIGHT.get(device.kind, DRIVES)
    return Body(device.name, device.label, value, device.kind, pins(left), pins(right))


def _drives(setups: list[Setup]) -> Iterator[Body]:
    drawn: set[frozenset[str]] = set()
    for number, setup in enumerate(setups):
        drive = setup.drive
        pair = frozenset(drive.pair)
        if pair in drawn:
            continue
        match drive:
            case VoltageDrive(plus=plus, minus=minus):
                drawn.add(pair)
                name = f"V_{plus}" if minus == GROUND else f"V_{plus} - V_{minus}"
                yield Body(name, name, "", "voltage", (Pin("plus", plus),), (Pin("minus", minus),))
            case CurrentDrive(node=node) if number == 0:
                drawn.add(pair)
                yield Body(
                    f"I_{node}", f"I_{node}", "", "current", (Pin("plus", node),), (Pin("minus", GROUND),)
                )


def _asked(setups: list[Setup]) -> Iterator[str]:
    for setup in setups:
        for quantity in (setup.over, setup.under):
            match quantity:
                case Voltage(plus=plus, minus=minus):
                    yield from (node for node in (plus, minus) if node != GROUND)
                case NodeCurrent(node=node):
                    yield node
        for pair in setup.shorts:
            yield from (node for node in pair if node != GROUND)


def _terminals(sheet: Sheet, bodies: list[Body]) -> Iterator[Body]:
    """Yield the output, and an open terminal for every node that would hang otherwise."""
    driven = {pin.net for body in bodies if body.is_drive for pin in body.pins}
    level = net_levels(bodies)
    overs = [ask.over.plus for ask in sheet.asks if isinstance(ask.over, Voltage)]
    output = max((net for net in overs if net not in driven), key=lambda net: level[net], default=None)
    if output is not None:
        yield Body(output, sheet.node_labels[output], "", "output", (Pin("at", output),), ())
    ends = Counter(pin.net for body in bodies for pin in body.pins)
    outputs = {pin.net for body in bodies if body.is_device for pin in body.right}
    for node in sorted(ends):
        if node != GROUND and node != output and ends[node] == 1:
            label = sheet.node_labels[node]
            if node in outputs:
                yield Body(node, label, "", "output", (Pin("at", node),), ())
            else:
                yield Body(node, label, "", "input", (), (Pin("at", node),))
