"""A match for people, in plain text and in LaTeX."""

from __future__ import annotations

import textwrap
from collections.abc import Iterator, Mapping

import sympy

from symcirc.cascade.search import Found
from symcirc.design import Design, Solution, part_values
from symcirc.match.formula import condition_latex, condition_text, equation_latex, equation_text
from symcirc.match.problem import Branch
from symcirc.report.cascade_words import choice_sentence, stage_line
from symcirc.report.lines import aligned, hanging, readable
from symcirc.report.match_facts import chosen_names, refusal_remark
from symcirc.report.quantities import ask_text
from symcirc.report.range_words import range_lines
from symcirc.transfer.engineering import engineering
from symcirc.transfer.latex import latex_name
from symcirc.transfer.layout import WIDTH


def match_text(design: Design) -> Iterator[str]:
    """Yield the lines of a match: target, design equations with their conditions, values."""
    sheet = design.derivation.sheet
    yield sheet.title
    yield ""
    yield ask_text(design.ask)
    yield f"target {target_text(design)}"
    if design.goal.order is not None:
        yield f"  the limits are met with order {design.goal.order}"
    yield from _target_polynomials(design)
    given = [_given(design, name) for name in chosen_names(design)]
    if given:
        yield f"given: {', '.join(given)}"
    if design.refusal is not None:
        remark = refusal_remark(design)
        yield ""
        yield f"no solution: {design.refusal.cause}"
        yield f"what would help: {design.refusal.mend}"
        yield from _ranges(design)
        yield remark.place.excerpt()
        return
    yield from _cascade(design, design.cascade) if design.cascade is not None else _solutions(design)
    yield from _ranges(design)


def _ranges(design: Design) -> Iterator[str]:
    lines = list(range_lines(design.derivation.sheet, design.ranges))
    if lines:
        yield "" if design.refusal is None else "with the rest as given it would be real and positive for"
        if design.refusal is None:
            yield "real and positive, each part by itself with the rest as given, for"
        yield from (f"  {line}" for line in lines)


def _solutions(design: Design) -> Iterator[str]:
    """Yield every solution of a stage that was solved as a whole."""
    symbolic = None in design.solutions[0].branch.values.values()
    for number, solution in enumerate(design.solutions, 1):
        yield ""
        yield _count_text(number, len(design.solutions))
        yield from _branch(design, solution.branch, solution.values)
        yield from _gain(solution)
        yield f"  {_checked(solution, symbolic, 'circuit')}"


def _cascade(design: Design, cascade: Found) -> Iterator[str]:
    """Yield the stages of a cascade, each with its solutions, and what holds for the whole."""
    for match in cascade.stages:
        yield ""
        yield stage_line(match)
        for number, branch in enumerate(match.branches, 1):
            if len(match.branches) > 1:
                yield f"  {_count_text(number, len(match.branches))}"
            values = part_values(match.stage.sheet, branch, match.problem.positives)
            own = {n: v for n, v in values.items() if n in match.stage.piece.names or n in branch.values}
            yield from _branch(design, branch, own)
    yield ""
    yield from _wrapped(choice_sentence(cascade))
    first = design.solutions[0]
    if len(design.solutions) > 1:
        yield "any solution of a stage goes with any of the others"
    yield from _gain(first)
    symbolic = None in first.branch.values.values()
    yield f"  {_checked(first, symbolic, 'stages and of the whole circuit')}"


def _wrapped(sentence: str) -> Iterator[str]:
    """Yield a sentence in lines, an equals sign with what stands around it on one."""
    lines = textwrap.wrap(sentence.replace(" = ", "\0=\0"), WIDTH)
    yield from (line.replace("\0", " ") for line in lines)


def _count_text(number: int, total: int) -> str:
    return f"solution {number} of {total}" if total > 1 else "solution"


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


def _branch(design: Design, branch: Branch, values: Mapping[str, float]) -> Iterator[str]:
    rows = [(e.part, equation_text(e.formula)) for e in branch.equations]
    wide = max((len(part) for part, _ in rows), default=0)
    for part, formula in rows:
        yield from hanging(f"  {part:{wide}} = ", formula)
    if branch.of_complex:
        yield f"  found in numbers, as one of {branch.of_complex} complex solutions, all of which were found"
    conditions = [readable(condition_text(c)) for c in branch.conditions]
    if conditions:
        yield "  real and positive where"
        yield from (f"    {condition}" for condition in conditions)
    if values:
        yield "  values"
        yield from (f"    {n} = {_engineered(design, n, v)}" for n, v in values.items())


def _gain(solution: Solution) -> Iterator[str]:
    if solution.gain is not None:
        inverts = ", the stage inverts" if solution.gain < 0 else ""
        yield f"  gain {engineering(solution.gain, '')}{inverts}"
    elif solution.sign < 0:
        yield "  the stage inverts"


def _checked(solution: Solution, symbolic: bool, what: str) -> str:
    if not solution.sign:
        return "not checked: no random values of the symbols were found at which it is real and positive"
    how = "random values of its symbols" if symbolic else "these values"
    return f"checked: with {how} the numeric solve of the {what} gives the target"


def match_latex(design: Design) -> Iterator[str]:
    """Yield LaTeX displays of the design equations and their conditions, one for each solution of each stage."""
    yield f"% {ask_text(design.ask)}, target {target_text(design)}"
    if design.refusal is not None:
        yield f"% no solution: {design.refusal.cause}"
    if design.cascade is None:
        for solution in design.solutions:
            yield from _branch_latex(solution.branch)
        return
    for match in design.cascade.stages:
        yield f"% {stage_line(match)}"
        for branch in match.branches:
            yield from _branch_latex(branch)


def _branch_latex(branch: Branch) -> Iterator[str]:
    rows = [f"{latex_name(e.part)} &= {equation_latex(e.formula)}" for e in branch.equations]
    rows += [rf"\text{{where }} & {condition_latex(condition)}" for condition in branch.conditions]
    if rows:
        yield from aligned(rows)
