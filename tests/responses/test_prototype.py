"""The prototypes against their defining properties; every check is in mpmath with 50 digits and more."""

from __future__ import annotations

import mpmath
import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st

from symcirc.responses import (
    FAMILIES,
    LARGEST_ORDER,
    Prototype,
    ResponseError,
    bessel,
    bessel_polynomial,
    butterworth,
    chebyshev,
    critical,
    elliptic,
    gaussian,
    inverse_chebyshev,
    legendre,
    linear_phase,
)

from .evaluation import DIGITS, HALF_DB, ORDERS, STOP_DB, convolved, label, numbers, prototypes, squared_loss

EVERY = pytest.mark.parametrize("prototype", prototypes(), ids=label)
TOLERANCE = mpmath.mpf(10) ** -45


@pytest.fixture(autouse=True)
def _precision():
    with mpmath.workdps(DIGITS):
        yield


@EVERY
def test_sections_multiply_to_the_whole_denominator(prototype: Prototype) -> None:
    whole = [mpmath.mpf(1)]
    for section in prototype.sections:
        whole = convolved(whole, numbers(section))
    assert len(prototype.denominator) == prototype.order + 1
    for a, b in zip(whole, numbers(prototype.denominator), strict=True):
        assert abs(a - b) < TOLERANCE * b


@EVERY
def test_denominators_are_monic_and_sections_are_stable_and_go_by_rising_q(prototype: Prototype) -> None:
    assert prototype.denominator[-1] == 1
    qualities = []
    for place, section in enumerate(prototype.sections):
        assert section[-1] == 1
        assert all(c > 0 for c in numbers(section))
        if len(section) == 2:
            assert place == 0
            assert prototype.order % 2 == 1
        else:
            constant, middle, _ = numbers(section)
            qualities.append(mpmath.sqrt(constant) / middle)
    assert qualities == sorted(qualities)
    if prototype.family == "critical":  # its pairs are two real poles in one place
        assert all(abs(q - mpmath.mpf(1) / 2) < TOLERANCE for q in qualities)
    else:
        assert all(q > 0.5 for q in qualities)


@EVERY
def test_zeros_multiply_to_the_numerator(prototype: Prototype) -> None:
    whole = numbers(prototype.numerator)[-1:]
    for square in numbers(prototype.zeros):
        whole = convolved(whole, [square, mpmath.mpf(0), mpmath.mpf(1)])
    squares = numbers(prototype.zeros)
    assert squares == sorted(squares, reverse=True)
    for a, b in zip(whole, numbers(prototype.numerator), strict=True):
        assert abs(a - b) <= TOLERANCE * b


@EVERY
def test_gain_at_zero_is_one_or_less_by_the_ripple(prototype: Prototype) -> None:
    even_ripple = prototype.ripple_db is not None and prototype.order % 2 == 0
    expected = mpmath.mpf(10) ** (-numbers([prototype.ripple_db])[0] / 20) if even_ripple else 1
    assert abs(numbers([prototype.dc_gain])[0] - expected) < TOLERANCE
    assert abs(squared_loss(prototype, mpmath.mpf(0)) * expected**2 - 1) < TOLERANCE


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("build", [butterworth, bessel])
def test_half_of_the_power_is_left_at_the_edge(build, order: int) -> None:
    assert abs(squared_loss(build(order), mpmath.mpf(1)) - 2) < TOLERANCE


@pytest.mark.parametrize("order", ORDERS)
def test_butterworth_is_maximally_flat(order: int) -> None:
    # All derivatives of 1/|H|² by ω below the 2n-th vanish at 0: D(s) D(-s) is 1 + (-s²)^n and nothing else.
    d = numbers(butterworth(order).denominator)
    even = convolved(d, [c * (-1) ** k for k, c in enumerate(d)])[::2]
    by_square_of_omega = [c * (-1) ** k for k, c in enumerate(even)]
    expected = [1] + [0] * (order - 1) + [1]
    assert all(
        abs(a - b) < TOLERANCE * max(d) ** 2 for a, b in zip(by_square_of_omega, expected, strict=True)
    )


@pytest.mark.parametrize("order", range(1, 7))
def test_short_square_roots_of_butterworth_are_the_product_of_cosines_over_sines(order: int) -> None:
    # Product formula: Weinberg, "Network Analysis and Synthesis" (1962), from memory.
    expected = mpmath.mpf(1)
    for k, c in enumerate(numbers(butterworth(order).denominator)):
        if k:
            expected *= mpmath.cos((k - 1) * mpmath.pi / (2 * order)) / mpmath.sin(
                k * mpmath.pi / (2 * order)
            )
        assert abs(c - expected) < TOLERANCE * expected


@pytest.mark.parametrize("order", range(1, 7))
def test_butterworth_is_free_of_cosines_and_of_rounded_numbers_up_to_order_6(order: int) -> None:
    prototype = butterworth(order)
    for c in (*prototype.denominator, *(c for section in prototype.sections for c in section)):
        assert not c.has(sympy.cos, sympy.sin, sympy.Float)


@pytest.mark.parametrize("order", ORDERS)
def test_sections_of_butterworth_and_chebyshev_hold_no_rounded_number(order: int) -> None:
    for prototype in (butterworth(order), chebyshev(order, HALF_DB)):
        assert not any(c.has(sympy.Float) for section in prototype.sections for c in section)
    assert not any(c.has(sympy.Float) for c in butterworth(order).denominator)


