"""The check of a working as LaTeX: one display, every equality with its verdict behind it."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from symcirc.report.check_text import summary
from symcirc.report.lines import aligned
from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
)
from symcirc.slips.plain import spelled
from symcirc.transfer import form as forms
from symcirc.transfer.form import Form
from symcirc.transfer.latex import latex
from symcirc.working.names import Lexicon
from symcirc.working.records import Checked, Line


def check_latex(checked: Checked) -> Iterator[str]:
    """Yield the equations that were read, their verdicts and notes, then the summary as comments."""
    rows = [_row(line) for line in checked.lines if line.equation is not None]
    if rows:
        yield from aligned(rows)
    yield from (
        f"% line {line.line}: {line.verdict}: {line.text}" for line in checked.lines if not line.equation
    )
    yield from (f"% {sentence}" for sentence in summary(checked))


def _row(line: Line) -> str:
    assert line.equation is not None
    equation = line.equation
    left, right = (expression_latex(side, equation.lexicon) for side in (equation.left, equation.right))
    return rf"{left} &= {right} && \text{{{line.verdict}}}"


def expression_latex(expression: Expression, lexicon: Lexicon) -> str:
    """Return an expression of a working in LaTeX as it was written, but a name given to a name by that one."""

    def combine(node: Expression, operands: list[Form]) -> Form:
        if isinstance(node, Name):
            meant = lexicon.definitions.get(node.text)
            return forms.Symbol(spelled(meant.text if isinstance(meant, Name) else node.text, ""))
        return _form(node, operands)

    return latex(fold(expression, combine))


def _form(node: Expression, operands: list[Form]) -> Form:
    match node:
        case Number():
            return _number(node.value)
        case Name():
            return forms.Symbol(spelled(node.text, ""))
        case Sum():  # of reciprocals, where parallel parts were written
            pairs = zip(node.terms, operands, strict=True)
            return forms.Sum(
                tuple(forms.Divided(forms.ONE, o) if isinstance(t, Reciprocal) else o for t, o in pairs)
            )
        case Product():
            return _product(node, operands)
        case Negative():
            return forms.Negative(operands[0])
        case Reciprocal():
            return operands[0]  # its product puts it below the line
        case Power():
            return forms.Power(operands[0], node.exponent)
        case Root():
            return forms.Root(operands[0])


def _product(node: Product, operands: list[Form]) -> Form:
    """Return a quotient, the sign of its first factor before it."""
    first, minus = operands[0], isinstance(operands[0], forms.Negative)
    factors = [first.operand if isinstance(first, forms.Negative) else first, *operands[1:]]
    pairs = list(zip(node.factors, factors, strict=True))
    above = [factor for written, factor in pairs if not isinstance(written, Reciprocal)]
    below = [factor for written, factor in pairs if isinstance(written, Reciprocal)]
    whole = forms.quotient(above, below)
    return forms.Negative(whole) if minus else whole


def _number(number: Fraction) -> Form:
    if number.denominator == 1:
        return forms.Integer(number.numerator)
    return forms.Divided(forms.Integer(number.numerator), forms.Integer(number.denominator))
