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


@dataclass(frozen=True)
class Terminal:
    """``role node`` or ``role node node`` of a device."""

    role: Name
    nodes: tuple[Name, ...]


@dataclass(frozen=True)
class Parameter:
    """``word value`` of a device."""

    word: Name
    value: Value


@dataclass(frozen=True)
class Sign:
    """``sign +`` or ``sign -`` of a device."""

    sign: int
    place: Place


@dataclass(frozen=True)
class DeviceLine:
    """``NAME KIND: role node ..., parameter value``."""

    name: Name
    kind: Name
    terminals: tuple[Terminal, ...]
    parameters: tuple[Parameter, ...]
    signs: tuple[Sign, ...]


@dataclass(frozen=True)
class Setting:
    """One ``NAME = value`` of a ``fix``."""

    name: Name
    value: Value


@dataclass(frozen=True)
class FixLine:
    """``fix NAME = value, ...``."""

    settings: tuple[Setting, ...]


@dataclass(frozen=True)
class UseLine:
    """``use BLOCK as NAME (node, ...)``."""

    block: Name
    name: Name
    nodes: tuple[Name, ...]


@dataclass(frozen=True)
class Block:
    """``block NAME (port, ...)`` to ``end``."""

    name: Name
    ports: tuple[Name, ...]
    body: tuple[CircuitStatement, ...]


@dataclass(frozen=True)
class ChooseLine:
    """``choose NAME, ...``."""

    names: tuple[Name, ...]


@dataclass(frozen=True)
class SolveLine:
    """``solve NAME, ...``."""

    names: tuple[Name, ...]


@dataclass(frozen=True)
class RawQuantity:
    """``V_n``, ``I_n`` or ``(V_n - V_m)`` as written."""

    first: Name
    second: Name | None
    place: Place


@dataclass(frozen=True)
class Ratio:
    """``over/under``."""

    over: RawQuantity
    under: RawQuantity


@dataclass(frozen=True)
class Loop:
    """``loop(amplifier)``."""

    amplifier: Name


@dataclass(frozen=True)
class Condition:
    """``V_n = 0`` or ``I_n = 0`` behind ``with``."""

    quantity: Name
    is_zero: bool
    place: Place


@dataclass(frozen=True)
class AskLine:
    """``ask NAME = ratio with ... driven at ...``."""

    name: Name
    what: Ratio | Loop
    conditions: tuple[Condition, ...]
    driven_at: Name | None


@dataclass(frozen=True)
class Requirement:
    """``word value``, or ``edge value at value``."""

    word: Name
    value: Value
    at: Value | None


@dataclass(frozen=True)
class Edges:
    """``edges value value``."""

    low: Value
    high: Value
    place: Place


@dataclass(frozen=True)
class Meet:
    """``meet limits``."""

    place: Place


@dataclass(frozen=True)
class ShapeLine:
    """``target NAME: KIND FAMILY, ...``."""

    name: Name
    shape: tuple[Name, ...]
    requirements: tuple[Requirement, ...]
    edges: tuple[Edges, ...]
    meets: tuple[Meet, ...]


@dataclass(frozen=True)
class FormulaLine:
    """``target NAME = expression``."""

    name: Name
    expression: Expression


@dataclass(frozen=True)
class LimitLine:
    """``limit NAME: loss <= value from value to value`` and the like."""

    name: Name
    sense: str
    loss: Value
    low: Value | None
    high: Value | None


@dataclass(frozen=True)
class Series:
    """``SERIES tolerance``."""

    name: Name
    tolerance: Value | None


@dataclass(frozen=True)
class Stock:
    """``stock FILE``: the path without its quotes."""

    path: Name


@dataclass(frozen=True)
class PartsLine:
    """``parts KIND: SERIES tolerance, from value to value, pairs``: ranges and words ``pairs`` as often as written."""

    kind: Name
    bought: Series | Stock
    ranges: tuple[tuple[Value, Value], ...]
    pairs: tuple[Name, ...]


@dataclass(frozen=True)
class NoteLine:
    """``note "..."``."""

    text: str


CircuitStatement = Chain | DeviceLine | FixLine | UseLine
TargetLine = ShapeLine | FormulaLine
Statement = (
    CircuitStatement
    | StageLine
    | Block
    | ChooseLine
    | SolveLine
    | AskLine
    | ShapeLine
    | FormulaLine
    | LimitLine
    | PartsLine
    | NoteLine
)
