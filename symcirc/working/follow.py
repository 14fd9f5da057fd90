"""Does a line follow from those above it, as algebra alone?

With definitions put in and denominators cleared, lines are linear in voltages and currents, which count as
independent here whatever the circuit is; the parts are elements of a field. A line follows where it adds nothing
to the rank of those above it, at two random points.
"""

from __future__ import annotations

from symcirc.sheet.expression import Expression
from symcirc.sheet.model import GROUND, NodeCurrent, PartCurrent, Quantity, Voltage
from symcirc.working.elimination import Basis, Row
from symcirc.working.field import NotInField
from symcirc.working.forms import (
    CONSTANT,
    Form,
    NotLinear,
    add,
    constant,
    form_of,
    invert,
    multiply,
    row_of,
    unknown,
)
from symcirc.working.residues import Residues


class Algebra:
    """The lines of one context at one point, as rows; they grow line by line."""

    def __init__(self, residues: Residues) -> None:
        self.residues = residues
        self._basis: Basis[str] = Basis()
        self._forms: dict[str, Form] = {}
        self._drives = [row_of(quantity_form(drive)) for drive in residues.context.drives]

    def row(self, left: Expression, right: Expression) -> Row[str] | None:
        """Return an equality as a row, empty where it is an identity, or None where it is not linear."""
        try:
            difference = add(self.form(left), multiply(constant(-1), self.form(right)))
            return row_of(difference)
        except (NotLinear, NotInField, ZeroDivisionError):
            return None

    def form(self, expression: Expression) -> Form:
        """Return an expression as a form; raises NotLinear, NotInField and ZeroDivisionError."""
        return form_of(expression, self._of_name, self.residues.value)

    def follows(self, row: Row[str]) -> bool:
        """Tell whether a row follows from those that were added."""
        return not self._basis.reduced(row)

    def add(self, row: Row[str]) -> None:
        """Add a row, unless with those before it every drive would be zero: from a contradiction all follows."""
        grown = self._basis.copy()
        grown.add(row)
        contradiction = not grown.reduced({CONSTANT: 1})
        if not contradiction and any(grown.reduced(drive) for drive in self._drives):
            self._basis = grown

    def _of_name(self, key: str) -> Form:
        found = self._forms.get(key)
        if found is None:
            found = self._forms[key] = self._new_form(key)
        return found

    def _new_form(self, key: str) -> Form:
        meaning = self.residues.lexicon.by_key(key)
        match meaning.kind:
            case "quantity":
                assert meaning.quantity is not None
                return quantity_form(meaning.quantity)
            case "defined":
                return self.form(self.residues.lexicon.definitions[key])
            case "ask":
                return self._ask_form(key)
            case "shape":
                raise NotLinear
            case _:
                return constant(self.residues.value(key))

    def _ask_form(self, name: str) -> Form:
        """Return an ask as its ratio where one drive, at the same nodes, is live; else it is one more number."""
        context, setup = self.residues.context, self.residues.posed.setups[name]
        ask = self.residues.posed.sheet.ask(name)
        same = setup.drive.pair == context.setup.drive.pair and setup.shorts == context.setup.shorts
        if ask.loop is None and same and len(context.drives) == 1:
            return multiply(quantity_form(setup.over), invert(quantity_form(setup.under)))
        return constant(self.residues.value(name))


def quantity_form(quantity: Quantity) -> Form:
    """Return a quantity as a form in node voltages and currents."""
    match quantity:
        case Voltage(plus=plus, minus=minus):
            return add(_volts(plus), multiply(constant(-1), _volts(minus)))
        case PartCurrent(part=name):
            return unknown(f"I_{name}")
        case NodeCurrent(node=name):
            return unknown(f"I_{name}")


def _volts(node: str) -> Form:
    return constant(0) if node == GROUND else unknown(f"V_{node}")
