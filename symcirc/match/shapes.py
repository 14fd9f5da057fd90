"""The shapes of responses by their numerators, and what is refused before anything is solved."""

from __future__ import annotations

from collections.abc import Iterable

from symcirc.complaints import listed
from symcirc.match.problem import Problem, Refusal, Refused
from symcirc.match.system import Coefficient, System


def shape_name(powers: Iterable[int], order: int) -> str | None:
    """Return the name of a response from the powers of s in its numerator; None where there is none.

    >>> shape_name([0], 2), shape_name([3], 3), shape_name([1], 2), shape_name([2, 0], 2), shape_name([1], 3)
    ('low-pass', 'high-pass', 'band-pass', 'band-stop', None)
    """
    held = sorted(powers)
    names: dict[tuple[int, ...], str] = {(0,): "low-pass", (order,): "high-pass"}
    if order and order % 2 == 0:
        names[(order // 2,)] = "band-pass"
        names[tuple(range(0, order + 1, 2))] = "band-stop"
    return names.get(tuple(held)) if order else None


def check_order(problem: Problem) -> None:
    """Refuse a stage and a target of unlike order."""
    stage, target = problem.function.order, len(problem.target_denominator) - 1
    if stage != target:
        more = stage > target
        cancels = ", and no factor of it cancels for all values of its parts" if more else ""
        tie = ", or tie parts so that a factor cancels" if more else ""
        raise Refused(
            Refusal(
                "order",
                f"the stage is of order {stage}{cancels}; the target is of order {target}",
                f"ask for a target of order {stage}, or use a stage of order {target}{tie}",
            )
        )


def check_shapes(system: System) -> None:
    """Refuse a stage whose coefficients are zero where the target's are not, or the other way round."""
    numerator = [c for c in system.coefficients if c.where == "numerator"]
    order = len(numerator) - 1
    lacking = [c for c in numerator if c.target.above and not c.stage]
    excess = [c for c in numerator if not c.target.above and system.quantities.sign(c.stage)]
    if lacking or excess:
        stage = shape_name((c.power for c in numerator if c.stage), order)
        target = shape_name((c.power for c in numerator if c.target.above), order)
        raise Refused(
            Refusal("shape", _shape_cause(stage, target, lacking, excess), _shape_mend(stage, target))
        )
    for c in system.coefficients:
        if c.where == "denominator" and bool(c.target.above) != bool(c.stage):
            who, other = ("stage", "target") if c.target.above else ("target", "stage")
            raise Refused(
                Refusal(
                    "shape",
                    f"the denominator of the {who} has no term in {power_text(c.power)}, that of the {other} has",
                    f"use a stage whose denominator has {'this' if c.target.above else 'no such'} term",
                )
            )


def _shape_cause(
    stage: str | None, target: str | None, lacking: list[Coefficient], excess: list[Coefficient]
) -> str:
    if stage and target and stage != target:
        return f"a {stage} stage cannot give a {target} response"
    if lacking:
        powers = listed(power_text(c.power) for c in lacking)
        return f"the numerator of the stage has no term in {powers}, as the target's has"
    powers = listed(power_text(c.power) for c in excess)
    return f"the numerator of the stage always has a term in {powers}, which the target's has not"


def _shape_mend(stage: str | None, target: str | None) -> str:
    wanted = f"a {target} stage" if target else "a stage whose numerator has the target's powers of s"
    return f"use {wanted}" + (f", or ask for a {stage} response" if stage else "")


def power_text(power: int) -> str:
    """Return how a power of s is named in a sentence.

    >>> power_text(0), power_text(1), power_text(2)
    ('s**0', 's', 's**2')
    """
    return "s" if power == 1 else f"s**{power}"
