"""Whole commands against the clock: `match` on a cascade of order 10, `order` over all families, single stages.

    .venv/bin/python -m tests.benchmarks.cascade

Each is run three times in a process of its own, start-up included; the medians of the time by the clock are printed,
with the processor time, which other work on the machine disturbs less. The figures to reach are for a quiet machine.
"""

from __future__ import annotations

import math
import os
import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

from tests.match.sheets import UNITY_GAIN, chain

RUNS = 3
ASK = "ask H = V_out/V_in\n"
#: A mask that every family can meet; invented.
MASK = """
in -- R1 -- out -- C1 -- gnd
ask H = V_out/V_in
limit H: loss <= 1 dB below 1.5 kHz
limit H: loss >= 40 dB above 9 kHz
"""
#: A ladder between equal resistors, Chebyshev 0.5 dB (any textbook).
LADDER = """
in -- R1 -- a -- L2 -- b -- L4 -- out -- R2 -- gnd
a -- C1 -- gnd
b -- C3 -- gnd
out -- C5 -- gnd
fix R1 = 1 kohm, R2 = R1
ask H = V_out/V_in
target H: lowpass chebyshev, order 5, ripple 0.5 dB, edge 1 kHz
"""


def cascade() -> str:
    """Return a sheet of five unity-gain stages (R. P. Sallen and E. L. Key, 1955), Butterworth of order 10."""
    qualities = [1 / (2 * math.cos((2 * k - 1) * math.pi / 20)) for k in range(1, 6)]
    fixes = [f"S{k}_C1 = {math.ceil(5 * q * q)}n, S{k}_C2 = 1n" for k, q in enumerate(qualities, 1)]
    target = "target H: lowpass butterworth, order 10, edge 1 kHz\n"
    return UNITY_GAIN + chain(5) + f"fix {', '.join(fixes)}\n" + ASK + target


def measured(verb: str, text: str) -> tuple[float, float]:
    """Return the medians of the time by the clock and of the processor time of a command, in seconds."""
    clock, processor = [], []
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "benchmark.stage"
        path.write_text(text, encoding="utf-8")
        for _ in range(RUNS):
            before, began = os.times(), time.monotonic()
            subprocess.run(
                [sys.executable, "-m", "symcirc", verb, str(path)], check=True, capture_output=True
            )
            clock.append(time.monotonic() - began)
            after = os.times()
            used = after.children_user + after.children_system
            processor.append(used - before.children_user - before.children_system)
    return statistics.median(clock), statistics.median(processor)


def main() -> None:
    """Print the times, each with the figure to reach where there is one."""
    works = (
        ("match, cascade of order 10", "match", cascade(), " (to reach: 3)"),
        ("order, all families", "order", MASK, " (to reach: 1)"),
        ("match, ladder of order 5", "match", LADDER, ""),
    )
    for name, verb, text, goal in works:
        clock, processor = measured(verb, text)
        print(f"{name}: {clock:.2f} s by the clock{goal}, {processor:.2f} s of processor time")


if __name__ == "__main__":
    main()
