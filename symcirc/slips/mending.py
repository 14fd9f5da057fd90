"""For every false line of a checked working: the smallest edits that make it true, in its author's own notation."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

from symcirc.complaints import Complaint
from symcirc.sheet.expression import Expression, Number, Root, fold, names, nodes
from symcirc.slips.formal import Formal
from symcirc.slips.lines import Row, cancelling, doubt, is_small
from symcirc.slips.meant import Meant
from symcirc.slips.places import complex_points, field_points
from symcirc.slips.points import Points
from symcirc.slips.search import Mend, Search
from symcirc.slips.words import place_of, sentence_of
from symcirc.slips.worlds import FieldWorld, evaluate
from symcirc.working.check import Checker
from symcirc.working.context import Context
from symcirc.working.field import NotInField
from symcirc.working.missing import Laws
from symcirc.working.records import Checked, Equation, Line, Slip
from symcirc.working.truth import truth_of
from symcirc.working.units import is_of_currents

#: So many mends are shown, and so many candidates are judged for them.
MOST_SHOWN, MOST_JUDGED = 3, 12
#: A mend that costs more by this than the best is not shown.
MOST_APART = 1.0
#: What makes a line true of every circuit is less likely meant.
IDENTITY = 1.0
#: Where the best mend of one slip costs more, two slips are looked for too.
DOUBTFUL = 2.2
#: Slips of what is not there.
LOST = ("factor lost", "term lost", "current lost")
#: In a working with more subtrees in its false lines only the first lines are searched; and after so many lines
#: for which nothing was found at all, the rest are searched for one slip only, and after four times as many no more.
MOST_SPOTS, MOST_HOPELESS = 6_000, 10
#: A side whose tree is deeper is not searched: the search goes down it by calls.
DEEPEST = 200
#: So many lines above a line say what names its author has in mind.
MOST_ABOVE = 40


def mended(checker: Checker, checked: Checked) -> Checked:
    """Return what a checker found, with suggestions for its false lines. mpmath must be set to ``DIGITS``."""
    mender = Mender(checker)
    return replace(checked, lines=tuple(mender.suggested(line) for line in checked.lines))


@dataclass(frozen=True)
class _Ready:
    """A mend and the line with it."""

    mend: Mend
    text: str
    cost: float


class Mender:
    """The search for slips in one working: its points, made once for each context, and the lines above."""

    def __init__(self, checker: Checker) -> None:
        self.judges = checker.judges
        self.posed = checker.posed
        self.above: list[Equation] = []
        self.spots_left, self.hopeless = MOST_SPOTS, 0
        self._points: dict[tuple[Context, bool, bool], Points | None] = {}

    def suggested(self, line: Line) -> Line:
        """Return a line with its suggestions, where it is false and a mend is found."""
        equation = line.equation
        if equation is None:
            return line
        row = Row.of(equation) if line.verdict in ("fails", "carried") else None
        ready = [] if row is None else self._mends(row)
        self.above = [equation, *self.above[: MOST_ABOVE - 1]]
        if row is None or not ready:
            return line
        best = ready[0].mend
        sentence = sentence_of(best, row.equation, self._node_of_law(row, best))
        slip = Slip(row.place(place_of(best)), sentence)
        note = f"{line.note}; {sentence}" if line.note else sentence
        return replace(line, suggestions=tuple(one.text for one in ready), slip=slip, note=note)

    def _mends(self, row: Row) -> list[_Ready]:
        equation = row.equation
        self.spots_left -= sum(1 for side in (equation.left, equation.right) for _ in nodes(side))
        if max(map(_depth, (equation.left, equation.right))) > DEEPEST:
            return []
        if self.spots_left < 0 or self.hopeless >= 4 * MOST_HOPELESS:
            return []
        for points in self._worlds(equation):
            ready = self._mends_at(row, points)
            if ready:
                return ready
        self.hopeless += 1
        return []

    def _mends_at(self, row: Row, points: Points) -> list[_Ready]:
        equation = row.equation
        try:
            vocabulary = Meant(self.posed, equation, tuple(self.above), points).vocabulary()
            search = Search(equation.left, equation.right, vocabulary)
        except ZeroDivisionError:
            return []
        ready = self._ready(row, points, search.mends_of_one())
        if (ready and ready[0].cost <= DOUBTFUL) or self.hopeless >= MOST_HOPELESS:
            return ready
        mends = [*(one.mend for one in ready), *search.mends_with_brackets(), *search.mends_of_two()]
        return self._ready(row, points, sorted(mends, key=lambda mend: mend.cost))

    # points ----------------------------------------------------------------------------------------------------

    def _worlds(self, equation: Equation) -> Iterator[Points]:
        """Yield the points at which a line is searched: with symbols, then with the sheet's numbers."""
        for given in (False, True):
            if given and not self.judges.can_take_numbers(equation.context):
                continue
            for is_field in (False,) if given else (True, False):  # the sheet's numbers are measured ones
                points = self._made(equation.context, given, is_field)
                if points is not None and _has_value(equation, points):
                    yield points
                    break

    def _made(self, context: Context, given: bool, is_field: bool) -> Points | None:
        key = (context, given, is_field)
        if key not in self._points:
            judge = self.judges.judge(context, given=given)
            try:
                self._points[key] = field_points(judge) if is_field else complex_points(judge)
            except (ZeroDivisionError, NotInField, Complaint):
                self._points[key] = None
        return self._points[key]

    # which mends are shown -------------------------------------------------------------------------------------

    def _ready(self, row: Row, points: Points, mends: list[Mend]) -> list[_Ready]:
        """Return the mends that the ordinary check finds true, best first, each said in one way only."""
        equation = row.equation
        formal = Formal(points, equation.lexicon)
        ranked: list[_Ready] = []
        for mend in mends[: 10 * MOST_JUDGED]:
            text = row.with_mend(mend)
            if is_small(equation, mend):
                identity = IDENTITY if formal.is_identity(mend.left.tree, mend.right.tree) else 0.0
                ranked.append(_Ready(mend, text, mend.cost + doubt(equation, mend) + identity))
        accepted: list[_Ready] = []
        said: set[object] = set()
        judged = 0
        for ready in sorted(ranked, key=lambda ready: ready.cost):
            if len(accepted) == MOST_SHOWN or judged == MOST_JUDGED:
                break
            if accepted and ready.cost > accepted[0].cost + MOST_APART:
                break
            left, right = ready.mend.left.tree, ready.mend.right.tree
            signatures = formal.signatures(left, right)
            if said & signatures or _says_nothing(ready, row, formal):
                continue
            judged += 1
            if self._is_true(ready.text, row):
                accepted.append(ready)
                said |= signatures
        return accepted

    def _is_true(self, text: str, row: Row) -> bool:
        """Judge a mended line by the ordinary check, from its text."""
        claim = row.read(text)
        if claim is None:
            return False
        return truth_of(claim.left, claim.right, row.equation.context, self.judges).holds

    def _node_of_law(self, row: Row, mend: Mend) -> str | None:
        """Return the node whose current law the mended line is, where it is one."""
        equation = row.equation
        if not is_of_currents(mend.left.tree, equation.lexicon):
            return None
        strand = self.judges.strand(equation.context)
        if not strand.symbols:
            return None
        law = strand.symbols[0].row(mend.left.tree, mend.right.tree)
        nodes_used = Laws(strand.symbols[0].residues).nodes_in(law) if law else frozenset()
        if len(nodes_used) != 1:
            return None
        (node,) = nodes_used
        return self.posed.circuit.node_labels.get(node, node)