@settings(max_examples=40, deadline=None, derandomize=True)
@given(order=st.integers(1, 20), millibels=st.integers(1, 3000), thousandths=st.integers(0, 3000))
def test_chebyshev_loss_is_the_chebyshev_polynomial(order: int, millibels: int, thousandths: int) -> None:
    # Definition: 1/|H|² = 1 + ε² T_n(ω)², ε² = 10^(ripple/10) - 1, inside and outside the pass band.
    ripple = sympy.Rational(millibels, 100)
    omega = mpmath.mpf(thousandths) / 1000
    with mpmath.workdps(DIGITS):
        epsilon_squared = mpmath.mpf(10) ** (mpmath.mpf(millibels) / 1000) - 1
        expected = 1 + epsilon_squared * mpmath.chebyt(order, omega) ** 2
        assert abs(squared_loss(chebyshev(order, ripple), omega) - expected) < TOLERANCE * 10**5 * expected


@pytest.mark.parametrize("order", ORDERS)
def test_chebyshev_ripple_is_equal_with_its_maximum_at_gain_one(order: int) -> None:
    # At cos(kπ/2n) the loss is, in turn, the ripple and nothing.
    prototype = chebyshev(order, HALF_DB)
    ripple = mpmath.mpf(10) ** (mpmath.mpf(1) / 20)
    for k in range(order + 1):
        omega = mpmath.cos(k * mpmath.pi / (2 * order)) if k < order else mpmath.mpf(0)
        expected = ripple if k % 2 == 0 else mpmath.mpf(1)
        assert abs(squared_loss(prototype, omega) - expected) < TOLERANCE * 10**5


@pytest.mark.parametrize("order", ORDERS)
def test_bessel_delay_is_maximally_flat(order: int) -> None:
    # On s = jω the delay Re(D'/D) is N(s²)/M(s²) with N the even part of D'(s) D(-s) and M = D(s) D(-s). Its
    # derivatives below the 2n-th vanish at 0 where N is the delay at 0 times M in all powers below s^2n.
    d = numbers(bessel(order).denominator)
    mirrored = [c * (-1) ** k for k, c in enumerate(d)]
    slope = [k * c for k, c in enumerate(d)][1:]
    delay = convolved(slope, mirrored)[::2]
    magnitude = convolved(d, mirrored)[::2]
    at_zero = d[1] / d[0]
    size = max(map(abs, convolved(d, d)))
    assert all(abs(delay[k] - at_zero * magnitude[k]) < TOLERANCE * size for k in range(order))
    assert abs(magnitude[order] * at_zero) > TOLERANCE * size  # and the 2n-th does not: there N has no term


@pytest.mark.parametrize("order", ORDERS)
def test_bessel_denominator_is_the_reverse_bessel_polynomial_on_another_scale(order: int) -> None:
    # By the recurrence θ_n = (2n-1) θ_(n-1) + s² θ_(n-2); Thomson (1949), from memory.
    before, whole = [1], [1, 1]
    for n in range(2, order + 1):
        longer = [0, 0, *before] + [0] * (n + 1 - len(before) - 2)
        before, whole = whole, [(2 * n - 1) * a + b for a, b in zip([*whole, 0], longer, strict=True)]
    d = numbers(bessel(order).denominator)
    scale = d[order - 1] / whole[order - 1]
    for k, c in enumerate(d):
        assert abs(c - whole[k] * scale ** (order - k)) < TOLERANCE * c


def test_bessel_sections_that_do_not_multiply_to_the_polynomial_are_noticed(monkeypatch) -> None:
    honest = bessel_polynomial.mended_root

    def slipping(whole, start):
        return honest(whole, start) * (1 + mpmath.mpf(10) ** -60)

    monkeypatch.setattr(bessel_polynomial, "mended_root", slipping)
    with pytest.raises(AssertionError, match="do not multiply"):
        bessel_polynomial.bessel_sections(5)


@pytest.mark.parametrize("order", [0, -3, LARGEST_ORDER + 1, 10**9])
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
        lambda n: linear_phase(n, HALF_DB),
        critical,
    ],
    ids=list(FAMILIES),
)
def test_an_order_out_of_range_is_refused_at_once(build, order: int) -> None:
    with pytest.raises(ResponseError, match=f"order (of )?{order}") as refusal:
        build(order)
    assert refusal.value.mend == "give an order from 1 to 20"


@pytest.mark.parametrize(
    ("ripple", "words"),
    [
        (sympy.Integer(0), "above 0 dB and at most 100 dB"),
        (sympy.Integer(-1), "above 0 dB and at most 100 dB"),
        (sympy.Rational(1001, 10), "above 0 dB and at most 100 dB"),
        (sympy.Integer(10) ** 30, "above 0 dB and at most 100 dB"),
        (sympy.sqrt(-2), "not real"),
        (sympy.Symbol("r", positive=True), "must be a number of dB, not r"),
        (sympy.sqrt(5 + 2 * sympy.sqrt(6)) - sympy.sqrt(2) - sympy.sqrt(3), "above 0 dB"),
    ],
)
def test_a_ripple_out_of_range_is_refused_at_once(ripple: sympy.Expr, words: str) -> None:
    with pytest.raises(ResponseError, match=words) as refusal:
        chebyshev(3, ripple)
    assert refusal.value.mend


def test_a_very_small_ripple_keeps_all_its_digits() -> None:
    # 1 + ε² at the edge with ε² = 10^(1e-31) - 1, of which a plain evaluation has no digit left.
    with mpmath.workdps(120):
        prototype = chebyshev(4, sympy.Rational(1, 10**30))
        d, n = numbers(prototype.denominator), numbers(prototype.numerator)
        expected = mpmath.expm1(mpmath.mpf(10) ** -31 * mpmath.ln10)
        assert abs(1 / (64 * n[0] ** 2) / expected - 1) < mpmath.mpf(10) ** -50
        assert abs(d[0] / n[0] - 1 - expected / 2) < mpmath.mpf(10) ** -50
