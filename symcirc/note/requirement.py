"""The section of the requirement: targets and limits, in words and formulas."""

from __future__ import annotations

from collections.abc import Iterator

import sympy

from symcirc.goal import Goal
from symcirc.note.formulas import expression_form, has_decimals
from symcirc.note.material import Aim, Material
from symcirc.note.model import Block, Items, Paragraph, Pieces
from symcirc.note.pieces import Numbering, quantity, shown
from symcirc.note.response import words_of
from symcirc.responses import FAMILIES
from symcirc.sheet.model import Limit
from symcirc.steps.writing import total
from symcirc.transfer.form import (
    ONE,
    ZERO,
    Divided,
    Form,
    Negative,
    Product,
    Symbol,
    power,
    product,
    quotient,
)
from symcirc.values.poles import pole_pairs

#: The kinds and families as a sentence has them.
_WORDS = {
    "lowpass": "low-pass",
    "highpass": "high-pass",
    "bandpass": "band-pass",
    "bandstop": "band-stop",
    "allpass": "all-pass",
    "butterworth": "Butterworth",
    "chebyshev": "Chebyshev",
    "bessel": "Bessel",
    "gaussian": "Gaussian",
    "legendre": "Legendre",
}


def requirement_blocks(material: Material, numbering: Numbering) -> Iterator[Block]:
    """Yield what each target and each limit says."""
    for aim in material.aims:
        yield from _target(aim, numbering)
    asked = list(dict.fromkeys(limit.ask for limit in material.sheet.limits))
    for ask in asked:
        yield Paragraph((f"The mask of {ask}, its losses relative to the nominal gain:",))
        limits = [limit for limit in material.sheet.limits if limit.ask == ask]
        yield Items(tuple((limit_words(limit),) for limit in limits))


def target_words(aim: Aim) -> str:
    """Return a target as a sentence has it, its numbers as the designer wrote them."""
    place = aim.target.place
    line = place.source.line(place.line).split("#")[0].strip()
    target = aim.target
    if target.expression is not None:
        return line.removeprefix("target").strip()
    _, *words = line.split(":", 1)[-1].split(",")
    kind = _WORDS[str(target.kind)]
    family = "" if target.family is None else _WORDS.get(target.family, target.family) + " "
    return shown(", ".join([f"{family}{kind}", *(word.strip() for word in words)]))


def _target(aim: Aim, numbering: Numbering) -> Iterator[Block]:
    ask = aim.target.ask
    if aim.target.expression is None:
        yield Paragraph((f"{ask} is to be a {target_words(aim)}. {_meaning(aim)}".strip(),))
    else:
        yield Paragraph((f"{ask} is to be, exactly, sign and gain included, what the sheet's target says.",))
    if aim.design is None:
        return
    goal = aim.design.goal
    if goal.order is not None:
        yield Paragraph((f"The limits are met with order {goal.order}, the least.",))
    right = goal_form(goal)
    if not has_decimals(right):
        yield Paragraph((_leading(goal),))
        yield numbering.equation(f"target-{ask}", Symbol(ask), right)
    else:
        yield Paragraph(("Its poles, as frequency and quality:",))
        yield Items(tuple(_poles(goal)))


def _meaning(aim: Aim) -> str:
    """Return where the family has its edge, and how a gain is meant."""
    words, family = aim.target.words, aim.target.family
    sentences = []
    if family is not None and {"edge", "centre", "lower edge"} & set(words):
        at = "at the loss that is given with it" if "edge loss" in words else f"at {FAMILIES[family].edge}"
        edge = "edge is" if "edge" in words else "edges are"
        sentences.append(f"Its {edge} {at}.")
    if "gain" in words:
        sentences.append("The gain is a magnitude: either sign will do.")
    else:
        sentences.append("The gain is free.")
    return shown(" ".join(sentences))


def _leading(goal: Goal) -> str:
    how = {"exact": "With its numbers:", "magnitude": "With its numbers, the sign left open:"}
    return how.get(goal.gain, "With its numbers, a constant factor left open:")


def goal_form(goal: Goal) -> Form:
    """Return the target as one quotient of polynomials in s, its numbers exact or of 17 digits."""
    over, under = (_polynomial(side) for side in (goal.numerator, goal.denominator))
    form = quotient([over.operand if isinstance(over, Negative) else over], [under])
    return Negative(form) if isinstance(over, Negative) else form


def _polynomial(side: tuple[sympy.Expr, ...]) -> Form:
    """Return a polynomial in descending powers of s, which stands behind its coefficients' numbers."""
    terms = []
    for k, coefficient in reversed(list(enumerate(side))):
        form = expression_form(coefficient)
        if form != ZERO:
            terms.append(_times(form, power(Symbol("s"), k) if k else ONE))
    return total(terms)


def _times(form: Form, behind: Form) -> Form:
    if isinstance(form, Negative):
        return Negative(_times(form.operand, behind))
    if isinstance(form, Divided):
        return Divided(_times(form.above, behind), form.below)
    factors = form.factors if isinstance(form, Product) else (form,)
    return product([*factors, behind])


def _poles(goal: Goal) -> Iterator[Pieces]:
    if any(c.free_symbols for c in goal.denominator):
        yield ("in symbols: see the design equations",)
        return
    for pair in pole_pairs([float(sympy.N(c, 20)) for c in goal.denominator]):
        where = quantity(pair.f0, "Hz")
        yield (
            f"a real pole at {where}"
            if pair.q is None
            else f"a pair at {where} with Q = {quantity(pair.q, '')}",
        )


def limit_words(limit: Limit) -> str:
    """Return a limit in words, its numbers as the sheet writes them.

    The relation is spelled out: at most, at least.
    """
    line = limit.place.source.line(limit.place.line).split("#")[0].split(":", 1)[-1].strip()
    return words_of(line)
