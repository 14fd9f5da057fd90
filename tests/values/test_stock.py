"""Lists of what is in the drawer."""

from fractions import Fraction

import pytest

from symcirc.complaints import Complaint, Source
from symcirc.values.stock import Stocked, read_stock


def stock(text):
    return read_stock(Source("drawer.csv", text))


def test_units_and_codes_say_the_kind():
    read = stock("count,value\n3,4.7 kohm\n2,0R47\n9,22 nF\n1,10 mH\n")
    assert read == (
        Stocked("R", Fraction(4700), 3),
        Stocked("R", Fraction(47, 100), 2),
        Stocked("C", Fraction(22, 10**9), 9),
        Stocked("L", Fraction(1, 100), 1),
    )


def test_a_column_says_the_kind_of_plain_numbers_and_codes():
    assert stock("kind,value,count\nR,4k7,3\nC,2n2,1\nR,100,1\n") == (
        Stocked("R", Fraction(4700), 3),
        Stocked("C", Fraction(22, 10**10), 1),
        Stocked("R", Fraction(100), 1),
    )


def test_equal_values_are_added_up_and_empty_drawers_left_out():
    assert stock("value,count\n1 kohm,3\n1000 ohm,4\n\n2 kohm,0\n") == (Stocked("R", Fraction(1000), 7),)


def test_other_columns_and_quotes_are_the_users_own():
    text = 'value,count,where\n"1 kohm",3,"left, below"\n'
    assert stock(text) == (Stocked("R", Fraction(1000), 3),)


@pytest.mark.parametrize(
    ("text", "line", "cause", "mend"),
    [
        ("", 1, "is empty", "value,count"),
        ("ohms,count\n1,1", 1, "no column `value`", "first row"),
        ("value\n1 kohm", 1, "no column `count`", "first row"),
        ("value,count\n1 kohm", 2, "fewer fields", "value, count"),
        ("value,count\n1 kohm,1\nlots,1", 3, "`lots` is not a value", "4.7 kohm"),
        ("value,count\n1 kohm,many", 2, "`many` is not a count", "whole number"),
        ("value,count\n1 kohm,-1", 2, "`-1` is not a count", "whole number"),
        ("value,count\n-1 kohm,1", 2, "is not a value", "4.7 kohm"),
        ("value,count\n0 ohm,1", 2, "greater than zero", "4.7 kohm"),
        ("value,count\n4k7,1", 2, "does not say whether", "column kind"),
        ("value,count\n1 kHz,1", 2, "no value in Hz", "4.7 kohm"),
        ("value,count\n1 kohn,1", 2, "is not a unit", ""),
        ("kind,value,count\nQ,1,1", 2, "`Q` is not a kind", "use R, C or L"),
        ("kind,value,count\nC,1 kohm,1", 2, "does not fit the kind C", "correct"),
        ("value,count\n1e99 ohm,1", 2, "out of range", ""),
        ("value,count\n1 ohm," + "1" * 200_000, 2, "cannot be read", "plain rows"),
    ],
)
def test_a_list_that_cannot_be_used_is_refused_at_its_line(text, line, cause, mend):
    with pytest.raises(Complaint) as refused:
        stock(text)
    assert refused.value.place.line == line
    assert cause in refused.value.cause
    assert mend in refused.value.mend
