"""Prototypes against the tables of the handbooks, all from memory, to the digits printed there."""

from __future__ import annotations

import mpmath
import pytest
import sympy

from symcirc.responses import (
    bessel,
    butterworth,
    chebyshev,
    digits,
    edge_at,
    legendre,
    legendre_square,
    linear_phase,
)
from symcirc.responses.bessel_polynomial import bessel_frequency, reverse_bessel
from symcirc.responses.prototype import HALF_POWER_DB

from .evaluation import numbers

# Coefficients of s, s², ... (the polynomial reads the same both ways).
# L. Weinberg, "Network Analysis and Synthesis" (1962), table of Butterworth polynomials; from memory.
BUTTERWORTH = {
    2: ["1.4142136"],
    3: ["2.0000000", "2.0000000"],
    4: ["2.6131259", "3.4142136", "2.6131259"],
    5: ["3.2360680", "5.2360680", "5.2360680", "3.2360680"],
    6: ["3.8637033", "7.4641016", "9.1416202", "7.4641016", "3.8637033"],
    7: ["4.4939592", "10.0978347", "14.5917939", "14.5917939", "10.0978347", "4.4939592"],
    8: ["5.1258309", "13.1370712", "21.8461510", "25.6883559", "21.8461510", "13.1370712", "5.1258309"],
}

# Coefficients of 1, s, s², ... below the leading 1, by ripple in dB and order.
# L. Weinberg, "Network Analysis and Synthesis" (1962), tables of Chebyshev polynomials; from memory.
# Left out: 3 dB, order 5, remembered as 0.0626391, 0.4079421, ...; that contradicts the row of order 3:
# the constant, 1/(16 ε), must be a quarter of that row's, 0.0626486.
CHEBYSHEV = {
    ("1/2", 1): ["2.8627752"],
    ("1/2", 2): ["1.5162026", "1.4256245"],
    ("1/2", 3): ["0.7156938", "1.5348954", "1.2529130"],
    ("1/2", 4): ["0.3790506", "1.0254553", "1.7168662", "1.1973856"],
    ("1/2", 5): ["0.1789234", "0.7525181", "1.3095747", "1.9373675", "1.1724909"],
    ("1", 1): ["1.9652267"],
    ("1", 2): ["1.1025103", "1.0977343"],
    ("1", 3): ["0.4913067", "1.2384092", "0.9883412"],
    ("1", 4): ["0.2756276", "0.7426194", "1.4539248", "0.9528114"],
    ("1", 5): ["0.1228267", "0.5805342", "0.9743961", "1.6888160", "0.9368201"],
    ("2", 3): ["0.3268901", "1.0221903", "0.7378216"],
    ("3", 2): ["0.7079478", "0.6448996"],
    ("3", 3): ["0.2505943", "0.9283480", "0.5972404"],
    ("3", 4): ["0.1769869", "0.4047679", "1.1691176", "0.5815799"],
}

# W. E. Thomson (1949), L. Weinberg (1962): the reverse Bessel polynomials; from memory.
REVERSE_BESSEL = {
    1: (1, 1),
    2: (3, 3, 1),
    3: (15, 15, 6, 1),
    4: (105, 105, 45, 10, 1),
    5: (945, 945, 420, 105, 15, 1),
    6: (10395, 10395, 4725, 1260, 210, 21, 1),
}

# Half-power frequency of the Bessel low-pass of 1 s delay.
# L. Storch, "Synthesis of constant-time-delay ladder networks using Bessel polynomials" (1954); from memory.
BESSEL_HALF_POWER = {
    1: "1.0000", 2: "1.3617", 3: "1.7557", 4: "2.1139", 5: "2.4274", 6: "2.7034", 7: "2.9517", 8: "3.1796",
    9: "3.3917", 10: "3.5910",
}  # fmt: skip

# Poles -a ± jb of the Bessel low-pass, half power at 1 rad/s, by falling b.
# A. I. Zverev, "Handbook of Filter Synthesis" (1967), tables of pole locations; from memory, to three digits.
BESSEL_POLES = {
    2: [("1.102", "0.636")],
    3: [("1.047", "0.999"), ("1.323", "0")],
    4: [("0.995", "1.257"), ("1.370", "0.410")],
    5: [("0.958", "1.471"), ("1.381", "0.718"), ("1.502", "0")],
}

# Poles -a ± jb of the low-pass of linear phase with equiripple error, half power at 1 rad/s, by error in degrees.
# A. I. Zverev, "Handbook of Filter Synthesis" (1967), tables of pole locations; from memory, to four decimals.
LINEAR_PHASE_POLES = {
    ("1/20", 2): [("1.0087", "0.6680")],
    ("1/20", 3): [("0.8541", "1.0725"), ("1.0459", "0")],
    ("1/20", 4): [("0.7448", "1.4008"), ("0.9648", "0.4748")],
    ("1/2", 2): [("0.8590", "0.6981")],
    ("1/2", 3): [("0.6969", "1.1318"), ("0.8257", "0")],
    ("1/2", 4): [("0.6037", "1.4983"), ("0.7448", "0.5133")],
}

# The Legendre low-pass: L_n by powers of ω². A. Papoulis, "Optimum filters with monotonic response" (1958), and M.
# Fukada (1959) for even orders; also in L. Weinberg (1962), chapter 11; from memory.
LEGENDRE = {
    2: (0, 0, 1),
    3: (0, 1, -3, 3),
    4: (0, 0, 3, -8, 6),
    5: (0, 1, -8, 28, -40, 20),
    6: (0, 0, 6, -40, 105, -120, 50),
    7: (0, 1, -15, 105, -355, 615, -525, 175),
    8: (0, 0, 10, -120, 615, -1624, 2310, -1680, 490),
}

