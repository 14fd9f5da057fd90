"""The solutions of a chain: which root is taken at each step, and the values where the numbers are known."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any

from symcirc.match.chains import Chain
from symcirc.match.decimals import reals
from symcirc.match.forms import Form, discriminant, form_of
from symcirc.match.problem import Refusal
from symcirc.match.quantities import Quantities, known_value
from symcirc.match.roots import positive_roots, real_roots


class Degenerate(Exception):
    """The solution in symbols fails for the numbers given: they have to be put in before solving.

    ``refusal`` is what is to be said where that does not help, None where it is what then is found.
    """

    def __init__(self, refusal: Refusal | None = None) -> None:
        super().__init__()
        self.refusal = refusal


@dataclass(frozen=True)
class Candidate:
    """A chain with a root chosen at each step.

    ``choices`` hold the sign of the square root at quadratic steps (0 for a double root), the index from 1 of the
    root at steps of higher degree (0 where it is open), 0 at linear steps. They end at the first step that has no
    real positive value for the numbers given: then ``fails``. ``values`` are by position, None where open.
    """

    forms: tuple[Form, ...]
    choices: tuple[int, ...]
    values: tuple[Any, ...]
    fails: bool


def candidates(chain: Chain, quantities: Quantities) -> list[Candidate]:
    """Return the candidates of a chain, those that fail for the numbers given too.

    Raises Degenerate where a formula divides by zero for these numbers.
    """
    forms = tuple(form_of(step, quantities) for step in chain.steps)
    start: list[Any] = [None] * quantities.ring.ngens
    for position, value in (*quantities.decimals.items(), *quantities.numbers.items()):
        start[position] = value
    return list(_grown(forms, (), start, quantities))


def _grown(
    forms: tuple[Form, ...], choices: tuple[int, ...], values: list[Any], quantities: Quantities
) -> Iterator[Candidate]:
    if len(choices) == len(forms):
        yield Candidate(forms, choices, tuple(values), False)
        return
    form = forms[len(choices)]
    for choice, value in _roots(form, values, quantities):
        grown = list(values)
        grown[form.unknown] = value
        fails = value is not None and not (value > 0 or form.unknown in quantities.signless)
        if fails or (value is not None and reals.isnan(value)):
            yield Candidate(forms, (*choices, choice), tuple(grown), True)
        else:
            yield from _grown(forms, (*choices, choice), grown, quantities)


def _roots(form: Form, values: Sequence[Any], quantities: Quantities) -> list[tuple[int, Any]]:
    """Return the choices at a step with their values: None where open, not a number where there is none."""
    coefficients = [known_value(c, values) for c in form.coefficients]
    signless = form.unknown in quantities.signless
    if None in coefficients:
        return [(side, None) for side in _sides(form, quantities)]
    if form.degree == 1:
        if not coefficients[1]:
            raise Degenerate
        return [(0, _power_root(-coefficients[0] / coefficients[1], form.power))]
    if form.degree == 2:
        return [(c, _power_root(v, form.power)) for c, v in _quadratic_roots(coefficients, signless)]
    found = (real_roots if signless else positive_roots)(coefficients)
    return [(k, _power_root(root, form.power)) for k, root in enumerate(found, 1)] or [(0, reals.nan)]


def _sides(form: Form, quantities: Quantities) -> tuple[int, ...]:
    """Return the choices at a step whose value is open."""
    if form.degree != 2 or not quantities.reduced(discriminant(form)):
        return (0,)
    return (1, -1) if form.coefficients[1] or form.unknown in quantities.signless else (1,)


def _quadratic_roots(coefficients: Sequence[Any], signless: bool) -> list[tuple[int, Any]]:
    c, b, a = coefficients
    discriminant = b * b - 4 * a * c
    if abs(discriminant) <= reals.mpf(10) ** -50 * (b * b + abs(4 * a * c)):
        discriminant = reals.mpf(0)
    if discriminant < 0:
        return [(1, reals.nan), (-1, reals.nan)]
    if not discriminant:
        if not a:
            raise Degenerate
        return [(0, -b / (2 * a))]
    root = reals.sqrt(discriminant)
    if not b:
        size = root / abs(2 * a)
        return [(1, size), (-1, -size)] if signless else [(1, size)]
    return [(side, _stable_root(a, b, c, side * root)) for side in (1, -1)]


def _stable_root(a: Any, b: Any, c: Any, root: Any) -> Any:
    """Return (-b + root)/2a or its equal 2c/(-b - root), whichever adds sizes; none where it is at infinity."""
    if (-b) * root > 0:
        return (-b + root) / (2 * a) if a else reals.nan
    return 2 * c / (-b - root)


def _power_root(value: Any, power: int) -> Any:
    return reals.root(value, power) if power > 1 and value > 0 else value
