"""True workings to plant slips in: step lists of published stages and random sheets, and book derivations."""

from __future__ import annotations

import random
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

import mpmath

from symcirc.complaints import Complaint, Source
from symcirc.derivation import Posed, derive, pose
from symcirc.sheet import read_sheet
from symcirc.sheet.expression import Root, nodes
from symcirc.slips.formal import Formal
from symcirc.slips.mending import mended
from symcirc.slips.places import complex_points, field_points
from symcirc.steps import steps_of
from symcirc.steps.text import steps_text
from symcirc.working import Checked, Equation, Line
from symcirc.working.check import Checker
from symcirc.working.measured import DIGITS
from symcirc.working.read import read_lines
from tests.published.stages import STAGES
from tests.random_circuits import random_sheet
from tests.slips.planting import KINDS, planted
from tests.working.books import DERIVATIONS

#: Random sheets of more parts are left out.
MOST_PARTS = 8
#: So are those of which there is next to nothing to derive, as V_x/V_x = 1.
FEWEST_LINES = 4


def workings(seed: int, count: int) -> Iterator[tuple[str, str]]:
    """Yield sheets and true workings about them, those of up to ``count`` random sheets last."""
    sheets = {stage.id: stage.sheet for stage in STAGES}
    yield from ((sheets[derivation.stage], derivation.lines) for derivation in DERIVATIONS)
    rng = random.Random(seed)
    yield from ((sheet, steps) for sheet in sheets.values() if (steps := _steps(sheet, 100)) is not None)
    for sheet in (random_sheet(rng) for _ in range(count)):
        steps = _steps(sheet, MOST_PARTS)
        if (
            steps is not None
            and sum("=" in line and line[0] != "#" for line in steps.split("\n")) >= FEWEST_LINES
        ):
            yield sheet, steps


def _steps(sheet: str, most_parts: int) -> str | None:
    """Return the step list of a sheet's first ask, None where it is no circuit or too large."""
    try:
        posed = pose(read_sheet(Source("a.stage", sheet)))
        if len(posed.circuit.parts) > most_parts:
            return None
        (answer,) = derive(posed, {posed.sheet.asks[0].name}).answers
        return "\n".join(steps_text(steps_of(posed, answer)))
    except Complaint:
        return None


@dataclass(frozen=True)
class Plant:
    """A line of a true working, the kind of slip, and the line with it."""

    line: Line
    kind: str
    text: str


class Truth:
    """A sheet with a true working."""

    def __init__(self, sheet: str, working: str) -> None:
        self.posed: Posed = pose(read_sheet(Source("a.stage", sheet)))
        self.working = working
        self.checked = self._run(working)[1]

    def _run(self, working: str) -> tuple[Checker, Checked]:
        with mpmath.workdps(DIGITS):
            checker = Checker(self.posed)
            return checker, checker.run(read_lines(Source("a.work", working)))

    @cached_property
    def lines(self) -> list[Line]:
        """The lines that say one equality, which a slip may be planted in."""
        rows = [line.line for line in self.checked.lines]
        return [one for one in self.checked.lines if one.equation is not None and rows.count(one.line) == 1]

    def plant(self, rng: random.Random) -> Plant | None:
        """Return a line with a slip of some kind in it."""
        line = rng.choice(self.lines)
        assert line.equation is not None
        for kind in rng.sample(list(KINDS), len(KINDS)):
            text = planted(rng, line.equation, kind)
            if text is not None and text != line.text:
                return Plant(line, kind, text)
        return None

    def with_line(self, line: Line, text: str) -> str:
        """Return the working with one line replaced."""
        rows = self.working.split("\n")
        rows[line.line - 1] = text
        return "\n".join(rows)

    def mended(self, plant: Plant) -> Checked:
        """Check the working with a slip in it, and look for the slip."""
        with mpmath.workdps(DIGITS):
            checker = Checker(self.posed)
            source = Source("a.work", self.with_line(plant.line, plant.text))
            return mended(checker, checker.run(read_lines(source)))

    def says_the_same(self, line: Line, text: str) -> bool:
        """Tell whether a line is another way to write one of the working's own."""
        checker, checked = self._run(self.with_line(line, text))
        new = next(one for one in checked.lines if one.line == line.line)
        if new.equation is None or line.equation is None:
            return False
        with mpmath.workdps(DIGITS):
            checker.run(read_lines(Source("a.work", self.working)))  # so that it knows the line's own names
            judge = checker.judges.judge(line.equation.context)
            plain = _is_plain(new.equation) and _is_plain(line.equation)
            formal = Formal((field_points if plain else complex_points)(judge), checker.lexicon)
            one, other = (formal.signatures(e.left, e.right) for e in (new.equation, line.equation))
        return bool(one & other) or "".join(text.split()) == "".join(line.text.split())


def _is_plain(equation: Equation) -> bool:
    """Tell whether an equality holds neither roots nor w0, f0 or Q, and so has a value in the field."""
    for side in (equation.left, equation.right):
        for node in nodes(side):
            if isinstance(node, Root) or getattr(node, "text", "") in ("w0", "f0", "Q"):
                return False
    return True
