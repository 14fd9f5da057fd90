"""From a sheet to the transfer function of everything it asks, each answer reached in two ways or three."""

from __future__ import annotations

from collections.abc import Callable, Container, Iterator, Mapping
from dataclasses import dataclass, replace
from typing import cast

from sympy.polys.rings import PolyElement

from symcirc.circuit import build_circuit, build_setup
from symcirc.circuit.amplifier import gain_symbol, loop_gains, real_circuit
from symcirc.circuit.model import Circuit, LoopDrive, Setup, VoltageDrive
from symcirc.circuit.structure import bias_remarks, explain_singular, refuse_structure
from symcirc.complaints import Complaint, InternalFault, Remark, listed
from symcirc.elimination import solve
from symcirc.elimination.solve import silent
from symcirc.nodal import build_system
from symcirc.ratio import Coefficient, Ratio
from symcirc.sheet.expression import Expression
from symcirc.sheet.model import Ask, Quantity, Sheet, Voltage
from symcirc.transfer.build import Built, build_function
from symcirc.transfer.function import TransferFunction, symbols_in
from symcirc.transfer.signs import sign_remarks
from symcirc.trees.answer import determinants
from symcirc.trees.collect import collected
from symcirc.trees.count import count
from symcirc.trees.diagram import Diagram
from symcirc.trees.evaluate import response
from symcirc.trees.expand import expanded, symbols
from symcirc.trees.frontier import TooManyStates
from symcirc.witness.agree import Evidence, confirm, confirm_values

Progress = Callable[[str], None]

#: Answers with more products than this are not expanded unless it is asked for.
MOST_PRODUCTS = 20_000
#: A decision diagram larger than this is given up: some gigabytes of memory and some tens of seconds.
MOST_STATES = 8_000_000
#: Elimination is the second symbolic way where it is cheap: with no more products and nodes than these it takes
#: some tens of milliseconds, however the circuit is connected.
CHEAP_PRODUCTS, CHEAP_NODES = 2_000, 24


@dataclass(frozen=True)
class Answer:
    """One ask's transfer function and the evidence for it.

    ``ratio`` is what the two-graph engine gave, ties not yet in it. ``eliminated`` tells that elimination of the
    nodal equations, too, came to the same function.
    """

    ask: Ask
    setup: Setup
    ratio: Ratio
    function: TransferFunction
    evidence: Evidence
    eliminated: bool


@dataclass(frozen=True)
class BigAnswer:
    """One ask's answer as a decision diagram: expanded it would have ``products`` (over, under) in it.

    ``loop_gain`` names the amplifier's gain by which minus the ratio is multiplied where a loop gain is asked.
    """

    ask: Ask
    setup: Setup
    diagram: Diagram
    products: tuple[int, int]
    evidence: Evidence
    loop_gain: str | None


@dataclass(frozen=True)
class Derivation:
    """All answers of a sheet. ``ties`` are the sheet's, and the gains of real amplifiers where they count."""

    sheet: Sheet
    circuit: Circuit
    ties: Mapping[str, Expression]
    answers: tuple[Answer | BigAnswer, ...]
    remarks: tuple[Remark, ...]

    def answer(self, name: str) -> Answer:
        """Return the expanded answer of that name; raises KeyError where there is none."""
        for answer in self.answers:
            if answer.ask.name == name and isinstance(answer, Answer):
                return answer
        raise KeyError(name)


@dataclass(frozen=True)
class Posed:
    """A sheet's asks made ready: the circuit, its ties, and what each ask applies."""

    sheet: Sheet
    circuit: Circuit
    ties: Mapping[str, Expression]
    setups: Mapping[str, Setup]

    def wanted(self, names: Container[str] | None) -> Iterator[tuple[Ask, Setup]]:
        """Yield the asks of these names, or all, each with what it applies."""
        for ask in self.sheet.asks:
            if names is None or ask.name in names:
                yield ask, self.setups[ask.name]


def pose(sheet: Sheet) -> Posed:
    """Return a sheet's asks made ready, its amplifiers ideal; raises Complaint for what no circuit may have."""
    return _pose(sheet, build_circuit(sheet), sheet.ties)


def pose_real(sheet: Sheet) -> Posed:
    """Return a sheet's asks made ready, the amplifiers' ``gain`` and ``gbw`` counted."""
    circuit, gains = real_circuit(build_circuit(sheet))
    return _pose(sheet, circuit, {**sheet.ties, **gains})


