"""Least orders, losses, group delay and settling against ``scipy.signal``."""

from __future__ import annotations

import itertools
import math

import numpy as np
import pytest
from scipy import signal

from symcirc.masks.curve import build_curve
from symcirc.masks.order import select
from symcirc.masks.placed import placed
from symcirc.masks.timing import delay_variation, settling_time

from .masks import mask

REFERENCES = {
    "butterworth": signal.buttord,
    "chebyshev": signal.cheb1ord,
    "inverse chebyshev": signal.cheb2ord,
    "elliptic": signal.ellipord,
}
#: Losses of pass and stop band in dB, and how far the two bands are apart.
CASES = list(itertools.product((0.1, 1, 3), (20, 45, 70), (1.15, 1.6, 4.5)))


def bands(
    kind: str, ratio: float, low_db: float, high_db: float
) -> tuple[list[str], list[float], list[float]]:
    """Return limits of a mask about 1 kHz, and the band edges in hertz as scipy wants them."""
    if kind == "lowpass":
        return (
            [f"loss <= {low_db} dB below 1 kHz", f"loss >= {high_db} dB above {ratio} kHz"],
            [1e3],
            [1e3 * ratio],
        )
    if kind == "highpass":
        return (
            [f"loss >= {high_db} dB below 1 kHz", f"loss <= {low_db} dB above {ratio} kHz"],
            [1e3 * ratio],
            [1e3],
        )
    half = 1.3  # the inner band is from 1/1.3 kHz to 1.3 kHz, in geometric symmetry
    inner, outer = [1e3 / half, 1e3 * half], [1e3 / half / ratio, 1e3 * half * ratio]
    inside, outside = ("<=", ">=") if kind == "bandpass" else (">=", "<=")
    a, b = (low_db, high_db) if kind == "bandpass" else (high_db, low_db)
    limits = [
        f"loss {outside} {b} dB below {outer[0]!r} Hz",
        f"loss {inside} {a} dB from {inner[0]!r} Hz to {inner[1]!r} Hz",
        f"loss {outside} {b} dB above {outer[1]!r} Hz",
    ]
    return (limits, inner, outer) if kind == "bandpass" else (limits, outer, inner)


@pytest.mark.parametrize("kind", ["lowpass", "highpass", "bandpass", "bandstop"])
@pytest.mark.parametrize(("low_db", "high_db", "ratio"), CASES)
def test_least_orders_are_those_of_scipy(kind: str, low_db: float, high_db: float, ratio: float) -> None:
    limits, passing, stopping = bands(kind, ratio, low_db, high_db)
    found = {row.candidate.family: row.order for row in select(mask(*limits)).rows}
    for family, reference in REFERENCES.items():
        order, _ = reference(
            2 * np.pi * np.array(passing), 2 * np.pi * np.array(stopping), low_db, high_db, True
        )
        assert found.get(family, math.inf) == (order if order <= 20 else math.inf)


MASKS = [
    ["loss <= 1 dB below 2 kHz", "loss >= 40 dB above 9 kHz"],
    ["loss <= 0.5 dB above 2 kHz", "loss >= 60 dB below 700 Hz"],
    ["loss <= 1 dB from 900 Hz to 1.1 kHz", "loss >= 40 dB below 600 Hz", "loss >= 30 dB above 1.9 kHz"],
    ["loss <= 1 dB below 40 Hz", "loss >= 30 dB from 49 Hz to 51 Hz", "loss <= 1 dB above 62 Hz"],
]


def reference_response(row):
    """The row's response in scipy's form (zeros, poles, gain), from our sections in doubles."""
    from symcirc.masks.order import exact_curve

    factors = placed(exact_curve(row.prototype), row.placing.spot)
    over, under = np.ones(1), np.ones(1)
    for a, b in factors.sections:
        over, under = np.polymul(over, a[::-1]), np.polymul(under, b[::-1])
    return factors, over, under


