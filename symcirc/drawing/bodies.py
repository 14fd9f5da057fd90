"""A symbol of the drawing and its pins."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Pin:
    """A terminal of a body: its name there, and the net that it is on."""

    role: str
    net: str


@dataclass(frozen=True)
class Body:
    """A symbol of the drawing.

    ``kind`` is R, C, L, Z, Y, a device's kind, ``voltage`` or ``current`` for a drive, or ``input`` or ``output``
    for an open terminal. ``left`` and ``right`` are the pins of a device, upper before lower; a two-terminal
    body has one in each: the first and the second node of its chain, or a drive's plus and minus.
    """

    name: str
    label: str
    value: str
    kind: str
    left: tuple[Pin, ...]
    right: tuple[Pin, ...]

    @property
    def pins(self) -> tuple[Pin, ...]:
        """All pins, those of the left side first."""
        return self.left + self.right

    @property
    def is_device(self) -> bool:
        """Whether it is a part with more than two terminals."""
        return len(self.pins) > 2

    @property
    def is_terminal(self) -> bool:
        """Whether it is an open terminal, which is no part of the circuit."""
        return len(self.pins) == 1

    @property
    def is_drive(self) -> bool:
        """Whether it is an ideal source."""
        return self.kind in ("voltage", "current")
