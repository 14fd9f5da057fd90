"""The section of values: exact against preferred, or what the design equations or the sheet give."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.note.material import Aim, Material
from symcirc.note.model import Block, Heading, Paragraph, Pieces, Remark, Table
from symcirc.note.pieces import Numbering, joined, mathematics, percent, quantity, shown
from symcirc.report.lines import counted
from symcirc.report.values_text import choice_text
from symcirc.sheet.model import Sheet
from symcirc.transfer.ties import natural_key
from symcirc.values.find import ChosenSet, Found

_EMPTY = "–"


def value_blocks(material: Material, numbering: Numbering) -> Iterator[Block]:
    """Yield the values of the parts: for each target, or those that the sheet sets where there is none."""
    for aim in material.aims:
        if len(material.aims) > 1:
            yield Heading(2, f"For {aim.target.ask}")
        if aim.found is not None and aim.chosen is not None:
            yield from _preferred(material.sheet, aim.found, aim.chosen, numbering)
            continue
        if aim.found is not None:
            yield Remark(
                "warning", ("No set of preferred values was found: there are too few pieces in stock.",)
            )
        elif aim.design is not None and aim.complaint is not None:
            yield Remark(
                "warning",
                (f"No preferred values were searched: {aim.complaint.cause}; {aim.complaint.mend}.",),
            )
        table = _exact(material.sheet, aim, numbering)
        if table is not None:
            yield table
        if not material.sheet.buyables:
            yield Paragraph(
                ("The sheet does not say what can be bought, so no preferred values were searched.",)
            )
    if not material.aims:
        yield from _fixed(material.sheet, numbering)


def unit_of(sheet: Sheet, name: str) -> str:
    """Return the unit of a name, empty for a ratio."""
    dimension = sheet.symbols[name].dimension
    return dimension if dimension not in (None, "ratio") else ""


def _preferred(sheet: Sheet, found: Found, chosen: ChosenSet, numbering: Numbering) -> Iterator[Block]:
    kinds = {part.name: part.kind for part in sheet.parts}
    rows: list[tuple[Pieces, ...]] = []
    for name in sorted({*chosen.values, *chosen.held}, key=natural_key):
        unit = unit_of(sheet, name)
        if name in chosen.preferred:
            choice, exact = chosen.preferred[name], chosen.exact[name]
            off = "chosen" if name in found.plan.chosen else percent(float(choice.value) / exact - 1)
            cells = (quantity(exact, unit), _joined_words(choice_text(choice, kinds[name])), off)
        elif name in chosen.held:
            cells = (quantity(chosen.held[name], unit), _EMPTY, "set exactly")
        else:
            cells = (quantity(chosen.values[name], unit), _EMPTY, "tied" if name in sheet.ties else "fixed")
        rows.append(((mathematics(name),), *((shown(cell),) for cell in cells)))
    header = ("Part", "Exact", "Preferred", "Off by")
    ask = found.plan.design.ask.name
    yield numbering.table(
        f"values-{ask}", f"Values for {ask}: exact and preferred", header, rows, (False, True, True, True)
    )
    yield Paragraph((_departure(found, chosen),))
    if chosen.shifts:
        yield _poles(found, chosen, numbering)


def _joined_words(text: str) -> str:
    return text.replace(" || ", " in parallel with ").replace(" + ", " in series with ")


def _departure(found: Found, chosen: ChosenSet) -> str:
    bands = " and ".join(f"{_hertz(low)} to {_hertz(high)}" for low, high in found.band.intervals)
    searched = "every one of " if found.complete else f"{found.searched:,} of "
    text = (
        f"With the preferred values the response departs from the target by {chosen.departure:.3g} dB at most, from "
        f"{bands}, where the target's loss is at most 3.01 dB. Searched: {searched}{counted(found.size, 'set')} within "
        f"{counted(found.reach, 'value')} of the exact one to both sides."
    )
    if chosen.spread:
        text += (
            " Largest over smallest: "
            + ", ".join(f"{kind} {ratio:.3g}" for kind, ratio in chosen.spread.items())
            + "."
        )
    return shown(text)


def _hertz(omega: float) -> str:
    return "infinity" if omega == float("inf") else quantity(omega / 6.283185307179586, "Hz", 4)


def _poles(found: Found, chosen: ChosenSet, numbering: Numbering) -> Table:
    rows: list[tuple[Pieces, ...]] = []
    for pole, shift in zip(found.poles, chosen.shifts, strict=False):
        q = "" if pole.q is None else quantity(pole.q, "", 4)
        q_is = "" if shift.pair.q is None else quantity(shift.pair.q, "", 4)
        q_off = "" if shift.q_shift is None else percent(shift.q_shift)
        f0 = (quantity(pole.f0, "Hz"), quantity(shift.pair.f0, "Hz"), percent(shift.f0_shift))
        rows.append(tuple((cell,) if cell else () for cell in (*f0, q, q_is, q_off)))
    header = ("f0, target", "f0, preferred", "off by", "Q, target", "Q, preferred", "off by")
    ask = found.plan.design.ask.name
    return numbering.table(
        f"poles-{ask}", f"Poles of {ask} with the preferred values", header, rows, (True,) * 6
    )


def _exact(sheet: Sheet, aim: Aim, numbering: Numbering) -> Table | None:
    if aim.design is None:
        return None
    solutions = [solution for solution in aim.design.solutions if solution.values]
    if not solutions:
        return None
    names = sorted({name for solution in solutions for name in solution.values}, key=natural_key)
    rows: list[tuple[Pieces, ...]] = []
    for name in names:
        cells = [
            quantity(s.values[name], unit_of(sheet, name)) if name in s.values else _EMPTY for s in solutions
        ]
        how = "tied" if name in sheet.ties else "fixed" if name in sheet.numbers else "solved"
        rows.append(((mathematics(name),), *((cell,) for cell in cells), (how,)))
    heads = [f"Solution {k}" for k in range(1, len(solutions) + 1)] if len(solutions) > 1 else ["Exact value"]
    ask = aim.target.ask
    caption = f"Exact values for {ask}, rounded to five digits"
    return numbering.table(
        f"values-{ask}", caption, ("Part", *heads, "How"), rows, (False, *(True,) * len(heads), False)
    )


def _fixed(sheet: Sheet, numbering: Numbering) -> Iterator[Block]:
    names = sorted(sheet.numbers, key=natural_key)
    if not names:
        return
    rows: list[tuple[Pieces, ...]] = [
        ((mathematics(name),), (quantity(float(sheet.numbers[name]), unit_of(sheet, name)),))
        for name in names
    ]
    yield numbering.table("values", "Values that the sheet sets", ("Name", "Value"), rows, (False, True))
    open_names = [name for name, s in sheet.symbols.items() if s.role == "part" and name not in sheet.fixes]
    if open_names:
        yield Paragraph(("Without a value: ", *joined([(mathematics(name),) for name in open_names]), "."))
