"""The parts with more than two terminals: which terminals and parameters each kind has, and how they are read.

To add a kind: one entry of :data:`KINDS` here, its rule in ``symcirc/nodal``, in ``symcirc/witness`` and in
``symcirc/trees``, and its current-carrying branches in ``symcirc/circuit``.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from symcirc.complaints import Complaint, Place, listed, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.expression import Name
from symcirc.sheet.model import GROUND, Device


@dataclass(frozen=True)
class Kind:
    """What a kind of device needs: how many nodes each terminal takes, and its parameters."""

    terminals: Mapping[str, int]
    parameters: tuple[str, ...] = ()
    optional: tuple[str, ...] = ()
    signed: bool = False


KINDS = {
    "opamp": Kind({"plus": 1, "minus": 1, "drives": 1}, optional=("gain", "gbw")),
    "vcvs": Kind({"senses": 2, "drives": 2}, ("gain",)),
    "vccs": Kind({"senses": 2, "drives": 2}, ("gm",)),
    "cccs": Kind({"senses": 2, "drives": 2}, ("gain",)),
    "ccvs": Kind({"senses": 2, "drives": 2}, ("rm",)),
    "transformer": Kind({"primary": 2, "secondary": 2}, ("ratio",)),
    "conveyor": Kind({"x": 1, "y": 1, "z": 1}, signed=True),
}
#: The dimension of a device's parameter (None: a ratio).
DIMENSIONS = {"gain": "ratio", "gbw": "Hz", "gm": "S", "rm": "ohm", "ratio": "ratio"}


def build_device(line: st.DeviceLine, name: str, label: str, node: Callable[[Name], str]) -> Device:
    """Return the device of a line; ``node`` gives the flat name of a node as written.

    Raises Complaint for an unknown kind, a terminal that is missing, given twice or not of this kind.
    """
    kind = KINDS.get(line.kind.text)
    if kind is None:
        raise Complaint(
            line.kind.place,
            f"`{line.kind.text}` is not a kind of part",
            nearest(line.kind.text, KINDS) or f"use {listed(KINDS, 'or')}",
        )
    if line.name.text[0] in "RCLZY":
        raise Complaint(
            line.name.place,
            f"`{line.name.text}` begins like a two-terminal part, and a {line.kind.text} has more terminals",
            "let its name begin with another letter than R, C, L, Z or Y (U1, T1, E1, ...)",
        )
    terminals = _terminals(line, kind, node)
    _check_parameters(line, kind)
    parameters = {word: f"{name}_{word}" for word in kind.parameters}
    parameters |= {word.text: f"{name}_{word.text}" for word, _ in line.parameters}
    return Device(name, label, line.kind.text, terminals, parameters, _sign(line, kind), line.name.place)


def _terminals(line: st.DeviceLine, kind: Kind, node: Callable[[Name], str]) -> dict[str, tuple[str, ...]]:
    terminals: dict[str, tuple[str, ...]] = {}
    for role, nodes in line.terminals:
        count = kind.terminals.get(role.text)
        if count is None:
            raise _not_of_this_kind(line, role, kind.terminals)
        if role.text in terminals:
            raise Complaint(role.place, f"`{role.text}` is given twice", "remove one of the two")
        if len(nodes) > count:
            raise Complaint(
                nodes[1].place,
                f"`{role.text}` of a {line.kind.text} takes one node",
                f"leave out `{nodes[1].text}`, or put a comma before it",
            )
        names = [node(n) for n in nodes] + [GROUND] * (count - len(nodes))
        if count == 2 and names[0] == names[1]:
            raise Complaint(
                role.place, f"both nodes of `{role.text}` are `{names[0]}`", "give two different nodes"
            )
        terminals[role.text] = tuple(names)
    missing = [role for role in kind.terminals if role not in terminals]
    if missing:
        raise Complaint(
            line.name.place,
            f"{line.kind.text} `{line.name.text}` lacks {listed(missing)}",
            f"add: {', '.join(f'{role} node' for role in missing)}",
        )
    return terminals


def _check_parameters(line: st.DeviceLine, kind: Kind) -> None:
    known = kind.parameters + kind.optional
    seen: set[str] = set()
    for word, _ in line.parameters:
        if word.text not in known:
            raise _not_of_this_kind(line, word, known)
        if word.text in seen:
            raise Complaint(word.place, f"`{word.text}` is given twice", "remove one of the two")
        seen.add(word.text)


def _not_of_this_kind(
    line: st.DeviceLine, word: Name, known: Mapping[str, int] | tuple[str, ...]
) -> Complaint:
    has = f"it has {listed(known)}" if known else "it has none of these words"
    return Complaint(word.place, f"a {line.kind.text} has no `{word.text}`", f"remove it: {has}")


def _sign(line: st.DeviceLine, kind: Kind) -> int:
    if line.signs and not kind.signed:
        raise Complaint(
            line.signs[0][1], f"a {line.kind.text} has no `sign`", "remove it: only a conveyor has a sign"
        )
    if len(line.signs) > 1:
        raise Complaint(line.signs[1][1], "`sign` is given twice", "remove one of the two")
    if kind.signed and not line.signs:
        raise Complaint(
            _name_place(line), f"conveyor `{line.name.text}` lacks its sign", "add: sign + (or sign -)"
        )
    return line.signs[0][0] if line.signs else 1


def _name_place(line: st.DeviceLine) -> Place:
    return line.name.place
