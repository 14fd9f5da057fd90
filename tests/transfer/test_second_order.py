"""Natural frequency and quality factor in symbols, against textbook formulas and numeric poles."""

from __future__ import annotations

import math
import random
from fractions import Fraction

import numpy as np
import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.form import Form
from symcirc.transfer.second_order import first_order, second_order
from symcirc.transfer.square_root import square_root
from symcirc.transfer.text import text
from symcirc.transfer.ties import Quotient
from tests.transfer.arithmetic import value_of
from tests.transfer.samples import C1, C2, L1, ONE, PARTS, R1, R2, R3, R4, RING, K, fractions_for, value_at

#: (a0, a1, a2, w0, Q). The first four are in every handbook of active filters (M. E. Van Valkenburg, "Analog
#: Filter Design", 1982, chapters on two-pole low-pass stages, multiple feedback and the passive resonator; from
#: memory); the others show the rules.
FORMULAS = [
    (ONE, C2 * (R1 + R2), R1 * R2 * C1 * C2, "1/sqrt(R1*R2*C1*C2)", "sqrt(R1*R2*C1*C2)/(C2*(R1 + R2))"),
    (
        R1,
        C2 * (R1 * R2 + R1 * R3 + R2 * R3),
        R1 * R2 * R3 * C1 * C2,
        "1/sqrt(R2*R3*C1*C2)",
        "R1*sqrt(R2*R3*C1*C2)/(C2*(R1*R2 + R1*R3 + R2*R3))",
    ),
    (ONE, R1 * C1 * (3 - K), R1**2 * C1**2, "1/(R1*C1)", "1/(3 - k)"),
    (ONE, R1 * C1, L1 * C1, "1/sqrt(C1*L1)", "sqrt(L1/C1)/R1"),
    (ONE, 2 * R1 * C2, R1**2 * C1 * C2, "1/(R1*sqrt(C1*C2))", "sqrt(C1/C2)/2"),
    (R2, R2 * R4 * C1, R1 * R3 * C1 * C2, "sqrt(R2/(R1*R3*C1*C2))", "sqrt(R1*R3*C2/(R2*C1))/R4"),
    (ONE, -R1 * C1, 25 * R1**2 * C1 * C2, "1/(5*R1*sqrt(C1*C2))", "-5*sqrt(C2/C1)"),
    ((1 - K) ** 2, R1 * C1, R1 * C1, "sqrt((1 - k)**2/(R1*C1))", "sqrt((1 - k)**2/(R1*C1))"),
    ((K - 1) * R1, R2 * C1, (K - 1) * R3, "sqrt(R1/R3)", "R3*(k - 1)*sqrt(R1/R3)/(R2*C1)"),
    (-R1, -R2 * C1, -R1 * C1 * C2, "1/sqrt(C1*C2)", "R1*sqrt(C1*C2)/(R2*C1)"),
]


@pytest.mark.parametrize(("a0", "a1", "a2", "omega0", "q"), FORMULAS[:7], ids=[f[3] for f in FORMULAS[:7]])
def test_w0_and_q_are_written_as_handbooks_do(
    a0: PolyElement, a1: PolyElement, a2: PolyElement, omega0: str, q: str
) -> None:
    found = second_order((a0, a1, a2), PARTS)
    assert found is not None
    assert (text(found.omega0), found.q and text(found.q)) == (omega0, q)


@pytest.mark.parametrize("entry", FORMULAS, ids=[f[3] for f in FORMULAS])
def test_w0_and_q_are_those_of_the_numeric_poles(
    entry: tuple[PolyElement, PolyElement, PolyElement, str, str],
) -> None:
    """Against numpy's roots: |pole|^2 = w0^2 for a pair, and -2 Re(pole) = w0/Q."""
    values = {**fractions_for(RING, 5), "k": Fraction(7, 3)}
    found = second_order(entry[:3], PARTS)
    assert found is not None
    assert found.q is not None
    first, second = np.roots([float(value_at(c, values)) for c in reversed(entry[:3])])
    omega0, f0, q = (number(form, values) for form in (found.omega0, found.f0, found.q))
    assert omega0 == pytest.approx(abs(first * second) ** 0.5, rel=1e-9)
    assert f0 == pytest.approx(omega0 / (2 * math.pi), rel=1e-12)
    assert omega0 / q == pytest.approx(-(first + second).real, rel=1e-9)


def number(form: Form, values: dict[str, Fraction]) -> float:
    return float(value_of(text(form), {**values, "pi": math.pi}, float, math.sqrt))


def test_the_squares_are_given_as_quotients() -> None:
    found = second_order((ONE, C2 * (R1 + R2), R1 * R2 * C1 * C2), PARTS)
    assert found is not None
    assert found.omega0_squared == Quotient(ONE, R1 * R2 * C1 * C2)
    assert found.q_squared == Quotient(R1 * R2 * C1, C2 * (R1 + R2) ** 2)
    assert text(found.f0) == "1/(2*pi*sqrt(R1*R2*C1*C2))"


