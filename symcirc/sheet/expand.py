"""Blocks placed: from statements to flat parts, devices and settings.

Inside a block's use ``S1`` every name gets the prefix ``S1_`` in formulas and ``S1.`` in sentences, ports
become the nodes that they are joined to, and ``gnd`` stays what it is.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from symcirc.complaints import Complaint, Place, Remark
from symcirc.sheet import statements as st
from symcirc.sheet.blocks import check_size, collect_blocks, find_block, find_unused
from symcirc.sheet.bounds import LONGEST_NAME
from symcirc.sheet.chains import check_chain, odd_node
from symcirc.sheet.devices import build_device
from symcirc.sheet.expression import Name
from symcirc.sheet.model import GROUND, Device, Part, Value
from symcirc.sheet.reserved import check_name


@dataclass(frozen=True)
class Scope:
    """Where a statement stands: the prefixes of its names, and the nodes that its block's ports are."""

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
    """A setting where it stands: its name, and the names in its value, are as written in ``scope``."""

    name: Name
    value: Value
    scope: Scope


@dataclass
class Flat:
    """What the expansion gathers.

    ``node_owners`` has for every node the innermost scope that names it; ``port_names`` has what a port would
    be called from outside (``S1_p``), and the node that it is.
    """

    parts: list[Part] = field(default_factory=list)
    devices: list[Device] = field(default_factory=list)
    settings: list[FlatSetting] = field(default_factory=list)
    node_labels: dict[str, str] = field(default_factory=dict)
    node_places: dict[str, Place] = field(default_factory=dict)
    node_owners: dict[str, Scope] = field(default_factory=dict)
    port_names: dict[str, str] = field(default_factory=dict)
    port_nodes: set[str] = field(default_factory=set)
    places: dict[str, Place] = field(default_factory=dict)
    remarks: list[Remark] = field(default_factory=list)


def expand(statements: Iterable[st.Statement]) -> Flat:
    """Return the flat circuit of a sheet's statements.

    Raises Complaint for a part that stands twice, a block that is unknown, uses itself or is joined to the
    wrong number of nodes, and for more than 50,000 parts and fixes.
    """
    statements = tuple(statements)
    blocks = collect_blocks(statements)
    circuit = [s for s in statements if isinstance(s, st.CircuitStatement)]
    unused = find_unused(circuit, blocks)
    check_size([*circuit, *(s for block in unused for s in block.body)], blocks)
    flat = Flat()
    _place(flat, circuit, TOP, blocks)
    misnamed = flat.port_names.keys() & flat.node_places.keys()
    if misnamed:
        name = min(misnamed, key=flat.node_places.__getitem__)
        raise refuse_port(name, flat.port_names[name], flat.node_places[name])
    for block in unused:  # its slips are found although nothing uses it
        _place(Flat(), block.body, Scope("", "", {port.text: port.text for port in block.ports}), blocks)
        flat.remarks.append(Remark(block.name.place, f"block `{block.name.text}` is never used"))
    return flat


def _place(
    flat: Flat, body: Iterable[st.CircuitStatement], scope: Scope, blocks: Mapping[str, st.Block]
) -> None:
    waiting = [(statement, scope) for statement in body][::-1]
    while waiting:
        statement, where = waiting.pop()
        match statement:
            case st.Chain():
                _add_chain(flat, statement, where)
            case st.DeviceLine():
                _add_device(flat, statement, where)
            case st.FixLine(settings=settings):
                flat.settings += [FlatSetting(x.name, x.value, where) for x in settings]
            case st.UseLine():
                block = find_block(statement, blocks)
                inner = _enter(flat, statement, where, block)
                waiting += [(s, inner) for s in reversed(block.body)]


