"""The section that each stage of a cascade takes, with names for its frequencies and Q."""

from __future__ import annotations

import math
from collections.abc import Container, Sequence
from dataclasses import dataclass, field, replace

import sympy

from symcirc.cascade.assignment import Section
from symcirc.cascade.factors import Factor
from symcirc.cascade.search import StageMatch
from symcirc.goal import Goal, symbol
from symcirc.workbook.goal import LIVE_WORDS, Quantity

#: By how much two frequencies of a stage may differ and still be one.
SAME_FREQUENCY = 1e-12


@dataclass(frozen=True)
class Scale:
    """A name that scales all frequencies of a target; ``size`` is its number, 1 where the target's hold the name."""

    name: str
    size: float
    exact: sympy.Expr | None


def scale_of(goal: Goal, words: Sequence[Quantity]) -> Scale | None:
    """Return what scales the frequencies of a target: the symbol that it is written with, or its first frequency."""
    held = {x for c in goal.denominator for x in c.free_symbols}
    if held:
        return Scale(str(next(iter(held))), 1.0, None)
    first = next((q for q in words if q.unit in ("Hz", "rad/s") and q.formula is None), None)
    if first is None or first.value is None:
        return None
    return Scale(first.name, first.value, first.exact)


def following(words: Sequence[Quantity], scale: Scale | None) -> tuple[Quantity, ...]:
    """Return a target's quantities with all its frequencies and its Q tied to what scales it.

    How wide a band is against its centre decides the poles of the stages as no short formula does.
    """
    return tuple(_follower(q, scale) for q in words)


def _follower(quantity: Quantity, scale: Scale | None) -> Quantity:
    is_frequency = quantity.unit in ("Hz", "rad/s")
    is_free = quantity.formula is None and quantity.meaning != LIVE_WORDS["gain"] and quantity.unit != "dB"
    if scale is None or scale.exact is None or not is_free or quantity.name == scale.name:
        return quantity
    assert quantity.value is not None
    ratio = quantity.value / scale.size if is_frequency else quantity.value
    formula = _short(ratio) * symbol(scale.name) if is_frequency else _short(ratio)
    return replace(quantity, formula=formula, meaning=f"{quantity.meaning}, in its ratio to {scale.name}")


def _short(number: float) -> sympy.Expr:
    """Return a number with 15 digits, exactly."""
    return sympy.Rational(f"{number:.15g}")


def named_section(
    match: StageMatch, scale: Scale | None, taken: Container[str]
) -> tuple[Section, list[Quantity]]:
    """Return a stage's poles and zeros in names of their own, and what these stand for.

    A frequency is a multiple of what scales the target where there is such a thing, else an input; so is each Q.
    Poles and zeros at one frequency share its name.
    """
    names = _Names(match.stage.number, scale, taken)
    poles = tuple(names.named(pole, "poles") for pole in match.section.poles)
    zeros = tuple(names.named(zero, "zeros") for zero in match.section.zeros)
    return replace(match.section, poles=poles, zeros=zeros), [*names.frequencies.values(), *names.qualities]


@dataclass
class _Names:
    stage: int
    scale: Scale | None
    taken: Container[str]
    frequencies: dict[float, Quantity] = field(default_factory=dict)
    qualities: list[Quantity] = field(default_factory=list)

    def named(self, factor: Factor, what: str) -> Factor:
        omega = 2 * sympy.pi * symbol(self._frequency(factor, what))
        if factor.degree == 1:
            middle = factor.coefficients[0]
            sign = -1 if middle.xreplace(dict.fromkeys(middle.free_symbols, sympy.S.One)).is_negative else 1
            return replace(factor, coefficients=(sign * omega, sympy.S.One))
        if math.isinf(factor.q):
            return replace(factor, coefficients=(omega**2, sympy.S.Zero, sympy.S.One))
        name = self._name("Q", len(self.qualities))
        exact = sympy.Rational(abs(factor.q))
        self.qualities.append(Quantity(name, "", exact, None, f"stage {self.stage}: Q of its {what}"))
        slope = omega / symbol(name) if factor.q > 0 else -omega / symbol(name)
        return replace(factor, coefficients=(omega**2, slope, sympy.S.One))

    def _frequency(self, factor: Factor, what: str) -> str:
        for omega, quantity in self.frequencies.items():
            if abs(omega - factor.omega) <= SAME_FREQUENCY * omega:
                return quantity.name
        name = self._name("f", len(self.frequencies))
        hertz = sympy.Rational(factor.omega / (2 * math.pi))
        meaning = f"stage {self.stage}: frequency of its {what}"
        if self.scale is None:
            made = Quantity(name, "Hz", hertz, None, meaning)
        else:
            ratio = _short(factor.omega / (2 * math.pi) / self.scale.size)
            value = None if self.scale.exact is None else ratio * self.scale.exact
            made = Quantity(name, "Hz", value, ratio * symbol(self.scale.name), meaning)
        self.frequencies[factor.omega] = made
        return name

    def _name(self, letter: str, count: int) -> str:
        name = f"{letter}_{self.stage}{'' if not count else chr(ord('a') + count)}"
        while name in self.taken:
            name += "_"
        return name
