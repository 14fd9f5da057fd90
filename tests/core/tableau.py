"""A third solve of a circuit, for tests alone: the sparse tableau, exact, in a finite field.

Every branch has its own voltage and its own current; the laws are Kirchhoff's two and one line for each branch
(Hachtel, Brayton and Gustavson, "The sparse tableau approach to network analysis and design", IEEE Trans. Circuit
Theory 18 (1971), from memory). It is written from the sheet and the design alone and shares nothing with
``nodal``, ``elimination`` or ``witness``.

Numbers are whole numbers modulo the prime :data:`PRIME`. At random values a rank, or an equality of two rational
functions, is by chance wrong there with a probability of about (degree)/PRIME, below 1e-16 (Schwartz, "Fast
probabilistic algorithms for verification of polynomial identities", J. ACM 27 (1980), from memory). In this field
2, 3, 5 and 7 have square roots, so ties with roots are exact as well; pi is one more random value.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
)
from symcirc.sheet.model import GROUND, Ask, Device, NodeCurrent, Part, PartCurrent, Quantity, Sheet, Voltage

#: The largest prime below 2**61 that is 7 modulo 8 (so 2 is a square and -1 is not) and has 3, 5, 7 as squares.
PRIME = 2305843009213690799


def inverse(value: int) -> int:
    """Return 1/value; raises ValueError for 0."""
    return pow(value, -1, PRIME)


def residue(value: Fraction) -> int:
    """Return a rational number in the field."""
    return value.numerator * inverse(value.denominator) % PRIME


def square_root(value: int) -> int:
    """Return the one square root that is itself a square, so that sqrt(6) = sqrt(2)*sqrt(3)."""
    root = pow(value, (PRIME + 1) // 4, PRIME)
    assert root * root % PRIME == value % PRIME, "no square in this field"
    return root


def evaluate(expression: Expression, known: Mapping[str, int]) -> int:
    """Return a sheet's expression in the field; ``known`` holds ``s`` and ``pi`` too."""

    def combine(node: Expression, operands: list[int]) -> int:
        match node:
            case Number(value=value):
                return residue(value)
            case Name(text=text):
                return known[text]
            case Sum():
                return sum(operands) % PRIME
            case Product():
                product = 1
                for operand in operands:
                    product = product * operand % PRIME
                return product
            case Negative():
                return -operands[0] % PRIME
            case Reciprocal():
                return inverse(operands[0])
            case Power(exponent=exponent):
                return pow(operands[0], exponent, PRIME)
            case Root():
                return square_root(operands[0])

    return fold(expression, combine)


def with_ties(values: Mapping[str, int], ties: Mapping[str, Expression]) -> dict[str, int]:
    """Return the values with those of the tied names added, by going round until none is left."""
    known = dict(values)
    waiting = dict(ties)
    while waiting:
        for name, expression in list(waiting.items()):
            try:
                known[name] = evaluate(expression, known)
            except KeyError:
                continue
            del waiting[name]
    return known


@dataclass
class Tableau:
    """Rows of the tableau: each maps an unknown to its factor; the key ``None`` is the right side.

    Unknowns are ("e", node), ("v", branch) and ("i", branch).
    """

    known: Mapping[str, int]
    rows: list[dict[tuple[str, str] | None, int]] = field(default_factory=list)
    leaving: dict[str, dict[tuple[str, str] | None, int]] = field(default_factory=dict)

    def branch(self, name: str, first: str, second: str) -> None:
        """Add a branch whose current flows from ``first`` to ``second``; its law is still to come."""
        for node, sign in ((first, 1), (second, -1)):
            row = self.leaving.setdefault(node, {})
            row["i", name] = row.get(("i", name), 0) + sign
        self.equation(voltage(name, -1) | self.difference(first, second))

    def difference(self, first: str, second: str) -> dict[tuple[str, str] | None, int]:
        """Return the terms of e_first - e_second."""
        terms: dict[tuple[str, str] | None, int] = {}
        for node, sign in ((first, 1), (second, -1)):
            if node != GROUND:
                terms["e", node] = terms.get(("e", node), 0) + sign
        return terms

    def equation(self, terms: Mapping[tuple[str, str] | None, int], right: int = 0) -> None:
        """Add ``sum of terms = right``."""
        row = {key: factor % PRIME for key, factor in terms.items() if factor % PRIME}
        self.rows.append(row | ({None: right % PRIME} if right % PRIME else {}))

    def finish(self, injected: Mapping[str, int]) -> None:
        """Add the current law of every node but gnd; ``injected`` are currents driven into nodes."""
        for node, row in self.leaving.items():
            if node != GROUND:
                self.equation(row, injected.get(node, 0))


