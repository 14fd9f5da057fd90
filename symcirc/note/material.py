"""All that a note is made of, computed once: the derivation, the designs, the values, the curves."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

import sympy

from symcirc.complaints import Complaint, Remark
from symcirc.derivation import Derivation, Posed, derive, pose
from symcirc.design import Design, design
from symcirc.progress import Progress
from symcirc.sheet.expression import Number
from symcirc.sheet.model import Fix, Sheet, Target
from symcirc.values.find import ChosenSet, Found, Options, find_values


@dataclass(frozen=True)
class Aim:
    """A target of the sheet and what came of it.

    ``complaint`` says why there is no ``design``, or why no values were searched although the sheet says what can be
    bought. ``found`` are the sets of preferred values.
    """

    target: Target
    design: Design | None
    found: Found | None
    complaint: Complaint | None

    @property
    def chosen(self) -> ChosenSet | None:
        """The best set of preferred values, if there is one."""
        return self.found.sets[0] if self.found is not None and self.found.sets else None

    @property
    def is_met(self) -> bool:
        """Whether the design equations have a solution."""
        return self.design is not None and self.design.refusal is None

    @property
    def unique(self) -> bool:
        """Whether there is one solution."""
        return self.design is not None and len(self.design.solutions) == 1


@dataclass(frozen=True)
class Material:
    """What a note is made of.

    ``valued`` is the sheet with the values put in that the note settles on: of the best preferred set of each aim,
    else of its first solution. ``remarks`` are all warnings, each once.
    """

    sheet: Sheet
    posed: Posed
    derivation: Derivation
    aims: tuple[Aim, ...]
    valued: Sheet
    remarks: tuple[Remark, ...]

    def aim(self, ask: str) -> Aim | None:
        """Return the aim of an ask, if it has a target."""
        return next((aim for aim in self.aims if aim.target.ask == ask), None)


def gather(sheet: Sheet, search: bool, progress: Progress) -> Material:
    """Return what a note of a sheet is made of; ``search`` looks for preferred values.

    Raises Complaint for a circuit that cannot be solved. A target that cannot be used is kept with its complaint.
    """
    posed = pose(sheet)
    derivation = derive(posed, progress=progress)
    aims = tuple(_aim(sheet, target, search, progress) for target in sheet.targets)
    settled: dict[str, sympy.Expr] = {}
    remarks = list(derivation.remarks)
    for aim in aims:
        settled |= _settled(aim)
        remarks += aim.design.remarks if aim.design is not None else ()
    return Material(sheet, posed, derivation, aims, with_numbers(sheet, settled), _once(remarks))


def with_numbers(sheet: Sheet, numbers: Mapping[str, sympy.Expr]) -> Sheet:
    """Return a sheet with names fixed to numbers, in SI base units."""
    fixes = dict(sheet.fixes)
    for name, number in numbers.items():
        place = sheet.symbols[name].place
        written = Number(Fraction(int(number.p), int(number.q)), place)
        fixes[name] = Fix(name, written, number, sheet.symbols[name].dimension, place)
    return replace(sheet, fixes=fixes)


def _aim(sheet: Sheet, target: Target, search: bool, progress: Progress) -> Aim:
    complaint = None
    if search and sheet.buyables:
        try:
            found = find_values(sheet, target.ask, Options(best=1), progress)
            return Aim(target, found.plan.design, found, None)
        except Complaint as trouble:  # the design may stand although no values can be chosen for it
            complaint = trouble
    try:
        return Aim(target, design(sheet, target.ask, progress), None, complaint)
    except Complaint as trouble:
        return Aim(target, None, None, trouble)


def _settled(aim: Aim) -> dict[str, sympy.Expr]:
    """Return the numbers that an aim settles on: of its best set, else of its first solution."""
    if aim.chosen is not None:
        bought = {
            n: sympy.Rational(c.value.numerator, c.value.denominator) for n, c in aim.chosen.preferred.items()
        }
        return bought | {name: sympy.Rational(value) for name, value in aim.chosen.held.items()}
    if aim.design is None or not aim.design.solutions:
        return {}
    values = aim.design.solutions[0].branch.values
    return {name: sympy.Rational(value) for name, value in values.items() if value is not None}


def _once(remarks: list[Remark]) -> tuple[Remark, ...]:
    return tuple({(r.place, r.message): r for r in sorted(remarks, key=lambda r: r.place)}.values())
