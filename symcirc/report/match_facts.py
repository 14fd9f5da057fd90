"""What the ways to write a match share."""

from __future__ import annotations

import sympy

from symcirc.complaints import Remark
from symcirc.design import Design
from symcirc.match.formula import equation_text
from symcirc.transfer.ties import natural_key


def chosen_names(design: Design) -> list[str]:
    """Return the names that stand as given in the design equations: fixed or chosen, in natural order."""
    present = set(design.present)
    targets = (*design.goal.numerator, *design.goal.denominator)
    present |= {str(symbol) for coefficient in targets for symbol in coefficient.free_symbols}
    names = [n for n in design.derivation.sheet.symbols if n in present and n not in design.unknowns]
    return sorted(names, key=natural_key)


def refusal_remark(design: Design) -> Remark:
    """Return why there is no solution, at the target's place."""
    assert design.refusal is not None
    return Remark(design.goal.target.place, f"{design.refusal.cause}; {design.refusal.mend}")


def number_json(number: sympy.Expr) -> float | str:
    """Return a coefficient as it stands in JSON: a number, or arithmetic where it holds symbols."""
    return equation_text(number) if number.free_symbols else float(sympy.N(number, 20))