# Q of the sections of a Butterworth cascade. Common to op-amp filter handbooks, such as D. Lancaster, "Active
# Filter Cookbook" (1975), as damping 1/Q; from memory.
BUTTERWORTH_Q = {
    4: ["0.5412", "1.3066"],
    5: ["0.6180", "1.6180"],
    6: ["0.5176", "0.7071", "1.9319"],
    8: ["0.5098", "0.6013", "0.9000", "2.5629"],
}


def agrees(value: sympy.Expr, printed: str) -> bool:
    """Tell whether a value rounds to what is printed, or gives it when cut: the tables do either."""
    unit = mpmath.mpf(10) ** -len(printed.partition(".")[2])
    return bool(abs(mpmath.mpf(str(digits(value, 30))) - mpmath.mpf(printed)) < unit)


@pytest.mark.parametrize("order", BUTTERWORTH)
def test_butterworth_polynomials_are_those_printed(order: int) -> None:
    inner = butterworth(order).denominator[1:-1]
    assert all(agrees(c, p) for c, p in zip(inner, BUTTERWORTH[order], strict=True))


@pytest.mark.parametrize(("ripple", "order"), CHEBYSHEV)
def test_chebyshev_polynomials_are_those_printed(ripple: str, order: int) -> None:
    below = chebyshev(order, sympy.Rational(ripple)).denominator[:-1]
    assert all(agrees(c, p) for c, p in zip(below, CHEBYSHEV[ripple, order], strict=True))


@pytest.mark.parametrize("order", REVERSE_BESSEL)
def test_reverse_bessel_polynomials_are_those_printed(order: int) -> None:
    assert reverse_bessel(order) == REVERSE_BESSEL[order]


@pytest.mark.parametrize("order", BESSEL_HALF_POWER)
def test_bessel_half_power_frequencies_are_those_printed(order: int) -> None:
    assert agrees(bessel_frequency(order, HALF_POWER_DB), BESSEL_HALF_POWER[order])


@pytest.mark.parametrize("order", BESSEL_POLES)
def test_bessel_poles_are_those_printed(order: int) -> None:
    found = []
    for section in reversed(bessel(order).sections):
        real = section[0] if len(section) == 2 else section[1] / 2
        imaginary = sympy.S.Zero if len(section) == 2 else sympy.sqrt(section[0] - real**2)
        found.append((real, imaginary))
    for (real, imaginary), (printed_real, printed_imaginary) in zip(found, BESSEL_POLES[order], strict=True):
        assert agrees(real, printed_real)
        assert agrees(imaginary, printed_imaginary)


@pytest.mark.parametrize(("ripple", "order"), LINEAR_PHASE_POLES)
def test_linear_phase_poles_are_those_printed(ripple: str, order: int) -> None:
    sections = linear_phase(order, sympy.Rational(ripple)).sections
    for section, (printed_real, printed_imaginary) in zip(
        reversed(sections), LINEAR_PHASE_POLES[ripple, order], strict=True
    ):
        real = section[0] if len(section) == 2 else section[1] / 2
        imaginary = sympy.S.Zero if len(section) == 2 else sympy.sqrt(section[0] - real**2)
        assert agrees(real, printed_real)
        assert agrees(imaginary, printed_imaginary)


@pytest.mark.parametrize("order", LEGENDRE)
def test_legendre_polynomials_are_those_printed(order: int) -> None:
    assert legendre_square(order) == LEGENDRE[order]


def test_the_legendre_low_pass_of_order_3_is_the_one_printed() -> None:
    # 0.577/(s³ + 1.31 s² + 1.359 s + 0.577): Papoulis (1958), from memory.
    printed = ["0.577", "1.359", "1.31"]
    assert all(agrees(c, p) for c, p in zip(legendre(3).denominator, printed, strict=False))


@pytest.mark.parametrize("order", BUTTERWORTH_Q)
def test_butterworth_section_qualities_are_those_printed(order: int) -> None:
    sections = [section for section in butterworth(order).sections if len(section) == 3]
    for section, printed in zip(sections, BUTTERWORTH_Q[order], strict=True):
        assert agrees(sympy.sqrt(section[0]) / section[1], printed)


def test_the_two_pole_bessel_section_has_the_q_of_one_over_root_three() -> None:
    # Q = 1/√3 and ω0 = 1.2720 times the half-power frequency; op-amp filter handbooks, from memory.
    constant, middle, _ = numbers(bessel(2).sections[0])
    assert abs(mpmath.sqrt(constant) / middle - 1 / mpmath.sqrt(3)) < 1e-14
    assert agrees(sympy.sqrt(bessel(2).sections[0][0]), "1.2720")


def test_chebyshev_half_power_frequency_is_that_printed() -> None:
    # cosh(acosh(1/ε)/n): 1.3897 for 0.5 dB and order 2, 1.1675 for order 3; Zverev (1967), from memory.
    for order, printed in ((2, "1.3897"), (3, "1.1675")):
        prototype = chebyshev(order, sympy.Rational(1, 2))
        moved = edge_at(prototype, HALF_POWER_DB)
        assert agrees(prototype.denominator[-2] / moved.denominator[-2], printed)
