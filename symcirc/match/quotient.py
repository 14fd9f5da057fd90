"""All common roots of polynomials with numbers as coefficients, by the algebra of polynomials modulo them.

A Gröbner basis is found twice: first modulo a prime at a random point, which is fast and shows what is zero whatever
the numbers are, then with decimals along the same path, so that no rounded number is ever asked whether it is zero.
Multiplication by each unknown modulo the basis is a matrix; roots that meet are still one algebra of the same
dimension, only their common eigenvalue is multiple, so that nothing special happens there. The roots then are rational
functions of the roots of one polynomial. That all is right is checked at the end: the matrices must commute with each
other and solve the equations, which is so only where they come from these equations and no digits were lost.

Sources, from memory: B. Buchberger, "Ein algorithmisches Kriterium für die Lösbarkeit eines algebraischen
Gleichungssystems" (1970); H. J. Stetter, "Numerical Polynomial Algebra" (2004) on the matrices; F. Rouillier,
"Solving zero-dimensional systems through the rational univariate representation" (1999) on the last step.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from decimal import Context, Decimal, localcontext
from itertools import combinations

from symcirc.match.counting import PRIME

#: The decimals of this module; digits that the matrices must agree to at the end.
DIGITS, AGREED = 250, 100
#: More roots than these are not looked for, as the time grows with the fourth power of their number.
MOST_ROOTS = 40

#: A monomial as its degree and the exponents negated, last unknown first: such tuples compare as the order of the basis
#: (by degree, then reverse lexicographic), and are multiplied by adding.
Key = tuple[int, ...]
#: A coefficient: its image modulo the prime, which tells whether it is zero, and its value.
Number = tuple[int, Decimal]
Polynomial = dict[Key, Number]

#: The arithmetic of the values.
WIDE = Context(prec=DIGITS)
_ZERO, _ONE = (0, Decimal(0)), (1, Decimal(1))
Vector = list[Decimal]
Matrix = list[Vector]  # a list of columns


class NotFound(Exception):
    """The roots are infinitely or too many, or digits were lost."""


@dataclass(frozen=True)
class Algebra:
    """Polynomials modulo an ideal: ``columns`` holds, for each unknown, the matrix that multiplies by it.

    The first basis element is 1.
    """

    columns: tuple[Matrix, ...]

    @property
    def dimension(self) -> int:
        """The number of roots, each counted as often as it is multiple."""
        return len(self.columns[0])


def monomial_key(exponents: Sequence[int]) -> Key:
    """Return the key of a monomial.

    >>> monomial_key((2, 1)) > monomial_key((1, 2)) > monomial_key((1, 1))
    True
    """
    return (sum(exponents), *(-e for e in reversed(exponents)))


def algebra(equations: Sequence[Polynomial], spend: Callable[[int], None]) -> Algebra:
    """Return the algebra of polynomials modulo some equations.

    Args:
        equations: their coefficients by :func:`monomial_key`, all in the same unknowns.
        spend: is told the number of products before they are made.

    Raises:
        NotFound: the equations have infinitely many or too many roots, or the decimals do not agree at the end.
    """
    images = [{m: (image, Decimal(0)) for m, (image, _) in e.items()} for e in equations]
    path = _Basis(images, spend, _image_less, _image_ratio)
    path.complete()
    standard = _standard(path.leads())
    with localcontext(WIDE):
        found = _Basis(equations, spend, _less, _ratio)
        found.follow(path.useful)
        columns = tuple(_columns(k, standard, found) for k in range(len(standard[0]) - 1))
        result = Algebra(columns)
        _check(result, equations)
    return result


def _image_less(one: Number, factor: Number, other: Number) -> Number:
    return (one[0] - factor[0] * other[0]) % PRIME, one[1]


def _image_ratio(one: Number, other: Number) -> Number:
    return one[0] * pow(other[0], -1, PRIME) % PRIME, one[1]


def _less(one: Number, factor: Number, other: Number) -> Number:
    return (one[0] - factor[0] * other[0]) % PRIME, one[1] - factor[1] * other[1]


def _ratio(one: Number, other: Number) -> Number:
    if not other[1]:
        raise NotFound
    return one[0] * pow(other[0], -1, PRIME) % PRIME, one[1] / other[1]


def _divides(one: Key, other: Key) -> bool:
    return all(a >= b for a, b in zip(one[1:], other[1:], strict=True))


def _common_multiple(one: Key, other: Key) -> Key:
    exponents = tuple(map(min, one[1:], other[1:]))
    return (-sum(exponents), *exponents)


def _over(one: Key, other: Key) -> Key:
    return tuple(a - b for a, b in zip(one, other, strict=True))


def _times(one: Key, other: Key) -> Key:
    return tuple(a + b for a, b in zip(one, other, strict=True))


class _Basis:
    """A basis that grows; its members have leading coefficient 1."""

    def __init__(
        self,
        equations: Iterable[Polynomial],
        spend: Callable[[int], None],
        less: Callable[[Number, Number, Number], Number],
        ratio: Callable[[Number, Number], Number],
    ) -> None:
        self.spend = spend
        self.less = less
        self.ratio = ratio
        self.members: list[tuple[Key, Polynomial]] = []
        self.useful: list[tuple[int, int]] = []
        for equation in equations:
            self.add(self.reduced(equation))

    def add(self, polynomial: Polynomial) -> None:
        """Add a polynomial that is reduced, unless it is zero."""
        if not polynomial:
            return
        lead = max(polynomial)
        scale = polynomial[lead]
        monic = {m: self.ratio(c, scale) for m, c in polynomial.items()}
        self.members.append((lead, monic))

    def reduced(self, polynomial: Polynomial) -> Polynomial:
        """Return a polynomial without the multiples of the members' leading monomials."""
        left, kept = dict(polynomial), {}
        while left:
            lead = max(left)
            coefficient = left[lead]
            member = next((m for m in self.members if _divides(m[0], lead)), None)
            if member is None:
                kept[lead] = left.pop(lead)
            else:
                self._take(left, coefficient, _over(lead, member[0]), member[1])
        return kept

    def _take(self, left: Polynomial, factor: Number, shift: Key, member: Polynomial) -> None:
        """Take ``factor`` times a shifted member from a polynomial, in place."""
        self.spend(len(member))
        for monomial, coefficient in member.items():
            key = _times(monomial, shift)
            value = self.less(left.get(key, _ZERO), factor, coefficient)
            if value[0]:
                left[key] = value
            else:
                left.pop(key, None)

    def _joined(self, one: int, other: int) -> Polynomial:
        """Return the difference of two members in which their leading monomials cancel, reduced."""
        (first, mine), (second, yours) = self.members[one], self.members[other]
        multiple = _common_multiple(first, second)
        left = {_times(m, _over(multiple, first)): c for m, c in mine.items()}
        self._take(left, _ONE, _over(multiple, second), yours)
        return self.reduced(left)

    def complete(self) -> None:
        """Add members until every such difference reduces to zero; those that did not are kept as ``useful``."""
        waiting = set(combinations(range(len(self.members)), 2))
        while waiting:
            pair = min(waiting, key=lambda p: (self._multiple(p), p))
            waiting.remove(pair)
            if self._is_needless(pair, waiting):
                continue
            left = self._joined(*pair)
            if left:
                self.useful.append(pair)
                self.add(left)
                waiting |= {(k, len(self.members) - 1) for k in range(len(self.members) - 1)}

    def _multiple(self, pair: tuple[int, int]) -> Key:
        return _common_multiple(self.members[pair[0]][0], self.members[pair[1]][0])

    def _is_needless(self, pair: tuple[int, int], waiting: set[tuple[int, int]]) -> bool:
        """Tell whether a pair reduces to zero by Buchberger's criteria."""
        one, other = self.members[pair[0]][0], self.members[pair[1]][0]
        multiple = _common_multiple(one, other)
        if multiple == _times(one, other):
            return True
        return any(
            _divides(lead, multiple)
            and k not in pair
            and (min(k, pair[0]), max(k, pair[0])) not in waiting
            and (min(k, pair[1]), max(k, pair[1])) not in waiting
            for k, (lead, _) in enumerate(self.members)
        )

    def follow(self, path: Iterable[tuple[int, int]]) -> None:
        """Add the members that another basis found useful."""
        for pair in path:
            self.add(self._joined(*pair))

    def leads(self) -> list[Key]:
        """Return the leading monomials."""
        return [lead for lead, _ in self.members]


