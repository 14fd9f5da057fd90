"""What is asked: quantities and drives with their names looked up."""

from __future__ import annotations

from collections.abc import Mapping

from symcirc.complaints import Complaint, Place, choices, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.expand import Flat, refuse_port
from symcirc.sheet.expression import Name
from symcirc.sheet.model import (
    GROUND,
    Ask,
    Dead,
    NodeCurrent,
    PartCurrent,
    Quantity,
    Symbol,
    Voltage,
)
from symcirc.sheet.reserved import check_name


class Lookup:
    """The names that a quantity may hold."""

    def __init__(self, flat: Flat) -> None:
        self.nodes = {name: place for name, place in flat.node_places.items() if name != GROUND}
        self.parts = {part.name for part in flat.parts}
        self.devices = {device.name: device for device in flat.devices}
        self.port_names = flat.port_names

    def node(self, text: str, place: Place) -> str:
        """Return the node of that name, which must be there and not be ``gnd``."""
        if text == GROUND:
            raise Complaint(
                place,
                "`gnd` is the reference node: its voltage is 0 and nothing can drive it",
                "name another node",
            )
        if text in self.nodes:
            return text
        if text in self.parts or text in self.devices:
            raise Complaint(place, f"`{text}` is a part, and a node is meant here", "name one of its nodes")
        if text in self.port_names:
            raise refuse_port(text, self.port_names[text], place)
        hint = nearest(text, self.nodes)
        raise Complaint(place, f"there is no node `{text}`", hint or self._known_nodes())

    def _known_nodes(self) -> str:
        return choices(sorted(self.nodes)) if self.nodes else "draw the circuit, as in: in -- R1 -- out"

    def quantity(self, name: Name) -> Quantity:
        """Return the quantity that ``V_n`` or ``I_n`` names."""
        prefix, text = name.text[:2], name.text[2:]
        if prefix == "I_" and (text in self.parts or text in self.devices):
            return PartCurrent(text, name.place)
        if prefix == "V_":
            return Voltage(self.node(text, name.place), GROUND, name.place)
        if text in self.nodes or text in self.port_names or text == GROUND:
            return NodeCurrent(self.node(text, name.place), name.place)
        hint = nearest(text, [*self.parts, *self.devices, *self.nodes])
        raise Complaint(
            name.place,
            f"there is no part or node `{text}`",
            hint or "write I_ and the name of a part or a node",
        )


def read_asks(lines: list[st.AskLine], lookup: Lookup, symbols: Mapping[str, Symbol]) -> tuple[Ask, ...]:
    """Return the asks of a sheet.

    Raises Complaint for a name used twice, an unknown node, a drive that is none, and a loop gain without
    what it needs.
    """
    asks: dict[str, Ask] = {}
    for line in lines:
        name = line.name
        check_name(name.text, name.place)
        if name.text in asks:
            first = asks[name.text].place.line
            raise Complaint(
                name.place,
                f"`{name.text}` is asked twice: it is on line {first} already",
                "give one another name",
            )
        if name.text in symbols or name.text in lookup.devices:
            raise Complaint(
                name.place, f"`{name.text}` is a part or a parameter already", "give the ask another name"
            )
        match line.what:
            case st.Loop(amplifier=amplifier):
                asks[name.text] = _read_loop(line, amplifier, lookup, symbols)
            case st.Ratio():
                asks[name.text] = _read_ratio(line, line.what, lookup)
    return tuple(asks.values())


def _read_ratio(line: st.AskLine, ratio: st.Ratio, lookup: Lookup) -> Ask:
    over, under = _read_quantity(ratio.over, lookup), _read_quantity(ratio.under, lookup)
    driven = lookup.node(line.driven_at.text, line.driven_at.place) if line.driven_at else None
    if isinstance(under, PartCurrent) and driven is None:
        raise Complaint(
            under.place,
            f"the current through `{under.part}` cannot be the drive",
            "put a node's voltage or current under the line, or add `driven at NODE`",
        )
    return Ask(line.name.text, over, under, None, _dead(line, lookup), driven, line.name.place)


def _read_quantity(raw: st.RawQuantity, lookup: Lookup) -> Quantity:
    if raw.second is None:
        return lookup.quantity(raw.first)
    for name in (raw.first, raw.second):
        if not name.text.startswith("V_"):
            raise Complaint(name.place, "a difference is of two voltages", "write it as (V_a - V_b)")
    plus, minus = (lookup.node(name.text[2:], name.place) for name in (raw.first, raw.second))
    if plus == minus:
        raise Complaint(
            raw.place, "this difference is zero: both nodes are the same", "name two different nodes"
        )
    return Voltage(plus, minus, raw.place)


def _dead(line: st.AskLine, lookup: Lookup) -> tuple[Dead, ...]:
    dead = []
    for condition in line.conditions:
        name = condition.quantity
        if not condition.is_zero:
            raise Complaint(
                condition.place,
                "a drive can only be set to 0 here",
                f"write with {name.text} = 0, or leave it out",
            )
        node = lookup.node(name.text[2:], name.place)
        dead.append(Dead(name.text[0], node, condition.place))
    return tuple(dead)


def _read_loop(line: st.AskLine, name: Name, lookup: Lookup, symbols: Mapping[str, Symbol]) -> Ask:
    device = lookup.devices.get(name.text)
    if device is None or device.kind != "opamp":
        amplifiers = [d.name for d in lookup.devices.values() if d.kind == "opamp"]
        known = choices(amplifiers) if amplifiers else "add one, or ask a ratio"
        raise Complaint(
            name.place, f"there is no opamp `{name.text}`", nearest(name.text, amplifiers) or known
        )
    if not symbols.keys() & {f"{name.text}_gain", f"{name.text}_gbw"}:
        raise Complaint(
            name.place,
            f"the loop gain of `{name.text}` needs its gain or its gbw",
            f"add to its line gain 100 dB or gbw 1 MHz, or keep a symbol: choose {name.text}_gain",
        )
    if line.driven_at:
        raise Complaint(
            line.driven_at.place, "a loop gain is driven at the amplifier's output", "remove `driven at`"
        )
    if not line.conditions:
        raise Complaint(
            name.place,
            "a loop gain must say what stands at the input, as the source's impedance matters",
            "add `with V_in = 0` for an ideal source, or `with I_in = 0` for an open input",
        )
    return Ask(line.name.text, None, None, name.text, _dead(line, lookup), None, line.name.place)
