"""A slip in one sentence, and its place."""

from __future__ import annotations

from symcirc.complaints import Place
from symcirc.sheet.expression import Expression, Product, Reciprocal, Sum, names
from symcirc.slips.apply import Edited
from symcirc.slips.edits import NEW, Edit, is_one
from symcirc.slips.plain import PlainWriter
from symcirc.slips.search import Mend
from symcirc.slips.spots import Spot
from symcirc.slips.writing import SUM
from symcirc.working.records import Equation

#: What is said of a slip: ``{subject}`` is what it is about, ``{instead}`` what belongs there.
SENTENCES = {
    "sign": "the sign of {subject} is wrong",
    "reciprocal": "{subject} is upside down: its reciprocal belongs here",
    "root lost": "a square root is missing over {subject}",
    "root too many": "{subject} is a square root too many",
    "exponent": "the exponent of {subject} is wrong",
    "factor too many": "the factor {subject} is one too many",
    "factor lost": "the factor {subject} is missing",
    "wrong side": "{subject} stands on the wrong side of the fraction line",
    "bracket lost": "a bracket is missing: {subject} belongs together",
    "bracket too many": "the bracket in {subject} holds too much",
    "bracket closed early": "the bracket closes too early: {subject} belongs together",
    "product for sum": "a product stands where the sum {subject} belongs",
    "sum for product": "a sum stands where the product {subject} belongs",
    "product for parallel": "{subject} is written as parallel, and a product belongs here",
    "series for parallel": "{subject} is written as parallel, and the sum belongs here",
    "parallel for series": "a sum stands where {subject} belongs",
    "branch lost": "{subject} is missing beside it, in parallel",
    "term too many": "the term {subject} is one too many",
    "term lost": "the term {subject} is missing",
    "current lost": "the current {subject} is missing",
    "exchanged": "{subject} stands where {instead} belongs",
}


def sentence_of(mend: Mend, equation: Equation, node: str | None) -> str:
    """Return what is wrong with a line; ``node`` is the one whose current law it is, where it is one."""
    return ", and ".join(_sentence(edit, equation, node) for edit in mend.edits)


def _sentence(edit: Edit, equation: Equation, node: str | None) -> str:
    at = "" if node is None else f" at node {node}"
    term = edit.subject if edit.kind == "term too many" else _whole_term(edit.spot)
    part = _only_part(term, equation) if node is not None and term is not None else None
    if edit.kind == "sign" and part is not None:
        return f"the sign of the current through {part}{at} is wrong"
    if edit.kind == "current lost" and edit.subject is not None:
        return f"the current through {_only_part(edit.subject, equation)} is missing{at}"
    if edit.kind == "term too many" and part is not None:
        return f"the current through {part} does not belong{at}"
    below = _below(edit.subject) if edit.kind == "factor lost" else None
    if below is not None:
        return f"the factor `{_text(below, equation)}` is missing below the line"
    subject = "" if edit.subject is None else f"`{_text(edit.subject, equation)}`"
    instead = "" if edit.instead is None else f"`{_text(edit.instead, equation)}`"
    return SENTENCES[edit.kind].format(subject=subject, instead=instead)


def _below(factor: Expression | None) -> Expression | None:
    """Return x of 1/x."""
    match factor:
        case Product(factors=(one, Reciprocal(operand=operand))) if is_one(one):
            return operand
        case _:
            return None


def _whole_term(spot: Spot) -> Expression:
    """Return the term of its side that a spot stands in."""
    while spot.parent is not None and not (spot.parent.parent is None and isinstance(spot.parent.node, Sum)):
        spot = spot.parent
    return spot.node


def _only_part(term: Expression, equation: Equation) -> str | None:
    """Return the part that a term names, where it is one only."""
    kinds = {part.name for part in equation.lexicon.sheet.parts}
    found = {name.text for name in names(term)} & kinds
    return found.pop() if len(found) == 1 else None


def _text(node: Expression, equation: Equation) -> str:
    return PlainWriter(equation.written, Edited(node)).at_least(node, SUM).strip()


def place_of(mend: Mend) -> Place | None:
    """Return where the first slip of a mend stands in the line, or None where it is nowhere: something is missing."""
    edit = mend.edits[0]
    for node in (edit.subject, edit.spot.node):
        if node is not None and node.place != NEW:
            return node.place
    return None