def _standard(leads: Sequence[Key]) -> list[Key]:
    """Return the monomials that no leading one divides, rising; raises NotFound where they are too many or none."""
    count = len(leads[0]) - 1
    found = [(0,) * (count + 1)]
    if any(not any(lead) for lead in leads):
        raise NotFound
    for monomial in found:
        for k in range(1, count + 1):
            grown = _times(monomial, _unknown(k, count))
            if grown not in found and not any(_divides(lead, grown) for lead in leads):
                found.append(grown)
                if len(found) > MOST_ROOTS:
                    raise NotFound
    return sorted(found)


def _unknown(position: int, count: int) -> Key:
    return (1, *(-1 if k == position else 0 for k in range(1, count + 1)))


def _columns(position: int, standard: Sequence[Key], basis: _Basis) -> Matrix:
    """Return the matrix that multiplies by an unknown."""
    count = len(standard[0]) - 1
    matrix = []
    for monomial in standard:
        product = basis.reduced({_times(monomial, _unknown(count - position, count)): _ONE})
        matrix.append([product.get(m, _ZERO)[1] for m in standard])
    return matrix


def _check(found: Algebra, equations: Sequence[Polynomial]) -> None:
    """Raise NotFound unless the matrices commute and solve the equations."""
    sizes = [[[abs(c) for c in column] for column in matrix] for matrix in found.columns]
    for i, j in combinations(range(len(sizes)), 2):
        for k in range(found.dimension):
            ways = [
                applied(matrices[one], matrices[other][k])
                for one, other in ((i, j), (j, i))
                for matrices in (found.columns, sizes)
            ]
            _agree(ways[0], ways[2], [a + b for a, b in zip(ways[1], ways[3], strict=True)])
    nothing = [Decimal(0)] * found.dimension
    one = [Decimal(1), *nothing[1:]]
    for equation in equations:
        value, size = nothing, nothing
        for monomial, (_, coefficient) in equation.items():
            value = _added(value, _monomial_applied(found.columns, monomial, one), coefficient)
            size = _added(size, _monomial_applied(sizes, monomial, one), abs(coefficient))
        _agree(value, nothing, size)


def _monomial_applied(matrices: Sequence[Matrix], monomial: Key, vector: Vector) -> Vector:
    for matrix, exponent in zip(matrices, reversed(monomial[1:]), strict=True):
        for _ in range(-exponent):
            vector = applied(matrix, vector)
    return vector


def _added(one: Vector, other: Vector, factor: Decimal) -> Vector:
    return [a + factor * b for a, b in zip(one, other, strict=True)]


def _agree(one: Vector, other: Vector, sizes: Vector) -> None:
    """Raise NotFound where two vectors differ by more than digits lost, their entries sums of terms of some sizes."""
    if any(abs(a - b) > size.scaleb(-AGREED) for a, b, size in zip(one, other, sizes, strict=True)):
        raise NotFound


def applied(matrix: Matrix, vector: Vector) -> Vector:
    """Return a matrix (a list of columns) times a vector, in the current decimal context.

    >>> one, two = Decimal(1), Decimal(2)
    >>> applied([[one, two], [two, one]], [two, one])
    [Decimal('4'), Decimal('5')]
    """
    total = [Decimal(0)] * len(vector)
    for column, factor in zip(matrix, vector, strict=True):
        if factor:
            for k, entry in enumerate(column):
                if entry:
                    total[k] += entry * factor
    return total
