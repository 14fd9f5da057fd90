"""The section of design equations: for each target its solutions with their conditions, of a cascade stage by stage."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.cascade.search import Found as Cascade
from symcirc.complaints import Complaint
from symcirc.design import Design, Solution
from symcirc.goal import Goal
from symcirc.match.formula import condition_text, equation_text
from symcirc.match.problem import Branch, Condition, Equation
from symcirc.note.algebra import ratio_form
from symcirc.note.formulas import Statement, condition_statement, equation_statement, has_decimals
from symcirc.note.material import Aim, Material
from symcirc.note.model import Block, Heading, Items, Paragraph, Pieces, Reference, Remark
from symcirc.note.pieces import Numbering, joined, mathematics, quantity, sentence, shown
from symcirc.note.requirement import goal_form
from symcirc.report.cascade_words import choice_sentence, stage_line
from symcirc.report.lines import readable
from symcirc.report.match_facts import chosen_names
from symcirc.report.range_words import range_lines


def design_blocks(material: Material, numbering: Numbering) -> Iterator[Block]:
    """Yield the design equations of every target."""
    for aim in material.aims:
        if len(material.aims) > 1:
            yield Heading(2, f"For {aim.target.ask}")
        yield from _aim(aim, material, numbering)


def _aim(aim: Aim, material: Material, numbering: Numbering) -> Iterator[Block]:
    if aim.design is None:
        assert aim.complaint is not None
        yield _complained(aim.complaint)
        return
    design, before = aim.design, len(numbering.equations)
    given = [_given(design, name) for name in chosen_names(design)]
    if given:
        yield Paragraph(("Given: ", *joined(given), "."))
    if design.refusal is not None:
        yield Remark(
            "warning",
            (
                f"No part values give this target: {design.refusal.cause}. What would help: {design.refusal.mend}.",
            ),
        )
        yield from _ranges(design)
        return
    if design.cascade is not None:
        yield from _cascade(design, design.cascade, numbering)
    else:
        yield from _solutions(design, numbering)
    yield from _ranges(design)
    if any(has_decimals(e.left) or has_decimals(e.right) for e in numbering.equations[before:]):
        yield Paragraph(("Numbers without a short exact form are printed with 17 significant digits.",))


def _complained(complaint: Complaint) -> Remark:
    return Remark("warning", (shown(f"There are no design equations: {complaint.cause}; {complaint.mend}."),))


def _given(design: Design, name: str) -> Pieces:
    sheet = design.derivation.sheet
    if name not in sheet.numbers:
        return (mathematics(name),)
    dimension = sheet.symbols[name].dimension
    unit = dimension if dimension not in (None, "ratio") else ""
    return (mathematics(name), f" = {quantity(float(sheet.numbers[name]), unit)}")


def _solutions(design: Design, numbering: Numbering) -> Iterator[Block]:
    total = len(design.solutions)
    ask = design.ask.name
    count = (
        "one solution. Its equations are computed in this order." if total == 1 else f"{total} solutions. "
    )
    count += "" if total == 1 else "The equations of each are computed in this order."
    yield Paragraph((*_matching(ask, ask, design.goal, numbering), f" That gives {count}"))
    for number, solution in enumerate(design.solutions, 1):
        if total > 1:
            yield Heading(2, f"Solution {number} of {total}")
        yield from _branch(solution.branch, numbering, f"{design.ask.name}-{number}")
        yield from _gain(design, solution)


def _matching(ask: str, name: str, goal: Goal, numbering: Numbering) -> Pieces:
    """Return what must equal what; by their numbers where both are displayed."""
    but = {"exact": "", "magnitude": ", up to the sign of its numerator"}
    left = but.get(goal.gain, ", up to a constant factor of its numerator")
    standard, target = f"standard-{name}", f"target-{name}"
    if {standard, target} <= numbering.anchors:
        return (
            "Each coefficient of ",
            Reference(standard),
            " must be that of ",
            Reference(target),
            f"{left}.",
        )
    return (f"Each coefficient of {ask} must be the target's{left}.",)


def _cascade(design: Design, cascade: Cascade, numbering: Numbering) -> Iterator[Block]:
    yield Paragraph(sentence(f"{choice_sentence(cascade)[0].upper()}{choice_sentence(cascade)[1:]}."))
    for match in cascade.stages:
        yield Heading(2, shown(stage_line(match)[0].upper() + stage_line(match)[1:]))
        name = f"{design.ask.name}-{match.stage.number}"
        if match.section.poles or match.section.zeros or match.gain is not None:
            yield Paragraph(("What it takes of the target:",))
            left = ratio_form(match.stage.answer.ask)
            yield numbering.equation(f"target-{name}", left, goal_form(match.goal))
            yield Paragraph(_matching("the stage", name, match.goal, numbering))
        for number, branch in enumerate(match.branches, 1):
            if len(match.branches) > 1:
                yield Paragraph((f"Solution {number} of {len(match.branches)} of this stage:",))
            yield from _branch(branch, numbering, f"{design.ask.name}-{match.stage.number}-{number}")
    if len(design.solutions) > 1:
        yield Paragraph(("Any solution of a stage goes with any of the others.",))
    yield from _gain(design, design.solutions[0])


def _branch(branch: Branch, numbering: Numbering, name: str) -> Iterator[Block]:
    for equation in branch.equations:
        yield from _stated(equation, numbering, f"design-{name}-{equation.part}")
    if branch.conditions:
        yield Paragraph(("Real and positive where",))
    for number, condition in enumerate(branch.conditions, 1):
        yield from _stated(condition, numbering, f"condition-{name}-{number}")


def _stated(said: Equation | Condition, numbering: Numbering, anchor: str) -> Iterator[Block]:
    """Yield a formula as a displayed equation; what has no form as plain arithmetic."""
    try:
        statement: Statement = (
            equation_statement(said) if isinstance(said, Equation) else condition_statement(said)
        )
    except ValueError:
        text = (
            condition_text(said)
            if isinstance(said, Condition)
            else f"{said.part} = {equation_text(said.formula)}"
        )
        yield Paragraph((readable(text),))
        return
    if statement.root_of is not None:
        which = _which_root(said)
        yield Paragraph((mathematics(statement.root_of), f" is {which} of"))
    yield numbering.statement(anchor, statement)


def _which_root(said: Equation | Condition) -> str:
    index = getattr(getattr(said, "formula", None), "index", 0)
    ordinal = {
        0: "a positive root",
        1: "the smallest positive root",
        2: "the second smallest positive root",
        3: "the third smallest positive root",
    }
    return ordinal.get(index, f"positive root number {index}, counted upwards,")


def _gain(design: Design, solution: Solution) -> Iterator[Block]:
    inverts = "the stage inverts" if solution.sign < 0 else ""
    if solution.gain is not None:
        gain = f"Nominal gain {quantity(solution.gain, '')}"
        yield Paragraph((f"{gain}{': ' + inverts if inverts else ''}.",))
    elif inverts:
        yield Paragraph((f"{inverts[0].upper()}{inverts[1:]}.",))


def _ranges(design: Design) -> Iterator[Block]:
    lines = [shown(line) for line in range_lines(design.derivation.sheet, design.ranges)]
    if not lines:
        return
    would = "With the rest as given it would be real and positive for"
    yield Paragraph(
        (
            f"{would if design.refusal else 'Real and positive, each part by itself with the rest as given, for'}:",
        )
    )
    yield Items(tuple(sentence(line, design.derivation.sheet.symbols) for line in lines))
