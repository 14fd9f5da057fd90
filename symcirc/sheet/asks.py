"""What is asked: quantities and drives with their names looked up."""

from __future__ import annotations

from collections.abc import Mapping

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.expression import Name
from symcirc.sheet.fixes import check_name
from symcirc.sheet.model import (
    GROUND,
    Ask,
    Dead,
    Device,
    NodeCurrent,
    Part,
    PartCurrent,
    Quantity,
    Symbol,
    Voltage,
)


class Lookup:
    """The names that a quantity may hold."""

    def __init__(
        self, nodes: Mapping[str, Place], parts: tuple[Part, ...], devices: tuple[Device, ...]
    ) -> None:
        self.nodes = nodes
        self.parts = {part.name for part in parts}
        self.devices = {device.name: device for device in devices}

    def node(self, text: str, place: Place) -> str:
        """Return the node of that name, which must be there and not be ``gnd``."""
        if text == GROUND:
            raise Complaint(
                place,
                "`gnd` is the reference node: its voltage is 0 and nothing can drive it",
                "name another node",
            )
        if text in self.parts or text in self.devices:
            raise Complaint(place, f"`{text}` is a part, and a node is meant here", "name one of its nodes")
        if text not in self.nodes:
            hint = nearest(text, [n for n in self.nodes if n != GROUND])
            known = ", ".join(sorted(n for n in self.nodes if n != GROUND)[:12])
            raise Complaint(place, f"there is no node `{text}`", hint or f"the nodes are: {known}")
        return text

    def quantity(self, name: Name) -> Quantity:
        """Return the quantity that ``V_n`` or ``I_n`` names."""
        text = name.text[2:]
        if name.text.startswith("V_"):
            return Voltage(self.node(text, name.place), GROUND, name.place)
        if text in self.parts or text in self.devices:
            return PartCurrent(text, name.place)
        if text in self.nodes:
            return NodeCurrent(self.node(text, name.place), name.place)
        hint = nearest(text, [*self.parts, *self.devices, *(n for n in self.nodes if n != GROUND)])
        raise Complaint(
            name.place,
            f"there is no part or node `{text}`",
            hint or "write I_ and the name of a part or a node",
        )


def read_asks(
    lines: list[st.AskLine], lookup: Lookup, symbols: Mapping[str, Symbol], declared: set[str]
) -> tuple[Ask, ...]:
    """Return the asks of a sheet; ``declared`` are the devices' parameters that have a value or a symbol.

    Raises Complaint for a name used twice, an unknown node, a drive that is none, and a loop gain without what it
    needs.
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
        asks[name.text] = _read_loop(line, lookup, declared) if line.loop else _read_ratio(line, lookup)
    return tuple(asks.values())


def _read_ratio(line: st.AskLine, lookup: Lookup) -> Ask:
    assert line.over is not None and line.under is not None
    over, under = _read_quantity(line.over, lookup), _read_quantity(line.under, lookup)
    if len(line.driven_at) > 1:
        raise Complaint(line.driven_at[1].place, "`driven at` stands twice", "keep one of the two")
    driven = lookup.node(line.driven_at[0].text, line.driven_at[0].place) if line.driven_at else None
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
        dead.append(Dead(name.text[0], lookup.node(name.text[2:], name.place), condition.place))
    return tuple(dead)


def _read_loop(line: st.AskLine, lookup: Lookup, declared: set[str]) -> Ask:
    assert line.loop is not None
    name = line.loop
    device = lookup.devices.get(name.text)
    amplifiers = [d.name for d in lookup.devices.values() if d.kind == "opamp"]
    if device is None or device.kind != "opamp":
        hint = nearest(name.text, amplifiers) or (
            "the amplifiers are: " + ", ".join(amplifiers) if amplifiers else ""
        )
        raise Complaint(
            name.place, f"there is no amplifier `{name.text}`", hint or "loop(...) needs an opamp"
        )
    if not declared & {f"{name.text}_gain", f"{name.text}_gbw"}:
        raise Complaint(
            name.place,
            f"the loop gain of `{name.text}` needs its gain or its gbw",
            f"add to its line: gain 100 dB, or gbw 1 MHz (or: choose {name.text}_gain)",
        )
    if line.driven_at:
        raise Complaint(
            line.driven_at[0].place, "a loop gain is driven at the amplifier's output", "remove driven at"
        )
    if not line.conditions:
        raise Complaint(
            line.place,
            "a loop gain must say what stands at the input, as the source's impedance matters",
            "add: with V_in = 0 (an ideal source) or with I_in = 0 (open)",
        )
    return Ask(line.name.text, None, None, name.text, _dead(line, lookup), None, line.name.place)
