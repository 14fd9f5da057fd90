"""From a stage's answer and its target to the problem that ``match`` solves."""

from __future__ import annotations

import sympy

from symcirc.complaints import Complaint
from symcirc.derivation import Answer
from symcirc.goal import Goal, symbol, target_symbols
from symcirc.match.problem import Problem
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import names
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Sheet
from symcirc.transfer.function import TransferFunction, symbols_in


def unknowns_in(sheet: Sheet, function: TransferFunction) -> tuple[str, ...]:
    """Return what of a function is to be solved for: parts neither fixed nor chosen, parameters behind ``solve``."""
    present = symbols_in(function)
    set_aside = set(sheet.fixes) | set(sheet.chosen)
    return tuple(
        name
        for name, s in sheet.symbols.items()
        if name in present and name not in set_aside and (s.role == "part" or name in sheet.solved)
    )


def build_problem(sheet: Sheet, answer: Answer, goal: Goal) -> Problem:
    """Return what is to be solved: parts that are neither fixed nor chosen, and parameters behind ``solve``."""
    unknowns = unknowns_in(sheet, answer.function)
    for name in target_symbols(goal.target):
        if name.text in unknowns or name.text in sheet.ties:
            raise Complaint(
                name.place,
                f"`{name.text}` stands in the target, so it cannot be solved for",
                f"choose {name.text}",
            )
    return Problem(
        function=answer.function,
        target_numerator=goal.numerator,
        target_denominator=goal.denominator,
        gain=goal.gain,
        unknowns=unknowns,
        known=sheet.numbers,
        free_unknowns=frozenset(n for n in unknowns if sheet.symbols[n].dimension in (None, "ratio")),
        positives=_tied_parts(sheet),
        units={name: s.dimension for name, s in sheet.symbols.items() if s.dimension not in (None, "ratio")},
    )


def _tied_parts(sheet: Sheet) -> dict[str, sympy.Expr]:
    """Return the tied resistors, capacitors and inductors as expressions in names that are not tied."""
    expressions: dict[str, sympy.Expr] = {}
    for name in tie_order(sheet.ties):
        tie = sheet.ties[name]
        if any(n.text == "s" for n in names(tie)):
            continue
        known = {n.text: expressions.get(n.text, symbol(n.text)) for n in names(tie) if n.text != "pi"}
        expressions[name] = exact_number(tie, known)
    parts = {name for name, s in sheet.symbols.items() if s.role == "part"}
    return {name: expression for name, expression in expressions.items() if name in parts}
