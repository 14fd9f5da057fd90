"""The search for preferred values: sets a second, and against the same loop written by hand in numpy.

    .venv/bin/python -m tests.benchmarks.value_search

Both search the same sets, E96 for four resistors and E12 for two capacitors within five values of the exact ones,
with the same measure at the same frequencies, and keep the best 500. Processor time, medians of runs in turn.
"""

from __future__ import annotations

import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np

from symcirc.complaints import Source
from symcirc.progress import silent
from symcirc.sheet import read_sheet
from symcirc.values.arithmetic import Coefficients
from symcirc.values.band import Band, band, response
from symcirc.values.departure import LevelDeparture
from symcirc.values.plan import plan
from symcirc.values.search import search
from symcirc.values.space import Posed, build_space

#: A low-pass with a gain of 2 by two resistors (R. P. Sallen and E. L. Key, "A practical method of designing RC active
#: filters", 1955); numbers invented.
SHEET = """
in -- R1 -- a -- R2 -- p -- C2 -- gnd
a -- C1 -- out
U1 opamp: plus p, minus m, drives out
out -- R3 -- m -- R4 -- gnd
fix C1 = 22 nF, C2 = 10 nF, R4 = 10 kohm
ask H = V_out/V_in
target H: lowpass chebyshev, order 2, ripple 0.5 dB, edge 1.2 kHz, gain 2
parts R: E96 1 %
parts C: E12 5 %
"""
KEPT = 500
RUNS = 5


def by_hand(posed: Posed, compared: Band, numbers: list[float]) -> np.ndarray:
    """Search as a person would write it for this stage: a loop over the capacitors, arrays over the resistors."""
    best = np.empty(0)
    threshold = np.inf
    for centre in range(posed.space.centres):
        values = {
            axis.part: axis.choices.values[axis.starts[centre] + np.arange(axis.width)]
            for axis in posed.space.axes
        }
        r1, r2, r3, r4 = (
            values[f"R{k}"].reshape([-1 if j == k else 1 for j in range(1, 5)]) for k in range(1, 5)
        )
        gain = 1 + r3 / r4
        for c1 in values["C1"]:
            for c2 in values["C2"]:
                a = (r1 * r2 * (c1 * c2) + 0 * gain).ravel()
                b = (c2 * (r1 + r2) + (1 - gain) * (r1 * c1)).ravel()
                square = (gain * gain + 0 * (r1 * r2)).ravel()
                high, low = np.zeros(len(a)), np.full(len(a), np.inf)
                for w, scale in zip(compared.search_points * numbers[0], numbers[1:], strict=True):
                    ratio = square / (((1 - a * (w * w)) ** 2 + (b * w) ** 2) * scale)
                    np.maximum(high, ratio, out=high)
                    np.minimum(low, ratio, out=low)
                score = np.maximum(high, 1 / low)
                best = np.concatenate([best, score[score < threshold]])
                if len(best) > KEPT:
                    best = np.partition(best, KEPT)[:KEPT]
                    threshold = best.max()
    return np.sort(best)


def median(work: Callable[[], object]) -> float:
    times = []
    for _ in range(RUNS):
        begun = time.process_time()
        work()
        times.append(time.process_time() - begun)
    return sorted(times)[RUNS // 2]


def main() -> None:
    """Print the ratio, the speed, and the time of the whole command."""
    planned = plan(read_sheet(Source("benchmark.stage", SHEET)), None, True, silent)
    posed = build_space(planned, 5)
    goal = planned.design.goal
    target = response(*([float(c) for c in side] for side in (goal.numerator, goal.denominator)))
    compared = band(target, float(goal.nominal or 1))
    known = {name: number for name, number in planned.known.items() if name not in planned.moved}
    coefficients = Coefficients(planned.functions, known, target.frequency)
    measure = LevelDeparture(target, compared.search_points, coefficients.powers, False)
    gains = np.abs(target.at(compared.search_points)) ** 2
    numbers = [target.frequency, *gains]

    ours = search(posed.space, coefficients, measure, KEPT, silent, posed.counted)
    hand = by_hand(posed, compared, numbers)
    assert np.allclose(np.sort(ours.scores), hand, rtol=1e-9, atol=0)
    by_us = median(lambda: search(posed.space, coefficients, measure, KEPT, silent, posed.counted))
    by_them = median(lambda: by_hand(posed, compared, numbers))
    size = posed.space.size
    print(f"{size:,} sets at {len(compared.search_points)} frequencies")
    print(f"search {by_us:.3f} s, {size / by_us / 1e6:.1f}e6 sets a second; by hand {by_them:.3f} s")
    print(f"ratio {by_us / by_them:.2f} (to reach: 1.5)")
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "benchmark.stage"
        path.write_text(SHEET, encoding="utf-8")
        begun = time.monotonic()
        words = ["values", str(path), "--together", "--window", "5"]
        subprocess.run([sys.executable, "-m", "symcirc", *words], check=True, capture_output=True)
        print(f"whole command {time.monotonic() - begun:.2f} s (to reach: 3)")


if __name__ == "__main__":
    main()
