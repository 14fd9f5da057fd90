"""The first worksheet: what may be changed, what follows from it at once, and what the rest of the workbook says."""

from __future__ import annotations

from dataclasses import dataclass

import sympy

from symcirc.report.match_text import target_text
from symcirc.report.quantities import ask_text
from symcirc.workbook.arithmetic import arithmetic
from symcirc.workbook.cells import Area, Chart, Formula, Page, Series, Worksheet, reference
from symcirc.workbook.goal import Quantity, fixed_words
from symcirc.workbook.live import LiveDesign
from symcirc.workbook.response import Curves

NAME = "Inputs"
CAUTION = (
    "These results describe a linear small-signal model.",
    "They say nothing of insulation, ratings, surge, or functional safety.",
    "Where a stage is part of mains-connected, medical, vehicle, or protective equipment,",
    "local codes and a licensed or qualified practitioner decide, and the board is measured.",
)
#: Decades of frequency to both sides of the target's own, for those that have a band and for others.
BAND_DECADES, DECADES = 1, 2


@dataclass(frozen=True)
class Given:
    """Where the inputs stand: each name's cell, the cells of all numbers, the two ends of the frequency axis.

    ``ends`` are these ends' cells and ``end_values`` their numbers, None where they are not known.
    """

    cells: dict[str, str]
    numbers: Area
    ends: tuple[str, str]
    end_values: tuple[float, float] | None


def put_inputs(page: Page, live: LiveDesign) -> Given:
    """Put the title, the caution and the inputs."""
    design = live.design
    page.line(design.derivation.sheet.title, style="title")
    page.line(f"{ask_text(design.ask)}, target {target_text(design)}")
    for sentence in CAUTION:
        page.line(sentence, style="sentence")
    page.row += 1
    page.line("input", "value", "unit", "what it is", style="head")
    first = page.row
    cells = {q.name: reference(first + k, 1, NAME) for k, q in enumerate(live.inputs)}
    for quantity in live.inputs:
        _put(page, quantity, cells)
    numbers = page.area(1, first)
    ends, end_values = _put_ends(page, live, cells)
    page.row += 1
    page.line(
        "Shaded cells are meant to be changed; all else follows. SI base units: farad, ohm, henry, hertz."
    )
    for sentence in _fixed(live):
        page.line(sentence)
    page.row += 1
    return Given(cells, numbers, ends, end_values)


def _put(page: Page, quantity: Quantity, cells: dict[str, str]) -> None:
    page.put(0, quantity.name)
    if quantity.formula is None:
        page.put(1, quantity.value, "input")
    else:
        page.put(1, Formula(arithmetic(quantity.formula, cells), quantity.value), "number")
    page.put(2, quantity.unit, "unit")
    page.put(3, quantity.meaning)
    page.row += 1


def _put_ends(
    page: Page, live: LiveDesign, cells: dict[str, str]
) -> tuple[tuple[str, str], tuple[float, float] | None]:
    """Put the ends of the frequency axis, whole decades around the mean frequency of the target's poles."""
    below = live.goal.denominator
    mean = below[0] ** sympy.Rational(1, max(len(below) - 1, 1)) / (2 * sympy.pi)
    decades = BAND_DECADES if live.goal.target.kind in ("bandpass", "bandstop") else DECADES
    known = {
        x: q.exact for q in live.inputs for x in mean.free_symbols if str(x) == q.name and q.exact is not None
    }
    value = mean.subs(known)
    low = 10.0 ** (round(float(sympy.log(value, 10).evalf())) - decades) if value.is_number else None
    start = Formula(f"10^(ROUND(LOG10({arithmetic(mean, cells)}),0)-{decades})", low)
    ends = page.here(1), reference(page.row + 1, 1, page.name)
    high = None if low is None else low * 10.0 ** (2 * decades)
    texts = (("from", "lowest", start), ("to", "highest", Formula(f"{ends[0]}*{10 ** (2 * decades)}", high)))
    for label, which, formula in texts:
        page.put(1, formula, "input")
        page.put(2, "Hz", "unit")
        page.line(label, None, None, f"the {which} frequency of the response; write over it for another")
    return ends, None if low is None or high is None else (low, high)


def _fixed(live: LiveDesign) -> list[str]:
    """Return sentences on what does not follow when it is changed."""
    target = live.goal.target
    sentences = []
    if target.family is not None:
        inside = ", ".join([target.family, *fixed_words(live.design.goal)])
        sentences.append(f"Built into the formulas: {inside}. For another, run match on the changed sheet.")
    if live.design.goal.order is not None:
        sentences.append("The limits chose the order; whether they are met is not looked at again here.")
    if live.design.cascade is not None and target.expression is not None:
        sentences.append(
            "The target's curve is the sheet's; the stages' frequencies and Q are inputs of their own."
        )
    if not all(stage.is_live for stage in live.stages):
        sentences.append("Where a stage says so, the target's numbers are built into its equations too.")
    return sentences


def put_verdicts(page: Page, verdicts: list[tuple[str, str, str]], curves: list[Curves]) -> Worksheet:
    """Put each solution's verdict and the chart of them all, and return the worksheet.

    Args:
        page: the worksheet with its inputs.
        verdicts: for each solution its worksheet, the cell of its verdict, and what it is now.
        curves: the response of each.
    """
    page.line("solution", "conditions", style="head")
    for name, cell, now in verdicts:
        page.put(1, Formula(cell, now), "verdict")
        page.line(name)
    series = [
        Series(name, one.frequency, one.magnitude) for (name, _, _), one in zip(verdicts, curves, strict=True)
    ]
    target = Series("target", curves[0].frequency, curves[0].target, is_target=True)
    chart = Chart("Magnitude", "dB", (target, *series), (page.row + 1, 0))
    return page.finished((chart,), widths=(14, 16, 8, 70))
