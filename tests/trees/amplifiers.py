"""Circuits and set-ups with real amplifiers: finite gain, and the loop around one of them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from symcirc.circuit.model import Circuit, LoopDrive, Setup
from symcirc.complaints import Place
from symcirc.sheet.model import GROUND, Voltage


def with_finite_gain(circuit: Circuit, gains: Mapping[str, str]) -> Circuit:
    """Return the circuit with amplifiers of finite gain.

    Args:
        circuit: with ideal amplifiers (kind opamp).
        gains: for every amplifier that is no longer ideal the symbol of its gain A(s).

    Returns:
        The circuit in which these amplifiers obey V_drives = A (V_plus - V_minus). Numerator and denominator
        are then polynomials in every A, and their leading coefficients are those of the ideal amplifier.
    """
    devices = tuple(
        replace(device, kind="amplifier", parameters={**device.parameters, "gain": gains[device.name]})
        if device.name in gains
        else device
        for device in circuit.devices
    )
    return replace(circuit, devices=devices)


def loop_setup(
    circuit: Circuit, ask: str, amplifier: str, shorts: tuple[tuple[str, str], ...], place: Place
) -> Setup:
    """Return the set-up for the loop gain of an amplifier.

    Args:
        circuit: holds the amplifier, ideal or not.
        ask: the ask's name.
        amplifier: its name.
        shorts: nodes held at zero meanwhile.
        place: where the ask is written.

    Returns:
        The set-up whose ratio is (V_plus - V_minus) / V_drives with the output driven; the loop gain is -A
        times it.

    Raises:
        KeyError: no such amplifier.
    """
    found = {device.name: device for device in circuit.devices}[amplifier]
    (plus,), (minus,), (output,) = (found.terminals[role] for role in ("plus", "minus", "drives"))
    over, under = Voltage(plus, minus, place), Voltage(output, GROUND, place)
    return Setup(ask, LoopDrive(amplifier, output), shorts, over, under, place)
