"""The names that formulas may hold: which thing each name of a sheet means."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from symcirc.complaints import Complaint, Place
from symcirc.sheet.devices import DIMENSIONS, KINDS, NEVER_ZERO
from symcirc.sheet.expand import Flat, FlatSetting
from symcirc.sheet.expression import Name, names
from symcirc.sheet.model import GROUND, Device, Part, Symbol
from symcirc.sheet.reserved import check_name

PART_DIMENSIONS = {"R": "ohm", "C": "F", "L": "H", "Z": "ohm", "Y": "S"}


class Namespace:
    """The symbols of a sheet by their flat names, parts first, in the sheet's order.

    ``devices`` are the sheet's, each with the parameters that the sheet gives it on whichever line.
    """

    def __init__(self, flat: Flat, chosen: Iterable[Name], solved: Iterable[Name]) -> None:
        """Declare every name; raises Complaint for one that is reserved or that means two things."""
        self.symbols: dict[str, Symbol] = {}
        declared = (*chosen, *solved)
        self._own = _own_names(flat)
        self._devices = {device.name: device for device in flat.devices}
        self._never_zero = {
            f"{device.name}_{word}"
            for device in flat.devices
            for word in DIMENSIONS
            if (device.kind, word) in NEVER_ZERO
        }
        for part in flat.parts:
            self._add(Symbol(part.name, part.label, "part", PART_DIMENSIONS[part.kind], part.place))
        mentioned = {self.name(s.name, s) for s in flat.settings} | {name.text for name in declared}
        self.devices = tuple(self._declare_parameters(device, mentioned) for device in flat.devices)
        for setting in flat.settings:
            self._bring_in(setting)
        for setting in flat.settings:
            self._declare_free(self.name(setting.name, setting), setting.name.place)
        for name in declared:
            self._declare_free(name.text, name.place)

    def name(self, name: Name, setting: FlatSetting) -> str:
        """Return the flat name that a word of a setting means: the block's own, else the sheet's."""
        local = setting.scope.prefix + name.text
        return local if local in self._own else name.text

    def may_hold_s(self, symbol: Symbol) -> bool:
        """Tell whether a tie of this name may depend on s: a Z, a Y, or a parameter that is no frequency."""
        return self.is_general(symbol) or (symbol.role == "parameter" and symbol.dimension != "Hz")

    def is_general(self, symbol: Symbol) -> bool:
        """Tell whether a name is a general impedance or admittance."""
        return symbol.role == "part" and symbol.label.rpartition(".")[2][0] in "ZY"

    def refused_signs(self, symbol: Symbol) -> tuple[int, ...]:
        """Return the signs that a number of that name cannot have: no part is zero or negative."""
        if symbol.role != "parameter":
            return (-1, 0) if symbol.dimension else ()
        if symbol.name not in self._never_zero:
            return ()
        return (-1, 0) if symbol.dimension == "Hz" else (0,)

    def _add(self, symbol: Symbol) -> None:
        first = self.symbols.get(symbol.name) or self._devices.get(symbol.name)
        if first is not None:
            raise Complaint(
                max(symbol.place, first.place),
                f"`{symbol.label}` and `{first.label}` have one name in formulas, {symbol.name}",
                "give one of the two another name",
            )
        self.symbols[symbol.name] = symbol

    def _declare_parameters(self, device: Device, mentioned: set[str]) -> Device:
        """Declare what a device always has, and what the sheet gives it."""
        kind = KINDS[device.kind]
        words = [*kind.parameters, *(w for w in kind.optional if f"{device.name}_{w}" in mentioned)]
        for word in words:
            name, label = f"{device.name}_{word}", f"{device.label}_{word}"
            self._add(Symbol(name, label, "parameter", DIMENSIONS[word], device.place))
        return replace(device, parameters={word: f"{device.name}_{word}" for word in words})

    def _declare_free(self, name: str, place: Place) -> None:
        if name in self.symbols:
            return
        check_name(name, place)
        if name in self._devices:
            device = self._devices[name]
            kind = KINDS[device.kind]
            words = [f"{name}_{word}" for word in kind.parameters + kind.optional]
            raise Complaint(
                place,
                f"`{name}` is {'an' if device.kind == 'opamp' else 'a'} {device.kind}, not a value",
                f"name its value instead: {' or '.join(words)}" if words else "leave it out: it has no value",
            )
        self._add(Symbol(name, name, "free", None, place))

    def _bring_in(self, setting: FlatSetting) -> None:
        """Declare the parts inside a Z or Y: ``fix Y3 = s*C3 + 1/R3`` brings in C3 and R3."""
        target = self.symbols.get(self.name(setting.name, setting))
        if target is None or not self.is_general(target):
            return
        for name in names(setting.value.expression):
            flat_name = self.name(name, setting)
            if flat_name not in self.symbols and flat_name[0] in "RCL" and flat_name not in self._own:
                dimension = None if flat_name[1:2].islower() else PART_DIMENSIONS[flat_name[0]]
                self._add(Symbol(flat_name, flat_name, "free", dimension, name.place))


def _own_names(flat: Flat) -> set[str]:
    """Return the flat names of all parts and of all parameters that the devices may have."""
    own = {part.name for part in flat.parts}
    for device in flat.devices:
        kind = KINDS[device.kind]
        own |= {f"{device.name}_{word}" for word in kind.parameters + kind.optional}
    return own


def check_nodes(flat: Flat) -> None:
    """Raise Complaint for a name that is a part and a node at once."""
    things: list[Part | Device] = [*flat.parts, *flat.devices]
    for thing in things:
        if thing.name == GROUND:
            raise Complaint(thing.place, "`gnd` is the reference node", "give the part another name")
        if thing.name in flat.node_places:
            raise Complaint(
                max(thing.place, flat.node_places[thing.name]),
                f"`{thing.name}` is a part and a node at once",
                "give the part or the node another name",
            )
