"""The sections that a reviewer reads first: the summary, the circuit, and what is assumed."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence

from symcirc.complaints import Complaint, listed
from symcirc.derivation import Answer, BigAnswer
from symcirc.note.algebra import stages_of
from symcirc.note.amplifiers import Move
from symcirc.note.formulas import condition_statement
from symcirc.note.material import Aim, Material
from symcirc.note.model import Block, Derivation, Figure, Items, Mathematics, Paragraph, Pieces, Remark
from symcirc.note.pieces import Numbering, joined, quantity, references, sentence, shown
from symcirc.note.requirement import target_words
from symcirc.note.response import Reached, Response, reached, words_of
from symcirc.report.lines import counted
from symcirc.report.quantities import ask_text
from symcirc.transfer.kinds import character
from symcirc.transfer.signs import positive_names
from symcirc.transfer.text import text
from symcirc.values.poles import pole_pairs

#: A pair of poles with a Q from this on is worth a word (common practice, no source).
HIGH_Q = 3.0
#: A smaller relative shift by real amplifiers is not (common practice, no source).
WORTH_A_WORD = 1e-3
#: A condition with more letters than this stands with the design equations only.
LONGEST_CONDITION = 40
_KINDS = {"R": "resistor", "C": "capacitor", "L": "inductor", "Z": "impedance", "Y": "admittance"}
_DEVICES = {
    "opamp": "amplifier",
    "vcvs": "controlled source",
    "vccs": "controlled source",
    "cccs": "controlled source",
    "ccvs": "controlled source",
}
_RELATIONS = {">=": "≥", "<=": "≤"}


def summary_blocks(
    material: Material, responses: Sequence[Response], moves: Sequence[Move]
) -> Iterator[Block]:
    """Yield three lines, what, how well, what to watch, and then the warnings."""
    watch = list(_watch(material, moves)) or [("nothing beyond what is assumed",)]
    yield Items(
        (
            sentence(f"What: {_what(material)}."),
            sentence(f"How well: {_how_well(material, responses)}."),
            ("What to watch: ", *joined(watch, "; ", "; "), "."),
        )
    )
    for remark in material.remarks:
        yield Remark("warning", sentence(shown(f"Line {remark.place.line} of the sheet: {remark.message}.")))


def _what(material: Material) -> str:
    asks = [_kind(material, answer) for answer in material.derivation.answers]
    stages = [len(stages_of(material, answer.ask.name)) for answer in material.derivation.answers]
    where = f", in {max(stages)} stages" if max(stages) else ""
    return shown(f"{'; '.join(asks)}; {parts_words(material)}{where}")


def _kind(material: Material, answer: Answer | BigAnswer) -> str:
    if not isinstance(answer, Answer):
        return ask_text(answer.ask)
    order = answer.function.order
    found = character(answer.function, positive_names(material.sheet.symbols)).kind
    what = "loop gain" if answer.ask.loop else "" if found in ("mixed", "zero") else found
    words = " ".join(x for x in (what, f"of order {order}" if order else "") if x)
    return f"{ask_text(answer.ask)}" + (f", {words}" if words else "")


def parts_words(material: Material) -> str:
    """Return how many parts of each kind there are."""
    counts = Counter(_KINDS[part.kind] for part in material.sheet.parts)
    counts.update(_DEVICES.get(device.kind, device.kind) for device in material.sheet.devices)
    return listed(counted(number, word) for word, number in counts.items())


def _how_well(material: Material, responses: Sequence[Response]) -> str:
    said = [words for aim in material.aims if (words := _met(aim))]
    for response in responses:
        rows = reached(response.curves)
        if rows:
            said.append(_limits(response.ask, rows))
    return shown("; ".join(said)) if said else "the sheet sets no target and no limit"


def _met(aim: Aim) -> str:
    ask = aim.target.ask
    if aim.design is None:
        return f"there are no design equations for {ask}"
    if aim.design.refusal is not None and not aim.design.unknowns:
        return f"with the values that the sheet fixes {ask} is near its target ({target_words(aim)}), not exactly it"
    if aim.design.refusal is not None:
        return f"{ask} cannot meet its target ({target_words(aim)}) with what is given"
    meets = f"{ask} meets its target ({target_words(aim)})"
    if aim.chosen is not None:
        return f"{meets} to within {aim.chosen.departure:.3g} dB with preferred values"
    if all(solution.sign for solution in aim.design.solutions):
        return f"{meets} exactly, with exact values"
    return f"{meets}, but no random values were found to prove it with"


def _limits(ask: str, rows: Sequence[Reached]) -> str:
    worst = min(rows, key=lambda row: row.spare_db)
    if worst.spare_db < 0:
        missed = f"{sum(row.spare_db < 0 for row in rows)} of {counted(len(rows), 'limit')} of {ask} missed"
        return f"{missed}, by up to {-worst.spare_db:.3g} dB ({words_of(worst.words)})"
    return f"every limit of {ask} is met, with {worst.spare_db:.3g} dB to spare at the least ({words_of(worst.words)})"


def _watch(material: Material, moves: Sequence[Move]) -> Iterator[Pieces]:
    """Yield what a reviewer is to look at, the gravest first."""
    if material.remarks:
        yield (f"{counted(len(material.remarks), 'warning')}, below",)
    for aim in material.aims:
        yield from _conditions(aim)
    if moves and max(move.largest for move in moves) >= WORTH_A_WORD:
        move = max(moves, key=lambda move: move.largest)
        yield (f"the real amplifiers move f0 of {move.ask} by {move.f0[1]}",)
    for aim in material.aims:
        q = _highest_q(aim)
        if q is not None and q >= HIGH_Q:
            yield (
                f"{aim.target.ask} has a pair of poles with Q = {quantity(q, '', 4)}, which tolerances move most",
            )
    ideal = [
        device.label for device in material.sheet.devices if device.kind == "opamp" and not device.parameters
    ]
    if ideal:
        have = "has" if len(ideal) == 1 else "have"
        yield (
            f"{listed(ideal)} {have} no gain and no gbw in the sheet, so nothing is said of real amplifiers",
        )


def _conditions(aim: Aim) -> Iterator[Pieces]:
    """Yield the first condition of a design, and that there are several solutions."""
    if aim.design is None or aim.design.refusal is not None:
        return
    if len(aim.design.solutions) > 1:
        taken = "" if aim.chosen is not None else ": the first is taken below where one is needed"
        yield (f"{aim.target.ask} has {len(aim.design.solutions)} solutions{taken}",)
    conditions = [c for solution in aim.design.solutions for c in solution.branch.conditions]
    if conditions:
        try:
            said = condition_statement(conditions[0])
        except ValueError:
            return
        if len(text(said.left)) + len(text(said.right)) > LONGEST_CONDITION:
            yield (f"the design equations of {aim.target.ask} have conditions",)
            return
        more = len(set(conditions)) - 1
        also = f" (and {counted(more, 'condition')} more)" if more else ""
        relation = _RELATIONS.get(said.relation, said.relation)
        yield (
            "real values only where ",
            Mathematics(said.left),
            f" {relation} ",
            Mathematics(said.right),
            also,
        )


def _highest_q(aim: Aim) -> float | None:
    if aim.design is None or any(c.free_symbols for c in aim.design.goal.denominator):
        return None
    pairs = pole_pairs([float(c) for c in aim.design.goal.denominator])
    return max((pair.q for pair in pairs if pair.q is not None), default=None)


# the circuit ----------------------------------------------------------------------------------------------------


def circuit_blocks(material: Material, numbering: Numbering) -> Iterator[Block]:
    """Yield the drawing, with the values that the note settles on where there is one set of them."""
    from symcirc.drawing.draw import draw

    settled = all(aim.chosen is not None or aim.unique for aim in material.aims)
    try:
        drawn = draw(material.valued if settled else material.sheet)
    except Complaint as complaint:
        yield Paragraph((f"It is not drawn: {complaint.cause}.",))
        return
    caption = f"The circuit: {parts_words(material)}."
    yield _figure(numbering, caption, drawn.drawing.description, drawn.svg, drawn.drawing)


def _figure(numbering: Numbering, caption: str, described: str, svg: str, drawing: object) -> Figure:
    return numbering.figure("circuit", "circuit", caption, described, svg, drawing)


# what is assumed ------------------------------------------------------------------------------------------------


def assumption_blocks(material: Material, derived: Sequence[Block]) -> Iterator[Block]:
    """Yield what is assumed and where each is used; ``derived`` are the blocks of the derivation, if it is shown."""
    steps = [
        step.equation.anchor for block in derived if isinstance(block, Derivation) for step in block.steps
    ]
    items: list[Pieces] = []
    if any(device.kind == "opamp" for device in material.sheet.devices):
        items.append(
            (
                "Amplifiers are ideal: no current into the inputs, no voltage between them, and an output that gives "
                "any current. ",
                *_used([a for a in steps if "-amplifier" in a], "It is used in "),
            )
        )
    items.append(
        (
            "Parts are linear, lumped and constant: a resistor is R, a capacitor 1/(sC), an inductor sL. ",
            *_used([a for a in steps if a.endswith("-law")], "It is used in every current law: "),
        )
    )
    if any(stages_of(material, answer.ask.name) for answer in material.derivation.answers):
        items.append(
            (
                "An amplifier's output is not loaded by what follows it: the stages of the cascade are multiplied.",
            )
        )
    items.append(
        (
            "Signals are small: voltages and currents are departures from the operating point, and no output reaches "
            "the ends of its swing or its slew rate. It is used throughout.",
        )
    )
    items.append(
        ("The drive is an ideal source, and the output is loaded by nothing that the sheet does not hold.",)
    )
    yield Items(tuple(items))


def _used(anchors: list[str], words: str) -> Pieces:
    return (words, *references(anchors), ".") if anchors else ()
