"""The value that a sheet sets a part to, as it stands beside the part's name."""

from __future__ import annotations

from math import log10

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
)
from symcirc.sheet.model import Sheet
from symcirc.transfer.engineering import engineering

#: A longer expression is left to the note's table of values.
LONGEST = 14


def value_text(sheet: Sheet, name: str) -> str:
    """Return the value of a part or a parameter, empty where it has none or a long one.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> text = "in -- R1 -- out -- R2 -- gnd\\nfix R1 = 4k7, R2 = R1/2\\nask H = V_out/V_in"
    >>> sheet = read_sheet(Source("a.stage", text))
    >>> value_text(sheet, "R1"), value_text(sheet, "R2")
    ('4.7 kΩ', 'R1/2')
    """
    fix = sheet.fixes.get(name)
    if fix is None:
        return ""
    if fix.number is None:
        text = fold(fix.expression, _written)[0]
    else:
        number, unit = float(fix.number), sheet.symbols[name].dimension or fix.unit or ""
        if fix.unit == "dB" and number > 0:
            text = engineering(20 * log10(number), "dB")
        else:
            text = engineering(number, "" if unit == "ratio" else unit)
        text = text.replace("ohm", "Ω").replace(" u", " µ")
    return text if len(text) <= LONGEST else ""


def _written(node: Expression, operands: list[tuple[str, int]]) -> tuple[str, int]:
    """Return the text of a node and how strongly it binds: 1 a sum, 2 a product, 3 a single thing."""

    def bound(number: int, least: int) -> str:
        text, strength = operands[number]
        return text if strength >= least else f"({text})"

    match node:
        case Number(value=value):
            return str(value), 3 if value.denominator == 1 and value >= 0 else 2
        case Name(text=text):
            return text, 3
        case Sum(terms=terms):
            text = bound(0, 1)
            for number in range(1, len(terms)):
                minus = isinstance(terms[number], Negative)
                text += f" - {operands[number][0][1:]}" if minus else f" + {bound(number, 1)}"
            return text, 1
        case Product(factors=factors):
            text = bound(0, 2)
            for number in range(1, len(factors)):
                under = isinstance(factors[number], Reciprocal)
                text += f"/{operands[number][0][2:]}" if under else f"*{bound(number, 2)}"
            return text, 2
        case Negative():
            return f"-{bound(0, 2)}", 1
        case Reciprocal():
            return f"1/{bound(0, 3)}", 2
        case Power(exponent=exponent):
            return f"{bound(0, 3)}^{exponent}", 2
        case Root():
            return f"sqrt({operands[0][0]})", 3
