"""What a sheet leaves to be chosen from what can be bought, and what it lacks for that."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import sympy

from symcirc.complaints import Complaint, Place, listed
from symcirc.design import Design, design, pick_target
from symcirc.goal import symbol
from symcirc.progress import Progress
from symcirc.sheet.model import Buyable, Sheet
from symcirc.transfer.function import TransferFunction


@dataclass(frozen=True)
class Plan:
    """The parts to choose of a design.

    Args:
        design: the design equations.
        chosen: parts that the sheet chooses: each takes every value of its range, one piece each.
        following: parts that the design equations give: each takes the values around its exact one.
        moved: parts that the sheet fixes to a number and that are searched around it all the same.
        held: names that the design equations give and that are not bought.
        known: the numbers of the sheet, those of ``moved`` included.
    """

    design: Design
    chosen: tuple[str, ...]
    following: tuple[str, ...]
    moved: tuple[str, ...]
    held: tuple[str, ...]
    known: Mapping[str, float]
    buyables: Mapping[str, Buyable]

    @property
    def sheet(self) -> Sheet:
        """The sheet that is planned for."""
        return self.design.derivation.sheet

    @property
    def functions(self) -> tuple[TransferFunction, ...]:
        """The transfer functions whose product the target is for: of a cascade its stages', else the only one."""
        if self.design.whole is not None:
            return (self.design.whole.answer.function,)
        assert self.design.cascade is not None
        return tuple(match.stage.answer.function for match in self.design.cascade.stages)

    @property
    def positives(self) -> dict[str, sympy.Expr]:
        """The parts that must be greater than zero: those that are solved for, and tied ones as expressions."""
        cascade = self.design.cascade
        whole = [self.design.whole.problem] if self.design.whole else []
        problems = whole if cascade is None else [match.problem for match in cascade.stages]
        positives = {n: symbol(n) for p in problems for n in p.unknowns if n not in p.free_unknowns}
        return positives | {name: tie for p in problems for name, tie in p.positives.items()}


def plan(sheet: Sheet, ask: str | None, together: bool, progress: Progress) -> Plan:
    """Return what is to be chosen; ``together`` moves parts that are fixed to a number as well.

    Raises Complaint where there is no target, nothing that can be bought, nothing to choose, a name without a
    number that is not bought, and where the target cannot be met.
    """
    target = pick_target(sheet, ask)
    if not sheet.buyables:
        raise Complaint(
            target.place,
            "the sheet does not say what can be bought",
            "add a line such as: parts R: E96 1 %, from 1 kohm to 1 Mohm",
        )
    bought = _bought(sheet)
    _refuse_nothing(sheet, bought, together)
    found = design(sheet, ask, progress)
    if found.refusal is not None:
        _refuse_no_equations(found)
        raise Complaint(target.place, found.refusal.cause, found.refusal.mend)
    present = set(found.present)
    for coefficient in (*found.goal.numerator, *found.goal.denominator):
        present |= {str(symbol) for symbol in coefficient.free_symbols}
    solved = {e.part for solution in found.solutions for e in solution.branch.equations}
    chosen = tuple(
        name for name in sheet.chosen if name in bought and name in present and name not in sheet.numbers
    )
    _refuse_open(sheet, (present - solved) - set(sheet.numbers) - set(chosen) - {"pi"})
    following = tuple(name for name in sheet.symbols if name in solved and name in bought)
    moved = tuple(n for n in _own_numbers(sheet) if n in bought and n in present) if together else ()
    held = tuple(name for name in sheet.symbols if name in solved and name not in bought)
    _refuse_unbought(sheet, held)
    if not chosen and not following and not moved:
        raise _nothing(sheet, "what the target needs is fixed, or not among the `parts`")
    known = {name: float(sympy.N(number, 20)) for name, number in sheet.numbers.items()}
    return Plan(found, chosen, following, moved, held, known, bought)


def _refuse_no_equations(found: Design) -> None:
    """Say of a design without anything to be solved for that it is this which is missing."""
    if not found.unknowns:
        raise Complaint(
            found.goal.target.place,
            "nothing is left for the design equations to find: every part is fixed or chosen",
            "take as many parts as the target has conditions out of `fix` and `choose`",
        )


def _bought(sheet: Sheet) -> dict[str, Buyable]:
    """Return what each part of the sheet can be bought as, of those whose kind can."""
    kinds = {buyable.kind: buyable for buyable in sheet.buyables}
    return {part.name: kinds[part.kind] for part in sheet.parts if part.kind in kinds}


def _own_numbers(sheet: Sheet) -> list[str]:
    """Return the names that the sheet itself sets to a number, under the very name: not those of a block's fixes."""

    def written(place: Place) -> str:
        return place.source.line(place.line)[place.column - 1 : place.end - 1]

    return [n for n, fix in sheet.fixes.items() if fix.number is not None and written(fix.place) == n]


def _refuse_nothing(sheet: Sheet, bought: Mapping[str, Buyable], together: bool) -> None:
    if any(name not in sheet.fixes or (together and name in sheet.numbers) for name in bought):
        return
    if not bought:
        kinds = listed(b.kind for b in sheet.buyables)
        raise Complaint(
            sheet.buyables[0].place,
            f"nothing is to be chosen: the circuit has no part of kind {kinds}",
            "add a `parts` line for the kinds that it has",
        )
    raise _nothing(sheet, "every part of the kinds that can be bought is fixed")


def _nothing(sheet: Sheet, why: str) -> Complaint:
    return Complaint(
        sheet.buyables[0].place,
        f"nothing is to be chosen: {why}",
        "take parts out of the `fix` lines, or move those with a number too: --together",
    )


def _refuse_open(sheet: Sheet, missing: set[str]) -> None:
    """Refuse names that keep no number: neither fixed nor solved for nor chosen from what can be bought."""
    for name, declared in sheet.symbols.items():
        if name not in missing:
            continue
        kind = next((part.kind for part in sheet.parts if part.name == name), None)
        with_series = f"add parts {kind}: E12, with a range, or " if kind in ("R", "C", "L") else ""
        raise Complaint(
            declared.place,
            f"`{declared.label}` has no number, and is not among the parts that can be bought",
            f"{with_series}fix {name} = value",
        )


def _refuse_unbought(sheet: Sheet, held: tuple[str, ...]) -> None:
    for part in sheet.parts:
        if part.name in held:
            raise Complaint(
                part.place,
                f"`{part.label}` is to be found, and no `parts {part.kind}` line says what can be bought",
                f"add parts {part.kind}: E12, or fix {part.name} = value",
            )
