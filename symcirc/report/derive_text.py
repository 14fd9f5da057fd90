"""A derivation for people, in plain text and in LaTeX."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from symcirc.derivation import Answer, BigAnswer, Derivation
from symcirc.nodal import build_system
from symcirc.nodal.text import equation_latex, equation_text
from symcirc.report.big import sequence_of
from symcirc.report.facts import Fact, facts_of
from symcirc.report.lines import aligned, counted, hanging, readable
from symcirc.report.numbers import expanded_answers, numbers_for
from symcirc.report.quantities import ask_text
from symcirc.transfer.evaluate import coefficients
from symcirc.transfer.latex import latex, latex_function, latex_name
from symcirc.transfer.layout import WIDTH, function_text
from symcirc.transfer.standard import coefficient_forms, monic_forms
from symcirc.transfer.text import text
from symcirc.witness.agree import TOLERANCE

#: How the names of facts are written in LaTeX.
FACT_LATEX = {
    "w0": r"\omega_{0}",
    "f0": "f_{0}",
    "Q": "Q",
    "pole w0": r"\omega_{0}",
    "pole f0": "f_{0}",
}


def derive_text(derivation: Derivation) -> Iterator[str]:
    """Yield the lines of a derivation: each ask's function, its standard form, and what is worth knowing of it."""
    yield derivation.sheet.title
    for answer in derivation.answers:
        yield ""
        yield from _big(derivation, answer) if isinstance(answer, BigAnswer) else _answer(derivation, answer)


def _answer(derivation: Derivation, answer: Answer) -> Iterator[str]:
    function, name = answer.function, answer.ask.name
    yield f"{ask_text(answer.ask)}"
    yield ""
    yield from _indented(function_text(coefficient_forms(function), f"{name}(s)", WIDTH - 2).splitlines())
    if function.order:
        yield ""
        yield "standard form, by powers of s"
        forms = monic_forms(function)
        yield from _coefficients("over", map(text, forms.numerator))
        yield from _coefficients("under", map(text, forms.denominator))
    yield ""
    yield from _facts(facts_of(derivation, answer))
    yield _checked(answer)


def _big(derivation: Derivation, answer: BigAnswer) -> Iterator[str]:
    """Yield a big answer: what each name stands for, then the coefficients in terms of these names."""
    sequence = sequence_of(derivation, answer)
    over, under = answer.products
    yield ask_text(answer.ask)
    yield ""
    yield f"{counted(over, 'product')} over the line and {under:,} under it, by way of these names:"
    wide = max((len(name) for name, _ in sequence.definitions), default=0)
    for name, expression in sequence.definitions:
        yield from hanging(f"  {name:{wide}} = ", expression)
    yield ""
    yield "polynomials in s" if sequence.in_s else "coefficients by powers of s"
    for label, side in (("over", sequence.numerator), ("under", sequence.denominator)):
        if sequence.in_s:
            yield from hanging(f"  {label:7} ", side[0])
        else:
            yield from _coefficients(label, side)
    yield ""
    yield _checked(answer)


def _checked(answer: Answer | BigAnswer) -> str:
    ways = "elimination and " if isinstance(answer, Answer) and answer.eliminated else ""
    points = counted(answer.evidence.points, "random point")
    return f"checked: agrees with {ways}the numeric solve of the circuit at {points} (to {TOLERANCE:.0e})"


def _coefficients(label: str, side: Iterable[str]) -> Iterator[str]:
    """Yield the coefficients of one polynomial, highest power first, those that are zero left out."""
    coefficients = list(side)
    first = True
    for power in reversed(range(len(coefficients))):
        if coefficients[power] == "0" and len(coefficients) > 1:
            continue
        head = f"  {label if first else '':7}{_power(power):>4}   "
        yield from hanging(head, coefficients[power])
        first = False


def _power(power: int) -> str:
    return {0: "1", 1: "s"}.get(power, f"s^{power}")


def _facts(facts: list[Fact]) -> Iterator[str]:
    """Yield facts as a table: what, in symbols, in numbers."""
    if not facts:
        return
    wide = max(len(fact.what) for fact in facts)
    for fact in facts:
        symbols = text(fact.form) if fact.form is not None else ""
        yield from hanging(f"  {fact.what:{wide}}   ", " = ".join(filter(None, (symbols, fact.number))))
    yield ""


def _indented(lines: list[str]) -> Iterator[str]:
    return ("  " + readable(line) for line in lines)


def values_text(derivation: Derivation) -> Iterator[str]:
    """Yield the coefficients for the fixed numbers, by powers of s; raises Complaint where one is missing."""
    yield derivation.sheet.title
    for answer in expanded_answers(derivation):
        sides = coefficients(answer.function, numbers_for(derivation.sheet, answer))
        yield ""
        yield ask_text(answer.ask)
        for label, side in zip(("over", "under"), sides, strict=True):
            for power in reversed(range(len(side))):
                yield f"  {label if power == len(side) - 1 else '':7}{_power(power):>4}   {side[power]!r}"


def equations_text(derivation: Derivation) -> Iterator[str]:
    """Yield the nodal equations that every answer is solved from."""
    yield derivation.sheet.title
    for answer in derivation.answers:
        equations = build_system(derivation.circuit, answer.setup).equations
        wide = max(len(equation.label) for equation in equations)
        yield ""
        yield f"{ask_text(answer.ask)}: currents leaving each node, and the law of each source and device"
        for equation in equations:
            yield from hanging(f"  {equation.label:{wide}}   ", equation_text(equation))
        yield from _tied(derivation)


def _tied(derivation: Derivation) -> Iterator[str]:
    names = [name for name in derivation.ties if name in derivation.sheet.fixes]
    if names:
        yield f"  tied by the sheet and put in afterwards: {', '.join(names)}"


def derive_latex(derivation: Derivation) -> Iterator[str]:
    """Yield a LaTeX display for each ask: the function, its standard form, and its facts in symbols."""
    for answer in expanded_answers(derivation):
        name, function = latex_name(answer.ask.name), answer.function
        yield f"% {ask_text(answer.ask)}"
        rows = [f"{name}(s) &= {latex_function(coefficient_forms(function))}"]
        if function.order:
            rows.append(f"{name}(s) &= {latex_function(monic_forms(function))}")
        for fact in facts_of(derivation, answer):
            if fact.form is not None:
                label = FACT_LATEX.get(fact.what) or r"\text{" + fact.what + "}"
                rows.append(f"{label} &= {latex(fact.form)}")
        yield from aligned(rows)


def equations_latex(derivation: Derivation) -> Iterator[str]:
    """Yield the nodal equations of every answer in LaTeX."""
    for answer in derivation.answers:
        yield f"% {ask_text(answer.ask)}"
        equations = build_system(derivation.circuit, answer.setup).equations
        yield from aligned([equation_latex(e, latex_name).replace(" = ", " &= ", 1) for e in equations])