def voltage(name: str, factor: int = 1) -> dict[tuple[str, str] | None, int]:
    return {("v", name): factor}


def current(name: str, factor: int = 1) -> dict[tuple[str, str] | None, int]:
    return {("i", name): factor}


# the parts -----------------------------------------------------------------------------------------------------


def add_part(tableau: Tableau, part: Part) -> None:
    name, known = part.name, tableau.known
    tableau.branch(name, part.first, part.second)
    value, s = known[name], known["s"]
    match part.kind:
        case "R" | "Z":
            tableau.equation(voltage(name) | current(name, -value))
        case "L":
            tableau.equation(voltage(name) | current(name, -s * value))
        case "C":
            tableau.equation(voltage(name, s * value) | current(name, -1))
        case "Y":
            tableau.equation(voltage(name, value) | current(name, -1))


def amplifier_gain(known: Mapping[str, int], name: str) -> int | None:
    """Return A of an amplifier: gain, 2 pi gbw/s, or both as one pole; None where the sheet gives neither."""
    gain, gbw = known.get(f"{name}_gain"), known.get(f"{name}_gbw")
    if gbw is None:
        return gain
    integrator = 2 * known["pi"] * gbw * inverse(known["s"]) % PRIME
    return integrator if gain is None else gain * integrator * inverse(gain + integrator) % PRIME


def add_amplifier(tableau: Tableau, device: Device, *, driven: bool, real: bool) -> None:
    """Add an amplifier: ideal, of finite gain, or (driven) with 1 V at its output in the place of its own law."""
    name = device.name
    tableau.branch(f"{name}:in", device.terminals["plus"][0], device.terminals["minus"][0])
    tableau.branch(name, GROUND, device.terminals["drives"][0])  # so its voltage is minus the output's
    tableau.equation(current(f"{name}:in"))
    gain = amplifier_gain(tableau.known, name) if real else None
    if driven:
        tableau.equation(voltage(name, -1), 1)
    elif gain is None:
        tableau.equation(voltage(f"{name}:in"))
    else:
        tableau.equation(voltage(f"{name}:in", gain) | voltage(name))


def add_device(tableau: Tableau, device: Device) -> None:
    name = device.name
    ends = {
        role: (nodes[0], nodes[1] if len(nodes) > 1 else GROUND) for role, nodes in device.terminals.items()
    }
    factor = {word: tableau.known.get(symbol, 0) for word, symbol in device.parameters.items()}
    if device.kind == "conveyor":
        for role in "xyz":
            tableau.branch(f"{name}:{role}", *ends[role])
        tableau.equation(current(f"{name}:y"))
        tableau.equation(voltage(f"{name}:x") | voltage(f"{name}:y", -1))
        tableau.equation(current(f"{name}:z") | current(f"{name}:x", -device.sign))
        return
    given, taken = ("primary", "secondary") if device.kind == "transformer" else ("senses", "drives")
    tableau.branch(f"{name}:{given}", *ends[given])
    tableau.branch(f"{name}:{taken}", *ends[taken])
    one, two = f"{name}:{given}", f"{name}:{taken}"
    match device.kind:
        case "vcvs":
            tableau.equation(current(one))
            tableau.equation(voltage(two) | voltage(one, -factor["gain"]))
        case "vccs":
            tableau.equation(current(one))
            tableau.equation(current(two) | voltage(one, -factor["gm"]))
        case "cccs":
            tableau.equation(voltage(one))
            tableau.equation(current(two) | current(one, -factor["gain"]))
        case "ccvs":
            tableau.equation(voltage(one))
            tableau.equation(voltage(two) | current(one, -factor["rm"]))
        case "transformer":
            tableau.equation(voltage(one) | voltage(two, -factor["ratio"]))
            tableau.equation(current(two) | current(one, factor["ratio"]))


