"""A stage sheet read whole: parsed, blocks placed, names looked up, values settled."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import PurePath
from typing import TypeVar

from symcirc.complaints import Complaint, Place, Remark, Source, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.asks import Lookup, read_asks
from symcirc.sheet.expand import Flat, expand
from symcirc.sheet.expression import Name, names
from symcirc.sheet.fixes import all_names, declare, settle
from symcirc.sheet.model import GROUND, Fix, Limit, Sheet, Symbol, Target
from symcirc.sheet.parse import parse_sheet
from symcirc.sheet.targets import read_buyables, read_limits, read_targets

S = TypeVar("S", bound=st.Statement)


def decode(data: bytes, file: str) -> Source:
    """Return the text of a file; raises Complaint with the place of the first byte that is not UTF-8.

    >>> decode(b"ask H = V_a/V_b", "a.stage").text
    'ask H = V_a/V_b'
    """
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        before = data[: error.start].decode("utf-8-sig", errors="replace")
        line = before.count("\n") + 1
        column = len(before) - (before.rfind("\n") + 1) + 1
        source = Source(file, data.decode("utf-8", errors="replace"))
        raise Complaint(
            Place(line, column, column + 1, source),
            "this is not UTF-8 text",
            "save the file in the UTF-8 encoding",
        ) from None
    return Source(file, text)


def read_sheet(source: Source) -> Sheet:
    """Return the sheet that a text says.

    Raises Complaint at the first thing that cannot be used.

    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> [part.name for part in sheet.parts], sheet.title
    (['R1', 'C1'], 'a')
    """
    statements = parse_sheet(source)
    flat = expand(statements)
    chosen = all_names(_of(statements, st.ChooseLine))
    solved = all_names(_of(statements, st.SolveLine))
    symbols = declare(flat, chosen, solved)
    fixes = settle(flat, symbols)
    _check_declarations(chosen, solved, fixes)
    _check_namespaces(flat, symbols)
    declared = set(fixes) | {name.text for name in (*chosen, *solved)}
    lookup = Lookup(flat.node_places, tuple(flat.parts), tuple(flat.devices))
    asks = read_asks(_of(statements, st.AskLine), lookup, symbols, declared)
    if not asks:
        raise Complaint(Place(1, 1, 2, source), "nothing is asked", "add a line such as: ask H = V_out/V_in")
    targets = read_targets(_of(statements, st.TargetLine), asks, symbols)
    limits = read_limits(_of(statements, st.LimitLine), asks, symbols)
    unused = _unused(symbols, fixes, targets, limits, [*chosen, *solved])
    return Sheet(
        source=source,
        title=_title(statements, source),
        parts=tuple(flat.parts),
        devices=tuple(flat.devices),
        node_labels=flat.node_labels,
        node_places=flat.node_places,
        ports=frozenset(flat.port_nodes),
        symbols=symbols,
        fixes=fixes,
        chosen=tuple(name.text for name in chosen),
        solved=tuple(name.text for name in solved),
        asks=asks,
        targets=targets,
        limits=limits,
        buyables=read_buyables(_of(statements, st.PartsLine)),
        notes=tuple(line.text for line in _of(statements, st.NoteLine)),
        remarks=(*unused, *_unused_blocks(statements, flat)),
    )


def _of(statements: tuple[st.Statement, ...], kind: type[S]) -> list[S]:
    return [s for s in statements if isinstance(s, kind)]


def _title(statements: tuple[st.Statement, ...], source: Source) -> str:
    lines = _of(statements, st.StageLine)
    if len(lines) > 1:
        raise Complaint(
            lines[1].place, "a sheet has one `stage` line, and this is the second", "remove one of the two"
        )
    return lines[0].title if lines else PurePath(source.file).stem


def _check_declarations(chosen: list[Name], solved: list[Name], fixes: Mapping[str, Fix]) -> None:
    seen: dict[str, str] = {}
    for verb, words in (("choose", chosen), ("solve", solved)):
        for name in words:
            if name.text in seen:
                first = seen[name.text]
                raise Complaint(
                    name.place,
                    f"`{name.text}` stands behind `{first}` already",
                    "name it once" if first == verb else "a name is either chosen or solved for: keep one",
                )
            seen[name.text] = verb
            fix = fixes.get(name.text)
            if fix is not None and (verb == "solve" or fix.number is None):
                raise Complaint(
                    name.place,
                    f"`{name.text}` is fixed on line {fix.place.line}, so it cannot be {verb}d"
                    if verb == "solve"
                    else f"`{name.text}` is tied on line {fix.place.line}, so it cannot be chosen",
                    "remove one of the two",
                )


def _check_namespaces(flat: Flat, symbols: Mapping[str, Symbol]) -> None:
    for device in flat.devices:
        if device.name in symbols:
            raise Complaint(
                device.place, f"`{device.label}` already means something else", "give it another name"
            )
    for name, place in flat.places.items():
        if name in flat.node_places or name == GROUND:
            node = flat.node_places.get(name, place)
            raise Complaint(
                max(place, node),
                f"`{name}` is a part and a node at once",
                "give the part or the node another name",
            )


def _unused(
    symbols: Mapping[str, Symbol],
    fixes: Mapping[str, Fix],
    targets: tuple[Target, ...],
    limits: tuple[Limit, ...],
    declared: list[Name],
) -> list[Remark]:
    """Return a remark for every free name that nothing uses: most often a name that was mistyped."""
    expressions = [fix.expression for fix in fixes.values() if fix.number is None]
    expressions += [value.expression for target in targets for value in target.words.values()]
    expressions += [target.expression for target in targets if target.expression is not None]
    expressions += [v.expression for limit in limits for v in (limit.low, limit.high) if v is not None]
    used = {name.text for expression in expressions for name in names(expression)}
    places = {name.text: name.place for name in declared}
    remarks = []
    for symbol in symbols.values():
        if symbol.role == "free" and symbol.name not in used:
            hint = nearest(symbol.name, [s.name for s in symbols.values() if s.name != symbol.name])
            place = places.get(symbol.name, symbol.place)
            remarks.append(Remark(place, f"nothing uses `{symbol.name}`" + (f"; {hint}" if hint else "")))
    return remarks


def _unused_blocks(statements: tuple[st.Statement, ...], flat: Flat) -> list[Remark]:
    inner = {s.block.text for b in _of(statements, st.Block) for s in b.body if isinstance(s, st.UseLine)}
    return [
        Remark(block.place, f"block `{block.name.text}` is never used")
        for block in _of(statements, st.Block)
        if block.name.text not in flat.used_blocks | inner
    ]
