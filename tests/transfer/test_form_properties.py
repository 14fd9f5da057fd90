"""What every written form must hold: it means the quotient that it was made from, and is proved to."""

from __future__ import annotations

from fractions import Fraction

import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer import arrange, square_root
from symcirc.transfer.arrange import form_of
from symcirc.transfer.assemble import assemble
from symcirc.transfer.form import Divided, Form, Integer, Negative, Product, Root, Sum, Symbol
from symcirc.transfer.latex import latex, latex_name
from symcirc.transfer.residues import FormMismatch, number_of, require_equal, require_square, residues_for
from symcirc.transfer.text import text
from symcirc.transfer.ties import Quotient
from tests.transfer.arithmetic import latex_value_of, value_of
from tests.transfer.samples import C1, NAMES, ONE, PARTS, R1, R2, RING, fractions_for, value_at

exponents = st.tuples(*[st.sampled_from([0, 0, 0, 1, 1, 2])] * RING.ngens)
coefficients = st.sampled_from([Fraction(c) for c in ("1", "1", "1", "-1", "2", "-3", "1/2", "-5/6")])


@st.composite
def polynomials(draw: st.DrawFn, most: int = 5) -> PolyElement:
    """Draw a polynomial that is not zero."""
    terms = draw(st.dictionaries(exponents, coefficients, min_size=1, max_size=most))
    return RING.from_dict({m: QQ(c.numerator, c.denominator) for m, c in terms.items()})


@st.composite
def multilinear(draw: st.DrawFn, symbols: list[int]) -> PolyElement:
    """Draw a polynomial in some symbols, none of them squared."""
    part = st.tuples(*[st.booleans() if k in symbols else st.just(False) for k in range(RING.ngens)])
    terms = draw(st.sets(part, min_size=1, max_size=6))
    return RING.from_dict({tuple(map(int, m)): QQ(1) for m in terms})


def check_written(above: PolyElement, below: PolyElement) -> None:
    """Read a form back from both ways of writing it, at rational values."""
    form = form_of(above, below)
    values = fractions_for(RING, 7)
    expected = value_at(above, values) / value_at(below, values)
    assert value_of(text(form), values, Fraction) == expected
    in_latex = {latex_name(name): value for name, value in values.items()}
    assert latex_value_of(latex(form), in_latex, Fraction) == expected


@settings(max_examples=150, deadline=None, derandomize=True)
@given(polynomials(), polynomials(3))
def test_what_is_written_means_the_quotient(above: PolyElement, below: PolyElement) -> None:
    check_written(above, below)


@settings(max_examples=100, deadline=None, derandomize=True)
@given(multilinear([0, 1, 2]), multilinear([3, 4, 5]), multilinear([6, 7, 8]), multilinear(list(range(9))))
def test_products_of_sums_are_written_right(
    first: PolyElement, second: PolyElement, third: PolyElement, fourth: PolyElement
) -> None:
    check_written(first * second * third, fourth * first)


@settings(max_examples=60, deadline=None, derandomize=True)
@given(polynomials(4), polynomials(2), polynomials(2))
def test_a_common_factor_does_not_show(above: PolyElement, below: PolyElement, common: PolyElement) -> None:
    assert form_of(above * common, below * common) == form_of(above, below)


def test_what_is_written_does_not_depend_on_the_order_of_the_symbols() -> None:
    turned = PolyRing(list(reversed(NAMES)), QQ, lex)

    def turn(polynomial: PolyElement) -> PolyElement:
        return turned.from_dict({m[::-1]: c for m, c in polynomial.items()})

    above, below = R1 * C1 + R2 * C1 + R1 * R2, R1 * R2 * C1
    assert text(form_of(turn(above), turn(below))) == text(form_of(above, below)) == "1/R1 + 1/R2 + 1/C1"


