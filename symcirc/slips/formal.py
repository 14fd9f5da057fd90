"""Do two equations say the same? Their values with voltages and currents independent of each other tell."""

from __future__ import annotations

import random
from collections.abc import Callable
from fractions import Fraction

from symcirc.sheet.expression import Expression, names
from symcirc.sheet.model import GROUND
from symcirc.slips.points import Points
from symcirc.slips.worlds import Value, World, evaluate
from symcirc.working.names import Lexicon


class Formal:
    """Two points with the same parts and other voltages and currents, which no law of the circuit binds."""

    def __init__(self, points: Points, lexicon: Lexicon) -> None:
        self.world, self.lexicon = points.base, lexicon
        self.points = [points.base.with_names(self._names(k)) for k in range(2)]

    def signatures(self, left: Expression, right: Expression) -> frozenset[object]:
        """Return what equations that say the same have in common: how their two sides differ, and their quotient.

        Equations that differ by a factor of parts alone, or are turned over, say the same.
        """
        try:
            sides = [[evaluate(side, point, {}) for side in (left, right)] for point in self.points]
        except ZeroDivisionError:
            return frozenset({id(left), id(right)})
        one, other = sides[0]
        if self.world.key(one) == self.world.key(other):
            return frozenset({("identity", self.world.key(one))})
        quotients = {self._quotient(one, other), self._quotient(other, one)} - {None}
        differences = [self.world.add(a, self.world.negative(b)) for a, b in sides]
        ratio = self._quotient(*differences)
        found: set[object] = {("quotient", key) for key in quotients}
        if ratio not in (None, self.world.key(self.world.of_number(Fraction(1)))):
            found.add(("difference", ratio))
        return frozenset(found)

    def is_identity(self, left: Expression, right: Expression) -> bool:
        """Tell whether two sides are the same whatever the voltages and currents are."""
        return any(isinstance(s, tuple) and s[0] == "identity" for s in self.signatures(left, right))

    def speaks_of_circuit(self, left: Expression, right: Expression) -> bool:
        """Tell whether a voltage, a current, an asked ratio, w0, f0 or Q stands in an equation, by whatever name."""
        waiting = [name.text for side in (left, right) for name in names(side)]
        while waiting:
            meaning = self.lexicon.by_key(key := waiting.pop())
            if meaning.kind in ("quantity", "ask", "shape"):
                return True
            if meaning.kind == "defined":
                waiting += [name.text for name in names(self.lexicon.definitions[key])]
        return False

    def _quotient(self, above: Value, below: Value) -> object:
        try:
            return self.world.key(self.world.multiply(above, self.world.invert(below)))
        except ZeroDivisionError:
            return None

    def _names(self, which: int) -> Callable[[str], Value]:
        world: World = self.world

        def value(key: str) -> Value:
            meaning = self.lexicon.by_key(key)
            if meaning.kind == "defined":
                return evaluate(self.lexicon.definitions[key], self.points[which], {})
            if meaning.kind in ("quantity", "ask", "shape") and key != f"V_{GROUND}":
                generator = random.Random(f"{which} {key}")  # seeded: the same on every run
                return world.of_number(Fraction(generator.randrange(1, 10**9), 10**9 + 7))
            return world.of_name(key)

        return value
