"""Legendre, Gaussian, linear phase and critical damping against the properties that define them, in mpmath."""

from __future__ import annotations

import random
from itertools import pairwise

import mpmath
import pytest
import sympy

from symcirc.responses import (
    FAMILIES,
    Prototype,
    ResponseError,
    butterworth,
    critical,
    elliptic,
    gaussian,
    inverse_chebyshev,
    legendre,
    legendre_square,
    linear_phase,
)
from symcirc.sheet.targets import FAMILIES as WRITTEN

from .evaluation import DIGITS, HALF_DB, ORDERS, STOP_DB, convolved, numbers, squared_loss, value

TOLERANCE = mpmath.mpf(10) ** -40
ERRORS_DEG = (sympy.Rational(1, 20), HALF_DB)


@pytest.fixture(autouse=True)
def _precision():
    with mpmath.workdps(DIGITS):
        yield


def even_part(prototype: Prototype) -> list[mpmath.mpf]:
    """Return |D(jω)/D(0)|² as coefficients of the powers of ω²."""
    d = [c / numbers(prototype.denominator)[0] for c in numbers(prototype.denominator)]
    return [c * (-1) ** k for k, c in enumerate(convolved(d, [c * (-1) ** k for k, c in enumerate(d)])[::2])]


def test_every_family_of_the_language_can_be_made() -> None:
    assert {name: family.needs for name, family in FAMILIES.items()} == WRITTEN


@pytest.mark.parametrize("order", ORDERS)
def test_gaussian_is_the_maclaurin_series_of_the_exponential(order: int) -> None:
    # 1/|H|² is Σ (c ω²)^k/k! up to k = n: definition.
    series = even_part(gaussian(order))
    scale = series[1]
    for k, c in enumerate(series):
        assert abs(c * mpmath.factorial(k) / scale**k - 1) < TOLERANCE
    assert abs(sum(series) - 2) < TOLERANCE  # half power at 1 rad/s


def test_gaussian_of_high_order_tends_to_the_bell() -> None:
    # |H| = exp(-ln 2 ω²/2): 3.01 dB at 1 rad/s, and four times that at 2 rad/s.
    assert (
        abs(mpmath.log(squared_loss(gaussian(20), mpmath.mpf("1.5"))) - mpmath.mpf("2.25") * mpmath.ln2)
        < 1e-15
    )


@pytest.mark.parametrize("order", ORDERS)
def test_legendre_is_made_of_its_polynomial(order: int) -> None:
    found = even_part(legendre(order))
    expected = [mpmath.mpf(c.numerator) / c.denominator for c in legendre_square(order)]
    expected[0] += 1
    size = max(map(abs, expected))
    assert all(abs(a - b) < TOLERANCE * size for a, b in zip(found, expected, strict=True))
    assert abs(squared_loss(legendre(order), mpmath.mpf(1)) - 2) < TOLERANCE * size


@pytest.mark.parametrize("order", ORDERS)
def test_legendre_never_falls(order: int) -> None:
    # The slope of L by x = ω² is a square, for even orders times x: it changes its sign nowhere above 0.
    slope = [k * mpmath.mpf(c.numerator) / c.denominator for k, c in enumerate(legendre_square(order))][1:]
    draw = random.Random(order)
    for x in [mpmath.mpf(draw.uniform(0, 1)) for _ in range(200)] + [mpmath.mpf(2)]:
        assert mpmath.polyval(slope[::-1], x) > -(mpmath.mpf(10) ** -30)
    assert slope[-1] > 0