def _pose(sheet: Sheet, circuit: Circuit, ties: Mapping[str, Expression]) -> Posed:
    setups = {ask.name: build_setup(circuit, sheet.asks, ask) for ask in sheet.asks}
    refuse_structure(circuit, sheet.asks, tuple(setups.values()))
    loops = loop_gains(build_circuit(sheet), setups.values())
    return Posed(sheet, circuit, {**ties, **loops}, setups)


def derive(
    posed: Posed, wanted: Container[str] | None = None, most: int = MOST_PRODUCTS, progress: Progress = silent
) -> Derivation:
    """Return the transfer functions of a sheet's asks, or of the wanted ones only.

    An answer with more than ``most`` products is left as a decision diagram. Raises Complaint for a circuit that
    cannot be solved, InternalFault where two ways to an answer disagree.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> derive(pose(sheet)).answer("H").function.denominator
    (1, R1*C1)
    """
    answers: list[Answer | BigAnswer] = []
    setups = tuple(posed.setups.values())
    remarks = [*posed.sheet.remarks, *bias_remarks(posed.circuit, setups)]
    for ask, setup in posed.wanted(wanted):
        progress(f"deriving {ask.name}")
        diagram = collected(solved_diagram(posed, setup))
        if sum(count(diagram)) > most:
            answers.append(_big_answer(posed, ask, setup, diagram))
            continue
        answer, found = _answer(posed, ask, setup, diagram, progress)
        answers.append(answer)
        remarks += [*found, *sign_remarks(answer.function, posed.sheet.symbols, ask)]
    remarks += _idle_parts(posed, answers)
    if any(device.kind == "opamp" for device in posed.sheet.devices):
        from symcirc.stability.exchanged import (
            exchanged_inputs,
        )  # late: stages without amplifiers start sooner

        remarks += exchanged_inputs(posed.sheet, build_circuit(posed.sheet), setups)
    return Derivation(posed.sheet, posed.circuit, posed.ties, tuple(answers), tuple(remarks))


def _determinants(posed: Posed, setup: Setup) -> Diagram:
    try:
        return determinants(posed.circuit, setup, MOST_STATES)
    except TooManyStates:
        raise Complaint(
            setup.place,
            f"the circuit is too densely connected for an exact `{setup.ask}`: its decision diagram would have more "
            f"than {MOST_STATES:,} states",
            "ask about a smaller piece of it, or one with fewer paths beside each other",
        ) from None


def _drive_itself(setup: Setup) -> Quantity:
    """Return what stands under the line where the drive does: its voltage, or what is asked for itself."""
    drive = setup.drive
    return (
        Voltage(drive.plus, drive.minus, setup.under.place)
        if isinstance(drive, VoltageDrive)
        else setup.under
    )


def solved_diagram(posed: Posed, setup: Setup) -> Diagram:
    """Return numerator and denominator of an ask as a decision diagram, products not yet collected.

    Raises Complaint where the equations have no unique solution, or what stands under the line is always zero.
    """
    diagram = _determinants(posed, setup)
    drive = setup.drive
    own = (
        Voltage(drive.plus, drive.minus, setup.under.place)
        if isinstance(drive, VoltageDrive)
        else setup.under
    )
    if setup.under != own:  # two ratios over one determinant, which must not be zero itself
        _require_solution(posed, replace(setup, under=own), _determinants(posed, replace(setup, under=own)))
        if not collected(diagram).roots[1]:
            raise Complaint(
                setup.under.place,
                f"what stands under the line of `{setup.ask}` is zero, whatever the drive is",
                "put a voltage or a current under the line that the drive moves",
            )
        return diagram
    _require_solution(posed, setup, diagram)
    return diagram


def _require_solution(posed: Posed, setup: Setup, diagram: Diagram) -> None:
    if not collected(diagram).roots[1]:
        raise explain_singular(posed.circuit, setup)


def _big_answer(posed: Posed, ask: Ask, setup: Setup, diagram: Diagram) -> BigAnswer:
    def value(known: Mapping[str, complex], s: complex) -> complex:
        return response(
            diagram, cast(Mapping[str, float], known), s
        )  # a tied value may be complex; it serves

    evidence = confirm_values(posed.circuit, setup, posed.ties, value)
    loop = gain_symbol(setup.drive.amplifier) if isinstance(setup.drive, LoopDrive) else None
    return BigAnswer(ask, setup, diagram, count(diagram), evidence, loop)


