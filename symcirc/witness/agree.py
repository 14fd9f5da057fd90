"""Whether a derived function and the plain numeric solve of the circuit agree."""

from __future__ import annotations

import itertools
import math
import random
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any, NoReturn

import mpmath
import numpy as np
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import Circuit, LoopDrive, Setup
from symcirc.complaints import InternalFault
from symcirc.sheet.expression import Expression, names
from symcirc.transfer.function import TransferFunction
from symcirc.witness.network import Arithmetic, Network, complete

POINTS = 4
#: The largest relative departure that is taken for rounding, where the matrix does not magnify it.
TOLERANCE = 1e-9
#: A matrix that magnifies rounding more than this is not used as evidence; another point is taken.
WORST_CONDITION = 1e5
#: The same for a circuit too big for digits beyond floats.
BIG_CONDITION = 1e10
#: Beyond so many nodes one point must do: the solve takes seconds.
MANY_NODES = 400
MOST_TRIES = 40
#: Both values smaller than this count as zero: a function that is zero comes out of the solve as rounding.
SMALLEST = 1e-12


@dataclass(frozen=True)
class Evidence:
    """How a function was confirmed: at so many points, with this largest relative departure."""

    points: int
    departure: float


@dataclass(frozen=True)
class Point:
    """Random values of the free symbols, a complex frequency, the numeric ratio there, its matrix's condition."""

    values: Mapping[str, float]
    s: complex
    ratio: complex
    condition: float


def numeric_ratio(
    circuit: Circuit, setup: Setup, ties: Mapping[str, Expression], values: Mapping[str, Any], s: complex
) -> tuple[complex, float]:
    """Return the asked ratio of the circuit with numbers at one complex frequency, and its matrix's condition."""
    known = complete(values, ties, s)
    network = Network(circuit, setup, known, s)
    return complex(network.ratio() * _loop_factor(setup, known)), network.condition()


def precise_ratio(
    circuit: Circuit, setup: Setup, ties: Mapping[str, Expression], values: Mapping[str, Any], s: Any
) -> Any:
    """Return the asked ratio in mpmath's numbers, at the precision that is set."""

    def solve(matrix: Any, right: Any) -> Any:
        return np.array(
            mpmath.lu_solve(mpmath.matrix(matrix.tolist()), mpmath.matrix(right.tolist())), dtype=object
        )

    numbers = Arithmetic(lambda x: mpmath.mpf(x.numerator) / x.denominator, +mpmath.pi, mpmath.sqrt)
    known = complete(values, ties, s, numbers)
    return Network(circuit, setup, known, s).ratio(solve) * _loop_factor(setup, known)


def _loop_factor(setup: Setup, known: Mapping[str, Any]) -> Any:
    """The loop gain is minus the amplifier's gain times what the network gives: T = -A (V+ - V-)/V_drives."""
    return -known[gain_symbol(setup.drive.amplifier)] if isinstance(setup.drive, LoopDrive) else 1


def value_of(function: TransferFunction, values: Mapping[str, Any], s: Any, pi: Any = math.pi) -> Any:
    """Return the function's value, in the kind of numbers that it is given."""
    known = [pi if str(x) == "pi" else values.get(str(x), 1) for x in function.ring.symbols]

    def coefficient(polynomial: PolyElement) -> Any:
        terms = (
            math.prod(
                (known[k] ** e for k, e in enumerate(monomial) if e), start=_number(number, function, s)
            )
            for monomial, number in polynomial.terms()
        )
        return sum(terms, start=0 * s)

    above = sum((coefficient(c) * s**k for k, c in enumerate(function.numerator)), start=0 * s)
    below = sum((coefficient(c) * s**k for k, c in enumerate(function.denominator)), start=0 * s)
    return above / below


def _number(number: Any, function: TransferFunction, s: Any) -> Any:
    if function.ring.domain == QQ:
        above, below = int(number.numerator), int(number.denominator)
        return above / below if isinstance(s, complex) else mpmath.mpf(above) / below
    exact = function.ring.domain.to_sympy(number)
    return complex(exact) if isinstance(s, complex) else mpmath.mpmathify(exact.evalf(mpmath.mp.dps))


