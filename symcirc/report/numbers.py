"""The numbers that a sheet fixes, for the names that an answer holds."""

from __future__ import annotations

from collections.abc import Mapping

import sympy

from symcirc.complaints import Complaint, listed
from symcirc.derivation import Answer, BigAnswer, Derivation
from symcirc.sheet.model import Sheet
from symcirc.transfer.function import symbols_in


def missing_numbers(sheet: Sheet, answer: Answer) -> list[str]:
    """Return the names in an answer that the sheet gives no number, in the sheet's order."""
    present = symbols_in(answer.function)
    return [name for name in sheet.symbols if name in present and name not in sheet.numbers]


def numbers_for(sheet: Sheet, answer: Answer) -> Mapping[str, sympy.Expr]:
    """Return the exact numbers of a sheet; raises Complaint where one that the answer needs is missing."""
    missing = missing_numbers(sheet, answer)
    if missing:
        first = sheet.symbols[missing[0]]
        raise Complaint(
            first.place,
            f"numbers are asked for, and `{answer.ask.name}` holds {listed(missing)} without one",
            f"fix {', '.join(f'{name} = value' for name in missing[:3])}",
        )
    return sheet.numbers


def expanded_answers(derivation: Derivation) -> list[Answer]:
    """Return the answers of a derivation, all of which must be expanded; raises Complaint for one that is too big."""
    answers = []
    for answer in derivation.answers:
        if isinstance(answer, BigAnswer):
            raise Complaint(
                answer.ask.place,
                f"`{answer.ask.name}` is not expanded: it has {sum(answer.products):,} products",
                f"have it expanded: --most {sum(answer.products)}",
            )
        answers.append(answer)
    return answers