def _answer(
    posed: Posed, ask: Ask, setup: Setup, diagram: Diagram, progress: Progress
) -> tuple[Answer, list[Remark]]:
    ratio = _as_asked(_expanded_ratio(diagram), setup)
    built = build_function(ratio, posed.ties)
    if built is None or not _solvable_when_tied(posed, setup):
        raise Complaint(
            ask.place,
            f"with the sheet's fixes the equations for `{ask.name}` have no solution, or many",
            f"look at what is tied ({listed(list(posed.ties)[:6])}): it makes the circuit singular",
        )
    evidence = confirm(posed.circuit, setup, posed.ties, built.function)
    cheap = is_cheap(posed.circuit, diagram)
    hidden = _eliminate(posed, setup, built, progress) if cheap else built
    answer = Answer(ask, setup, ratio, built.function, evidence, cheap)
    return answer, _hidden_mode(ask, len(hidden.hidden) - 1)


def _expanded_ratio(diagram: Diagram) -> Ratio:
    over, under = (tuple(expanded(diagram, root)) for root in diagram.roots)
    return Ratio(symbols(diagram), over, under)


def _solvable_when_tied(posed: Posed, setup: Setup) -> bool:
    """Tell whether the ties leave the determinant, which a ratio of two voltages does not show, other than zero."""
    own = _drive_itself(setup)
    if setup.under == own or not posed.ties:
        return True
    diagram = collected(_determinants(posed, replace(setup, over=setup.under, under=own)))
    return build_function(_expanded_ratio(diagram), posed.ties) is not None


def is_cheap(circuit: Circuit, diagram: Diagram) -> bool:
    """Tell whether elimination is made too, as a second symbolic way."""
    return sum(count(diagram)) <= CHEAP_PRODUCTS and len(circuit.graph) <= CHEAP_NODES


def _eliminate(posed: Posed, setup: Setup, built: Built, progress: Progress) -> Built:
    """Derive once more by elimination of the nodal equations; raises InternalFault where it comes out otherwise."""
    ratio = solve(build_system(posed.circuit, setup), progress)
    other = None if ratio is None else build_function(_as_asked(ratio, setup), posed.ties)
    if other is None or _written(other.function) != _written(built.function):
        raise InternalFault(f"elimination and the two-graph engine give different functions for {setup.ask}")
    return other


def _written(function: TransferFunction) -> tuple[object, ...]:
    """Return a function in a form that does not depend on which symbols its ring holds besides."""
    gens = function.ring.symbols

    def terms(coefficients: tuple[PolyElement, ...]) -> list[object]:
        return [
            {
                tuple((str(gens[k]), e) for k, e in enumerate(monomial) if e): number
                for monomial, number in coefficient.terms()
            }
            for coefficient in coefficients
        ]

    return terms(function.numerator), terms(function.denominator)


def _hidden_mode(ask: Ask, degree: int) -> list[Remark]:
    if degree < 1:
        return []
    mode = f"a factor of degree {degree} in s cancels in `{ask.name}`"
    return [Remark(ask.place, f"{mode}: the circuit has a natural mode that this ratio does not show")]


def _as_asked(ratio: Ratio, setup: Setup) -> Ratio:
    """Return the ratio, or for a loop gain T = -A (V+ - V-)/V_drives minus the ratio times the gain A."""
    if not isinstance(setup.drive, LoopDrive):
        return ratio

    def extended(coefficient: Coefficient, exponent: int, sign: int) -> Coefficient:
        return {(*exponents, exponent): sign * number for exponents, number in coefficient.items()}

    return Ratio(
        (*ratio.symbols, gain_symbol(setup.drive.amplifier)),
        tuple(extended(c, 1, -1) for c in ratio.numerator),
        tuple(extended(c, 0, 1) for c in ratio.denominator),
    )


def _idle_parts(posed: Posed, answers: list[Answer | BigAnswer]) -> list[Remark]:
    """Return a remark for every part that moves nothing that is asked, ties left aside."""
    moved: set[str] = set()
    for answer in answers:
        if isinstance(answer, BigAnswer):
            moved |= set(symbols(answer.diagram))
            continue
        untied = build_function(answer.ratio, {})
        if untied is not None:
            moved |= symbols_in(untied.function)
    asked = ", ".join(answer.ask.name for answer in answers)
    return [
        Remark(part.place, f"part `{part.label}` has no influence on what is asked ({asked})")
        for part in posed.circuit.parts
        if part.name not in moved
    ]
