"""A stage and its target as polynomials in one ring, coefficient by coefficient."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from math import lcm

import sympy
from sympy.polys.domains import QQ, ZZ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.match.constants import Constants
from symcirc.match.decimals import decimal, fraction_near
from symcirc.match.names import natural
from symcirc.match.problem import Problem, Refusal, Refused
from symcirc.match.quantities import Quantities
from symcirc.match.stage import StageInRing


@dataclass(frozen=True)
class Quotient:
    """``above / below`` in the ring."""

    above: PolyElement
    below: PolyElement


@dataclass(frozen=True)
class Coefficient:
    """One coefficient of the stage, and what it must be in proportion to the others of its group.

    ``relative`` is, for a coefficient of the numerator, its target over that of the same power of the
    denominator, where there is one.
    """

    where: str  # numerator or denominator
    power: int
    stage: PolyElement
    target: Quotient
    relative: Quotient | None = None


@dataclass(frozen=True)
class System:
    """Groups of coefficients; those of a group must be in proportion to their targets.

    One group holds all where the gain binds; two, denominator first, where the numerator's factor is free.
    ``meanings`` gives the expression that each generator stands for, ``positives`` what must be positive beyond
    the parts.
    """

    quantities: Quantities
    groups: tuple[tuple[Coefficient, ...], ...]
    positives: Mapping[str, Quotient]

    @property
    def coefficients(self) -> tuple[Coefficient, ...]:
        """All coefficients, the denominator's first."""
        return tuple(c for group in self.groups for c in group)

    def relation(self, one: Coefficient, other: Coefficient) -> PolyElement:
        """Return the cleaned polynomial that is zero where two coefficients of a group are in proportion."""
        if one.where == "denominator" and other.where == "numerator":
            one, other = other, one
        mine, yours = one.target, other.target
        if one.relative is not None and other.where == "denominator" and one.power == other.power:
            mine, yours = one.relative, Quotient(self.quantities.ring.one, self.quantities.ring.one)
        difference = one.stage * mine.below * yours.above - other.stage * yours.below * mine.above
        return self.quantities.cleaned(difference)


@dataclass(frozen=True)
class _Target:
    where: str
    power: int
    value: sympy.Expr
    relative: sympy.Expr | None


def build_system(problem: Problem, sign: int, numbers_in: bool = False) -> System:
    """Return the system of a problem, its numerator's target times ``sign``.

    With ``numbers_in`` the known values of chosen quantities are put in from the start; without it only those
    that are not positive, as symbols count as positive.

    Raises Refused where the target holds an unknown or is no real expression.
    """
    numbers = {
        name: number
        for name, number in problem.known.items()
        if name not in problem.unknowns and (numbers_in or not decimal(number) > 0)
    }
    constants = Constants()
    targets = _targets(problem, numbers, constants, sign)
    positives = {n: constants.rational(_placed(e, numbers)) for n, e in problem.positives.items()}
    stage = StageInRing(problem.function, numbers, constants)
    wanted = [t.value for t in targets] + [t.relative for t in targets if t.relative is not None]
    _check_free(problem, wanted)
    symbols = set().union(*(e.free_symbols for e in [*wanted, *positives.values(), *stage.expressions]))
    names = {str(s) for s in symbols} - {str(s) for s in constants.meanings()} | stage.names
    quantities = _quantities(problem, constants, names)
    ring = quantities.ring.clone(domain=QQ)
    rows = stage.in_ring(ring)
    groups: dict[str, list[Coefficient]] = {"denominator": [], "numerator": []}
    for target in targets:
        row = rows[target.where]
        polynomial = row[target.power] if target.power < len(row) else quantities.ring.zero
        relative = _quotient(target.relative, ring) if target.relative is not None else None
        value = _quotient(target.value, ring)
        groups[target.where].append(Coefficient(target.where, target.power, polynomial, value, relative))
    lists = list(groups.values()) if problem.gain == "free" else [[c for g in groups.values() for c in g]]
    return System(
        quantities,
        tuple(tuple(group) for group in lists),
        {name: _quotient(expression, ring) for name, expression in positives.items()},
    )


