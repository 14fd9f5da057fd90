"""From a sheet to the transfer function of everything it asks, each answer reached in two ways."""

from __future__ import annotations

from collections.abc import Callable, Container, Mapping
from dataclasses import dataclass

from symcirc.circuit import build_circuit, build_setup
from symcirc.circuit.amplifier import gain_symbol, loop_gains, real_circuit
from symcirc.circuit.model import Circuit, LoopDrive, Setup
from symcirc.circuit.structure import bias_remarks, explain_singular, refuse_structure
from symcirc.complaints import Complaint, Remark, listed
from symcirc.elimination import solve
from symcirc.elimination.solve import silent
from symcirc.nodal import System, build_system
from symcirc.ratio import Coefficient, Ratio
from symcirc.sheet.expression import Expression
from symcirc.sheet.model import Ask, Sheet
from symcirc.transfer.build import build_function
from symcirc.transfer.function import TransferFunction, symbols_in
from symcirc.transfer.signs import sign_remarks
from symcirc.witness.agree import Evidence, confirm

Progress = Callable[[str], None]


@dataclass(frozen=True)
class Answer:
    """One ask's transfer function, the equations it came from and the evidence for it."""

    ask: Ask
    setup: Setup
    system: System
    ratio: Ratio
    function: TransferFunction
    evidence: Evidence


@dataclass(frozen=True)
class Derivation:
    """All answers of a sheet. ``ties`` are the sheet's, and the gains of real amplifiers where they count."""

    sheet: Sheet
    circuit: Circuit
    ties: Mapping[str, Expression]
    answers: tuple[Answer, ...]
    remarks: tuple[Remark, ...]

    def answer(self, name: str) -> Answer:
        """Return the answer of the ask of that name (it must be there)."""
        return next(answer for answer in self.answers if answer.ask.name == name)


def derive(sheet: Sheet, wanted: Container[str] | None = None, progress: Progress = silent) -> Derivation:
    """Return the transfer functions of a sheet's asks (or of the wanted ones only), its amplifiers ideal.

    Raises Complaint for a circuit that cannot be solved, InternalFault where the two ways to an answer disagree.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> derive(sheet).answer("H").function.denominator
    (1, R1*C1)
    """
    return _derive(sheet, build_circuit(sheet), sheet.ties, wanted, progress)


def derive_real(
    sheet: Sheet, wanted: Container[str] | None = None, progress: Progress = silent
) -> Derivation:
    """Return the transfer functions as :func:`derive`, the amplifiers' ``gain`` and ``gbw`` counted."""
    circuit, gains = real_circuit(build_circuit(sheet))
    return _derive(sheet, circuit, {**sheet.ties, **gains}, wanted, progress)


def _derive(
    sheet: Sheet,
    circuit: Circuit,
    ties: Mapping[str, Expression],
    wanted: Container[str] | None,
    progress: Progress,
) -> Derivation:
    setups = tuple(build_setup(circuit, sheet.asks, ask) for ask in sheet.asks)
    refuse_structure(circuit, sheet.asks, setups)
    ties = {**ties, **loop_gains(build_circuit(sheet), setups)}
    answers: list[Answer] = []
    remarks = [*sheet.remarks, *bias_remarks(circuit, setups)]
    for ask, setup in zip(sheet.asks, setups, strict=True):
        if wanted is not None and ask.name not in wanted:
            continue
        progress(f"deriving {ask.name}")
        answer, found = _answer(circuit, ties, ask, setup, progress)
        answers.append(answer)
        remarks += [*found, *sign_remarks(answer.function, sheet.symbols, ask)]
    remarks += _idle_parts(circuit, answers)
    return Derivation(sheet, circuit, ties, tuple(answers), tuple(remarks))


def _answer(
    circuit: Circuit, ties: Mapping[str, Expression], ask: Ask, setup: Setup, progress: Progress
) -> tuple[Answer, list[Remark]]:
    system = build_system(circuit, setup)
    ratio = solve(system, progress)
    if ratio is None:
        raise explain_singular(circuit, setup)
    if not ratio.denominator:
        raise Complaint(
            setup.under.place,
            f"what stands under the line of `{ask.name}` is zero, whatever the drive is",
            "put a voltage or a current under the line that the drive moves",
        )
    if isinstance(setup.drive, LoopDrive):
        ratio = _loop_ratio(ratio, gain_symbol(setup.drive.amplifier))
    built = build_function(ratio, ties)
    if built is None:
        raise Complaint(
            ask.place,
            f"with the sheet's fixes the equations for `{ask.name}` have no solution, or many",
            f"look at what is tied ({listed(list(ties)[:6])}): it makes the circuit singular",
        )
    evidence = confirm(circuit, setup, ties, built.function)
    return Answer(ask, setup, system, ratio, built.function, evidence), _hidden_mode(
        ask, len(built.hidden) - 1
    )


def _hidden_mode(ask: Ask, degree: int) -> list[Remark]:
    if degree < 1:
        return []
    mode = f"a factor of degree {degree} in s cancels in `{ask.name}`"
    return [Remark(ask.place, f"{mode}: the circuit has a natural mode that this ratio does not show")]


def _loop_ratio(ratio: Ratio, gain: str) -> Ratio:
    """Return minus the ratio times the amplifier's gain: T = -A (V+ - V-)/V_drives."""

    def extended(coefficient: Coefficient, exponent: int, sign: int) -> Coefficient:
        return {(*exponents, exponent): sign * count for exponents, count in coefficient.items()}

    return Ratio(
        (*ratio.symbols, gain),
        tuple(extended(c, 1, -1) for c in ratio.numerator),
        tuple(extended(c, 0, 1) for c in ratio.denominator),
    )


def _idle_parts(circuit: Circuit, answers: list[Answer]) -> list[Remark]:
    """Return a remark for every part that moves nothing that is asked, ties left aside."""
    moved: set[str] = set()
    for answer in answers:
        untied = build_function(answer.ratio, {})
        if untied is not None:
            moved |= symbols_in(untied.function)
    asked = ", ".join(answer.ask.name for answer in answers)
    return [
        Remark(part.place, f"part `{part.label}` has no influence on what is asked ({asked})")
        for part in circuit.parts
        if part.name not in moved
    ]
