"""A circuit solved with many digits at one random point, from the parts themselves: the second way to a verdict.

It uses the plain solve of ``symcirc/witness``, which shares nothing with the nodal equations of the first way.
"""

from __future__ import annotations

import random
from collections.abc import Callable, Mapping
from dataclasses import replace
from typing import Any

import mpmath
import numpy as np

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import LoopDrive, Setup
from symcirc.derivation import Posed
from symcirc.sheet.expression import Expression, Number
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Quantity
from symcirc.transfer.function import TransferFunction
from symcirc.witness.network import Network
from symcirc.working import measured
from symcirc.working.context import Context, own_drive
from symcirc.working.measured import DIGITS, SOLVED, Measured
from symcirc.working.names import Lexicon
from symcirc.working.residues import free_names
from symcirc.working.shape import shape_number


def random_numbers(posed: Posed, seed: str, *, given: bool) -> dict[str, Measured]:
    """Return values of all parts and parameters, s, pi, j, w and f; with ``given`` the sheet's numbers are used.

    Parts are positive and s lies off both axes. mpmath must be set to :data:`~symcirc.working.measured.DIGITS`.
    Raises ZeroDivisionError where a tie divides by zero here.
    """
    generator = random.Random(seed)  # seeded: the same verdict on every run
    known = {name: measured.exact(_draw(generator)) for name in free_names(posed)}
    scale = mpmath.mpf(1)
    if given:
        for name, number in posed.sheet.numbers.items():
            known[name] = measured.exact(mpmath.mpf(number.evalf(DIGITS)))
        scale = _corner(posed, known)
    s = mpmath.mpc(_draw(generator), _draw(generator)) * scale
    return completed(posed, known | {"s": measured.exact(s), "pi": measured.exact(+mpmath.pi)})


def completed(posed: Posed, free: Mapping[str, Measured]) -> dict[str, Measured]:
    """Return the values of free names, s and pi with those of tied names, j, w and f; raises as ``random_numbers``."""
    known = dict(free)
    for name in tie_order(posed.ties):
        known[name] = measured.evaluate(posed.ties[name], known.__getitem__)
    s = known["s"].value
    known["@j"] = Measured(mpmath.mpc(0, 1), mpmath.mpf(0))
    known["@w"] = measured.exact(s / mpmath.mpc(0, 1))
    known["@f"] = measured.exact(s / mpmath.mpc(0, 2 * mpmath.pi))
    return known


def _draw(generator: random.Random) -> Any:
    return mpmath.mpf(generator.randrange(10**40, 4 * 10**40)) / (2 * 10**40)


def _corner(posed: Posed, known: Mapping[str, Measured]) -> Any:
    """Return a frequency at which the given parts matter: 1/(R C) of the first of each, as a scale for s."""
    sizes = {"R": mpmath.mpf(1), "C": mpmath.mpf(1)}
    for part in reversed(posed.circuit.parts):
        if part.kind in sizes and part.name in known:
            sizes[part.kind] = known[part.name].value
    return 1 / (sizes["R"] * sizes["C"])


