"""What is tied is put in exactly, whatever it is tied to."""

from __future__ import annotations

import pytest
import sympy

from symcirc.complaints import Complaint
from symcirc.derivation import derive, pose
from symcirc.ratio import Ratio
from symcirc.transfer.ties import natural_key, put_in, ring_for
from tests.core.functions import as_expression, built_of, expression_of, is_equal, ratio_of, read, s

R1, R2, R3, R4, C1, C2, C3, k, tau, n, pi = sympy.symbols("R1 R2 R3 R4 C1 C2 C3 k tau n pi")

DIVIDER = "in -- R1 -- out -- R2 -- gnd\nask H = V_out/V_in\n"
LOW_PASS = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"
LADDER = "in -- R1 -- a -- R2 -- out\na -- C1 -- gnd\nout -- C2 -- gnd\nask H = V_out/V_in\n"
GENERAL = "in -- Z1 -- out -- Z2 -- gnd\nask H = V_out/V_in\n"
FOLLOWER = "in -- R1 -- gnd\nE1 vcvs: senses in, drives out\nout -- R2 -- gnd\nask H = V_out/V_in\n"

TIES = [
    (DIVIDER + "fix R2 = R1", sympy.Rational(1, 2)),
    (DIVIDER + "fix R2 = 2*R1", sympy.Rational(2, 3)),
    (DIVIDER + "fix R2 = (k - 1)*R1\nchoose k", (k - 1) / k),
    (DIVIDER + "fix R2 = R1/(k - 1)\nchoose k", 1 / k),
    (DIVIDER + "fix R1 = R2, R2 = 4k7", sympy.Rational(1, 2)),
    (DIVIDER + "fix R1 = R2^2/R3, R2 = 2*R3, R3 = R4\nout -- R3 -- x -- R4 -- gnd", sympy.Rational(1, 5)),
    (DIVIDER + "fix R2 = sqrt(2)*R1", 2 - sympy.sqrt(2)),
    (DIVIDER + "fix R2 = R1*(1 + sqrt(5))/2", (sympy.sqrt(5) - 1) / 2),
    (DIVIDER + "fix R2 = sqrt(8)*R1/sqrt(2)", sympy.Rational(2, 3)),
    (DIVIDER + "fix R2 = pi*R1", sympy.pi / (1 + sympy.pi)),
    (DIVIDER + "fix R2 = sqrt(2)*pi*R1", sympy.sqrt(2) * sympy.pi / (1 + sympy.sqrt(2) * sympy.pi)),
    (LOW_PASS + "fix C1 = tau/R1\nchoose tau", 1 / (1 + s * tau)),
    (LOW_PASS + "fix C1 = 1/(2*pi*k*R1)\nchoose k", 1 / (1 + s / (2 * sympy.pi * k))),
    (
        LADDER + "fix R2 = n*R1, C2 = C1/n\nchoose n",
        1 / (1 + s * R1 * C1 * (2 + 1 / n) + s**2 * R1**2 * C1**2),
    ),
    (GENERAL + "fix Z1 = 1/(s*C1), Z2 = R2", s * C1 * R2 / (1 + s * C1 * R2)),
    (GENERAL + "fix Z2 = R2 + 1/(s*C2)", (1 + s * R2 * C2) / (1 + s * C2 * (R2 + sympy.Symbol("Z1")))),
    (GENERAL + "fix Z2 = Z1", sympy.Rational(1, 2)),
    (
        "in -- R1 -- out -- Y1 -- gnd\nask H = V_out/V_in\nfix Y1 = s*C3 + 1/R3",
        R3 / (R1 + R3 + s * C3 * R1 * R3),
    ),
    (
        "in -- R1 -- out -- Y1 -- gnd\nask H = V_out/V_in\nfix Y1 = s^2*tau^2/R1\nchoose tau",
        1 / (1 + s**2 * tau**2),
    ),
    (FOLLOWER + "fix E1_gain = k/(1 + s*tau)\nchoose k, tau", k / (1 + s * tau)),
    (FOLLOWER + "fix E1_gain = 1/s", 1 / s),
    (
        "T1 transformer: primary in, secondary out, ratio 2*n\nout -- R1 -- gnd\nask H = V_out/V_in\nchoose n",
        1 / (2 * n),
    ),
    (
        "block cell (p)\np -- R1 -- q -- C1 -- gnd\nfix C1 = C2\nend\nuse cell as S1 (in)\nask H = V_S1_q/V_in\n"
        "choose C2",
        1 / (1 + s * sympy.Symbol("S1_R1") * C2),
    ),
]