#: The branch that I_NAME means for each kind of device (an opamp's is named as the device itself).
CURRENT_BRANCH = {"transformer": "primary", "conveyor": "x"}


# the drives ----------------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class Drives:
    """What is applied: the live voltage drive or current drive or driven amplifier, and the shorts."""

    live: tuple[str, str]
    is_current: bool
    amplifier: str | None
    shorts: tuple[tuple[str, str], ...]


def drives_of(sheet: Sheet, ask: Ask) -> Drives:
    """Return the drives of an ask after the design: other asks' voltage drives short, current drives open."""
    live, is_current = _pair(sheet, ask)
    opened = {dead.node for dead in ask.dead if dead.quantity == "I"}
    shorts = {
        frozenset((dead.node, GROUND)): (dead.node, GROUND) for dead in ask.dead if dead.quantity == "V"
    }
    for other in sheet.asks:
        if other.loop is not None:
            continue
        pair, other_is_current = _pair(sheet, other)
        if not other_is_current and not opened & set(pair):
            shorts.setdefault(frozenset(pair), pair)
    shorts.pop(frozenset(live), None)
    return Drives(live, is_current, ask.loop, tuple(shorts.values()))


def _pair(sheet: Sheet, ask: Ask) -> tuple[tuple[str, str], bool]:
    if ask.loop is not None:
        device = next(d for d in sheet.devices if d.name == ask.loop)
        return (device.terminals["drives"][0], GROUND), False
    if ask.driven_at is not None:
        return (ask.driven_at, GROUND), False
    if isinstance(ask.under, NodeCurrent):
        return (ask.under.node, GROUND), True
    assert isinstance(ask.under, Voltage)
    return (ask.under.plus, ask.under.minus), False


def build_tableau(sheet: Sheet, ask: Ask, values: Mapping[str, int], *, real: bool = False) -> Tableau:
    """Return the tableau of a sheet under one ask; ``values`` are of every free name, of ``s`` and of ``pi``.

    With ``real`` the amplifiers' ``gain`` and ``gbw`` count.
    """
    tableau = Tableau(with_ties(values, sheet.ties), [], {node: {} for node in sheet.node_places})
    drives = drives_of(sheet, ask)
    for part in sheet.parts:
        add_part(tableau, part)
    for device in sheet.devices:
        if device.kind == "opamp":
            add_amplifier(tableau, device, driven=device.name == drives.amplifier, real=real)
        else:
            add_device(tableau, device)
    for k, (plus, minus) in enumerate(drives.shorts):
        tableau.branch(f"short {k}", minus, plus)
        tableau.equation(voltage(f"short {k}"))
    if not drives.is_current and drives.amplifier is None:
        tableau.branch("drive", drives.live[1], drives.live[0])
        tableau.equation(voltage("drive", -1), 1)
    tableau.finish({drives.live[0]: 1} if drives.is_current else {})
    return tableau


# the solve -----------------------------------------------------------------------------------------------------


