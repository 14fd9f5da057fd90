"""Quadratic steps: when a root is real and positive, and when a polynomial in it is positive.

A polynomial in a root x of a x² + b x + c = 0 comes to u x + v, and with x = (-b ± r)/2a, r² = b² - 4ac, to
(P ± u r)/2a, P = 2av - ub. Two numbers P and ±u r of unlike signs are compared by their squares:
P² - u² r² = 4a(av² - buv + cu²).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from sympy.polys.rings import PolyElement

from symcirc.match.claims import Claim, implied_sign
from symcirc.match.elimination import pseudo_remainder
from symcirc.match.forms import Form, deflated
from symcirc.match.quantities import Quantities, by_powers, holds
from symcirc.match.work import Work


@dataclass(frozen=True)
class Quadratic:
    """A quadratic form and which of its roots: ``side`` is the sign of the square root, 0 for a double root.

    The unknown x of the equation is the form's unknown to the form's power. Where b is zero, the root is
    ``side`` times the square root of -c/a.
    """

    form: Form
    side: int

    def root_claims(self, known: Sequence[Claim], quantities: Quantities) -> list[Claim] | None:
        """Return claims that hold just where the root is positive, given that it is real; as for ``positivity``."""
        c, b, a = self.form.coefficients
        if not b:
            return [Claim((-c, a))]
        return self._compared(quantities.ring.zero, quantities.ring.one, self.side, [], known, quantities)

    def positivity(
        self, factors: Sequence[PolyElement], known: Sequence[Claim], quantities: Quantities, work: Work
    ) -> list[Claim] | None:
        """Return claims, free of the root, that hold just where a product is positive.

        Args:
            factors: of the product, polynomials in the root; at most one may hold it with an open sign.
            known: claims that are met, each of one factor, the reality of the root among them.

        Returns:
            The claims; None where no such claims were found.
        """
        outer: list[PolyElement] = []
        inner: list[PolyElement] = []
        for factor in factors:
            open_sign = holds(factor, self.form.unknown) and quantities.sign(factor) is None
            (inner if open_sign else outer).append(factor)
        if not inner:
            return [Claim(tuple(outer))]
        polynomial = deflated(inner[0], self.form)
        _, b, a = self.form.coefficients
        of_a = _sign(a, known, quantities)
        if len(inner) > 1 or polynomial is None or (not b and of_a is None):
            return None
        equation = deflated(self.form.step.equation, self.form)
        assert equation is not None, "the equation holds powers of the form's power only"
        unknown, degree = self.form.unknown, polynomial.degree(self.form.unknown)
        rest = pseudo_remainder(polynomial, equation, unknown, work)
        v, u = [*by_powers(rest, unknown), quantities.ring.zero][:2]
        outer += [by_powers(equation, unknown)[2]] * max(degree - 1, 0)  # the remainder came times its powers
        side = self.side if b else self.side * (of_a or 1)  # r in (-b ± r)/2a is |2a| times the root of -c/a
        return self._compared(v, u, side, outer, known, quantities)

    def _compared(
        self,
        v: PolyElement,
        u: PolyElement,
        side: int,
        outer: list[PolyElement],
        known: Sequence[Claim],
        quantities: Quantities,
    ) -> list[Claim] | None:
        """Return claims for ``outer * (u x + v) > 0``, the sign of r in x being ``side``."""

        def sign(polynomial: PolyElement) -> int | None:
            return _sign(polynomial, known, quantities)

        c, b, a = self.form.coefficients
        p, norm = 2 * a * v - u * b, a * v**2 - b * u * v + c * u**2
        u, outer = u * side, [*outer, a]
        of_p, of_u, of_a, of_norm = sign(p), sign(u), sign(a), sign(norm)
        if of_p is not None and of_u is not None:
            if of_p * of_u >= 0:
                return [Claim((*outer, p if of_p else u))]
            return [Claim((*outer, a, norm, quantities.ring(of_p)))]
        if of_a is not None and of_norm is not None and of_a * of_norm:
            return [Claim((*outer, p if of_a * of_norm > 0 else u))]
        if of_u is not None and of_u < 0 and all(sign(factor) == 1 for factor in outer):
            return [Claim((p,)), Claim((a, norm))]
        return None


def _sign(polynomial: PolyElement, known: Sequence[Claim], quantities: Quantities) -> int | None:
    found = quantities.sign(polynomial)
    return implied_sign(polynomial, known, quantities) if found is None else found
