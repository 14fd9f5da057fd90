"""The sections of a note that are algebra: the derivation, and the transfer function in standard form."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.cascade.stages import Stage
from symcirc.complaints import Complaint
from symcirc.derivation import Answer, BigAnswer, Derivation, Posed
from symcirc.note import model
from symcirc.note.material import Material
from symcirc.note.model import Block, Heading, Items, Mathematics, Paragraph, Pieces
from symcirc.note.pieces import Numbering, sentence, shown
from symcirc.report.facts import Fact, facts_of
from symcirc.report.quantities import ask_text
from symcirc.sheet.model import Ask, PartCurrent, Quantity, Voltage
from symcirc.steps import Steps, steps_of
from symcirc.steps.writing import function_form, over_under, total
from symcirc.transfer.form import Form, Negative, Product, Symbol
from symcirc.transfer.standard import coefficient_forms, monic_forms

#: The left sides of what is displayed of a function of first or second order.
_DISPLAYED = {
    "w0": Symbol("ω0"),
    "pole w0": Symbol("ω0"),
    "f0": Symbol("f0"),
    "pole f0": Symbol("f0"),
    "Q": Symbol("Q"),
}


def stages_of(material: Material, ask: str) -> tuple[Stage, ...]:
    """Return the stages into which the target of an ask was shared out; none where it was not."""
    aim = material.aim(ask)
    cascade = None if aim is None or aim.design is None else aim.design.cascade
    return () if cascade is None else tuple(match.stage for match in cascade.stages)


def derivation_blocks(material: Material, numbering: Numbering) -> Iterator[Block]:
    """Yield the steps to every answer: of a cascade those of each stage."""
    answers = material.derivation.answers
    for answer in answers:
        if len(answers) > 1:
            yield Heading(2, shown(ask_text(answer.ask)))
        stages = stages_of(material, answer.ask.name)
        if stages:
            yield Paragraph(
                (
                    "The circuit is a cascade: each stage begins at the output of an amplifier, which holds its "
                    "voltage whatever the next stage draws. Each stage is derived by itself.",
                )
            )
        for stage in stages:
            yield Heading(2, f"Stage {stage.number}: {stage_nodes(stage)}")
            yield from _steps(
                material, numbering, own_posed(stage), stage.answer, f"{answer.ask.name}-{stage.number}"
            )
        if not stages:
            yield from _steps(material, numbering, material.posed, answer, answer.ask.name)


def own_posed(stage: Stage) -> Posed:
    """Return a stage of a cascade made ready, as a circuit of its own."""
    d = stage.derivation
    return Posed(stage.sheet, d.circuit, d.circuit, d.ties, {stage.answer.ask.name: stage.answer.setup})


def stage_nodes(stage: Stage) -> str:
    """Return between which nodes a stage stands."""
    return (
        f"the input to {stage.piece.last}"
        if stage.piece.first is None
        else f"{stage.piece.first} to {stage.piece.last}"
    )


def _steps(
    material: Material, numbering: Numbering, posed: Posed, answer: Answer | BigAnswer, name: str
) -> Iterator[Block]:
    try:
        steps = steps_of(posed, answer)
    except Complaint as complaint:
        yield Paragraph((f"It is not written out: {complaint.cause}.",))
        return
    if len(material.sheet.asks) > 1 and not stages_of(material, answer.ask.name):
        yield Paragraph(_drives(answer.ask))
    yield model.Derivation(tuple(_numbered(material, numbering, steps, name)))


def _numbered(material: Material, numbering: Numbering, steps: Steps, name: str) -> Iterator[model.Step]:
    for k, step in enumerate(steps.steps):
        if step.kind != "standard form":  # the next section has it
            equation = numbering.equation(f"step-{name}-{k}-{step.kind}", step.left, step.right)
            yield model.Step(sentence(step.words, material.sheet.symbols), equation)


def _drives(ask: Ask) -> Pieces:
    return (
        f"With the drive of {ask.name} alone: a voltage drive of another ratio is a short, a current drive is open.",
    )


def quantity_form(quantity: Quantity) -> Form:
    """Return an asked quantity, a difference as a sum."""
    if isinstance(quantity, Voltage):
        signs = ((quantity.plus, 1), (quantity.minus, -1))
        names = [(Symbol(f"V_{node}"), sign) for node, sign in signs if node != "gnd"]
        return total(name if sign > 0 else Negative(name) for name, sign in names)
    return Symbol(f"I_{quantity.part if isinstance(quantity, PartCurrent) else quantity.node}")


def ratio_form(ask: Ask) -> Form:
    """Return what is asked as a ratio; a loop gain by its name."""
    if ask.over is None or ask.under is None:
        return Symbol(ask.name)
    return over_under(quantity_form(ask.over), quantity_form(ask.under))


# the transfer function ------------------------------------------------------------------------------------------


def transfer_blocks(material: Material, numbering: Numbering) -> Iterator[Block]:
    """Yield every function as it came and in standard form, with ω0 and Q, gains and poles."""
    answers = material.derivation.answers
    for answer in answers:
        if len(answers) > 1:
            yield Heading(2, shown(ask_text(answer.ask)))
        stages = stages_of(material, answer.ask.name)
        if stages:
            yield from _product(material, numbering, answer.ask, stages)
        elif isinstance(answer, BigAnswer):
            over, under = answer.products
            yield Paragraph(
                (
                    f"Expanded it would have {over:,} products over the line and {under:,} under it: "
                    "it is not written out.",
                )
            )
        else:
            yield from _function(
                material.derivation, numbering, answer, answer.ask.name, Symbol(answer.ask.name)
            )


def _product(
    material: Material, numbering: Numbering, ask: Ask, stages: tuple[Stage, ...]
) -> Iterator[Block]:
    yield Paragraph((f"{ask.name} is the product of its stages' own functions:",))
    ratios = [ratio_form(stage.answer.ask) for stage in stages]
    yield numbering.equation(f"product-{ask.name}", Symbol(ask.name), Product(tuple(ratios)))
    for stage in stages:
        yield Heading(2, f"Stage {stage.number}: {stage_nodes(stage)}")
        name = f"{ask.name}-{stage.number}"
        yield from _function(stage.derivation, numbering, stage.answer, name, ratio_form(stage.answer.ask))


def _function(
    derivation: Derivation, numbering: Numbering, answer: Answer, name: str, left: Form
) -> Iterator[Block]:
    function = answer.function
    yield numbering.equation(f"ratio-{name}", left, function_form(coefficient_forms(function)))
    if function.order:
        monic = function_form(monic_forms(function))
        yield Paragraph(
            (
                "In standard form, the denominator beginning with a bare power of ",
                Mathematics(Symbol("s")),
                ":",
            )
        )
        yield numbering.equation(f"standard-{name}", left, monic)
    facts = facts_of(derivation, answer)
    displayed = [fact for fact in facts if fact.form is not None and fact.what in _DISPLAYED]
    if displayed:
        is_pair = any(fact.what == "w0" for fact in displayed)
        subject = (
            "Natural frequency, in rad/s and in Hz, and quality"
            if is_pair
            else "Frequency of the pole, in rad/s and in Hz"
        )
        yield Paragraph((f"{subject}:",))
    for fact in displayed:
        if fact.form is not None:
            anchor = fact.what.removeprefix("pole ")
            yield numbering.equation(f"{anchor}-{name}", _DISPLAYED[fact.what], fact.form)
    said = tuple(pieces for fact in facts if (pieces := _said(fact)))
    if said:
        yield Items(said)


def _said(fact: Fact) -> Pieces:
    """Return a fact as a short sentence, empty where all of it is displayed."""
    number = shown(fact.number)
    if fact.what in _DISPLAYED and fact.form is not None:
        return (Mathematics(_DISPLAYED[fact.what]), f" = {number} for the sheet's values") if number else ()
    head = f"{fact.what[0].upper()}{fact.what[1:]}: "
    if fact.form is None:
        return (head, number)
    return (head, Mathematics(fact.form), f" = {number}" if number else "")
