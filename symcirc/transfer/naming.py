"""How a name is set in print: what stands on the line, and what below it.

The rules are those at the head of :mod:`symcirc.transfer.latex`; here they are data, for other languages of print.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from symcirc.transfer.latex import PARAMETERS

#: Names that are set as a Greek letter.
_GREEK = {"pi": ("π", ()), "ω0": ("ω", ("0",)), "Δω0": ("Δω", ("0",))}


@dataclass(frozen=True)
class SetName:
    """``base`` with ``indices`` below it, which commas part; a base of one letter is slanted, a longer one upright."""

    base: str
    indices: tuple[str, ...] = ()


def set_name(name: str) -> SetName:
    """Return how a name is set.

    >>> set_name("S1_R1"), set_name("V_out")
    (SetName(base='R', indices=('S1', '1')), SetName(base='V', indices=('out',)))
    >>> set_name("beta"), set_name("U1_gain")
    (SetName(base='beta', indices=()), SetName(base='gain', indices=('U1',)))
    """
    if name in _GREEK:
        return SetName(*_GREEK[name])
    *blocks, own = name.split("_")
    if all(blocks) and own:
        if blocks[:1] in (["V"], ["I"]):
            return SetName(blocks[0], (*blocks[1:], own))
        if re.fullmatch(r"[RCLZY][A-Za-z0-9]+|[A-HJ-UW-Za-z][0-9]+", own):
            return SetName(own[0], (*blocks, own[1:]))
        if blocks and own in PARAMETERS:
            return SetName(own, tuple(blocks))
    return SetName(name)
