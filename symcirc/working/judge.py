"""Evaluates expressions of a working under one context: points of the field and points of many digits, made once.

This is what the verdicts are reached with, and what a search for slips may ask: is this equality true?
"""

from __future__ import annotations

import itertools
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace

from symcirc.complaints import InternalFault
from symcirc.derivation import Posed
from symcirc.sheet.expression import Expression, Number
from symcirc.transfer.function import TransferFunction
from symcirc.working import measured
from symcirc.working.context import Context
from symcirc.working.digits import Digits, random_numbers
from symcirc.working.field import PRIME, NotInField, evaluate, square_root
from symcirc.working.measured import Measured
from symcirc.working.names import Lexicon
from symcirc.working.residues import Residues, random_residues
from symcirc.working.shape import shape_residue

#: Points at which an equality is tested; points that divide by zero are passed over, up to so many.
POINTS, MOST_TRIES = 3, 8
#: Numbers of many digits that differ by up to so many times their errors count as equal.
LEEWAY = 1000
#: With more square roots than this a line is not tried in the field.
MOST_ROOTS = 6


class Undefined(Exception):
    """An expression that divides by zero wherever it is evaluated."""


@dataclass
class Judge:
    """Judges equalities under one context, with the parts as symbols or (``given``) with the sheet's numbers.

    ``posed`` may lack some of the sheet's ties: then lines are judged as if these were not there. ``function``
    gives the first ask's function, for w0, f0 and Q.
    """

    posed: Posed
    context: Context
    lexicon: Lexicon
    function: Callable[[], TransferFunction]
    given: bool = False
    _residues: dict[int, Residues | None] = field(default_factory=dict)
    _digits: dict[int, Digits | None] = field(default_factory=dict)

    def is_true(self, left: Expression, right: Expression) -> bool:
        """Tell whether an equality holds for every frequency, drive and part value (of those that are free).

        Decided in the field, with a probability of error below 1e-35, and confirmed by numbers of 120 digits; what
        holds square roots, w0, f0 or Q is decided by these at three points, the roots being the positive ones, and
        confirmed in the field: some choice of the roots' signs makes it true there too. Raises Undefined where it
        divides by zero, InternalFault where the two ways disagree.
        """
        try:
            verdict = self._is_true_in_field(left, right)
        except NotInField:
            verdict = self._is_true_in_digits(left, right, POINTS)
            if verdict and not self._may_be_true_in_field(left, right):
                raise InternalFault(
                    "a line with roots holds in numbers of 120 digits and not in the field"
                ) from None
            return verdict
        if self._is_true_in_digits(left, right, 1) != verdict:
            raise InternalFault("a line is judged differently in the field and in numbers of 120 digits")
        return verdict

    def is_true_rounded(
        self, left: Expression, right: Expression, number: Callable[[Number], Measured]
    ) -> bool:
        """Tell whether an equality holds within the rounding of its written numbers, as ``number`` gives them."""

        def close(point: Digits) -> bool:
            a, b = point.evaluate(left, number), point.evaluate(right, number)
            sensible = a.error + b.error <= max(abs(a.value), abs(b.value)) / 10
            return sensible and measured.agree(a, b)

        points = self.digits()
        return bool(points) and all(close(point) for point in points)

    def residues(self) -> list[Residues]:
        """Return the points of the field; raises NotInField where the parts have no values there."""
        points = (self._residues_at(k) for k in range(MOST_TRIES))
        return list(itertools.islice((p for p in points if p is not None), POINTS))

    def digits(self) -> list[Digits]:
        """Return the points of many digits."""
        points = (self._digits_at(k) for k in range(MOST_TRIES))
        return list(itertools.islice((p for p in points if p is not None), POINTS))

    def _residues_at(self, number: int) -> Residues | None:
        if number not in self._residues:
            seed = f"field {number}"
            try:
                known = random_residues(self.posed, seed, given=self.given)
                self._residues[number] = Residues(self.posed, self.context, self.lexicon, known, seed)
            except ZeroDivisionError:
                self._residues[number] = None
        return self._residues[number]

    def _digits_at(self, number: int) -> Digits | None:
        if number not in self._digits:
            seed = f"digits {number}"
            try:
                known = random_numbers(self.posed, seed, given=self.given)
                self._digits[number] = Digits(
                    self.posed, self.context, self.lexicon, known, self.function, seed
                )
            except ZeroDivisionError:
                self._digits[number] = None
        return self._digits[number]

    def _is_true_in_field(self, left: Expression, right: Expression) -> bool:
        tested = 0
        for point in self.residues():
            try:
                if point.evaluate(left) != point.evaluate(right):
                    return False
            except ZeroDivisionError:
                continue
            tested += 1
        if not tested:
            raise Undefined
        return True

    def _is_true_in_digits(self, left: Expression, right: Expression, points: int) -> bool:
        tested = 0
        for point in self.digits():
            try:
                a, b = point.evaluate(left), point.evaluate(right)
            except ZeroDivisionError:
                continue
            if not measured.agree(_widened(a), _widened(b)):
                return False
            tested += 1
            if tested == points:
                break
        if not tested:
            raise Undefined
        return True

    def _may_be_true_in_field(self, left: Expression, right: Expression) -> bool:
        """Tell whether some choice of the roots' signs makes an equality true at a point where all roots exist."""
        for number in range(1000, 1000 + 2**MOST_ROOTS):
            seed = f"roots {number}"
            try:
                known = random_residues(self.posed, seed, given=self.given)
                point = Residues(self.posed, self.context, self.lexicon, known, seed)
                outcome = self._some_signs_hold(point, left, right)
            except NotInField:
                return True  # what the field cannot hold it cannot contradict
            except (ZeroDivisionError, _NoRoot):
                continue
            return outcome
        return True

    def _some_signs_hold(self, point: Residues, left: Expression, right: Expression) -> bool:
        count = 0
        for signs in range(2**MOST_ROOTS):
            roots = _Roots(signs)
            world = _WithRoots(point, roots, self.function)
            if world.evaluate(left) == world.evaluate(right):
                return True
            count = len(roots.chosen)
            if signs + 1 >= 2**count:
                return False
        return count > MOST_ROOTS


