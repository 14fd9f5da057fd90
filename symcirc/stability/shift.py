"""The first-order change of omega0 and Q of a stage of order 2 that its real amplifiers make, in symbols.

With P(s) + sum of E_k(s)/A_k in the place of the ideal denominator P, a simple root p moves by
-sum E_k(p) / (A_k(p) P'(p)). E_k/A_k may therefore be replaced by what it leaves modulo P, which is of degree 1: the
disturbed pair of poles is again that of a polynomial of degree 2, whose omega0 and Q need no root to be taken. The
dominant-pole method of A. Budak and D. M. Petrela, "Frequency limitations of active filters using operational
amplifiers", IEEE Trans. Circuit Theory 19 (1972), from memory, exact in the first order.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import sympy
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement

from symcirc.complaints import Complaint
from symcirc.derivation import Derivation
from symcirc.sheet.expression import Expression, names
from symcirc.sheet.model import Device
from symcirc.stability.perturbation import Coefficients, perturbation, real_amplifiers
from symcirc.transfer.common import remove_common_factor


@dataclass(frozen=True)
class FirstOrder:
    """The relative changes of omega0 and Q that one parameter of one amplifier makes, to first order.

    ``parameter`` is the symbol for a gain or a gain-bandwidth product (in Hz); the changes hold one over it. ``q`` is
    None for a stage without damping, whose Q is infinite.
    """

    amplifier: str
    parameter: str
    omega0: sympy.Expr
    q: sympy.Expr | None


def first_order_shifts(ideal: Derivation, real: Derivation, name: str) -> tuple[FirstOrder, ...]:
    """Return what every gain and gain-bandwidth product does to omega0 and Q of an ask of order 2.

    The changes of several parameters add up. Amplifiers of which the ask does not depend are left out.

    Args:
        ideal, real: what ``derive`` gives for one sheet, posed with ideal and with real amplifiers.
        name: an ask whose ideal function has order 2.

    Raises:
        Complaint: the order is not 2, the ask is a loop gain, no amplifier is real, the gain of one depends on s, or
            a mode that the ideal function hides coincides with its own poles.
        KeyError: the answer is too big to be expanded.

    >>> from symcirc.complaints import Source
    >>> from symcirc.derivation import derive, pose, pose_real
    >>> from symcirc.sheet import read_sheet
    >>> text = '''in -- R1 -- a -- C2 -- m -- R3 -- out
    ... a -- C1 -- out
    ... U1 opamp: plus gnd, minus m, drives out
    ... fix C2 = C1
    ... choose U1_gbw
    ... ask H = V_out/V_in'''
    >>> sheet = read_sheet(Source("a.stage", text))
    >>> first_order_shifts(derive(pose(sheet)), derive(pose_real(sheet)), "H")[0].omega0
    -1/(4*pi*C1*R1*U1_gbw)
    """
    ask = ideal.answer(name).ask
    order = ideal.answer(name).function.order
    if order != 2 or not ideal.answer(name).function.denominator[0]:
        raise Complaint(
            ask.place,
            f"`{name}` has order {order}"
            + (" with a pole at 0" if order == 2 else "")
            + ": no omega0 and Q to shift",
            "ask for a function of order 2, or fix all values for the shift of each pole",
        )
    found = perturbation(ideal, real, name)
    modulus = found.ideal
    hidden = _residue(found.hidden, modulus)
    if not _norm(hidden, modulus):
        raise Complaint(
            ask.place,
            f"`{name}` hides a natural mode that coincides with one of its own poles: they do not move in proportion",
            "fix all values, and the exact shift of each pole is given",
        )
    return tuple(
        _shift(device, parameter, _over(_residue(change, modulus), hidden, modulus), modulus)
        for device in real_amplifiers(ideal)
        if device.name in found.first
        for parameter, change in _changes(ideal, device, found.first[device.name])
    )


def _changes(ideal: Derivation, device: Device, change: Coefficients) -> list[tuple[str, Coefficients]]:
    """Return for each parameter the polynomial that stands before one over it: 1/A = 1/gain + s/(2 pi gbw)."""
    found = []
    if "gain" in device.parameters:
        gain = device.parameters["gain"]
        if _depends_on_s(gain, ideal.ties):
            raise Complaint(
                device.place,
                f"the gain of `{device.label}` depends on s, so there is no one number to expand in",
                "give gain and gbw, or fix all values for the shift of each pole",
            )
        found.append((gain, change))
    if "gbw" in device.parameters:
        found.append((device.parameters["gbw"], (change[0].ring.zero, *change)))
    return found


def _depends_on_s(name: str, ties: Mapping[str, Expression]) -> bool:
    waiting = [name]
    while waiting:
        held = waiting.pop()
        if held == "s":
            return True
        waiting += [n.text for n in names(ties[held])] if held in ties else []
    return False


def _shift(device: Device, parameter: str, change: Residue, modulus: Coefficients) -> FirstOrder:
    """Return the relative changes of omega0^2 = a0/a2 and Q^2 = a0 a2/a1^2 as the residue is added to a0 + a1 s."""
    constant, linear, _ = modulus
    scale = sympy.Symbol(parameter) * (2 * sympy.pi if parameter == device.parameters.get("gbw") else 1)
    omega0 = _quotient(change.constant, 2 * constant * change.below)
    if not linear:
        return FirstOrder(device.name, parameter, omega0 / scale, None)
    above = change.constant * linear - 2 * change.linear * constant
    return FirstOrder(
        device.name, parameter, omega0 / scale, _quotient(above, 2 * constant * linear * change.below) / scale
    )


def _quotient(above: PolyElement, below: PolyElement) -> sympy.Expr:
    """Return a quotient in lowest terms; over the rationals with whole coefficients."""
    above, below, _ = remove_common_factor(above, below)
    scale = below.content() if below.ring.domain == QQ else below.LC
    scale = -scale if below.ring.domain == QQ and below.LC < 0 else scale
    return above.quo_ground(scale).as_expr() / below.quo_ground(scale).as_expr()


# polynomials modulo a2 s^2 + a1 s + a0 ---------------------------------------------------------------------------


@dataclass(frozen=True)
class Residue:
    """``(constant + linear s) / below``."""

    constant: PolyElement
    linear: PolyElement
    below: PolyElement


def _residue(polynomial: Coefficients, modulus: Coefficients) -> Residue:
    """Return what a polynomial in s leaves, by Horner's rule."""
    zero = modulus[0].ring.zero
    rest = Residue(zero, zero, zero + 1)
    for coefficient in reversed(polynomial):
        rest = _times_s(rest, modulus)
        rest = Residue(rest.constant + coefficient * rest.below, rest.linear, rest.below)
    return rest


