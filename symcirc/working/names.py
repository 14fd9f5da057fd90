"""What the names of a working mean, and how names that are run together are split."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

from symcirc.complaints import Complaint, Place, nearest
from symcirc.sheet.expression import Expression
from symcirc.sheet.model import GROUND, NodeCurrent, PartCurrent, Quantity, Sheet, Voltage

#: Names that every working has, and their keys, which no name of a sheet can be: w = s/j, f = s/(2 pi j).
CONSTANTS = {"w": "@w", "omega": "@w", "f": "@f", "j": "@j"}
#: What the first ask's denominator of order 2 gives.
SHAPE = ("w0", "f0", "Q")
#: The longest word that is split; one longer is some name's.
LONGEST_WORD = 200


@dataclass(frozen=True)
class Meaning:
    """What a name stands for.

    ``kind`` is symbol (a part, a parameter), constant (s, pi, j, w, f), ask, shape (w0, f0, Q), quantity (a voltage
    or a current of the circuit) or defined (a name of the working). ``key`` is how trees name it: the name
    itself, and for a defined name one that no other definition has.
    """

    kind: str
    key: str
    quantity: Quantity | None = None


@dataclass
class Lexicon:
    """The names known at one line of a working; it grows as lines define more.

    ``has_shape`` tells whether the first ask's order is 2, so that w0, f0 and Q have a meaning.
    """

    sheet: Sheet
    symbols: frozenset[str]
    has_shape: Callable[[], bool]
    definitions: dict[str, Expression] = field(default_factory=dict)
    _defined: dict[str, str] = field(default_factory=dict)

    def __post_init__(self) -> None:
        self._nodes = frozenset(self.sheet.node_places) | {GROUND}
        self._branches = {part.name for part in self.sheet.parts} | {d.name for d in self.sheet.devices}
        self._asks = {ask.name for ask in self.sheet.asks}
        self._by_key: dict[str, Meaning] = {}

    def meaning(self, name: str) -> Meaning | None:
        """Return what a whole name stands for, or None for a name that is not known.

        A name that the working defines comes first, then those of the sheet, then w0, f0 and Q, then voltages and
        currents, then w, omega, f and j.
        """
        found = self._find(name)
        if found is not None:
            self._by_key[found.key] = found
        return found

    def _find(self, name: str) -> Meaning | None:
        if name in ("s", "pi"):
            return Meaning("constant", name)
        if name in self._defined:
            return Meaning("defined", self._defined[name])
        if name in self.symbols:
            return Meaning("symbol", name)
        if name in self._asks:
            return Meaning("ask", name)
        if name in SHAPE and self.has_shape():
            return Meaning("shape", name)
        quantity = self.circuit_quantity(name)
        if quantity is not None:
            return Meaning("quantity", name, quantity)
        return Meaning("constant", CONSTANTS[name]) if name in CONSTANTS else None

    def circuit_quantity(self, name: str) -> Quantity | None:
        """Return the voltage or current of the circuit that a name such as V_out or I_R1 is by itself."""
        kind, subject = name[:2], name[2:]
        if kind == "V_" and subject in self._nodes:
            return Voltage(subject, GROUND, self.sheet.asks[0].place)
        if kind == "I_" and subject in self._branches:
            return PartCurrent(subject, self.sheet.asks[0].place)
        if kind == "I_" and subject in self._nodes - {GROUND}:
            return NodeCurrent(subject, self.sheet.asks[0].place)
        return None

    def by_key(self, key: str) -> Meaning:
        """Return the meaning of a name in a tree that this lexicon helped to read."""
        return self._by_key[key]

    def is_key(self, text: str) -> bool:
        """Tell whether a tree's name is known."""
        return text in self._by_key

    def define(self, name: str, expression: Expression) -> str:
        """Give a name to an expression, from the next line on; return the key of the definition."""
        key = f"{name}@{len(self.definitions) + 1}"
        self.definitions[key] = expression
        self._defined[name] = key
        self._by_key[key] = Meaning("defined", key)
        return key

    def copy(self) -> Lexicon:
        """Return the names as they are known now; what is looked up in the copy has a meaning here too."""
        copied = Lexicon(
            self.sheet, self.symbols, self.has_shape, dict(self.definitions), dict(self._defined)
        )
        copied._by_key = self._by_key
        return copied

    @property
    def defined(self) -> dict[str, str]:
        """The names that the working defines, each with its key."""
        return dict(self._defined)

    def known(self) -> list[str]:
        """Return all names that could have been meant, for hints."""
        voltages = [f"V_{node}" for node in self.sheet.node_places]
        return [*self.symbols, *self._asks, *self._defined, *voltages, *(f"I_{b}" for b in self._branches)]

    def may_be_followed_by_s(self, name: str) -> bool:
        """Tell whether ``name(s)`` is the quantity and not a product: a voltage, a current, an ask, a defined name."""
        last = self.split(name)[-1] if self._is_splittable(name) else name
        meaning = self.meaning(last)
        return meaning is None or meaning.kind in ("quantity", "ask", "defined")

    def _is_splittable(self, name: str) -> bool:
        return self.meaning(name) is None and len(self._splits(name)) == 1

    def split(self, word: str, place: Place | None = None) -> list[str]:
        """Return the names that a word is: itself where it is known or nothing else, or its one split.

        Raises Complaint where there are several splits and ``place`` is given.
        """
        if self.meaning(word) is not None:
            return [word]
        if len(word) > LONGEST_WORD and place is not None:
            raise Complaint(
                place, f"this word has more than {LONGEST_WORD} characters", "put spaces between names"
            )
        splits = self._splits(word)
        if len(splits) == 1:
            return splits[0]
        if splits and place is not None:
            readings = " or ".join(" ".join(split) for split in splits[:2])
            raise Complaint(place, f"`{word}` can be read as {readings}", "put spaces between the names")
        return [word]

    def _splits(self, word: str) -> list[list[str]]:
        """Return the first two ways to split a word into known names."""
        if len(word) > LONGEST_WORD:
            return []
        ways: list[list[list[str]]] = [[[]], *([] for _ in word)]
        for end in range(1, len(word) + 1):
            for start in range(end):
                if ways[start] and self._may_be_piece(word[start:end]):
                    ways[end] += [[*way, word[start:end]] for way in ways[start]]
            ways[end] = ways[end][:2]
        return ways[-1]

    def _may_be_piece(self, name: str) -> bool:
        meaning = self.meaning(name)
        return meaning is not None and meaning.kind != "shape"

    def unknown(self, name: str, place: Place) -> Complaint:
        """Return the complaint about a name that stands for nothing."""
        hint = nearest(name, self.known())
        if name[:2] in ("V_", "I_") and not hint:
            hint = f"the nodes are {', '.join(list(self.sheet.node_places)[:8])}"
        mend = hint or "define it on a line above, as in: let Va = V_a (numbers are plain, without units)"
        return Complaint(place, f"`{name}` is not a name of the sheet or of a line above", mend)


def symbols_of(sheet: Sheet, ties: Mapping[str, Expression]) -> frozenset[str]:
    """Return the names of parts and parameters that a working may hold, an amplifier's own gain included."""
    return frozenset(sheet.symbols) | frozenset(ties)
