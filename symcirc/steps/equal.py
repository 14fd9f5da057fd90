"""Which voltages the rules of amplifiers make equal."""

from __future__ import annotations

from collections.abc import Collection


class Equal:
    """Voltages that are equal, and the one name by which each is written: an asked one where there is one."""

    def __init__(self, asked: Collection[str]) -> None:
        self.asked = asked
        self._names: dict[str, str | None] = {}

    def of(self, name: str) -> str | None:
        """Return the name by which an unknown is written, None for 0."""
        found: str | None = name
        while found is not None and found in self._names:
            found = self._names[found]
        return found

    def join(self, first: str, second: str | None) -> None:
        """Note that two voltages are equal, or that the first is 0."""
        one, two = self.of(first), self.of(second) if second else None
        if one is None or (two is not None and one in self.asked and two not in self.asked):
            one, two = two, one
        assert one is not None  # two equal voltages are not said to be equal once more
        self._names[one] = two
