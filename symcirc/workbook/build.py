"""From a design to the worksheets of its workbook."""

from __future__ import annotations

from symcirc.design import Design, Solution
from symcirc.match.problem import Root
from symcirc.progress import Progress, silent
from symcirc.report.quantities import ask_text
from symcirc.workbook.cells import Chart, Page, Series, Worksheet
from symcirc.workbook.inputs import NAME, Given, put_inputs, put_verdicts
from symcirc.workbook.live import LiveDesign, live_design
from symcirc.workbook.response import Curves, response_page
from symcirc.workbook.roots import root_page
from symcirc.workbook.solution import SolutionPage

#: So many solutions get worksheets.
MOST_SOLUTIONS = 8


def worksheets(design: Design, progress: Progress = silent) -> tuple[Worksheet, ...]:
    """Return the worksheets for a design that has solutions: the inputs, then those of every solution.

    A solution has its equations, conditions and coefficients on one worksheet, its response on another, and one
    for each equation that only a search for its root solves.
    """
    live = live_design(design, progress)
    progress("writing the worksheets")
    first = Page(NAME)
    given = put_inputs(first, live)
    made: list[Worksheet] = []
    verdicts: list[tuple[str, str, str]] = []
    curves: list[Curves] = []
    roots = 0
    shown = list(zip(design.solutions, live.solutions, strict=True))[:MOST_SOLUTIONS]
    for number, (solution, choice) in enumerate(shown, 1):
        name = f"Solution {number}" if len(shown) > 1 else "Solution"
        pages, cell, now, curve = _solution(name, live, choice, solution, given, roots)
        roots += len(pages) - 2
        made += pages
        verdicts.append((name, cell, now))
        curves.append(curve)
    return (put_verdicts(first, verdicts, curves), *made)


def _solution(
    name: str, live: LiveDesign, choice: tuple[int, ...], solution: Solution, given: Given, roots: int
) -> tuple[list[Worksheet], str, str, Curves]:
    """Return a solution's worksheets, the cell of its verdict with what it is now, and its curves."""
    page = Page(name)
    branches = [stage.branches[k] for stage, k in zip(live.stages, choice, strict=True)]
    long = [e for branch in branches for e in branch.equations if isinstance(e.formula, Root)]
    named = {e.part: f"Root {roots + k}" for k, e in enumerate(long, 1)}
    values = _values(live, choice, solution)
    filled = SolutionPage(page, live, choice, values, given, named)
    page.line(f"{name}: {ask_text(live.design.ask)}", style="title")
    page.line(
        "The response follows the column `as built`: write a bought value over a cell of it.",
        style="sentence",
    )
    page.row += 1
    filled.put_equations()
    verdict, now = filled.put_conditions()
    stages = filled.put_coefficients()
    target = filled.put_target()
    factor = filled.put_factor(stages, target)
    table, curves = response_page(
        name.replace("Solution", "Response"), given.ends, given.end_values, stages, target, factor
    )
    free = {n for stage in live.stages for n in stage.problem.free_unknowns}
    found = [
        root_page(named[e.part], e.formula, filled.design, values.get(e.part), e.part in free)
        for e in long
        if isinstance(e.formula, Root)
    ]
    return [page.finished(_charts(name, curves), (34, 16, 8, 16, 64)), table, *found], verdict, now, curves


def _values(live: LiveDesign, choice: tuple[int, ...], solution: Solution) -> dict[str, float]:
    """Return all numbers that are known, by name, in SI base units."""
    shared = [stage.shared for stage in live.stages if stage.shared is not None]
    values = {q.name: q.value for q in (*live.inputs, *shared) if q.value is not None}
    for stage, k in zip(live.stages, choice, strict=True):
        values |= {name: value for name, value in stage.branches[k].values.items() if value is not None}
    return values | dict(solution.values)


def _charts(name: str, curves: Curves) -> tuple[Chart, ...]:
    magnitude = Series("as built", curves.frequency, curves.magnitude)
    target = Series("target", curves.frequency, curves.target, is_target=True)
    phase = Series("as built", curves.frequency, curves.phase)
    return (
        Chart(f"{name}: magnitude", "dB", (target, magnitude), (1, 5)),
        Chart(f"{name}: phase", "degrees", (phase,), (20, 5)),
    )
