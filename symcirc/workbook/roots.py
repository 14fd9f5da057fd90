"""Roots of an equation of high degree as cells: a table that finds every change of sign, and bisection.

The wanted root is counted from below in a table over eight decades of size around the mean size of the roots, and
then halved in until doubles cannot tell its ends apart. Bisection cannot leave its root, as Newton's iteration may
where an input is changed far. Two roots nearer to each other than a step of the table (4.7 %) are not told apart.
"""

from __future__ import annotations

from collections.abc import Sequence

import sympy

from symcirc.match.problem import Root
from symcirc.workbook.arithmetic import Cells, summands
from symcirc.workbook.cells import Area, Formula, Page, Worksheet, reference

#: The table: decades to both sides of the roots' mean size, and steps in each.
DECADES, STEPS = 4, 50
#: Halvings: a step of the table is 2^-4.4 of the root, a double has 53 bits.
HALVINGS = 52
#: The rows of the wanted root's number, of what is found, and of the first coefficient.
INDEX_ROW, FOUND_ROW, COEFFICIENT_ROW = 1, 2, 4


def found_cell(worksheet: str) -> str:
    """Return where the root that a worksheet finds will stand."""
    return reference(FOUND_ROW, 1, worksheet)


def coefficients_of(root: Root) -> list[sympy.Expr]:
    """Return the coefficients of a root's polynomial, ascending, arranged as they are in its terms.

    >>> R1, C1 = sympy.symbols("R1 C1", positive=True)
    >>> coefficients_of(Root(R1**3 * C1 * (C1 + 1) - 2 * R1 + 1, "R1", 1))
    [1, -2, 0, C1*(C1 + 1)]
    """
    (variable,) = (x for x in root.polynomial.free_symbols if str(x) == root.variable)
    found: dict[int, sympy.Expr] = {}
    for term in sympy.Add.make_args(root.polynomial):
        rest, power = term.as_independent(variable, as_Add=False)
        if not (power == 1 or power.as_base_exp()[0] == variable):
            return list(reversed(sympy.Poly(root.polynomial, variable).all_coeffs()))
        exponent = int(power.as_base_exp()[1]) if power != 1 else 0
        found[exponent] = found.get(exponent, sympy.S.Zero) + rest
    return [found.get(k, sympy.S.Zero) for k in range(max(found) + 1)]


def root_page(name: str, root: Root, cells: Cells, value: float | None, signed: bool) -> Worksheet:
    """Return the worksheet that finds a root.

    Args:
        name: the worksheet's.
        root: the equation, and which of its roots.
        cells: the cells of the names in it.
        value: what the root comes to, None where that is not known.
        signed: whether it may be negative; it is then counted among all real roots.
    """
    page = Page(name)
    rows = coefficients_of(root)
    first = COEFFICIENT_ROW + len(rows) + 1
    points = _grid(signed)
    last = first + len(points) + 1 + HALVINGS
    page.line(f"{root.variable}, a root of degree {len(rows) - 1}", style="head")
    page.line("which root, from below", float(max(root.index, 1)), style="input")
    middle = f"({reference(last, 0)}+{reference(last, 1)})/2"
    page.line(root.variable, Formula(middle, value), style="number")
    page.line("coefficients, ascending", style="head")
    polynomial = [_coefficient(page, f"{root.variable}^{k}", c, cells) for k, c in enumerate(rows)]
    _table(page, polynomial, points)
    _halvings(page, polynomial, first, len(points))
    return page.finished(widths=(24, 18, 24, 18))


def _coefficient(page: Page, label: str, coefficient: sympy.Expr, cells: Cells) -> str:
    """Put a coefficient into a row, in several cells where it is long, and return what stands for it."""
    texts = summands(coefficient, cells)
    page.line(label, *(Formula(text, None) for text in texts))
    first, last = (reference(page.row - 1, column) for column in (1, len(texts)))
    return first if first == last else f"SUM({first}:{last})"


def _value_at(x: str, polynomial: Sequence[str]) -> str:
    text = polynomial[-1]
    for coefficient in reversed(polynomial[:-1]):
        text = f"({text})*{x}+{coefficient}"
    return text


def _grid(signed: bool) -> list[str]:
    """Return the table's points as multiples of the roots' mean size, rising."""
    sizes = [f"10^({k / STEPS - DECADES:.10g})" for k in range(2 * DECADES * STEPS + 1)]
    below = [f"-1*{size}" for size in reversed(sizes)] if signed else []
    return [*below, *sizes]


def _table(page: Page, polynomial: Sequence[str], points: Sequence[str]) -> None:
    """Put every point, the polynomial there, and how often it has changed its sign so far."""
    page.line("size", "value there", "changes of sign so far", style="head")
    scale = f"ABS({polynomial[0]}/{polynomial[-1]})^(1/{len(polynomial) - 1})"
    for k, point in enumerate(points):
        row = page.row
        before, here = reference(row - 1, 1), reference(row, 1)
        count = f"{reference(row - 1, 2)}+IF(({before}>=0)<>({here}>=0),1,0)" if k else "0"
        value = _value_at(reference(row, 0), polynomial)
        page.line(Formula(f"{point}*{scale}", None), Formula(value, None), Formula(count, None))


def _halvings(page: Page, polynomial: Sequence[str], first: int, count: int) -> None:
    """Put the step of the table in which the root lies, and halve it; the lower end's sign is kept."""
    sizes, counts = (Area(page.name, column, first, first + count - 1).text for column in (0, 2))
    place = f"MATCH({reference(INDEX_ROW, 1)},{counts},0)"
    page.line("from", "to", "middle", "value there", "value at the lower end", style="head")
    below = reference(page.row, 4)
    for k in range(HALVINGS + 1):
        row = page.row
        low, high = f"INDEX({sizes},{place}-1)", f"INDEX({sizes},{place})"
        if k:
            start, end, middle, value = (reference(row - 1, column) for column in range(4))
            is_low = f"({value}>=0)=({below}>=0)"
            low, high = f"IF({is_low},{middle},{start})", f"IF({is_low},{end},{middle})"
        middle = f"({reference(row, 0)}+{reference(row, 1)})/2"
        texts = [low, high, middle, _value_at(reference(row, 2), polynomial)]
        texts += [] if k else [_value_at(reference(row, 0), polynomial)]
        page.line(*(Formula(text, None) for text in texts))
