"""A match as the design's JSON object."""

from __future__ import annotations

from typing import Any

import sympy

from symcirc.design import Design, Solution
from symcirc.match.formula import condition_text, equation_latex, equation_text
from symcirc.report.match_facts import chosen_names, refusal_remark
from symcirc.transfer.latex import latex_name


def match_json(design: Design) -> dict[str, Any]:
    """Return target, what was chosen, and every solution; no solution leaves the reason among the warnings."""
    remarks = [*design.remarks, *([refusal_remark(design)] if design.refusal else [])]
    return {
        "ask": design.answer.ask.name,
        "target": {
            "numerator": [_coefficient(c) for c in design.goal.numerator],
            "denominator": [_coefficient(c) for c in design.goal.denominator],
        },
        "chosen": chosen_names(design),
        "solutions": [_solution(solution) for solution in design.solutions],
        "warnings": [remark.as_json() for remark in remarks],
    }


def _coefficient(coefficient: sympy.Expr) -> float | str:
    return equation_text(coefficient) if coefficient.free_symbols else float(sympy.N(coefficient, 20))


def _solution(solution: Solution) -> dict[str, Any]:
    return {
        "equations": [
            {
                "part": equation.part,
                "text": equation_text(equation.formula),
                "latex": f"{latex_name(equation.part)} = {equation_latex(equation.formula)}",
            }
            for equation in solution.branch.equations
        ],
        "conditions": [condition_text(condition) for condition in solution.branch.conditions],
        "values": dict(solution.values),
        "gain": solution.gain,
    }
