"""Big answers as a sequence of short named sub-expressions, read off the diagram.

What a state stands for is written once. A state that is used more than once gets a name; one that is used
once stands where it is used. So the whole grows with the diagram, not with the number of products.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

from symcirc.trees.diagram import Diagram, Level
from symcirc.trees.laws import Weight


@dataclass(frozen=True)
class Named:
    """Two polynomials by way of named sub-expressions.

    Attributes:
        definitions: (name, expression), each in terms of symbols and of names before it.
        over: the numerator's coefficients by ascending power of s; () for zero.
        under: the denominator's.
    """

    definitions: tuple[tuple[str, str], ...]
    over: tuple[str, ...]
    under: tuple[str, ...]


@dataclass(frozen=True)
class _Sum:
    """Terms, each a coefficient and its factors, and how deep brackets nest in them."""

    terms: tuple[tuple[int, tuple[str, ...]], ...]
    depth: int = 0

    def __str__(self) -> str:
        text = "".join(map(_term, self.terms)) or " + 0"
        return text[3:] if text.startswith(" + ") else "-" + text[3:]


#: A state and how many powers of s are to come from it on.
_Key = tuple[int, int]

#: A sub-expression with brackets nested deeper than this gets a name even where it is used once.
_DEEPEST = 8


def named_coefficients(diagram: Diagram, name: Callable[[int], str]) -> Named:
    """Return the coefficients of both polynomials in terms of named sub-expressions.

    Args:
        diagram: a collected diagram (see :func:`symcirc.trees.collect.collected`).
        name: gives the name of the sub-expression of that number, from 1 on; no symbol may have it.

    Returns:
        One expression for every power of s. The size of the whole is at most that of the diagram times the
        order.

    >>> one = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1, 1), (2, 0)))
    >>> two = Level("R2", (Weight(), Weight(1, "R2", 1)), ((1, 1), (1, 0)))
    >>> named_coefficients(Diagram((one, two), (1, 2), (1,), ()), "x{}".format)
    Named(definitions=(('x1', '1 + R2'),), over=('x1 + R1',), under=('x1',))
    """
    return _Writer(diagram, name).named()


def named_polynomials(diagram: Diagram, name: Callable[[int], str]) -> Named:
    """Return both polynomials in terms of named sub-expressions that hold s.

    Args:
        diagram: a collected diagram.
        name: gives the name of the sub-expression of that number, from 1 on; no symbol may have it.

    Returns:
        ``over`` and ``under`` are one expression each. The size of the whole is linear in that of the
        diagram.

    >>> level = Level("C1", (Weight(1, "C1", 1, 1), Weight()), ((1,), (1,)))
    >>> named_polynomials(Diagram((level,), (0, 1), (1,), ()), "x{}".format).under
    ('s*C1 + 1',)
    """
    levels = tuple(
        replace(level, weights=tuple(_with_s_inside(weight) for weight in level.weights))
        for level in diagram.levels
    )
    return _Writer(replace(diagram, levels=levels), name).named()


def _with_s_inside(weight: Weight) -> Weight:
    """Return the weight with s written as a part of its symbol (s stands only beside a symbol)."""
    return Weight(symbol=f"s*{weight.symbol}", exponent=1) if weight.s_power else weight


class _Writer:
    """Finds what is needed from the roots downwards, then writes it from the ends upwards."""

    def __init__(self, diagram: Diagram, name: Callable[[int], str]) -> None:
        self._diagram = diagram
        self._name = name
        self._definitions: list[tuple[str, str]] = []
        self._powers = _powers(diagram)

    def named(self) -> Named:
        uses = self._uses()
        sums: dict[_Key, _Sum] = {
            (state, 0): _Sum(((end, ()),)) for state, end in enumerate(self._diagram.ends)
        }
        for level, wanted in zip(reversed(self._diagram.levels), reversed(uses), strict=True):
            sums = {key: self._kept(_sum(level, key, sums), times) for key, times in wanted.items()}
        over, under = (self._coefficients(root, sums) for root in self._diagram.roots)
        return Named(tuple(self._definitions), over, under)

    def _coefficients(self, root: int, sums: dict[_Key, _Sum]) -> tuple[str, ...]:
        found = []
        for power in range(self._powers[0][abs(root) - 1].bit_length() if root else 0):
            one = sums.get((abs(root) - 1, power), _Sum(()))
            found.append(str(_Sum(_times(one.terms, root))))
        return tuple(found)

    def _uses(self) -> list[dict[_Key, int]]:
        """Return for every level how often each state is used with how many powers of s to come."""
        wanted: dict[_Key, int] = {}
        for root in self._diagram.roots:
            for power in _bits(self._powers[0][abs(root) - 1]) if root else ():
                key = abs(root) - 1, power
                wanted[key] = wanted.get(key, 0) + 1
        found = []
        for level, after in zip(self._diagram.levels, self._powers[1:], strict=True):
            found.append(wanted)
            following: dict[_Key, int] = {}
            for state, power in wanted:
                for weight, codes in zip(level.weights, level.codes, strict=True):
                    place, left = abs(codes[state]) - 1, power - weight.s_power
                    if place >= 0 and left >= 0 and after[place] >> left & 1:
                        following[place, left] = following.get((place, left), 0) + 1
            wanted = following
        return found

    def _kept(self, one: _Sum, times: int) -> _Sum:
        """Return what stands for a sum where it is used: itself, or its name."""
        short = len(one.terms) == 1 and len(one.terms[0][1]) < 2
        if short or (times < 2 and one.depth <= _DEEPEST):
            return one
        name = self._name(len(self._definitions) + 1)
        self._definitions.append((name, str(one)))
        return _Sum(((1, (name,)),))


def _powers(diagram: Diagram) -> list[list[int]]:
    """Return the powers of s of every state as the bits of an integer, level by level, ends last."""
    found = [[1] * len(diagram.ends)]
    for level in reversed(diagram.levels):
        find = [0, *found[-1], *reversed(found[-1])].__getitem__
        here = [0] * level.size
        for weight, codes in zip(level.weights, level.codes, strict=True):
            here = [powers | find(code) << weight.s_power for powers, code in zip(here, codes, strict=True)]
        found.append(here)
    found.reverse()
    return found


def _bits(number: int) -> list[int]:
    return [place for place in range(number.bit_length()) if number >> place & 1]


def _sum(level: Level, key: _Key, after: dict[_Key, _Sum]) -> _Sum:
    """Return what a state stands for, from what stands for the states of the next level."""
    state, power = key
    terms: list[tuple[int, tuple[str, ...]]] = []
    depth = 0
    for weight, codes in zip(level.weights, level.codes, strict=True):
        code = codes[state]
        below = after.get((abs(code) - 1, power - weight.s_power)) if code else None
        if below is None:
            continue
        factors = (_factor(weight),) if weight.exponent else ()
        inner = below.terms
        if factors and len(inner) > 1:
            inner = ((1, (f"({below})",)),)
            depth = max(depth, below.depth + 1)
        else:
            depth = max(depth, below.depth)
        terms += [(coefficient, factors + others) for coefficient, others in _times(inner, code)]
    return _Sum(tuple(terms), depth)


def _times(
    terms: tuple[tuple[int, tuple[str, ...]], ...], code: int
) -> tuple[tuple[int, tuple[str, ...]], ...]:
    return terms if code > 0 else tuple((-coefficient, factors) for coefficient, factors in terms)


def _factor(weight: Weight) -> str:
    return f"{weight.symbol}" if weight.exponent == 1 else f"{weight.symbol}**{weight.exponent}"


def _term(term: tuple[int, tuple[str, ...]]) -> str:
    coefficient, factors = term
    factors = tuple(sorted(factors, key=lambda factor: not factor.startswith("s*")))
    size = [str(abs(coefficient))] if abs(coefficient) != 1 or not factors else []
    return (" - " if coefficient < 0 else " + ") + "*".join([*size, *factors])
