"""Nodal equations as a person writes them, in plain arithmetic and in LaTeX."""

from __future__ import annotations

from collections.abc import Callable

from symcirc.nodal.equations import Equation, Term

#: How a weight of each kind stands before and behind what it multiplies, in plain arithmetic.
PLAIN = {
    "R": ("", "/{0}"),
    "Z": ("", "/{0}"),
    "C": ("s*{0}*", ""),
    "L": ("", "/(s*{0})"),
    "Y": ("{0}*", ""),
    "gain": ("{0}*", ""),
    "one": ("", ""),
}


def equation_text(equation: Equation) -> str:
    """Return an equation in plain arithmetic, its first side a sum and its second 0 or the drive.

    >>> from symcirc.nodal.equations import Weight
    >>> current = Term(Weight(1, "R", "R1"), "V_a", "V_in")
    >>> equation_text(Equation("currents at a", (current, Term(Weight(1, "C", "C1"), "V_a"))))
    '(V_a - V_in)/R1 + s*C1*V_a = 0'
    """
    right = "drive" if equation.right else "0"
    return f"{_sum(equation, _plain_term)} = {right}"


def _plain_term(term: Term) -> str:
    before, behind = (piece.format(term.weight.symbol) for piece in PLAIN[term.weight.kind])
    difference = f"{term.plus} - {term.minus}" if term.minus else term.plus
    bracketed = term.minus and (before or behind or term.weight.sign < 0)
    return before + (f"({difference})" if bracketed else difference) + behind


def equation_latex(equation: Equation, name: Callable[[str], str]) -> str:
    """Return an equation in LaTeX; ``name`` writes the name of a part, a voltage or a current."""

    def latex_term(term: Term) -> str:
        symbol = name(term.weight.symbol) if term.weight.symbol else ""
        plus, minus = name(term.plus), name(term.minus) if term.minus else ""
        difference = f"{plus} - {minus}" if minus else plus
        match term.weight.kind:
            case "R" | "Z":
                return rf"\frac{{{difference}}}{{{symbol}}}"
            case "L":
                return rf"\frac{{{difference}}}{{s {symbol}}}"
        factor = {"C": f"s {symbol} ", "one": ""}.get(term.weight.kind, f"{symbol} ")
        bracketed = minus and (factor or term.weight.sign < 0)
        return factor + (rf"\left({difference}\right)" if bracketed else difference)

    right = r"\text{drive}" if equation.right else "0"
    return f"{_sum(equation, latex_term)} = {right}"


def _sum(equation: Equation, write: Callable[[Term], str]) -> str:
    if not equation.terms:
        return "0"
    first, *rest = equation.terms
    text = ("-" if first.weight.sign < 0 else "") + write(first)
    return text + "".join((" - " if t.weight.sign < 0 else " + ") + write(t) for t in rest)