class _NoRoot(Exception):
    """What stands under a root is no square at this point of the field."""


class _Roots:
    """Chooses a sign for every root in turn, by the bits of a number; the same operand has the same root."""

    def __init__(self, signs: int) -> None:
        self.signs = signs
        self.chosen: dict[int, int] = {}

    def __call__(self, operand: int) -> int:
        if operand not in self.chosen:
            root = square_root(operand)
            if root is None:
                raise _NoRoot
            minus = self.signs >> len(self.chosen) & 1
            self.chosen[operand] = -root % PRIME if minus else root
        return self.chosen[operand]


class _WithRoots:
    """A point of the field in which square roots, w0, f0 and Q have values."""

    def __init__(self, point: Residues, roots: _Roots, function: Callable[[], TransferFunction]) -> None:
        self.point, self.roots, self.function = point, roots, function

    def evaluate(self, expression: Expression) -> int:
        return evaluate(expression, self._value, self.roots)

    def _value(self, key: str) -> int:
        meaning = self.point.lexicon.by_key(key)
        if meaning.kind == "shape":
            return shape_residue(self.function(), key, self.point.known, self.roots)
        if meaning.kind == "defined":
            return self.evaluate(self.point.lexicon.definitions[key])
        return self.point.value(key)


def _widened(number: Measured) -> Measured:
    return replace(number, error=number.error * LEEWAY)


def without_ties(posed: Posed, names: frozenset[str]) -> Posed:
    """Return the sheet's asks made ready as if some of its ties were not there."""
    ties: Mapping[str, Expression] = {name: tie for name, tie in posed.ties.items() if name not in names}
    return replace(posed, ties=ties)