def _placed(expression: sympy.Expr, numbers: Mapping[str, sympy.Expr]) -> sympy.Expr:
    """Return an expression with numbers put in, its symbols positive, so that roots of squares come out plain."""
    return expression.subs(
        {s: numbers.get(str(s), sympy.Symbol(str(s), positive=True)) for s in expression.free_symbols}
    )


def _plain(expression: sympy.Expr) -> sympy.Expr:
    """Return the expression with symbols as others make them, without assumptions."""
    return expression.xreplace({s: sympy.Symbol(str(s)) for s in expression.free_symbols})


def _targets(
    problem: Problem, numbers: Mapping[str, sympy.Expr], constants: Constants, sign: int
) -> list[_Target]:
    below = [_placed(t, numbers) for t in problem.target_denominator]
    above = [sign * _placed(t, numbers) for t in problem.target_numerator]
    above += [sympy.S.Zero] * (len(below) - len(above))
    targets = [_Target("denominator", k, constants.rational(t), None) for k, t in enumerate(below)]
    for power, (number, other) in enumerate(zip(above, below, strict=True)):
        relative = None if other == 0 else constants.rational(_ratio(number, other))
        targets.append(_Target("numerator", power, constants.rational(number), relative))
    return targets


def _ratio(number: sympy.Expr, other: sympy.Expr) -> sympy.Expr:
    ratio = number / other
    if not ratio.is_number or ratio.is_Rational:
        return sympy.cancel(ratio) if ratio.free_symbols else ratio
    found = fraction_near(decimal(ratio))
    return ratio if found is None else sympy.Rational(found.numerator, found.denominator)


def _check_free(problem: Problem, targets: Iterable[sympy.Expr]) -> None:
    held = {str(s) for target in targets for s in target.free_symbols} & set(problem.unknowns)
    if held:
        name = min(held, key=natural)
        raise Refused(
            Refusal("target", f"the target holds {name}, which is itself to be solved for", f"choose {name}")
        )


def _quantities(problem: Problem, constants: Constants, names: set[str]) -> Quantities:
    """Return the ring and what is in it: unknowns, chosen quantities, constants."""
    unknowns = sorted(problem.unknowns, key=natural)
    chosen = sorted(names - set(unknowns), key=natural)
    meanings = constants.meanings()
    symbols = [sympy.Symbol(name, positive=True) for name in (*unknowns, *chosen)]
    ring = PolyRing([*symbols, *meanings], ZZ, lex)
    everything = {k: _plain(meanings.get(s, s)) for k, s in enumerate(ring.symbols)}
    fixed = {k: e for k, e in everything.items() if k >= len(symbols) and e.is_number}
    known = {
        s: problem.known[str(s)]
        for e in everything.values()
        for s in e.free_symbols
        if str(s) in problem.known
    }
    numbers = {
        k: decimal(e.subs(known))
        for k, e in everything.items()
        if k >= len(unknowns) and k not in fixed and e.free_symbols <= known.keys()
    }
    return Quantities(
        ring=ring,
        unknowns=tuple(range(len(unknowns))),
        signless=frozenset(k for k, name in enumerate(unknowns) if name in problem.free_unknowns),
        meanings=everything,
        decimals={k: decimal(e) for k, e in fixed.items()},
        squares={
            k: int(e.base)
            for k, e in fixed.items()
            if e.is_Pow and e.exp == sympy.S.Half and e.base.is_Integer
        },
        numbers=numbers,
    )


def _quotient(expression: sympy.Expr, ring: PolyRing) -> Quotient:
    """Return an expression as a quotient over the integers."""
    above, below = (ring.from_expr(e) for e in sympy.fraction(sympy.together(expression)))
    common = lcm(*(int(c.denominator) for p in (above, below) for c in p.values()))
    integers = ring.clone(domain=ZZ)
    return Quotient((above * common).set_ring(integers), (below * common).set_ring(integers))
