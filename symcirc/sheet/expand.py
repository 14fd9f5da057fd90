"""Blocks placed: from statements to flat parts, devices and settings.

Inside a block's use ``S1`` every name gets the prefix ``S1_`` in formulas and ``S1.`` in sentences, ports become
the nodes that they are joined to, and ``gnd`` stays what it is.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.devices import build_device
from symcirc.sheet.expression import Name
from symcirc.sheet.model import GROUND, Device, Part, Value

PART_KINDS = "RCLZY"
#: More parts than this are refused before they are made (uses of uses grow exponentially).
MOST_PARTS = 50_000


@dataclass(frozen=True)
class Scope:
    """Where a statement stands: the prefixes of its names, and the nodes that its block's ports are joined to."""

    prefix: str
    label: str
    ports: Mapping[str, str]

    def node(self, name: str) -> str:
        """Return the flat name of a node that is written ``name`` here."""
        if name == GROUND:
            return GROUND
        return self.ports.get(name, self.prefix + name)


TOP = Scope("", "", {})


@dataclass(frozen=True)
class FlatSetting:
    """A setting with its flat name; ``value``'s names are as written, in ``scope``."""

    name: str
    value: Value
    scope: Scope
    place: Place


@dataclass
class Flat:
    """What the expansion gathers."""

    parts: list[Part] = field(default_factory=list)
    devices: list[Device] = field(default_factory=list)
    settings: list[FlatSetting] = field(default_factory=list)
    node_labels: dict[str, str] = field(default_factory=dict)
    node_places: dict[str, Place] = field(default_factory=dict)
    port_nodes: set[str] = field(default_factory=set)
    used_blocks: set[str] = field(default_factory=set)
    places: dict[str, Place] = field(default_factory=dict)


def expand(statements: Iterable[st.Statement]) -> Flat:
    """Return the flat circuit of a sheet's statements.

    Raises Complaint for a part that stands twice, a block that is unknown, uses itself or is joined to the wrong
    number of nodes, and for more than 50,000 parts.
    """
    statements = tuple(statements)
    blocks = _blocks(statements)
    _check_size(statements, blocks)
    flat = Flat()
    waiting: list[tuple[st.CircuitStatement, Scope]] = [(s, TOP) for s in _circuit_part(statements)][::-1]
    while waiting:
        statement, scope = waiting.pop()
        match statement:
            case st.Chain():
                _add_chain(flat, statement, scope)
            case st.DeviceLine():
                _add_device(flat, statement, scope)
            case st.FixLine(settings=settings):
                flat.settings += [
                    FlatSetting(scope.prefix + x.name.text, x.value, scope, x.name.place) for x in settings
                ]
            case st.UseLine():
                inner = _enter(flat, statement, scope, blocks)
                waiting.extend((s, inner) for s in reversed(blocks[statement.block.text].body))
    return flat


def _circuit_part(statements: Iterable[st.Statement]) -> list[st.CircuitStatement]:
    kinds = st.Chain | st.DeviceLine | st.FixLine | st.UseLine
    return [s for s in statements if isinstance(s, kinds)]


def _blocks(statements: Iterable[st.Statement]) -> dict[str, st.Block]:
    blocks: dict[str, st.Block] = {}
    for block in (s for s in statements if isinstance(s, st.Block)):
        name = block.name
        if name.text in blocks:
            raise Complaint(
                name.place, f"block `{name.text}` is there already", "give this block another name"
            )
        seen: set[str] = set()
        for port in block.ports:
            if port.text == GROUND or port.text in seen:
                what = (
                    "gnd is the same node everywhere" if port.text == GROUND else "this port is there already"
                )
                raise Complaint(port.place, what, "leave it out of the ports")
            seen.add(port.text)
        blocks[name.text] = block
    return blocks


def _check_size(statements: Iterable[st.Statement], blocks: Mapping[str, st.Block]) -> None:
    """Count what the uses will make, before it is made; find a block that uses itself on the way."""
    sizes: dict[str, int] = {}
    for block in blocks.values():
        _size_of(block, blocks, sizes)
    total = 0
    for statement in _circuit_part(statements):
        total += _statement_size(statement, sizes)
        if total > MOST_PARTS:
            raise Complaint(
                statement.place,
                f"the circuit has more than {MOST_PARTS:,} parts",
                "ask about a smaller piece of it",
            )


