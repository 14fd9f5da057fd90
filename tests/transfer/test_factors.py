"""Factors of polynomials in many symbols, against sympy's own factorisation (a general-purpose library)."""

from __future__ import annotations

import random
import time

import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer import factors
from symcirc.transfer.factors import Factors, factorize
from tests.transfer.samples import C1, C2, ONE, R1, R2, R3, R4, RING, K


def multiplied(found: Factors, ring: PolyRing) -> PolyElement:
    result = ring.from_dict({found.monomial: found.number})
    for polynomial, exponent in found.polynomials:
        result *= polynomial**exponent
    return result


def as_sympy(polynomial: PolyElement) -> set[tuple[PolyElement, int]]:
    """Return sympy's factors that are not monomials, the sign settled."""
    _, factors = polynomial.factor_list()
    return {(max(f, -f, key=lambda g: g.LC), e) for f, e in factors if len(f) > 1}


@st.composite
def products(draw: st.DrawFn) -> PolyElement:
    """Draw a product of up to three small sums, in symbols of their own or shared ones."""
    result = ONE * draw(st.sampled_from([1, -1, 2, 6]))
    for _ in range(draw(st.integers(1, 3))):
        symbols = draw(
            st.lists(st.sampled_from([R1, R2, R3, C1, C2, K]), min_size=1, max_size=4, unique=True)
        )
        terms = draw(st.lists(st.sampled_from([1, 1, -1, 2]), min_size=len(symbols), max_size=len(symbols)))
        result *= sum((c * s for c, s in zip(terms, symbols, strict=True)), RING(draw(st.integers(0, 1))))
    return result


@settings(max_examples=150, deadline=None, derandomize=True)
@given(products())
def test_small_polynomials_have_the_factors_that_sympy_finds(polynomial: PolyElement) -> None:
    if not polynomial:
        return
    found = factorize(polynomial)
    assert multiplied(found, RING) == polynomial
    assert {(max(f, -f, key=lambda g: g.LC), e) for f, e in found.polynomials} == as_sympy(polynomial)


def test_large_products_of_sums_without_shared_symbols_are_split() -> None:
    ring = PolyRing([f"R{k}" for k in range(21)], QQ, lex)
    chance = random.Random(4)
    sums = []
    for first in (0, 7, 14):
        gens = ring.gens[first : first + 7]
        sums.append(sum(a * b * chance.choice([1, 1, 2]) for k, a in enumerate(gens) for b in gens[k + 1 :]))
    started = time.perf_counter()
    found = factorize(sums[0] * sums[1] * sums[2])
    assert {f for f, _ in found.polynomials} == set(sums)
    assert time.perf_counter() - started < 10  # 9,261 products; measured: 0.2 s


def test_an_irreducible_multilinear_polynomial_stays_whole() -> None:
    polynomial = R1 * R2 + R2 * R3 + R3 * R4 + R1 * C1
    assert factorize(polynomial).polynomials == ((polynomial, 1),)


def test_powers_of_sums_are_found() -> None:
    assert set(factorize(12 * R1 * (R1 + R2) ** 2 * (R1 + C1)).polynomials) == {(R1 + R2, 2), (R1 + C1, 1)}


def test_a_polynomial_with_squares_beyond_the_bounds_is_left_whole_at_once() -> None:
    polynomial = (R1 + R2 + R3 + R4 + C1 + C2 + K) ** 2 * (R1 - R2 + R3 * K + C1)
    started = time.perf_counter()
    found = factorize(polynomial)
    assert time.perf_counter() - started < 1
    assert multiplied(found, RING) == polynomial


def test_a_split_that_is_wrong_is_not_believed(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(factors, "_classes", lambda *_: [[0, 1], [5, 6]])
    as_many_products = R1 * C1 + R1 * C2 + R2 * C1 + 2 * R2 * C2
    too_few_products = R1 * C1 + R1 * C2 + R2 * C1 + R2 + C1
    for polynomial in (as_many_products, too_few_products):
        assert factorize(polynomial).polynomials == ((polynomial, 1),)


def test_exponents_beyond_what_floating_point_carries_do_no_harm() -> None:
    found = factorize((R1**2048 + R2) * (C1 + C2))
    assert set(found.polynomials) == {(R1**2048 + R2, 1), (C1 + C2, 1)}


@pytest.mark.parametrize("number", [sympy.sqrt(2), 1 + sympy.sqrt(2), sympy.Rational(3, 4)])
def test_factors_over_a_field_with_roots_multiply_to_the_polynomial(number: sympy.Expr) -> None:
    field = QQ.algebraic_field(sympy.sqrt(2))
    ring = PolyRing(["R1", "R2", "C1", "C2"], field, lex)
    r1, r2, c1, c2 = ring.gens
    polynomial = r1 * (r1 + 2 * r2) * (c1 + c2 * field.from_sympy(number)) * field.from_sympy(number)
    found = factorize(polynomial)
    assert len(found.polynomials) == 2
    assert multiplied(found, ring) == polynomial
