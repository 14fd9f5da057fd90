"""The parts with more than two terminals: the terminals and parameters of each kind, and how they are read.

To add a kind: one entry of :data:`KINDS` here, its rule in ``symcirc/nodal``, in ``symcirc/witness`` and in
``symcirc/trees``, and its current-carrying branches in ``symcirc/circuit``.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from symcirc.complaints import Complaint, Place, choices, listed, nearest
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
#: The dimension of a device's parameter.
DIMENSIONS = {"gain": "ratio", "gbw": "Hz", "gm": "S", "rm": "ohm", "ratio": "ratio"}
#: The parameters that cannot be zero, by kind; those in hertz cannot be negative either.
NEVER_ZERO = {("opamp", "gain"), ("opamp", "gbw"), ("transformer", "ratio")}


def build_device(line: st.DeviceLine, name: str, label: str, node: Callable[[Name], str]) -> Device:
    """Return the device of a line; ``node`` gives the flat name of a node as written.

    Raises Complaint for an unknown kind, a terminal that is missing, given twice or not of this kind.
    """
    kind = KINDS.get(line.kind.text)
    if kind is None:
        raise Complaint(
            line.kind.place,
            f"`{line.kind.text}` is not a kind of part",
            nearest(line.kind.text, KINDS) or choices(KINDS),
        )
    if line.name.text[0] in "RCLZY":
        raise Complaint(
            line.name.place,
            f"`{line.name.text}` begins like a two-terminal part, and {_a(line)} has more terminals",
            "let its name begin with another letter than R, C, L, Z or Y (U1, T1, E1, ...)",
        )
    terminals = _terminals(line, kind, node)
    _check_parameters(line, kind)
    parameters = {word: f"{name}_{word}" for word in kind.parameters}
    return Device(name, label, line.kind.text, terminals, parameters, _sign(line, kind), line.name.place)


def _terminals(line: st.DeviceLine, kind: Kind, node: Callable[[Name], str]) -> dict[str, tuple[str, ...]]:
    terminals: dict[str, tuple[str, ...]] = {}
    for terminal in line.terminals:
        role, nodes = terminal.role, terminal.nodes
        count = kind.terminals.get(role.text)
        if count is None:
            raise _not_of_this_kind(line, role, kind.terminals)
        if role.text in terminals:
            raise _twice(role.text, role.place)
        if len(nodes) > count:
            word = nodes[1].text in kind.terminals or nodes[1].text in DIMENSIONS
            raise Complaint(
                nodes[1].place,
                f"`{role.text}` of {_a(line)} takes one node",
                f"put a comma before `{nodes[1].text}`" if word else f"leave out `{nodes[1].text}`",
            )
        names = [node(n) for n in nodes] + [GROUND] * (count - len(nodes))
        if count == 2 and names[0] == names[1]:
            raise Complaint(
                role.place, f"both nodes of `{role.text}` are `{names[0]}`", "give two different nodes"
            )
        terminals[role.text] = tuple(names)
    missing = [role for role in kind.terminals if role not in terminals]
    if missing:
        raise _lacks(line, listed(missing), ", ".join(f"{role} node" for role in missing))
    return terminals


def _check_parameters(line: st.DeviceLine, kind: Kind) -> None:
    known = kind.parameters + kind.optional
    seen: set[str] = set()
    for word in (parameter.word for parameter in line.parameters):
        if word.text not in known:
            raise _not_of_this_kind(line, word, known)
        if word.text in seen:
            raise _twice(word.text, word.place)
        seen.add(word.text)


def _not_of_this_kind(
    line: st.DeviceLine, word: Name, known: Mapping[str, int] | tuple[str, ...]
) -> Complaint:
    has = f"it has {listed(known)}" if known else "it has no values"
    return Complaint(word.place, f"{_a(line)} has no `{word.text}`", f"remove it, as {has}")


def _sign(line: st.DeviceLine, kind: Kind) -> int:
    if line.signs and not kind.signed:
        raise Complaint(
            line.signs[0].place, f"{_a(line)} has no `sign`", "remove it: only a conveyor has a sign"
        )
    if len(line.signs) > 1:
        raise _twice("sign", line.signs[1].place)
    if kind.signed and not line.signs:
        raise _lacks(line, "its sign", "sign + (or sign -)")
    return line.signs[0].sign if line.signs else 1


def _a(line: st.DeviceLine) -> str:
    return f"an {line.kind.text}" if line.kind.text[0] in "aeiou" else f"a {line.kind.text}"


def _twice(word: str, place: Place) -> Complaint:
    return Complaint(place, f"`{word}` is given twice", "remove one of the two")


def _lacks(line: st.DeviceLine, what: str, mend: str) -> Complaint:
    return Complaint(line.name.place, f"{line.kind.text} `{line.name.text}` lacks {what}", f"add: {mend}")
