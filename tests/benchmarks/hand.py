"""Stages of ten parts, each with its transfer function as a person writes it in numpy."""

from __future__ import annotations

from collections.abc import Callable, Mapping

from numpy.typing import NDArray

from symcirc.circuit.model import VoltageDrive
from symcirc.sheet.model import GROUND, Device
from tests.benchmarks.families import Case, low_pass_chain
from tests.trees.samples import circuit, device, part, setup, voltage

Formula = Callable[[Mapping[str, NDArray], complex], NDArray]


def _amplifier(name: str, plus: str, minus: str, drives: str) -> Device:
    return device(name, "opamp", plus=(plus,), minus=(minus,), drives=(drives,))


def _biquad_and_pole() -> Case:
    parts = [part("R1", "in", "m1"), part("R2", "inv", "m1"), part("C1", "m1", "bp"), part("R3", "m1", "bp")]
    parts += [part("R4", "bp", "m2"), part("C2", "m2", "lp"), part("R5", "lp", "m3"), part("R6", "m3", "inv")]
    parts += [part("R7", "inv", "out"), part("C3", "out", GROUND)]
    amplifiers = [_amplifier("U1", GROUND, "m1", "bp"), _amplifier("U2", GROUND, "m2", "lp")]
    amplifiers.append(_amplifier("U3", GROUND, "m3", "inv"))
    return circuit(parts, amplifiers), setup(VoltageDrive("in", GROUND), voltage("out"), voltage("in"))


def _biquad_and_pole_by_hand(v: Mapping[str, NDArray], s: complex) -> NDArray:
    biquad = 1 + s * v["C2"] * v["R4"] * v["R5"] * v["R2"] / (v["R6"] * v["R3"]) * (1 + s * v["C1"] * v["R3"])
    return -(v["R2"] / v["R1"]) / (biquad * (1 + s * v["C3"] * v["R7"]))


def _two_low_passes_by_hand(v: Mapping[str, NDArray], s: complex) -> NDArray:
    product = 1
    for k in "12":
        r1, r2, r3, c1, c2 = v[f"R{k}_1"], v[f"R{k}_2"], v[f"R{k}_3"], v[f"C{k}_1"], v[f"C{k}_2"]
        product = product * (
            -(r2 / r1) / (s * s * (c1 * c2 * r2 * r3) + s * c2 * (r2 + r3 + r2 * r3 / r1) + 1)
        )
    return product


def _fourth_order() -> Case:
    parts = [part("R1", "in", "a"), part("C1", "a", GROUND), part("R2", "a", "b"), part("C2", "b", GROUND)]
    parts += [part("R3", "b", "c"), part("C3", "c", "out"), part("R4", "c", "p"), part("C4", "p", GROUND)]
    parts += [part("R5", "m", GROUND), part("R6", "m", "out")]
    made = circuit(parts, [_amplifier("U1", "p", "m", "out")])
    return made, setup(VoltageDrive("in", GROUND), voltage("out"), voltage("in"))


def _fourth_order_by_hand(v: Mapping[str, NDArray], s: complex) -> NDArray:
    r1, r2, r3, r4, r5, r6 = (v[f"R{k}"] for k in range(1, 7))
    c1, c2, c3, c4 = (v[f"C{k}"] for k in range(1, 5))
    k = 1 + r6 / r5
    two, three = r1 + r2, r1 + r2 + r3
    d1 = c1 * r1 + c2 * two + c4 * (three + r4) + c3 * three * (1 - k)
    d2 = c1 * c2 * r1 * r2 + c4 * (c1 * r1 * (r2 + r3 + r4) + c2 * two * (r3 + r4) + c3 * r4 * three)
    d2 = d2 + (1 - k) * c3 * (c1 * r1 * (r2 + r3) + c2 * two * r3)
    d3 = c1 * c2 * r1 * r2 * ((1 - k) * c3 * r3 + c4 * (r3 + r4))
    d3 = d3 + c3 * c4 * r4 * (c1 * r1 * (r2 + r3) + c2 * two * r3)
    return k / (1 + s * (d1 + s * (d2 + s * (d3 + s * c1 * c2 * c3 * c4 * r1 * r2 * r3 * r4))))


STAGES: list[tuple[str, Case, Formula]] = [
    ("three-amplifier biquad and a pole", _biquad_and_pole(), _biquad_and_pole_by_hand),
    ("two multiple-feedback low-passes", low_pass_chain(2), _two_low_passes_by_hand),
    ("fourth order around one amplifier", _fourth_order(), _fourth_order_by_hand),
]
