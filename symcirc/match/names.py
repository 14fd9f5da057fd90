"""Names in the order people read them."""

from __future__ import annotations

import re

_KINDS = "RCL"


def natural(name: str) -> tuple[int, tuple[tuple[int, int, str], ...]]:
    """Return a key that sorts R before C before L before the rest, and R2 before R10.

    >>> sorted(["C1", "R10", "k", "R2", "S1_R1"], key=natural)
    ['R2', 'R10', 'S1_R1', 'C1', 'k']
    """
    own = own_name(name)
    kind = _KINDS.find(own[:1]) if is_part(name) else len(_KINDS)
    pieces = re.findall(r"[0-9]+|[^0-9]+", name)
    return kind, tuple((1, int(p), "") if p.isdigit() else (0, 0, p) for p in pieces)


def own_name(name: str) -> str:
    """Return a name without the block it is in.

    >>> own_name("S1_R1")
    'R1'
    """
    return name.rsplit("_", 1)[-1]


def is_part(name: str) -> bool:
    """Tell whether a name looks like that of a resistor, capacitor or inductor.

    >>> is_part("S1_R1"), is_part("Q")
    (True, False)
    """
    return re.fullmatch(rf"[{_KINDS}][0-9A-Za-z]*", own_name(name)) is not None
