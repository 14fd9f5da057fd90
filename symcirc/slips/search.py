"""The search for the smallest edits that make an equality true."""

from __future__ import annotations

from collections.abc import Callable, Hashable, Iterator
from dataclasses import dataclass, replace
from functools import cached_property, partial
from itertools import combinations

from symcirc.sheet.expression import Expression, Name, Negative, Sum
from symcirc.slips.apply import Edited, edited
from symcirc.slips.brackets import bracket_edits
from symcirc.slips.edits import NEW, ONE, Edit, edits_at
from symcirc.slips.joining import plus, times
from symcirc.slips.lost import Lost, takes_factors
from symcirc.slips.spots import Spot, lifted, spots_of, wanted_of_child
from symcirc.slips.vocabulary import Vocabulary
from symcirc.slips.worlds import Value, World, evaluate

#: An equality of more subtrees is not searched; one of more than the second, not for two slips.
MOST_SPOTS, MOST_SPOTS_FOR_TWO = 1500, 300


@dataclass(frozen=True)
class Mend:
    """Edits that make an equality true, and the sides with them."""

    edits: tuple[Edit, ...]
    cost: float
    left: Edited
    right: Edited


@dataclass(frozen=True)
class _Variant:
    """What a spot would be worth with one edit in it or below it."""

    value: Value
    edit: Edit


