"""The search for a good placement: simulated annealing with small moves (Kirkpatrick, Gelatt and Vecchi, "Optimization
by simulated annealing", Science 220 (1983) 671-680, from memory). Seeded, and counted in moves, so that a
circuit is always drawn the same way.
"""

from __future__ import annotations

import math
from random import Random
from typing import NamedTuple

from symcirc.drawing.cost import Judge, pair_cost
from symcirc.drawing.layout import Layout, Shape
from symcirc.drawing.moves import Change, Moves

#: The temperature at which nothing gets worse.
FROZEN = 1e-3


class Before(NamedTuple):
    """How it was before a move: costs, and number, shape, own cost and pairs of each body and net it touched."""

    total: float
    whole: float
    saved: list[tuple[int, Shape, float, list[float]]]


class Annealing:
    """A placement under way, with the cost of every object and of every pair of objects."""

    def __init__(self, layout: Layout, seed: int) -> None:
        self.layout = layout
        self.judge = Judge(layout)
        self.random = Random(seed)
        self.moves = Moves(layout, self.judge, self.random)
        self.bodies = len(layout.problem.bodies)
        self.size = self.bodies + len(layout.problem.nets)
        self._measure()

    def _measure(self) -> None:
        found = [self.judge.object(n) for n in range(self.size)]
        self.shapes = [shape for shape, _ in found]
        self.own = [cost for _, cost in found]
        self.pairs = [[0.0] * self.size for _ in range(self.size)]
        for i in range(self.size):
            for j in range(i):
                self.pairs[i][j] = self.pairs[j][i] = pair_cost(self.shapes[i], self.shapes[j])
        self.whole = self._whole()
        self.total = sum(self.own) + sum(map(sum, self.pairs)) / 2 + self.whole

    def _whole(self) -> float:
        return self.judge.whole() + self.judge.strangers(self.shapes)

    def is_clear(self) -> bool:
        """Whether no wire crosses another or a body."""
        return not any(map(any, self.pairs))

    def run(self, moves: int, hot: float, cold: float) -> float:
        """Try so many moves while the temperature falls; keep and return the best cost."""
        best, kept = self.total, self._state()
        for number in range(moves):
            temperature = hot * (cold / hot) ** (number / moves)
            self.attempt(*self.moves.propose(), temperature)
            if self.total < best - 1e-9:
                best, kept = self.total, self._state()
        self._restore(kept)
        return self.total

    def _state(self) -> list[list[int]]:
        return [list(part) for part in self._lists()]

    def _restore(self, kept: list[list[int]]) -> None:
        for part, old in zip(self._lists(), kept, strict=True):
            part[:] = old
        self.layout.forget(range(self.bodies))
        self._measure()

    def _lists(self) -> list[list[int]]:
        layout = self.layout
        return [layout.x, layout.y, layout.flip, layout.trunk, layout.standing, *layout.jog]

    def settle(self) -> None:
        """Tighten the placement and shift single bodies and trunks, as long as anything gets better by it."""
        better = True
        while better:
            before = self.total
            for changes, touched in self.moves.all_cuts():
                self.attempt(changes, touched, FROZEN)
            for changes, touched in self.moves.all_shifts():
                self.attempt(changes, touched, FROZEN)
            better = self.total < before - 1e-6

    def attempt(self, changes: list[Change], touched: set[int], temperature: float) -> None:
        """Make a move and keep it where it is for the better, or by chance while it is hot."""
        before = [(where, index, where[index]) for where, index, _ in changes]
        if all(where[index] == new for where, index, new in changes):
            return
        for where, index, new in changes:
            where[index] = new
        self.layout.forget(touched)
        old = self._apply(touched)
        delta = self.total - old.total
        if delta > 0 and self.random.random() >= math.exp(-delta / temperature):
            for where, index, value in reversed(before):
                where[index] = value
            self.layout.forget(touched)
            self._undo(old)

    def _apply(self, touched: set[int]) -> Before:
        """Measure what was touched anew, and return how it was before."""
        shapes, own, pairs = self.shapes, self.own, self.pairs
        saved, moved = [], []
        delta = 0.0
        for i in touched:
            saved.append((i, shapes[i], own[i], pairs[i][:]))
            shape, cost = self.judge.object(i)
            delta += cost - own[i]
            own[i] = cost
            if shape != shapes[i]:
                shapes[i] = shape
                moved.append(i)
        done = set()
        for i in moved:
            done.add(i)
            shape, row = shapes[i], pairs[i]
            left, top, right, bottom = shape.bounds
            for j, other in enumerate(shapes):
                if j in done:
                    continue
                a, b, c, d = other.bounds
                cost = 0.0 if left > c or a > right or top > d or b > bottom else pair_cost(shape, other)
                if cost != row[j]:
                    delta += cost - row[j]
                    row[j] = pairs[j][i] = cost
        before = Before(self.total, self.whole, saved)
        self.whole = self._whole()
        self.total += delta + self.whole - before.whole
        return before

    def _undo(self, before: Before) -> None:
        self.total, self.whole, saved = before
        for i, shape, own, row in saved:
            self.shapes[i], self.own[i] = shape, own
            self.pairs[i] = row
        for i, _, _, row in saved:
            for j in range(self.size):
                self.pairs[j][i] = row[j]
