"""Random circuits with true lines about them, lines changed at random, and an oracle that knows which are true.

The oracle is the sparse tableau of ``tests/core``, which shares nothing with the program's own solves.
"""

from __future__ import annotations

import dataclasses
import random
import re
from dataclasses import dataclass

from sympy.polys.rings import PolyElement

from symcirc.circuit.model import CurrentDrive, VoltageDrive
from symcirc.complaints import Complaint
from symcirc.derivation import Answer, derive, pose
from symcirc.nodal import build_system
from symcirc.nodal.text import equation_text
from symcirc.sheet.expression import Name, names
from symcirc.sheet.model import GROUND, Ask, NodeCurrent, PartCurrent, Quantity, Sheet, Voltage
from symcirc.transfer.function import TransferFunction
from symcirc.working import Line
from symcirc.working.parse import LONGEST_LINE
from tests.core.tableau import PRIME, asked_ratio, evaluate, with_ties
from tests.random_circuits import random_sheet
from tests.working.calling import sheet_of

#: Kinds of device whose laws hold currents that a working cannot name.
UNNAMED = {"cccs", "ccvs", "transformer", "conveyor"}


@dataclass(frozen=True)
class Case:
    """A sheet, its first ask, the laws of the circuit under it, sums of these, and the derived function."""

    text: str
    sheet: Sheet
    ask: Ask
    laws: tuple[str, ...]
    sums: tuple[str, ...]
    answer: str


def draw_case(rng: random.Random) -> Case | None:
    """Return a random case, or None where the sheet drawn cannot be used."""
    text = random_sheet(rng)
    try:
        sheet = sheet_of(text)
        posed = pose(sheet)
        ask = sheet.asks[0]
        if ask.loop is not None or any(device.kind in UNNAMED for device in sheet.devices):
            return None
        answer = derive(posed, {ask.name}).answers[0]
    except Complaint:
        return None
    setup = posed.setups[ask.name]
    drive = setup.drive
    pairs = [*setup.shorts, (drive.plus, drive.minus)] if isinstance(drive, VoltageDrive) else setup.shorts
    if not isinstance(answer, Answer) or any(minus != GROUND for _, minus in pairs):
        return None  # a source between two nodes has a current that no node names
    delivered = f"I_{drive.node}" if isinstance(drive, CurrentDrive) else "?"
    laws = [equation_text(e) for e in build_system(posed.circuit, setup).equations]
    laws = [law.replace(" = drive", f" = {delivered}") for law in laws]
    laws = [law for law in laws if "?" not in law and "." not in law and law != "0 = 0"]
    sums = [_sum_of(rng, sheet, laws) for _ in range(2)] if len(laws) > 1 else []
    function = f"{ask.name} = {_written(answer.function)}"
    if len(function) > LONGEST_LINE:
        return None
    return Case(text, sheet, ask, tuple(laws), tuple(sums), function)


def _sum_of(rng: random.Random, sheet: Sheet, laws: list[str]) -> str:
    """Return two laws, each times a factor, as one equation."""
    sides = [law.split(" = ") for law in rng.sample(laws, 2)]
    part = rng.choice(sheet.parts).name
    one = rng.choice([f"{part}", f"1/{part}", "3", f"(s + {part})"])
    (left, right), (left2, right2) = sides
    return f"{one}*({left}) - ({left2}) = {one}*({right}) - ({right2})"


def _written(function: TransferFunction) -> str:
    def side(coefficients: tuple[PolyElement, ...]) -> str:
        terms = [f"({c.as_expr()})*s**{k}" for k, c in enumerate(coefficients) if c]
        return " + ".join(terms) or "0"

    return f"({side(function.numerator)})/({side(function.denominator)})"


def changed(rng: random.Random, line: str, sheet: Sheet) -> str:
    """Return the line with one thing changed: a sign, a part, a node, a factor, a power of s."""
    tokens = re.findall(r"\*\*\d+|[A-Za-z_][A-Za-z0-9_]*|\d+|.", line)
    spots = [k for k, token in enumerate(tokens) if token in "+-" or token[0].isalpha() or token[0].isdigit()]
    spot = rng.choice(spots)
    token = tokens[spot]
    if token in "+-":
        tokens[spot] = "-" if token == "+" else "+"
    elif token.startswith("V_"):
        tokens[spot] = rng.choice(
            [v for v in [*(f"V_{node}" for node in sheet.node_places), "V_gnd"] if v != token]
        )
    elif token[0].isdigit():
        tokens[spot] = str(int(token) + 1)
    elif token in sheet.symbols:
        tokens[spot] = rng.choice(
            [*(p.name for p in sheet.parts if p.name != token), f"(2*{token})", f"{token}**2"]
        )
    else:
        tokens[spot] = f"(2*{token})"
    return "".join(tokens)


def is_true(line: Line, sheet: Sheet, ask: Ask) -> bool | None:
    """Tell whether a line is true of the circuit, by the tableau; None where it divides by zero everywhere."""
    assert line.equation is not None
    outcomes = [_is_true_at(line, sheet, ask, random.Random(seed)) for seed in range(3)]
    known = [outcome for outcome in outcomes if outcome is not None]
    return all(known) if known else None


def _is_true_at(line: Line, sheet: Sheet, ask: Ask, rng: random.Random) -> bool | None:
    assert line.equation is not None
    free = [name for name in sheet.symbols if name not in sheet.ties]
    values = {name: rng.randrange(2, PRIME) for name in [*free, "s", "pi"]}
    size = rng.randrange(2, PRIME)  # of the drive
    known = with_ties(values, sheet.ties)
    for name in (*names(line.equation.left), *names(line.equation.right)):
        if name.text == ask.name:
            known[name.text] = _ratio(sheet, ask, values)
        elif name.text not in known:
            known[name.text] = _quantity(name, sheet, ask, values) * size % PRIME
    try:
        return evaluate(line.equation.left, known) == evaluate(line.equation.right, known)
    except ValueError:  # a division by zero
        return None


def _quantity(name: Name, sheet: Sheet, ask: Ask, values: dict[str, int]) -> int:
    """Return a voltage or a current over the drive, which is asked for as the ask itself would be."""
    subject = name.text[2:]
    if name.text == "V_gnd":
        return 0
    quantity: Quantity = NodeCurrent(subject, ask.place)
    if name.text.startswith("V_"):
        quantity = Voltage(subject, GROUND, ask.place)
    elif subject not in sheet.node_places:
        quantity = PartCurrent(subject, ask.place)
    drive = ask.under if ask.driven_at is None else Voltage(ask.driven_at, GROUND, ask.place)
    return _ratio(sheet, dataclasses.replace(ask, over=quantity, under=drive), values)


def _ratio(sheet: Sheet, ask: Ask, values: dict[str, int]) -> int:
    ratio = asked_ratio(sheet, ask, values)
    assert ratio is not None
    return ratio
