"""The proof of a solution: its values put into the numeric solve of the circuit, and compared with the target."""

from __future__ import annotations

import random
from collections.abc import Mapping, Set
from typing import Any

import mpmath
import sympy

from symcirc.circuit.model import Setup
from symcirc.complaints import InternalFault
from symcirc.derivation import Derivation
from symcirc.goal import Goal
from symcirc.match.problem import Branch, Root
from symcirc.sheet.expression import names
from symcirc.witness.agree import precise_ratio

#: The largest relative departure from the target that is taken for rounding of a solution's values.
TOLERANCE = 1e-9
#: How many digits the proof is computed with.
DIGITS = 40
#: How many random choices of the symbols are tried before a branch is left unproved.
TRIES = 200
#: Where random values of symbols lie, by unit: the decades of ordinary stages.
DECADES = {"ohm": (3, 5), "F": (-9, -7), "H": (-3, -1), "S": (-5, -3), "Hz": (2, 4)}


def prove(
    derivation: Derivation,
    setup: Setup,
    present: Set[str],
    goal: Goal,
    branch: Branch,
    known: Mapping[str, sympy.Expr],
) -> Any:
    """Compare the circuit with the target at three frequencies, each part at its value.

    ``present`` are the names in the ratio that ``setup`` asks, ``known`` the numbers of the sheet. Where symbols are
    left, they get random values at which the branch is real and positive. Returns by what factor the circuit's ratio
    is larger than the target (1 or -1 but for a free gain), or None where no such values are found. Raises
    InternalFault where the circuit does not give the target.
    """
    targets = (*goal.numerator, *goal.denominator)
    symbols = present | {str(x) for c in targets for x in c.free_symbols}
    solved = {equation.part for equation in branch.equations}
    missing = sorted(symbols - set(known) - solved - {"pi"})
    with mpmath.workdps(DIGITS):
        numbers = {name: _number(number, {}) for name, number in known.items()}
        if missing:
            return _prove_somewhere(derivation, setup, goal, branch, numbers, missing)
        values = {name: mpmath.mpf(value) for name, value in branch.values.items() if value is not None}
        _agree(_follow(branch, numbers), values, goal)
        return _compare(derivation, setup, goal, {**numbers, **values})


def _prove_somewhere(
    derivation: Derivation,
    setup: Setup,
    goal: Goal,
    branch: Branch,
    numbers: dict[str, Any],
    missing: list[str],
) -> Any:
    generator = random.Random(1)  # seeded: the same proof on every run
    for _ in range(TRIES):
        chosen = {name: _random_value(derivation, name, generator) for name in missing}
        followed = _follow(branch, {**numbers, **chosen})
        if followed is not None:
            return _compare(derivation, setup, goal, followed)
    return None


def _agree(followed: dict[str, Any] | None, values: dict[str, Any], goal: Goal) -> None:
    """The printed equations, computed in their order, must give the printed values."""
    wrong = followed is None or any(abs(followed[n] / v - 1) > TOLERANCE for n, v in values.items())
    if wrong:
        raise InternalFault(f"the design equations for {goal.target.ask} do not give the values found")


def _random_value(derivation: Derivation, name: str, generator: random.Random) -> Any:
    low, high = DECADES.get(derivation.sheet.symbols[name].dimension or "", (0, 1))
    return mpmath.mpf(10) ** generator.uniform(low, high)


def _follow(branch: Branch, values: dict[str, Any]) -> dict[str, Any] | None:
    """Compute a branch's equations in their order; None where one is not real, or not positive as it must be."""
    values = dict(values)
    for equation in branch.equations:
        formula = equation.formula
        value = _root(formula, values) if isinstance(formula, Root) else _number(formula, values)
        if value is None or abs(mpmath.im(value)) > abs(value) * mpmath.mpf(10) ** -25:
            return None
        values[equation.part] = mpmath.re(value)
    for condition in branch.conditions:
        left, right = _number(condition.left, values), _number(condition.right, values)
        margin = mpmath.mpf(10) ** -25 * max(abs(left), abs(right))
        holds = {
            ">": left > right,
            ">=": left >= right - margin,
            "<": left < right,
            "<=": left <= right + margin,
            "=": abs(left - right) <= margin,
            "!=": left != right,
        }
        if mpmath.im(left) or mpmath.im(right) or not holds[condition.relation]:
            return None
    return values


def _number(formula: sympy.Expr, values: Mapping[str, Any]) -> Any:
    substituted = formula.xreplace({x: sympy.Float(values[str(x)], DIGITS) for x in formula.free_symbols})
    return mpmath.mpmathify(sympy.N(substituted, DIGITS))


def _root(root: Root, values: Mapping[str, Any]) -> Any:
    variable = next(x for x in root.polynomial.free_symbols if str(x) == root.variable)
    coefficients = sympy.Poly(root.polynomial, variable).all_coeffs()
    roots = mpmath.polyroots([_number(c, values) for c in coefficients], maxsteps=200, extraprec=200)
    real = sorted(mpmath.re(r) for r in roots if abs(mpmath.im(r)) < abs(r) * mpmath.mpf(10) ** -25)
    positive = [r for r in real if r > 0]
    return positive[max(root.index, 1) - 1] if len(positive) >= max(root.index, 1) else None


def _compare(derivation: Derivation, setup: Setup, goal: Goal, values: dict[str, Any]) -> Any:
    numerator = [_number(c, values) for c in goal.numerator]
    denominator = [_number(c, values) for c in goal.denominator]
    order = len(denominator) - 1
    centre = abs(denominator[0]) ** (mpmath.mpf(1) / order) if order and denominator[0] else mpmath.mpf(1)
    held = {name.text for tie in derivation.ties.values() for name in names(tie)} - {"s", "pi"}
    held |= {part.name for part in derivation.circuit.parts}
    held |= {n for device in derivation.circuit.devices for n in device.parameters.values()}
    known = dict.fromkeys(held, mpmath.mpf(1)) | values  # what moves nothing that is asked may have any value
    factors = []
    for step in ("0.37", "0.93", "2.1"):
        s = mpmath.mpc("0.03", step) * centre
        target = _polynomial(numerator, s) / _polynomial(denominator, s)
        factors.append(precise_ratio(derivation.circuit, setup, derivation.ties, known, s) / target)
    expected = {"exact": mpmath.mpf(1), "magnitude": mpmath.sign(mpmath.re(factors[0])), "free": factors[0]}[
        goal.gain
    ]
    departure = max(abs(factor / expected - 1) for factor in factors)
    if not departure <= TOLERANCE:
        raise InternalFault(
            f"a solution for {goal.target.ask} departs from the target by {float(departure):.3g} in the numeric solve"
        )
    return mpmath.re(factors[0])


def _polynomial(coefficients: list[Any], s: Any) -> Any:
    return sum((c * s**k for k, c in enumerate(coefficients)), start=mpmath.mpc(0))
