"""The transfer function's one canonical form: signs, whole numbers, no zero at the top."""

from __future__ import annotations

import pytest
import sympy

from symcirc.ratio import Ratio
from symcirc.transfer.build import build_function
from tests.core.functions import as_expression, built_of, is_equal, ratio_of, read, s

R1, R2, R3, C1, C2 = sympy.symbols("R1 R2 R3 C1 C2")


@pytest.mark.parametrize("sign_above", [1, -1])
@pytest.mark.parametrize("sign_below", [1, -1])
def test_the_denominators_highest_coefficient_begins_with_a_positive_number(
    sign_above: int, sign_below: int
) -> None:
    ratio = Ratio(("R1", "C1"), ({(0, 0): sign_above},), ({(0, 0): sign_below}, {(1, 1): sign_below}))
    built = build_function(ratio, {})
    assert built is not None
    assert [str(c) for c in built.function.denominator] == ["1", "R1*C1"]
    assert [str(c) for c in built.function.numerator] == [str(sign_above * sign_below)]


def test_whole_numbers_have_no_common_divisor() -> None:
    built = build_function(Ratio(("R1", "C1"), ({(1, 0): 6},), ({(0, 0): 4}, {(1, 1): 10})), {})
    assert built is not None
    assert [str(c) for c in built.function.numerator] == ["3*R1"]
    assert [str(c) for c in built.function.denominator] == ["2", "5*R1*C1"]


def test_fractions_in_ties_become_whole_numbers() -> None:
    function = built_of(
        "in -- R1 -- out -- R2 -- gnd\nfix R2 = R1/3 + R3/7\nchoose R3\nask H = V_out/V_in"
    ).function
    numbers = [c for p in (*function.numerator, *function.denominator) for c in p.coeffs()]
    assert all(number.denominator == 1 for number in numbers)
    assert sorted(int(n) for n in numbers) == [3, 3, 7, 28]


def test_a_function_that_is_zero_has_an_empty_numerator_and_one_below() -> None:
    function = built_of(
        "in -- R1 -- a -- R2 -- gnd\nout -- C1 -- gnd\nout -- R3 -- gnd\nask H = V_out/V_in"
    ).function
    assert function.numerator == ()
    assert [str(c) for c in function.denominator] == ["1"]
    assert function.order == 0


def test_a_ratio_that_ties_make_infinite_is_not_built() -> None:
    text = (
        "in -- R1 -- p -- R2 -- out\ngnd -- R3 -- m -- R4 -- out\nU1 opamp: plus p, minus m, drives out\n"
        "fix R4 = R2*R3/R1\nask H = V_p/I_p with V_in = 0"
    )
    ratio = ratio_of(text)
    assert ratio is not None
    built = build_function(ratio, {})
    assert built is not None
    assert build_function(ratio, read(text).ties) is None


def test_no_highest_coefficient_is_zero_where_ties_lower_the_order() -> None:
    # a positive-feedback integrator whose loss cancels by tie, and a numerator whose s^2 cancels
    deboo = (
        "in -- R1 -- p -- R2 -- out\np -- C1 -- gnd\ngnd -- R3 -- m -- R4 -- out\n"
        "U1 opamp: plus p, minus m, drives out\nfix R4 = R2*R3/R1\nask H = V_out/V_in"
    )
    function = built_of(deboo).function
    assert [bool(c) for c in function.denominator] == [False, True]
    assert is_equal(as_expression(function), (1 + R2 / R1) / (s * R1 * C1))
    difference = (
        "in -- C1 -- m -- C2 -- out\nin -- C3 -- p -- R1 -- gnd\np -- C4 -- gnd\n"
        "U1 opamp: plus p, minus m, drives out\nfix C4 = C3, C2 = C1\nask H = V_out/V_in"
    )
    function = built_of(difference).function
    assert function.numerator[-1]
    assert len(function.numerator) == 1
    assert len(function.denominator) == 2


def test_symbols_that_cancel_do_not_matter_and_the_order_of_names_is_the_natural_one() -> None:
    function = built_of("in -- R10 -- out -- R2 -- gnd\nout -- C1 -- gnd\nask H = V_out/V_in").function
    assert [str(x) for x in function.ring.symbols] == ["R2", "R10", "C1"]
