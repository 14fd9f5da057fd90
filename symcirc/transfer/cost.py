"""What a form costs its reader: of several ways to write the same, the cheapest is printed."""

from __future__ import annotations

from functools import lru_cache

from symcirc.transfer.form import (
    Divided,
    Form,
    Integer,
    Power,
    Product,
    Root,
    Sum,
    Symbol,
    children,
    symbols,
)
from symcirc.transfer.ties import natural_key

_CAPACITOR, _INDUCTOR, _NO_PART = 1, 2, -1 % 6  # the kinds in natural_key

#: Brackets this deep cost more: a third level is hard to read.
DEEP, DEEP_COST = 3, 4


@lru_cache(maxsize=1024)
def _kind(name: str) -> int:
    return natural_key(name)[0]


def is_reactive(name: str) -> bool:
    """Tell whether a name is a capacitor's or an inductor's.

    >>> [name for name in ("R1", "C1", "S1_L2", "k") if is_reactive(name)]
    ['C1', 'S1_L2']
    """
    return _kind(name) in (_CAPACITOR, _INDUCTOR)


def cost(form: Form) -> int:
    """Return how much there is to read: 2 for a symbol or a bracket, 1 for a number, an exponent or a root.

    A bracket beside a capacitor or an inductor costs 1, as this is how an engineer collects: resistances or
    conductances at each capacitor; so does one that holds no part, as it is a gain. A third level of
    brackets costs 4 more; a quotient under a root and a ratio of capacitors or inductors cost 1 more.

    >>> one, r1, r2, c1 = Integer(1), *map(Symbol, ("R1", "R2", "C1"))
    >>> cost(Divided(Sum((Divided(one, r1), Divided(one, r2))), c1))
    9
    >>> cost(Divided(Sum((r1, r2)), Product((r1, r2, c1))))
    11
    """
    return _weigh(form)[0]


def _weigh(form: Form) -> tuple[int, int]:
    """Return the cost of a form and how many levels of brackets it has."""
    match form:
        case Integer():
            return 1, 0
        case Symbol():
            return 2, 0
        case Root():
            total, depth = _weigh(form.operand)
            return total + 1 + isinstance(form.operand, Divided), depth
        case Product() | Divided() | Power():
            return _weigh_product(form)
    weights = [_weigh(child) for child in children(form)]
    return sum(total for total, _ in weights), max(depth for _, depth in weights)


def _weigh_product(form: Form) -> tuple[int, int]:
    factors = _factors(form)
    beside = any(isinstance(base, Symbol) and is_reactive(base.name) for base, _ in factors)
    whole, deepest = 0, 0
    for base, exponent in factors:
        total, depth = _weigh(base)
        whole += total + (exponent > 1)
        if isinstance(base, Sum):
            depth += 1
            whole += 1 if beside or all(_kind(name) == _NO_PART for name in symbols(base)) else 2
            whole += DEEP_COST if depth == DEEP else 0
        deepest = max(deepest, depth)
    return whole + _is_reactive_ratio(form), deepest


def _is_reactive_ratio(form: Form) -> bool:
    return isinstance(form, Divided) and all(
        any(isinstance(base, Symbol) and is_reactive(base.name) for base, _ in _factors(side))
        for side in children(form)
    )


def _factors(form: Form) -> list[tuple[Form, int]]:
    """Return the bases and exponents of all that is multiplied or divided, on both sides of the line."""
    match form:
        case Product():
            return [pair for factor in form.factors for pair in _factors(factor)]
        case Divided():
            return [*_factors(form.above), *_factors(form.below)]
        case Power():
            return [(form.base, form.exponent)]
        case _:
            return [(form, 1)]
