"""What is worth knowing of a transfer function: its kind, ω0 and Q, gains, and with numbers its poles."""

from __future__ import annotations

import cmath
import math
from dataclasses import dataclass

from sympy import Expr

from symcirc.derivation import Answer, Derivation
from symcirc.report.numbers import missing_numbers
from symcirc.sheet.model import Sheet, Voltage
from symcirc.stability.margins import margins_of
from symcirc.transfer.arrange import form_of
from symcirc.transfer.engineering import engineering
from symcirc.transfer.evaluate import exact_coefficients
from symcirc.transfer.form import Form
from symcirc.transfer.function import TransferFunction
from symcirc.transfer.kinds import Gain, character
from symcirc.transfer.roots import roots
from symcirc.transfer.second_order import first_order, second_order
from symcirc.transfer.signs import positive_names


@dataclass(frozen=True)
class Fact:
    """One line: ``what`` in words, then a formula, a number with its unit, or both."""

    what: str
    form: Form | None
    number: str


@dataclass(frozen=True)
class Numbers:
    """The coefficients for the fixed numbers, ascending, as floats, and the poles in rad/s."""

    numerator: list[float]
    denominator: list[float]
    poles: list[complex]


def numbers_of(sheet: Sheet, answer: Answer) -> Numbers | None:
    """Return the numbers of an answer, or None where the sheet does not fix them all."""
    if missing_numbers(sheet, answer):
        return None
    known: dict[str, Expr] = sheet.numbers
    above, below = exact_coefficients(answer.function, known)
    return Numbers([float(c) for c in above], [float(c) for c in below], roots(below))


def facts_of(derivation: Derivation, answer: Answer) -> list[Fact]:
    """Return the facts of one answer, in the order in which they are shown."""
    function, sheet = answer.function, derivation.sheet
    positive = positive_names(sheet.symbols)
    numbers = numbers_of(sheet, answer)
    found = character(function, positive)
    kind = found.kind + (f", order {function.order}" if function.order else "")
    facts = [Fact("kind", None, kind)]
    if found.zeros != "none" and found.kind in ("mixed", "notch", "low-pass notch", "high-pass notch"):
        facts.append(Fact("zeros", None, found.zeros))
    facts += _frequencies(function, positive, numbers)
    unit = unit_of(answer)
    facts += [_gain(gain, numbers, unit) for gain in found.gains]
    if numbers is not None and answer.ask.loop:
        facts += _margin_facts(function, sheet)
    elif numbers is not None and function.order > 2:
        facts += _pole_facts(numbers.poles)
    return facts


def _margin_facts(function: TransferFunction, sheet: Sheet) -> list[Fact]:
    """Return where a loop gain crosses 1 and -1, and by how much the closed loop is stable."""
    found = margins_of(function, sheet.numbers)
    facts = []
    for unity in found.unity:
        frequency = engineering(unity.omega / (2 * math.pi), "Hz")
        margin = engineering(unity.margin_deg, "deg", 4)
        facts.append(Fact("unity gain", None, f"at {frequency}, phase margin {margin}"))
    if not found.unity:
        facts.append(Fact("unity gain", None, "at no frequency"))
    for phase in found.phase:
        frequency = engineering(phase.omega / (2 * math.pi), "Hz")
        margin = engineering(phase.margin_db, "dB", 4)
        facts.append(Fact("gain margin", None, f"{margin} at {frequency}"))
    if not found.phase:
        facts.append(Fact("gain margin", None, "none is needed: the phase never reaches 180 degrees"))
    stable = "stable" if found.stable else "unstable"
    return [*facts, Fact("closed loop", None, f"{stable}, the other amplifiers as they are taken here")]


def unit_of(answer: Answer) -> str:
    """Return the unit of what is asked: a ratio has none."""
    over, under = (isinstance(q, Voltage) for q in (answer.setup.over, answer.setup.under))
    return "" if over == under else "ohm" if over else "S"


def _frequencies(function: TransferFunction, positive: set[str], numbers: Numbers | None) -> list[Fact]:
    one, two = first_order(function.denominator), second_order(function.denominator, positive)
    if one is not None:
        omega = "" if numbers is None else _ratio(numbers.denominator, 0, 1)
        return [
            Fact("pole w0", one.omega_form, _engineered(omega, "rad/s")),
            Fact("pole f0", one.f_form, _engineered(omega, "Hz", 2 * math.pi)),
        ]
    if two is None:
        return []
    omega = "" if numbers is None else math.sqrt(numbers.denominator[0] / numbers.denominator[2])
    facts = [
        Fact("w0", two.omega0, _engineered(omega, "rad/s")),
        Fact("f0", two.f0, _engineered(omega, "Hz", 2 * math.pi)),
    ]
    if two.q is not None:
        damping = numbers.denominator[1] if numbers is not None else 0.0
        q = "" if numbers is None or isinstance(omega, str) else omega * numbers.denominator[2] / damping
        facts.append(Fact("Q", two.q, _engineered(q, "")))
    return facts


def _ratio(coefficients: list[float], over: int, under: int) -> float:
    return coefficients[over] / coefficients[under]


def _engineered(value: float | str, unit: str, divisor: float = 1.0) -> str:
    return value if isinstance(value, str) else engineering(value / divisor, unit)


def _gain(gain: Gain, numbers: Numbers | None, unit: str) -> Fact:
    where = {"0": "gain at 0", "infinity": "gain at high f", "omega0": "gain at f0"}[gain.where]
    form = form_of(gain.value.above, gain.value.below)
    if numbers is None:
        return Fact(where, form, "")
    value = _gain_value(gain.where, numbers)
    written = engineering(value, unit)
    if not unit and value:
        written += f" ({engineering(20 * math.log10(abs(value)), 'dB', 4)})"
    return Fact(where, form, written)


def _gain_value(where: str, numbers: Numbers) -> float:
    above, below = numbers.numerator, numbers.denominator
    if where == "infinity":
        return above[-1] / below[-1]
    if where == "omega0":
        return above[1] / below[1]
    k = next(k for k, c in enumerate(below) if c)
    return above[k] / below[k]


def _pole_facts(poles: list[complex]) -> list[Fact]:
    """Return one fact a real pole or a pair: its frequency, and the Q of a pair."""
    facts = []
    for pole in poles:
        if pole.imag < 0:
            continue
        frequency = engineering(abs(pole) / (2 * math.pi), "Hz")
        if abs(cmath.phase(-pole)) < 1e-12:
            facts.append(Fact("pole", None, f"real, f = {frequency}"))
        elif pole.imag > 0:
            q = engineering(-abs(pole) / (2 * pole.real), "") if pole.real else "infinite"
            facts.append(Fact("pole pair", None, f"f0 = {frequency}, Q = {q}"))
        else:
            facts.append(Fact("pole", None, f"real and unstable, f = {frequency}"))
    return facts