def confirm(
    circuit: Circuit, setup: Setup, ties: Mapping[str, Expression], function: TransferFunction
) -> Evidence:
    """Compare a function with the numeric solve at random part values and complex frequencies.

    The values lie within a factor of 4 about 1 and the frequencies near the unit circle, off the axis, so that the
    matrices are well scaled. Where ties hold numbers that spoil the scale, the solve is repeated with 60 digits.
    Raises InternalFault where the two disagree.
    """
    departures = (
        _departure(setup, value_of(function, point.values, point.s), point.ratio)
        for point in _solved_points(circuit, setup, ties)
        if point.condition < WORST_CONDITION
    )
    return _evidence(departures, POINTS) or _confirm_precisely(circuit, setup, ties, function)


def confirm_values(
    circuit: Circuit,
    setup: Setup,
    ties: Mapping[str, Expression],
    value: Callable[[Mapping[str, Any], complex], complex],
) -> Evidence:
    """Compare an answer that is not expanded with the numeric solve, as :func:`confirm` does a function.

    ``value`` gives the ratio for numbers of all symbols at one complex frequency, a loop gain without its -A.
    A big circuit's matrix magnifies rounding more, so its condition is allowed for: a departure is taken for
    rounding up to 1e-14 times the condition where that is more than the tolerance.
    """

    def departure(point: Point) -> float:
        known = complete(point.values, ties, point.s)
        here = value(known, point.s) * _loop_factor(setup, known)
        return _departure(setup, here, point.ratio, max(TOLERANCE, 1e-14 * point.condition))

    points = (p for p in _solved_points(circuit, setup, ties) if p.condition < BIG_CONDITION)
    wanted = POINTS if len(circuit.graph) <= MANY_NODES else 1
    return _evidence(map(departure, points), wanted) or _unconfirmed(setup)


def _confirm_precisely(
    circuit: Circuit, setup: Setup, ties: Mapping[str, Expression], function: TransferFunction
) -> Evidence:
    def departures() -> Iterator[float]:
        for values, point in _random_points(circuit, ties, setup.ask):
            exact, s = {name: mpmath.mpf(v) for name, v in values.items()}, mpmath.mpc(point)
            try:
                there = precise_ratio(circuit, setup, ties, exact, s)
            except ZeroDivisionError:
                continue
            yield _departure(setup, value_of(function, exact, s, mpmath.pi), there)

    with mpmath.workdps(60):
        return _evidence(departures(), POINTS) or _unconfirmed(setup)


def _evidence(departures: Iterable[float], points: int) -> Evidence | None:
    """Return the evidence of the first so many departures, or None where there are fewer."""
    found = list(itertools.islice(departures, points))
    return Evidence(points, max(found)) if len(found) == points else None


def _unconfirmed(setup: Setup) -> NoReturn:
    raise InternalFault(f"no point was found at which {setup.ask} could be confirmed by a numeric solve")


def _solved_points(circuit: Circuit, setup: Setup, ties: Mapping[str, Expression]) -> Iterator[Point]:
    """Yield random points with the numeric ratio there, those left out at which there is none."""
    for values, s in _random_points(circuit, ties, f"{setup.ask} {len(circuit.parts)}"):
        try:
            ratio, condition = numeric_ratio(circuit, setup, ties, values, s)
        except (np.linalg.LinAlgError, ZeroDivisionError):
            continue
        if np.isfinite(ratio):
            yield Point(values, s, ratio, condition)


def _random_points(
    circuit: Circuit, ties: Mapping[str, Expression], seed: str
) -> Iterator[tuple[dict[str, float], complex]]:
    """Yield values of the free symbols and a complex frequency, the same on every run."""
    generator = random.Random(seed)
    free = sorted(_free_symbols(circuit, ties))
    for _ in range(MOST_TRIES):
        values = {name: generator.uniform(0.5, 2.0) for name in free}
        yield values, complex(generator.uniform(0.1, 0.6), generator.uniform(0.6, 1.6))


def _departure(setup: Setup, here: Any, there: Any, tolerance: float = TOLERANCE) -> float:
    size = max(abs(here), abs(there))
    if size < SMALLEST:
        return 0.0
    departure = float(abs(here - there) / size)
    if not departure <= tolerance:
        raise InternalFault(
            f"the derived {setup.ask} is {complex(here):.12g}, "
            f"and the numeric solve of the circuit gives {complex(there):.12g}"
        )
    return departure


def _free_symbols(circuit: Circuit, ties: Mapping[str, Expression]) -> set[str]:
    symbols = {part.name for part in circuit.parts}
    symbols |= {symbol for device in circuit.devices for symbol in device.parameters.values()}
    symbols |= {name.text for tie in ties.values() for name in names(tie)}
    return symbols - set(ties) - {"s", "pi"}
