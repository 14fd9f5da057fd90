"""Forms as plain arithmetic and as LaTeX: brackets where they are needed, names in a way of their own."""

from __future__ import annotations

import itertools

import pytest

from symcirc.transfer.form import (
    Divided,
    Form,
    Integer,
    Negative,
    Power,
    Product,
    Root,
    Sum,
    Symbol,
    children,
    polynomial_in_s,
    product,
    times_s,
)
from symcirc.transfer.latex import latex, latex_function, latex_name
from symcirc.transfer.standard import Forms
from symcirc.transfer.text import text

R, C, K = Symbol("R1"), Symbol("C1"), Symbol("k")
TWO = Integer(2)
A_SUM = Sum((Integer(1), Negative(K)))

WRITTEN = [
    (Product((R, A_SUM)), "R1*(1 - k)", r"R_{1} \left(1 - k\right)"),
    (Divided(R, Product((TWO, C))), "R1/(2*C1)", r"\frac{R_{1}}{2 C_{1}}"),
    (Divided(A_SUM, C), "(1 - k)/C1", r"\frac{1 - k}{C_{1}}"),
    (Divided(R, A_SUM), "R1/(1 - k)", r"\frac{R_{1}}{1 - k}"),
    (Divided(Divided(R, C), K), "(R1/C1)/k", r"\frac{\frac{R_{1}}{C_{1}}}{k}"),
    (Product((R, Divided(C, K))), "R1*(C1/k)", r"R_{1} \frac{C_{1}}{k}"),
    (Power(A_SUM, 2), "(1 - k)**2", r"\left(1 - k\right)^{2}"),
    (Power(Root(R), 3), "sqrt(R1)**3", r"\left(\sqrt{R_{1}}\right)^{3}"),
    (Negative(A_SUM), "-(1 - k)", r"-\left(1 - k\right)"),
    (Sum((R, Negative(A_SUM))), "R1 - (1 - k)", r"R_{1} - \left(1 - k\right)"),
    (Sum((R, A_SUM)), "R1 + (1 - k)", r"R_{1} + \left(1 - k\right)"),
    (Root(Divided(R, C)), "sqrt(R1/C1)", r"\sqrt{\frac{R_{1}}{C_{1}}}"),
    (Divided(Root(R), Symbol("pi")), "sqrt(R1)/pi", r"\frac{\sqrt{R_{1}}}{\pi}"),
    (
        Divided(Sum((Divided(Integer(1), R), K)), C),
        "(1/R1 + k)/C1",
        r"\frac{1}{C_{1}} \left(\frac{1}{R_{1}} + k\right)",
    ),
]


@pytest.mark.parametrize(("form", "plain", "tex"), WRITTEN, ids=[w[1] for w in WRITTEN])
def test_brackets_stand_where_they_are_needed(form: Form, plain: str, tex: str) -> None:
    assert text(form) == plain
    assert latex(form) == tex


NAMES = {
    "R1": "R_{1}",
    "R10": "R_{10}",
    "C2": "C_{2}",
    "k": "k",
    "k1": "k_{1}",
    "Rf": r"R_{\mathrm{f}}",
    "R1a": r"R_{\mathrm{1a}}",
    "S1_R1": r"R_{\mathrm{S1},1}",
    "S1_Rf": r"R_{\mathrm{S1},\mathrm{f}}",
    "S1_S2_C3": r"C_{\mathrm{S1},\mathrm{S2},3}",
    "U1_gain": r"\mathrm{gain}_{\mathrm{U1}}",
    "S1_U1_gbw": r"\mathrm{gbw}_{\mathrm{S1},\mathrm{U1}}",
    "V_out": "V_{out}",
    "I_R1": "I_{R1}",
    "beta": r"\mathrm{beta}",
    "r_min": r"\mathrm{r\_min}",
    "R_1": r"\mathrm{R\_1}",
    "gain": r"\mathrm{gain}",
    "a_": r"\mathrm{a\_}",
    "pi": r"\pi",
    "s": "s",
}


@pytest.mark.parametrize("name", NAMES)
def test_a_name_is_written_in_latex_by_the_rule(name: str) -> None:
    assert latex_name(name) == NAMES[name]


def test_no_two_names_look_the_same() -> None:
    pieces = ["R1", "R", "1", "Rf", "f", "a", "gain", "S1", "", "k"]
    names = {"_".join(parts) for n in (1, 2, 3) for parts in itertools.product(pieces, repeat=n)}
    names = {name for name in names if name[:1].isalpha()}
    written = [latex_name(name) for name in names]
    assert len(set(written)) == len(names)


def test_s_stands_after_the_numbers_and_before_the_symbols() -> None:
    assert text(times_s(Product((TWO, R, C)), 1)) == "2*s*R1*C1"
    assert text(times_s(Product((Root(TWO), R)), 2)) == "sqrt(2)*s**2*R1"
    assert text(times_s(Divided(Integer(1), Product((R, C))), 1)) == "s/(R1*C1)"
    assert text(times_s(Negative(A_SUM), 1)) == "-s*(1 - k)"
    assert text(times_s(Integer(1), 3)) == "s**3"
    assert text(times_s(Integer(0), 3)) == "0"
    assert text(times_s(R, 0)) == "R1"


def test_a_polynomial_in_s_begins_with_its_highest_power() -> None:
    assert text(polynomial_in_s([Sum((R, C)), Integer(0), Negative(K)])) == "-s**2*k + R1 + C1"
    assert text(polynomial_in_s([Negative(R), Negative(K)])) == "-(s*k + R1)"
    assert text(polynomial_in_s([Negative(R)])) == "-R1"
    assert text(polynomial_in_s([Integer(0)])) == "0"
    assert text(polynomial_in_s([A_SUM])) == "1 - k"


def test_a_product_without_factors_is_one() -> None:
    assert product([]) == Integer(1)
    assert children(Root(R)) == (R,)


def test_a_whole_function_in_latex_is_a_fraction_of_descending_powers() -> None:
    forms = Forms((Negative(R),), (Integer(1), Product((R, C)), Integer(1)))
    assert latex_function(forms) == r"-\frac{R_{1}}{s^{2} + s R_{1} C_{1} + 1}"
    assert latex_function(Forms((Integer(0), K), (Integer(1),))) == "s k"
    assert latex_function(Forms((K,), (R,))) == r"\frac{k}{R_{1}}"
