"""A match for people, in plain text and in LaTeX."""

from __future__ import annotations

from collections.abc import Iterator

import sympy

from symcirc.design import Design, Solution
from symcirc.match.formula import condition_latex, condition_text, equation_latex, equation_text
from symcirc.report.lines import aligned, hanging, readable
from symcirc.report.match_facts import chosen_names, refusal_remark
from symcirc.report.quantities import ask_text
from symcirc.transfer.engineering import engineering
from symcirc.transfer.latex import latex_name


def match_text(design: Design) -> Iterator[str]:
    """Yield the lines of a match: target, design equations with their conditions, values."""
    sheet = design.derivation.sheet
    yield sheet.title
    yield ""
    yield ask_text(design.answer.ask)
    yield f"target {target_text(design)}"
    yield from _target_polynomials(design)
    given = [_given(design, name) for name in chosen_names(design)]
    if given:
        yield f"given: {', '.join(given)}"
    if design.refusal is not None:
        remark = refusal_remark(design)
        yield ""
        yield f"no solution: {design.refusal.cause}"
        yield f"what would help: {design.refusal.mend}"
        yield remark.place.excerpt()
        return
    several = len(design.solutions) > 1
    for number, solution in enumerate(design.solutions, 1):
        yield ""
        yield f"solution {number} of {len(design.solutions)}" if several else "solution"
        yield from _solution(design, solution)


def target_text(design: Design) -> str:
    """Return the target's line of the sheet, without its first word and its comment."""
    place = design.goal.target.place
    line = place.source.line(place.line).split("#")[0].strip()
    return line.removeprefix("target").strip()


def _target_polynomials(design: Design) -> Iterator[str]:
    sides = (("over", design.goal.numerator), ("under", design.goal.denominator))
    for label, side in sides:
        terms = [
            (power, coefficient) for power, coefficient in reversed(list(enumerate(side))) if coefficient != 0
        ]
        shown = " + ".join(_monomial(power, coefficient) for power, coefficient in terms) or "0"
        yield f"  {label:7}{readable(shown)}"


def _monomial(power: int, coefficient: sympy.Expr) -> str:
    if coefficient.free_symbols:
        number = equation_text(coefficient)
        number = f"({number})" if coefficient.is_Add else number
    else:
        number = f"{float(sympy.N(coefficient, 20)):.10g}"
    letter = {0: "", 1: "s"}.get(power, f"s^{power}")
    return letter if letter and number == "1" else "*".join(x for x in (number, letter) if x)


def _given(design: Design, name: str) -> str:
    sheet = design.derivation.sheet
    if name not in sheet.numbers:
        return name
    return f"{name} = {_engineered(design, name, float(sympy.N(sheet.numbers[name], 20)))}"


def _engineered(design: Design, name: str, value: float) -> str:
    dimension = design.derivation.sheet.symbols[name].dimension
    return engineering(value, dimension if dimension not in (None, "ratio") else "")


def _solution(design: Design, solution: Solution) -> Iterator[str]:
    rows = [(e.part, equation_text(e.formula)) for e in solution.branch.equations]
    wide = max((len(part) for part, _ in rows), default=0)
    for part, formula in rows:
        yield from hanging(f"  {part:{wide}} = ", formula)
    conditions = [readable(condition_text(c)) for c in solution.branch.conditions]
    if conditions:
        yield "  real and positive where"
        yield from (f"    {condition}" for condition in conditions)
    values = [f"{n} = {_engineered(design, n, v)}" for n, v in solution.values.items()]
    if values:
        yield "  values"
        yield from (f"    {value}" for value in values)
    if solution.gain is not None:
        inverts = ", the stage inverts" if solution.gain < 0 else ""
        yield f"  gain {engineering(solution.gain, '')}{inverts}"
    elif solution.sign < 0:
        yield "  the stage inverts"
    if not solution.sign:
        yield "  not checked: no random values of the symbols were found at which it is real and positive"
        return
    symbolic = None in solution.branch.values.values()
    how = "random values of its symbols" if symbolic else "these values"
    yield f"  checked: with {how} the numeric solve of the circuit gives the target"


def match_latex(design: Design) -> Iterator[str]:
    """Yield LaTeX displays of the design equations and their conditions, one for each solution."""
    yield f"% {ask_text(design.answer.ask)}, target {target_text(design)}"
    if design.refusal is not None:
        yield f"% no solution: {design.refusal.cause}"
    for solution in design.solutions:
        rows = [f"{latex_name(e.part)} &= {equation_latex(e.formula)}" for e in solution.branch.equations]
        rows += [
            rf"\text{{where }} & {condition_latex(condition)}" for condition in solution.branch.conditions
        ]
        yield from aligned(rows)
