"""Stage sheets for the tests of whole designs, and their responses by the numeric solve alone."""

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from symcirc.circuit import build_circuit, build_setup
from symcirc.complaints import Source
from symcirc.design import Design, design
from symcirc.sheet import Sheet, read_sheet
from symcirc.witness.agree import numeric_ratio

UNITY_GAIN = """
block section (p, q)
  p -- R1 -- a -- R2 -- b -- C2 -- gnd
  a -- C1 -- q
  U1 opamp: plus b, minus q, drives q
end
"""
#: Equal resistors and equal capacitors; the gain is left to be found.
EQUAL_PARTS = """
block section (p, q)
  p -- R1 -- a -- R2 -- b -- C2 -- gnd
  a -- C1 -- q
  U1 opamp: plus b, minus f, drives q
  q -- R3 -- f -- R4 -- gnd
  fix R2 = R1, C2 = C1, C1 = 10 nF, R4 = 10 kohm
end
"""
MULTIPLE_FEEDBACK = """
block section (p, q)
  p -- R1 -- a -- R3 -- m -- C2 -- q
  a -- C1 -- gnd
  a -- R2 -- q
  U1 opamp: plus gnd, minus m, drives q
end
"""


def sheet_of(text: str) -> Sheet:
    return read_sheet(Source("s.stage", text))


def designed(text: str) -> Design:
    return design(sheet_of(text))


def chain(count: int) -> str:
    """Return the lines that place so many sections from ``in`` to ``out``, as S1, S2, ..."""
    nodes = ["in", *(f"n{k}" for k in range(1, count)), "out"]
    return "".join(f"use section as S{k + 1} ({nodes[k]}, {nodes[k + 1]})\n" for k in range(count))


def response(text: str, values: dict[str, float], frequencies: Sequence[float]) -> NDArray[np.complex128]:
    """Return the first ask of a sheet's circuit at frequencies in Hz, by the numeric solve of the whole."""
    sheet = sheet_of(text)
    circuit = build_circuit(sheet)
    setup = build_setup(circuit, sheet.asks, sheet.asks[0])
    numbers = {name: float(number) for name, number in sheet.numbers.items()}
    found = [
        numeric_ratio(circuit, setup, sheet.ties, {**numbers, **values}, 2j * math.pi * f)[0]
        for f in frequencies
    ]
    return np.array(found)
