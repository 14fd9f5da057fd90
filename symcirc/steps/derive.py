"""From the laws of a circuit to an ask's standard form, one line after another."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from symcirc.circuit.amplifier import gain_symbol
from symcirc.circuit.model import LoopDrive
from symcirc.complaints import Complaint, InternalFault, listed
from symcirc.derivation import Answer, BigAnswer, Posed
from symcirc.sheet.expression import names
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import GROUND, PartCurrent, Quantity, Voltage
from symcirc.steps.algebra import Algebra
from symcirc.steps.elimination import Relation, Row, Solved, eliminate
from symcirc.steps.equal import Equal
from symcirc.steps.laws import Law, laws_of
from symcirc.steps.model import Step, Steps
from symcirc.steps.proof import Proof
from symcirc.steps.writing import (
    combination,
    function_form,
    negative,
    over_under,
    quotient_form,
    term_form,
    total,
)
from symcirc.transfer.form import ZERO, Form, Negative, Symbol
from symcirc.transfer.standard import coefficient_forms, monic_forms

#: A line with more products than this is no line for a person.
MOST_PRODUCTS = 400


def steps_of(posed: Posed, answer: Answer | BigAnswer) -> Steps:
    """Return the derivation of one answer, line by line.

    Raises Complaint where a line would be too long to be read, InternalFault where the steps end at another
    function than the answer's.

    >>> from symcirc.complaints import Source
    >>> from symcirc.derivation import derive, pose
    >>> from symcirc.sheet import read_sheet
    >>> from symcirc.steps.text import equation_text
    >>> posed = pose(read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in")))
    >>> for step in steps_of(posed, derive(posed).answers[0]).steps:
    ...     print(f"{step.kind:14} {equation_text(step)}")
    law            (V_out - V_in)/R1 + s*C1*V_out = 0
    ratio          V_out/V_in = 1/(s*R1*C1 + 1)
    standard form  H = (1/(R1*C1))/(s + 1/(R1*C1))
    """
    if isinstance(answer, BigAnswer):
        raise _too_long(answer, sum(answer.products))
    products = sum(map(len, (*answer.function.numerator, *answer.function.denominator)))
    if products > MOST_PRODUCTS:
        raise _too_long(answer, products)
    return Steps(answer.ask.name, len(posed.sheet.asks) > 1, tuple(_Hand(posed, answer).steps()))


def _too_long(answer: Answer | BigAnswer, products: int) -> Complaint:
    return Complaint(
        answer.ask.place,
        f"the derivation of `{answer.ask.name}` has a line of {products:,} products, too long to be read",
        "ask about a smaller piece of the circuit, or leave --steps out",
    )


class _Hand:
    """One answer's derivation while it is written."""

    def __init__(self, posed: Posed, answer: Answer) -> None:
        self.posed, self.answer, self.setup = posed, answer, answer.setup
        self.under = _unknowns(self.setup.under)
        self.asked = {**_unknowns(self.setup.over), **self.under}
        self.equal = Equal(self.asked)
        laws = laws_of(posed.circuit, self.setup)
        self.algebra = Algebra(posed, laws, answer)
        self.laws = self.algebra.needed(laws, self._goal())

    def steps(self) -> Iterator[Step]:
        """Yield what the amplifiers say, the laws, the ties, the elimination, and the answer."""
        for law in self.laws:
            if law.equal:
                yield self._equality(law)
        laws = [law for law in self.laws if not law.equal]
        stated = [self._law(law) for law in laws]
        yield from stated
        yield from self._ties({term.weight.symbol for law in laws for term in law.terms})
        relations = [Relation(law.short, self.algebra.row(law, self.equal)) for law in laws]
        yield from self._elimination(relations, {(step.left, step.right) for step in stated})
        yield from self._standard_form()

    # laws -------------------------------------------------------------------------------------------------------

    def _equality(self, law: Law) -> Step:
        first, second = law.terms[0].plus, law.terms[0].minus
        self.equal.join(first, second)
        words = law.words or f"{_capital(law.short)}: nothing else flows there."
        return Step(law.kind, words, Symbol(first), Symbol(second) if second else ZERO)

    def _law(self, law: Law) -> Step:
        forms = [form for form in (term_form(term, self._form) for term in law.terms) if form != ZERO]
        if law.kind in ("device", "current"):
            return Step(
                law.kind, law.words or f"{_capital(law.short)}.", forms[0], negative(total(forms[1:]))
            )
        delivered = [
            form for form in forms if isinstance(form, Negative) and isinstance(form.operand, Symbol)
        ]
        leaving = [form for form in forms if form not in delivered]
        words = f"{_capital(law.short)} add up to zero."
        if leaving and delivered:
            words = f"{_capital(law.short)}: what leaves by the parts is delivered there."
        elif all(isinstance(form, Negative) for form in leaving):
            leaving = [negative(form) for form in leaving]
        return Step(law.kind, words, total(leaving), negative(total(delivered)))

    def _form(self, unknown: str) -> Form:
        name = self.equal.of(unknown)
        return ZERO if name is None else Symbol(name)

    def _ties(self, needed: set[str]) -> Iterator[Step]:
        """Yield what the sheet ties of the symbols that the laws hold, and the gains of real amplifiers."""
        if isinstance(self.setup.drive, LoopDrive):
            needed |= {gain_symbol(self.setup.drive.amplifier)}
        ties = self.posed.ties
        order = tie_order(ties)
        for name in reversed(order):
            if name in needed:
                needed |= {inner.text for inner in names(ties[name])}
        for name in order:
            if name in needed:
                tied = name in self.posed.sheet.fixes
                words = f"The sheet ties {name}." if tied else f"{name} is the gain of the amplifier."
                yield Step("tie", words, Symbol(name), self.algebra.tie(ties[name]))

    # elimination ------------------------------------------------------------------------------------------------

    def _goal(self) -> Row:
        """Return ``denominator * over - numerator * under`` in unknowns: zero, whatever the drive is."""
        ratio = self.algebra.ratio
        row: Row = {}
        for quantity, factor in ((self.setup.over, ratio.below), (self.setup.under, -ratio.above)):
            for unknown, sign in _unknowns(quantity).items():
                name = self.equal.of(unknown)
                if name is not None:
                    row[name] = row.get(name, factor.ring.zero) + sign * factor
        return {name: factor for name, factor in row.items() if factor}

    def _elimination(self, relations: list[Relation], shown: set[tuple[Form, Form]]) -> Iterator[Step]:
        """Yield what is solved for in turn, but what a law has ``shown`` already; then the ratio."""
        proof = Proof(self.algebra.point, self._goal())
        words = "These give the ratio."
        for item in eliminate(relations, self._written(self.asked), self._written(self.under)):
            if isinstance(item, Solved):
                step = self._solved(item)
                if (step.left, step.right) not in shown:
                    yield step
                proof.put_in(item.relation.row, item.unknown)
            else:
                words = f"{_source(item)}: the ratio."
                proof.put_in(item.row, next(iter(item.row)))
        if not proof.done:
            raise InternalFault(f"the steps come to another function of {self.answer.ask.name}")
        over, under = _quantity_form(self.setup.over), _quantity_form(self.setup.under)
        ratio = self.algebra.ratio
        if not isinstance(self.setup.drive, LoopDrive):
            value = function_form(coefficient_forms(self.answer.function))
            yield Step("ratio", words, over_under(over, under), value)
            return
        yield Step("ratio", words, over_under(over, under), quotient_form(ratio.above, ratio.below))
        gain = Symbol(gain_symbol(self.setup.drive.amplifier))
        words = "The loop gain: what comes back to the inputs, amplified, its sign turned."
        yield Step("ratio", words, Symbol(self.answer.ask.name), negative(over_under(over, under, gain)))

    def _written(self, unknowns: Iterable[str]) -> frozenset[str]:
        return frozenset(name for name in map(self.equal.of, unknowns) if name)

    def _solved(self, solved: Solved) -> Step:
        relation, unknown = solved.relation, solved.unknown
        if relation.products > MOST_PRODUCTS:
            raise _too_long(self.answer, relation.products)
        have = "have" if relation.short.startswith("the currents") else "has"
        why = f", which {have} the fewest terms" if solved.choice else ""
        others = {name: -factor for name, factor in relation.row.items() if name != unknown}
        right = combination(others, relation.row[unknown])
        return Step("eliminated", f"{_source(relation)}{why}: {unknown}.", Symbol(unknown), right)

    def _standard_form(self) -> Iterator[Step]:
        name, function = self.answer.ask.name, self.answer.function
        words = "The same in standard form, the denominator beginning with a bare power of s."
        if not function.order:
            words = f"This is {name}."
        yield Step("standard form", words, Symbol(name), function_form(monic_forms(function)))


# words and forms of the asked quantities ----------------------------------------------------------------------


def _capital(words: str) -> str:
    return words[0].upper() + words[1:]


def _source(relation: Relation) -> str:
    """Return where a line comes from, in words."""
    if relation.put_in:
        return f"With {listed(list(relation.put_in))} put into {relation.short}"
    return f"From {relation.short}"


def _unknowns(quantity: Quantity) -> dict[str, int]:
    """Return an asked quantity as signs before unknowns."""
    if isinstance(quantity, Voltage):
        signs = ((quantity.plus, 1), (quantity.minus, -1))
        return {f"V_{node}": sign for node, sign in signs if node != GROUND}
    return {f"I_{quantity.part if isinstance(quantity, PartCurrent) else quantity.node}": 1}


def _quantity_form(quantity: Quantity) -> Form:
    signs = _unknowns(quantity).items()
    return total(Symbol(name) if sign > 0 else Negative(Symbol(name)) for name, sign in signs)