@pytest.mark.parametrize("order", range(2, 9))
def test_legendre_is_steepest_at_the_edge_among_monotonic_polynomials(order: int) -> None:
    # Every rival ∫ (square of a polynomial), from 0 to 1 in x (times x for even orders), scaled to 1 at the edge,
    # rises there less. The rivals are the optimum with its root disturbed at random.
    slope = [k * mpmath.mpf(c.numerator) / c.denominator for k, c in enumerate(legendre_square(order))][1:]
    best = mpmath.polyval(slope[::-1], 1)
    degree = (order - 1) // 2
    draw = random.Random(order)
    assert best > order - mpmath.mpf(10) ** -30  # Butterworth's slope, n: never below
    for _ in range(100):
        root = [mpmath.mpf(draw.gauss(0, 1)) for _ in range(degree + 1)]
        square = convolved(root, root)
        if order % 2 == 0:
            square = [mpmath.mpf(0), *square]
        area = sum(c / (k + 1) for k, c in enumerate(square))
        assert mpmath.polyval(square[::-1], 1) / area <= best * (1 + mpmath.mpf(10) ** -30)


def phase_error(prototype: Prototype, delay: mpmath.mpf, omega: mpmath.mpf) -> mpmath.mpf:
    """Return the phase of D less the wanted one, in degrees, section by section so that no turn is lost."""
    s = mpmath.mpc(0, omega)
    phase = sum(mpmath.arg(value(numbers(section), s)) for section in prototype.sections)
    return mpmath.degrees(phase - delay * omega)


def delay_at(prototype: Prototype, omega: mpmath.mpf) -> mpmath.mpf:
    """Return the group delay by the sections, from D'/D."""
    s = mpmath.mpc(0, omega)
    total = mpmath.mpf(0)
    for section in prototype.sections:
        c = numbers(section)
        total += (value([k * x for k, x in enumerate(c)][1:], s) / value(c, s)).real
    return total


@pytest.mark.parametrize("ripple", ERRORS_DEG, ids=["0.05deg", "0.5deg"])
@pytest.mark.parametrize("order", [1, 2, 3, 4, 5, 6, 7, 8, 13, 20])
def test_linear_phase_errs_by_the_ripple_with_alternating_sign(order: int, ripple: sympy.Expr) -> None:
    # n extremes and the end of the band: as many alternations as n coefficients allow (Chebyshev's theorem).
    prototype = linear_phase(order, ripple)
    limit = mpmath.mpf(ripple.p) / ripple.q
    grid = [mpmath.mpf(k) / 50 for k in range(1, 320)]
    slopes = [delay_at(prototype, w) for w in grid]
    # Which delay is approximated is not told: it is the one with which the first extreme is the ripple.
    at_zero = delay_at(prototype, mpmath.mpf(0))
    near, far = at_zero, at_zero * (1 - (-1) ** (order - 1) * mpmath.mpf("0.2"))
    for _ in range(45):
        delay = (near + far) / 2
        first = extremes(prototype, delay, grid, slopes, 1)
        if first and abs(first[0]) < limit:
            near = delay
        else:
            far = delay
    found = extremes(prototype, near, grid, slopes, order)
    assert len(found) == order
    assert all(a * b < 0 for a, b in pairwise(found))
    assert all(abs(abs(error) - limit) < 1e-9 for error in found)


def extremes(
    prototype: Prototype, delay: mpmath.mpf, grid: list[mpmath.mpf], slopes: list[mpmath.mpf], count: int
) -> list[mpmath.mpf]:
    """Return the first phase errors at which the error is stationary, above 0."""
    found = []
    for (a, at_a), (b, at_b) in pairwise(zip(grid, slopes, strict=True)):
        if (at_a - delay) * (at_b - delay) < 0 and len(found) < count:
            w = mpmath.findroot(
                lambda x: delay_at(prototype, x) - delay, (a, b), solver="anderson", tol=1e-40
            )
            found.append(phase_error(prototype, delay, w))
    return found


@pytest.mark.parametrize("order", ORDERS)
def test_critical_poles_coincide_and_leave_half_power_at_the_edge(order: int) -> None:
    d = numbers(critical(order).denominator)
    pole = d[-2] / order
    for k, c in enumerate(d):
        assert abs(c / (mpmath.binomial(order, k) * pole ** (order - k)) - 1) < TOLERANCE
    assert abs(squared_loss(critical(order), mpmath.mpf(1)) - 2) < TOLERANCE
    assert not any(c.has(sympy.Float) for c in critical(order).denominator)


