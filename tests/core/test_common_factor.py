"""Common factors: found, removed, and reported where they hide a natural mode."""

from __future__ import annotations

import itertools
import random
import time

import pytest
import sympy
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.common import remove_common_factor, shared_symbols
from tests.core.functions import as_expression, built_of, is_equal, s

R1, R2, C1, C2, L1 = sympy.symbols("R1 R2 C1 C2 L1")


def random_polynomial(ring: PolyRing, rng: random.Random, terms: int, degree: int) -> PolyElement:
    polynomial = ring.zero
    while not polynomial:
        for _ in range(terms):
            monomial = tuple(rng.choice([0, 0, 0, 1, degree]) for _ in range(ring.ngens))
            polynomial += ring({monomial: ring.domain(rng.choice([-3, -2, -1, 1, 1, 2, 5]))})
    return polynomial


@pytest.mark.parametrize("seed", range(40))
def test_the_common_factor_is_the_one_that_sympy_finds(seed: int) -> None:
    # the outside: sympy's own gcd of polynomials, by its heuristic algorithm over all symbols at once
    rng = random.Random(seed)
    ring = PolyRing(["s", "a", "b", "c"], QQ, lex)
    factor = random_polynomial(ring, rng, rng.randint(1, 3), 2)
    above, below = (factor * random_polynomial(ring, rng, rng.randint(1, 4), 2) for _ in range(2))
    reduced_above, reduced_below, common = remove_common_factor(above, below)
    assert reduced_above * common == above
    assert reduced_below * common == below
    expected = above.gcd(below)
    assert common.monic() == expected.monic()
    numerator, denominator = sympy.fraction(sympy.cancel(above.as_expr() / below.as_expr()))
    assert sympy.expand(numerator * reduced_below.as_expr() - denominator * reduced_above.as_expr()) == 0


def test_a_zero_numerator_leaves_one_in_the_denominator() -> None:
    ring = PolyRing(["s", "a"], QQ, lex)
    x, a = ring.gens
    assert remove_common_factor(ring.zero, x + a) == (ring.zero, ring.one, x + a)


def test_only_the_symbols_of_the_common_factor_are_shared() -> None:
    ring = PolyRing(["s", "a", "b", "c"], QQ, lex)
    x, a, b, c = ring.gens
    assert list(shared_symbols((x * a + 1) * (b + c), (x * a + 1) * (b - c * x))) == [0, 1]
    assert list(shared_symbols(x * a + b, x * a + c)) == []


def test_symbols_are_found_in_a_field_with_roots_as_well() -> None:
    domain = QQ.algebraic_field(sympy.sqrt(2), sympy.sqrt(3))
    ring = PolyRing(["s", "a", "b", "c"], domain, lex)
    x, a, b, c = ring.gens
    two, three = (ring(domain.from_sympy(sympy.sqrt(number))) for number in (2, 3))
    assert list(shared_symbols((x * a + two) * (b + c), (x * a + two) * (b - three * c * x))) == [0, 1]
    assert list(shared_symbols(x * a + two * b, x * a + three * c)) == []
    assert list(shared_symbols(x**2 - two**2 * a, x - two * b)) == []


def test_a_factor_with_a_root_in_it_is_removed() -> None:
    domain = QQ.algebraic_field(sympy.sqrt(2))
    ring = PolyRing(["s", "a"], domain, lex)
    x, a = ring.gens
    two = ring(domain.from_sympy(sympy.sqrt(2)))
    above, below, common = remove_common_factor(x**2 - two**2 * a**2, x + two * a)
    assert (above, below) == (x - two * a, ring.one)
    assert common == x + two * a


def test_a_large_factor_with_a_root_is_found_at_once_though_the_rest_shares_symbols_with_it() -> None:
    # a network that hangs on one node hides in the factor; a general algorithm over all symbols takes minutes
    domain = QQ.algebraic_field(sympy.sqrt(2))
    ring = PolyRing(["s", "a", "b", *(f"x{i}" for i in range(10))], domain, lex)
    x, a, b, *rest = ring.gens
    two = ring(domain.from_sympy(sympy.sqrt(2)))
    factor = ring.one
    for i in range(9):
        factor *= x * rest[i] * (a if i % 3 == 0 else ring.one) + two * rest[i + 1]
    start = time.process_time()
    above, below, common = remove_common_factor(factor * a * (x + a), factor * (a * b * two + x))
    assert time.process_time() - start < 3.0
    assert common.monic() == factor.monic()
    assert above * (a * b * two + x) == below * a * (x + a)


# hidden natural modes ------------------------------------------------------------------------------------------