class Search:
    """The spots of one equality at all points, and the edits of each.

    Raises ZeroDivisionError where the equality has no value.
    """

    def __init__(self, left: Expression, right: Expression, vocabulary: Vocabulary) -> None:
        self.vocabulary = vocabulary
        self.world: World = vocabulary.points.base
        self.sides = spots_of(left, right, self.world)
        self.spots = [spot for side in self.sides for spot in side.within()]
        self.known = {id(spot.node): spot.value for spot in self.spots}

    def mends_of_one(self) -> list[Mend]:
        """Return all mends of one edit, cheapest first."""
        if len(self.spots) > MOST_SPOTS:
            return []
        found: list[Mend] = []
        for spot in self.spots:
            targets = {self.world.key(target) for target in spot.targets}
            if not targets or spot.is_hidden:
                continue
            for edit in (*edits_at(spot), *bracket_edits(spot)):
                value = self._value(edit.replacement)
                if value is not None and self.world.key(value) in targets:
                    found.append(self.mend((edit,)))
        found += [self.mend((edit,)) for edit in self._filled(Lost.edits_at)]
        return sorted(found, key=lambda mend: mend.cost)

    def mends_with_brackets(self) -> list[Mend]:
        """Return mends that fill in two products that are added, cheapest first."""
        found = [self.mend((edit,)) for edit in self._filled(Lost.brackets_at)]
        return sorted(found, key=lambda mend: mend.cost)

    def _value(self, expression: Expression) -> Value | None:
        try:
            return evaluate(expression, self.world, self.known)
        except ZeroDivisionError:
            return None

    def _filled(self, edits_at: Callable[[Lost, int], Iterator[Edit]]) -> Iterator[Edit]:
        for number, spot in enumerate(self.spots):
            if self._lost is not None and not spot.is_hidden and len(self.spots) <= MOST_SPOTS:
                yield from edits_at(self._lost, number)

    @cached_property
    def _lost(self) -> Lost | None:
        """What may be missing, found at all points; None where the equality has no value at one of them."""
        left, right = (side.node for side in self.sides)
        trees = [self.spots]
        try:
            for world in self.vocabulary.points.doubled:
                trees.append([spot for side in spots_of(left, right, world) for spot in side.within()])
        except ZeroDivisionError:
            return None
        return Lost(self.vocabulary, trees)

    def mend(self, edits: tuple[Edit, ...]) -> Mend:
        """Return the sides with edits in them."""
        replacements = {id(edit.spot.node): edit.replacement for edit in edits}
        left, right = (edited(side.node, replacements) for side in self.sides)
        return Mend(edits, sum(edit.cost for edit in edits), left, right)

    # two edits -------------------------------------------------------------------------------------------------

    def mends_of_two(self) -> list[Mend]:
        """Return mends of two edits, cheapest first."""
        if len(self.spots) > MOST_SPOTS_FOR_TWO:
            return []
        found: list[Mend] = []
        left, right = (self._variants(side, found) for side in self.sides)
        found += self._joined(left, right, lambda value: [value])
        return sorted(found, key=lambda mend: mend.cost)

    def _variants(self, spot: Spot, found: list[Mend]) -> list[_Variant]:
        """Return a spot's variants of one edit; mends of two that meet at it are put into ``found``."""
        below = [self._variants(child, found) for child in spot.spots]
        self._meeting(spot, below, found)
        variants = [
            _Variant(value, edit)
            for edit in (() if spot.is_hidden else self._simple_edits(spot))
            if (value := self._value(edit.replacement)) is not None and value != 0
        ]
        inner: list[_Variant] = []
        for child, changed in zip(spot.spots, below, strict=True):
            for variant in changed:
                try:
                    value = lifted(spot, child, variant.value, self.world)
                except ZeroDivisionError:
                    continue
                if value != 0:  # what becomes nothing is no mend
                    inner.append(_Variant(value, variant.edit))
        self._own_after_inner(spot, inner, found)
        return [*variants, *inner]

    def _simple_edits(self, spot: Spot) -> Iterator[Edit]:
        yield from edits_at(spot)
        if isinstance(spot.node, Sum) and len(spot.node.terms) <= 4:
            yield from bracket_edits(spot)
        if takes_factors(spot):
            for name in self.vocabulary.symbols:
                yield Edit(spot, times(spot.node, name), 1.2, "factor lost", name)
        if isinstance(spot.node, Sum):
            yield Edit(spot, plus(spot.node, ONE), 1.4, "term lost", ONE)
        if isinstance(spot.node, Name):
            for name in self.vocabulary.worth:
                if name.text != spot.node.text and name.text[:1] == spot.node.text[:1]:
                    yield Edit(spot, Name(name.text, NEW), 1.1, "exchanged", spot.node, name)

    def _meeting(self, spot: Spot, below: list[list[_Variant]], found: list[Mend]) -> None:
        """Join variants of two operands of a sum or a product."""
        for target in spot.targets:
            for i, j in combinations(range(len(below)), 2):
                one, other = spot.spots[i], spot.spots[j]
                found += self._joined(below[i], below[j], partial(self._wanted, spot, one, other, target))

    def _wanted(self, spot: Spot, one: Spot, other: Spot, target: Value, value: Value) -> list[Value]:
        """Return what one operand would have to be worth for the target when another is worth ``value``."""
        changed = [replace(s, value=value) if s is one else s for s in spot.spots]
        return wanted_of_child(replace(spot, spots=tuple(changed)), other, target, self.world)

    def _joined(
        self, ones: list[_Variant], others: list[_Variant], wanted: Callable[[Value], list[Value]]
    ) -> list[Mend]:
        by_value: dict[Hashable, list[Edit]] = {}
        for variant in others:
            by_value.setdefault(self.world.key(variant.value), []).append(variant.edit)
        mends = []
        for variant in ones:
            try:
                values = wanted(variant.value)
            except ZeroDivisionError:
                continue
            for value in values:
                for edit in by_value.get(self.world.key(value), ()):
                    mends.append(self.mend((variant.edit, edit)))
        return mends

    def _own_after_inner(self, spot: Spot, inner: list[_Variant], found: list[Mend]) -> None:
        """Join a variant of an operand with a slip of the spot itself: its sign, a factor or a current lost."""
        is_whole = spot.parent is None or isinstance(spot.node, Sum)
        is_term = spot.parent is None or isinstance(spot.parent.node, Sum)
        for target in spot.targets if is_whole or is_term else ():
            wanted = self.world.key(target)
            for variant in inner:
                for edit, value in self._own(spot, variant.value, target, is_whole):
                    if self.world.key(value) == wanted:
                        found.append(self.mend((variant.edit, edit)))

    def _own(self, spot: Spot, value: Value, target: Value, is_whole: bool) -> Iterator[tuple[Edit, Value]]:
        """Yield edits of a whole spot that may give it a target's value, with the value that each gives."""
        node, world = spot.node, self.world
        if spot.parent is None or isinstance(spot.parent.node, Sum):
            yield Edit(spot, Negative(node, NEW), 1.0, "sign", node), world.negative(value)
        try:
            for name in self.vocabulary.named(world.multiply(target, world.invert(value))):
                yield Edit(spot, times(node, name), 1.2, "factor lost", name), target
        except ZeroDivisionError:
            return
        missing = world.add(target, world.negative(value))
        if is_whole and world.fraction(missing) == 1:
            yield Edit(spot, plus(node, ONE), 1.4, "term lost", ONE), target
        for current in self.vocabulary.currents if is_whole else ():
            if world.key(current.value) == world.key(missing):
                yield (
                    Edit(spot, plus(node, current.expression), 1.3, "current lost", current.expression),
                    target,
                )
