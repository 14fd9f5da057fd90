"""What is kept of a published stage."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import sympy

s, w0, Q, G, k, n = sympy.symbols("s w0 Q G k n")
R1, R2, R3, R4, R5, R6, R7, R8, R9 = sympy.symbols("R1:10")
C1, C2, C3, C4, C5, C6 = sympy.symbols("C1:7")
L1, L2, L3 = sympy.symbols("L1:4")
Z1, Z2, Z3, Z4, Z5 = sympy.symbols("Z1:6")


@dataclass(frozen=True)
class Stage:
    """A stage from the literature and what the literature says of it.

    ``ratios`` are the published functions by the sheet's ask; ``omega0`` and ``q`` those of the first ask's
    denominator. ``design`` are published formulas for parts in terms of the other symbols, and ``designed`` is what
    the first ask then becomes. All are sympy expressions in plain symbols named as the sheet names them.
    """

    id: str
    source: str
    sheet: str
    ratios: Mapping[str, sympy.Expr]
    omega0: sympy.Expr | None = None
    q: sympy.Expr | None = None
    design: Mapping[sympy.Symbol, sympy.Expr] = field(default_factory=dict)
    designed: sympy.Expr | None = None
