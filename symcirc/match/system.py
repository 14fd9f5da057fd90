"""A stage and its target as polynomials in one ring, coefficient by coefficient."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
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

    With ``numbers_in`` the known values of chosen quantities count from the start, as constants.

    Raises Refused where the target holds an unknown or is no real expression.
    """
    constants = Constants()
    targets = _targets(problem, constants, sign)
    positives = {n: constants.rational(_positive(e)) for n, e in problem.positives.items()}
    stage = _Stage(problem, constants)
    wanted = [t.value for t in targets] + [t.relative for t in targets if t.relative is not None]
    _check_free(problem, wanted)
    symbols = set().union(*(e.free_symbols for e in [*wanted, *positives.values(), *stage.expressions]))
    names = {str(s) for s in symbols} - {str(s) for s in constants.meanings()} | stage.names
    quantities = _quantities(problem, constants, names)
    if numbers_in:
        quantities = replace(quantities, decimals={**quantities.numbers, **quantities.decimals}, numbers={})
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


def _positive(expression: sympy.Expr) -> sympy.Expr:
    """Return the expression with positive symbols, so that roots of squares come out plain."""
    return expression.xreplace({s: sympy.Symbol(str(s), positive=True) for s in expression.free_symbols})


def _plain(expression: sympy.Expr) -> sympy.Expr:
    """Return the expression with symbols as others make them, without assumptions."""
    return expression.xreplace({s: sympy.Symbol(str(s)) for s in expression.free_symbols})


def _targets(problem: Problem, constants: Constants, sign: int) -> list[_Target]:
    below = [_positive(t) for t in problem.target_denominator]
    above = [sign * _positive(t) for t in problem.target_numerator]
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
    found = fraction_near(decimal(number) / decimal(other))
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
    first = len(symbols)
    fixed = {k: e for k, e in everything.items() if k >= first and e.is_number}
    numbers = {
        k: decimal(problem.known[str(s)])
        for k, s in enumerate(symbols)
        if str(s) in problem.known and k >= len(unknowns)
    }
    for k in range(first, ring.ngens):
        if k not in fixed and all(str(s) in problem.known for s in everything[k].free_symbols):
            numbers[k] = decimal(
                everything[k].subs({s: problem.known[str(s)] for s in everything[k].free_symbols})
            )
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


class _Stage:
    """The coefficients of a stage on their way into the ring."""

    def __init__(self, problem: Problem, constants: Constants) -> None:
        self.function = problem.function
        source = self.function.ring
        rows = (*self.function.numerator, *self.function.denominator)
        used = [k for k in range(source.ngens) if any(m[k] for row in rows for m in row)]
        known = {name: e for name, e in problem.known.items() if name not in problem.unknowns}
        self.replaced = {
            k: constants.rational(_meaning(str(source.symbols[k]), known))
            for k in used
            if _is_constant(str(source.symbols[k]), known)
        }
        self.names = {str(source.symbols[k]) for k in used if k not in self.replaced}
        numbers = {c for row in rows for c in row.values()}
        self.coefficients = {c: constants.rational(source.domain.to_sympy(c)) for c in numbers}
        self.expressions = [*self.replaced.values(), *self.coefficients.values()]

    def in_ring(self, ring: PolyRing) -> dict[str, list[PolyElement]]:
        """Return both rows of coefficients over the integers, multiplied by what that takes."""
        positions = {str(s): k for k, s in enumerate(ring.symbols)}
        source = self.function.ring
        factors = {c: ring.from_expr(e) for c, e in self.coefficients.items()}
        generators = [
            ring.from_expr(self.replaced[k])
            if k in self.replaced
            else ring.gens[positions[str(s)]]
            if str(s) in positions
            else ring.one
            for k, s in enumerate(source.symbols)
        ]
        rows = {
            "numerator": [_converted(p, factors, generators, ring) for p in self.function.numerator],
            "denominator": [_converted(p, factors, generators, ring) for p in self.function.denominator],
        }
        common = lcm(*(int(c.denominator) for row in rows.values() for p in row for c in p.values()))
        return {
            where: [(p * common).set_ring(ring.clone(domain=ZZ)) for p in row] for where, row in rows.items()
        }


def _is_constant(name: str, known: Mapping[str, sympy.Expr]) -> bool:
    """Tell whether a symbol of the stage stands for its number: pi, and what is known not to be positive."""
    return name == "pi" or (name in known and not decimal(known[name]) > 0)


def _meaning(name: str, known: Mapping[str, sympy.Expr]) -> sympy.Expr:
    return sympy.pi if name == "pi" else known[name]


def _converted(
    polynomial: PolyElement,
    factors: Mapping[object, PolyElement],
    generators: Sequence[PolyElement],
    ring: PolyRing,
) -> PolyElement:
    total = ring.zero
    for monomial, coefficient in polynomial.items():
        term = factors[coefficient]
        for generator, exponent in zip(generators, monomial, strict=True):
            if exponent:
                term = term * generator**exponent
        total += term
    return total


def _quotient(expression: sympy.Expr, ring: PolyRing) -> Quotient:
    """Return an expression as a quotient over the integers."""
    above, below = (ring.from_expr(e) for e in sympy.fraction(sympy.together(expression)))
    common = lcm(*(int(c.denominator) for p in (above, below) for c in p.values()))
    integers = ring.clone(domain=ZZ)
    return Quotient((above * common).set_ring(integers), (below * common).set_ring(integers))
