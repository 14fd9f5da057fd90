"""The judges of a working's contexts, made once each: with symbols, with the sheet's numbers, with ties released."""

from __future__ import annotations

from collections.abc import Callable
from functools import cached_property

from symcirc.complaints import Complaint
from symcirc.derivation import Answer, Posed, derive
from symcirc.sheet.expression import Expression
from symcirc.transfer.function import TransferFunction
from symcirc.working.context import Context
from symcirc.working.elimination import Row
from symcirc.working.field import NotInField
from symcirc.working.follow import Algebra
from symcirc.working.judge import Judge, without_ties
from symcirc.working.names import Lexicon, symbols_of

#: Points at which the rank of the lines is found.
RANK_POINTS = 2


class Judges:
    """All that lines are judged with, for one sheet and one working; ``lexicon`` grows with the working."""

    def __init__(self, posed: Posed) -> None:
        self.posed = posed
        self.lexicon = Lexicon(posed.sheet, symbols_of(posed.sheet, posed.ties), self._has_shape)
        self._judges: dict[tuple[Context, bool, frozenset[str]], Judge] = {}
        self._strands: dict[Context, Strand] = {}

    def judge(
        self, context: Context, *, given: bool = False, released: frozenset[str] = frozenset()
    ) -> Judge:
        """Return the judge of a context: with the sheet's numbers, or with some of its ties released."""
        key = (context, given, released)
        if key not in self._judges:
            posed = without_ties(self.posed, released) if released else self.posed
            self._judges[key] = Judge(posed, context, self.lexicon, self._first_function, given)
        return self._judges[key]

    def can_take_numbers(self, context: Context) -> bool:
        """Tell whether the sheet gives numbers, and the circuit can be solved with them."""
        if not self.posed.sheet.numbers:
            return False
        try:
            self.judge(context, given=True).residues()
        except NotInField:
            return True
        except Complaint:
            return False
        return True

    def strand(self, context: Context) -> Strand:
        """Return the lines of a context so far, as algebra."""
        if context not in self._strands:
            symbols = _algebras(lambda: self.judge(context))
            has_numbers = self.can_take_numbers(context)
            numbers = _algebras(lambda: self.judge(context, given=True)) if has_numbers else []
            self._strands[context] = Strand(symbols, numbers)
        return self._strands[context]

    @property
    def strands(self) -> dict[Context, Strand]:
        """The strands that were begun."""
        return self._strands

    def _first_function(self) -> TransferFunction:
        function = self._function
        assert function is not None, "w0, f0 and Q have no meaning without a second-order function"
        return function

    def _has_shape(self) -> bool:
        return self._function is not None and self._function.order == 2

    @cached_property
    def _function(self) -> TransferFunction | None:
        """The first ask's function, None where it has too many products to be multiplied out."""
        first = self.posed.sheet.asks[0].name
        answer = next(iter(derive(self.posed, {first}).answers))
        return answer.function if isinstance(answer, Answer) else None


def _algebras(judge: Callable[[], Judge]) -> list[Algebra]:
    try:
        return [Algebra(point) for point in judge().residues()[:RANK_POINTS]]
    except NotInField:
        return []


class Strand:
    """The lines of a working under one context, as rows at each point; ``kept`` are the true ones at the first.

    With each it is kept whether it was written as an equality of currents.
    """

    def __init__(self, symbols: list[Algebra], numbers: list[Algebra]) -> None:
        self.symbols, self.numbers = symbols, numbers
        self.kept: list[tuple[Row[str], bool]] = []

    def take(self, left: Expression, right: Expression) -> tuple[bool | None, Row[str] | None]:
        """Tell whether a line follows from those taken before, and take it; return its row at the first point.

        None where it is not linear. It follows where it does with the parts as symbols, or with the sheet's numbers.
        """
        rows = [algebra.row(left, right) for algebra in self.symbols]
        if not rows or any(row is None for row in rows):
            return None, None
        follows = _take(self.symbols, rows)
        if self.numbers:
            with_numbers = _take(self.numbers, [algebra.row(left, right) for algebra in self.numbers])
            follows = follows or with_numbers
        return follows, rows[0]


def _take(algebras: list[Algebra], rows: list[Row[str] | None]) -> bool:
    known = [(algebra, row) for algebra, row in zip(algebras, rows, strict=True) if row is not None]
    follows = len(known) == len(algebras) and all(algebra.follows(row) for algebra, row in known)
    for algebra, row in known:
        algebra.add(row)
    return follows
