"""What kind of response a transfer function is, by the shape of its numerator, and its gain in symbols."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from symcirc.transfer.arrange import form_of
from symcirc.transfer.function import TransferFunction
from symcirc.transfer.second_order import first_order, second_order
from symcirc.transfer.signs import sign_of
from symcirc.transfer.standard import limit_at_infinity, limit_at_zero, reduced
from symcirc.transfer.text import text
from symcirc.transfer.ties import Quotient

#: Where a gain is taken.
Where = Literal["0", "infinity", "omega0"]


@dataclass(frozen=True)
class Gain:
    """The value of the function, sign included, at s = 0, at infinity, or at s = j w0."""

    where: Where
    value: Quotient


@dataclass(frozen=True)
class Character:
    """The kind of a response, its gains, and its zeros in words.

    ``kind`` is one of: zero, constant, integrator, differentiator, low-pass, high-pass, band-pass, band-stop
    (the zeros on the frequency axis at w0), low-pass notch (above w0), high-pass notch (below w0), notch (on
    the axis, on which side of w0 is not known), all-pass, mixed (all else).
    """

    kind: str
    gains: tuple[Gain, ...]
    zeros: str


def character(function: TransferFunction, positive: set[str]) -> Character:
    """Return the kind, the gains and the zeros of a function.

    ``positive`` names the symbols known to be positive. A second-order band-pass has its gain at w0; a notch
    has two gains, at 0 and at infinity; what is mixed has those of the two that are finite and not zero.

    >>> from symcirc.ratio import Ratio
    >>> from symcirc.transfer.build import build_function
    >>> high_pass = Ratio(("R1", "C1"), ({}, {(1, 1): 1}), ({(0, 0): 1}, {(1, 1): 1}))
    >>> found = character(build_function(high_pass, {}).function, {"R1", "C1"})
    >>> found.kind, found.gains[0].where, found.zeros
    ('high-pass', 'infinity', '1 zero at s = 0')
    """
    kind = _kind(function, positive)
    return Character(kind, _gains(function, kind), zeros_in_words(function, positive))


def _kind(function: TransferFunction, positive: set[str]) -> str:
    powers = [k for k, c in enumerate(function.numerator) if c]
    order = function.order
    if not powers:
        return "zero"
    if _is_all_pass(function):
        return "all-pass"
    if len(powers) == 1:
        return _one_power(function, powers[0])
    if order == 2 and powers == [0, 2]:
        return _notch(function, positive)
    return "mixed"


def _one_power(function: TransferFunction, power: int) -> str:
    """Name a function of which the numerator is one power of s."""
    order = function.order
    pole_at_zero = not function.denominator[0]
    if order == 0:
        return {0: "constant", 1: "differentiator"}.get(power, "mixed")
    if pole_at_zero:
        return "integrator" if order == 1 and power == 0 else "mixed"
    if power in (0, order):
        return "low-pass" if power == 0 else "high-pass"
    return "band-pass" if power < order else "mixed"


def _is_all_pass(function: TransferFunction) -> bool:
    """Tell whether the numerator is a constant times the denominator at -s."""
    above, below = function.numerator, function.denominator
    if len(above) != len(below) or function.order == 0:
        return False
    mirror = [-c if (function.order - k) % 2 else c for k, c in enumerate(below)]
    return all(a * mirror[-1] == m * above[-1] for a, m in zip(above, mirror, strict=True))


def _notch(function: TransferFunction, positive: set[str]) -> str:
    """Name b2 s^2 + b0 over a2 s^2 + a1 s + a0 by where its zeros lie: at s^2 = -b0/b2."""
    b0, _, b2 = function.numerator
    a0, _, a2 = function.denominator
    if not a0:
        return "mixed"
    difference = b0 * a2 - b2 * a0
    if not difference:
        return "band-stop"
    signs = [sign_of(p, positive) for p in (b0, b2, a0, a2, difference)]
    if signs[0] * signs[1] <= 0:
        return "mixed"  # zeros on the real axis, or it is not known
    if not all(signs):
        return "notch"
    above = signs[4] * signs[1] * signs[3] > 0
    return "low-pass notch" if above else "high-pass notch"


def _gains(function: TransferFunction, kind: str) -> tuple[Gain, ...]:
    if kind == "band-pass":
        if function.order != 2 or not function.denominator[1]:
            return ()
        return (Gain("omega0", reduced(function.numerator[1], function.denominator[1])),)
    at_zero, at_infinity = limit_at_zero(function), limit_at_infinity(function)
    gains = (
        *((Gain("0", at_zero.leading),) if at_zero.size == "finite" else ()),
        *((Gain("infinity", at_infinity.leading),) if at_infinity.size == "finite" else ()),
    )
    return gains[:1] if kind in ("constant", "band-stop") else gains


def zeros_in_words(function: TransferFunction, positive: set[str]) -> str:
    """Return where the zeros lie, in words and formulas.

    >>> from sympy.polys.domains import QQ
    >>> from sympy.polys.rings import PolyRing
    >>> ring = PolyRing(["R1", "C1"], QQ)
    >>> zeros_in_words(TransferFunction(ring, (ring.zero, ring.one, ring.gens[1]), (ring.one,)), {"C1"})
    '1 zero at s = 0, 1 zero at s = -1/C1'
    """
    if not function.numerator:
        return "none"
    at_zero = next(k for k, c in enumerate(function.numerator) if c)
    rest = function.numerator[at_zero:]
    words = [f"{at_zero} {'zero' if at_zero == 1 else 'zeros'} at s = 0"] if at_zero else []
    one, two = first_order(rest), second_order(rest, positive)
    if one is not None:
        words.append(f"1 zero at s = {text(form_of(-one.omega.above, one.omega.below))}")
    elif two is not None:
        quality = "on the frequency axis" if two.q is None else f"with Q = {text(two.q)}"
        words.append(f"2 zeros at w0 = {text(two.omega0)} {quality}")
    elif len(rest) > 1:
        words.append(f"{len(rest) - 1} zeros elsewhere")
    return ", ".join(words) or "none"