def _enter(flat: Flat, use: st.UseLine, scope: Scope, block: st.Block) -> Scope:
    if len(use.nodes) != len(block.ports):
        ports = ", ".join(p.text for p in block.ports)
        raise Complaint(
            use.nodes[min(len(block.ports), len(use.nodes) - 1)].place,
            f"block `{block.name.text}` has {_counted(len(block.ports), 'port')}, "
            f"and {_counted(len(use.nodes), 'node')} stand here",
            f"give one node for each of ({ports})",
        )
    name, label = _take_name(flat, use.name, scope)
    if len(name) > LONGEST_NAME:
        raise Complaint(
            use.name.place,
            f"the names inside `{label[:20]}...` grow beyond {LONGEST_NAME} characters",
            "use shorter names, or fewer blocks in blocks",
        )
    nodes = [_node(flat, node, scope) for node in use.nodes]
    flat.port_nodes.update(nodes)
    joined = {port.text: node for port, node in zip(block.ports, nodes, strict=True)}
    flat.port_names |= {f"{name}_{port}": node for port, node in joined.items()}
    return Scope(name + "_", label + ".", joined)


def refuse_port(name: str, node: str, place: Place) -> Complaint:
    """Return the complaint about a port that is named as if it were an inner node."""
    return Complaint(
        place, f"`{name}` would be a port of a block, and a port is the node outside", f"write {node}"
    )


def _counted(number: int, thing: str) -> str:
    return f"{number} {thing}" + ("" if number == 1 else "s")


def _take_name(flat: Flat, word: Name, scope: Scope) -> tuple[str, str]:
    """Return the flat name and the label of a part, a device or a use; raises Complaint where it is taken."""
    check_name(word.text, word.place)
    name, label = scope.prefix + word.text, scope.label + word.text
    if name in flat.places:
        raise Complaint(
            word.place,
            f"`{label}` stands twice: it is on line {flat.places[name].line} already",
            "give one of the two another name; a part stands in exactly one place",
        )
    flat.places[name] = word.place
    return name, label


def _node(flat: Flat, name: Name, scope: Scope) -> str:
    """Return the flat name of a node and note it.

    An outer scope may name an inner node (``S1_a``); two scopes of which neither holds the other may not.
    """
    node = scope.node(name.text)
    if node == GROUND or name.text in scope.ports:
        flat.node_places.setdefault(node, name.place)
        flat.node_labels.setdefault(node, node)
        return node
    owner = flat.node_owners.setdefault(node, scope)
    if owner is not scope and scope.label.startswith(owner.label):
        flat.node_owners[node] = scope
    elif not owner.label.startswith(scope.label):
        raise Complaint(
            name.place,
            f"node `{scope.label}{name.text}` and node `{flat.node_labels[node]}` have one name, {node}",
            "give one of the two another name",
        )
    if flat.node_owners[node] is scope:
        flat.node_labels[node] = scope.label + name.text
    flat.node_places.setdefault(node, name.place)
    return node


def _add_chain(flat: Flat, chain: st.Chain, scope: Scope) -> None:
    words = chain.words
    check_chain(words)
    for first, part, second in zip(words[0::2], words[1::2], words[2::2], strict=False):
        name, label = _take_name(flat, part, scope)
        nodes = _node(flat, first, scope), _node(flat, second, scope)
        if nodes[0] == nodes[1]:
            raise Complaint(
                part.place,
                f"both ends of `{label}` are on node `{flat.node_labels[nodes[0]]}`",
                "join its ends to two different nodes",
            )
        flat.parts.append(Part(name, label, part.text[0], *nodes, part.place))
    flat.remarks += odd_node(words)


def _add_device(flat: Flat, line: st.DeviceLine, scope: Scope) -> None:
    name, label = _take_name(flat, line.name, scope)
    flat.devices.append(build_device(line, name, label, lambda node: _node(flat, node, scope)))
    for parameter in line.parameters:
        word = Name(f"{line.name.text}_{parameter.word.text}", parameter.word.place)
        flat.settings.append(FlatSetting(word, parameter.value, scope))
