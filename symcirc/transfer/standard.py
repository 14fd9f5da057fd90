"""The coefficients of a transfer function, as they came and in standard form, and its gains at both ends.

Standard (monic) form: numerator and denominator divided by the denominator's coefficient at the highest power
of s, so that the denominator begins with a bare power of s.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from sympy.polys.rings import PolyElement

from symcirc.transfer.arrange import form_of
from symcirc.transfer.common import remove_common_factor
from symcirc.transfer.form import ZERO, Form
from symcirc.transfer.function import TransferFunction
from symcirc.transfer.text import text
from symcirc.transfer.ties import Quotient


@dataclass(frozen=True)
class Forms:
    """The coefficients of numerator and denominator as they are written, ascending powers of s."""

    numerator: tuple[Form, ...]
    denominator: tuple[Form, ...]


@dataclass(frozen=True)
class Limit:
    """What a function tends to at 0 or at infinity: ``leading`` times s to the ``power``."""

    leading: Quotient
    power: int
    size: Literal["finite", "zero", "infinite"]


def reduced(above: PolyElement, below: PolyElement) -> Quotient:
    """Return ``above / below`` in lowest terms.

    >>> from sympy.polys.domains import QQ
    >>> from sympy.polys.rings import PolyRing
    >>> r1, r2 = PolyRing(["R1", "R2"], QQ).gens
    >>> reduced(r1*r2, r1*(r1 + r2))
    Quotient(above=R2, below=R1 + R2)
    """
    above, below, _ = remove_common_factor(above, below)
    return Quotient(above, below)


def monic(function: TransferFunction) -> tuple[tuple[Quotient, ...], tuple[Quotient, ...]]:
    """Return numerator and denominator in standard form, ascending; the last of the denominator is 1/1.

    >>> from symcirc.ratio import Ratio
    >>> from symcirc.transfer.build import build_function
    >>> low_pass = Ratio(("R1", "C1"), ({(0, 0): 1},), ({(0, 0): 1}, {(1, 1): 1}))
    >>> monic(build_function(low_pass, {}).function)[0]
    (Quotient(above=1, below=R1*C1),)
    """
    highest = function.denominator[-1]
    return (
        tuple(reduced(c, highest) for c in function.numerator),
        tuple(reduced(c, highest) for c in function.denominator),
    )


def coefficient_forms(function: TransferFunction) -> Forms:
    """Return the function's own coefficients as they are written."""
    one = function.ring.one
    return Forms(
        tuple(form_of(c, one) for c in function.numerator) or (ZERO,),
        tuple(form_of(c, one) for c in function.denominator),
    )


def monic_forms(function: TransferFunction) -> Forms:
    """Return the coefficients in standard form as they are written."""
    highest = function.denominator[-1]
    return Forms(
        tuple(form_of(c, highest) for c in function.numerator) or (ZERO,),
        tuple(form_of(c, highest) for c in function.denominator),
    )


def texts(forms: tuple[Form, ...]) -> list[str]:
    """Return coefficients as plain arithmetic, "0" where there is none.

    >>> from symcirc.transfer.form import ONE
    >>> texts((ZERO, ONE))
    ['0', '1']
    """
    return [text(form) for form in forms]


def limit_at_zero(function: TransferFunction) -> Limit:
    """Return what the function tends to as s goes to 0: the quotient of the lowest coefficients."""
    if not function.numerator:
        return _nothing(function)
    above = next(k for k, c in enumerate(function.numerator) if c)
    below = next(k for k, c in enumerate(function.denominator) if c)
    leading = reduced(function.numerator[above], function.denominator[below])
    power = above - below
    return Limit(leading, power, "finite" if power == 0 else "zero" if power > 0 else "infinite")


def limit_at_infinity(function: TransferFunction) -> Limit:
    """Return what the function tends to as s goes to infinity: the quotient of the highest coefficients."""
    if not function.numerator:
        return _nothing(function)
    leading = reduced(function.numerator[-1], function.denominator[-1])
    power = len(function.numerator) - len(function.denominator)
    return Limit(leading, power, "finite" if power == 0 else "zero" if power < 0 else "infinite")


def _nothing(function: TransferFunction) -> Limit:
    return Limit(Quotient(function.ring.zero, function.ring.one), 0, "zero")