def test_a_form_over_a_field_with_roots_means_the_quotient() -> None:
    field = QQ.algebraic_field(sympy.sqrt(2), sympy.sqrt(5))
    ring = PolyRing(["R1", "R2", "C1"], field, lex)
    r1, r2, c1 = ring.gens
    root = [field.from_sympy(sympy.sqrt(n)) for n in (2, 5, 10)]
    above, below = r1 * root[0] - r2 * c1 * (root[1] + 1) + r1 * r2 * root[2] / 3, c1 * r1 + root[2] * c1 * r2
    values = {"R1": sympy.Rational(3, 7), "R2": sympy.Rational(11, 2), "C1": sympy.Rational(5, 3)}
    written = value_of(text(form_of(above, below)), values, sympy.Integer, sympy.sqrt)
    expected = above.as_expr().subs(values) / below.as_expr().subs(values)
    assert sympy.simplify(written - expected) == 0


def test_a_number_under_a_root_is_proved_like_any_other() -> None:
    number = sympy.sqrt(3 - 2 * sympy.sqrt(2) / 5)
    field = QQ.algebraic_field(sympy.sqrt(2), number)
    ring = PolyRing(["R1"], field, lex)
    form = form_of(ring.gens[0] * field.from_sympy(1 + 2 * sympy.sqrt(2) - number), ring.one)
    assert text(form) == "(1 + 2*sqrt(2) - sqrt(3 - 2*sqrt(2)/5))*R1"
    with pytest.raises(ValueError, match="not a number"):
        number_of(Symbol("R1"))


# the proofs fire ---------------------------------------------------------------------------------------------


def test_a_form_that_is_wrong_is_not_handed_out(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(arrange, "assemble", lambda *given: Sum((assemble(*given), Integer(1))))
    with pytest.raises(FormMismatch):
        form_of(R1 + R2, R1 * R2 * C1)


def test_a_root_that_is_wrong_is_not_handed_out(monkeypatch: pytest.MonkeyPatch) -> None:
    honest = square_root._quotient

    def doubled(ring: PolyRing, powers: dict[PolyElement, int]) -> Form:
        return Product((Integer(2), honest(ring, powers)))

    monkeypatch.setattr(square_root, "_quotient", doubled)
    with pytest.raises(FormMismatch):
        square_root.square_root(Quotient(R1, R2), Quotient(ONE, C1), PARTS)


@pytest.mark.parametrize(
    "wrong",
    [
        Divided(Symbol("R2"), Symbol("R1")),
        Negative(Divided(Symbol("R1"), Symbol("R2"))),
        Divided(Symbol("R1"), Product((Integer(2), Symbol("R2")))),
        Divided(Symbol("R1"), Symbol("C1")),
        Integer(1),
    ],
)
def test_a_form_that_differs_is_told_from_the_quotient(wrong: Divided | Negative | Integer) -> None:
    require_equal(Divided(Symbol("R1"), Symbol("R2")), R1, R2)
    with pytest.raises(FormMismatch):
        require_equal(wrong, R1, R2)


def test_the_square_of_a_root_is_told_from_another() -> None:
    form = Divided(Root(Symbol("R1")), Symbol("R2"))
    require_square(form, Quotient(R1, ONE), Quotient(ONE, R2))
    require_square(form, Quotient(R1, R2**2), Quotient(ONE, ONE))
    with pytest.raises(FormMismatch):
        require_square(form, Quotient(R1, R2), Quotient(ONE, ONE))


def test_the_image_of_a_field_with_roots_is_a_homomorphism() -> None:
    field = QQ.algebraic_field(sympy.sqrt(2), sympy.sqrt(3), sympy.sqrt(5))
    point = residues_for(PolyRing(["R1"], field, lex))
    roots = [field.from_sympy(sympy.sqrt(n)) for n in (2, 3, 5, 6, 15)]
    images = [point.number(root) for root in roots]
    assert [image * image % point.prime for image in images] == [2, 3, 5, 6, 15]
    assert images[0] * images[1] % point.prime == images[3]
    assert (
        point.number(roots[1] + roots[4] / 2)
        == (images[1] + images[4] * pow(2, -1, point.prime)) % point.prime
    )
