"""Formulas as text and as LaTeX."""

from __future__ import annotations

from collections.abc import Sequence

import sympy

from symcirc.match.arithmetic import Factor, Term, by_powers_of, term_of, terms_of
from symcirc.match.problem import Condition, Root
from symcirc.transfer.latex import latex_name


def equation_text(formula: sympy.Expr | Root) -> str:
    """Return a formula in plain arithmetic: ``+ - * / **``, ``sqrt``, ``pi``, names and numbers.

    >>> C1, C2, R1 = sympy.symbols("C1 C2 R1")
    >>> equation_text((C1 + sympy.sqrt(C1 * (C1 - 2 * C2))) / (2400 * sympy.sqrt(2) * sympy.pi * C1 * C2))
    'sqrt(2)*(C1 + sqrt(C1*(C1 - 2*C2)))/(4800*pi*C1*C2)'
    >>> equation_text(1 / (5760000 * sympy.pi**2 * C1 * C2 * R1))
    '1/((2400*pi)**2*R1*C1*C2)'
    >>> equation_text(Root(R1**3 * C1 - 2 * R1 + 1, "R1", 1))
    'root(R1**3*C1 - 2*R1 + 1 in R1)'
    """
    if isinstance(formula, Root):
        ordered = by_powers_of(formula.polynomial, sympy.Symbol(formula.variable))
        return f"root({_joined([term_of(t) for t in ordered])} in {formula.variable})"
    return _joined(terms_of(formula))


def condition_text(condition: Condition) -> str:
    """Return a condition in plain arithmetic; ``==`` for an equality.

    >>> condition_text(Condition(sympy.Symbol("C1"), ">=", 2 * sympy.Symbol("C2")))
    'C1 >= 2*C2'
    """
    relation = "==" if condition.relation == "=" else condition.relation
    return f"{equation_text(condition.left)} {relation} {equation_text(condition.right)}"


def _joined(terms: Sequence[Term]) -> str:
    text = ""
    for term in terms:
        product = _product(term)
        if text:
            text += (" + " if term.sign > 0 else " - ") + product
        else:
            text = ("" if term.sign > 0 else "-") + product
    return text


def _product(term: Term) -> str:
    above = "*".join(_factor(f) for f in term.above) or "1"
    if not term.below:
        return above
    below = "*".join(_factor(f) for f in term.below)
    return f"{above}/({below})" if len(term.below) > 1 else f"{above}/{below}"


def _factor(factor: Factor) -> str:
    bases = [_base(b) for b in factor.bases]
    if factor.power == sympy.S.Half:
        inner = bases[0][1:-1] if bases[0].startswith("(") and len(bases) == 1 else "*".join(bases)
        return f"sqrt({inner})"
    text = f"({'*'.join(bases)})" if len(bases) > 1 else bases[0]
    if factor.power == 1:
        return text
    power = str(factor.power) if factor.power.is_Integer else f"({factor.power})"
    return f"{text}**{power}"


def _base(base: sympy.Expr | str) -> str:
    if isinstance(base, str):
        return base
    return str(base) if base.is_Symbol or base.is_Integer or base == sympy.pi else f"({equation_text(base)})"


def equation_latex(formula: sympy.Expr | Root) -> str:
    r"""Return a formula as LaTeX source.

    >>> C1, C2, R1 = sympy.symbols("C1 C2 R1")
    >>> print(equation_latex((C1 + sympy.sqrt(C1 * (C1 - 2 * C2))) / (2400 * sympy.pi * C1 * C2)))
    \frac{C_{1} + \sqrt{C_{1} \left(C_{1} - 2 C_{2}\right)}}{2400 \pi C_{1} C_{2}}
    """
    if isinstance(formula, Root):
        ordered = by_powers_of(formula.polynomial, sympy.Symbol(formula.variable))
        name = latex_name(formula.variable)
        return rf"\operatorname{{root}}_{{{name}}}\left({_joined_latex([term_of(t) for t in ordered])}\right)"
    return _joined_latex(terms_of(formula))


def condition_latex(condition: Condition) -> str:
    r"""Return a condition as LaTeX source.

    >>> print(condition_latex(Condition(sympy.Symbol("C1"), ">=", 2 * sympy.Symbol("C2"))))
    C_{1} \ge 2 C_{2}
    """
    relation = {">=": r"\ge", "<=": r"\le"}.get(condition.relation, condition.relation)
    return f"{equation_latex(condition.left)} {relation} {equation_latex(condition.right)}"


def _joined_latex(terms: Sequence[Term]) -> str:
    text = ""
    for term in terms:
        product = _product_latex(term)
        if text:
            text += (" + " if term.sign > 0 else " - ") + product
        else:
            text = ("" if term.sign > 0 else "-") + product
    return text


def _product_latex(term: Term) -> str:
    if not term.below:
        return _line(term.above)
    return rf"\frac{{{_line(term.above)}}}{{{_line(term.below)}}}"


def _line(factors: Sequence[Factor]) -> str:
    if len(factors) == 1 and factors[0].power == 1 and len(factors[0].bases) == 1:
        base = factors[0].bases[0]
        if not isinstance(base, str) and base.is_Add:
            return equation_latex(base)  # alone on its line: no brackets
    return " ".join(_factor_latex(f) for f in factors) or "1"


def _factor_latex(factor: Factor) -> str:
    bases = [_base_latex(b) for b in factor.bases]
    if not factor.power.is_Integer:
        inner = factor.bases[0]
        plain = inner if isinstance(inner, str) else equation_latex(inner)
        above, below = factor.power.p, factor.power.q
        root = rf"\sqrt{{{plain}}}" if below == 2 else rf"\sqrt[{below}]{{{plain}}}"
        return root if above == 1 else rf"\left({root}\right)^{{{above}}}"
    text = rf"\left({' '.join(bases)}\right)" if len(bases) > 1 else bases[0]
    return text if factor.power == 1 else f"{text}^{{{factor.power}}}"


def _base_latex(base: sympy.Expr | str) -> str:
    if isinstance(base, str):
        mantissa, _, exponent = base.partition("e")
        return rf"{mantissa} \cdot 10^{{{int(exponent)}}}" if exponent else base
    if base == sympy.pi:
        return r"\pi"
    if base.is_Symbol:
        return latex_name(str(base))
    return str(base) if base.is_Integer else rf"\left({equation_latex(base)}\right)"
