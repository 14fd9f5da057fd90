"""How quotients of polynomials are written: what an engineer would write by hand, exactly."""

from __future__ import annotations

import pytest
import sympy
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.arrange import form_of
from symcirc.transfer.text import text
from tests.transfer.samples import C1, C2, L1, ONE, R1, R2, R3, R4, R10, RING, K

EXAMPLES = [
    (ONE, R1 * R2 * C1 * C2, "1/(R1*R2*C1*C2)"),
    (R1 + R2, R1 * R2 * C1, "(1/R1 + 1/R2)/C1"),
    (R1 * R2 + R1 * R3 + R2 * R3, R1 * R2 * R3 * C1, "(1/R1 + 1/R2 + 1/R3)/C1"),
    (R3 * C2 * (R1 + R2) + R1 * R2 * C1, R1 * R2 * R3 * C1 * C2, "(1/R1 + 1/R2)/C1 + 1/(R3*C2)"),
    (R2 * C1 * (R3 + R4), ONE, "R2*C1*(R3 + R4)"),
    (R3 + R4, R1 * R2 * R3 * C1 * C2, "(1 + R4/R3)/(R1*R2*C1*C2)"),
    (R1 + R2 - K * R2, R1 * R2 * C2, "((1 - k)/R1 + 1/R2)/C2"),
    (R1 * C1 * (1 - K) + C2 * (R1 + R2), ONE, "R1*C1*(1 - k) + C2*(R1 + R2)"),
    (
        R1 * C1 * (1 - K) + C2 * (R1 + R2),
        R1 * R2 * C1 * C2,
        "(1/R1 + 1/R2)/C1 + (1 - k)/(R2*C2)",
    ),
    (C2 * (R1 * R2 + R1 * R3 + R2 * R3), ONE, "C2*(R1*R2 + R1*R3 + R2*R3)"),
    (R1 * R2 + R1 * R3 + R2 * R3, ONE, "R1*R2 + R1*R3 + R2*R3"),
    (R1 * R2, R1 + R2, "R1*R2/(R1 + R2)"),
    (R2, R1 + R2, "R2/(R1 + R2)"),
    (R1 + R2 + R3, R1 * (R2 + R3) * C1, "(1/R1 + 1/(R2 + R3))/C1"),
    (R1 * R2 + R1 * R3 + R2 * R3, R1 * R2 * R3 * (C1 + C2), "(1/R1 + 1/R2 + 1/R3)/(C1 + C2)"),
    ((R1 + R2) ** 2 * C1, R3**2, "C1*(R1 + R2)**2/R3**2"),
    (ONE, L1 * C1, "1/(C1*L1)"),
    (R10 * R2, ONE, "R2*R10"),
    (R1 + R2, R1, "1 + R2/R1"),
    (R1, R1, "1"),
    (RING.zero, R1, "0"),
    (-R2, R1, "-R2/R1"),
    (-R1 - R2, ONE, "-(R1 + R2)"),
    (K - 1, ONE, "k - 1"),
    (1 - K, ONE, "1 - k"),
    (ONE, (K - 1) * C1 * R2, "1/(R2*C1*(k - 1))"),
    (-ONE, (K - 1) * C1 * R2, "1/(R2*C1*(1 - k))"),
    (R1 / 2, ONE, "R1/2"),
    (2 * R1 + 2 * R2, 3 * C1, "2*(R1 + R2)/(3*C1)"),
    (R2 - R1, ONE, "R2 - R1"),
    ((R1 + R2) * (C1 + C2), ONE, "(R1 + R2)*(C1 + C2)"),
]


@pytest.mark.parametrize(("above", "below", "expected"), EXAMPLES, ids=[e[2] for e in EXAMPLES])
def test_a_quotient_is_grouped_as_an_engineer_writes_it(
    above: PolyElement, below: PolyElement, expected: str
) -> None:
    assert text(form_of(above, below)) == expected


def test_numbers_with_roots_stand_before_the_parts() -> None:
    root = QQ.algebraic_field(sympy.sqrt(2), sympy.sqrt(3))
    ring = PolyRing(["R1", "R2", "C1"], root, lex)
    r1, r2, c1 = ring.gens
    two, three = root.from_sympy(sympy.sqrt(2)), root.from_sympy(sympy.sqrt(3))
    assert text(form_of(two * r1 + two * r2, c1)) == "sqrt(2)*(R1 + R2)/C1"
    assert text(form_of(r1 + two * r2, c1)) == "(R1 + sqrt(2)*R2)/C1"
    assert text(form_of((1 + two) * r1, three * c1)) == "(sqrt(3) + sqrt(6))*R1/(3*C1)"
    assert text(form_of(r1 * two - r2, -r1 * r2)) == "1/R1 - sqrt(2)/R2"
    assert text(form_of(ring.one, two * r1 * c1)) == "sqrt(2)/(2*R1*C1)"


def test_nested_roots_of_a_tie_are_written_as_they_are() -> None:
    inner = sympy.sqrt(2 + sympy.sqrt(2))
    field = QQ.algebraic_field(sympy.sqrt(2), inner)
    ring = PolyRing(["R1"], field, lex)
    form = form_of(ring.gens[0] * field.from_sympy(inner), ring.one)
    assert text(form) == "sqrt(2 + sqrt(2))*R1"


def test_pi_stands_before_the_parts() -> None:
    ring = PolyRing(["R1", "C1", "f", "pi"], QQ, lex)
    r1, c1, f, pi = ring.gens
    assert text(form_of(ring.one, 2 * pi * f * r1 * c1)) == "1/(2*pi*R1*C1*f)"


def test_parts_of_blocks_sort_with_their_kind() -> None:
    ring = PolyRing(["S1_C1", "S1_R1", "R2"], QQ, lex)
    c1, s1_r1, r2 = ring.gens
    assert text(form_of(s1_r1 * c1 + r2 * c1, ring.one)) == "S1_C1*(R2 + S1_R1)"
