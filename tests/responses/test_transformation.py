"""Transformed responses against the substitution itself, their nominal gain, their shape and their speed."""

from __future__ import annotations

import random

import mpmath
import pytest
import sympy

from symcirc.responses import (
    Prototype,
    Response,
    ResponseError,
    allpass,
    bandpass,
    bandstop,
    bessel,
    butterworth,
    chebyshev,
    critical,
    edge_at,
    elliptic,
    gaussian,
    highpass,
    inverse_chebyshev,
    legendre,
    lowpass,
)

from .evaluation import DIGITS, HALF_DB, SOME_ORDERS, STOP_DB, label, numbers, prototypes, value

EVERY = pytest.mark.parametrize("prototype", prototypes(SOME_ORDERS), ids=label)
EDGE, CENTRE, BANDWIDTH = 2 * sympy.pi * 1200, 2 * sympy.pi * 1000, 2 * sympy.pi * 150
F0, B = sympy.symbols("f0 b", positive=True)

#: Kind: the transformation, and what it does to a complex frequency, as the handbooks write it.
KINDS = {
    "lowpass": (lambda p: lowpass(p, EDGE), lambda s, w, w0, b: s / w),
    "highpass": (lambda p: highpass(p, EDGE), lambda s, w, w0, b: w / s),
    "bandpass": (lambda p: bandpass(p, CENTRE, BANDWIDTH), lambda s, w, w0, b: (s * s + w0 * w0) / (b * s)),
    "bandstop": (lambda p: bandstop(p, CENTRE, BANDWIDTH), lambda s, w, w0, b: b * s / (s * s + w0 * w0)),
}
SYMBOLIC = {
    "lowpass": lambda p: lowpass(p, 2 * sympy.pi * F0),
    "highpass": lambda p: highpass(p, 2 * sympy.pi * F0),
    "bandpass": lambda p: bandpass(p, 2 * sympy.pi * F0, 2 * sympy.pi * B),
    "bandstop": lambda p: bandstop(p, 2 * sympy.pi * F0, 2 * sympy.pi * B),
}


@pytest.fixture(autouse=True)
def _precision():
    with mpmath.workdps(DIGITS):
        yield


def transfer(response: Response | Prototype, s: mpmath.mpc) -> mpmath.mpc:
    return value(numbers(response.numerator), s) / value(numbers(response.denominator), s)


@EVERY
@pytest.mark.parametrize("kind", KINDS)
def test_response_is_the_prototype_at_the_substituted_frequency(kind: str, prototype: Prototype) -> None:
    transform, substitution = KINDS[kind]
    response = transform(prototype)
    assert response.kind == kind
    assert response.denominator[-1] == 1
    assert response.order == prototype.order * (2 if kind.startswith("band") else 1)
    assert response.numerator[-1] != 0
    draw = random.Random(f"{kind} {label(prototype)}")
    for _ in range(2):
        s = mpmath.mpc(draw.uniform(1000, 9000), draw.uniform(-9000, 9000))  # right of all poles
        expected = transfer(prototype, substitution(s, *numbers([EDGE, CENTRE, BANDWIDTH])))
        assert abs(transfer(response, s) / expected - 1) < mpmath.mpf(10) ** -40


@pytest.mark.parametrize("prototype", prototypes(range(1, 7)), ids=label)
def test_nominal_gain_is_one_where_the_response_has_it(prototype: Prototype) -> None:
    gain = numbers([prototype.dc_gain])[0]
    centre = mpmath.mpc(0, numbers([CENTRE])[0])
    found = {
        "lowpass": transfer(lowpass(prototype, EDGE), mpmath.mpc(0, 0)),
        "highpass": numbers([highpass(prototype, EDGE).numerator[-1]])[0],
        "bandpass": transfer(bandpass(prototype, CENTRE, BANDWIDTH), centre),
        "bandstop at 0": transfer(bandstop(prototype, CENTRE, BANDWIDTH), mpmath.mpc(0, 0)),
        "bandstop at infinity": numbers([bandstop(prototype, CENTRE, BANDWIDTH).numerator[-1]])[0],
    }
    for where, magnitude in found.items():
        assert abs(abs(magnitude) - gain) < mpmath.mpf(10) ** -45, where


