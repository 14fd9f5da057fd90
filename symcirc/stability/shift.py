"""The first-order change of omega0 and Q of a stage of order 2 that its real amplifiers make, in symbols.

With P(s) + sum of E_k(s)/A_k in the place of the ideal denominator P, a simple root p moves by
-sum E_k(p) / (A_k(p) P'(p)). E_k/A_k may therefore be replaced by what it leaves modulo P, which is of degree 1: the
disturbed pair of poles is again that of a polynomial of degree 2, whose omega0 and Q need no root to be taken. The
dominant-pole method of A. Budak and D. M. Petrela, "Frequency limitations of active filters using operational
amplifiers", IEEE Trans. Circuit Theory 19 (1972), from memory, exact in the first order.
"""

from __future__ import annotations

from dataclasses import dataclass

import sympy
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement

from symcirc.complaints import Complaint
from symcirc.derivation import Derivation
from symcirc.sheet.expression import names
from symcirc.sheet.model import Device
from symcirc.stability.perturbation import Coefficients, needed_ties, perturbation, real_amplifiers
from symcirc.stability.residue import Residue, norm, over, residue
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
    found = perturbation(ideal, real, name)
    ask, modulus = ideal.answer(name).ask, found.ideal
    if len(modulus) != 3 or not modulus[0]:
        order = f"order {len(modulus) - 1}" + ("" if modulus[0] else " with a pole at 0")
        raise Complaint(
            ask.place,
            f"`{name}` has {order}: there is no omega0 and no Q to shift",
            "ask for a function of order 2, or fix all values for the shift of each pole",
        )
    hidden = residue(found.hidden, modulus)
    if not norm(hidden, modulus):
        raise Complaint(
            ask.place,
            f"`{name}` hides a natural mode that coincides with one of its own poles: they do not move in proportion",
            "fix all values, and the exact shift of each pole is given",
        )
    return tuple(
        _shift(device, parameter, over(residue(change, modulus), hidden, modulus), modulus)
        for device in real_amplifiers(ideal)
        if device.name in found.first
        for parameter, change in _changes(ideal, device, found.first[device.name])
    )


def _changes(ideal: Derivation, device: Device, change: Coefficients) -> list[tuple[str, Coefficients]]:
    """Return for each parameter the polynomial that stands before one over it: 1/A = 1/gain + s/(2 pi gbw)."""
    found = []
    if "gain" in device.parameters:
        gain = device.parameters["gain"]
        ties = needed_ties(gain, ideal.ties)
        if any(name.text == "s" for tie in ties.values() for name in names(tie)):
            raise Complaint(
                device.place,
                f"the gain of `{device.label}` depends on s, so there is no one number to expand in",
                "give gain and gbw, or fix all values for the shift of each pole",
            )
        found.append((gain, change))
    if "gbw" in device.parameters:
        found.append((device.parameters["gbw"], (change[0].ring.zero, *change)))
    return found


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
    scale = below.LC
    if below.ring.domain == QQ:
        scale = below.content() if below.LC > 0 else -below.content()
    symbols = [sympy.pi if str(symbol) == "pi" else symbol for symbol in below.ring.symbols]
    return above.quo_ground(scale).as_expr(*symbols) / below.quo_ground(scale).as_expr(*symbols)
