"""One sheet's asks reached in three ways, and every refusal judged: what the random circuits are put through.

The ways: the exact transfer function (``nodal``, ``elimination``, ``transfer``); the program's own numeric witness;
the tableau of these tests.
"""

from __future__ import annotations

import dataclasses
import math
import random
import re
from collections import Counter
from collections.abc import Mapping, Sequence
from fractions import Fraction
from functools import lru_cache
from typing import Any

import networkx as nx
import numpy as np
import sympy
from sympy.polys.rings import PolyElement

from symcirc.circuit import Setup, build_circuit, build_setup
from symcirc.circuit.amplifier import gain_symbol, real_circuit
from symcirc.circuit.model import CurrentDrive, VoltageDrive
from symcirc.circuit.structure import refuse_structure
from symcirc.complaints import Complaint, Source
from symcirc.derivation import Answer, Derivation, derive, pose, pose_real
from symcirc.sheet import read_sheet
from symcirc.sheet.model import GROUND, Ask, Dead, NodeCurrent, Quantity, Sheet, Voltage
from symcirc.transfer.function import TransferFunction
from symcirc.witness.network import Network, complete
from tests.core.tableau import (
    PRIME,
    asked_ratio,
    build_tableau,
    drives_of,
    input_voltage,
    residue,
    solve_rows,
    square_root,
)

#: Rounding of a double, and how many times it may stand in a bound: a matrix row and a product have some dozens.
EPSILON, ROUNDINGS = 2.0**-52, 200
#: A comparison whose own bound is looser than this proves too little and is made again at other values.
LOOSEST = 1e-6
#: A matrix whose condition number lies below this is not singular, whatever the rounding.
SURELY_REGULAR = 1e11


class Disagreement(AssertionError):
    """Two ways to one answer differ, or a refusal is not justified."""


def read(text: str) -> Sheet:
    return read_sheet(Source("random.stage", text))


def compare_sheet(text: str, rng: random.Random) -> Counter[str]:
    """Compare all asks of a sheet and count the verdicts; raise Disagreement at the first that is wrong.

    A sheet that gives an amplifier a gain or a gbw is compared with these counted as well.
    """
    sheet = read(text)
    circuit = build_circuit(sheet)
    verdicts: Counter[str] = Counter()
    try:
        setups = tuple(build_setup(circuit, sheet.asks, ask) for ask in sheet.asks)
    except Complaint as complaint:
        judge_conditions(sheet, complaint)
        return Counter({f"refused, conditions: {_kind(complaint)}": 1})
    try:
        refuse_structure(circuit, sheet.asks, setups)
    except Complaint as complaint:
        judge_refusal(sheet, complaint, rng)
        return Counter({f"refused, structure: {_kind(complaint)}": 1})
    real = any(f"{d.name}_{word}" in sheet.symbols for d in sheet.devices for word in ("gain", "gbw"))
    for ask in sheet.asks:
        verdicts[compare_ask(sheet, ask, rng, real=False)] += 1
        if real:
            verdicts[f"real amplifiers: {compare_ask(sheet, ask, rng, real=True)}"] += 1
    return verdicts


def _kind(complaint: Complaint) -> str:
    """Return a complaint's sentence without its names."""
    return re.sub(r"`[^`]*`|[(][^)]*[)]", "...", complaint.cause)[:70]


# refusals ------------------------------------------------------------------------------------------------------


def judge_conditions(sheet: Sheet, complaint: Complaint) -> None:
    """A refused ask must contradict itself, or ask for the current into a node that nothing drives."""
    for ask in sheet.asks:
        drives = drives_of(sheet, ask)
        delivering = {*drives.live, *(node for pair in drives.shorts for node in pair)}
        currents = {q.node for q in (ask.over, ask.under) if isinstance(q, NodeCurrent)}
        shorted, opened = ({d.node for d in ask.dead if d.quantity == letter} for letter in "VI")
        if "neither driven nor shorted" in complaint.cause and currents - delivering:
            return
        if "driven by this ask" in complaint.cause and drives.live[0] in shorted | opened:
            return
        if "both shorted and open" in complaint.cause and shorted & opened:
            return
    raise Disagreement(f"no ask contradicts itself, and yet: {complaint}")


def judge_refusal(sheet: Sheet, complaint: Complaint, rng: random.Random) -> None:
    """A refused structure must be on the design's list of what is refused as it stands, or be truly singular."""
    if "hangs on" in complaint.cause:
        if not hanging_nodes(sheet):
            raise Disagreement(f"no node hangs, and yet: {complaint}")
    elif "drives nothing" in complaint.cause:
        if not idle_outputs(sheet):
            raise Disagreement(f"every output drives something, and yet: {complaint}")
    elif all(is_regular(sheet, ask, rng) for ask in sheet.asks):
        raise Disagreement(f"every ask can be solved, and yet it is refused: {complaint}")