class Digits:
    """The values of a working's names at one point, as numbers of many digits; the twin of ``Residues``.

    ``function`` gives the first ask's function where w0, f0 or Q is named. Raises ZeroDivisionError where the
    equations have no unique solution here.
    """

    def __init__(
        self,
        posed: Posed,
        context: Context,
        lexicon: Lexicon,
        known: Mapping[str, Measured],
        function: Callable[[], TransferFunction],
        seed: str,
    ) -> None:
        self.posed, self.context, self.lexicon, self.known = posed, context, lexicon, known
        self.function = function
        generator = random.Random(f"drives {seed}")
        others = [mpmath.mpc(_draw(generator), _draw(generator)) for _ in context.live]
        self.drive = mpmath.mpc(_draw(generator), _draw(generator))
        self.network = Network(posed.circuit, context.setup, _plain(known), known["s"].value)
        _drive_shorts(self.network, context, others)
        self.solution = solve(self.network.matrix, self.network.right)
        self._values: dict[str, Measured] = {}

    def value(self, key: str) -> Measured:
        """Return the value of a name."""
        found = self._values.get(key)
        if found is None:
            found = self._values[key] = self._value(key)
        return found

    def evaluate(
        self,
        expression: Expression,
        number: Callable[[Number], Measured] = lambda node: measured.of_fraction(node.value),
    ) -> Measured:
        """Return an expression's value here; raises ZeroDivisionError."""
        return measured.evaluate(expression, self.value, number)

    def _value(self, key: str) -> Measured:
        meaning = self.lexicon.by_key(key)
        match meaning.kind:
            case "symbol" | "constant":
                return self.known[key]
            case "quantity":
                assert meaning.quantity is not None
                return self._quantity(meaning.quantity)
            case "ask":
                return _ask_value(self.posed, self.posed.setups[key], self.known)
            case "defined":
                return self.evaluate(self.lexicon.definitions[key])
            case _:
                return shape_number(self.function(), key, self.known)

    def _quantity(self, quantity: Quantity) -> Measured:
        """Return a quantity: the network is solved for a drive of size 1, and all drives grow with it."""
        value = _read(self.network, self.context.setup, quantity, self.solution) * self.drive
        largest = max((abs(x) for x in self.solution), default=mpmath.mpf(0))
        return Measured(value, SOLVED * max(abs(value), abs(self.drive) * min(largest, mpmath.mpf(1))))


def _plain(known: Mapping[str, Measured]) -> dict[str, Any]:
    return {name: number.value for name, number in known.items()}


def _drive_shorts(network: Network, context: Context, values: list[Any]) -> None:
    for position, value in zip(context.live, values, strict=True):
        network.right[network.extra[f"short {position}"]] = value


def _read(network: Network, setup: Setup, quantity: Quantity, solution: Any) -> Any:
    network.setup = replace(setup, over=quantity, under=own_drive(setup))  # the drive has size 1
    return network.ratio(lambda matrix, right: solution)


def _ask_value(posed: Posed, setup: Setup, known: Mapping[str, Measured]) -> Measured:
    """Return an asked ratio; what is over and under the line may each be off by a rounding of the drive."""
    network = Network(posed.circuit, setup, _plain(known), known["s"].value)
    solution = solve(network.matrix, network.right)
    values = [_read(network, setup, quantity, solution) for quantity in (setup.over, setup.under)]
    over, under = (Measured(value, SOLVED * max(abs(value), 1)) for value in values)
    ratio = measured.product([over, measured.reciprocal(under)])
    if isinstance(setup.drive, LoopDrive):
        gain = known[gain_symbol(setup.drive.amplifier)]
        return measured.product([Measured(-gain.value, gain.error), ratio])
    return ratio


def solve(matrix: Any, right: Any) -> Any:
    """Solve linear equations of mpmath's numbers; raises ZeroDivisionError where they are singular."""
    left, constants = [list(row) for row in matrix], list(right)
    size = len(constants)
    for k in range(size):
        pivot = max(range(k, size), key=lambda i: abs(left[i][k]))
        if left[pivot][k] == 0:
            raise ZeroDivisionError
        left[k], left[pivot] = left[pivot], left[k]
        constants[k], constants[pivot] = constants[pivot], constants[k]
        for i in range(k + 1, size):
            if left[i][k] != 0:
                factor = left[i][k] / left[k][k]
                left[i][k:] = [
                    a - factor * b if b != 0 else a for a, b in zip(left[i][k:], left[k][k:], strict=True)
                ]
                constants[i] -= factor * constants[k]
    for k in reversed(range(size)):
        rest = sum(left[k][i] * constants[i] for i in range(k + 1, size) if left[k][i] != 0)
        constants[k] = (constants[k] - rest) / left[k][k]
    return np.array(constants, dtype=object)
