"""Terms, polynomials and quotients as forms, in the order in which a person writes them."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping

from sympy.polys.rings import PolyElement

from symcirc.nodal.equations import Term
from symcirc.transfer.arrange import form_of
from symcirc.transfer.assemble import number_pieces
from symcirc.transfer.common import remove_common_factor
from symcirc.transfer.factors import factorize
from symcirc.transfer.form import (
    ZERO,
    Form,
    Negative,
    Sum,
    Symbol,
    polynomial_in_s,
    power,
    product,
    quotient,
)
from symcirc.transfer.residues import Element
from symcirc.transfer.standard import Forms
from symcirc.transfer.ties import Quotient, natural_key

#: A sum with more products than this is not factored.
MOST_FACTORED = 60


def negative(form: Form) -> Form:
    """Return minus a form, two signs cancelled.

    >>> negative(Negative(Symbol("k")))
    Symbol(name='k')
    """
    return form.operand if isinstance(form, Negative) else form if form == ZERO else Negative(form)


def total(terms: Iterable[Form]) -> Form:
    """Return the sum of terms, those that are zero left out, positive ones first.

    >>> total([Negative(Symbol("n")), Symbol("k")])
    Sum(terms=(Symbol(name='k'), Negative(operand=Symbol(name='n'))))
    """
    kept = sorted((term for term in terms if term != ZERO), key=lambda term: isinstance(term, Negative))
    if not kept:
        return ZERO
    if len(kept) == 1:
        return kept[0]
    if isinstance(kept[0], Negative):
        return Negative(Sum(tuple(map(negative, kept))))
    return Sum(tuple(kept))


def difference(plus: Form, minus: Form) -> Form:
    """Return ``plus - minus``, in this order.

    >>> difference(ZERO, Symbol("V_a"))
    Negative(operand=Symbol(name='V_a'))
    """
    if plus == minus:
        return ZERO
    if plus == ZERO:
        return Negative(minus)
    return plus if minus == ZERO else Sum((plus, Negative(minus)))


def term_form(term: Term, quantity: Callable[[str], Form]) -> Form:
    """Return a law's term, as in ``(V_a - V_b)/R1``; ``quantity`` says what stands for an unknown."""
    across = difference(quantity(term.plus), quantity(term.minus) if term.minus else ZERO)
    if across == ZERO:
        return ZERO
    inner = negative(across) if isinstance(across, Negative) else across
    flipped = (term.weight.sign < 0) != isinstance(across, Negative)
    symbol, s = Symbol(term.weight.symbol), Symbol("s")
    match term.weight.kind:
        case "R" | "Z":
            form = quotient([inner], [symbol])
        case "C":
            form = product([s, symbol, inner])
        case "L":
            form = quotient([inner], [s, symbol])
        case "one":
            form = inner
        case _:
            form = product([symbol, inner])
    return Negative(form) if flipped else form


# polynomials in s and the parts -------------------------------------------------------------------------------


def in_powers_of_s(polynomial: PolyElement) -> Form:
    """Return a polynomial (s is its ring's first generator) in descending powers of s, each coefficient grouped."""
    ring = polynomial.ring
    powers = [ring.zero for _ in range(max((m[0] for m in polynomial), default=0) + 1)]
    for monomial, number in polynomial.terms():
        powers[monomial[0]][(0, *monomial[1:])] = number
    return polynomial_in_s([form_of(coefficient, ring.one) for coefficient in powers])


def _pieces(polynomial: PolyElement) -> tuple[Element, list[Form]]:
    """Return a polynomial as a number and factors, symbols before sums."""
    ring = polynomial.ring
    if len(polynomial) > MOST_FACTORED:
        return ring.domain.one, [in_powers_of_s(polynomial)]
    factors = factorize(polynomial)
    names = [str(symbol) for symbol in ring.symbols]
    order = sorted(
        range(len(names)), key=lambda k: (names[k] != "pi", names[k] != "s", natural_key(names[k]))
    )
    number = factors.number
    written = [power(Symbol(names[k]), factors.monomial[k]) for k in order if factors.monomial[k]]
    for factor, exponent in factors.polynomials:
        form = in_powers_of_s(factor)
        if isinstance(form, Negative):
            form, number = form.operand, number * (-1) ** exponent
        written.append(power(form, exponent))
    return number, written


def quotient_form(above: PolyElement, below: PolyElement, *behind: Form) -> Form:
    """Return ``above / below`` in lowest terms times what stands ``behind``."""
    if not above:
        return ZERO
    above, below, _ = remove_common_factor(above, below)
    (number, over), (divisor, under) = _pieces(above), _pieces(below)
    minus, above_number, below_number = number_pieces(above.ring.domain, number / divisor)
    form = quotient([*above_number, *over, *behind], [*below_number, *under])
    return Negative(form) if minus else form


def combination(factors: Mapping[str, PolyElement], below: PolyElement) -> Form:
    """Return ``sum of factor * unknown / below``, over one line where no term of several becomes simpler alone."""
    shared = len(factors) > 1 and all(_in_lowest_terms(factor, below) for factor in factors.values())
    one = below.ring.one
    summed = total(
        quotient_form(factor, one if shared else below, Symbol(name)) for name, factor in factors.items()
    )
    if not shared:
        return summed
    form = quotient_form(one, below, _size(summed))
    return negative(form) if isinstance(summed, Negative) else form


def _in_lowest_terms(above: PolyElement, below: PolyElement) -> bool:
    return bool(remove_common_factor(above, below)[2].is_ground)


def function_form(forms: Forms) -> Form:
    """Return a function as one quotient of polynomials in s."""
    above, below = (polynomial_in_s(list(side)) for side in (forms.numerator, forms.denominator))
    form = quotient([_size(above)], [below])
    return Negative(form) if isinstance(above, Negative) else form


def over_under(over: Form, under: Form, *before: Form) -> Form:
    """Return ``before * over / under``, a minus in front of it all."""
    minus = isinstance(over, Negative) != isinstance(under, Negative)
    form = quotient([*before, _size(over)], [_size(under)])
    return Negative(form) if minus else form


def _size(form: Form) -> Form:
    return form.operand if isinstance(form, Negative) else form


def tie_form(value: Quotient) -> Form:
    """Return what a name is tied to."""
    if all(not monomial[0] for p in (value.above, value.below) for monomial in p):
        return form_of(value.above, value.below)
    return quotient_form(value.above, value.below)