@pytest.mark.parametrize("limits", MASKS, ids=["lowpass", "highpass", "bandpass", "bandstop"])
def test_worst_losses_are_those_on_a_fine_grid_of_scipy(limits: list[str]) -> None:
    wanted = mask(*limits)
    for row in select(wanted).rows:
        _, over, under = reference_response(row)
        passing, stopping = [], []
        for band in wanted.bands:
            low, high = max(band.low, 1e-3), min(band.high, 1e9)
            omega = np.unique(
                np.concatenate([np.geomspace(low, high, 20_000), np.linspace(low, min(high, 2e5), 20_000)])
            )
            loss = -20 * np.log10(np.abs(signal.freqs(over, under, omega)[1]) + 1e-300)
            (passing if band.passes else stopping).append(loss.max() if band.passes else loss.min())
        assert row.pass_loss_db == pytest.approx(max(passing), abs=2e-4)
        assert row.stop_loss_db == pytest.approx(min(stopping), abs=2e-2)
        assert row.pass_loss_db >= max(passing) - 1e-6  # no grid may find what the roots do not
        assert row.stop_loss_db <= min(stopping) + 1e-6


@pytest.mark.parametrize("limits", MASKS, ids=["lowpass", "highpass", "bandpass", "bandstop"])
def test_settling_times_are_those_of_scipys_step_response(limits: list[str]) -> None:
    for row in select(mask(*limits)).rows:
        if row.order > 5:
            continue  # scipy's expanded polynomials lose their digits there
        _, over, under = reference_response(row)
        scale = 1 / np.abs(np.roots(under)).mean()
        n = len(under) - 1
        over_scaled = over * scale ** -np.arange(len(over) - 1, -1, -1.0) * scale**n
        under_scaled = under * scale ** -np.arange(n, -1, -1.0) * scale**n
        times = np.linspace(0, 1.5 * row.settling / scale, 30_001)
        _, step = signal.step((over_scaled, under_scaled), T=times)
        final = over_scaled[-1] / under_scaled[-1] if len(over) else 0.0
        outside = np.nonzero(np.abs(step - final) > 0.01)[0]
        assert times[outside[-1]] * scale == pytest.approx(row.settling, rel=2e-4)


@pytest.mark.parametrize("limits", MASKS, ids=["lowpass", "highpass", "bandpass", "bandstop"])
def test_delay_variation_is_that_of_the_phase_differentiated(limits: list[str]) -> None:
    wanted = mask(*limits)
    for row in select(wanted).rows:
        if row.candidate.family not in ("butterworth", "chebyshev", "elliptic", "legendre"):
            continue
        factors, _, _ = reference_response(row)
        delays = []
        for band in wanted.passing:
            omega = np.linspace(band.low, min(band.high, 2e5), 200_001)
            phase = sum(np.unwrap(np.angle(np.polyval(b[::-1], 1j * omega))) for _, b in factors.sections)
            delays.append(np.gradient(phase, omega))
            if band.high == math.inf:
                delays.append(np.zeros(1))
        variation = max(d.max() for d in delays) - min(d.min() for d in delays)
        assert row.delay_variation == pytest.approx(variation, rel=2e-3)


def test_settling_of_coincident_poles_is_that_of_the_closed_form() -> None:
    # Step of 1/(s + 1)^n: 1 - e^-t Σ t^k/k!.
    from symcirc.masks.placing import Spot

    for n in (1, 2, 5, 12, 20):
        settled = settling_time(placed(build_curve((-1 + 0j,) * n, (), 0.0), Spot("lowpass", 1.0, None)))
        rest = math.exp(-settled) * sum(settled**k / math.factorial(k) for k in range(n))
        assert rest == pytest.approx(0.01, rel=1e-4)


def test_delay_of_a_first_order_high_pass_falls_to_nothing() -> None:
    assert delay_variation((-2 + 0j,), [(0.0, math.inf)]) == pytest.approx(0.5)