def is_regular(sheet: Sheet, ask: Ask, rng: random.Random, *, real: bool = False, tied: bool = True) -> bool:
    """Tell whether the tableau has one solution at random values; without ``tied`` the ties are left out."""
    if not tied:
        sheet = dataclasses.replace(
            sheet, fixes={name: fix for name, fix in sheet.fixes.items() if fix.number is not None}
        )
    return solve_rows(build_tableau(sheet, ask, random_residues(sheet, rng), real=real)) is not None


def terminal_counts(sheet: Sheet) -> Counter[str]:
    """Return how many terminals stand on each node."""
    ends = [node for part in sheet.parts for node in (part.first, part.second)]
    ends += [node for device in sheet.devices for nodes in device.terminals.values() for node in nodes]
    return Counter(ends)


def hanging_nodes(sheet: Sheet) -> set[str]:
    """Return the nodes on one terminal that are neither asked, driven, named by a condition nor a port."""
    free = {GROUND, *sheet.ports}
    for ask in sheet.asks:
        for quantity in (ask.over, ask.under):
            if isinstance(quantity, Voltage):
                free |= {quantity.plus, quantity.minus}
            elif isinstance(quantity, NodeCurrent) and quantity is ask.under and ask.driven_at is None:
                free.add(quantity.node)
        free |= {dead.node for dead in ask.dead}
        free |= {ask.driven_at} if ask.driven_at else set()
    return {node for node, count in terminal_counts(sheet).items() if count == 1} - free


def idle_outputs(sheet: Sheet) -> set[str]:
    counts = terminal_counts(sheet)
    outputs = {d.terminals["drives"][0] for d in sheet.devices if d.kind == "opamp"}
    return {node for node in outputs if counts[node] == 1}


def judge_no_answer(sheet: Sheet, ask: Ask, complaint: Complaint, rng: random.Random, *, real: bool) -> str:
    """Check what the complaint about an ask without an answer claims, and return its kind."""
    if "is zero, whatever the drive is" in complaint.cause:
        if not is_regular(sheet, ask, rng, real=real, tied=False):
            raise Disagreement(f"the circuit itself is singular, and the ratio is blamed: {complaint}")
        return "singular: zero under the line"
    if "with the sheet's fixes" in complaint.cause:
        if not is_regular(sheet, ask, rng, real=real, tied=False):
            raise Disagreement(f"without the fixes it is singular too: {complaint}")
        return "singular: by the fixes"
    if is_regular(sheet, ask, rng, real=real, tied=False):
        raise Disagreement(f"without the fixes there is an answer: {complaint}")
    if "no feedback" in complaint.cause:
        name = next(d.name for d in sheet.devices if f"`{d.label}` has no feedback" in complaint.cause)
        if name == ask.loop or feedback_exists(sheet, ask, name, rng):
            raise Disagreement(f"`{name}` has feedback: {complaint}")
        return "singular: no feedback"
    if "fight" in complaint.cause:
        if not sources_fight(sheet, ask):
            raise Disagreement(f"no loop of sources fights: {complaint}")
        return "singular: sources fight"
    return "singular: unexplained"


def feedback_exists(sheet: Sheet, ask: Ask, amplifier: str, rng: random.Random) -> bool:
    """Tell whether a voltage forced on an amplifier's output moves its own inputs against each other.

    The other amplifiers get finite gains, so that one of them without feedback of its own does not hide the answer.
    """
    dead = ask.dead
    devices = sheet.devices
    if (
        ask.loop is not None
    ):  # that amplifier's output is the drive: dead now, and its own law stays set aside
        held = next(d for d in devices if d.name == ask.loop)
        dead = (*dead, Dead("V", held.terminals["drives"][0], held.place))
        devices = tuple(d for d in devices if d.name != ask.loop)
    loop = dataclasses.replace(ask, over=None, under=None, loop=amplifier, driven_at=None, dead=dead)
    asks = (*sheet.asks, loop)  # the ask's own voltage drive is among the dead ones now
    shorted = dataclasses.replace(sheet, asks=asks, devices=devices)
    gains = {f"{d.name}_gain": rng.randrange(2, PRIME) for d in devices if d.kind == "opamp"}
    values = random_residues(sheet, rng) | gains
    solution = solve_rows(build_tableau(shorted, loop, values, real=True))
    return solution is not None and bool(input_voltage(sheet, amplifier, solution))