def _size_of(block: st.Block, blocks: Mapping[str, st.Block], sizes: dict[str, int]) -> None:
    path: list[tuple[st.Block, int]] = [(block, 0)]
    open_names = {block.name.text}
    while path:
        current, position = path.pop()
        uses = [s for s in current.body if isinstance(s, st.UseLine)]
        while position < len(uses) and uses[position].block.text in sizes:
            position += 1
        if position == len(uses):
            sizes[current.name.text] = min(
                sum(_statement_size(s, sizes) for s in current.body), 2 * MOST_PARTS
            )
            open_names.discard(current.name.text)
            continue
        use = uses[position]
        inner = _find_block(use, blocks)
        if inner.name.text in open_names:
            raise Complaint(
                use.block.place,
                f"block `{inner.name.text}` uses itself",
                "a block may use other blocks, not itself",
            )
        open_names.add(inner.name.text)
        path += [(current, position), (inner, 0)]


def _statement_size(statement: st.CircuitStatement, sizes: Mapping[str, int]) -> int:
    match statement:
        case st.Chain(words=words):
            return len(words) // 2
        case st.UseLine(block=block):
            return 1 + sizes.get(block.text, 0)
        case _:
            return 1


def _find_block(use: st.UseLine, blocks: Mapping[str, st.Block]) -> st.Block:
    block = blocks.get(use.block.text)
    if block is None:
        hint = nearest(use.block.text, blocks)
        raise Complaint(
            use.block.place,
            f"there is no block `{use.block.text}`",
            hint or "define it with `block NAME (port, ...)`, its lines, and `end`",
        )
    return block


def _enter(flat: Flat, use: st.UseLine, scope: Scope, blocks: Mapping[str, st.Block]) -> Scope:
    block = _find_block(use, blocks)
    if len(use.nodes) != len(block.ports):
        ports = ", ".join(p.text for p in block.ports)
        raise Complaint(
            use.place,
            f"block `{block.name.text}` has {len(block.ports)} ports, and {len(use.nodes)} nodes are given",
            f"give one node for each of ({ports})",
        )
    name = scope.prefix + use.name.text
    _take_name(flat, name, scope.label + use.name.text, use.name.place)
    flat.used_blocks.add(block.name.text)
    nodes = [_node(flat, node, scope) for node in use.nodes]
    flat.port_nodes.update(nodes)
    joined = {port.text: node for port, node in zip(block.ports, nodes, strict=True)}
    return Scope(name + "_", scope.label + use.name.text + ".", joined)


def _take_name(flat: Flat, name: str, label: str, place: Place) -> None:
    if name in flat.places:
        first = flat.places[name]
        raise Complaint(
            place,
            f"`{label}` stands twice: it is on line {first.line} already",
            "give one of the two another name; a part stands in exactly one place",
        )
    flat.places[name] = place


def _node(flat: Flat, name: Name, scope: Scope) -> str:
    node = scope.node(name.text)
    if node not in flat.node_places:
        flat.node_places[node] = name.place
        inner = name.text not in scope.ports and node != GROUND
        flat.node_labels[node] = scope.label + name.text if inner else flat.node_labels.get(node, node)
    return node


def _add_chain(flat: Flat, chain: st.Chain, scope: Scope) -> None:
    words = chain.words
    if len(words) % 2 == 0:
        last = words[-1]
        raise Complaint(
            last.place,
            f"the chain ends on the part `{last.text}`",
            "a chain begins and ends on a node: add `-- node`, or continue it on the next line with `--`",
        )
    for first, part, second in zip(words[0::2], words[1::2], words[2::2], strict=False):
        if part.text[0] not in PART_KINDS:
            raise Complaint(
                part.place,
                f"`{part.text}` stands where a part stands, and its first letter is none of R, C, L, Z, Y",
                "name the part by its kind (R1, C1, ...), or put one between two nodes: node -- part -- node",
            )
        name = scope.prefix + part.text
        label = scope.label + part.text
        _take_name(flat, name, label, part.place)
        nodes = _node(flat, first, scope), _node(flat, second, scope)
        if nodes[0] == nodes[1]:
            raise Complaint(
                part.place,
                f"both ends of `{label}` are on node `{nodes[0]}`",
                "join its ends to two different nodes",
            )
        flat.parts.append(Part(name, label, part.text[0], *nodes, part.place))


def _add_device(flat: Flat, line: st.DeviceLine, scope: Scope) -> None:
    name, label = scope.prefix + line.name.text, scope.label + line.name.text
    _take_name(flat, name, label, line.name.place)
    flat.devices.append(build_device(line, name, label, lambda node: _node(flat, node, scope)))
    for word, value in line.parameters:
        flat.settings.append(FlatSetting(f"{name}_{word.text}", value, scope, word.place))
