"""Coefficients that no choice of the unknowns can bring to their targets."""

from __future__ import annotations

from typing import Literal

import sympy
from sympy.polys.rings import PolyElement

from symcirc.complaints import listed
from symcirc.match.formula import equation_text
from symcirc.match.names import natural
from symcirc.match.problem import Problem, Refusal, Refused
from symcirc.match.products import expression, factored
from symcirc.match.quantities import holds_any, known_value
from symcirc.match.shapes import power_text
from symcirc.match.system import Coefficient, Quotient, System

#: Characters of a formula that a sentence can bear.
_LONGEST_FORMULA = 80


def screened(
    system: System, references: tuple[Coefficient, ...], problem: Problem
) -> tuple[list[Coefficient], list[PolyElement]]:
    """Return the coefficients that set conditions on the unknowns, and the relations met by chosen numbers alone.

    Raises Refused where one cannot be met: it has another sign than its target for all part values, or only
    chosen quantities set it and these do not give the target.
    """
    left: list[Coefficient] = []
    fixed: list[PolyElement] = []
    for group, reference in zip(system.groups, references, strict=True):
        for coefficient in group:
            if coefficient is reference:
                continue
            partner = partner_of(coefficient, system, reference)
            relation = system.relation(coefficient, partner)
            if not relation:
                continue
            if system.quantities.sign(relation):
                raise Refused(_impossible(coefficient, partner, system, problem))
            if holds_any(relation, system.quantities.unknowns):
                left.append(coefficient)
            else:
                _check_chosen(coefficient, partner, system, problem)
                fixed.append(relation)
    return left, fixed


def partner_of(coefficient: Coefficient, system: System, reference: Coefficient) -> Coefficient:
    """Return the coefficient that one is best compared with: for the numerator, that of the same power below."""
    if coefficient.relative is None or len(system.groups) > 1 or not coefficient.target.above:
        return reference
    return next(c for c in system.groups[0] if c.where == "denominator" and c.power == coefficient.power)


def _impossible(one: Coefficient, other: Coefficient, system: System, problem: Problem) -> Refusal:
    quantities = system.quantities
    what = name_of(one, other, problem.function.order)
    wanted = _target_text(one, other, system)
    mend = "ask for a target that this stage can give"
    mine, yours = quantities.sign(one.stage), quantities.sign(other.stage)
    ratio = factored(one.stage, quantities) / factored(other.stage, quantities)
    kind: Literal["gain", "sign"] = "gain" if one.where == "numerator" else "sign"
    if not ratio.sums and not any(ratio.monomial):
        value = equation_text(expression(ratio, quantities))
        cause = f"{what} of this stage is {value} whatever its parts; the target asks for {wanted}"
        mend = f"ask for {what} {value}, leave the gain out, or use a stage whose gain can be set"
    elif mine and yours and mine * yours * _target_sign(one, other, system) < 0:
        sign = "positive" if mine * yours > 0 else "negative"
        cause = f"{what} of this stage is always {sign}; the target asks for {wanted}"
        mend = "change the sign of the target" if kind == "gain" else mend
    else:
        shown = _shown(expression(ratio, quantities), ", {},")
        cause = f"{what} of this stage{shown} is never {wanted}"
    return Refusal(kind, cause, mend)


def _target_sign(one: Coefficient, other: Coefficient, system: System) -> int:
    wanted = _wanted(one, other)
    signs = system.quantities.sign(wanted.above), system.quantities.sign(wanted.below)
    return (signs[0] or 0) * (signs[1] or 0)


def _wanted(one: Coefficient, other: Coefficient) -> Quotient:
    if one.relative is not None and one.where != other.where and one.power == other.power:
        return one.relative
    return Quotient(one.target.above * other.target.below, one.target.below * other.target.above)


def _target_text(one: Coefficient, other: Coefficient, system: System) -> str:
    return equation_text(quotient_expression(_wanted(one, other), system))


def quotient_expression(quotient: Quotient, system: System) -> sympy.Expr:
    """Return a quotient of the ring as an expression."""
    if not quotient.above:
        return sympy.S.Zero
    above, below = (factored(p, system.quantities) for p in (quotient.above, quotient.below))
    return expression(above / below, system.quantities)


def _check_chosen(one: Coefficient, other: Coefficient, system: System, problem: Problem) -> None:
    """Refuse a relation among chosen quantities that their numbers do not meet."""
    quantities = system.quantities
    start = [quantities.decimals.get(k, quantities.numbers.get(k)) for k in range(quantities.ring.ngens)]
    relation = system.relation(one, other)
    value = known_value(relation, start)
    if value is not None and not value:
        return
    what = name_of(one, other, problem.function.order)
    given = quotient_expression(Quotient(one.stage, other.stage), system)
    names = listed(sorted((str(s) for s in given.free_symbols), key=natural), last="or")
    sentence = f"{what}{_shown(given, ', {},')} is not left to be solved for"
    mend = f"let {names} be solved for, or make this the target"
    if value is not None and known_value(other.stage, start):
        number = known_value(one.stage, start) / known_value(other.stage, start)
        sentence += f" and comes to {float(number):.6g}"
    raise Refused(Refusal("few", f"{sentence}; the target asks for {_target_text(one, other, system)}", mend))


def _shown(formula: sympy.Expr, pattern: str) -> str:
    """Return a formula's text in a pattern; nothing where it is too long for a sentence."""
    text = equation_text(formula)
    return pattern.format(text) if len(text) <= _LONGEST_FORMULA else ""


def name_of(one: Coefficient, other: Coefficient, order: int) -> str:
    """Return what the ratio of two coefficients is called in a sentence."""
    if one.where == "numerator" and other.where == "denominator" and one.power == other.power:
        names = {0: "the gain at zero frequency", order: "the gain at infinite frequency"}
        centre = "the gain at the centre" if 2 * one.power == order == 2 else None
        return names.get(one.power) or centre or f"the ratio of the coefficients of {power_text(one.power)}"
    powers = f"{power_text(one.power)} and {power_text(other.power)}"
    if one.where == other.where:
        return f"the ratio of the coefficients of {powers} in the {one.where}"
    return f"the ratio of the coefficients of {powers} in the numerator and the denominator"
