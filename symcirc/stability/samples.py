"""Part values to try a sheet with: its own numbers, and ordinary ones for what it leaves open."""

from __future__ import annotations

import random
from collections.abc import Iterator, Mapping
from fractions import Fraction

from symcirc.sheet.model import Sheet, Symbol
from symcirc.stability.numbers import PI, as_fraction, root_of
from symcirc.witness.network import Arithmetic, complete

#: From which power of ten to which an ordinary value lies, by dimension (common practice, no source).
ORDINARY = {
    "ohm": (3, 6),
    "F": (-10, -7),
    "H": (-3, 0),
    "S": (-5, -2),
    "Hz": (4, 7),
    "ratio": (-1, 1),
    None: (-1, 1),
}
#: Draws after which it is given up to find values that all parts can have.
MOST_DRAWS = 200
#: The value of s at which ties are tried; R, C and L do not depend on it.
SOMEWHERE = Fraction(355, 113)
EXACT = Arithmetic(lambda number: number, PI, root_of)


def part_values(sheet: Sheet, count: int) -> Iterator[dict[str, Fraction]]:
    """Yield sets of values for every name of a sheet that is not tied, such that every part can have its value.

    The sheet's numbers are kept. Where they are all there, one set is all; else up to ``count`` of them, seeded.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "a -- R1 -- gnd\\nfix R1 = 4k7\\nask Z = V_a/I_a"))
    >>> list(part_values(sheet, 8))
    [{'R1': Fraction(4700, 1)}]
    """
    fixed = {name: as_fraction(number) for name, number in sheet.numbers.items()}
    open_symbols = [s for s in sheet.symbols.values() if s.name not in sheet.fixes]
    generator = random.Random(f"{len(sheet.parts)} {len(open_symbols)}")
    for _ in range(count if open_symbols else 1):
        for _ in range(MOST_DRAWS):
            values = fixed | {s.name: _ordinary(s, generator) for s in open_symbols}
            if _can_be(sheet, values):
                yield values
                break


def _ordinary(symbol: Symbol, generator: random.Random) -> Fraction:
    """Return a value of two digits, all decades alike."""
    low, high = ORDINARY[symbol.dimension]
    return generator.randrange(10, 100) * Fraction(10) ** (generator.randrange(low, high) - 1)


def _can_be(sheet: Sheet, values: Mapping[str, Fraction]) -> bool:
    """Tell whether all ties have a value, R, C and L are positive and no general impedance is zero."""
    try:
        known = complete(values, sheet.ties, SOMEWHERE, EXACT)
    except ZeroDivisionError:
        return False
    return all(
        known[part.name] > 0 if part.kind in ("R", "C", "L") else known[part.name] for part in sheet.parts
    )
