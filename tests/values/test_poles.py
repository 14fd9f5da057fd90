"""Pole pairs and their shifts against numpy's roots and scipy's prototypes."""

import numpy as np
import pytest
from scipy import signal

from symcirc.values.poles import PolePair, pole_pairs, shifts


@pytest.mark.parametrize("order", range(1, 11))
def test_the_pairs_of_a_butterworth_response_are_the_tabulated_ones(order):
    # Q = 1/(2 cos(angle)), from the poles on the unit circle; scipy.signal.butter for the polynomial.
    _, denominator = signal.butter(order, 2 * np.pi * 50, analog=True)
    pairs = pole_pairs(list(denominator[::-1]))
    angles = [np.pi * (2 * k + 1 - order % 2) / (2 * order) for k in range((order + 1) // 2)]
    expected = sorted(1 / (2 * np.cos(angle)) for angle in angles if angle > 1e-9)
    assert sorted(pair.q for pair in pairs if pair.q is not None) == pytest.approx(expected, rel=1e-6)
    assert [pair.f0 for pair in pairs] == pytest.approx([50] * len(pairs), rel=1e-9)
    assert sum(pair.q is None for pair in pairs) == order % 2


def test_two_real_poles_are_a_pair_of_low_q():
    (pair,) = pole_pairs([3.0, 4.0, 1.0])
    assert pair.q == pytest.approx(np.sqrt(3) / 4)
    assert pair.f0 == pytest.approx(np.sqrt(3) / (2 * np.pi))


def test_of_three_real_poles_the_nearest_two_are_a_pair():
    pairs = pole_pairs(list(np.poly([-1.0, -1.1, -50.0])[::-1]))
    assert [(round(p.f0 * 2 * np.pi, 6), p.q is None) for p in pairs] == [
        (round(np.sqrt(1.1), 6), False),
        (50.0, True),
    ]


def test_pairs_are_compared_with_the_nearest_ones():
    target = [PolePair(1000.0, 0.6), PolePair(1000.0, 1.6), PolePair(900.0, None)]
    found = [PolePair(1001.0, 1.62), PolePair(905.0, None), PolePair(999.0, 0.61)]
    moved = shifts(target, found)
    assert [shift.pair for shift in moved] == [found[2], found[0], found[1]]
    assert moved[0].f0_shift == pytest.approx(-0.001)
    assert moved[2].q_shift is None
