"""Prototypes and transformed responses against ``scipy.signal``, which has them in double precision."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
import sympy
from scipy import signal

from symcirc.responses import (
    Prototype,
    Response,
    bandpass,
    bandstop,
    bessel,
    butterworth,
    chebyshev,
    digits,
    highpass,
    lowpass,
)

from .evaluation import DIGITS, HALF_DB, numbers, value

ORDERS = range(1, 21)


def floats(coefficients) -> np.ndarray:
    return np.array([float(digits(c, 25)) for c in coefficients])


def poles(prototype: Prototype) -> np.ndarray:
    """Return the poles of the upper half plane, by rising imaginary part, by the formula for quadratics."""
    found = []
    for section in prototype.sections:
        c = [digits(x, 40) for x in section]
        if len(c) == 2:
            found.append(complex(-c[0]))
        else:
            found.append(complex(-c[1] / 2, sympy.sqrt(c[0] - c[1] ** 2 / 4)))
    return np.array(sorted(found, key=lambda z: z.imag))


def polynomial(roots: np.ndarray) -> np.ndarray:
    """Return the monic real polynomial, ascending powers, multiplied pair by pair.

    numpy's ``poly`` takes all roots above the real axis first, and is then good to 1e-11 only at 40 poles.
    """
    result = np.ones(1)
    for z in upper(roots):
        real_pair = [1, -z.real] if abs(z.imag) < 1e-14 else [1, -2 * z.real, abs(z) ** 2]
        result = np.convolve(result, real_pair)
    return result[::-1]


def upper(roots: np.ndarray) -> np.ndarray:
    return np.array(sorted((z for z in roots if z.imag > -1e-14), key=lambda z: z.imag))


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize(
    ("build", "reference"),
    [
        (butterworth, signal.buttap),
        (bessel, lambda n: signal.besselap(n, norm="mag")),
        (lambda n: chebyshev(n, HALF_DB), lambda n: signal.cheb1ap(n, 0.5)),
        (lambda n: chebyshev(n, sympy.Integer(3)), lambda n: signal.cheb1ap(n, 3)),
    ],
    ids=["butterworth", "bessel", "chebyshev-0.5dB", "chebyshev-3dB"],
)
def test_poles_and_gain_are_those_of_scipy(build, reference, order: int) -> None:
    _, reference_poles, gain = reference(order)
    prototype = build(order)
    np.testing.assert_allclose(poles(prototype), upper(reference_poles), rtol=1e-12, atol=1e-15)
    np.testing.assert_allclose(floats(prototype.numerator), [gain], rtol=1e-12)


FAMILIES = {
    "butterworth": (butterworth, signal.buttap),
    "bessel": (bessel, lambda n: signal.besselap(n, norm="mag")),
    "chebyshev": (lambda n: chebyshev(n, sympy.Integer(1)), lambda n: signal.cheb1ap(n, 1)),
}
W0, BANDWIDTH = sympy.Rational(7, 5), sympy.Rational(3, 10)
KINDS = {
    "lowpass": (lambda p: lowpass(p, W0), lambda zpk: signal.lp2lp_zpk(*zpk, wo=1.4)),
    "highpass": (lambda p: highpass(p, W0), lambda zpk: signal.lp2hp_zpk(*zpk, wo=1.4)),
    "bandpass": (lambda p: bandpass(p, W0, BANDWIDTH), lambda zpk: signal.lp2bp_zpk(*zpk, wo=1.4, bw=0.3)),
    "bandstop": (lambda p: bandstop(p, W0, BANDWIDTH), lambda zpk: signal.lp2bs_zpk(*zpk, wo=1.4, bw=0.3)),
}


@pytest.mark.parametrize("order", [*range(1, 13), 16, 20])
@pytest.mark.parametrize("family", FAMILIES)
@pytest.mark.parametrize("kind", KINDS)
def test_transformed_coefficients_are_those_of_scipy(kind: str, family: str, order: int) -> None:
    build, analog_prototype = FAMILIES[family]
    transform, reference = KINDS[kind]
    response: Response = transform(build(order))
    zeros, reference_poles, gain = reference(analog_prototype(order))
    np.testing.assert_allclose(floats(response.denominator), polynomial(reference_poles), rtol=1e-12)
    np.testing.assert_allclose(floats(response.numerator), gain * polynomial(zeros), rtol=1e-12)


@pytest.mark.parametrize("order", range(1, 13))
@pytest.mark.parametrize("kind", ["lowpass", "highpass", "bandpass", "bandstop"])
def test_filters_by_their_edges_are_those_of_scipy(kind: str, order: int) -> None:
    # A band by its two edges: their geometric mean is the centre, their difference the bandwidth.
    low, high = sympy.Integer(2), sympy.Integer(5)
    if kind in ("lowpass", "highpass"):
        frequencies, edges = (high,), 5.0
    else:
        frequencies, edges = (sympy.sqrt(low * high), high - low), [2.0, 5.0]
    transform = {"lowpass": lowpass, "highpass": highpass, "bandpass": bandpass, "bandstop": bandstop}[kind]
    for prototype, zpk in (
        (butterworth(order), signal.butter(order, edges, kind, analog=True, output="zpk")),
        (bessel(order), signal.bessel(order, edges, kind, analog=True, output="zpk", norm="mag")),
        (chebyshev(order, HALF_DB), signal.cheby1(order, 0.5, edges, kind, analog=True, output="zpk")),
    ):
        response = transform(prototype, *frequencies)
        omega = np.geomspace(1, 10, 41)
        _, expected = signal.freqs_zpk(*zpk, worN=omega)
        with mpmath.workdps(DIGITS):  # in doubles, the expanded polynomials of 24 poles lose seven digits
            numerator, denominator = numbers(response.numerator), numbers(response.denominator)
            ours = [complex(value(numerator, s) / value(denominator, s)) for s in map(mpmath.mpc, 1j * omega)]
        np.testing.assert_allclose(ours, expected, rtol=1e-12, atol=1e-14)
