"""The table of families, and edges at another loss."""

from __future__ import annotations

import mpmath
import pytest
import sympy
from sympy import Integer, Rational

from symcirc.responses import FAMILIES, HALF_POWER_DB, Prototype, ResponseError, chebyshev, edge_at

from .evaluation import (
    DIGITS,
    HALF_DB,
    SOME_ORDERS,
    STOP_DB,
    convolved,
    label,
    numbers,
    prototypes,
    squared_loss,
)

EVERY = pytest.mark.parametrize("prototype", prototypes(SOME_ORDERS), ids=label)


@pytest.fixture(autouse=True)
def _precision():
    with mpmath.workdps(DIGITS):
        yield


def test_the_table_knows_what_each_family_needs_and_gives() -> None:
    assert list(FAMILIES) == [
        "butterworth",
        "chebyshev",
        "inverse chebyshev",
        "elliptic",
        "bessel",
        "gaussian",
        "legendre",
        "linear phase",
        "critical",
    ]
    for name, family in FAMILIES.items():
        numbers_of_the_family = [{"ripple": HALF_DB, "stop": STOP_DB}[need] for need in family.needs]
        prototype = family.build(4, *numbers_of_the_family)
        assert (family.name, prototype.family, prototype.order) == (name, name, 4)
        assert {"lowpass", "highpass", "bandpass", "bandstop"} <= set(family.kinds)
    assert [name for name, family in FAMILIES.items() if "allpass" in family.kinds] == ["bessel"]
    assert FAMILIES["chebyshev"].needs == ("ripple",)
    assert FAMILIES["elliptic"].needs == ("ripple", "stop")


@EVERY
@pytest.mark.parametrize("loss_db", [Integer(3), Rational(77, 2)])
def test_the_loss_at_the_moved_edge_is_the_one_asked(prototype: Prototype, loss_db: sympy.Expr) -> None:
    moved = edge_at(prototype, loss_db)
    assert moved.edge_loss_db == loss_db
    expected = mpmath.mpf(10) ** (numbers([loss_db])[0] / 10)
    assert abs(squared_loss(moved, mpmath.mpf(1)) / expected - 1) < mpmath.mpf(10) ** -40


@EVERY
def test_moving_the_edge_is_a_change_of_scale_alone(prototype: Prototype) -> None:
    moved = edge_at(prototype, Integer(6))
    before, after = numbers(prototype.denominator), numbers(moved.denominator)
    factor = after[-2] / before[-2]
    whole = [mpmath.mpf(1)]
    for section in moved.sections:
        whole = convolved(whole, numbers(section))
    for k, (a, b, c) in enumerate(zip(before, after, whole, strict=True)):
        assert abs(b / (a * factor ** (prototype.order - k)) - 1) < mpmath.mpf(10) ** -45
        assert abs(b / c - 1) < mpmath.mpf(10) ** -45
    assert abs(numbers([moved.dc_gain])[0] / numbers([prototype.dc_gain])[0] - 1) < mpmath.mpf(10) ** -45
    assert moved.denominator[-1] == 1


@EVERY
def test_moving_the_edge_to_where_it_is_changes_nothing(prototype: Prototype) -> None:
    again = edge_at(edge_at(prototype, Integer(40)), prototype.edge_loss_db)
    for a, b in zip(numbers(again.denominator), numbers(prototype.denominator), strict=True):
        assert abs(a / b - 1) < mpmath.mpf(10) ** -45


@pytest.mark.parametrize("order", [1, 2])
def test_low_orders_of_bessel_stay_in_square_roots_at_any_edge(order: int) -> None:
    moved = edge_at(FAMILIES["bessel"].build(order), Integer(1))
    assert not any(c.has(sympy.Float) for c in moved.denominator)


def test_an_edge_inside_the_ripple_is_refused_with_both_numbers() -> None:
    with pytest.raises(ResponseError, match="a loss of 1/4 dB at the edge is less than the ripple of 1/2 dB"):
        edge_at(chebyshev(4, HALF_DB), Rational(1, 4))


@pytest.mark.parametrize("loss_db", [Integer(0), Integer(-3), Integer(101)])
@pytest.mark.parametrize("prototype", prototypes([3]), ids=label)
def test_a_loss_out_of_range_is_refused(prototype: Prototype, loss_db: sympy.Expr) -> None:
    with pytest.raises(ResponseError, match="the loss at the edge must be above 0 dB") as refusal:
        edge_at(prototype, loss_db)
    assert refusal.value.mend == "give a value in that range as the loss at the edge"


def test_half_power_is_3_0103_db() -> None:
    assert abs(float(HALF_POWER_DB) - 3.010299956639812) < 1e-15