def _says_nothing(ready: _Ready, row: Row, formal: Formal) -> bool:
    """Tell whether a mend says the same on both sides, or no longer speaks of the circuit where the line did."""
    left, right = ready.mend.left.tree, ready.mend.right.tree
    if cancelling(left, right) > cancelling(row.equation.left, row.equation.right):
        return True
    if row.equation.position == 0:
        added = [edit.subject for edit in ready.mend.edits if edit.kind in LOST and edit.subject is not None]
        if any(formal.speaks_of_circuit(term, term) for term in added) and formal.is_identity(left, right):
            return True
        one, other = ready.text.split("=")[:2]
        if "".join(one.split()) == "".join(other.split()):
            return True
    sides = (row.equation.left, row.equation.right)
    if not formal.speaks_of_circuit(*sides) and any(not list(names(side)) for side in sides):
        return not _is_of_numbers(ready.mend)  # a value that was worked out: only a number can belong there
    return formal.speaks_of_circuit(*sides) and not formal.speaks_of_circuit(left, right)


def _is_of_numbers(mend: Mend) -> bool:
    """Tell whether a mend puts numbers in the place of numbers."""
    return all(
        edit.kind == "exchanged"
        and isinstance(edit.spot.node, Number)
        and isinstance(edit.replacement, Number)
        for edit in mend.edits
    )


def _depth(side: Expression) -> int:
    return fold(side, lambda _, depths: 1 + max(depths, default=0))


def _has_value(equation: Equation, points: Points) -> bool:
    sides = (equation.left, equation.right)
    if isinstance(points.base, FieldWorld) and any(
        isinstance(n, Root) for side in sides for n in nodes(side)
    ):
        return False
    try:
        for side in sides:
            evaluate(side, points.base, {})
    except NotInField:
        return False
    except ZeroDivisionError:
        return True
    return True
