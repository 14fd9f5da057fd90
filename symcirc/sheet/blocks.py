"""The blocks of a sheet: their ports, what they use, and how much circuit their uses make."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.model import GROUND

#: More parts and fixes than this are refused before they are made (uses of uses grow exponentially).
MOST_PIECES = 50_000


def collect_blocks(statements: Iterable[st.Statement]) -> dict[str, st.Block]:
    """Return the blocks by name; raises Complaint for a name or a port given twice, and for a port gnd."""
    blocks: dict[str, st.Block] = {}
    for block in (s for s in statements if isinstance(s, st.Block)):
        name = block.name
        if name.text in blocks:
            first = blocks[name.text].name.place.line
            raise Complaint(
                name.place,
                f"block `{name.text}` is there already, on line {first}",
                "give this block another name",
            )
        seen: set[str] = set()
        for port in block.ports:
            if port.text == GROUND:
                raise Complaint(port.place, "gnd is everywhere the same node", "leave it out of the ports")
            if port.text in seen:
                raise Complaint(port.place, f"port `{port.text}` is there already", "give it another name")
            seen.add(port.text)
        blocks[name.text] = block
    return blocks


def find_block(use: st.UseLine, blocks: Mapping[str, st.Block]) -> st.Block:
    """Return the block that a line uses; raises Complaint where there is none of that name."""
    block = blocks.get(use.block.text)
    if block is None:
        hint = nearest(use.block.text, blocks)
        raise Complaint(
            use.block.place,
            f"there is no block `{use.block.text}`",
            hint or "define it with `block NAME (port, ...)`, its lines, and `end`",
        )
    return block


def find_unused(circuit: Iterable[st.CircuitStatement], blocks: Mapping[str, st.Block]) -> list[st.Block]:
    """Return the blocks that neither the sheet nor another block uses."""
    lines = [*circuit, *(s for block in blocks.values() for s in block.body)]
    used = {s.block.text for s in lines if isinstance(s, st.UseLine)}
    return [block for name, block in blocks.items() if name not in used]


def check_size(statements: Iterable[st.CircuitStatement], blocks: Mapping[str, st.Block]) -> None:
    """Count what statements and their uses will make, before it is made.

    Raises Complaint for more than 50,000 parts and fixes, and for a block that uses itself.
    """
    sizes: dict[str, int] = {}
    for block in blocks.values():
        _measure(block, blocks, sizes)
    total = 0
    for statement in statements:
        total += _statement_size(statement, sizes)
        if total > MOST_PIECES:
            raise Complaint(
                _first_word_place(statement),
                f"the circuit has more than {MOST_PIECES:,} parts and fixes",
                "ask about a smaller piece of it",
            )


def _measure(block: st.Block, blocks: Mapping[str, st.Block], sizes: dict[str, int]) -> None:
    """Note the size of a block and of all that it uses, the inner ones first."""
    path: list[tuple[st.Block, Iterator[st.UseLine]]] = []
    open_names: set[str] = set()

    def enter(inner: st.Block) -> None:
        open_names.add(inner.name.text)
        path.append((inner, iter([s for s in inner.body if isinstance(s, st.UseLine)])))

    if block.name.text not in sizes:
        enter(block)
    while path:
        current, uses = path[-1]
        use = next(uses, None)
        if use is None:
            path.pop()
            open_names.discard(current.name.text)
            size = sum(_statement_size(s, sizes) for s in current.body)
            sizes[current.name.text] = min(size, 2 * MOST_PIECES)
        elif use.block.text in open_names:
            raise Complaint(
                use.block.place,
                f"block `{use.block.text}` uses itself",
                "a block may use other blocks, not itself",
            )
        elif use.block.text not in sizes:
            enter(find_block(use, blocks))


def _statement_size(statement: st.CircuitStatement, sizes: Mapping[str, int]) -> int:
    match statement:
        case st.Chain(words=words):
            return len(words) // 2
        case st.FixLine(settings=settings):
            return len(settings)
        case st.UseLine(block=block, nodes=nodes):
            return len(nodes) + sizes.get(block.text, 0)
        case _:
            return 1


def _first_word_place(statement: st.CircuitStatement) -> Place:
    match statement:
        case st.Chain(words=words):
            return words[0].place
        case st.FixLine(settings=settings):
            return settings[0].name.place
        case _:
            return statement.name.place
