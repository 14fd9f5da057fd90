"""The tests' own exact solve is itself checked: by the hand-worked laws, and by being made to fail."""

from __future__ import annotations

import random
from fractions import Fraction

import pytest
import sympy

from symcirc.sheet.model import Sheet
from tests.core.functions import read
from tests.core.tableau import PRIME, asked_ratio, build_tableau, inverse, residue, solve_rows, square_root
from tests.core.test_part_laws import DRIVES, LAWS
from tests.core.three_ways import random_residues


def in_the_field(expression: sympy.Expr, values: dict[str, int]) -> int:
    above, below = sympy.fraction(sympy.together(expression))

    def value(polynomial: sympy.Expr) -> int:
        number = polynomial.subs({sympy.Symbol(name): known for name, known in values.items()})
        return int(number) % PRIME

    return value(above) * inverse(value(below)) % PRIME


@pytest.mark.parametrize(
    ("name", "text", "expected"), [*LAWS, *DRIVES], ids=lambda x: x if " " in str(x) else None
)
def test_the_tableau_obeys_every_law(name: str, text: str, expected: sympy.Expr) -> None:
    sheet = read(text)
    values = random_residues(sheet, random.Random(name))
    assert asked_ratio(sheet, sheet.ask("H"), values) == in_the_field(expected, values)


def singular(text: str) -> bool:
    sheet: Sheet = read(text)
    return solve_rows(build_tableau(sheet, sheet.asks[0], random_residues(sheet, random.Random(1)))) is None


def test_a_conveyor_of_sign_minus_with_y_grounded_and_a_resistor_from_x_to_z_is_singular() -> None:
    # design.md: two common trees, determinant 0
    text = "in -- R1 -- a\nK1 conveyor: x a, y gnd, z b, sign {}\na -- R2 -- b\nask H = V_b/V_in"
    assert singular(text.format("-"))
    assert not singular(text.format("+"))


def test_a_balance_by_value_is_regular_and_a_balance_by_tie_is_singular() -> None:
    text = "a -- R1 -- p -- R2 -- out\ngnd -- R3 -- m -- R4 -- out\nU1 opamp: plus p, minus m, drives out\n{}"
    asked = "ask H = V_p/I_p with V_a = 0\n"
    assert not singular(text.format(asked))
    assert singular(text.format(asked + "fix R4 = R2*R3/R1"))


def test_the_field_holds_the_roots_that_ties_use() -> None:
    two, three = square_root(2), square_root(3)
    assert two * two % PRIME == 2
    assert two * three % PRIME == square_root(6)
    assert residue(Fraction(1, 3)) * 3 % PRIME == 1
    with pytest.raises(AssertionError, match="no square"):
        square_root(PRIME - 1)


def test_prime_is_prime() -> None:
    assert sympy.isprime(PRIME)