def sources_fight(sheet: Sheet, ask: Ask) -> bool:
    """Tell whether a loop of sources makes the tableau singular by itself.

    Round a loop of branches whose currents are free, one current can flow and nothing tells how much; round a loop
    of branches whose voltages are given, these voltages must cancel. An amplifier's output and a driven voltage are
    only of the first sort, a sensed branch of zero volts is only of the second, a drive and a short are of both.
    """
    drives = drives_of(sheet, ask)
    both = [] if drives.is_current else [drives.live]
    both += drives.shorts
    currents_free, voltages_given = list(both), list(both)
    for device in sheet.devices:
        ends = {role: (nodes[0], [*nodes, GROUND][1]) for role, nodes in device.terminals.items()}
        if device.kind in ("opamp", "vcvs", "ccvs") and device.name != drives.amplifier:
            currents_free.append(ends["drives"])
        if device.kind in ("cccs", "ccvs"):
            voltages_given.append(ends["senses"])
    return any(_has_loop(branches) for branches in (currents_free, voltages_given))


def _has_loop(branches: Sequence[tuple[str, str]]) -> bool:
    graph = nx.MultiGraph(list(branches))
    return bool(graph.number_of_edges() > graph.number_of_nodes() - nx.number_connected_components(graph))


# one ask -------------------------------------------------------------------------------------------------------


def random_residues(sheet: Sheet, rng: random.Random) -> dict[str, int]:
    """Return random values in the field for all names that are free, for s and for pi."""
    names = [n for n in sheet.symbols if n not in sheet.ties]
    return {name: rng.randrange(2, PRIME) for name in [*names, "s", "pi"]}


def compare_ask(sheet: Sheet, ask: Ask, rng: random.Random, *, real: bool) -> str:
    """Compare the three ways for one ask and return the verdict."""
    values = random_residues(sheet, rng)
    exact = asked_ratio(sheet, ask, values, real=real)
    try:
        derivation = derive((pose_real if real else pose)(sheet), {ask.name})
    except Complaint as complaint:
        if exact is not None:
            raise Disagreement(f"{ask.name}: the tableau can be solved, and yet: {complaint}") from None
        if not is_regular(sheet, ask, rng, real=real):
            _expect_singular_witness(sheet, ask, rng, real=real)
        return judge_no_answer(sheet, ask, complaint, rng, real=real)
    answer = derivation.answer(ask.name)
    if exact is None:
        raise Disagreement(f"{ask.name}: the tableau is singular, and an answer is given")
    check_form(answer.function)
    above, below = in_field(answer.function, values)
    if below == 0 or above != exact * below % PRIME:
        raise Disagreement(f"{ask.name}: the transfer function differs from the tableau")
    return compare_with_witness(derivation, answer, rng)


def check_form(function: TransferFunction) -> None:
    """Check the invariants that a transfer function's docstring states."""
    for polynomials in (function.numerator, function.denominator):
        if polynomials and not polynomials[-1]:
            raise Disagreement("a highest coefficient is zero")
    if not function.denominator:
        raise Disagreement("the denominator is zero")
    leading = function.ring.domain.to_sympy(function.denominator[-1].LC)
    if not leading > 0:
        raise Disagreement("the denominator's first number is not positive")


def _powers_sum(polynomials: Sequence[PolyElement], known: Mapping[str, int]) -> int:
    total = 0
    for power, polynomial in enumerate(polynomials):
        names = [str(symbol) for symbol in polynomial.ring.symbols]
        for monomial, coefficient in polynomial.terms():
            product = _number_in_field(polynomial.ring.domain, coefficient) * pow(known["s"], power, PRIME)
            for name, exponent in zip(names, monomial, strict=True):
                if exponent:
                    product = product * pow(known[name], exponent, PRIME) % PRIME
            total += product
    return total % PRIME


def in_field(function: TransferFunction, known: Mapping[str, int]) -> tuple[int, int]:
    """Return numerator and denominator in the tableau's field."""
    return _powers_sum(function.numerator, known), _powers_sum(function.denominator, known)


def _number_in_field(domain: sympy.polys.domains.Domain, coefficient: Any) -> int:
    if domain.is_QQ:
        return residue(Fraction(int(coefficient.numerator), int(coefficient.denominator)))
    return _surd_in_field(domain.to_sympy(coefficient))


@lru_cache(maxsize=1000)
def _surd_in_field(number: sympy.Expr) -> int:
    """Return a sum of products of rationals and square roots in the field."""
    if number.is_Rational:
        return residue(Fraction(int(number.p), int(number.q)))
    if number.is_Pow and number.exp == sympy.Rational(1, 2):
        return square_root(_surd_in_field(number.base))
    operands = [_surd_in_field(operand) for operand in number.args]
    if number.is_Add:
        return sum(operands) % PRIME
    assert number.is_Mul, number
    return math.prod(operands) % PRIME