def test_without_damping_there_is_no_q() -> None:
    found = second_order((ONE, RING.zero, L1 * C1), PARTS)
    assert found is not None
    assert (found.q, found.q_squared) == (None, None)


@pytest.mark.parametrize("coefficients", [(RING.zero, R1, C1), (-R1, C1, R2), (R1, C1), (R1, C1, C2, R2)])
def test_a_pole_at_zero_or_a_real_pair_of_both_signs_has_no_natural_frequency(
    coefficients: tuple[PolyElement, ...],
) -> None:
    assert second_order(coefficients, PARTS) is None


def test_pi_that_a_tie_brings_in_cancels() -> None:
    ring = PolyRing(["C1", "f", "pi"], QQ, lex)
    c1, f, pi = ring.gens
    found = second_order((4 * pi**2 * f**2, 2 * pi * f * c1, c1**2), {"C1", "f"})
    assert found is not None
    assert [text(form) for form in (found.omega0, found.f0, found.q) if form] == ["2*pi*f/C1", "f/C1", "1"]


def test_roots_of_numbers_are_taken_where_they_come_out() -> None:
    field = QQ.algebraic_field(sympy.sqrt(2))
    ring = PolyRing(["R1", "C1"], field, lex)
    r1, c1 = ring.gens
    two = field.from_sympy(sympy.sqrt(2))
    found = second_order((ring.one, two * r1 * c1, r1**2 * c1**2 / 2), {"R1", "C1"})
    assert found is not None
    assert [text(form) for form in (found.omega0, found.q) if form] == ["sqrt(2)/(R1*C1)", "1/2"]
    nested = second_order((ring.one, two * r1 * c1, two * r1**2 * c1**2), {"R1", "C1"})
    assert nested is not None
    assert number(nested.omega0, {"R1": Fraction(1), "C1": Fraction(1)}) == pytest.approx(2**-0.25, rel=1e-14)


def test_large_whole_numbers_are_not_factored_for_long() -> None:
    prime = 2**89 - 1
    radicand = Quotient(ONE * prime**2 * (2**61 - 1), R1**2)
    assert text(square_root(radicand, Quotient(ONE, ONE), PARTS)) == f"sqrt({prime**2 * (2**61 - 1)})/R1"
    square = Quotient(ONE * prime**2, R1**2)
    assert text(square_root(square, Quotient(ONE, ONE), PARTS)) == f"{prime}/R1"


squares = st.sampled_from([R1, R2, C1, R1 + R2, C1 + C2, 2 * ONE, 3 * ONE, 12 * ONE, K, K - 1, 5 * R3 + R4])


@settings(max_examples=80, deadline=None, derandomize=True)
@given(st.lists(squares, max_size=4), st.lists(squares, max_size=4), squares, squares)
def test_a_root_has_the_value_that_it_stands_for(
    above: list[PolyElement], below: list[PolyElement], front: PolyElement, under: PolyElement
) -> None:
    values = {**fractions_for(RING, 11), "k": Fraction(5, 2)}
    over, beneath = (math.prod(side, start=ONE) for side in (above, below))
    form = square_root(Quotient(over, beneath), Quotient(front, under), PARTS)
    expected = float(value_at(front, values) / value_at(under, values)) * math.sqrt(
        value_at(over, values) / value_at(beneath, values)
    )
    assert number(form, values) == pytest.approx(expected, rel=1e-12)


def test_a_first_order_pole_is_given_in_rad_per_second_and_in_hertz() -> None:
    found = first_order((R1 + R2, R1 * R2 * C1))
    assert found is not None
    assert text(found.omega_form) == "(1/R1 + 1/R2)/C1"
    assert text(found.f_form) == "(1/R1 + 1/R2)/(2*pi*C1)"
    assert found.omega == Quotient(R1 + R2, R1 * R2 * C1)
    assert first_order((RING.zero, R1 * C1)) is None
    assert first_order((ONE, R1, C1)) is None


def test_the_roots_of_long_sums_are_not_multiplied_out() -> None:
    ring = PolyRing([f"R{k}" for k in range(1, 21)], QQ, lex)
    chance = random.Random(3)

    def long_sum() -> PolyElement:
        return ring.from_dict({tuple(chance.randrange(2) for _ in range(20)): QQ(1) for _ in range(40)})

    coefficients = (long_sum(), long_sum(), long_sum())
    found = second_order(coefficients, {str(symbol) for symbol in ring.symbols})
    assert found is not None
    assert found.q is not None
    assert len(text(found.q)) < 3 * 40 * 20 * 4
    values = {str(symbol): Fraction(k + 2, 7) for k, symbol in enumerate(ring.symbols)}
    a0, a1, a2 = (float(value_at(c, values)) for c in coefficients)
    assert number(found.q, values) == pytest.approx(math.sqrt(a0 * a2) / a1, rel=1e-9)
