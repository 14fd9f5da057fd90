"""What the author of a working can have meant: the names at hand, and pieces made of them."""

from __future__ import annotations

from collections.abc import Hashable, Iterable
from dataclasses import dataclass, field
from fractions import Fraction

from symcirc.complaints import Complaint
from symcirc.sheet.expression import Expression, Name, Negative, Number, Power, Reciprocal
from symcirc.sheet.model import GROUND
from symcirc.slips.edits import NEW, product
from symcirc.slips.points import Monomial, Points
from symcirc.slips.worlds import Value, evaluate
from symcirc.working.field import NotInField

#: What is raised for a name without a value at a point: an ask that cannot be solved among them.
UNKNOWN = (ZeroDivisionError, NotInField, Complaint)


@dataclass(frozen=True)
class Carrier:
    """A voltage, a current, a difference of voltages or a bracket, with the inverse of its value at every point."""

    expression: Expression
    inverses: tuple[Value, ...]
    cost: float


@dataclass(frozen=True)
class Current:
    """The current through a part, from one of its nodes to the other, and its value."""

    part: str
    expression: Expression
    value: Value


@dataclass
class Vocabulary:
    """The names at hand, best first, and what a lost factor or term may hold besides powers of parts.

    ``used`` are the names that stand in the working so far; ``distant`` voltages of nodes that none of the line's
    parts touches.
    """

    points: Points
    names: tuple[Name, ...]
    used: frozenset[str]
    distant: frozenset[str]
    carriers: list[Carrier] = field(default_factory=list)
    currents: list[Current] = field(default_factory=list)
    _by_value: dict[Hashable, list[Name]] = field(default_factory=dict)

    def __post_init__(self) -> None:
        for name in self.names:
            try:
                value = self.points.base.of_name(name.text)
            except UNKNOWN:
                continue
            if value != 0 or name.text != f"V_{GROUND}":
                self._by_value.setdefault(self.points.base.key(value), []).append(name)

    @property
    def worth(self) -> list[Name]:
        """One name for each value other than 0."""
        return [names[0] for key, names in self._by_value.items() if key != self._zero]

    @property
    def zeros(self) -> list[Name]:
        """The names of what is zero in this circuit."""
        return self._by_value.get(self._zero, [])

    @property
    def _zero(self) -> Hashable:
        return self.points.base.key(self.points.base.of_number(Fraction(0)))

    @property
    def symbols(self) -> list[Name]:
        """The parts and s, as far as the names at hand have them."""
        return [name for name in self.worth if name.text in self.points.names]

    def named(self, value: Value) -> list[Name]:
        """Return the names of a value other than 0."""
        return [] if value == 0 else self._by_value.get(self.points.base.key(value), [])

    def carry(self, expressions: Iterable[tuple[Expression, float]]) -> None:
        """Add carriers; what is zero, or the same as one before, is left out."""
        seen = {self.points.base.key(carrier.inverses[0]) for carrier in self.carriers}
        for expression, cost in expressions:
            try:
                inverses = tuple(
                    world.invert(evaluate(expression, world, {}))
                    for world in (self.points.base, *self.points.doubled)
                )
            except UNKNOWN:
                continue
            key = self.points.base.key(inverses[0])
            minus = self.points.base.key(self.points.base.negative(inverses[0]))
            if isinstance(expression, Name) or (key not in seen and minus not in seen):
                seen.add(key)
                self.carriers.append(Carrier(expression, inverses, cost))

    def carry_currents(self, currents: Iterable[tuple[str, Expression]]) -> None:
        """Add the currents through parts; those that are zero are left out."""
        for part, expression in currents:
            try:
                value = evaluate(expression, self.points.base, {})
            except UNKNOWN:
                continue
            if value != 0:
                self.currents.append(Current(part, expression, value))


def written(monomial: Monomial) -> Expression:
    """Return a monomial as a tree: the number, then s, then the parts, what is below the line last."""
    above: list[Expression] = []
    below: list[Expression] = []
    size = abs(monomial.number)
    if size.numerator != 1:
        above.append(Number(Fraction(size.numerator), NEW))
    if size.denominator != 1:
        below.append(Number(Fraction(size.denominator), NEW))
    for text, power in sorted(monomial.powers, key=lambda item: (item[0] not in ("s", "pi"), item[0])):
        name = Name(text, NEW)
        (above if power > 0 else below).append(name if abs(power) == 1 else Power(name, abs(power), NEW))
    line = [Reciprocal(product(below), NEW)] if below else []
    whole = product([*above, *line])
    return Negative(whole, NEW) if monomial.number < 0 else whole
