"""Values, group delay, phase and step response against scipy.signal."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import signal

from symcirc.plots.rational import continuous_phase, group_delay, rational
from symcirc.plots.step import step_length, step_response

FILTERS = {
    "butterworth low-pass of order 7": signal.butter(7, 1e4, analog=True),
    "chebyshev band-pass of 12 poles": signal.cheby1(6, 0.5, [1e3, 3e3], "bandpass", analog=True),
    "elliptic high-pass of order 5": signal.ellip(5, 0.5, 50, 1e4, "highpass", analog=True),
    "elliptic band-stop of 8 poles": signal.ellip(4, 0.5, 50, [2e3, 3e3], "bandstop", analog=True),
    "bessel low-pass of order 10": signal.bessel(10, 5e3, analog=True),
    "all-pass of order 2": ([1, -2e3, 1e7], [1, 2e3, 1e7]),
    "six equal poles": ([1e18], np.poly([-1e3] * 6)),
    "inverting first order": ([-3.0], [1e-3, 1.0]),
    "poles a factor of a million apart": ([1.0], np.polymul([1e-2, 1.0], [1e-8, 1.0])),
    "lead network, more delay at high than at low frequencies": ([1e-3, 1.0], [1e-5, 1.0]),
}


@pytest.fixture(params=FILTERS.values(), ids=FILTERS.keys())
def both(request):
    above, below = request.param
    return (above, below), rational(above[::-1], below[::-1])


def grid(ratio):
    sizes = np.abs(ratio.poles)
    return np.geomspace(sizes.min() / 20, sizes.max() * 20, 4001)


def test_values_are_those_of_freqs(both):
    sides, ratio = both
    omega = grid(ratio)
    _, expected = signal.freqs(*sides, omega)
    assert np.max(np.abs(ratio.at(omega) - expected)) < 1e-11 * np.max(np.abs(expected))


def test_the_group_delay_is_the_slope_of_the_phase_between_zeros_on_the_axis(both):
    sides, ratio = both
    omega = grid(ratio)
    step = 1e-5 * omega
    before, after = (signal.freqs(*sides, w)[1] for w in (omega - step, omega + step))
    slope = -np.angle(after / before) / (2 * step)
    gains = np.abs(ratio.at(omega))
    heard = gains > 1e-3 * gains.max()
    delays = group_delay(ratio, omega)
    assert heard.sum() > 100
    assert np.max(np.abs(delays - slope)[heard]) < 1e-5 * np.max(np.abs(delays[heard]))


def test_the_phase_is_the_angle_and_jumps_by_half_a_turn_at_most(both):
    sides, ratio = both
    omega = grid(ratio)
    _, expected = signal.freqs(*sides, omega)
    phase = np.radians(continuous_phase(ratio, omega))
    assert np.max(np.abs(np.exp(1j * phase) - expected / np.abs(expected))) < 1e-6
    assert np.max(np.abs(np.diff(phase))) < np.pi + 0.1


def test_the_step_response_is_scipys(both):
    (above, below), ratio = both
    end = step_length(ratio)
    times = np.linspace(0, end, 601)
    _, expected = signal.step((above, below), T=times)
    found = step_response(ratio, end, 601)
    assert np.max(np.abs(found - expected)) < 1e-8 * np.max(np.abs(expected))


def test_a_step_is_shown_until_it_has_settled_and_not_much_longer(both):
    _, ratio = both
    end = step_length(ratio)
    long = step_response(ratio, 4 * end, 4001)
    outside = np.abs(long - long[-1]) > 0.011 * np.abs(long).max()
    last = np.flatnonzero(outside)[-1] / 4000 * 4
    assert 0.6 < last < 1.0


def test_first_order_by_its_formulas():
    ratio = rational([2.0], [1.0, 1e-3])
    times = np.linspace(0, 5e-3, 11)
    assert step_response(ratio, 5e-3, 11) == pytest.approx(2 * (1 - np.exp(-times / 1e-3)), abs=1e-13)
    omega = np.array([0.0, 500.0, 1000.0])
    assert group_delay(ratio, omega) == pytest.approx(1e-3 / (1 + (omega * 1e-3) ** 2), rel=1e-13)


def test_a_double_integrator_rises_with_the_square_of_time():
    assert step_response(rational([2.0], [0.0, 0.0, 1.0]), 3.0, 4) == pytest.approx([0.0, 1.0, 4.0, 9.0])


def test_an_unstable_pole_is_shown_for_three_decades_of_growth():
    ratio = rational([1.0], [-1.0, 1.0])  # e^t - 1
    assert step_response(ratio, step_length(ratio), 3)[-1] == pytest.approx(999.0)


def test_rounding_in_a_notchs_numerator_makes_no_spike_in_the_delay():
    clean, rounded = (rational([1.0, middle, 1.0], [1.0, 0.25, 1.0]) for middle in (0.0, 3e-17))
    omega = np.concatenate([np.linspace(0.9, 0.9999999, 50), [1 + 1e-13]])
    assert group_delay(rounded, omega) == pytest.approx(group_delay(clean, omega))
    assert rounded.zeros.real.tolist() == [0.0, 0.0]


def test_a_small_middle_term_that_is_no_rounding_stays():
    assert rational([1.0, 1e-6, 1.0], [1.0, 0.25, 1.0]).numerator[1] == pytest.approx(1e-6)


def test_twenty_poles_far_from_1_rad_per_second_keep_their_values():
    zeros, poles, gain = signal.buttap(20)
    below = np.poly(poles).real
    scaled = [c * 1e-7**k for k, c in enumerate(below[::-1])]
    ratio = rational([gain], scaled)
    assert abs(ratio.at(np.array([1e7]))[0]) == pytest.approx(0.5**0.5, rel=1e-9)
    assert np.max(np.abs(np.abs(ratio.poles) - 1e7)) < 1e-3 * 1e7
    assert len(zeros) == 0
