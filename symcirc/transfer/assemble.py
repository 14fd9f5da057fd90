"""From numbers, exponents and factors to a form: what stands first, what stands under the line."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property

import sympy
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyRing

from symcirc.transfer.cost import is_reactive
from symcirc.transfer.form import ONE, Form, Integer, Negative, Root, Sum, Symbol, power, quotient
from symcirc.transfer.residues import Element
from symcirc.transfer.ties import natural_key

#: Exponents of the alphabet's atoms, negative where they stand under the line.
Exponents = tuple[int, ...]
#: What sorts the terms of a sum: the number of symbols, then the symbols as they are written.
Rank = tuple[int, tuple[int, ...]]


@dataclass(frozen=True)
class Alphabet:
    """What is written for every generator of a ring, and in which order: the atoms' places, first to last."""

    ring: PolyRing
    atoms: tuple[Form, ...]
    order: tuple[int, ...]

    @cached_property
    def reactive(self) -> tuple[int, ...]:
        """The places of the capacitors and inductors."""
        return tuple(
            k for k, atom in enumerate(self.atoms) if isinstance(atom, Symbol) and is_reactive(atom.name)
        )


def alphabet_of(ring: PolyRing, brackets: Sequence[Form] = ()) -> Alphabet:
    """Return the alphabet of a ring: ``pi``, parts, parameters; the last generators stand for brackets."""
    names = [str(symbol) for symbol in ring.symbols[: ring.ngens - len(brackets)]]
    order = sorted(range(len(names)), key=lambda k: (names[k] != "pi", natural_key(names[k])))
    return Alphabet(
        ring, (*(Symbol(name) for name in names), *brackets), (*order, *range(len(names), ring.ngens))
    )


def rank(alphabet: Alphabet, exponents: Exponents) -> Rank:
    """Return where a product stands in a sum."""
    above: list[int] = []
    below: list[int] = []
    for place, k in enumerate(alphabet.order):
        if exponents[k]:
            (above if exponents[k] > 0 else below).extend([place] * abs(exponents[k]))
    return len(above) + len(below), (*above, *below)


def assemble(alphabet: Alphabet, number: Element, exponents: Exponents, factors: Iterable[Form] = ()) -> Form:
    """Return number times atoms times more factors, as one product or quotient, a minus in front.

    >>> ring = PolyRing(["R1", "C1"], QQ)
    >>> assemble(alphabet_of(ring), QQ(-2, 3), (1, -1))
    Negative(operand=Divided(above=Product(factors=(Integer(value=2), Symbol(name='R1'))), \
below=Product(factors=(Integer(value=3), Symbol(name='C1')))))
    """
    negative, above, below = number_pieces(alphabet.ring.domain, number)
    for k in alphabet.order:
        if exponents[k]:
            (above if exponents[k] > 0 else below).append(power(alphabet.atoms[k], abs(exponents[k])))
    form = quotient([*above, *factors], below)
    return Negative(form) if negative else form


def is_negative(domain: Element, number: Element) -> bool:
    """Tell whether an element of the rationals or of a real field with roots is below zero."""
    return bool(number < 0) if domain == QQ else bool(domain.to_sympy(number).is_negative)


def number_pieces(domain: Element, number: Element) -> tuple[bool, list[Form], list[Form]]:
    """Return (whether it is negative, what stands above the line, what stands below it).

    >>> number_pieces(QQ, QQ(-1, 2))
    (True, [], [Integer(value=2)])
    """
    negative = is_negative(domain, number)
    if domain == QQ:
        return negative, _unless_one(abs(int(number.numerator))), _unless_one(int(number.denominator))
    terms = [t.as_coeff_Mul() for t in sympy.Add.make_args(domain.to_sympy(-number if negative else number))]
    above = math.gcd(*(int(rational.p) for rational, _ in terms))
    below = math.lcm(*(int(rational.q) for rational, _ in terms))
    rest = number_form(sympy.Add(*(rational * below / above * root for rational, root in terms)))
    return negative, [*_unless_one(above), *([] if rest == ONE else [rest])], _unless_one(below)


def _unless_one(number: int) -> list[Form]:
    return [] if number == 1 else [Integer(number)]


def number_form(number: sympy.Expr) -> Form:
    """Return the form of one of sympy's exact numbers of rationals and square roots.

    >>> number_form(1 + sympy.sqrt(2))
    Sum(terms=(Integer(value=1), Root(operand=Integer(value=2))))
    """
    if number.is_Rational:
        size = quotient([Integer(abs(int(number.p)))], [Integer(int(number.q))])
        return Negative(size) if number < 0 else size
    if number.is_Add:
        terms = sorted(number.args, key=lambda term: (not term.is_Rational, sympy.default_sort_key(term)))
        return joined([((k, ()), number_form(term)) for k, term in enumerate(terms)])
    if number.is_Mul:
        content, rest = number.as_coeff_Mul()
        sign = content < 0
        above = [Integer(abs(int(content.p))), *(number_form(factor) for factor in sympy.Mul.make_args(rest))]
        form = quotient(above, [Integer(int(content.q))])
        return Negative(form) if sign else form
    assert number.exp == sympy.Rational(1, 2)  # the fields hold square roots only
    return Root(number_form(number.base))


def joined(summands: Iterable[tuple[Rank, Form]]) -> Form:
    """Return the sum of terms, positive ones first, in their ranks' order; an overall minus in front."""
    ordered = sorted(summands, key=lambda summand: (isinstance(summand[1], Negative), summand[0]))
    terms = [form for _, form in ordered]
    if len(terms) == 1:
        return terms[0]
    if isinstance(terms[0], Negative):
        return Negative(Sum(tuple(term.operand for term in terms if isinstance(term, Negative))))
    return Sum(tuple(terms))
