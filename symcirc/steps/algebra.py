"""The laws of a circuit in the polynomial ring of s and the parts, the sheet's ties put in."""

from __future__ import annotations

from sympy.polys.rings import PolyElement, PolyRing

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import LoopDrive
from symcirc.derivation import Answer, Posed
from symcirc.nodal.equations import Term
from symcirc.sheet.expression import Expression
from symcirc.sheet.fixes import tie_order
from symcirc.steps.elimination import Row, reduced
from symcirc.steps.equal import Equal
from symcirc.steps.laws import Law
from symcirc.steps.needed import multiples
from symcirc.steps.proof import values
from symcirc.steps.writing import tie_form
from symcirc.transfer.common import remove_common_factor
from symcirc.transfer.form import Form
from symcirc.transfer.function import TransferFunction
from symcirc.transfer.residues import residues_for
from symcirc.transfer.ties import Quotient, expression_in, ring_for


class Algebra:
    """The ring of s and the parts, and what every weight of a law is in it, the ties put in."""

    def __init__(self, posed: Posed, laws: tuple[Law, ...], answer: Answer) -> None:
        symbols = {term.weight.symbol for law in laws for term in law.terms} - {""}
        self.ties = posed.ties
        symbols |= {str(g) for g in answer.function.ring.symbols} - {"one"}
        self.ring = ring_for(symbols, posed.ties)
        self.point = residues_for(self.ring)
        self.known: dict[str, Quotient] = {
            str(symbol): Quotient(gen, self.ring.one)
            for symbol, gen in zip(self.ring.symbols, self.ring.gens, strict=True)
        }
        for name in tie_order(posed.ties):
            self.known[name] = expression_in(self.ring, posed.ties[name], self.known)
        self.ratio = self._ratio(answer)

    def _ratio(self, answer: Answer) -> Quotient:
        """Return over / under; the loop gain T is minus the amplifier's gain times it."""
        function = answer.function
        above, below = (self._in_ring(function, side) for side in (function.numerator, function.denominator))
        if isinstance(answer.setup.drive, LoopDrive):
            gain = self.known[gain_symbol(answer.setup.drive.amplifier)]
            above, below = -above * gain.below, below * gain.above
        return Quotient(above, below)

    def _in_ring(self, function: TransferFunction, side: tuple[PolyElement, ...]) -> PolyElement:
        places = {str(symbol): k for k, symbol in enumerate(self.ring.symbols)}
        polynomial = self.ring.zero
        for power, coefficient in enumerate(side):
            for exponents, number in coefficient.terms():
                monomial = [0] * self.ring.ngens
                monomial[0] = power
                for symbol, exponent in zip(function.ring.symbols, exponents, strict=True):
                    if exponent:
                        monomial[places[str(symbol)]] = exponent
                polynomial[tuple(monomial)] = self.ring.domain.convert(number, function.ring.domain)
        return polynomial

    def tie(self, expression: Expression) -> Form:
        """Return what a name is tied to, other tied names in it as they are."""
        ring = PolyRing(
            list(dict.fromkeys([*map(str, self.ring.symbols), *self.ties])), self.ring.domain, self.ring.order
        )
        return tie_form(expression_in(ring, expression, {}))

    def weight(self, term: Term) -> Quotient:
        """Return what stands before an unknown."""
        ring, weight = self.ring, term.weight
        value = self.known[weight.symbol] if weight.symbol else Quotient(ring.one, ring.one)
        s = ring.gens[0]
        if weight.kind in ("C", "L"):
            value = Quotient(value.above * s, value.below)
        if weight.kind in ("R", "Z", "L"):
            value = Quotient(value.below, value.above)
        return Quotient(weight.sign * value.above, value.below)

    def row(self, law: Law, same: Equal) -> Row:
        """Return a law as polynomials times unknowns."""
        sums: dict[str, Quotient] = {}
        for term in law.terms:
            value = self.weight(term)
            for unknown, sign in ((term.plus, 1), (term.minus, -1)):
                name = same.of(unknown) if unknown else None
                if name is not None:
                    old = sums.get(name, Quotient(self.ring.zero, self.ring.one))
                    sums[name] = Quotient(
                        old.above * value.below + sign * value.above * old.below, old.below * value.below
                    )
        common = self.ring.one
        for value in sums.values():
            common = common * value.below.exquo(remove_common_factor(common, value.below)[2])
        return reduced({name: v.above * common.exquo(v.below) for name, v in sums.items() if v.above})

    def needed(self, laws: tuple[Law, ...], goal: Row) -> list[Law]:
        """Return the laws that the answer needs, in their order."""
        rows = [values(self.point, self.row(law, Equal(()))) for law in laws]
        found = multiples(rows, values(self.point, goal), self.point.prime)
        return [law for law, multiple in zip(laws, found, strict=True) if multiple]
