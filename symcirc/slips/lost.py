"""Slips of what is not there, or stands where another belongs: a factor or a term lost, a name or a number exchanged.

What would have to stand there is found from its value, not by trying.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from fractions import Fraction

from symcirc.sheet.expression import Expression, Name, Negative, Number, Product, Reciprocal, Sum, nodes
from symcirc.slips import costs
from symcirc.slips.edits import NEW, Edit, is_atom, is_one, parallel, parallel_branches, product
from symcirc.slips.joining import plus, times
from symcirc.slips.points import Monomial
from symcirc.slips.sought import Sought, unsigned, with_carrier
from symcirc.slips.spots import Spot
from symcirc.slips.vocabulary import Vocabulary, written
from symcirc.slips.worlds import Value, World

#: A lost factor of more names than this is no slip, nor is a lost term of more.
LONGEST_FACTOR, LONGEST_TERM = 3, 8
#: A number of so many digits is a measured one, and stands for no name.
MEASURED_DIGITS = 3


class Lost:
    """Looks for what is missing at the spots of one equality, whose trees at all points are ``trees``."""

    def __init__(self, vocabulary: Vocabulary, trees: list[list[Spot]]) -> None:
        self.vocabulary, self.trees = vocabulary, trees
        points = vocabulary.points
        self.worlds: list[World] = [points.base, *points.doubled]

    def edits_at(self, number: int) -> Iterator[Edit]:
        """Yield the edits of the spot of that number."""
        spot = self.trees[0][number]
        for which in range(len(spot.targets)):
            if is_atom(spot.node):
                yield from self._exchanged(spot, self._sought(number, which, _itself))
            if takes_factors(spot):
                yield from self._factors(spot, self._sought(number, which, _ratio))
            if takes_branches(spot):
                yield from self._branches(spot, self._sought(number, which, _beside))
            if takes_terms(spot):
                yield from self._terms(spot, self._sought(number, which, _difference))

    def brackets_at(self, number: int) -> Iterator[Edit]:
        """Yield the edits of a spot that fill in two products that are added: a bracket, or two terms."""
        spot = self.trees[0][number]
        for which in range(len(spot.targets)):
            bracket = self._sought(number, which, _ratio).bracket() if takes_factors(spot) else None
            if bracket is not None and _short(bracket):
                yield Edit(spot, times(spot.node, bracket), 2.6, "factor lost", bracket)
            if spot.parent is None or isinstance(spot.node, Sum):
                yield from self._terms_with_brackets(spot, self._sought(number, which, _difference))

    def _sought(self, number: int, which: int, what: Callable[[World, Value, Value], Value]) -> Sought:
        """Return what is made of a spot's target and its value, at every point."""

        def at(world: int) -> Value:
            spot = self.trees[world][number]
            if which >= len(spot.targets):
                raise ZeroDivisionError
            return what(self.worlds[world], spot.targets[which], spot.value)

        return Sought(at, self.vocabulary)

    # exchanged -----------------------------------------------------------------------------------------------

    def _exchanged(self, spot: Spot, sought: Sought) -> Iterator[Edit]:
        if isinstance(spot.node, Number):
            yield from self._numbers(spot, spot.node, sought)
            if _digits(spot.node) >= MEASURED_DIGITS:
                return
        names = sought.names() if sought.at(0) != 0 else self.vocabulary.zeros[:3]
        for rank, name in enumerate(names):
            cost = costs.of_exchange(spot.node, name) + costs.of_name(name, rank, self.vocabulary)
            yield Edit(spot, Name(name.text, NEW), cost, "exchanged", spot.node, name)
        if names:
            return
        for name in sought.inverse().names():
            yield Edit(spot, product([Reciprocal(name, NEW)]), 1.9, "exchanged", spot.node, name)
        monomial = sought.monomial() if isinstance(spot.node, Name) else None
        if monomial is not None and 0 < monomial.size <= LONGEST_FACTOR:
            new = written(monomial)
            yield Edit(spot, new, 2.2 + 0.3 * monomial.size, "exchanged", spot.node, new)

    def _numbers(self, spot: Spot, number: Number, sought: Sought) -> Iterator[Edit]:
        """Yield the number that belongs in the place of another; a measured one to the digits that were written."""
        value = sought.at(0)
        fraction = self.worlds[0].fraction(value)
        if fraction is not None and abs(fraction.numerator * fraction.denominator) <= 100:
            new = written(Monomial(fraction, ()))
            cost = 2.0 if is_one(number) or fraction.denominator > 1 else 1.4
            yield Edit(spot, new, cost, "exchanged", number, new)
            return
        is_real = isinstance(value, complex) and abs(value.imag) < 1e-9 * abs(value.real)
        if is_real and not self.worlds[1:] and (_digits(number) > 1 or spot.parent is None):
            digits = max(MEASURED_DIGITS, _digits(number))
            measured = Number(Fraction(f"{value.real:.{digits}g}"), NEW)
            yield Edit(spot, measured, 1.5, "exchanged", number, measured)

    # factors, branches, terms ----------------------------------------------------------------------------------

    def _factors(self, spot: Spot, sought: Sought) -> Iterator[Edit]:
        def lost(factor: Expression, cost: float) -> Edit:
            return Edit(spot, times(spot.node, factor), cost, "factor lost", factor)

        def is_part(name: Name) -> bool:
            return name.text in (*self.vocabulary.points.names, "pi")

        for rank, name in enumerate(sought.names()):
            cost = (1.2 if is_part(name) else 1.4) + costs.of_name(name, rank, self.vocabulary)
            yield lost(name, cost)
        for name in sought.inverse().names()[:1]:
            cost = (1.4 if is_part(name) else 2.0) + costs.of_name(name, 0, self.vocabulary)
            yield lost(product([Reciprocal(name, NEW)]), cost)
        found = sought.monomial()
        if found is not None and found.size <= LONGEST_FACTOR and (found.size or abs(found.number) != 1):
            yield lost(written(found), 1.2 + _cost_of_factor(found))
        for carrier, found in sought.carried():
            if found.size <= LONGEST_FACTOR:
                factor = with_carrier(carrier, found)
                factor = Negative(factor, NEW) if found.number < 0 else factor
                yield lost(factor, 1.4 + carrier.cost + _cost_of_factor(found) + (0.3 if found.size else 0.0))
        for carrier, found in sought.carried_below():
            if found.size <= LONGEST_FACTOR:
                factor = product([written(found), Reciprocal(carrier.expression, NEW)])
                yield lost(factor, 2.0 + carrier.cost + _cost_of_factor(found) + (0.3 if found.size else 0.0))

    def _branches(self, spot: Spot, sought: Sought) -> Iterator[Edit]:
        """Yield a name that stands beside a spot, in parallel, and was left out."""
        for name in sought.names()[:1]:
            branches = [*(parallel_branches(spot.node) or [spot.node]), name]
            yield Edit(spot, parallel(branches), 1.9, "branch lost", name)

    def _terms(self, spot: Spot, sought: Sought) -> Iterator[Edit]:
        is_whole = spot.parent is None or isinstance(spot.node, Sum)
        aside = costs.of_depth(spot) + (0.0 if is_whole else 0.2)

        def lost(term: Expression, cost: float, *, minus: bool) -> Edit:
            signed = Negative(term, NEW) if minus else term
            return Edit(
                spot, plus(spot.node, signed), cost + (0.2 if minus else 0.0) + aside, "term lost", term
            )

        if is_whole:
            yield from self._currents(spot, sought)
        if is_whole or self._has_quantity(spot):
            for rank, name in enumerate(sought.names()):
                yield lost(name, 1.5 + costs.of_name(name, rank, self.vocabulary), minus=False)
        found = sought.monomial()
        if found is not None and found.size <= (LONGEST_TERM if is_whole else LONGEST_FACTOR):
            bare = written(unsigned(found))
            cost = 1.4 if found.size == 0 and found.number == 1 else 1.8 + _cost_of_term(found)
            yield lost(bare, cost, minus=found.number < 0)
        for carrier, found in sought.carried():
            if (
                found.size <= LONGEST_TERM
                if is_whole
                else found.size == 0 and isinstance(carrier.expression, Name)
            ):
                cost = 1.5 + carrier.cost + _cost_of_term(found)
                yield lost(times(carrier.expression, written(unsigned(found))), cost, minus=found.number < 0)

    def _currents(self, spot: Spot, sought: Sought) -> Iterator[Edit]:
        """Yield the current through a part, where that is what is missing."""
        value = sought.at(0)
        named = {inner.node.text for inner in spot.within() if isinstance(inner.node, Name)}
        for current in self.vocabulary.currents:
            is_there = 0.8 if current.part in named else 0.0
            if value == current.value:
                whole = plus(spot.node, current.expression)
                yield Edit(spot, whole, 1.3 + is_there, "current lost", current.expression)
            elif value == self.worlds[0].negative(current.value):
                whole = plus(spot.node, Negative(current.expression, NEW))
                yield Edit(spot, whole, 1.5 + is_there, "current lost", current.expression)

    def _terms_with_brackets(self, spot: Spot, sought: Sought) -> Iterator[Edit]:
        """Yield two lost products, or a lost voltage or current times a bracket, as in ``V_a (1 + R2/R1)``."""
        bracket = sought.bracket()
        if bracket is not None:
            both = plus(plus(spot.node, bracket.terms[0]), bracket.terms[1])
            yield Edit(spot, both, 2.4 + costs.of_depth(spot), "term lost", bracket)
        for carrier in self.vocabulary.carriers:
            bracket = sought.over(carrier).bracket() if isinstance(carrier.expression, Name) else None
            if bracket is not None and _short(bracket):
                term = product([bracket, carrier.expression])
                yield Edit(spot, plus(spot.node, term), 2.4 + carrier.cost, "term lost", term)

    def _has_quantity(self, spot: Spot) -> bool:
        """Tell whether a voltage, a current or a name of the working stands in a spot."""
        carried = {c.expression.text for c in self.vocabulary.carriers if isinstance(c.expression, Name)}
        return any(isinstance(inner.node, Name) and inner.node.text in carried for inner in spot.within())


