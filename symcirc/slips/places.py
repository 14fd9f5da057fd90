"""The points of a context, made once: where a search for slips values its candidates."""

from __future__ import annotations

import mpmath

from symcirc.slips.points import Points
from symcirc.slips.worlds import ComplexWorld, FieldWorld, World
from symcirc.working import digits, measured, residues
from symcirc.working.digits import Digits
from symcirc.working.judge import Judge
from symcirc.working.residues import Residues, free_names


def field_points(judge: Judge) -> Points:
    """Return points in the field; raises ZeroDivisionError and NotInField."""
    posed, seed = judge.posed, "slips"
    known = residues.random_residues(posed, seed, given=judge.given)

    def world(changed: dict[str, int]) -> World:
        here = residues.completed(posed, {**known, **changed})
        return FieldWorld(Residues(posed, judge.context, judge.lexicon, here, seed).value)

    names = doubled_names(judge)
    return Points(world({}), names, tuple(world({name: 2 * known[name]}) for name in names))


def complex_points(judge: Judge) -> Points:
    """Return points in complex numbers; raises ZeroDivisionError."""
    posed, seed = judge.posed, "slips"
    known = digits.random_numbers(posed, seed, given=judge.given)

    def world(changed: dict[str, measured.Measured]) -> World:
        here = digits.completed(posed, {**known, **changed})
        point = Digits(posed, judge.context, judge.lexicon, here, judge.function, seed)
        return ComplexWorld(lambda key: complex(point.value(key).value))

    names = tuple(name for name in doubled_names(judge) if name != "pi")  # pi is a number here
    twice = mpmath.mpf(2)
    return Points(world({}), names, tuple(world({n: measured.exact(twice * known[n].value)}) for n in names))


def doubled_names(judge: Judge) -> tuple[str, ...]:
    """Return the names that a lost factor may hold; none where all have the sheet's values."""
    if judge.given:
        return ()
    names = (*free_names(judge.posed), "s", "pi")
    return tuple(name for name in names if judge.lexicon.meaning(name) is not None)
