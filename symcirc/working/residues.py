"""A circuit solved at one random point of the field: the value of everything that a working can name."""

from __future__ import annotations

import random
from collections.abc import Callable, Mapping
from dataclasses import replace

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import Circuit, LoopDrive, Setup
from symcirc.circuit.structure import explain_singular
from symcirc.derivation import Posed
from symcirc.nodal import System, build_system
from symcirc.nodal.equations import Term, Weight
from symcirc.sheet.expression import Expression
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Quantity
from symcirc.working.context import Context
from symcirc.working.elimination import Row, solve
from symcirc.working.field import (
    PRIME,
    NotInField,
    evaluate,
    imaginary_unit,
    inverse,
    of_exact,
    product,
    refuse_roots,
)
from symcirc.working.names import Lexicon

#: The unknown that stands for a current drive.
DRIVE = "drive"


def free_names(posed: Posed) -> list[str]:
    """Return the names of parts and parameters that no tie sets, sorted."""
    names = set(posed.sheet.symbols) | {p.name for p in posed.circuit.parts}
    names |= {symbol for device in posed.circuit.devices for symbol in device.parameters.values()}
    return sorted(names - set(posed.ties))


def random_residues(posed: Posed, seed: str, *, given: bool) -> dict[str, int]:
    """Return values of all parts and parameters, s, pi, j, w and f; with ``given`` the sheet's numbers are used.

    Raises NotInField where a tie or a number holds a root that the field has not.
    """
    generator = random.Random(seed)  # seeded: the same verdict on every run
    known = {name: generator.randrange(2, PRIME) for name in [*free_names(posed), "s", "pi"]}
    if given:
        known |= {name: of_exact(number, known["pi"]) for name, number in posed.sheet.numbers.items()}
    return completed(posed, known)


def completed(posed: Posed, free: Mapping[str, int]) -> dict[str, int]:
    """Return the values of free names, s and pi with those of tied names, j, w and f; raises as ``random_residues``."""
    known = dict(free)
    for name in tie_order(posed.ties):
        known[name] = evaluate(posed.ties[name], known.__getitem__)
    known["@j"] = imaginary_unit()
    known["@w"] = known["s"] * inverse(known["@j"]) % PRIME
    known["@f"] = known["@w"] * inverse(2 * known["pi"]) % PRIME
    return known


class Residues:
    """The values of a working's names at one point: parts, quantities under a context's drives, asks, definitions.

    ``known`` are the values of parts, parameters and constants, ``definitions`` the lexicon's, which may grow.
    Raises Complaint where the circuit's equations have no unique solution.
    """

    def __init__(
        self, posed: Posed, context: Context, lexicon: Lexicon, known: Mapping[str, int], seed: str
    ) -> None:
        self.posed, self.context, self.lexicon, self.known = posed, context, lexicon, known
        generator = random.Random(f"drives {seed}")
        self.drives = tuple(generator.randrange(1, PRIME) for _ in context.drives)
        system = build_system(posed.circuit, context.setup)
        self.solution = _solved(posed.circuit, system, known, _right_side(system, context, self.drives))
        self.solution[DRIVE] = self.drives[0]
        self._values: dict[str, int] = {}

    def value(self, key: str) -> int:
        """Return the value of a name; raises NotInField for w0, f0 and Q, ZeroDivisionError in a definition."""
        found = self._values.get(key)
        if found is None:
            found = self._values[key] = self._value(key)
        return found

    def evaluate(self, expression: Expression, root: Callable[[int], int] = refuse_roots) -> int:
        """Return an expression's value here; raises ZeroDivisionError and NotInField."""
        return evaluate(expression, self.value, root)

    def _value(self, key: str) -> int:
        meaning = self.lexicon.by_key(key)
        match meaning.kind:
            case "symbol" | "constant":
                return self.known[key]
            case "quantity":
                assert meaning.quantity is not None
                return self.quantity(meaning.quantity)
            case "ask":
                return ask_value(self.posed, key, self.known)
            case "defined":
                return self.evaluate(self.lexicon.definitions[key])
            case _:
                raise NotInField

    def quantity(self, quantity: Quantity) -> int:
        """Return a voltage or a current of the circuit."""
        terms = quantity_terms(self.posed.circuit, self.context.setup, quantity)
        return value_of_terms(terms, self.solution, self.known)


def quantity_terms(circuit: Circuit, setup: Setup, quantity: Quantity) -> tuple[Term, ...]:
    """Return a quantity as terms in the unknowns of the nodal equations."""
    return build_system(circuit, replace(setup, over=quantity)).over


def ask_value(posed: Posed, name: str, known: Mapping[str, int]) -> int:
    """Return an asked ratio at a point; raises ZeroDivisionError where what stands under the line is zero there."""
    setup = posed.setups[name]
    system = build_system(posed.circuit, setup)
    solution = _solved(posed.circuit, system, known, [equation.right for equation in system.equations])
    solution[DRIVE] = 1
    over, under = (value_of_terms(terms, solution, known) for terms in (system.over, system.under))
    ratio = over * inverse(under) % PRIME
    if isinstance(setup.drive, LoopDrive):
        return -known[gain_symbol(setup.drive.amplifier)] * ratio % PRIME
    return ratio


def _right_side(system: System, context: Context, drives: tuple[int, ...]) -> list[int]:
    """Return the right side with the drives' values: the shorts' laws stand last, before a voltage drive's own."""
    right = [equation.right * drives[0] for equation in system.equations]
    labels = [equation.label for equation in system.equations]
    for position, value in zip(context.live, drives[1:], strict=True):
        right[short_position(labels, context.setup, position)] = value
    return right


def short_position(labels: list[str], setup: Setup, position: int) -> int:
    """Return which of the system's equations is the law of one of the setup's shorts."""
    label = f"{setup.shorts[position][0]} is shorted"
    same = [k for k, text in enumerate(labels) if text == label]
    earlier = sum(1 for plus, _ in setup.shorts[:position] if plus == setup.shorts[position][0])
    return same[earlier]


def _solved(circuit: Circuit, system: System, known: Mapping[str, int], right: list[int]) -> dict[str, int]:
    rows = [row_of(equation.terms, known) for equation in system.equations]
    solution = solve(rows, right, system.unknowns)
    if solution is None:
        raise explain_singular(circuit, system.setup)
    return solution


def row_of(terms: tuple[Term, ...], known: Mapping[str, int]) -> Row[str]:
    """Return terms as a row: the factor of every unknown."""
    row: Row[str] = {}
    for term in terms:
        weight = weight_value(term.weight, known)
        row[term.plus] = (row.get(term.plus, 0) + weight) % PRIME
        if term.minus is not None:
            row[term.minus] = (row.get(term.minus, 0) - weight) % PRIME
    return row


def weight_value(weight: Weight, known: Mapping[str, int]) -> int:
    """Return what stands before an unknown, in the field."""
    value = known[weight.symbol] if weight.symbol else 1
    match weight.kind:
        case "R" | "Z":
            value = inverse(value)
        case "C":
            value = known["s"] * value
        case "L":
            value = inverse(known["s"] * value)
        case "square":
            value = value * value
    return weight.sign * value % PRIME


def value_of_terms(terms: tuple[Term, ...], solution: Mapping[str, int], known: Mapping[str, int]) -> int:
    """Return the sum of terms in solved unknowns."""
    return sum(product([factor, solution[name]]) for name, factor in row_of(terms, known).items()) % PRIME
