"""The engine against the numeric solve on many random circuits of all kinds.

    python -m tests.benchmarks.random_trees --count 200000 [--seed 1] [--parts 14]

Prints how many gave which verdict, and every wrong one. Exit status 1 where one is wrong.
"""

from __future__ import annotations

import argparse
import sys
import time
from collections import Counter

from tests.trees.comparison import verdict
from tests.trees.samples import random_case


def main() -> int:
    parser = argparse.ArgumentParser(description="The engine against the numeric solve on random circuits.")
    parser.add_argument("--count", type=int, default=20_000, help="how many circuits")
    parser.add_argument("--seed", type=int, default=1, help="the first seed; each circuit has the next")
    parser.add_argument("--parts", type=int, default=14, help="most parts in a circuit")
    options = parser.parse_args()
    verdicts: Counter[str] = Counter()
    begun = time.perf_counter()
    for seed in range(options.seed, options.seed + options.count):
        found = verdict(*random_case(seed, options.parts), seed)
        if found.startswith("WRONG"):
            print(f"seed {seed}: {found}")
        verdicts[found.split(":")[0]] += 1
    spent = time.perf_counter() - begun
    print(
        f"{options.count} circuits of up to {options.parts} parts, seeds from {options.seed}, in {spent:.1f} s"
    )
    for word, number in verdicts.most_common():
        print(f"{number:8}  {word}")
    return 1 if verdicts["WRONG"] else 0


if __name__ == "__main__":
    sys.exit(main())
