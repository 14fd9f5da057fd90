"""From a sheet to the transfer function of everything it asks, each answer reached in two ways or three."""

from __future__ import annotations

from collections.abc import Container, Iterator, Mapping
from dataclasses import dataclass, replace
from typing import cast

from sympy.polys.rings import PolyElement

from symcirc.circuit import build_circuit, build_setup
from symcirc.circuit.amplifier import gain_symbol, loop_gains, real_circuit
from symcirc.circuit.model import Circuit, LoopDrive, Setup, VoltageDrive
from symcirc.circuit.structure import bias_remarks, explain_singular, refuse_structure
from symcirc.complaints import Complaint, InternalFault, Remark, listed
from symcirc.elimination import solve
from symcirc.nodal import build_system
from symcirc.progress import Progress, silent
from symcirc.ratio import Coefficient, Ratio
from symcirc.sheet.expression import Expression
from symcirc.sheet.model import Ask, Sheet, Voltage
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
    """A sheet's asks made ready: the circuit, its ties, and what each ask applies.

    ``ideal`` is the circuit with all its amplifiers ideal, whatever counts in ``circuit``.
    """

    sheet: Sheet
    ideal: Circuit
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
    ideal = build_circuit(sheet)
    return _pose(sheet, ideal, ideal, sheet.ties)


def pose_real(sheet: Sheet) -> Posed:
    """Return a sheet's asks made ready, the amplifiers' ``gain`` and ``gbw`` counted."""
    ideal = build_circuit(sheet)
    circuit, gains = real_circuit(ideal)
    return _pose(sheet, ideal, circuit, {**sheet.ties, **gains})


def _pose(sheet: Sheet, ideal: Circuit, circuit: Circuit, ties: Mapping[str, Expression]) -> Posed:
    setups = {ask.name: build_setup(circuit, sheet.asks, ask) for ask in sheet.asks}
    refuse_structure(circuit, sheet.asks, tuple(setups.values()))
    return Posed(sheet, ideal, circuit, {**ties, **loop_gains(ideal, setups.values())}, setups)


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
        solved = solve_ask(posed, setup)
        if sum(count(solved.collected)) > most:
            answers.append(_big_answer(posed, ask, setup, solved.collected))
            continue
        answer, found = _answer(posed, ask, setup, solved, progress)
        answers.append(answer)
        remarks += [*found, *sign_remarks(answer.function, posed.sheet.symbols, ask)]
    remarks += _idle_parts(posed, answers)
    if any(device.kind == "opamp" for device in posed.ideal.devices):
        # imported late: sheets without amplifiers start sooner
        from symcirc.stability.exchanged import exchanged_inputs

        remarks += exchanged_inputs(posed.sheet, posed.ideal, setups)
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


@dataclass(frozen=True)
class Solved:
    """An ask's two determinants as decision diagrams.

    ``walked`` has the products before collection, ``collected`` each once. Where neither side of the ratio is the
    drive, ``drive`` has what stands under the line over the drive's own determinant, which the ratio hides; else it
    is None.
    """

    walked: Diagram
    collected: Diagram
    drive: Diagram | None


def solve_ask(posed: Posed, setup: Setup) -> Solved:
    """Return numerator and denominator of an ask as decision diagrams.

    Raises Complaint where the equations have no unique solution, or what stands under the line is always zero.
    """
    walked = _determinants(posed, setup)
    drive = _under_over_drive(posed, setup)
    found = Solved(walked, collected(walked), drive)
    determinant = found.collected.roots[1] if drive is None else drive.roots[1]
    if not determinant:
        raise explain_singular(posed.circuit, setup)
    if not found.collected.roots[1]:
        raise Complaint(
            setup.under.place,
            f"what stands under the line of `{setup.ask}` is zero, whatever the drive is",
            "put a voltage or a current under the line that the drive moves",
        )
    return found


def _under_over_drive(posed: Posed, setup: Setup) -> Diagram | None:
    """Return what stands under the line over the drive's voltage, or None where that is the drive itself."""
    if not isinstance(setup.drive, VoltageDrive):
        return None
    own = Voltage(*setup.drive.pair, setup.under.place)
    if setup.under == own:
        return None
    return collected(_determinants(posed, replace(setup, over=setup.under, under=own)))


def _big_answer(posed: Posed, ask: Ask, setup: Setup, diagram: Diagram) -> BigAnswer:
    def value(known: Mapping[str, complex], s: complex) -> complex:
        return response(diagram, cast(Mapping[str, float], known), s)  # a tied value may be complex

    evidence = confirm_values(posed.circuit, setup, posed.ties, value)
    loop = gain_symbol(setup.drive.amplifier) if isinstance(setup.drive, LoopDrive) else None
    return BigAnswer(ask, setup, diagram, count(diagram), evidence, loop)


def _answer(
    posed: Posed, ask: Ask, setup: Setup, solved: Solved, progress: Progress
) -> tuple[Answer, list[Remark]]:
    ratio = _as_asked(_expanded_ratio(solved.collected), setup)
    built = build_function(ratio, posed.ties)
    if built is None or not _solvable_when_tied(posed, solved):
        raise Complaint(
            ask.place,
            f"with the sheet's fixes the equations for `{ask.name}` have no solution, or many",
            f"look at what is tied ({listed(list(posed.ties)[:6])}): it makes the circuit singular",
        )
    evidence = confirm(posed.circuit, setup, posed.ties, built.function)
    cheap = is_cheap(posed.circuit, solved.collected)
    hidden = _eliminate(posed, setup, built, progress) if cheap else built
    answer = Answer(ask, setup, ratio, built.function, evidence, cheap)
    return answer, _hidden_mode(ask, len(hidden.hidden) - 1)


def _expanded_ratio(diagram: Diagram) -> Ratio:
    over, under = (tuple(expanded(diagram, root)) for root in diagram.roots)
    return Ratio(symbols(diagram), over, under)


def _solvable_when_tied(posed: Posed, solved: Solved) -> bool:
    """Tell whether the ties leave the drive's determinant other than zero, where the ratio itself hides it."""
    if solved.drive is None or not posed.ties:
        return True
    return build_function(_expanded_ratio(solved.drive), posed.ties) is not None


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
        untied = build_function(answer.ratio, {}) if posed.ties else None
        moved |= symbols_in(answer.function if untied is None else untied.function)
    asked = ", ".join(answer.ask.name for answer in answers)
    return [
        Remark(part.place, f"part `{part.label}` has no influence on what is asked ({asked})")
        for part in posed.circuit.parts
        if part.name not in moved
    ]
