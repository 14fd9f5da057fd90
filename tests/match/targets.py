"""Targets of the usual shapes from a denominator, and problems from a stage and a target."""

from collections.abc import Mapping, Sequence

import sympy

from symcirc.match.problem import Gain, Problem
from symcirc.transfer.function import TransferFunction

#: The unit of a part by the first letter of its name.
UNITS = {"R": "ohm", "C": "F", "L": "H"}

Target = tuple[tuple[sympy.Expr, ...], tuple[sympy.Expr, ...]]


def target(kind: str, denominator: Sequence[object], gain: object = 1) -> Target:
    """Return the target of a kind whose nominal gain is ``gain``; ascending powers, monic."""
    below = tuple(map(sympy.sympify, denominator))
    order, zero = len(below) - 1, sympy.S.Zero
    numerators = {
        "low-pass": (below[0],),
        "high-pass": (zero,) * order + (sympy.S.One,),
        "band-pass": (zero, below[1]),
        "notch": (below[0], zero, sympy.S.One),
        "all-pass": tuple((-1) ** k * c for k, c in enumerate(below)),
    }
    return tuple(gain * c for c in numerators[kind]), below


def second_order(kind: str, gain: object = 1) -> Target:
    """Return a second-order target with the symbols f0 and Q."""
    f0, q = sympy.symbols("f0 Q")
    w0 = 2 * sympy.pi * f0
    return target(kind, (w0**2, w0 / q, 1), gain)


def butterworth(kind: str, order: int, gain: object = 1, edge: int = 1200) -> Target:
    """Return a Butterworth target with its edge in hertz, from the polynomials every table has."""
    w = 2 * edge * sympy.pi
    tables = {1: (1, 1), 2: (1, sympy.sqrt(2), 1), 3: (1, 2, 2, 1)}
    table = tables[order]
    return target(kind, [c * w ** (order - k) for k, c in enumerate(table)], gain)


def problem(
    function: TransferFunction,
    goal: Target,
    unknowns: str,
    gain: Gain = "exact",
    known: Mapping[str, object] | None = None,
    free: str = "",
) -> Problem:
    """Return the problem of solving for the parts named in ``unknowns``."""
    return Problem(
        function,
        *goal,
        gain,
        tuple(unknowns.split()),
        {name: sympy.sympify(number) for name, number in (known or {}).items()},
        frozenset(free.split()),
        units={str(s): UNITS[str(s)[0]] for s in function.ring.symbols if str(s)[0] in UNITS},
    )