# the witness ---------------------------------------------------------------------------------------------------


def random_values(sheet: Sheet, rng: random.Random) -> tuple[dict[str, float], complex]:
    """Return random values from 0.4 to 2.5 of the free names, and an s of about that size."""
    names = [n for n in sheet.symbols if n not in sheet.ties]
    return {name: math.exp(rng.uniform(-0.9, 0.9)) for name in names}, complex(
        rng.uniform(0.2, 1.5), rng.uniform(-1.5, 1.5)
    )


def _expect_singular_witness(sheet: Sheet, ask: Ask, rng: random.Random, *, real: bool) -> None:
    circuit, gains = real_circuit(build_circuit(sheet)) if real else (build_circuit(sheet), {})
    values, s = random_values(sheet, rng)
    setup = build_setup(circuit, sheet.asks, ask)
    network = Network(circuit, setup, complete(values, {**sheet.ties, **gains}, s), s)
    if network.condition() < SURELY_REGULAR:
        raise Disagreement(f"{ask.name}: singular, and the witness's condition is {network.condition():.3g}")


def compare_with_witness(derivation: Derivation, answer: Answer, rng: random.Random) -> str:
    """Compare a transfer function with the witness, within a bound that rounding alone explains."""
    for _ in range(6):
        values, s = random_values(derivation.sheet, rng)
        known = complete(values, derivation.ties, s)
        network = Network(derivation.circuit, answer.setup, known, s)
        factor = 1.0
        if answer.ask.loop is not None:
            factor = -known[gain_symbol(answer.ask.loop)]
        expected, rounding = in_floats(answer.function, {**values, "pi": math.pi}, s)
        bound = rounding + abs(factor) * witness_bound(network, abs(expected / factor))
        if not bound < LOOSEST * max(1.0, abs(expected)):
            continue
        found = factor * network.ratio()
        if not abs(found - expected) <= bound:
            raise Disagreement(
                f"{answer.ask.name}: the witness says {found}, the function {expected}, bound {bound:.2g}"
            )
        return "agree"
    return "agree with the tableau, too ill-conditioned for the witness"


def witness_bound(network: Network, size: float) -> float:
    """Bound the witness's error in a ratio of ``size``, from its condition number.

    A solution x of a matrix with condition number k has errors of some roundings times k |x| (Higham, "Accuracy
    and Stability of Numerical Algorithms", chapter 7, from memory); over/under carries both, divided by |under|.
    """
    condition = network.condition()
    if not condition < 1e14:
        return math.inf
    setup = network.setup
    network.setup = dataclasses.replace(setup, over=setup.under, under=_drive_itself(setup))
    under = abs(network.ratio())
    network.setup = setup
    solution = float(np.abs(np.linalg.solve(network.matrix, network.right)).max(initial=1.0))
    error = ROUNDINGS * EPSILON * condition * solution
    return math.inf if under <= 2 * error else 2 * error * (1 + size) / under


def _drive_itself(setup: Setup) -> Quantity:
    """Return the quantity that the drive sets to 1."""
    drive = setup.drive
    if isinstance(drive, CurrentDrive):
        return NodeCurrent(drive.node, setup.place)
    plus, minus = (drive.plus, drive.minus) if isinstance(drive, VoltageDrive) else (drive.node, GROUND)
    return Voltage(plus, minus, setup.place)


def in_floats(function: TransferFunction, known: Mapping[str, float], s: complex) -> tuple[complex, float]:
    """Return the value at s and a bound on its rounding, from the sizes of the products that were added."""
    above, sizes_above = _float_sum(function.numerator, known, s)
    below, sizes_below = _float_sum(function.denominator, known, s)
    if abs(below) <= ROUNDINGS * EPSILON * sizes_below:
        return math.inf, math.inf
    value = above / below
    return value, ROUNDINGS * EPSILON * (sizes_above + abs(value) * sizes_below) / abs(below)


def _float_sum(
    polynomials: Sequence[PolyElement], known: Mapping[str, float], s: complex
) -> tuple[complex, float]:
    total, sizes = 0j, 0.0
    for power, polynomial in enumerate(polynomials):
        if not polynomial:
            continue
        names = [str(symbol) for symbol in polynomial.ring.symbols]
        point = np.array([known.get(name, 1.0) for name in names])
        domain = polynomial.ring.domain
        exponents = np.array(list(polynomial.keys()), dtype=float)
        numbers = np.array([float(domain.to_sympy(c)) for c in polynomial.values()])
        products = numbers * np.prod(point**exponents, axis=1)
        total += complex(products.sum()) * s**power
        sizes += float(np.abs(products).sum()) * abs(s) ** power
    return total, sizes
