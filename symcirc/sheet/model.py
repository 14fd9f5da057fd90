"""What a stage sheet says, as plain records: blocks placed, names resolved, every record with its place.

Names are the flat ones that formulas use (``S1_R1`` for part R1 of the block placed as S1); ``label`` is how
the same thing is shown in sentences (``S1.R1``).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import sympy

from symcirc.complaints import Place, Remark, Source
from symcirc.sheet.expression import Expression

GROUND = "gnd"


@dataclass(frozen=True)
class Value:
    """A value as it was written: an expression in SI base units, and the unit that stood behind it.

    ``unit`` is one of ohm, F, H, S, Hz, rad/s, s, dB, %, deg, or None where none was written. A value in dB,
    % or deg keeps its number as written. ``code`` is the letter of an IEC 60062 value code (``R`` in 0R47).
    """

    expression: Expression
    unit: str | None
    place: Place
    code: str | None = None


@dataclass(frozen=True)
class Part:
    """A two-terminal part; ``kind`` is R, C, L, Z or Y. Its current counts from ``first`` to ``second``."""

    name: str
    label: str
    kind: str
    first: str
    second: str
    place: Place


@dataclass(frozen=True)
class Device:
    """A part with more than two terminals.

    ``kind`` is opamp, vcvs, vccs, cccs, ccvs, transformer or conveyor. ``terminals`` maps a role to its node
    (plus, minus, x, y, z, an amplifier's drives) or to its two nodes (senses, primary, secondary, a
    controlled source's drives). ``parameters`` maps a word (gain, gm, rm, ratio, gbw) to the formula symbol
    for it (``U1_gain``): always there for the controlled sources and the transformer, and for an opamp only
    what the sheet gives. ``sign`` is a conveyor's, +1 or -1.
    """

    name: str
    label: str
    kind: str
    terminals: Mapping[str, tuple[str, ...]]
    parameters: Mapping[str, str]
    sign: int
    place: Place


@dataclass(frozen=True)
class Fix:
    """What a name is set to: an exact ``number`` in SI base units, or an expression in names (a tie)."""

    name: str
    expression: Expression
    number: sympy.Expr | None
    unit: str | None
    place: Place


@dataclass(frozen=True)
class Symbol:
    """A declared name that formulas may hold: a part, a device's parameter or a parameter of the sheet.

    ``role`` is part, parameter (of a device) or free (declared by fix, choose, solve, or brought in by a Y or
    Z). ``dimension`` is ohm, F, H, S, Hz, or None where any unit may be given.
    """

    name: str
    label: str
    role: str
    dimension: str | None
    place: Place


@dataclass(frozen=True)
class Voltage:
    """``V_plus - V_minus``; a node's voltage has ``gnd`` as minus."""

    plus: str
    minus: str
    place: Place


@dataclass(frozen=True)
class PartCurrent:
    """The current through a part in the direction its chain is written, or out of an amplifier's output.

    For a controlled source: through its driven branch, first node to second; for a transformer: through the
    primary, first node to second; for a conveyor: into x.
    """

    part: str
    place: Place


@dataclass(frozen=True)
class NodeCurrent:
    """The current that a drive (or a short in its place) delivers into a node."""

    node: str
    place: Place


Quantity = Voltage | PartCurrent | NodeCurrent


@dataclass(frozen=True)
class Dead:
    """A condition of ``with``: the voltage of a node is zero (shorted) or its drive current is (open)."""

    quantity: str  # "V" or "I"
    node: str
    place: Place


@dataclass(frozen=True)
class Ask:
    """A ratio that is asked for; ``over`` and ``under`` are None for a loop gain of amplifier ``loop``."""

    name: str
    over: Quantity | None
    under: Quantity | None
    loop: str | None
    dead: tuple[Dead, ...]
    driven_at: str | None
    place: Place


@dataclass(frozen=True)
class Target:
    """What an ask must become: a family or shape with its words, or an explicit expression in s.

    ``words`` maps order, edge, edge loss, ripple, stop, gain, centre, bandwidth, f0, q to the values that
    stand behind them; ``edges f1 f2`` gives "lower edge" and "upper edge".
    """

    ask: str
    kind: str | None
    family: str | None
    words: Mapping[str, Value]
    meet_limits: bool
    expression: Expression | None
    place: Place


@dataclass(frozen=True)
class Limit:
    """A line of the mask: loss at most (``sense`` "<=") or at least (">=") so many dB from low to high.

    ``low`` is None for ``below``, ``high`` is None for ``above``.
    """

    ask: str
    sense: str
    loss_db: Value
    low: Value | None
    high: Value | None
    place: Place


@dataclass(frozen=True)
class Buyable:
    """What can be bought of a kind of part: a series or a list of stock, tolerance in percent, range in SI base units.

    ``series`` is E3 to E192, or None where ``stock`` is the path of a list, as the sheet writes it (relative to the
    sheet). ``pairs`` tells that two pieces in series or in parallel may make a value.
    """

    kind: str
    series: str | None
    tolerance: Value | None
    low: Value | None
    high: Value | None
    place: Place
    stock: str | None = None
    stock_place: Place | None = None
    pairs: bool = False


@dataclass(frozen=True)
class Sheet:
    """A stage sheet, whole."""

    source: Source
    title: str
    parts: tuple[Part, ...]
    devices: tuple[Device, ...]
    node_labels: Mapping[str, str]
    node_places: Mapping[str, Place]
    ports: frozenset[str]
    symbols: Mapping[str, Symbol]
    fixes: Mapping[str, Fix]
    chosen: tuple[str, ...]
    solved: tuple[str, ...]
    asks: tuple[Ask, ...]
    targets: tuple[Target, ...]
    limits: tuple[Limit, ...]
    buyables: tuple[Buyable, ...]
    notes: tuple[str, ...]
    remarks: tuple[Remark, ...]

    def ask(self, name: str) -> Ask:
        """Return the ask of that name (it must be there)."""
        return next(ask for ask in self.asks if ask.name == name)

    @property
    def ties(self) -> dict[str, Expression]:
        """The names set to an expression in other names."""
        return {name: fix.expression for name, fix in self.fixes.items() if fix.number is None}

    @property
    def numbers(self) -> dict[str, sympy.Expr]:
        """The names set to a number, in SI base units, exact."""
        return {name: fix.number for name, fix in self.fixes.items() if fix.number is not None}
