"""Elimination in minors, against sympy's determinants."""

from __future__ import annotations

import random

import pytest
import sympy
from sympy.polys.domains import ZZ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.elimination import solve
from symcirc.elimination.minors import maximal_minors
from symcirc.nodal import build_system
from tests.core.functions import posed, s

RING = PolyRing(["a", "b", "c", "d"], ZZ, lex)


def random_rows(rng: random.Random, size: int) -> list[dict[int, PolyElement]]:
    entries = [*RING.gens, RING.one, -RING.one, RING.gens[0] - RING.gens[1]]
    rows: list[dict[int, PolyElement]] = []
    for _ in range(size):
        columns = rng.sample(range(size + 1), rng.randint(1, min(4, size + 1)))
        rows.append({column: rng.choice(entries) for column in columns})
    return rows


@pytest.mark.parametrize("seed", range(30))
def test_every_maximal_minor_is_sympys_determinant(seed: int) -> None:
    # the outside: the determinant of the matrix without one column, by sympy's Berkowitz algorithm
    rng = random.Random(seed)
    size = rng.randint(1, 5)
    rows = random_rows(rng, size)
    whole = sympy.zeros(size, size + 1)
    for number, row in enumerate(rows):
        for column, entry in row.items():
            whole[number, column] = entry.as_expr()
    minors = maximal_minors(rows, size + 1, RING, set(range(size + 1)), lambda line: None)
    for column in range(size + 1):
        kept = [k for k in range(size + 1) if k != column]
        expected = sympy.expand(whole[:, kept].det(method="berkowitz"))
        assert minors.get(column, RING.zero).as_expr() == expected


def test_only_the_allowed_minors_are_made() -> None:
    rows = [{0: RING.one, 1: RING.gens[0]}, {1: RING.one, 2: RING.gens[1]}]
    assert set(maximal_minors(rows, 3, RING, {0, 1, 2}, lambda line: None)) == {0, 1, 2}
    assert set(maximal_minors(rows, 3, RING, {2}, lambda line: None)) == {2}


def test_progress_is_told_row_by_row() -> None:
    lines: list[str] = []
    rows = [{0: RING.one, 1: RING.gens[0]}, {1: RING.one, 2: RING.gens[1]}]
    maximal_minors(rows, 3, RING, {0, 1, 2}, lines.append)
    assert len(lines) == 2
    assert "row 1 of 2" in lines[0]


def test_a_weight_is_a_power_of_its_symbol_and_of_s() -> None:
    text = "in -- R1 -- a -- L1 -- b -- C1 -- gnd\nb -- Y1 -- c -- Z1 -- gnd\nask H = V_c/V_in"
    ratio = solve(build_system(*posed(text, "H")))
    assert ratio is not None
    names = {name: sympy.Symbol(name) for name in ratio.symbols}

    def value(coefficients: tuple[dict[tuple[int, ...], int], ...]) -> sympy.Expr:
        return sum(
            number
            * s**power
            * sympy.prod(names[n] ** e for n, e in zip(ratio.symbols, exponents, strict=True))
            for power, coefficient in enumerate(coefficients)
            for exponents, number in coefficient.items()
        )

    R1, L1, C1, Y1, Z1 = (names[n] for n in ("R1", "L1", "C1", "Y1", "Z1"))
    series = R1 + s * L1
    shunt = s * C1 + 1 / (1 / Y1 + Z1)
    expected = 1 / (1 + series * shunt) * Z1 / (1 / Y1 + Z1)
    assert sympy.simplify(value(ratio.numerator) / value(ratio.denominator) - expected) == 0
    assert all(e >= 0 for c in (*ratio.numerator, *ratio.denominator) for exponents in c for e in exponents)


def test_a_ten_section_ladder_of_resistors_alone_is_solved_within_seconds() -> None:
    wires = "".join(f"n{i} -- R{i} -- n{i + 1} -- R{i + 50} -- gnd\n" for i in range(8))
    ratio = solve(build_system(*posed(wires + "ask H = V_n8/V_n0", "H")))
    assert ratio is not None
    # the products of a ladder of n sections are Fibonacci numbers F(2n + 1): Morgan-Voyce polynomials, from memory
    assert sum(ratio.denominator[0].values()) == sympy.fibonacci(17)
