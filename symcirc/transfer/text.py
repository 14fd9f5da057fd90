"""Forms as plain arithmetic: ``+ - * / **``, ``sqrt``, ``pi``, names and whole numbers.

The text means the same in the stage sheet's language and in most programming languages.
"""

from __future__ import annotations

from symcirc.transfer.form import Decimal, Divided, Form, Integer, Negative, Power, Product, Sum, Symbol


def text(form: Form) -> str:
    """Return a form as plain arithmetic.

    >>> from symcirc.transfer.form import Root
    >>> r1, c1 = Symbol("R1"), Symbol("C1")
    >>> text(Negative(Divided(Sum((Integer(1), Negative(r1))), Product((r1, Root(c1))))))
    '-(1 - R1)/(R1*sqrt(C1))'
    """
    match form:
        case Integer():
            return str(form.value)
        case Decimal():
            return form.text
        case Symbol():
            return form.name
        case Sum():
            return _sum(form)
        case Negative():
            return "-" + _factor(form.operand, (Sum, Negative))
        case Product():
            return "*".join(_factor(factor, (Sum, Negative, Divided)) for factor in form.factors)
        case Divided():
            above = _factor(form.above, (Sum, Negative, Divided))
            return f"{above}/{_factor(form.below, (Sum, Negative, Divided, Product))}"
        case Power():
            base = _factor(form.base, (Sum, Negative, Divided, Product, Power))
            return f"{base}**{form.exponent}"
    return f"sqrt({text(form.operand)})"


def _sum(form: Sum) -> str:
    written = text(form.terms[0])
    for term in form.terms[1:]:
        if isinstance(term, Negative):
            written += " - " + _factor(term.operand, (Sum, Negative))
        else:
            written += " + " + _factor(term, (Sum,))
    return written


def _factor(form: Form, in_brackets: tuple[type[Form], ...]) -> str:
    return f"({text(form)})" if isinstance(form, in_brackets) else text(form)