@pytest.mark.parametrize(("text", "expected"), TIES)
def test_a_tie_is_put_in(text: str, expected: sympy.Expr) -> None:
    assert is_equal(expression_of(text), expected)
    assert is_equal(as_expression(derive(pose(read(text))).answer("H").function), expected)


def test_a_number_never_replaces_its_symbol_and_an_expression_does() -> None:
    names = {
        str(symbol) for symbol in built_of(DIVIDER + "fix R1 = 4k7\nfix R2 = R1/3").function.ring.symbols
    }
    assert names == {"R1"}


def test_numbers_with_roots_keep_the_function_in_a_field_with_these_roots() -> None:
    function = built_of(DIVIDER + "fix R2 = (sqrt(2) + sqrt(3))*R1").function
    assert not function.ring.domain.is_QQ
    expected = (sympy.sqrt(2) + sympy.sqrt(3)) / (1 + sympy.sqrt(2) + sympy.sqrt(3))
    assert sympy.simplify(as_expression(function) - expected) == 0
    assert function.denominator[-1].LC - function.ring.domain.one == function.ring.domain.zero


def test_five_different_roots_are_refused_at_the_last() -> None:
    tied = DIVIDER + "fix R2 = (sqrt(2) + sqrt(3) + sqrt(5) + sqrt(7) + sqrt(11))*R1"
    with pytest.raises(Complaint, match="more than 4 different square roots"):
        built_of(tied)


@pytest.mark.parametrize("value", ["R1/(R1 - R1)", "1/(k - k)*R1", "R1*(k - k)^-1"])
def test_a_tie_that_divides_by_zero_is_refused_at_its_place(value: str) -> None:
    text = DIVIDER + f"fix R2 = {value}\nchoose k"
    with pytest.raises(Complaint, match="divides by zero") as caught:
        built_of(text)
    assert caught.value.place.line == 3


def test_ties_that_make_the_circuit_singular_are_said_to() -> None:
    # a Howland source without a load: balanced, its output resistance is infinite
    text = (
        "in -- R1 -- p -- R2 -- out\ngnd -- R3 -- m -- R4 -- out\nU1 opamp: plus p, minus m, drives out\n"
        "fix R4 = R2*R3/R1\nask Zout = V_p/I_p with V_in = 0"
    )
    with pytest.raises(Complaint, match="with the sheet's fixes the equations for `Zout` have no solution"):
        derive(pose(read(text)))


def test_a_ratio_of_two_voltages_is_refused_too_where_ties_make_the_circuit_singular() -> None:
    # the same source with nothing on p: both voltages are infinite, though their quotient is not
    text = (
        "in -- R1 -- p -- R2 -- out\ngnd -- R3 -- m -- R4 -- out\nU1 opamp: plus p, minus m, drives out\n"
        "fix R4 = R2*R3/R1\nask K = V_out/V_p driven at in"
    )
    with pytest.raises(Complaint, match="with the sheet's fixes the equations for `K` have no solution"):
        derive(pose(read(text)))


def test_names_are_sorted_as_a_person_sorts_them() -> None:
    names = ["k", "S1_R1", "C2", "R10", "L1", "R2", "Y1", "C1", "w0", "U1_gain", "Z3"]
    expected = ["R2", "R10", "S1_R1", "C1", "C2", "L1", "Z3", "Y1", "U1_gain", "k", "w0"]
    assert sorted(names, key=natural_key) == expected
    assert [str(x) for x in ring_for(names, {}).symbols] == ["s", *expected]


def test_a_ratio_without_ties_goes_in_as_it_is() -> None:
    ratio = ratio_of(LOW_PASS)
    assert isinstance(ratio, Ratio)
    quotient = put_in(ratio, {})
    assert sympy.expand(quotient.below.as_expr() - (1 + s * R1 * C1) * quotient.above.as_expr()) == 0
