"""What a derivation by hand is made of."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from symcirc.transfer.form import Form

#: What a step says: the rule of an ideal amplifier; the law of another device; a node's current law; what an asked
#: current is; what is dead under this ask; what the sheet ties; an unknown solved for; the ratio; its standard form.
Kind = Literal["amplifier", "device", "law", "current", "dead", "tie", "eliminated", "ratio", "standard form"]
#: The kinds that state a fact of the circuit; lines of the other kinds follow from those above them.
STATED: frozenset[Kind] = frozenset({"amplifier", "device", "law", "current", "dead"})


@dataclass(frozen=True)
class Step:
    """One line of a derivation: ``left = right``, and in ``words`` what it says and why it comes next."""

    kind: Kind
    words: str
    left: Form
    right: Form


@dataclass(frozen=True)
class Steps:
    """The derivation of one ask, line by line.

    ``under`` tells that the lines stand under this ask's own drives, and have to say so: the sheet has other asks.
    """

    ask: str
    under: bool
    steps: tuple[Step, ...]
