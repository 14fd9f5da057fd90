r"""Forms and whole functions in LaTeX.

How names are written (each name in a way of its own, so that two names never look the same):

- a letter and digits: ``R1`` is R_{1};
- a part with letters: ``Rf`` is R_{\mathrm{f}};
- a part of a block: ``S1_R1`` is R_{\mathrm{S1},1};
- a device's parameter: ``U1_gain`` is \mathrm{gain}_{\mathrm{U1}};
- voltages and currents: ``V_out`` is V_{out};
- other names of several letters: upright, \mathrm{beta}; an underscore stays, \mathrm{r\_min}.
"""

from __future__ import annotations

import re

from symcirc.transfer.form import (
    ONE,
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
)
from symcirc.transfer.standard import Forms

_PARAMETERS = ("gain", "gbw", "gm", "rm", "ratio")


def latex(form: Form) -> str:
    r"""Return a form in LaTeX's mathematics.

    >>> latex(Divided(ONE, Product((Symbol("R1"), Symbol("S1_C2")))))
    '\\frac{1}{R_{1} C_{\\mathrm{S1},2}}'
    """
    match form:
        case Integer():
            return str(form.value)
        case Symbol():
            return latex_name(form.name)
        case Sum():
            return _sum(form)
        case Negative():
            return "-" + _factor(form.operand, (Sum, Negative))
        case Product():
            return " ".join(_factor(factor, (Sum, Negative)) for factor in form.factors)
        case Divided():
            return _divided(form)
        case Power():
            base = _factor(form.base, (Sum, Negative, Divided, Product, Power, Root))
            return f"{base}^{{{form.exponent}}}"
    return rf"\sqrt{{{latex(form.operand)}}}"


def latex_function(forms: Forms) -> str:
    r"""Return a function in LaTeX, in descending powers of s.

    >>> latex_function(Forms((ONE,), (ONE, Symbol("T"))))
    '\\frac{1}{s T + 1}'
    """
    above, below = (polynomial_in_s(list(side)) for side in (forms.numerator, forms.denominator))
    if below == ONE:
        return latex(above)
    if isinstance(above, Negative):
        return rf"-\frac{{{latex(above.operand)}}}{{{latex(below)}}}"
    return rf"\frac{{{latex(above)}}}{{{latex(below)}}}"


def latex_name(name: str) -> str:
    r"""Return a name in LaTeX, as the head of this module says.

    >>> latex_name("V_out"), latex_name("k"), latex_name("Rf")
    ('V_{out}', 'k', 'R_{\\mathrm{f}}')
    """
    if name == "pi":
        return r"\pi"
    if re.fullmatch(r"[VI]_[A-Za-z0-9]+", name):
        return f"{name[0]}_{{{name[2:]}}}"
    *blocks, own = name.split("_")
    if all(blocks):
        within = [rf"\mathrm{{{block}}}" for block in blocks]
        if re.fullmatch(r"[RCLZY][A-Za-z0-9]+|[A-Za-z][0-9]+", own):
            index = own[1:] if own[1:].isdigit() else rf"\mathrm{{{own[1:]}}}"
            return f"{own[0]}_{{{','.join([*within, index])}}}"
        if blocks and own in _PARAMETERS:
            return rf"\mathrm{{{own}}}_{{{','.join(within)}}}"
    return name if len(name) == 1 else rf"\mathrm{{{name}}}".replace("_", r"\_")


def _sum(form: Sum) -> str:
    written = latex(form.terms[0])
    for term in form.terms[1:]:
        if isinstance(term, Negative):
            written += " - " + _factor(term.operand, (Sum, Negative))
        else:
            written += " + " + _factor(term, (Sum,))
    return written


def _factor(form: Form, in_brackets: tuple[type[Form], ...]) -> str:
    return rf"\left({latex(form)}\right)" if isinstance(form, in_brackets) else latex(form)


def _divided(form: Divided) -> str:
    """Write a fraction; sums of fractions above the line are written as brackets after it instead."""
    factors = list(form.above.factors) if isinstance(form.above, Product) else [form.above]
    after = [factor for factor in factors if isinstance(factor, Sum) and _holds_fraction(factor)]
    above = product([factor for factor in factors if factor not in after])
    fraction = rf"\frac{{{latex(above)}}}{{{latex(form.below)}}}"
    return " ".join([fraction, *(_factor(factor, (Sum,)) for factor in after)])


def _holds_fraction(form: Form) -> bool:
    return isinstance(form, Divided) or any(_holds_fraction(child) for child in children(form))
