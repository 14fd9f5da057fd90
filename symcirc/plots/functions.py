"""From a sheet to the functions that are shown: the target, the stage with its values, and with real amplifiers."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import sympy

from symcirc.complaints import Complaint, Remark, listed, nearest
from symcirc.derivation import Answer, BigAnswer, derive, pose, pose_real
from symcirc.design import design
from symcirc.goal import Goal, build_goal
from symcirc.plots.rational import Rational, rational
from symcirc.progress import Progress, silent
from symcirc.report.numbers import missing_numbers
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import names
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Ask, Sheet
from symcirc.transfer.evaluate import exact_coefficients
from symcirc.trees.evaluate import polynomials
from symcirc.trees.expand import symbols


@dataclass(frozen=True)
class Shown:
    """A function with what it is: ``name`` is target, stage or real, ``label`` says it in words."""

    name: str
    label: str
    ratio: Rational


@dataclass(frozen=True)
class Functions:
    """What is shown of an ask; ``nominal`` is the target's nominal gain, sign left out, where it has one.

    ``is_met`` is false where no part values give the target.
    """

    ask: Ask
    target: str
    shown: tuple[Shown, ...]
    nominal: float | None
    remarks: tuple[Remark, ...]
    is_met: bool


def functions_of(sheet: Sheet, ask: str | None = None, progress: Progress = silent) -> Functions:
    """Return the functions of one ask that have numbers.

    Where the stage lacks numbers, those that the match finds are taken, of its first solution; where it finds none,
    the target is shown alone, and a remark says why. A target whose gain is free, or of either sign, is shown with
    the stage's.

    Raises Complaint for a sheet that asks for more than one ratio where ``ask`` does not say which, for a stage
    without numbers and without a target, and for what cannot be derived.
    """
    asked = pick_ask(sheet, ask)
    derivation = derive(pose(sheet), {asked.name}, progress=progress)
    (answer,) = derivation.answers
    goal = next((build_goal(sheet, target) for target in sheet.targets if target.ask == asked.name), None)
    remarks = list(derivation.remarks)
    known: Mapping[str, sympy.Expr] | None = sheet.numbers
    label, is_met = "stage, the sheet's values", True
    if _missing(sheet, answer):
        if goal is None:
            raise _without_numbers(sheet, answer)
        known, is_met, why = _matched(sheet, goal, progress)
        label, remarks = "stage, the values that match finds", remarks + why
    shown = []
    if known is not None:
        shown.append(Shown("stage", label, _stage(sheet, answer, known)))
        real = _real(sheet, asked, known, remarks, progress)
        shown += [] if real is None else [Shown("real", "stage, real amplifiers", real)]
    nominal = None
    if goal is not None:
        target = _target(sheet, goal)
        factor = _factor(goal, target, shown[0].ratio) if shown else 1.0
        shown.insert(0, Shown("target", "target", _times(target, factor)))
        nominal = None if goal.nominal is None else abs(factor) * _valued(sheet, goal, goal.nominal)
    text = "" if goal is None else _line(goal)
    return Functions(asked, text, tuple(shown), nominal, tuple(remarks), is_met)


def pick_ask(sheet: Sheet, name: str | None) -> Ask:
    """Return the named ask, or the only one that has a target, else limits, else that there is."""
    known = [ask.name for ask in sheet.asks]
    if name is not None:
        if name not in known:
            mend = nearest(name, known) or f"the asks are: {', '.join(known)}"
            raise Complaint(sheet.asks[0].place, f"nothing called `{name}` is asked", mend)
        return sheet.ask(name)
    aimed = [target.ask for target in sheet.targets] or [limit.ask for limit in sheet.limits] or known
    wanted = list(dict.fromkeys(aimed))
    if len(wanted) > 1:
        raise Complaint(
            sheet.ask(wanted[1]).place,
            f"there is more than one ratio to plot ({', '.join(wanted)})",
            "say which: --ask NAME",
        )
    return sheet.ask(wanted[0])


def _missing(sheet: Sheet, answer: Answer | BigAnswer) -> list[str]:
    if isinstance(answer, Answer):
        return missing_numbers(sheet, answer)
    values = _with_ties(sheet, sheet.numbers)
    return [name for name in symbols(answer.diagram) if name not in values]


def _without_numbers(sheet: Sheet, answer: Answer | BigAnswer) -> Complaint:
    """Return the complaint about a stage that has neither numbers nor a target from which they would follow."""
    missing = _missing(sheet, answer)
    first = sheet.symbols.get(missing[0])
    return Complaint(
        answer.ask.place if first is None else first.place,
        f"a plot needs numbers, and `{answer.ask.name}` holds {listed(missing[:12])} without one",
        f"fix {', '.join(f'{name} = value' for name in missing[:3])}, or give `{answer.ask.name}` a target",
    )


def _matched(
    sheet: Sheet, goal: Goal, progress: Progress
) -> tuple[dict[str, sympy.Expr] | None, bool, list[Remark]]:
    """Return the numbers that a match finds, whether the target can be met, and why there are none."""
    place = goal.target.place
    alone = "the target is shown alone"
    try:
        found = design(sheet, goal.target.ask, progress)
    except Complaint as complaint:  # the target can still be seen
        return None, True, [Remark(place, f"{alone}: {complaint.cause}; {complaint.mend}")]
    if found.refusal is not None:
        return None, False, [Remark(place, f"{alone}: {found.refusal.cause}; {found.refusal.mend}")]
    values = found.solutions[0].branch.values
    open_names = [name for name, value in values.items() if value is None]
    if open_names:
        return None, True, [Remark(place, f"{alone}: {listed(open_names)} depend on what has no number yet")]
    solved = {name: sympy.Rational(value) for name, value in values.items() if value is not None}
    return {**sheet.numbers, **solved}, True, []


def _stage(sheet: Sheet, answer: Answer | BigAnswer, known: Mapping[str, sympy.Expr]) -> Rational:
    if isinstance(answer, Answer):
        return rational(*exact_coefficients(answer.function, known))
    if answer.loop_gain is not None:
        raise Complaint(
            answer.ask.place,
            f"this loop gain is too big to be plotted: it has {sum(answer.products):,} products",
            "ask about a smaller piece of the circuit",
        )
    values = {name: float(sympy.N(value, 20)) for name, value in _with_ties(sheet, known).items()}
    return rational(*polynomials(answer.diagram, values))


def _with_ties(sheet: Sheet, known: Mapping[str, sympy.Expr]) -> dict[str, sympy.Expr]:
    """Return the numbers with those of the tied names that follow from them."""
    values = dict(known)
    for name in tie_order(sheet.ties):
        tie = sheet.ties[name]
        if all(n.text in values or n.text == "pi" for n in names(tie)):
            values[name] = exact_number(tie, values)
    return values


def _real(
    sheet: Sheet, ask: Ask, known: Mapping[str, sympy.Expr], remarks: list[Remark], progress: Progress
) -> Rational | None:
    """Return the function with real amplifiers; None where none is real, or (with a remark) it cannot be shown."""
    if not any(d.kind == "opamp" and d.parameters and d.name != ask.loop for d in sheet.devices):
        return None
    (answer,) = derive(pose_real(sheet), {ask.name}, progress=progress).answers
    if isinstance(answer, BigAnswer):
        remarks.append(Remark(ask.place, "with real amplifiers this ratio is too big to be plotted"))
        return None
    missing = [name for name in missing_numbers(sheet, answer) if name not in known]
    if missing:
        remarks.append(
            Remark(ask.place, f"the real amplifiers are not shown: {listed(missing)} has no number")
        )
        return None
    return rational(*exact_coefficients(answer.function, known))


def _target(sheet: Sheet, goal: Goal) -> Rational:
    sides = (
        [_exact(sheet, goal, coefficient) for coefficient in side]
        for side in (goal.numerator, goal.denominator)
    )
    return rational(*sides)


def _exact(sheet: Sheet, goal: Goal, coefficient: sympy.Expr) -> sympy.Expr:
    """Return a target's coefficient as a number, the sheet's numbers put in; raises Complaint where it is none."""
    known = {s: sheet.numbers[s.name] for s in coefficient.free_symbols if s.name in sheet.numbers}
    number = coefficient.subs(known)
    if number.free_symbols:
        left = listed(sorted(map(str, number.free_symbols)))
        raise Complaint(
            goal.target.place,
            f"a plot needs numbers, and {left} in the target has none",
            f"fix {left.split(',')[0].split(' ')[0]} = value",
        )
    return number


def _valued(sheet: Sheet, goal: Goal, number: sympy.Expr) -> float:
    return abs(float(sympy.N(_exact(sheet, goal, number), 20)))


def _factor(goal: Goal, target: Rational, stage: Rational) -> float:
    """Return by what a target is to be multiplied: the stage's gain where it is free, its sign where only that is.

    They are compared where the target has its nominal gain: at 0, at infinity or at the centre.
    """
    if goal.gain == "exact":
        return 1.0
    where = {"highpass": 1e6, "bandpass": 1.0}.get(str(goal.target.kind), 1e-6)
    ratio = complex((stage.at(w := np.array(where * target.frequency)) / target.at(w)).item())
    sign = -1.0 if ratio.real < 0 else 1.0
    return sign * abs(ratio) if goal.gain == "free" and 0 < abs(ratio) < np.inf else sign


def _times(ratio: Rational, factor: float) -> Rational:
    return Rational(tuple(factor * c for c in ratio.numerator), ratio.denominator, ratio.frequency)


def _line(goal: Goal) -> str:
    """Return the target's line of the sheet without its first word and its comment."""
    place = goal.target.place
    line = place.source.line(place.line).split("#")[0].strip()
    return line.removeprefix("target").strip()
