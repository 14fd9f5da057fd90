"""How well the search for slips does: one random slip in a line of a true working, and what is suggested for it.

    python -m tests.benchmarks.slips --count 5000 --seed 1

A planted line that is true all the same is dropped. Counted: lines judged false, true lines judged false, the
original among the suggestions and first; and the time of a working.
"""

from __future__ import annotations

import argparse
import random
import statistics
import time
from collections import Counter

from tests.slips.planting import KINDS
from tests.slips.truths import Truth, workings

#: Random sheets that are drawn for workings.
RANDOM_SHEETS = 120


def main() -> None:
    """Print the figures."""
    words = argparse.ArgumentParser()
    words.add_argument("--count", type=int, default=5000)
    words.add_argument("--seed", type=int, default=1)
    words.add_argument(
        "--show", type=int, default=0, help="print so many of the lines whose original is not first"
    )
    arguments = words.parse_args()
    rng = random.Random(arguments.seed)
    truths = [Truth(sheet, working) for sheet, working in workings(arguments.seed, RANDOM_SHEETS)]
    tally: Counter[str] = Counter()
    tally["true lines judged false"] = sum(
        line.verdict in ("fails", "carried") for truth in truths for line in truth.checked.lines
    )
    ranks: Counter[tuple[str, int]] = Counter()
    times: list[float] = []
    while len(times) < arguments.count:
        truth = rng.choice(truths)
        plant = truth.plant(rng)
        if plant is None:
            continue
        begin = time.perf_counter()
        result = truth.mended(plant)
        spent = time.perf_counter() - begin
        line = next(one for one in result.lines if one.line == plant.line.line)
        tally[f"planted lines: {line.verdict}"] += 1
        if line.verdict not in ("fails", "carried"):
            continue
        times.append(spent)
        others = (one for one in result.lines if one.line != line.line)
        tally["true lines judged false"] += sum(one.verdict in ("fails", "carried") for one in others)
        same = [truth.says_the_same(plant.line, suggestion) for suggestion in line.suggestions]
        rank = same.index(True) + 1 if True in same else 0
        ranks[plant.kind, rank] += 1
        if rank != 1 and arguments.show > 0:
            arguments.show -= 1
            print(f"--- {plant.kind} (rank {rank})\n  was  {plant.line.text}\n  now  {plant.text}")
            print("\n".join(f"       {suggestion}" for suggestion in line.suggestions))
    print(f"{len(truths)} workings; {dict(tally)}")
    print(_row("all kinds", ranks, list(KINDS)))
    for kind in KINDS:
        print(_row(kind, ranks, [kind]))
    print(f"time a working: median {statistics.median(times):.3f} s, worst {max(times):.2f} s")


def _row(name: str, ranks: Counter[tuple[str, int]], kinds: list[str]) -> str:
    found = [sum(ranks[kind, rank] for kind in kinds) for rank in range(4)]
    whole = sum(found) or 1
    return f"{name:20} {sum(found):5}  first {found[1] / whole:6.1%}  among the three {1 - found[0] / whole:6.1%}"


if __name__ == "__main__":
    main()
