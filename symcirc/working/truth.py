"""Is a line true of the circuit: in symbols, for the given values, or to the digits that were written?"""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.sheet.expression import Expression
from symcirc.working.context import Context
from symcirc.working.judge import Undefined
from symcirc.working.judges import Judges
from symcirc.working.rounding import rounding_of

#: With more ties than this it is not looked up which of them a line needs.
MOST_TIES = 12


@dataclass(frozen=True)
class Truth:
    """Whether a line is true of the circuit, and what is to be said of that."""

    holds: bool
    note: str | None = None


def truth_of(left: Expression, right: Expression, context: Context, judges: Judges) -> Truth:
    """Judge an equality: first with the parts as symbols, then with the sheet's numbers, then as rounded."""
    try:
        if judges.judge(context).is_true(left, right):
            return Truth(True, _tie_note(left, right, context, judges))
        has_numbers = judges.can_take_numbers(context)
        if has_numbers and judges.judge(context, given=True).is_true(left, right):
            return Truth(True, "for the given values")
        return _rounded(left, right, context, judges, has_numbers)
    except (Undefined, ZeroDivisionError):
        return Truth(False, "it divides by what is zero in this circuit")


def _rounded(
    left: Expression, right: Expression, context: Context, judges: Judges, has_numbers: bool
) -> Truth:
    rounding = rounding_of(left, right)
    judge = judges.judge(context, given=has_numbers)
    if rounding is None or not judge.is_true_rounded(left, right, rounding.number):
        return Truth(False)
    given = "for the given values, " if has_numbers else ""
    return Truth(True, f"{given}to the {rounding.digits} digits written")


def _tie_note(left: Expression, right: Expression, context: Context, judges: Judges) -> str | None:
    """Return which of the sheet's ties between parts a line needs to be true."""
    sheet = judges.posed.sheet
    kinds = {part.name: part.kind for part in sheet.parts}
    ties = [name for name in sheet.ties if kinds.get(name) in ("R", "C", "L")]
    if not ties or _holds_without(frozenset(ties), left, right, context, judges):
        return None
    if len(ties) > MOST_TIES:
        return "thanks to the sheet's ties"
    needed = [t for t in ties if not _holds_without(frozenset([t]), left, right, context, judges)]
    written = [
        _as_written(sheet.fixes[name].place.source.line(sheet.fixes[name].place.line), name)
        for name in needed or ties
    ]
    return f"thanks to the tie{'s' if len(written) > 1 else ''} {', '.join(written)}"


def _holds_without(
    names: frozenset[str], left: Expression, right: Expression, context: Context, judges: Judges
) -> bool:
    try:
        return judges.judge(context, released=names).is_true(left, right)
    except Undefined:
        return False


def _as_written(line: str, name: str) -> str:
    """Return ``NAME = expression`` from the sheet's line of fixes, or the name alone where it stands elsewhere."""
    for setting in line.split("#")[0].replace("fix ", "", 1).split(","):
        if setting.split("=")[0].strip() == name:
            return setting.strip()
    return name
