"""What a `parts` line says, as the sheet's reader gives it."""

import pytest

from symcirc.complaints import Complaint
from symcirc.values.plan import plan
from symcirc.values.space import build_space
from tests.values.stages import LOW_PASS, sheet


def buyables(*lines):
    return sheet(LOW_PASS + "\n".join(lines)).buyables


def test_a_list_stands_in_the_place_of_a_series_with_or_without_quotes():
    plain, quoted = buyables("parts R: stock lists/drawer.csv", 'parts C: stock "my drawer.csv", pairs')
    assert (plain.series, plain.stock, plain.pairs) == (None, "lists/drawer.csv", False)
    assert (quoted.series, quoted.stock, quoted.pairs) == (None, "my drawer.csv", True)
    assert plain.stock_place.column == 16


def test_pairs_and_a_range_stand_in_either_order():
    one, other = buyables("parts R: E24 1 %, pairs, from 1k to 2k", "parts C: E6, from 1 nF to 1 uF, pairs")
    assert one.pairs
    assert other.pairs
    assert one.low is not None
    assert other.high is not None


def test_a_tolerance_stands_behind_a_series_only():
    with pytest.raises(Complaint):
        buyables("parts R: stock drawer.csv 1 %")


def test_a_range_of_names_with_numbers_bounds_what_is_searched():
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2, low = 1e3\nparts R: E3, from low to 20*low"
    posed = build_space(plan(sheet(text), None, False, lambda line: None), 9)
    (choices,) = {id(axis.choices): axis.choices for axis in posed.space.axes}.values()
    assert list(choices.values) == [1000, 2200, 4700, 10000]
