"""Answers too big to be read whole, as a sequence of named sub-expressions."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from sympy.polys.rings import PolyRing

from symcirc.complaints import Complaint, listed
from symcirc.derivation import BigAnswer, Derivation
from symcirc.sheet.expression import Expression, names
from symcirc.sheet.fixes import tie_order
from symcirc.transfer.arrange import form_of
from symcirc.transfer.text import text
from symcirc.transfer.ties import expression_in, ring_for
from symcirc.trees.named import named_coefficients


@dataclass(frozen=True)
class Sequence:
    """A big answer by way of named sub-expressions, each in terms of symbols and of names before it.

    The ties come first. ``numerator`` and ``denominator`` hold one expression for each power of s, ascending.
    """

    definitions: tuple[tuple[str, str], ...]
    numerator: tuple[str, ...]
    denominator: tuple[str, ...]


def sequence_of(derivation: Derivation, answer: BigAnswer) -> Sequence:
    """Return a big answer as a sequence of short expressions.

    Raises Complaint where a tie holds s: the coefficients by powers of s would not be those that are asked for.
    """
    ties = ties_of(derivation.ties, {level.symbol for level in answer.diagram.levels if level.symbol})
    holding = [name for name, tie in ties.items() if any(n.text == "s" for n in names(tie))]
    if answer.loop_gain:
        holding.append(answer.loop_gain)
    if holding:
        raise Complaint(
            answer.ask.place,
            f"`{answer.ask.name}` has {sum(answer.products):,} products, and {listed(holding)} may depend on s, so "
            "its coefficients cannot be written in parts",
            f"have it expanded: --most {sum(answer.products)}",
        )
    letter = _free_letter(derivation)
    named = named_coefficients(answer.diagram, lambda k: f"{letter}{k}")
    return Sequence((*_tie_texts(ties), *named.definitions), named.over or ("0",), named.under)


def _free_letter(derivation: Derivation) -> str:
    """Return a letter with which no name of the sheet begins."""
    taken = {name[0] for name in derivation.sheet.symbols}
    return next(c for c in "xyzwuvtabcdefghijklmnopqr" if c not in taken)


def ties_of(ties: Mapping[str, Expression], needed: set[str]) -> dict[str, Expression]:
    """Return the ties behind some symbols, each after those that it holds itself."""
    reached = set(needed)
    order = tie_order(ties)
    for name in reversed(order):
        if name in reached:
            reached |= {n.text for n in names(ties[name])}
    return {name: ties[name] for name in order if name in reached}


def _tie_texts(ties: Mapping[str, Expression]) -> Iterator[tuple[str, str]]:
    """Yield every tie as (name, expression), in terms of the names of the ties before it."""
    if not ties:
        return
    free = ring_for(ties, ties)
    ring = PolyRing([*map(str, free.symbols), *ties], free.domain, free.order)
    for name, tie in ties.items():
        quotient = expression_in(ring, tie, {})
        yield name, text(form_of(quotient.above, quotient.below))
