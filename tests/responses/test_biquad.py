"""Second-order shapes against their defining gains and against the transformed first-order prototype."""

from __future__ import annotations

import pytest
import sympy
from sympy import I, Integer, Rational

from symcirc.responses import (
    SECOND_ORDER_KINDS,
    Response,
    ResponseError,
    bandpass,
    bandstop,
    butterworth,
    highpass,
    lowpass,
    second_order,
)

W0, Q = sympy.symbols("w0 Q", positive=True)


def at(response: Response, s: sympy.Expr) -> sympy.Expr:
    numerator = sum(c * s**k for k, c in enumerate(response.numerator))
    denominator = sum(c * s**k for k, c in enumerate(response.denominator))
    return sympy.cancel(numerator / denominator)


@pytest.mark.parametrize("kind", SECOND_ORDER_KINDS)
def test_denominator_is_that_of_w0_and_q(kind: str) -> None:
    response = second_order(kind, W0, Q)
    assert response.denominator == (W0**2, W0 / Q, 1)
    assert (response.order, response.kind) == (2, kind)


@pytest.mark.parametrize(
    ("kind", "at_zero", "at_w0", "at_infinity"),
    [
        ("lowpass", 1, -I * Q, 0),
        ("highpass", 0, I * Q, 1),
        ("bandpass", 0, 1, 0),
        ("bandstop", 1, 0, 1),
        ("allpass", 1, -1, 1),
    ],
)
def test_gain_at_zero_w0_and_infinity(kind, at_zero, at_w0, at_infinity) -> None:
    response = second_order(kind, W0, Q)
    x = sympy.Symbol("x", positive=True)
    assert at(response, Integer(0)) == at_zero
    assert sympy.simplify(at(response, I * W0) - at_w0) == 0
    assert sympy.limit(at(response, x), x, sympy.oo) == at_infinity


def test_allpass_has_magnitude_one_everywhere() -> None:
    w = sympy.Symbol("w", positive=True)
    gain = at(second_order("allpass", W0, Q), I * w)
    assert sympy.simplify(gain * sympy.conjugate(gain)) == 1


def test_a_q_of_one_over_root_two_is_butterworth() -> None:
    q = 1 / sympy.sqrt(2)
    assert second_order("lowpass", W0, q) == lowpass(butterworth(2), W0)
    assert second_order("highpass", W0, q) == highpass(butterworth(2), W0)


def test_bands_are_the_transformed_first_order_prototype_with_bandwidth_w0_over_q() -> None:
    assert second_order("bandpass", W0, Q) == bandpass(butterworth(1), W0, W0 / Q)
    assert second_order("bandstop", W0, Q) == bandstop(butterworth(1), W0, W0 / Q)


@pytest.mark.parametrize(
    ("kind", "w0", "q", "words"),
    [
        ("lowpass", Integer(0), Q, "the frequency f0 must be positive"),
        ("notch", W0, Q, "there is no second-order notch"),
        ("bandpass", W0, Rational(-1, 2), "Q must be positive, and it is -1/2"),
    ],
)
def test_what_is_no_second_order_shape_is_refused(kind, w0, q, words: str) -> None:
    with pytest.raises(ResponseError, match=words) as refusal:
        second_order(kind, w0, q)
    assert refusal.value.mend
