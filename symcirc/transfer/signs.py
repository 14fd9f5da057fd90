"""What the signs of the denominator's coefficients tell whatever the parts' values are."""

from __future__ import annotations

from collections.abc import Mapping

from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement

from symcirc.complaints import Remark
from symcirc.sheet.model import Ask, Symbol
from symcirc.transfer.function import TransferFunction


def sign_of(coefficient: PolyElement, positive: set[str]) -> int:
    """Return +1 or -1 where a polynomial has that sign whatever the positive symbols' values are, else 0."""
    ring = coefficient.ring
    if ring.domain != QQ:
        return 0  # the signs of numbers with roots are not looked at
    signs = {1 if c > 0 else -1 for c in coefficient.values()}
    unknown = [k for k, symbol in enumerate(ring.symbols) if str(symbol) not in positive]
    if len(signs) != 1 or any(monomial[k] % 2 for monomial in coefficient for k in unknown):
        return 0
    return signs.pop()


def positive_names(symbols: Mapping[str, Symbol]) -> set[str]:
    """Return the names whose values cannot be negative: parts, and what is measured in ohm, F, H, S or Hz."""
    return {name for name, s in symbols.items() if s.role == "part" or s.dimension not in (None, "ratio")}


def sign_remarks(function: TransferFunction, symbols: Mapping[str, Symbol], ask: Ask) -> list[Remark]:
    """Return a remark where a coefficient of the denominator has the wrong sign for every part value.

    All coefficients of a stable denominator have one sign (Stodola's condition).
    """
    positive = {"pi"} | positive_names(symbols)
    signs = [sign_of(c, positive) if c else 0 for c in function.denominator]
    last = next((sign for sign in reversed(signs) if sign), 0)
    wrong = [power for power, sign in enumerate(signs) if sign == -last and sign]
    if not wrong:
        return []
    powers = ", ".join(f"s^{power}" for power in wrong)
    return [
        Remark(
            ask.place,
            f"the denominator of `{ask.name}` has the wrong sign at {powers} for every part value: it is unstable",
        )
    ]
