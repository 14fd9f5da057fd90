"""The real amplifier: a finite gain, a gain-bandwidth product, or both, in the place of the ideal one."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from fractions import Fraction

from symcirc.circuit.model import Circuit, LoopDrive, Setup
from symcirc.sheet.expression import Expression, Name, Number, Product, Reciprocal, Sum
from symcirc.sheet.model import Device


def gain_symbol(amplifier: str) -> str:
    """Return the name that stands for an amplifier's gain A(s) until it is put in."""
    return f"{amplifier}_A"


def gain_expression(device: Device) -> Expression | None:
    """Return A(s) of an amplifier in its own parameters, or None for one that has neither gain nor gbw.

    With both, A(s) = gain / (1 + s gain/(2 pi gbw)): one pole, as common practice has it (no source); with one
    alone the gain at all frequencies, or 2 pi gbw / s.
    """
    place = device.place

    def name(text: str) -> Name:
        return Name(text, place)

    gain, gbw = device.parameters.get("gain"), device.parameters.get("gbw")
    if gbw is None:
        return name(gain) if gain is not None else None
    two_pi_gbw = Product((Number(Fraction(2), place), name("pi"), name(gbw)), place)
    if gain is None:
        return Product((two_pi_gbw, Reciprocal(name("s"), place)), place)
    pole = Product((name("s"), name(gain), Reciprocal(two_pi_gbw, place)), place)
    return Product((name(gain), Reciprocal(Sum((Number(Fraction(1), place), pole), place), place)), place)


def real_circuit(circuit: Circuit) -> tuple[Circuit, dict[str, Expression]]:
    """Return the circuit with every amplifier that has a gain or a gbw made real, and what A stands for.

    An amplifier with neither stays ideal.
    """
    devices: list[Device] = []
    gains: dict[str, Expression] = {}
    for device in circuit.devices:
        expression = gain_expression(device) if device.kind == "opamp" else None
        if expression is None:
            devices.append(device)
            continue
        gains[gain_symbol(device.name)] = expression
        devices.append(replace(device, kind="amplifier", parameters={"gain": gain_symbol(device.name)}))
    return replace(circuit, devices=tuple(devices)), gains


def loop_gains(circuit: Circuit, setups: Iterable[Setup]) -> dict[str, Expression]:
    """Return A(s) of every amplifier whose loop gain is asked; ``circuit`` is the one with its amplifiers ideal."""
    asked = {setup.drive.amplifier for setup in setups if isinstance(setup.drive, LoopDrive)}
    gains = {gain_symbol(d.name): gain_expression(d) for d in circuit.devices if d.name in asked}
    return {name: expression for name, expression in gains.items() if expression is not None}
