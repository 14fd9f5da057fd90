"""The numeric witness: right by hand, honest about its condition, and heeded when it disagrees."""

from __future__ import annotations

import cmath
from dataclasses import replace

import numpy as np
import pytest
import sympy

from symcirc.complaints import InternalFault
from symcirc.derivation import derive, pose
from symcirc.transfer.function import TransferFunction
from symcirc.witness.agree import confirm
from symcirc.witness.network import Network, complete
from tests.core.functions import built_of, posed, read
from tests.core.test_part_laws import DRIVES, LAWS

LOW_PASS = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in"


@pytest.mark.parametrize(
    ("name", "text", "expected"), [*LAWS, *DRIVES], ids=lambda x: x if " " in str(x) else None
)
def test_the_witness_obeys_every_law(name: str, text: str, expected: sympy.Expr) -> None:
    sheet = read(text)
    values = {symbol: 0.5 + 0.37 * k for k, symbol in enumerate(sheet.symbols)}
    s = 0.3 + 0.8j
    found = Network(*posed(text, "H"), complete(values, sheet.ties, s), s).ratio()
    wanted = complex(expected.subs({"s": s, **values}))
    assert cmath.isclose(found, wanted, rel_tol=1e-12, abs_tol=1e-15)


def test_a_tie_is_computed_at_the_frequency() -> None:
    sheet = read("in -- Z1 -- out -- R1 -- gnd\nfix Z1 = 1/(s*C1) + sqrt(2)*pi\nask H = V_out/V_in")
    known = complete({"R1": 1.0, "C1": 2.0}, sheet.ties, 1j)
    assert known["Z1"] == pytest.approx(-0.5j + 2**0.5 * np.pi)


def test_rows_are_scaled_before_the_condition_is_told() -> None:
    network = Network(*posed(LOW_PASS, "H"), {"R1": 1e6, "C1": 1e-9}, 1e3j)
    assert network.condition() < 1e4
    assert abs(network.ratio() - 1 / (1 + 1j)) < 1e-12


def test_a_singular_circuit_has_no_numeric_answer_either() -> None:
    text = "in -- R1 -- a\nK1 conveyor: x a, y gnd, z b, sign -\na -- R2 -- b\nask H = V_b/V_in"
    network = Network(*posed(text, "H"), {"R1": 1.3, "R2": 0.7}, 1j)
    assert network.condition() > 1e12


def corrupted(function: TransferFunction) -> list[TransferFunction]:
    """Return the function with one coefficient's sign, number or symbol changed."""
    low, *rest = function.denominator
    one = function.ring.one
    return [
        replace(function, numerator=tuple(-c for c in function.numerator)),
        replace(function, denominator=(low + one / 10**6, *rest)),
        replace(function, denominator=(low, *(c * function.ring.gens[0] for c in rest))),
        replace(function, numerator=()),
        replace(function, numerator=(function.ring.zero, *function.numerator)),
    ]


@pytest.mark.parametrize("slip", range(5))
def test_a_corrupted_derivation_is_noticed(slip: int) -> None:
    circuit, setup = posed(LOW_PASS, "H")
    function = built_of(LOW_PASS).function
    evidence = confirm(circuit, setup, {}, function)
    assert evidence.points >= 3
    assert evidence.departure < 1e-12
    with pytest.raises(InternalFault):
        confirm(circuit, setup, {}, corrupted(function)[slip])


BRIDGE = "in -- R1 -- a -- R2 -- gnd\nin -- R3 -- b -- R4 -- gnd\na -- C1 -- b\n"
ZERO = [
    "in -- R1 -- a -- R2 -- gnd\nout -- C1 -- gnd\nout -- R3 -- gnd\nask H = V_out/V_in",
    # a balanced bridge: zero by cancellation of products, not by the absence of a path
    BRIDGE + "fix R2 = R1, R4 = R3\nask H = (V_a - V_b)/V_in",
    BRIDGE + "fix R2 = 1e4*R1, R4 = 1e4*R3\nask H = I_C1/V_in",
    "in -- R1 -- m -- R2 -- out\nin -- R3 -- p -- R4 -- gnd\nU1 opamp: plus p, minus m, drives out\n"
    "fix R4 = R2, R3 = R1\nask H = V_out/V_in",
]


@pytest.mark.parametrize("text", ZERO)
def test_a_function_that_is_zero_is_confirmed_without_a_false_alarm(text: str) -> None:
    assert derive(pose(read(text))).answer("H").function.numerator == ()
