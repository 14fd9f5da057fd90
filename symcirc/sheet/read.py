"""A stage sheet read whole: parsed, blocks placed, names looked up, values settled."""

from __future__ import annotations

from dataclasses import replace
from pathlib import PurePath
from typing import TypeVar

from symcirc.complaints import Complaint, Complaints, Place, Source
from symcirc.sheet import statements as st
from symcirc.sheet.asks import Lookup, read_asks
from symcirc.sheet.bounds import LARGEST_FILE, refuse_length
from symcirc.sheet.declared import check_declarations, unused_names
from symcirc.sheet.expand import expand
from symcirc.sheet.fixes import Settled, settle
from symcirc.sheet.limits import read_buyables, read_limits
from symcirc.sheet.model import Sheet
from symcirc.sheet.namespace import Namespace, check_nodes
from symcirc.sheet.parse import parse_sheet
from symcirc.sheet.targets import read_targets

S = TypeVar("S", bound=st.Statement)
#: Bytes of the longest character in UTF-8.
WIDEST_CHARACTER = 4


def decode(data: bytes, file: str) -> Source:
    """Return the text of a file.

    Raises Complaint for more than a million characters, and at the first byte that is not UTF-8.

    >>> decode(b"ask H = V_a/V_b", "a.stage").text
    'ask H = V_a/V_b'
    """
    if len(data) > WIDEST_CHARACTER * LARGEST_FILE:
        raise refuse_length(Source(file, ""))
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        before = error.object[: error.start].decode("utf-8")
        line = before.count("\n") + 1
        column = len(before) - before.rfind("\n")
        source = Source(file, error.object.decode("utf-8", errors="replace"))
        raise Complaint(
            Place(line, column, column + 1, source),
            "this is not UTF-8 text",
            "save the file in the UTF-8 encoding",
        ) from None
    return Source(file, text)


def read_sheet(source: Source) -> Sheet:
    """Return the sheet that a text says.

    Raises Complaint for what cannot be used; of several the first in the file, as far as they do not follow
    from each other.

    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> [part.name for part in sheet.parts], sheet.title
    (['R1', 'C1'], 'a')
    """
    statements = parse_sheet(source)
    flat = expand(statements)
    chosen = tuple(name for line in _of(statements, st.ChooseLine) for name in line.names)
    solved = tuple(name for line in _of(statements, st.SolveLine) for name in line.names)
    namespace = Namespace(flat, chosen, solved)
    symbols = namespace.symbols

    complaints = Complaints()
    complaints.attempt(lambda: check_nodes(flat))
    title = complaints.attempt(lambda: _title(statements))
    settled = complaints.attempt(lambda: settle(flat, namespace)) or Settled()
    asks = complaints.attempt(lambda: read_asks(_of(statements, st.AskLine), Lookup(flat), symbols)) or ()
    complaints.raise_first()
    if not asks:
        raise Complaint(Place(1, 1, 2, source), "nothing is asked", "add a line such as: ask H = V_out/V_in")
    asked = {ask.name: ask.place for ask in asks}
    limit_lines = _of(statements, st.LimitLine)
    part_lines = _of(statements, st.PartsLine)
    limited = {line.name.text for line in limit_lines}
    target_lines = [s for s in statements if isinstance(s, st.TargetLine)]
    complaints.attempt(lambda: check_declarations(chosen, solved, settled.fixes))
    limits = complaints.attempt(lambda: read_limits(limit_lines, asked, symbols, settled)) or ()
    targets = complaints.attempt(lambda: read_targets(target_lines, asked, limited, symbols, settled)) or ()
    buyables = complaints.attempt(lambda: read_buyables(part_lines, symbols, settled)) or ()
    complaints.raise_first()

    sheet = Sheet(
        source=source,
        title=title or PurePath(source.file).stem,
        parts=tuple(flat.parts),
        devices=namespace.devices,
        node_labels=flat.node_labels,
        node_places=flat.node_places,
        ports=frozenset(flat.port_nodes),
        symbols=symbols,
        fixes=settled.fixes,
        chosen=tuple(name.text for name in chosen),
        solved=tuple(name.text for name in solved),
        asks=asks,
        targets=targets,
        limits=limits,
        buyables=buyables,
        notes=tuple(line.text for line in _of(statements, st.NoteLine)),
        remarks=(),
    )
    remarks = [*flat.remarks, *unused_names(sheet)]
    return replace(sheet, remarks=tuple(sorted(remarks, key=lambda remark: remark.place)))


def _of(statements: tuple[st.Statement, ...], kind: type[S]) -> list[S]:
    return [s for s in statements if isinstance(s, kind)]


def _title(statements: tuple[st.Statement, ...]) -> str:
    lines = _of(statements, st.StageLine)
    if len(lines) > 1:
        raise Complaint(
            lines[1].place,
            f"a sheet has one `stage` line, and line {lines[0].place.line} has it already",
            "remove one of the two",
        )
    return lines[0].title if lines else ""
