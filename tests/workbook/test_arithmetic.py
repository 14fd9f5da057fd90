"""Spreadsheet arithmetic, where it differs from everyone else's: signs before powers, powers in a row."""

import pytest
import sympy

from symcirc.workbook.arithmetic import MOST_CHARACTERS, arithmetic, summands

A, B = sympy.symbols("A B", positive=True)
CELLS = {"A": "$A$1", "B": "$B$1"}


@pytest.mark.parametrize(
    ("formula", "text"),
    [
        (-(A**2), "-1*$A$1^2"),  # -A1^2 is (-A1)^2 to a spreadsheet
        (-sympy.sqrt(A), "-1*SQRT($A$1)"),
        (-A, "-$A$1"),
        (B - A**2, "$B$1-$A$1^2"),
        (A / (B * sympy.pi), "$A$1/(PI()*$B$1)"),
        ((A + B) ** 2, "($A$1+$B$1)^2"),
        (A ** sympy.Rational(1, 3), "$A$1^(1/3)"),
        (sympy.Integer(10) ** (A / 20), "10^($A$1/20)"),
        (sympy.Rational(1, 8) * A, "$A$1/8"),
        (sympy.Float("2.5e-21", 20) * A, "2.5E-21*$A$1"),
        (sympy.S.Zero, "0"),
    ],
)
def test_a_formula_is_written_as_a_spreadsheet_reads_it(formula, text):
    assert arithmetic(formula, CELLS) == text


def test_a_long_sum_is_cut_into_groups_that_fit_a_cell():
    names = {f"R{k}": f"'Solution 1'!$B${k}" for k in range(1, 900)}
    total = sympy.Add(*sympy.symbols(list(names), positive=True))
    groups = summands(total, names)
    assert len(groups) > 1
    assert all(len(group) <= MOST_CHARACTERS for group in groups)
    assert sorted("+".join(groups).split("+")) == sorted(names.values())
