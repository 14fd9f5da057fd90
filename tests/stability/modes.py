"""Runaway natural modes counted another way: by the winding of a numeric determinant along a contour."""

from __future__ import annotations

import random
from collections.abc import Mapping
from dataclasses import replace

import numpy as np
import numpy.typing as npt

from symcirc.circuit import Circuit, Setup, build_circuit, build_setup
from symcirc.complaints import Source
from symcirc.sheet import read_sheet
from symcirc.sheet.model import Sheet
from symcirc.witness.network import Network, complete

#: w_t of every amplifier in rad/s; all time constants of the stages are taken near 1 s.
BANDWIDTH = 1e8
#: Modes of this size and more run away, and none of the rest comes near it.
NEAR, FAR, EDGE = 100.0, 1e11, np.radians(87)


def read(text: str) -> Sheet:
    """Return the sheet of a text."""
    return read_sheet(Source("stage.stage", text))


def amplifiers(sheet: Sheet) -> list[str]:
    """Return the names of a sheet's amplifiers."""
    return [device.name for device in sheet.devices if device.kind == "opamp"]


def with_exchanged(sheet: Sheet, *names: str) -> Sheet:
    """Return the sheet with plus and minus of some amplifiers exchanged."""

    def turned(terminals: Mapping[str, tuple[str, ...]]) -> dict[str, tuple[str, ...]]:
        return {**terminals, "plus": terminals["minus"], "minus": terminals["plus"]}

    devices = tuple(
        replace(device, terminals=turned(device.terminals)) if device.name in names else device
        for device in sheet.devices
    )
    return replace(sheet, devices=devices)


def setups(sheet: Sheet) -> tuple[Circuit, list[Setup]]:
    """Return the circuit of a sheet and what is applied to it for each of its asks."""
    circuit = build_circuit(sheet)
    return circuit, [build_setup(circuit, sheet.asks, ask) for ask in sheet.asks]


def ordinary_values(sheet: Sheet, rng: random.Random) -> dict[str, float]:
    """Return values near 1 for all names that are not tied, such that every part is positive."""
    while True:
        free = {name: rng.uniform(0.5, 2.5) for name in sheet.symbols if name not in sheet.ties}
        known = complete(free, sheet.ties, 1.0)
        if all(known[part.name] > 0 for part in sheet.parts):
            return free


def runaway_count(sheet: Sheet, circuit: Circuit, setup: Setup, free: Mapping[str, float]) -> int:
    """Return how many natural modes lie far out in the right half-plane, every amplifier as w_t/s.

    The numeric nodal matrix is affine in s and 1/s; the winding of its determinant round the sector counts its
    zeros there (the argument principle). It is real on the real axis, so the upper half of the way is enough.
    """
    real = tuple(
        replace(d, kind="amplifier", parameters={"gain": f"{d.name}_A"}) if d.kind == "opamp" else d
        for d in circuit.devices
    )
    fast = replace(circuit, devices=real)

    def matrix(s: float) -> npt.NDArray[np.complex128]:
        gains = {f"{d.name}_A": BANDWIDTH / s for d in real if d.kind == "amplifier"}
        known = complete(free, sheet.ties, s)
        return np.asarray(Network(fast, setup, {**known, **gains}, complex(s)).matrix)

    points = np.array([1.0, 2.0, 4.0])
    base = np.linalg.solve(
        np.stack([1 / points, np.ones(3), points], axis=1),
        np.stack([matrix(s).ravel() for s in points]),
    ).reshape(3, *matrix(1.0).shape)
    np.testing.assert_allclose(base[0] / 3 + base[1] + base[2] * 3, matrix(3.0), atol=1e-9)
    out, back = np.linspace(0, EDGE, 60), np.linspace(EDGE, 0, 60)
    ray = np.exp(np.linspace(np.log(FAR), np.log(NEAR), 700))
    path = np.concatenate([FAR * np.exp(1j * out), ray * np.exp(1j * EDGE), NEAR * np.exp(1j * back)])
    way = path[:, None, None]
    signs, _ = np.linalg.slogdet(base[0] / way + base[1] + base[2] * way)
    steps = np.angle(signs[1:] / signs[:-1])
    assert np.abs(steps).max() < 2, "the way is too coarse"
    turns = float(steps.sum()) / np.pi
    assert abs(turns - round(turns)) < 0.01
    return round(turns)