def solve_rows(tableau: Tableau) -> dict[tuple[str, str] | None, int] | None:
    """Return the value of every unknown, or None where the square tableau has not full rank.

    Gauss-Jordan elimination; the pivot is the shortest row's least used unknown, which keeps the rows short.
    """
    rows = [dict(row) for row in tableau.rows]
    unknowns = {("e", node) for node in tableau.leaving if node != GROUND}
    unknowns |= {key for row in rows for key in row if key is not None}
    unknowns |= {("i", name) for kind, name in unknowns if kind == "v"}
    assert len(rows) == len(unknowns), "a tableau is square"
    holders: dict[tuple[str, str] | None, set[int]] = {key: set() for key in unknowns}
    for number, row in enumerate(rows):
        for key in row:
            if key is not None:
                holders[key].add(number)
    waiting = set(range(len(rows)))
    pivots: dict[tuple[str, str] | None, int] = {}
    while waiting:
        number = min(waiting, key=lambda n: (len(rows[n]), n))
        waiting.discard(number)
        row = rows[number]
        choices = [key for key in row if key is not None]
        if not choices:
            return None
        pivot = min(choices, key=lambda key: (len(holders[key]), str(key)))
        pivots[pivot] = number
        scale = inverse(row[pivot])
        for key in row:
            row[key] = row[key] * scale % PRIME
        for other in list(holders[pivot]):
            if other != number:
                _subtract(rows, holders, other, row, rows[other][pivot])
    return {key: rows[number].get(None, 0) for key, number in pivots.items()}


def _subtract(
    rows: list[dict[tuple[str, str] | None, int]],
    holders: Mapping[tuple[str, str] | None, set[int]],
    number: int,
    pivot_row: Mapping[tuple[str, str] | None, int],
    factor: int,
) -> None:
    target = rows[number]
    for key, value in pivot_row.items():
        difference = (target.get(key, 0) - factor * value) % PRIME
        if difference:
            target[key] = difference
            if key is not None:
                holders[key].add(number)
        elif target.pop(key, None) is not None and key is not None:
            holders[key].discard(number)


def asked_ratio(sheet: Sheet, ask: Ask, values: Mapping[str, int], *, real: bool = False) -> int | None:
    """Return the asked ratio in the field, or None where the circuit is singular or the ratio divides by zero."""
    tableau = build_tableau(sheet, ask, values, real=real)
    solution = solve_rows(tableau)
    if solution is None:
        return None
    if ask.loop is not None:
        gain = amplifier_gain(tableau.known, ask.loop)
        assert gain is not None, "the sheet's reader wants a gain or a gbw for a loop gain"
        return -gain * input_voltage(sheet, ask.loop, solution) % PRIME
    drives = drives_of(sheet, ask)
    under = _read(sheet, drives, ask.under, solution)
    return _read(sheet, drives, ask.over, solution) * inverse(under) % PRIME if under else None


def input_voltage(sheet: Sheet, amplifier: str, solution: Mapping[tuple[str, str] | None, int]) -> int:
    """Return V+ - V- of an amplifier."""
    device = next(d for d in sheet.devices if d.name == amplifier)
    return _across(solution, device.terminals["plus"][0], device.terminals["minus"][0])


def _across(solution: Mapping[tuple[str, str] | None, int], plus: str, minus: str) -> int:
    volts = [0 if node == GROUND else solution["e", node] for node in (plus, minus)]
    return (volts[0] - volts[1]) % PRIME


def _read(
    sheet: Sheet, drives: Drives, quantity: Quantity | None, solution: Mapping[tuple[str, str] | None, int]
) -> int:
    match quantity:
        case Voltage(plus=plus, minus=minus):
            return _across(solution, plus, minus)
        case PartCurrent(part=name):
            kind = next((d.kind for d in sheet.devices if d.name == name), "opamp")
            branch = name if kind == "opamp" else f"{name}:{CURRENT_BRANCH.get(kind, 'drives')}"
            return solution["i", branch]
        case NodeCurrent(node=node):
            return sum(_delivered(drives, node, solution)) % PRIME
        case None:
            raise AssertionError("a ratio has both an over and an under")


def _delivered(drives: Drives, node: str, solution: Mapping[tuple[str, str] | None, int]) -> Iterator[int]:
    """Yield what the live drive delivers into its node, and into any other node what the shorts there deliver.

    A drive between two nodes delivers into the first what it takes from the second.
    """
    if drives.is_current and drives.live[0] == node:
        yield 1
        return
    pairs = {"drive": drives.live}
    if drives.is_current or drives.amplifier is not None or node not in drives.live:
        pairs = {f"short {k}": pair for k, pair in enumerate(drives.shorts)}
    for name, (plus, minus) in pairs.items():
        yield solution["i", name] if plus == node else -solution["i", name] if minus == node else 0
