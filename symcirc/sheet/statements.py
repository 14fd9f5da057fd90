"""The statements of a sheet as they are written: nothing resolved, every word with its place."""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.complaints import Place
from symcirc.sheet.expression import Expression, Name
from symcirc.sheet.model import Value


@dataclass(frozen=True)
class StageLine:
    """``stage "title"``."""

    title: str
    place: Place


@dataclass(frozen=True)
class Chain:
    """``node -- part -- node ...``: the words in turn."""

    words: tuple[Name, ...]
    place: Place


@dataclass(frozen=True)
class DeviceLine:
    """``NAME KIND: role node ..., parameter value``."""

    name: Name
    kind: Name
    terminals: tuple[tuple[Name, tuple[Name, ...]], ...]
    parameters: tuple[tuple[Name, Value], ...]
    signs: tuple[tuple[int, Place], ...]
    place: Place


@dataclass(frozen=True)
class Setting:
    """One ``NAME = value`` of a ``fix``."""

    name: Name
    value: Value


@dataclass(frozen=True)
class FixLine:
    """``fix NAME = value, ...``."""

    settings: tuple[Setting, ...]
    place: Place


@dataclass(frozen=True)
class UseLine:
    """``use BLOCK as NAME (node, ...)``."""

    block: Name
    name: Name
    nodes: tuple[Name, ...]
    place: Place


@dataclass(frozen=True)
class Block:
    """``block NAME (port, ...)`` to ``end``."""

    name: Name
    ports: tuple[Name, ...]
    body: tuple[CircuitStatement, ...]
    place: Place


@dataclass(frozen=True)
class ChooseLine:
    """``choose NAME, ...``."""

    names: tuple[Name, ...]
    place: Place


@dataclass(frozen=True)
class SolveLine:
    """``solve NAME, ...``."""

    names: tuple[Name, ...]
    place: Place


@dataclass(frozen=True)
class RawQuantity:
    """``V_n``, ``I_n`` or ``(V_n - V_m)`` as written."""

    first: Name
    second: Name | None
    place: Place


@dataclass(frozen=True)
class Condition:
    """``V_n = 0`` or ``I_n = 0`` behind ``with``."""

    quantity: Name
    is_zero: bool
    place: Place


@dataclass(frozen=True)
class AskLine:
    """``ask NAME = over/under with ... driven at ...``; ``loop`` instead of a ratio for a loop gain."""

    name: Name
    over: RawQuantity | None
    under: RawQuantity | None
    loop: Name | None
    conditions: tuple[Condition, ...]
    driven_at: tuple[Name, ...]
    place: Place


@dataclass(frozen=True)
class TargetLine:
    """``target NAME: ...`` or ``target NAME = expression``; a requirement is (word, value, value behind ``at``)."""

    name: Name
    shape: tuple[Name, ...]
    requirements: tuple[tuple[Name, Value, Value | None], ...]
    edges: tuple[tuple[Value, Value, Place], ...]
    meet_limits: bool
    expression: Expression | None
    place: Place


@dataclass(frozen=True)
class LimitLine:
    """``limit NAME: loss <= value from value to value`` and the like."""

    name: Name
    sense: str
    loss: Value
    low: Value | None
    high: Value | None
    place: Place


@dataclass(frozen=True)
class PartsLine:
    """``parts KIND: SERIES tolerance, from value to value``."""

    kind: Name
    series: Name
    tolerance: Value | None
    low: Value | None
    high: Value | None
    place: Place


@dataclass(frozen=True)
class NoteLine:
    """``note "..."``."""

    text: str
    place: Place


CircuitStatement = Chain | DeviceLine | FixLine | UseLine
Statement = (
    CircuitStatement
    | StageLine
    | Block
    | ChooseLine
    | SolveLine
    | AskLine
    | TargetLine
    | LimitLine
    | PartsLine
    | NoteLine
)
