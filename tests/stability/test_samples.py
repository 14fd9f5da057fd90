"""Values to try a sheet with: its own, and ordinary ones that every part can have."""

from __future__ import annotations

from fractions import Fraction

from symcirc.stability.samples import part_values
from tests.stability.modes import read

STAGE = """
    in -- R1 -- a -- C1 -- gnd
    a -- R2 -- gnd
    choose k
    fix R2 = (k - 1)*R1
    ask H = V_a / V_in"""


def test_a_sheet_that_fixes_all_has_one_set() -> None:
    text = STAGE.replace("choose k", "fix k = 2, R1 = 4k7, C1 = 10n")
    assert list(part_values(read(text), 8)) == [
        {"k": Fraction(2), "R1": Fraction(4700), "C1": Fraction(1, 10**8)},
    ]


def test_open_values_are_drawn_again_until_every_part_is_positive() -> None:
    found = list(part_values(read(STAGE), 8))
    assert len(found) == 8
    assert all(values["k"] > 1 for values in found)
    assert all(1000 <= values["R1"] < 10**6 and values["C1"] < Fraction(1, 10**7) for values in found)


def test_the_same_sheet_gets_the_same_values() -> None:
    assert list(part_values(read(STAGE), 3)) == list(part_values(read(STAGE), 3))


def test_a_part_that_cannot_be_positive_has_no_values() -> None:
    assert list(part_values(read(STAGE.replace("(k - 1)*R1", "-k*R1")), 8)) == []


def test_an_impedance_that_is_zero_is_drawn_again() -> None:
    text = "in -- Z1 -- a -- R1 -- gnd\nchoose x, y\nfix Z1 = R1*(x - y)\nask H = V_a / V_in"
    assert all(values["x"] != values["y"] for values in part_values(read(text), 300))
