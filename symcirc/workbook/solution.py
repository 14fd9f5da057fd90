"""The worksheet of a solution: design equations in order, what is built, conditions, coefficients."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import prod
from typing import Any

import sympy

from symcirc.match.formula import condition_text, equation_text
from symcirc.match.problem import Branch, Condition, Root
from symcirc.report.lines import readable
from symcirc.transfer.evaluate import exact_coefficients
from symcirc.transfer.function import symbols_in
from symcirc.workbook.arithmetic import MOST_CHARACTERS, arithmetic, summands
from symcirc.workbook.cells import Formula, Page, reference
from symcirc.workbook.inputs import Given
from symcirc.workbook.live import LiveDesign, LiveStage
from symcirc.workbook.response import Polynomials
from symcirc.workbook.roots import found_cell

#: By how much both sides of an equality may differ and still be told equal.
EQUAL = "1E-9"


@dataclass(frozen=True)
class Row:
    """A row of the design: a name, its unit, how it is computed in words, and its formula once cells are known."""

    name: str
    unit: str
    text: str
    formula: sympy.Expr | Root | None


@dataclass
class SolutionPage:
    """A solution's worksheet being filled.

    ``design`` are the cells of the names as the equations give them, ``built`` those of the parts in the ratio as
    they are built, which are the same until they are written over; tied parts follow these. ``roots`` are the
    worksheets of roots by part.
    """

    page: Page
    live: LiveDesign
    choice: tuple[int, ...]
    values: Mapping[str, float]
    given: Given
    roots: Mapping[str, str]

    def __post_init__(self) -> None:
        self.design: dict[str, str] = dict(self.given.cells)
        self.built: dict[str, str] = {}
        stages = self.live.stages
        self._ties = {n: e for stage in stages for n, e in stage.problem.positives.items()}
        self._held = set().union(*(symbols_in(stage.function) for stage in stages))

    @property
    def branches(self) -> list[tuple[LiveStage, Branch]]:
        """Each stage with the branch that the solution takes."""
        return [(stage, stage.branches[k]) for stage, k in zip(self.live.stages, self.choice, strict=True)]

    # the design equations -----------------------------------------------------------------------------------

    def put_equations(self) -> None:
        """Put the design equations of every stage, and a column for what is built."""
        groups = [(self._heading(stage), self._rows(stage, branch)) for stage, branch in self.branches]
        groups.append(("given and tied", self._other_rows()))
        page = self.page
        page.line("part", "design", "unit", "as built", "equation", style="head")
        row = page.row
        for _, rows in groups:
            row += 1
            for one in rows:
                self.design[one.name] = reference(row, 1, page.name)
                if one.name in self._held:
                    self.built[one.name] = reference(row, 3, page.name)
                row += 1
        for heading, rows in groups:
            page.line(heading, style="head")
            for one in rows:
                self._put_row(one)

    def _heading(self, stage: LiveStage) -> str:
        return stage.heading if stage.is_live else f"{stage.heading} (the target's numbers are built in)"

    def _rows(self, stage: LiveStage, branch: Branch) -> list[Row]:
        rows = []
        if stage.shared is not None:
            rows.append(Row(stage.shared.name, "", stage.shared.meaning, stage.shared.formula))
        for e in branch.equations:
            text = readable(f"{e.part} = {equation_text(e.formula)}")
            rows.append(Row(e.part, self._unit(e.part), text, e.formula))
        return rows

    def _other_rows(self) -> list[Row]:
        """Return the tied parts, and the inputs that stand in the ratio."""
        ties = self._ties.items()
        rows = [Row(n, self._unit(n), readable(f"{n} = {equation_text(e)}"), e) for n, e in ties]
        inputs = [q for q in self.live.inputs if q.name in self._held]
        return [*rows, *(Row(q.name, q.unit, q.meaning, sympy.Symbol(q.name)) for q in inputs)]

    def _unit(self, name: str) -> str:
        dimension = self.live.design.derivation.sheet.symbols[name].dimension
        return str(dimension) if dimension not in (None, "ratio") else ""

    def _put_row(self, row: Row) -> None:
        page = self.page
        page.put(0, row.name)
        page.put(1, self._content(row), "number")
        page.put(2, row.unit, "unit")
        value = self.values.get(row.name)
        if row.name in self._held:
            page.put(3, Formula(page.here(1), value), "input")
        elif row.name in self._ties and isinstance(row.formula, sympy.Expr):
            page.put(3, Formula(arithmetic(row.formula, self.given.cells | self.built), value), "number")
        page.put(4, row.text, "unit")
        page.row += 1

    def _content(self, row: Row) -> Formula | float | None:
        value = self.values.get(row.name)
        if row.name in self.given.cells:
            return Formula(self.given.cells[row.name], value)
        if row.name in self.roots:
            return Formula(found_cell(self.roots[row.name]), value)
        shared = next((s.shared for s in self.live.stages if s.shared and s.shared.name == row.name), None)
        if shared is not None:
            return self._share(row)
        assert row.formula is not None
        text = arithmetic(row.formula, self.design)
        return value if len(text) > MOST_CHARACTERS else Formula(text, value)

    def _share(self, row: Row) -> Formula:
        """Return a stage's share of the gain: what the others leave, shared equally, as the match shares it."""
        if isinstance(row.formula, sympy.Expr) and row.formula.free_symbols:
            return Formula(arithmetic(row.formula, self.design), self.values.get(row.name))
        sharing = [s for s in self.live.stages if s.shared is not None]
        own = [s.own_gain for s in self.live.stages if s.own_gain is not None]
        numbers = {x: self.values[str(x)] for gain in own for x in gain.free_symbols}
        rest = self.values[row.name] ** len(sharing)
        texts = []
        for gain in own:
            rest *= abs(float(gain.subs(numbers)))
            texts.append(f"ABS({arithmetic(gain, self.design)})")
        gain_name = self._gain_name()
        if gain_name is not None:
            rest /= self.values[gain_name]
            texts.insert(0, self.design[gain_name])
        nearly_one = abs(rest - 1) < 1e-12
        above = "*".join(([] if nearly_one and gain_name else [repr(rest)]) + texts[: gain_name is not None])
        below = "*".join(texts[gain_name is not None :])
        quotient = f"{above}/({below})" if below else above
        return Formula(f"({quotient})^(1/{len(sharing)})", self.values[row.name])

    def _gain_name(self) -> str | None:
        return next(
            (q.name for q in self.live.inputs if q.meaning.startswith("the target's gain, a ratio")), None
        )

    # conditions ---------------------------------------------------------------------------------------------

    def put_conditions(self) -> tuple[str, str]:
        """Put the conditions with their verdicts; return the cell of the verdict on all, and what it is now."""
        page = self.page
        page.row += 1
        page.line("condition", "verdict", style="head")
        first = page.row
        conditions = dict.fromkeys(c for _, branch in self.branches for c in branch.conditions)
        known = all(q.exact is not None for q in self.live.inputs)
        now = "met" if known else "open"
        for condition in conditions:
            page.put(1, self._verdict(self._test(condition), now), "verdict")
            page.line(readable(condition_text(condition)))
        free = {n for stage in self.live.stages for n in stage.problem.free_unknowns}
        solved = [e.part for _, branch in self.branches for e in branch.equations if e.part not in free]
        if solved:
            cells = ",".join(self.design[name] for name in solved)
            page.put(1, self._verdict(f"MIN({cells})>0", now), "verdict")
            page.line("every part is real and positive")
        area = page.area(1, first).text
        cell = page.here(1)
        met = f'IF(COUNTIF({area},"met")=ROWS({area}),"met","not met")'
        text = f'IF(COUNTIF({area},"open")>0,"open",{met})'
        page.put(1, Formula(text, now) if page.row > first else "met", "verdict")
        page.line("all of these")
        return cell, now

    def _test(self, condition: Condition) -> str:
        left, right = (arithmetic(side, self.design) for side in (condition.left, condition.right))
        if condition.relation == "=":
            return f"ABS(({left})-({right}))<={EQUAL}*MAX(ABS({left}),ABS({right}))"
        return f"({left}){condition.relation}({right})"

    def _verdict(self, test: str, now: str) -> Formula:
        numbers = self.given.numbers.text
        return Formula(
            f'IF(COUNT({numbers})<ROWS({numbers}),"open",IFERROR(IF({test},"met","not met"),"not met"))', now
        )

    # coefficients -------------------------------------------------------------------------------------------

    def put_coefficients(self) -> list[Polynomials]:
        """Put the coefficients of every stage as built."""
        found = []
        for k, (stage, _) in enumerate(self.branches, 1):
            name = f"stage {k}" if len(self.live.stages) > 1 else "stage"
            numbers = self._numbers(stage)
            rows = [
                [c.as_expr() for c in row] for row in (stage.function.numerator, stage.function.denominator)
            ]
            found.append(self._table(f"{name}, as built", name, rows, self.built, numbers))
        return found

    def put_target(self) -> Polynomials:
        """Put the target's coefficients, all divided by the constant term under the line, where it has one."""
        goal = self.live.goal
        constant = goal.denominator[0] if goal.denominator[0] != 0 else sympy.S.One
        rows = [[c / constant for c in row] for row in (goal.numerator, goal.denominator)]
        known = {q.name: q.exact for q in self.live.inputs if q.exact is not None}
        numbers = _evaluated(rows, known)
        title = "target, made 1 at s^0"
        return self._table(title, "target", rows, self.given.cells, numbers)

    def put_factor(self, stages: list[Polynomials], target: Polynomials) -> tuple[str, float | None]:
        """Put the gain by which the target is drawn: 1, or what the stage has where the target leaves it free."""
        page = self.page
        page.row += 1
        cell = page.here(1)
        content: Formula | float = 1.0
        value: float | None = 1.0
        if self.live.goal.gain == "free":
            ratios = [*stages, target]
            texts = [f"ABS({r.above[-1]}/{r.below[-1]})" for r in ratios]
            sizes = [None if r.values is None else abs(r.values[0][-1] / r.values[1][-1]) for r in ratios]
            known = [size for size in sizes if size is not None]
            value = prod(known[:-1]) / known[-1] if len(known) == len(sizes) else None
            content = Formula(f"{'*'.join(texts[:-1])}/{texts[-1]}", value)
        page.put(1, content, "number")
        page.line("gain by which the target is drawn")
        return cell, value

    def _numbers(self, stage: LiveStage) -> tuple[tuple[float, ...], tuple[float, ...]] | None:
        if not symbols_in(stage.function) - {"pi"} <= self.values.keys():
            return None
        exact = {n: sympy.Rational(self.values[n]) for n in symbols_in(stage.function) if n != "pi"}
        above, below = exact_coefficients(stage.function, exact)
        return tuple(map(float, above)), tuple(map(float, below))

    def _table(
        self,
        title: str,
        name: str,
        rows: list[list[sympy.Expr]],
        cells: Mapping[str, str],
        numbers: Any,
    ) -> Polynomials:
        page = self.page
        page.row += 1
        page.line(f"coefficients of {title}", "over", "", "under", style="head")
        found: tuple[list[str], list[str]] = ([], [])
        for power in range(max(map(len, rows))):
            page.put(0, f"s^{power}")
            for side, column in ((0, 1), (1, 3)):
                if power < len(rows[side]):
                    value = None if numbers is None else numbers[side][power]
                    page.put(column, self._sum(rows[side][power], cells, 5 + 8 * side, value), "number")
                    found[side].append(page.here(column))
            page.row += 1
        return Polynomials(name, tuple(found[0]), tuple(found[1]), numbers)

    def _sum(
        self, expression: sympy.Expr, cells: Mapping[str, str], spare: int, value: float | None
    ) -> Formula:
        """Return a sum's formula, its groups in spare cells of the row where it is too long for one."""
        texts = summands(expression, cells)
        if len(texts) == 1:
            return Formula(texts[0], value)
        for k, text in enumerate(texts):
            self.page.put(spare + k, Formula(text, None), "number")
        return Formula("+".join(self.page.here(spare + k) for k in range(len(texts))), value)


def _evaluated(rows: list[list[sympy.Expr]], known: Mapping[str, sympy.Expr]) -> Any:
    numbers = [
        [c.subs({x: known[str(x)] for x in c.free_symbols if str(x) in known}) for c in row] for row in rows
    ]
    if any(not c.is_number for row in numbers for c in row):
        return None
    above, below = (tuple(float(sympy.N(c, 20)) for c in row) for row in numbers)
    return above, below
