"""Margins of loop gains against textbook loops, scipy's response on a grid with bisection, and mpmath."""

from __future__ import annotations

import math
import random
from collections.abc import Callable, Sequence
from fractions import Fraction

import mpmath
import numpy as np
import numpy.typing as npt
import pytest
from scipy import signal
from scipy.optimize import brentq

from symcirc.derivation import derive, pose
from symcirc.stability.margins import PhaseCrossing, margins, margins_of
from tests.stability.modes import read


def loop(
    gain: float, zeros: Sequence[complex], poles: Sequence[complex]
) -> tuple[list[Fraction], list[Fraction]]:
    """Return ascending coefficients of gain times the product of (s - z), over that of (s - p), exact as floats."""
    above, below = (np.atleast_1d(np.real(np.poly(roots))) for roots in (zeros, poles))
    return [Fraction(float(gain * c)) for c in above[::-1]], [Fraction(float(c)) for c in below[::-1]]


# textbook loops --------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("gain", [3, 10, 29, 31, 100])
def test_gain_margin_of_two_lags_and_an_integrator(gain: int) -> None:
    # T = K/(s (s + 1)(s + 5)): by Routh stable for K < 30, crossing at sqrt(5); Ogata, "Modern Control Engineering",
    # from memory.
    found = margins([gain], [0, 5, 6, 1])
    assert found.gain_margin is not None
    assert found.gain_margin.omega == pytest.approx(math.sqrt(5), rel=1e-14)
    assert found.gain_margin.margin == pytest.approx(30 / gain, rel=1e-14)
    assert found.stable == (gain < 30)
    assert found.phase_margin is not None
    assert (found.phase_margin.margin_deg > 0) == (gain < 30)


def test_an_integrator_has_ninety_degrees_and_no_gain_margin() -> None:
    found = margins([1000], [0, 1])
    assert found.phase_margin is not None
    assert (found.phase_margin.omega, found.phase_margin.margin_deg) == (1000.0, 90.0)
    assert found.gain_margin is None
    assert found.stable


def test_a_second_lag_at_the_unity_gain_frequency_leaves_about_52_degrees() -> None:
    # T = w_t/(s (1 + s/w_t)): unity at w_t sqrt((sqrt(5) - 1)/2), margin 90 degrees less the arctangent of that root;
    # Gray and Meyer, "Analysis and Design of Analog Integrated Circuits", from memory.
    found = margins([10**7], [0, 1, Fraction(1, 10**7)])
    golden = math.sqrt((math.sqrt(5) - 1) / 2)
    assert found.phase_margin is not None
    assert found.phase_margin.omega == pytest.approx(1e7 * golden, rel=1e-14)
    assert found.phase_margin.margin_deg == pytest.approx(90 - math.degrees(math.atan(golden)), rel=1e-13)


def test_a_loop_that_never_reaches_unity_has_no_phase_margin() -> None:
    found = margins([1], [2, 1])
    assert found.phase_margin is None
    assert found.gain_margin is None
    assert found.stable


def test_a_loop_on_the_verge_has_no_margin_and_is_not_stable() -> None:
    found = margins([8], [1, 3, 3, 1])
    assert found.phase_margin is not None
    assert found.gain_margin is not None
    assert found.phase_margin.margin_deg == pytest.approx(0, abs=1e-12)
    assert found.gain_margin.margin == pytest.approx(1, rel=1e-14)
    assert not found.stable


def test_positive_feedback_at_rest_is_a_phase_crossing_at_zero() -> None:
    found = margins([-2], [1, 1])
    assert found.phase == (PhaseCrossing(0.0, 0.5),)
    assert not found.stable
    assert margins([Fraction(-1, 2)], [1, 1]).stable


def test_positive_feedback_at_infinity_is_not_stable() -> None:
    assert not margins([-2], [1]).stable
    assert not margins([-2, -2], [1, 1]).stable
    assert margins([2], [1]).stable


def test_a_conditionally_stable_loop_has_a_gain_margin_on_either_side() -> None:
    # T = K (s + 1)^2/s^3 is stable for K > 1/2 (Routh: s^3 + K s^2 + 2 K s + K).
    found = margins([3, 6, 3], [0, 0, 0, 1])
    assert [crossing.margin for crossing in found.phase] == [pytest.approx(1 / 6, rel=1e-14)]
    assert found.phase[0].margin_db < 0
    assert found.stable
    assert not margins([Fraction(1, 3), Fraction(2, 3), Fraction(1, 3)], [0, 0, 0, 1]).stable


def test_the_worst_of_several_crossings_is_the_one_nearest_minus_one() -> None:
    # An integrator with a resonance that lifts the loop gain above 1 once more.
    found = margins(*loop(1e5, [], [0, -2 + 100j, -2 - 100j]))
    assert len(found.unity) == 3
    assert found.phase_margin == min(found.unity, key=lambda crossing: abs(crossing.margin_deg))
    assert [crossing.omega for crossing in found.unity] == sorted(crossing.omega for crossing in found.unity)


def test_a_zero_on_the_axis_is_no_phase_crossing() -> None:
    # T = 4 (s^2 + 1)/(s + 1)^3 is zero at 1 rad/s, not negative.
    found = margins([4, 0, 4], [1, 3, 3, 1])
    assert all(abs(crossing.omega - 1) > 1e-3 for crossing in found.phase)


def test_a_zero_loop_gain_is_refused() -> None:
    with pytest.raises(ValueError, match="not zero"):
        margins([0], [1, 1])


