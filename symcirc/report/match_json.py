"""A match as the design's JSON object."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from symcirc.design import Design, Solution
from symcirc.match.formula import condition_text, equation_latex, equation_text
from symcirc.match.problem import Equation
from symcirc.report.cascade_words import choice_sentence, stage_json
from symcirc.report.match_facts import chosen_names, number_json, refusal_remark
from symcirc.report.range_words import range_json
from symcirc.transfer.latex import latex_name


def match_json(design: Design) -> dict[str, Any]:
    """Return target, what was chosen, and every solution; no solution leaves the reason among the warnings.

    ``ranges`` say where parts with a number may lie, the rest as given; an end is null where there is none.
    A cascade has the entries ``stages``, what each stage takes of the target, and ``choice``, the sentence why.
    """
    remarks = [*design.remarks, *([refusal_remark(design)] if design.refusal else [])]
    answer: dict[str, Any] = {
        "ask": design.ask.name,
        "target": {
            "numerator": [number_json(c) for c in design.goal.numerator],
            "denominator": [number_json(c) for c in design.goal.denominator],
        },
        "chosen": chosen_names(design),
        "solutions": _solutions(design.solutions),
        "ranges": [range_json(r) for r in design.ranges],
        "warnings": [remark.as_json() for remark in remarks],
    }
    if design.cascade is not None:
        answer["stages"] = [stage_json(match) for match in design.cascade.stages]
        answer["choice"] = choice_sentence(design.cascade)
    return answer


def _solutions(solutions: Sequence[Solution]) -> list[dict[str, Any]]:
    """Return every solution; an equation that several of them share is written once."""
    written: dict[Equation, dict[str, str]] = {}
    return [_solution(solution, written) for solution in solutions]


def _solution(solution: Solution, written: dict[Equation, dict[str, str]]) -> dict[str, Any]:
    for equation in solution.branch.equations:
        if equation not in written:
            written[equation] = _equation(equation)
    return {
        "equations": [dict(written[equation]) for equation in solution.branch.equations],
        "conditions": [condition_text(condition) for condition in solution.branch.conditions],
        "values": dict(solution.values),
        "gain": solution.gain,
    }


def _equation(equation: Equation) -> dict[str, str]:
    return {
        "part": equation.part,
        "text": equation_text(equation.formula),
        "latex": f"{latex_name(equation.part)} = {equation_latex(equation.formula)}",
    }
