"""The natural frequency and the quality factor of a second-order function, the pole of a first-order one.

With the denominator a2 s^2 + a1 s + a0 the natural frequency is w0 = sqrt(a0/a2) and the quality factor is
Q = w0 a2/a1.
"""

from __future__ import annotations

from dataclasses import dataclass

from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.arrange import form_of
from symcirc.transfer.form import Form
from symcirc.transfer.signs import sign_of
from symcirc.transfer.square_root import square_root
from symcirc.transfer.standard import reduced
from symcirc.transfer.ties import Quotient


@dataclass(frozen=True)
class SecondOrder:
    """w0 in rad/s, f0 = w0/(2 pi) in Hz and Q as they are written, and what they come from: (a0, a1, a2).

    Q and its square are None where there is no damping at all (a1 = 0).
    """

    coefficients: tuple[PolyElement, PolyElement, PolyElement]
    omega0: Form
    f0: Form
    q: Form | None

    @property
    def omega0_squared(self) -> Quotient:
        """w0^2 = a0/a2 in lowest terms."""
        a0, _, a2 = self.coefficients
        return reduced(a0, a2)

    @property
    def q_squared(self) -> Quotient | None:
        """Q^2 = a0 a2/a1^2 in lowest terms."""
        a0, a1, a2 = self.coefficients
        return reduced(a0 * a2, a1**2) if a1 else None


@dataclass(frozen=True)
class FirstOrder:
    """A pole's frequency in rad/s, a quotient and as it is written, and in Hz; negative where unstable."""

    omega: Quotient
    omega_form: Form
    f_form: Form


def second_order(coefficients: tuple[PolyElement, ...], positive: set[str]) -> SecondOrder | None:
    """Return w0, f0 and Q of three ascending coefficients, of a denominator or of a numerator.

    ``positive`` names the symbols whose values are positive. None where a0 or a2 is zero, or their quotient
    is negative for every part value: there is no natural frequency then.

    >>> from sympy.polys.domains import QQ
    >>> from symcirc.transfer.text import text
    >>> r1, r2, c1, c2 = PolyRing(["R1", "R2", "C1", "C2"], QQ).gens
    >>> found = second_order((r1.ring.one, c2*(r1 + r2), r1*r2*c1*c2), {"R1", "R2", "C1", "C2"})
    >>> text(found.omega0), text(found.q)
    ('1/sqrt(R1*R2*C1*C2)', 'sqrt(R1*R2*C1*C2)/(C2*(R1 + R2))')
    """
    if len(coefficients) != 3:
        return None
    a0, a1, a2 = coefficients
    if not a0 or sign_of(a0, positive) * sign_of(a2, positive) < 0:
        return None
    positive = positive | {"pi"}
    one = a0.ring.one
    square = reduced(a0, a2)
    omega0 = square_root(square, Quotient(one, one), positive)
    f0 = square_root(_with_pi(square), _over_two_pi(Quotient(one, one)), positive)
    q = square_root(square, reduced(a2, a1), positive) if a1 else None
    return SecondOrder((a0, a1, a2), omega0, f0, q)


def first_order(coefficients: tuple[PolyElement, ...]) -> FirstOrder | None:
    """Return the pole's (or the zero's) frequency a0/a1 of two ascending coefficients; None where a0 is zero.

    >>> from sympy.polys.domains import QQ
    >>> from symcirc.transfer.text import text
    >>> r1, c1 = PolyRing(["R1", "C1"], QQ).gens
    >>> text(first_order((r1.ring.one, r1*c1)).f_form)
    '1/(2*pi*R1*C1)'
    """
    if len(coefficients) != 2 or not coefficients[0]:
        return None
    omega = reduced(*coefficients)
    in_hertz = _over_two_pi(omega)
    return FirstOrder(omega, form_of(omega.above, omega.below), form_of(in_hertz.above, in_hertz.below))


def _with_pi(quotient: Quotient) -> Quotient:
    """Return a quotient in a ring that has ``pi`` among its generators."""
    ring = quotient.above.ring
    names = [str(symbol) for symbol in ring.symbols]
    if "pi" in names:
        return quotient
    larger = PolyRing([*names, "pi"], ring.domain, ring.order)

    def lifted(polynomial: PolyElement) -> PolyElement:
        return larger.from_dict({(*m, 0): c for m, c in polynomial.items()})

    return Quotient(lifted(quotient.above), lifted(quotient.below))


def _over_two_pi(quotient: Quotient) -> Quotient:
    quotient = _with_pi(quotient)
    pi = next(g for g in quotient.above.ring.gens if str(g) == "pi")
    return reduced(quotient.above, 2 * pi * quotient.below)
