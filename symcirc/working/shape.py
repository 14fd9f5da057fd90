"""w0, f0 and Q of a second-order denominator a2 s^2 + a1 s + a0, as residues and as numbers of many digits.

w0 = sqrt(a0/a2), f0 = w0/(2 pi), Q = w0 a2/a1.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping

import mpmath
from sympy.polys.rings import PolyElement

from symcirc.transfer.function import TransferFunction
from symcirc.working import measured
from symcirc.working.field import PRIME, inverse, of_exact, power, product
from symcirc.working.measured import DIGITS, Measured


def shape_residue(
    function: TransferFunction, name: str, known: Mapping[str, int], root: Callable[[int], int]
) -> int:
    """Return w0, f0 or Q in the field, with the root that ``root`` chooses."""

    def coefficient(polynomial: PolyElement) -> int:
        total = 0
        for monomial, number in polynomial.terms():
            powers = [power(known[symbols[k]], e) for k, e in enumerate(monomial) if e]
            total += product([of_exact(function.ring.domain.to_sympy(number), known["pi"]), *powers])
        return total % PRIME

    symbols = [str(symbol) for symbol in function.ring.symbols]
    a0, a1, a2 = map(coefficient, function.denominator)
    omega0 = root(product([a0, inverse(a2)]))
    if name == "w0":
        return omega0
    return product([omega0, inverse(2 * known["pi"])]) if name == "f0" else product([omega0, a2, inverse(a1)])


def shape_number(function: TransferFunction, name: str, known: Mapping[str, Measured]) -> Measured:
    """Return w0, f0 or Q as a number of many digits, the root being the positive one."""

    def coefficient(polynomial: PolyElement) -> Measured:
        terms = []
        for monomial, number in polynomial.terms():
            plain = function.ring.domain.to_sympy(number).evalf(DIGITS)
            powers = [measured.power(known[symbols[k]], e) for k, e in enumerate(monomial) if e]
            terms.append(measured.product([measured.exact(mpmath.mpf(plain)), *powers]))
        return Measured(sum(t.value for t in terms), sum(t.error for t in terms))

    symbols = [str(symbol) for symbol in function.ring.symbols]
    a0, a1, a2 = map(coefficient, function.denominator)
    omega0 = measured.root(measured.product([a0, measured.reciprocal(a2)]))
    if name == "w0":
        return omega0
    if name == "f0":
        return measured.product([omega0, measured.reciprocal(measured.exact(2 * mpmath.pi))])
    return measured.product([omega0, a2, measured.reciprocal(a1)])
