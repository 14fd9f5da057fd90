"""How the denominator of a stage departs from the ideal one, to first order in the amplifiers' 1/A."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import LoopDrive
from symcirc.complaints import Complaint
from symcirc.derivation import Derivation
from symcirc.sheet.expression import Expression, names
from symcirc.sheet.model import Device
from symcirc.transfer.build import build_function
from symcirc.transfer.function import symbols_in
from symcirc.transfer.ties import natural_key

#: Coefficients by ascending power of s.
Coefficients = tuple[PolyElement, ...]


@dataclass(frozen=True)
class Perturbation:
    """The denominator of the real stage, hidden * ideal + sum of first[k] / A_k + terms of higher order in 1/A.

    All coefficients lie in one ring, which holds parts and parameters and neither s nor the gains. ``first`` is by
    amplifier; one that moves nothing is left out. ``hidden`` is what cancels in the ideal function.
    """

    ideal: Coefficients
    hidden: Coefficients
    first: Mapping[str, Coefficients]


def perturbation(ideal: Derivation, real: Derivation, name: str) -> Perturbation:
    """Return how the real amplifiers disturb the denominator of an ask.

    The determinant of a circuit is affine in each A, so that after division by all of them it is affine in each
    1/A: its constant term belongs to the ideal amplifiers.

    Args:
        ideal, real: what ``derive`` gives for one sheet, posed with ideal and with real amplifiers.
        name: an ask, no loop gain.

    Raises:
        Complaint: the ask is a loop gain, or no amplifier has a gain or a gbw.
        KeyError: the answer is too big to be expanded.
    """
    asked = real.answer(name)
    if isinstance(asked.setup.drive, LoopDrive):
        raise Complaint(
            asked.ask.place,
            f"`{name}` is a loop gain, and its poles are not moved by the amplifier whose loop it is",
            "ask for the shift of a transfer function",
        )
    symbols = {gain_symbol(device.name): device.name for device in real_amplifiers(ideal)}
    if not symbols:
        raise Complaint(
            asked.ask.place,
            "no amplifier has a gain or a gbw, so nothing departs from the ideal",
            "add to an amplifier's line: gain 100 dB, or gbw 1 MHz (or: choose U1_gbw)",
        )
    built = build_function(asked.ratio, real.sheet.ties)
    assert built is not None  # the real derivation has been through here with more put in
    own = ideal.answer(name).function
    ring = _joint_ring(own.ring, built.function.ring, set(symbols))
    held = symbols_in(built.function) & set(symbols)

    def part(missing: str) -> PolyElement:
        return _part(built.function.denominator, held - {missing}, set(symbols), ring)

    below = _in_ring(own.denominator, ring)
    hidden = part("").exquo(below)
    first = {symbols[gain]: part(gain) for gain in sorted(held, key=natural_key)}
    return Perturbation(
        _in_s(below), _in_s(hidden), {name: _in_s(change) for name, change in first.items() if change}
    )


def real_amplifiers(ideal: Derivation) -> list[Device]:
    """Return the amplifiers that have a gain or a gbw."""
    return [device for device in ideal.circuit.devices if device.kind == "opamp" and device.parameters]


def needed_ties(symbol: str, ties: Mapping[str, Expression]) -> dict[str, Expression]:
    """Return the ties on which a symbol depends, its own included.

    >>> needed_ties("U1_A", {})
    {}
    """
    needed: dict[str, Expression] = {}
    waiting = [symbol]
    while waiting:
        name = waiting.pop()
        if name in ties and name not in needed:
            needed[name] = ties[name]
            waiting += [inner.text for inner in names(ties[name])]
    return needed


def _joint_ring(one: PolyRing, other: PolyRing, gains: set[str]) -> PolyRing:
    """Return the ring in s and the symbols of both but the gains."""
    names = {str(symbol) for ring in (one, other) for symbol in ring.symbols} - gains
    return PolyRing(["s", *sorted(names, key=natural_key)], other.domain, lex)


def _in_ring(coefficients: Coefficients, ring: PolyRing) -> PolyElement:
    """Return the polynomial in s and the parts that has these coefficients."""
    return _part(coefficients, set(), set(), ring)


def _part(coefficients: Coefficients, wanted: set[str], gains: set[str], ring: PolyRing) -> PolyElement:
    """Return the terms in which just the wanted ones of the gains stand, these left out."""
    places = {str(symbol): k for k, symbol in enumerate(ring.symbols)}
    terms = {}
    for power, coefficient in enumerate(coefficients):
        names = [str(symbol) for symbol in coefficient.ring.symbols]
        for monomial, number in coefficient.terms():
            held = {name: exponent for name, exponent in zip(names, monomial, strict=True) if exponent}
            if held.keys() & gains == wanted:
                exponents = [0] * ring.ngens
                exponents[0] = power
                for symbol in held.keys() - gains:
                    exponents[places[symbol]] = held[symbol]
                terms[tuple(exponents)] = number
    return ring.from_dict(terms)


def _in_s(polynomial: PolyElement) -> Coefficients:
    """Return the coefficients of the powers of s, in the ring without it."""
    ring = polynomial.ring
    inner = PolyRing(ring.symbols[1:] or ["one"], ring.domain, lex)
    powers = [inner.zero for _ in range(polynomial.degree() + 1)]
    for monomial, coefficient in polynomial.terms():
        powers[monomial[0]][monomial[1:] or (0,)] = coefficient
    return tuple(powers)
