"""Short ways from a sheet's text to its pieces, for the tests of the core."""

from __future__ import annotations

import sympy

from symcirc.circuit import Circuit, Setup, build_circuit, build_setup
from symcirc.complaints import Source
from symcirc.elimination import solve
from symcirc.nodal import build_system
from symcirc.ratio import Ratio
from symcirc.sheet import read_sheet
from symcirc.sheet.model import Sheet
from symcirc.transfer.build import Built, build_function
from symcirc.transfer.function import TransferFunction

s = sympy.Symbol("s")


def read(text: str) -> Sheet:
    return read_sheet(Source("test.stage", text))


def posed(text: str, name: str) -> tuple[Circuit, Setup]:
    """Return the circuit and what one ask applies to it."""
    sheet = read(text)
    circuit = build_circuit(sheet)
    return circuit, build_setup(circuit, sheet.asks, sheet.ask(name))


def ratio_of(text: str, name: str = "H") -> Ratio | None:
    """Return an ask's ratio by elimination, ties not in it."""
    return solve(build_system(*posed(text, name)))


def built_of(text: str, name: str = "H") -> Built:
    """Return an ask's transfer function by elimination, ties in it; it must have one."""
    ratio = ratio_of(text, name)
    assert ratio is not None
    built = build_function(ratio, read(text).ties)
    assert built is not None
    return built


def as_expression(function: TransferFunction) -> sympy.Expr:
    def total(coefficients: tuple[sympy.polys.rings.PolyElement, ...]) -> sympy.Expr:
        return sum((c.as_expr() * s**power for power, c in enumerate(coefficients)), start=sympy.S.Zero)

    return total(function.numerator) / total(function.denominator)


def expression_of(text: str, name: str = "H") -> sympy.Expr:
    """Return an ask's transfer function by elimination as a sympy expression."""
    return as_expression(built_of(text, name).function)


def is_equal(one: sympy.Expr, other: sympy.Expr) -> bool:
    """Tell whether two rational functions are one, exactly (pi is a symbol of the ring by that name)."""
    return bool(sympy.simplify(sympy.together((one - other).subs(sympy.Symbol("pi"), sympy.pi))) == 0)