HIDDEN = [
    # a bridge in balance: its middle branch carries nothing, whatever resonates there
    (
        "in -- R1 -- a -- R2 -- gnd\nin -- R3 -- b -- R4 -- gnd\na -- C1 -- b\nfix R2 = R1, R4 = R3\n"
        "ask H = V_a/V_in",
        sympy.Rational(1, 2),
        1,
    ),
    # two equal branches side by side: between them lies a mode that their common end does not see
    (
        "in -- R1 -- a -- C1 -- gnd\nin -- R2 -- b -- C2 -- gnd\nfix R2 = R1, C2 = C1\nask H = I_in/V_in",
        2 * s * C1 / (1 + s * R1 * C1),
        1,
    ),
    # a zero on a pole: the time constants are one by tie
    (
        "in -- R1 -- out -- R2 -- gnd\nin -- C1 -- out -- C2 -- gnd\nfix C2 = R1*C1/R2\nask H = V_out/V_in",
        R2 / (R1 + R2),
        1,
    ),
    # the symmetrical twin-T: the third order of three capacitors cancels
    (
        "in -- R1 -- a -- R2 -- out\nin -- C1 -- b -- C2 -- out\na -- C3 -- gnd\nb -- R3 -- gnd\n"
        "fix R2 = R1, R3 = R1/2, C2 = C1, C3 = 2*C1\nask H = V_out/V_in",
        (1 + s**2 * R1**2 * C1**2) / (1 + 4 * s * R1 * C1 + s**2 * R1**2 * C1**2),
        1,
    ),
    # an LC tank across the drive's own current, without a tie: its voltage is the drive's
    (
        "in -- R1 -- a -- C1 -- gnd\nin -- R2 -- b -- L1 -- c -- C2 -- gnd\nask H = V_a/V_in",
        1 / (1 + s * R1 * C1),
        2,
    ),
]


@pytest.mark.parametrize(("text", "expected", "degree"), HIDDEN)
def test_a_hidden_mode_is_removed_and_returned(text: str, expected: sympy.Expr, degree: int) -> None:
    built = built_of(text)
    assert is_equal(as_expression(built.function), expected)
    assert len(built.hidden) - 1 == degree


def test_the_hidden_factor_is_the_mode_itself() -> None:
    (low, high) = built_of(HIDDEN[1][0]).hidden
    assert is_equal(high.as_expr() / low.as_expr(), R1 * C1)


def test_a_power_of_s_alone_is_not_called_a_hidden_mode() -> None:
    text = "in -- C1 -- a -- C2 -- out -- R1 -- gnd\nask H = V_out/V_in"
    built = built_of(text)
    assert built.hidden == ()
    assert built.function.order == 1


def test_nothing_is_hidden_in_a_plain_stage() -> None:
    assert built_of("in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in").hidden == ()


def ladder(sections: int) -> str:
    wires = "".join(f"n{i} -- R{i + 1} -- n{i + 1} -- C{i + 1} -- gnd\n" for i in range(sections))
    return wires + f"ask H = V_n{sections}/V_n0\n"


def test_the_factor_of_twelve_parts_is_found_at_once() -> None:
    # two six-part ladders into one node of an inverting stage, and the same again by ties
    sheet = (
        "in -- R1 -- a -- R2 -- b -- R3 -- m\na -- C1 -- gnd\nb -- C2 -- gnd\n"
        "in -- R4 -- c -- R5 -- d -- R6 -- m\nc -- C4 -- gnd\nd -- C5 -- gnd\nm -- R7 -- out\n"
        "m -- C7 -- out\nU1 opamp: plus gnd, minus m, drives out\nfix R4 = R1, R5 = R2, R6 = R3, C4 = C1, C5 = C2\n"
        "ask H = V_out/V_in"
    )
    start = time.process_time()
    built = built_of(sheet)
    assert len(built.hidden) == 3
    assert built.function.order == 3
    assert time.process_time() - start < 2.0


def test_a_function_with_a_root_and_twelve_parts_is_built_at_once() -> None:
    start = time.process_time()
    built = built_of(ladder(6) + "fix R2 = sqrt(2)*R1, C3 = sqrt(3)*C4")
    assert built.function.order == 6
    assert time.process_time() - start < 5.0


def test_removing_a_second_time_finds_nothing() -> None:
    for text, _, _ in HIDDEN:
        function = built_of(text).function
        ring = PolyRing(["s", *[str(x) for x in function.ring.symbols]], function.ring.domain, lex)
        above, below = (
            sum(
                (ring({(power, *m): c}) for power, p in enumerate(side) for m, c in p.terms()),
                start=ring.zero,
            )
            for side in (function.numerator, function.denominator)
        )
        assert remove_common_factor(above, below)[2] == ring.one


def test_pairs_of_stages_have_no_common_factor_by_chance() -> None:
    ring = PolyRing(["s", "a", "b"], QQ, lex)
    x, a, b = ring.gens
    coprime = [x + a, x + b, x * a + b, x**2 + a * b, x**2 * a + x * b + ring.one]
    for above, below in itertools.permutations(coprime, 2):
        assert remove_common_factor(above, below) == (above, below, ring.one)
