"""The best of several searches."""

from __future__ import annotations

from symcirc.drawing.layout import Layout, Problem
from symcirc.drawing.schematic import Schematic
from symcirc.drawing.search import Annealing
from symcirc.drawing.spread import spread
from symcirc.drawing.start import start

#: A round is so many searches (three at least, and fewer than five where they have so many moves), some then settled.
SEARCHES, FEWEST, MOST_IN_ROUND, SETTLED = 5, 3, 12_000, 2
#: Moves that even the smallest circuit gets in a search, and more for every body and net; the temperatures between.
LEAST, MOVES, HOT, COLD = 400, 75, 8.0, 0.12
#: Circuits whose wires cross are searched for in so many rounds, as long as there are moves left.
ROUNDS, MOST_MOVES = 3, 30_000
#: A placement that starts without a conflict is improved so cold that none comes in.
HOT_SPREAD = 2.0


def place(schematic: Schematic) -> Layout:
    """Return a good placement of a schematic, sound and the same at every call."""
    problem = Problem(schematic)
    best = _round(problem, 0)
    rounds = min(ROUNDS, MOST_MOVES // (SEARCHES * _moves(best)))
    for number in range(1, rounds):
        if best.is_clear():
            break
        best = min(best, _round(problem, SEARCHES * number), key=lambda search: search.total)
    if best.judge.is_sound():
        return best.layout
    best = Annealing(spread(problem), 0)
    best.run(_moves(best), HOT_SPREAD, COLD)
    return best.layout if best.judge.is_sound() else spread(problem)


def _round(problem: Problem, seed: int) -> Annealing:
    first = Annealing(start(problem), seed)
    count = max(FEWEST, min(SEARCHES, MOST_IN_ROUND // _moves(first)))
    searches = [first, *(Annealing(start(problem), seed + number) for number in range(1, count))]
    for search in searches:
        search.run(_moves(search), HOT, COLD)
    searches.sort(key=lambda search: search.total)
    for search in searches[:SETTLED]:
        search.settle()
    return min(searches, key=lambda search: search.total)


def _moves(search: Annealing) -> int:
    return LEAST + MOVES * search.size
