"""The sections that a reviewer reads last: what was checked and how, the sheet's own notes, the sheet, the caution."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from symcirc.derivation import Answer, BigAnswer
from symcirc.note.algebra import stages_of
from symcirc.note.judged import Judged
from symcirc.note.material import Material
from symcirc.note.model import Block, Figure, Items, Listing, Pieces, Remark
from symcirc.note.pieces import Numbering
from symcirc.proof import TOLERANCE as PROVED
from symcirc.report.lines import counted
from symcirc.witness.agree import POINTS, TOLERANCE

CAUTION = (
    "The results describe a linear small-signal model. They say nothing of insulation, ratings, surge, or functional "
    "safety. Where a stage is part of mains-connected, medical, vehicle, or protective equipment, local codes and a "
    "licensed or qualified practitioner decide, and the board is measured."
)
Row = tuple[str, str, str]


def check_blocks(
    material: Material, judged: Judged, shown: Sequence[Block], numbering: Numbering
) -> Iterator[Block]:
    """Yield a table of the checks behind what is ``shown``: what, by which method, at how many points."""
    rows = [*_answers(material), *_judged(judged), *_designs(material), *_values(material)]
    if any(isinstance(block, Figure) and block.anchor == "circuit" for block in shown):
        rows.append(
            (
                "circuit",
                "the drawing was read back from its lines and compared with the sheet",
                "every part and node",
            )
        )
    cells: list[tuple[Pieces, ...]] = [tuple((cell,) for cell in row) for row in rows]
    header = ("What", "Method", "Points")
    yield numbering.table("checks", "Checks that were made, all passed", header, cells, (False, False, False))


def _answers(material: Material) -> Iterator[Row]:
    for answer in material.derivation.answers:
        name = answer.ask.name
        yield _numeric(name, answer)
        if isinstance(answer, Answer) and answer.eliminated:
            yield (name, "elimination of the nodal equations gives the same function, exactly", "all values")
        stages = stages_of(material, name)
        for stage in stages:
            yield _numeric(f"stage {stage.number}", stage.answer)
        if stages:
            method = f"the stages' product agrees with the numeric solve of the whole circuit to {_power(TOLERANCE)}"
            yield (name, method, counted(POINTS, "random point"))


def _numeric(name: str, answer: Answer | BigAnswer) -> Row:
    evidence = answer.evidence
    method = (
        f"the function agrees with the numeric solve of the circuit to {_power(TOLERANCE)}; largest departure "
        f"{evidence.departure:.1e}"
    )
    return (name, method, counted(evidence.points, "random point"))


def _judged(judged: Judged) -> Iterator[Row]:
    if judged.lines:
        yield (
            "derivation and standard forms",
            "every displayed equation was judged as a line of hand algebra: true of the circuit for every value of "
            "its parts, by values modulo a prime and with 120 digits",
            counted(judged.lines, "equation"),
        )


def _designs(material: Material) -> Iterator[Row]:
    for aim in material.aims:
        if aim.design is None:
            continue
        for number, solution in enumerate(aim.design.solutions, 1):
            name = f"design of {aim.target.ask}" + (
                f", solution {number}" if len(aim.design.solutions) > 1 else ""
            )
            if not solution.sign:
                yield (
                    name,
                    "not checked: no random values of its symbols were found at which it is real",
                    "0",
                )
                continue
            free = None in solution.branch.values.values()
            how = "random values of its symbols" if free else "its values"
            method = f"with {how} the numeric solve of the circuit, 40 digits, gives the target to {_power(PROVED)}"
            yield (name, method, "3 frequencies")


def _values(material: Material) -> Iterator[Row]:
    for aim in material.aims:
        if aim.found is not None and aim.chosen is not None:
            points = f"{len(aim.found.band.points):,} frequencies"
            method = "the departure is the worst over the band; the exact set behind it departs by less than 0.001 dB"
            yield (f"preferred values of {aim.target.ask}", method, points)


def _power(number: float) -> str:
    """Return a power of ten as it is written: 1e-9."""
    return f"{number:.0e}".replace("e-0", "e-")


def notes_blocks(material: Material) -> Iterator[Block]:
    """Yield the sheet's own notes."""
    if material.sheet.notes:
        yield Items(tuple((note,) for note in material.sheet.notes))


def sheet_blocks(material: Material) -> Iterator[Block]:
    """Yield the sheet in full."""
    yield Listing(material.sheet.source.text)


def caution_blocks() -> Iterator[Block]:
    """Yield the caution."""
    yield Remark("caution", (CAUTION,))
