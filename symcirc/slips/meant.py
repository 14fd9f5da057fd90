"""What the author of a working has at hand at one of its lines: names, voltages, currents, brackets."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

from symcirc.derivation import Posed
from symcirc.sheet.expression import Expression, Name, Negative, Product, Reciprocal, Sum, names, nodes
from symcirc.sheet.model import GROUND
from symcirc.slips.edits import NEW
from symcirc.slips.points import Points
from symcirc.slips.vocabulary import Vocabulary
from symcirc.working.records import Equation


@dataclass(frozen=True)
class Meant:
    """An equation, the equations ``above`` it, the nearest first, and the points it is valued at."""

    posed: Posed
    equation: Equation
    above: tuple[Equation, ...]
    points: Points

    def vocabulary(self) -> Vocabulary:
        """Return all that a mend may be made of."""
        vocabulary = Vocabulary(self.points, tuple(self._names()), frozenset(self._used), self._distant())
        vocabulary.carry(self._carriers())
        vocabulary.carry_currents(self._currents())
        return vocabulary

    @cached_property
    def _used(self) -> dict[str, None]:
        """The names in the line and above it, in this order."""
        equations = (self.equation, *self.above)
        return {
            name.text: None for one in equations for side in (one.left, one.right) for name in names(side)
        }

    def _names(self) -> Iterator[Name]:
        """Yield the names that can have been meant: the line's first, then the working's, then the sheet's."""
        lexicon = self.equation.lexicon
        own = {name.text for side in (self.equation.left, self.equation.right) for name in names(side)}
        current = set(lexicon.defined.values())
        known = [meaning.key for text in (*lexicon.known(), "s", "pi") if (meaning := lexicon.meaning(text))]
        for key in dict.fromkeys([*self._used, *lexicon.defined.values(), *known]):
            kind = lexicon.by_key(key).kind
            stale = kind == "defined" and key not in current
            if not stale and (kind != "constant" or key in own or key in ("s", "pi")):
                yield Name(key, NEW)

    @cached_property
    def _voltages(self) -> dict[str, Name | None]:
        """The name that each node's voltage goes by here; None for nodes that are held at 0 V."""
        voltages: dict[str, Name | None] = {GROUND: None}
        for name in self._names():
            node = self._node_of(name.text)
            if node is not None and node not in voltages:
                voltages[node] = name if self.points.base.of_name(name.text) != 0 else None
        return voltages

    def _distant(self) -> frozenset[str]:
        """Return the voltages of nodes that none of the line's parts touches; none where it names no part."""
        own = {name.text for side in (self.equation.left, self.equation.right) for name in names(side)}
        near = {
            node
            for part in self.posed.circuit.parts
            if part.name in own
            for node in (part.first, part.second)
        }
        nodes_of = ((name.text, self._node_of(name.text)) for name in self._names())
        return frozenset(text for text, node in nodes_of if near and node is not None and node not in near)

    def _node_of(self, key: str) -> str | None:
        """Return the node whose voltage a name is, by itself or by its definition."""
        lexicon = self.equation.lexicon
        while (meaning := lexicon.by_key(key)).kind == "defined":
            value = lexicon.definitions[key]
            if not isinstance(value, Name):
                return None
            key = value.text
        return key[2:] if meaning.kind == "quantity" and key.startswith("V_") else None

    def _carriers(self) -> Iterator[tuple[Expression, float]]:
        """Yield what a lost term or factor may hold besides powers of parts, and what it costs to believe in it."""
        equation = self.equation
        own = {name.text for side in (equation.left, equation.right) for name in names(side)}
        for name in self._names():
            kind, node = equation.lexicon.by_key(name.text).kind, self._node_of(name.text)
            shown = None if node is None else self._voltages.get(node)
            if node is not None and (shown is None or shown.text != name.text):
                continue  # it goes by another name here
            if (
                kind == "defined"
                or kind == "shape"
                or (kind == "quantity" and (node or name.text in self._used))
            ):
                yield name, (0.2 if name.text in own else 0.4) + (0.0 if kind == "quantity" else 0.4)
        for part in self.posed.circuit.parts:
            one, other = self._voltages.get(part.first), self._voltages.get(part.second)
            if one is not None and other is not None:
                yield Sum((one, Negative(other, NEW)), NEW), 0.3
        for side in (equation.left, equation.right):
            yield from ((node, 0.5) for node in nodes(side) if isinstance(node, Sum))

    def _currents(self) -> Iterator[tuple[str, Expression]]:
        """Yield the current through every part, from either of its nodes to the other."""
        for part in self.posed.circuit.parts:
            ends = [
                name for node in (part.first, part.second) if (name := self._voltages.get(node)) is not None
            ]
            name = Name(part.name, NEW)
            for k, end in enumerate(ends):
                others = [Negative(other, NEW) for other in ends[k + 1 :] + ends[:k]]
                volts: Expression = Sum((end, *others), NEW) if others else end
                yield part.name, _current(part.kind, name, volts)


def _current(kind: str, name: Name, volts: Expression) -> Expression:
    s = Name("s", NEW)
    match kind:
        case "C":
            return Product((s, name, volts), NEW)
        case "Y":
            return Product((name, volts), NEW)
        case "L":
            return Product((volts, Reciprocal(Product((s, name), NEW), NEW)), NEW)
        case _:
            return Product((volts, Reciprocal(name, NEW)), NEW)
