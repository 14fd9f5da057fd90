"""What a match is given and what it gives back, as plain records."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

import sympy

from symcirc.transfer.function import TransferFunction

#: How far the target's numerator binds: as it stands, up to its sign, or up to a constant factor.
Gain = Literal["exact", "magnitude", "free"]
Relation = Literal[">", ">=", "<", "<=", "="]


@dataclass(frozen=True)
class Problem:
    """A stage, what it must become, and which of its parts are free.

    Args:
        function: the stage; its coefficients are polynomials in the parts and parameters.
        target_numerator: ascending powers of s, numbers or expressions in parameters such as ``(2*pi*F)**2``.
        target_denominator: likewise; the last entry is 1. A number that is rounded has 60 digits or more.
        gain: how far the target's numerator binds.
        unknowns: the parts and parameters to be solved for. Parts are positive.
        known: exact numbers, in SI base units, of other parts and parameters. What is neither unknown nor here
            is a symbol of the designer's choice, taken as positive.
        free_unknowns: those of the unknowns that may have any sign.
        positives: what must be positive too: tied parts, as expressions in the others.
        units: the unit of each name (ohm, F, H, ...), for the order of choice and for sentences.
    """

    function: TransferFunction
    target_numerator: tuple[sympy.Expr, ...]
    target_denominator: tuple[sympy.Expr, ...]
    gain: Gain
    unknowns: tuple[str, ...]
    known: Mapping[str, sympy.Expr] = field(default_factory=dict)
    free_unknowns: frozenset[str] = frozenset()
    positives: Mapping[str, sympy.Expr] = field(default_factory=dict)
    units: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True)
class Root:
    """A positive root of a polynomial that has no short formula.

    ``index`` counts the positive roots upwards from 1; 0 where the numbers that would tell them apart are not
    known. A root of a variable that may be negative is counted among all real roots.
    """

    polynomial: sympy.Expr
    variable: str
    index: int


@dataclass(frozen=True)
class Equation:
    """``part`` equals ``formula``, which holds chosen quantities and the parts of the equations before it.

    ``degree`` is that of the polynomial equation the formula solves: 1, 2, or more with a :class:`Root`.
    """

    part: str
    formula: sympy.Expr | Root
    degree: int


@dataclass(frozen=True)
class Condition:
    """An inequality in chosen quantities (or, where none shorter is found, in parts found before)."""

    left: sympy.Expr
    relation: Relation
    right: sympy.Expr


@dataclass(frozen=True)
class Branch:
    """One real positive solution: equations in the order of computing, and where it is real and positive.

    ``values`` are in SI base units; None for a part that depends on a quantity without a number. Where a solution was
    found in numbers its equations give these numbers, and ``of_complex`` is how many complex solutions the equations
    have, each counted as often as it is multiple; it is 0 where the equations are formulas.
    """

    equations: tuple[Equation, ...]
    conditions: tuple[Condition, ...]
    values: Mapping[str, float | None]
    of_complex: int = 0


@dataclass(frozen=True)
class Solutions:
    """The branches of a match that was met."""

    branches: tuple[Branch, ...]


@dataclass(frozen=True)
class Refusal:
    """Why a target is not met: ``cause`` in one sentence, ``mend`` in one what would help.

    ``kind`` is one of: order (degrees differ), shape (of the numerator), gain (not to be had from this stage),
    sign (a coefficient has the wrong sign), few (too few free parts), many (too many), negative (no real
    positive branch for the numbers given), given up (the work grew beyond its bound), target (it cannot be
    read as a target). ``groups`` are, for too many free parts, groups of which one is to be chosen.
    ``condition`` is the inequality that is violated, where there is one.
    """

    kind: Literal["order", "shape", "gain", "sign", "few", "many", "negative", "given up", "target"]
    cause: str
    mend: str
    groups: tuple[tuple[str, ...], ...] = ()
    condition: Condition | None = None


class Refused(Exception):
    """Carries a refusal from where it is found to where the match returns it."""

    def __init__(self, refusal: Refusal) -> None:
        super().__init__(refusal.cause)
        self.refusal = refusal
