"""Answers too big to be read whole, as a sequence of named sub-expressions."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from sympy.polys.rings import PolyRing

from symcirc.derivation import BigAnswer, Derivation
from symcirc.sheet.expression import Expression, names
from symcirc.sheet.fixes import tie_order
from symcirc.transfer.arrange import form_of
from symcirc.transfer.text import text
from symcirc.transfer.ties import expression_in, ring_for
from symcirc.trees.expand import symbols
from symcirc.trees.named import Named, named_coefficients, named_polynomials

#: A sequence that may be longer than this by powers of s is written with s inside, which is shorter by the order.
LONGEST = 5_000


@dataclass(frozen=True)
class Sequence:
    """A big answer by way of named sub-expressions, each in terms of symbols and of names before it.

    The ties come first. ``numerator`` and ``denominator`` hold one expression for each power of s, ascending; or,
    ``in_s``, one expression each that holds s.
    """

    definitions: tuple[tuple[str, str], ...]
    numerator: tuple[str, ...]
    denominator: tuple[str, ...]
    in_s: bool


def sequence_of(derivation: Derivation, answer: BigAnswer) -> Sequence:
    """Return a big answer as a sequence of short expressions.

    By powers of s, but with s inside where a tie holds s (a real amplifier's gain does), or where the powers of s
    would make it long.
    """
    needed = set(symbols(answer.diagram)) | ({answer.loop_gain} if answer.loop_gain else set())
    ties = ties_of(derivation.ties, needed)
    letter = _free_letter(derivation)
    holds_s = any(n.text == "s" for tie in ties.values() for n in names(tie))
    if not holds_s and answer.diagram.size * _order(answer) <= LONGEST:
        named = named_coefficients(answer.diagram, lambda k: f"{letter}{k}")
        return _sequence(ties, named, answer, in_s=False)
    return _sequence(ties, named_polynomials(answer.diagram, lambda k: f"{letter}{k}"), answer, in_s=True)


def _order(answer: BigAnswer) -> int:
    """Return how many powers of s there can be: one for each part that brings one."""
    return sum(any(weight.s_power for weight in level.weights) for level in answer.diagram.levels)


def _sequence(ties: Mapping[str, Expression], named: Named, answer: BigAnswer, *, in_s: bool) -> Sequence:
    over = named.over or ("0",)
    if answer.loop_gain:  # T = -A (V+ - V-)/V_drives
        over = tuple(c if c == "0" else f"-{answer.loop_gain}*({c})" for c in over)
    return Sequence((*_tie_texts(ties), *named.definitions), over, named.under, in_s)


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