def _times_s(rest: Residue, modulus: Coefficients) -> Residue:
    if not rest.linear:
        return Residue(rest.linear, rest.constant, rest.below)
    a0, a1, a2 = modulus
    return Residue(-a0 * rest.linear, a2 * rest.constant - a1 * rest.linear, a2 * rest.below)


def _norm(rest: Residue, modulus: Coefficients) -> PolyElement:
    """Return what is zero just where a residue has a root in common with the modulus."""
    a0, a1, a2 = modulus
    c, d = rest.constant, rest.linear
    return a2 * c**2 - a1 * c * d + a0 * d**2 if d else c


def _over(rest: Residue, divisor: Residue, modulus: Coefficients) -> Residue:
    """Return a quotient, by the conjugate: (c + d s)(a2 c - a1 d - a2 d s) = the norm."""
    _, a1, a2 = modulus
    c, d = divisor.constant, divisor.linear
    conjugate = (a2 * c - a1 * d, -a2 * d) if d else (c.ring.one, c.ring.zero)
    product = (
        rest.constant * conjugate[0],
        rest.constant * conjugate[1] + rest.linear * conjugate[0],
        rest.linear * conjugate[1],
    )
    reduced = _residue(product, modulus)
    return Residue(
        reduced.constant * divisor.below,
        reduced.linear * divisor.below,
        reduced.below * rest.below * _norm(divisor, modulus),
    )