@pytest.mark.parametrize("prototype", prototypes([1, 2, 3, 4, 7, 12]), ids=label)
@pytest.mark.parametrize("kind", SYMBOLIC)
def test_coefficients_in_symbols_are_polynomials_in_the_frequencies(kind: str, prototype: Prototype) -> None:
    response, numeric = SYMBOLIC[kind](prototype), KINDS[kind][0](prototype)
    f0 = 1200 if kind.endswith("pass") and not kind.startswith("band") else 1000
    for symbolic, number in (
        (response.numerator, numeric.numerator),
        (response.denominator, numeric.denominator),
    ):
        assert all(c.is_polynomial(F0, B) for c in symbolic)
        put_in = numbers([c.subs({F0: f0, B: 150}) for c in symbolic])
        for a, b in zip(put_in, numbers(number), strict=True):
            assert a == b or abs(a / b - 1) < mpmath.mpf(10) ** -45


def test_coefficients_in_symbols_are_written_as_an_engineer_would() -> None:
    assert [str(c) for c in SYMBOLIC["lowpass"](butterworth(2)).denominator] == [
        "4*pi**2*f0**2",
        "2*sqrt(2)*pi*f0",
        "1",
    ]
    assert [str(c) for c in SYMBOLIC["bandpass"](butterworth(2)).denominator] == [
        "16*pi**4*f0**4",
        "8*sqrt(2)*pi**3*b*f0**2",
        "4*pi**2*b**2 + 8*pi**2*f0**2",
        "2*sqrt(2)*pi*b",
        "1",
    ]
    assert [str(c) for c in SYMBOLIC["bandstop"](butterworth(1)).numerator] == ["4*pi**2*f0**2", "0", "1"]


@pytest.mark.parametrize("order", [19, 20])
@pytest.mark.parametrize(
    "build",
    [
        butterworth,
        bessel,
        lambda n: chebyshev(n, HALF_DB),
        lambda n: inverse_chebyshev(n, STOP_DB),
        lambda n: elliptic(n, HALF_DB, STOP_DB),
        gaussian,
        legendre,
        critical,
    ],
)
def test_a_response_of_order_20_is_built_moved_to_another_edge_and_transformed(build, order: int) -> None:
    moved = edge_at(build(order), sympy.Integer(1))
    for transform in SYMBOLIC.values():
        assert len(transform(moved).denominator) - 1 in (order, 2 * order)


@pytest.mark.parametrize("order", range(1, 21))
def test_bessel_allpass_has_magnitude_one_and_twice_the_flat_delay(order: int) -> None:
    prototype = bessel(order)
    response = allpass(prototype, EDGE)
    d = numbers(response.denominator)
    assert response.denominator == lowpass(prototype, EDGE).denominator
    for omega in (0, 1000, 7540, 60000):
        assert abs(abs(transfer(response, mpmath.mpc(0, omega))) - 1) < mpmath.mpf(10) ** -45
    assert transfer(response, mpmath.mpc(0, 0)) == 1
    # Near 0 the phase is -2 ω d1/d0, and the next term comes with ω to the power 2n + 1.
    small = d[0] / d[1] / 10**10
    phase = mpmath.arg(transfer(response, mpmath.mpc(0, small)))
    assert abs(phase / (-2 * small * d[1] / d[0]) - 1) < mpmath.mpf(10) ** (-19 if order == 1 else -38)


@pytest.mark.parametrize(
    ("make", "words"),
    [
        (lambda p: lowpass(p, sympy.Integer(0)), "the edge must be positive, and it is 0"),
        (lambda p: highpass(p, -EDGE), "the edge must be positive"),
        (lambda p: lowpass(p, sympy.oo), "the edge must be positive"),
        (lambda p: allpass(p, sympy.I), "the edge must be positive"),
        (lambda p: bandpass(p, sympy.Integer(-1), BANDWIDTH), "the centre must be positive"),
        (lambda p: bandpass(p, CENTRE, sympy.Integer(0)), "the bandwidth must be positive"),
        (lambda p: bandstop(p, sympy.Integer(0), BANDWIDTH), "the centre must be positive"),
        (lambda p: bandstop(p, CENTRE, -F0), "the bandwidth must be positive, and it is -f0"),
    ],
)
def test_a_frequency_that_is_not_positive_is_refused(make, words: str) -> None:
    with pytest.raises(ResponseError, match=words) as refusal:
        make(butterworth(2))
    assert refusal.value.mend.startswith("give a positive value as")


def test_a_symbol_of_unknown_sign_is_let_through() -> None:
    w = sympy.Symbol("w")
    assert lowpass(butterworth(1), w) == Response((w,), (w, 1), "lowpass")
