"""The engine beside the numeric solve: one circuit at random numbers, and the verdict in a word."""

from __future__ import annotations

import cmath
import random

from symcirc.circuit.model import Circuit, CurrentDrive, Setup, VoltageDrive
from symcirc.sheet.model import GROUND
from symcirc.trees.answer import determinants
from symcirc.trees.collect import collected
from symcirc.trees.evaluate import evaluate
from tests.trees.reference import Tableau
from tests.trees.samples import node_current, symbols, voltage

#: Equations whose reciprocal condition number is below the first have no solution; between the two, other
#: numbers are tried, as these have too much rounding in them.
SINGULAR, POOR = 1e-13, 1e-7
TRIALS = 4


def verdict(made: Circuit, asked: Setup, seed: int) -> str:
    """Compare the engine with the numeric solve.

    Returns:
        "agrees", "agrees (zero)", "no solution" or "no ratio" (what is under the line is zero) where both
        find the same; "unclear" where rounding hides the numeric answer; or a text that begins with "WRONG".
    """
    rng = random.Random(seed)
    walked = determinants(made, asked)
    found = collected(walked)
    for _ in range(TRIALS):
        values = {name: rng.choice((1, -1)) * rng.uniform(0.5, 2) for name in symbols(made)}
        s = cmath.rect(rng.uniform(0.7, 1.4), rng.uniform(0.3, 1.2))
        solved, quality = Tableau(made, asked, values, s).solved((asked.over, asked.under))
        if quality < SINGULAR:
            if not _is_under_drive(asked):
                return "no solution, not compared"
            if found.roots[1]:
                return "WRONG: the equations are singular, the denominator is not zero"
            return "no solution"
        if quality > POOR:
            over, under = solved
            return _compared(
                evaluate(walked, values, s), evaluate(found, values, s), over, under, found.roots
            )
    return "unclear"


def _compared(
    walked: tuple[complex, complex],
    collected_once: tuple[complex, complex],
    over: complex,
    under: complex,
    roots: tuple[int, int],
) -> str:
    if abs(under) < 1e-9:
        return "no ratio" if not roots[1] else "WRONG: what is under the line is zero, the denominator is not"
    if not roots[1]:
        return "WRONG: the denominator is zero, what is under the line is not"
    if abs(over) < 1e-9:
        return (
            "agrees (zero)"
            if not roots[0]
            else f"WRONG: the numerator is not zero, what is over the line is {over}"
        )
    expected = over / under
    for numerator, denominator in (walked, collected_once):
        found = numerator / denominator
        if abs(found - expected) > 1e-6 * abs(expected):
            return f"WRONG: {found} instead of {expected}"
    return "agrees"


def _is_under_drive(asked: Setup) -> bool:
    """Tell whether the drive is under the line: then a zero denominator means singular equations."""
    drive, under = asked.drive, asked.under
    if isinstance(drive, VoltageDrive):
        return under == voltage(drive.plus, drive.minus)
    if isinstance(drive, CurrentDrive):
        return under == node_current(drive.node) and not any(drive.node in pair for pair in asked.shorts)
    return under == voltage(drive.node, GROUND)