@pytest.mark.parametrize("order", range(1, 7))
def test_inverse_chebyshev_is_in_radicals_up_to_order_6(order: int) -> None:
    prototype = inverse_chebyshev(order, STOP_DB)
    for c in (*prototype.denominator, *prototype.numerator, *prototype.zeros):
        assert not c.has(sympy.cos, sympy.sin, sympy.Float)


@pytest.mark.parametrize("build", [gaussian, legendre, lambda n: elliptic(n, HALF_DB, STOP_DB)])
@pytest.mark.parametrize("order", [1, 2])
def test_low_orders_are_in_radicals(build, order: int) -> None:
    prototype = build(order)
    assert not any(c.has(sympy.Float) for c in (*prototype.denominator, *prototype.numerator))


@pytest.mark.parametrize("order", [2, 3, 4, 5, 8, 12, 20])
def test_elliptic_stop_band_has_equal_ripple_at_the_stop_loss(order: int) -> None:
    # Between neighbouring zeros, and beyond the last of an even order, the least loss is the stop loss.
    prototype = elliptic(order, HALF_DB, STOP_DB)
    floor = mpmath.mpf(10) ** 6
    zeros = sorted(mpmath.sqrt(x) for x in numbers(prototype.zeros))
    for low, high in pairwise(zeros):
        for _ in range(80):  # the one least value between two zeros, by thirds
            third = (high - low) / 3
            if squared_loss(prototype, low + third) < squared_loss(prototype, high - third):
                high -= third
            else:
                low += third
        assert abs(squared_loss(prototype, low) / floor - 1) < 1e-20
    if order % 2 == 0:
        assert abs(numbers(prototype.numerator)[-1] ** -2 / floor - 1) < TOLERANCE


@pytest.mark.parametrize(
    ("build", "words"),
    [
        (
            lambda: elliptic(3, sympy.Integer(3), sympy.Integer(3)),
            "stop loss of 3 dB is not above the ripple of 3",
        ),
        (
            lambda: elliptic(3, sympy.Integer(3), sympy.Integer(201)),
            "the stop loss must be above 0 dB and at most",
        ),
        (lambda: inverse_chebyshev(3, sympy.Integer(0)), "the stop loss must be above 0 dB"),
        (lambda: linear_phase(3, sympy.Integer(6)), "must be from 0.01 to 5 deg"),
        (lambda: linear_phase(3, sympy.Symbol("r")), "must be from 0.01 to 5 deg"),
        (lambda: gaussian(21), "an order of 21 is beyond 20"),
    ],
)
def test_numbers_out_of_range_are_refused_with_a_mend(build, words: str) -> None:
    with pytest.raises(ResponseError, match=words) as refusal:
        build()
    assert refusal.value.mend


@pytest.mark.parametrize("family", FAMILIES)
def test_the_search_in_doubles_and_the_exact_prototype_agree(family: str) -> None:
    # The two share the definition alone; frequencies are compared over their geometric mean.
    needs = {"ripple": HALF_DB, "stop": STOP_DB}
    own = [needs[need] for need in FAMILIES[family].needs]
    for order in (1, 2, 3, 8, 15, 20):
        exact = FAMILIES[family].build(order, *own)
        rough = FAMILIES[family].rough(order, *map(float, own))
        size = mpmath.exp(sum(mpmath.log(abs(p)) for p in rough.poles) / order)
        sections = [numbers(section) for section in exact.sections]
        mean = mpmath.fprod(section[0] for section in sections) ** (mpmath.mpf(1) / order)
        for p in rough.poles:
            s = mpmath.mpc(p) / size * mean
            nearest = min(abs(value(c, s)) / max(abs(x * s**k) for k, x in enumerate(c)) for c in sections)
            assert nearest < 1e-5
    assert butterworth(2).zeros == ()
