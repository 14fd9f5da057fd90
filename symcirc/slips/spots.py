"""The spots of an equality: every subtree with its value, and the values that it would have to have.

An equality is a Möbius function of each of its subtrees, squares and roots aside; so the value that a subtree would
have to have for the whole to be true is found by solving down the tree, once for all.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from symcirc.sheet.expression import (
    Expression,
    Negative,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    children,
)
from symcirc.slips.worlds import Value, World, combine, folded


@dataclass(eq=False)
class Spot:
    """A subtree of a side, which has no parent. ``targets`` are the values with which the equality would be true."""

    node: Expression
    parent: Spot | None
    value: Value
    spots: tuple[Spot, ...]
    targets: tuple[Value, ...] = field(default=())

    @property
    def is_hidden(self) -> bool:
        """Tell whether nobody wrote this: the sum of reciprocals that parallel parts are read as."""
        holder = self.parent
        if holder is not None and isinstance(holder.node, Sum):  # a reciprocal in that sum
            return isinstance(self.node, Reciprocal)
        if isinstance(self.node, Reciprocal):
            return holder is not None and len(holder.spots) == 1
        return isinstance(self.node, Sum) and isinstance(self.spots[0].node, Reciprocal)

    def within(self) -> Iterator[Spot]:
        """Yield this spot and all below it."""
        waiting = [self]
        while waiting:
            spot = waiting.pop()
            yield spot
            waiting.extend(reversed(spot.spots))


def spots_of(left: Expression, right: Expression, world: World) -> tuple[Spot, Spot]:
    """Return the two sides as spots, their targets set; raises ZeroDivisionError."""
    one, other = _built(left, world), _built(right, world)
    _aim(one, (other.value,), world)
    _aim(other, (one.value,), world)
    return one, other


def _built(node: Expression, world: World) -> Spot:
    below = tuple(_built(operand, world) for operand in children(node))
    spot = Spot(node, None, combine(node, [child.value for child in below], world), below)
    for child in below:
        child.parent = spot
    return spot


def _aim(spot: Spot, targets: tuple[Value, ...], world: World) -> None:
    spot.targets = targets
    for child in spot.spots:
        wanted: list[Value] = []
        for target in targets:
            try:
                wanted += wanted_of_child(spot, child, target, world)
            except ZeroDivisionError:
                continue
        _aim(child, tuple(wanted), world)


def wanted_of_child(spot: Spot, child: Spot, target: Value, world: World) -> list[Value]:
    """Return the values of a child with which its parent has the target's; raises ZeroDivisionError."""
    others = [other.value for other in spot.spots if other is not child]
    match spot.node:
        case Sum():
            return [world.add(target, world.negative(folded(world.add, others)))]
        case Product():
            if not others:
                return [target]
            return [world.multiply(target, world.invert(folded(world.multiply, others)))]
        case Negative():
            return [world.negative(target)]
        case Reciprocal():
            return [world.invert(target)]
        case Power(exponent=exponent):
            return _roots(target, exponent, world)
        case Root():
            return [world.multiply(target, target)]
        case _:
            return []


def _roots(target: Value, exponent: int, world: World) -> list[Value]:
    if abs(exponent) > 2 or exponent == 0:
        return []
    value = target if exponent > 0 else world.invert(target)
    if abs(exponent) == 1:
        return [value]
    root = world.root(value)
    return [root, world.negative(root)]


def lifted(spot: Spot, child: Spot, value: Value, world: World) -> Value:
    """Return a spot's value when a child of it has another value; raises ZeroDivisionError."""
    return combine(spot.node, [value if other is child else other.value for other in spot.spots], world)