def test_loop_gain_of_a_sheet() -> None:
    # Non-inverting amplifier of gain 10: T = gbw/(10 j f), unity at gbw/10, 90 degrees.
    sheet = read(
        """
        gnd -- R1 -- m -- R2 -- out
        in -- R3 -- gnd
        U1 opamp: plus in, minus m, drives out, gbw 5 MHz
        fix R1 = 1 kohm, R2 = 9 kohm, R3 = 1 kohm
        ask T = loop(U1) with V_in = 0"""
    )
    found = margins_of(derive(pose(sheet)).answer("T").function, sheet.numbers)
    assert found.phase_margin is not None
    assert found.phase_margin.omega == pytest.approx(2 * math.pi * 5e5, rel=1e-14)
    assert found.phase_margin.margin_deg == pytest.approx(90, rel=1e-14)


# random loops ----------------------------------------------------------------------------------------------------


def random_loop(seed: int) -> tuple[list[Fraction], list[Fraction]]:
    rng = random.Random(seed)
    poles: list[complex] = [0.0] * rng.randrange(3)
    poles += [-(10 ** rng.uniform(0, 5)) for _ in range(rng.randrange(1, 4))]
    if rng.random() < 0.5:
        size, q = 10 ** rng.uniform(1, 4), rng.uniform(0.5, 20)
        root = complex(-size / 2 / q, size * math.sqrt(abs(1 - 1 / (4 * q * q))))
        poles += [root, root.conjugate()]
    zeros = [rng.choice([-1, -1, 1]) * 10 ** rng.uniform(0, 5) for _ in range(rng.randrange(len(poles)))]
    scale = (
        abs(np.prod([p for p in poles if p])) / abs(np.prod(zeros))
        if zeros
        else abs(np.prod([p for p in poles if p]))
    )
    return loop(rng.choice([1, 1, 1, -1]) * scale * 10 ** rng.uniform(0, 4), zeros, poles)


def response(
    above: list[Fraction], below: list[Fraction]
) -> Callable[[npt.ArrayLike], npt.NDArray[np.complex128]]:
    falling = [float(c) for c in above[::-1]], [float(c) for c in below[::-1]]
    return lambda omega: np.asarray(signal.freqs(*falling, worN=np.atleast_1d(omega))[1])


GRID = np.logspace(-4, 9, 26001)


def crossings(values: npt.NDArray[np.float64], exact: Callable[[float], float]) -> list[float]:
    """Return the frequencies between grid points at which a function changes its sign, by bisection."""
    places = np.nonzero(np.sign(values[1:]) * np.sign(values[:-1]) < 0)[0]
    return [float(brentq(exact, GRID[k], GRID[k + 1], xtol=1e-300, rtol=1e-14)) for k in places]


@pytest.mark.parametrize("seed", range(20))
def test_all_crossings_of_a_random_loop_are_those_on_a_grid_with_bisection(seed: int) -> None:
    above, below = random_loop(seed)
    found = margins(above, below)
    at = response(above, below)
    values = at(GRID)
    unity = crossings(np.log(np.abs(values)), lambda omega: float(np.log(np.abs(at(omega)[0]))))
    assert [crossing.omega for crossing in found.unity] == pytest.approx(unity, rel=1e-9)
    real = crossings(
        values.imag / np.abs(values), lambda omega: float((at(omega)[0] / abs(at(omega)[0])).imag)
    )
    negative = [omega for omega in real if at(omega)[0].real < 0]
    positive = [crossing for crossing in found.phase if crossing.omega]
    assert [crossing.omega for crossing in positive] == pytest.approx(negative, rel=1e-9)
    assert [crossing.margin for crossing in positive] == pytest.approx(
        [1 / abs(at(w)[0]) for w in negative], rel=1e-9
    )


@pytest.mark.parametrize("seed", range(20))
def test_the_phase_of_a_random_loop_is_followed_without_jumps(seed: int) -> None:
    above, below = random_loop(seed)
    found = margins(above, below)
    followed = np.degrees(np.unwrap(np.angle(response(above, below)(GRID))))
    poles_at_zero = next(k for k, c in enumerate(below) if c)
    sign = above[0] / below[poles_at_zero]
    start = -90.0 * poles_at_zero - (0 if sign > 0 else 180)
    followed += 360 * round((start - followed[0]) / 360)
    for crossing in found.unity:
        assert crossing.phase_deg == pytest.approx(float(np.interp(crossing.omega, GRID, followed)), abs=0.5)
        assert math.remainder(crossing.phase_deg + 180 - crossing.margin_deg, 360) == pytest.approx(
            0, abs=1e-9
        )
        assert -180 < crossing.margin_deg <= 180


@pytest.mark.parametrize("seed", range(20))
def test_a_random_loop_is_stable_where_all_roots_of_the_closed_loop_lie_to_the_left(seed: int) -> None:
    above, below = random_loop(seed)
    with mpmath.workdps(60):
        length = max(len(above), len(below))
        closed = [
            mpmath.mpf(x.numerator) / x.denominator + mpmath.mpf(y.numerator) / y.denominator
            for x, y in zip(
                above + [Fraction(0)] * (length - len(above)),
                below + [Fraction(0)] * (length - len(below)),
                strict=True,
            )
        ]
        roots = mpmath.polyroots(closed[::-1], maxsteps=1000, extraprec=500)
        assert margins(above, below).stable == all(root.real < 0 for root in roots)
