r"""Forms and whole functions in LaTeX.

How names are written (each name in a way of its own, so that two names never look the same):

- a letter other than V and I, and digits: ``R1`` is R_{1};
- a part with letters: ``Rf`` is R_{\mathrm{f}};
- a part of a block: ``S1_R1`` is R_{\mathrm{S1},1};
- a device's parameter: ``U1_gain`` is \mathrm{gain}_{\mathrm{U1}};
- voltages and currents: ``V_out`` is V_{out}, and in a block ``V_S1_x`` is V_{\mathrm{S1},x};
- other names of several letters: upright, \mathrm{beta}; an underscore stays, \mathrm{r\_min}.
"""

from __future__ import annotations

import re

from symcirc.transfer.form import (
    ONE,
    Decimal,
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

#: Names that are no words of a sheet.
GREEK = {"pi": r"\pi", "ω0": r"\omega_{0}", "Δω0": r"\Delta\omega_{0}", "ΔQ": r"\Delta Q"}
#: The parameters of devices.
PARAMETERS = ("gain", "gbw", "gm", "rm", "ratio")


def latex(form: Form) -> str:
    r"""Return a form in LaTeX's mathematics.

    >>> latex(Divided(ONE, Product((Symbol("R1"), Symbol("S1_C2")))))
    '\\frac{1}{R_{1} C_{\\mathrm{S1},2}}'
    """
    match form:
        case Integer():
            return str(form.value)
        case Decimal():
            return latex_decimal(form.text)
        case Symbol():
            return latex_name(form.name)
        case Sum():
            return _sum(form)
        case Negative():
            return "-" + _factor(form.operand, (Sum, Negative))
        case Product():
            return _product(form)
        case Divided():
            return _divided(form)
        case Power():
            base = _factor(form.base, (Sum, Negative, Divided, Product, Power, Root))
            if isinstance(form.base, Decimal) and "e" in form.base.text:
                base = rf"\left({base}\right)"
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
    >>> latex_name("V_S1_x"), latex_name("V1")
    ('V_{\\mathrm{S1},x}', '\\mathrm{V1}')
    """
    if name in GREEK:
        return GREEK[name]
    *blocks, own = name.split("_")
    if all(blocks) and own:
        kind, within = (blocks[0], blocks[1:]) if blocks[:1] in (["V"], ["I"]) else ("", blocks)
        upright = [rf"\mathrm{{{block}}}" for block in within]
        if kind:
            return f"{kind}_{{{','.join([*upright, own])}}}"
        if re.fullmatch(r"[RCLZY][A-Za-z0-9]+|[A-HJ-UW-Za-z][0-9]+", own):
            index = own[1:] if own[1:].isdigit() else rf"\mathrm{{{own[1:]}}}"
            return f"{own[0]}_{{{','.join([*upright, index])}}}"
        if blocks and own in PARAMETERS:
            return rf"\mathrm{{{own}}}_{{{','.join(upright)}}}"
    return name if len(name) == 1 else rf"\mathrm{{{name}}}".replace("_", r"\_")


def latex_decimal(text: str) -> str:
    r"""Return a number in decimals in LaTeX, its power of ten as a factor.

    >>> latex_decimal("7.25e-12")
    '7.25 \\cdot 10^{-12}'
    """
    mantissa, _, exponent = text.partition("e")
    return rf"{mantissa} \cdot 10^{{{int(exponent)}}}" if exponent else mantissa


def _sum(form: Sum) -> str:
    written = latex(form.terms[0])
    for term in form.terms[1:]:
        if isinstance(term, Negative):
            written += " - " + _factor(term.operand, (Sum, Negative))
        else:
            written += " + " + _factor(term, (Sum,))
    return written


def _product(form: Product) -> str:
    r"""Write factors side by side, with a dot before one that begins with a digit: 4 and 25 are not 425."""
    text = ""
    for factor in form.factors:
        written = _factor(factor, (Sum, Negative))
        join = r" \cdot " if written[0].isdigit() else " "
        text += join + written if text else written
    return text


def _factor(form: Form, in_brackets: tuple[type[Form], ...]) -> str:
    return rf"\left({latex(form)}\right)" if isinstance(form, in_brackets) else latex(form)


def fraction_and_brackets(form: Divided) -> tuple[Divided, list[Form]]:
    """Return a fraction as it is written: sums of fractions above the line stand as brackets after it instead.

    >>> fraction_and_brackets(Divided(Symbol("R1"), Symbol("R2")))
    (Divided(above=Symbol(name='R1'), below=Symbol(name='R2')), [])
    """
    factors = list(form.above.factors) if isinstance(form.above, Product) else [form.above]
    after: list[Form] = [f for f in factors if isinstance(f, Sum) and _holds_fraction(f)]
    return Divided(product([factor for factor in factors if factor not in after]), form.below), after


def _divided(form: Divided) -> str:
    fraction, after = fraction_and_brackets(form)
    written = rf"\frac{{{latex(fraction.above)}}}{{{latex(fraction.below)}}}"
    return " ".join([written, *(_factor(factor, (Sum,)) for factor in after)])


def _holds_fraction(form: Form) -> bool:
    return isinstance(form, Divided) or any(_holds_fraction(child) for child in children(form))
