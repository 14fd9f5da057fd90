"""From a ratio as it comes out of the circuit to the transfer function: ties in, common factors out, one sign."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.ratio import Ratio
from symcirc.sheet.expression import Expression
from symcirc.transfer.common import remove_common_factor
from symcirc.transfer.function import TransferFunction
from symcirc.transfer.ties import put_in


@dataclass(frozen=True)
class Built:
    """A transfer function, and the factor in s that cancelled: a natural mode of the circuit that is hidden.

    ``hidden`` holds that factor's coefficients, ascending; it is empty where nothing with s cancelled.
    """

    function: TransferFunction
    hidden: tuple[PolyElement, ...]


def build_function(ratio: Ratio, ties: Mapping[str, Expression]) -> Built | None:
    """Return the transfer function of a ratio, or None where the ties make its denominator zero.

    The denominator's coefficient at the highest power of s begins with a positive number, and all coefficients
    are whole numbers without a common divisor (over the rationals).

    >>> low_pass = Ratio(("R1", "C1"), ({(0, 0): -1},), ({(0, 0): -1}, {(1, 1): -1}))
    >>> build_function(low_pass, {}).function.denominator
    (1, R1*C1)
    """
    quotient = put_in(ratio, ties)
    if not quotient.below:
        return None
    above, below, factor = remove_common_factor(quotient.above, quotient.below)
    above, below = _canonical(above, below)
    ring = below.ring
    inner = (
        PolyRing(ring.symbols[1:], ring.domain, lex)
        if ring.ngens > 1
        else PolyRing(["one"], ring.domain, lex)
    )
    function = TransferFunction(inner, _in_s(above, inner), _in_s(below, inner))
    hidden = _in_s(factor, inner)
    monomial_in_s = sum(1 for c in hidden if c) <= 1
    return Built(function, () if monomial_in_s or not above else hidden)


def _canonical(above: PolyElement, below: PolyElement) -> tuple[PolyElement, PolyElement]:
    ring = below.ring
    if ring.domain == QQ:
        scale = _content(above, below)
        above, below = above.mul_ground(1 / scale), below.mul_ground(1 / scale)
        negative = below.LC < 0
    else:
        scale = ring.domain.one / below.LC
        above, below = above.mul_ground(scale), below.mul_ground(scale)
        negative = False
    return (-above, -below) if negative else (above, below)


def _content(above: PolyElement, below: PolyElement) -> Any:
    content = below.content()
    return QQ.gcd(content, above.content()) if above else content


def _in_s(polynomial: PolyElement, inner: PolyRing) -> tuple[PolyElement, ...]:
    """Return the coefficients of the powers of s (the first generator), ascending."""
    powers = [inner.zero for _ in range(max((m[0] for m in polynomial), default=-1) + 1)]
    for monomial, coefficient in polynomial.terms():
        powers[monomial[0]][monomial[1:] or (0,)] = coefficient
    return tuple(powers)