def _short(bracket: Sum) -> bool:
    """Tell whether a bracket is short enough to have been lost as one factor."""
    return sum(isinstance(node, Name) for node in nodes(bracket)) <= LONGEST_FACTOR + 1


def _itself(world: World, target: Value, value: Value) -> Value:
    return target


def _ratio(world: World, target: Value, value: Value) -> Value:
    return world.multiply(target, world.invert(value))


def _difference(world: World, target: Value, value: Value) -> Value:
    return world.add(target, world.negative(value))


def _beside(world: World, target: Value, value: Value) -> Value:
    """Return what is in parallel with the value where the target is both."""
    return world.invert(world.add(world.invert(target), world.negative(world.invert(value))))


def _cost_of_factor(found: Monomial) -> float:
    return 0.5 * max(0, found.size - 1) + costs.of_number(found.number) + costs.of_quotient(found)


def _cost_of_term(found: Monomial) -> float:
    return 0.05 * found.size + 2 * costs.of_number(abs(found.number)) + costs.of_quotient(found)


def _digits(number: Number) -> int:
    """Return how many digits a number was written with."""
    place = number.place
    text = place.source.line(place.line)[place.column - 1 : place.end - 1].lower().partition("e")[0]
    return sum(character.isdigit() for character in text.lstrip("0."))


def takes_factors(spot: Spot) -> bool:
    """Tell whether a factor lost at a spot is not just as well lost at the product that it stands in."""
    if isinstance(spot.node, Negative | Reciprocal):
        return False
    parent = spot.parent
    if parent is not None and isinstance(parent.node, Reciprocal) and isinstance(spot.node, Sum):
        return True  # a sum below the line: what it lost is written there
    while parent is not None and isinstance(parent.node, Negative):
        parent = parent.parent
    return parent is None or not isinstance(parent.node, Product | Reciprocal)


def takes_branches(spot: Spot) -> bool:
    """Tell whether something can stand in parallel with a spot."""
    return not isinstance(spot.node, Negative | Reciprocal | Sum)


def takes_terms(spot: Spot) -> bool:
    """Tell whether a term may be lost here: in a sum, at a side, or where a bracket was."""
    if isinstance(spot.node, Reciprocal) or parallel_branches(spot.node) is not None:
        return False
    parent = spot.parent
    return parent is None or isinstance(spot.node, Sum) or isinstance(parent.node, Product | Reciprocal)
