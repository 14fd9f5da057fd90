"""The two-graph engine beside other ways to the same, in one run, by medians of processor time.

    python -m tests.benchmarks.trees [--quick]

Compared are python-flint's polynomials under fraction-free elimination, sympy's solve and its domain
matrices, graphillion's spanning trees, formulas written by hand in numpy, and the physical floor of an
expanded answer: joining as many ready strings. What is not installed is said to be absent. Then growth
curves, each point in a process of its own for its peak memory. ``--quick`` leaves out what takes more than
some seconds.
"""

from __future__ import annotations

import argparse
import importlib.util
import re
import resource
import statistics
import subprocess
import sys
import time
from collections.abc import Callable
from functools import partial
from pathlib import Path

import networkx as nx
import numpy as np
import sympy

from symcirc.trees.answer import determinants, ratio
from symcirc.trees.batch import responses
from symcirc.trees.collect import collected
from symcirc.trees.count import count
from symcirc.trees.diagram import Diagram
from symcirc.trees.expand import written
from tests.benchmarks.families import (
    Case,
    discrete_amplifier,
    finite_gain_chain,
    grid,
    ladder,
    low_pass_chain,
    resistors,
)
from tests.benchmarks.flint_elimination import ladder_determinant
from tests.benchmarks.hand import STAGES
from tests.trees.samples import symbols

FAMILIES: dict[str, Callable[[int], Case]] = {
    "ladder": ladder,
    "grid": grid,
    "low-pass chain": low_pass_chain,
    "finite-gain chain": finite_gain_chain,
    "24 transistors": lambda _: discrete_amplifier(),
}
GROWTH = [
    ("ladder", (500, 1000, 2000, 5000)),
    ("grid", (4, 5, 6, 7, 8, 9)),
    ("low-pass chain", (1, 10, 25, 50)),
    ("finite-gain chain", (1, 10, 25, 50)),
    ("24 transistors", (1,)),
]


def medians(engine: Callable[[], object], other: Callable[[], object], repeats: int) -> tuple[float, float]:
    """The median processor times of two ways in seconds, run in turn, so that a busy machine does not matter."""
    times: tuple[list[float], list[float]] = [], []
    for _ in range(repeats):
        for work, spent in zip((engine, other), times, strict=True):
            begun = time.process_time()
            work()
            spent.append(time.process_time() - begun)
    return statistics.median(times[0]), statistics.median(times[1])


def installed(module: str) -> bool:
    if importlib.util.find_spec(module):
        return True
    print(f"    {module} is absent: not compared")
    return False


def against(name: str, engine: Callable[[], object], other: Callable[[], object], repeats: int) -> None:
    ours, theirs = medians(engine, other, repeats)
    print(
        f"    {name:44} {1e3 * theirs:10.2f} ms, the engine {1e3 * ours:8.2f} ms: {theirs / ours:8.1f} times"
    )


def elimination(quick: bool) -> None:
    print("RC ladder, expanded, against elimination")
    if installed("flint"):
        for sections in (6, 8) if quick else (6, 8, 10):
            assert ladder_determinant(sections) == count(determinants(*ladder(sections)))[1]
            name = f"python-flint, Bareiss, {sections} sections"
            against(
                name, expanding(sections), partial(ladder_determinant, sections), 3 if sections > 8 else 15
            )
    for sections in (3, 4) if quick else (3, 4, 5):
        matrix, right = _nodal_equations(sections)
        unknowns = sympy.symbols(f"v1:{sections + 1}")
        solving = partial(sympy.solve, list(matrix * sympy.Matrix(unknowns) - right), unknowns)
        against(f"sympy solve, {sections} sections", expanding(sections), solving, 9)
    for sections in (4, 6) if quick else (4, 6, 7):
        matrix = _nodal_equations(sections)[0].to_DM()
        against(f"sympy domain matrix, {sections} sections", expanding(sections), matrix.charpoly, 15)


def expanding(sections: int) -> Callable[[], object]:
    return partial(ratio, *ladder(sections))


def _nodal_equations(sections: int) -> tuple[sympy.Matrix, sympy.Matrix]:
    s = sympy.Symbol("s")
    conductance = sympy.symbols(f"G1:{sections + 1}")
    capacitance = sympy.symbols(f"C1:{sections + 1}")
    matrix = sympy.zeros(sections)
    for k in range(sections):
        matrix[k, k] = conductance[k] + s * capacitance[k] + (conductance[k + 1] if k + 1 < sections else 0)
        if k:
            matrix[k, k - 1] = matrix[k - 1, k] = -conductance[k]
    right = sympy.zeros(sections, 1)
    right[0] = conductance[0] * sympy.Symbol("V_in")
    return matrix, right


def spanning_trees(quick: bool) -> None:
    print("spanning trees, counted, against graphillion")
    if not installed("graphillion"):
        return
    for name, graph in (
        ("ladder of 2 by 50 nodes", nx.ladder_graph(50)),
        ("grid of 5 by 5 nodes", nx.grid_2d_graph(5, 5)),
        ("grid of 6 by 6 nodes", nx.grid_2d_graph(6, 6)),
    )[: 2 if quick else 3]:
        case = resistors(graph)
        edges = list(graph.edges())
        assert spanning_tree_count(edges) == counting(case)[1]
        against(name, partial(counting, case), partial(spanning_tree_count, edges), 5)


def spanning_tree_count(edges: list[tuple[object, object]]) -> int:
    from graphillion import GraphSet

    GraphSet.set_universe(edges)
    return GraphSet.trees(is_spanning=True).len()


def counting(case: Case) -> tuple[int, int]:
    return count(determinants(*case))


def text_floor() -> None:
    print("an expanded answer as text, against joining as many ready strings")
    for name, case in (
        ("ladder, 10 sections", ladder(10)),
        ("ladder, 12 sections", ladder(12)),
        ("ladder, 14 sections", ladder(14)),
        ("low-pass chain, 6 stages", low_pass_chain(6)),
        ("grid, 4 by 4", grid(4)),
    ):
        diagram = collected(determinants(*case))
        products = sum(count(diagram))
        texts = both_written(diagram)
        ready = [product for text in texts for product in text.replace(" - ", " + ").split(" + ")]
        writing, joining = medians(partial(both_written, diagram), partial(" + ".join, ready), 21)
        print(
            f"    {name:28} {products:8} products: {1e9 * writing / products:6.0f} ns a product,"
            f" joining {1e9 * joining / products:6.0f} ns: {writing / joining:5.2f} times"
        )


def both_written(diagram: Diagram) -> list[str]:
    return [text for root in diagram.roots for text in written(diagram, root)]


def many_sets() -> None:
    print(
        "a million sets of part values of a 10-part stage at one frequency, against formulas by hand in numpy"
    )
    generator = np.random.default_rng(1)
    for name, case, formula in STAGES:
        values = {symbol: generator.uniform(0.5, 2, 1_000_000) for symbol in symbols(case[0])}
        diagram = determinants(*case)
        assert np.allclose(responses(diagram, values, 1.3j), formula(values, 1.3j), rtol=1e-6)
        ours, hand = medians(partial(responses, diagram, values, 1.3j), partial(formula, values, 1.3j), 9)
        print(f"    {name:36} {1e3 * ours:7.1f} ms, by hand {1e3 * hand:7.1f} ms: {ours / hand:5.2f} times")


def growth(quick: bool) -> None:
    print("growth: products under the line, states, time from circuit to count, peak memory of the process")
    for family, sizes in GROWTH:
        for size in sizes[:-1] if quick and len(sizes) > 1 else sizes:
            command = [sys.executable, "-m", "tests.benchmarks.trees", "--point", family, str(size)]
            print(subprocess.run(command, check=True, capture_output=True, text=True).stdout, end="")


def peak_memory() -> float:
    """The peak memory of this process in megabytes (getrusage would count its parent's too)."""
    status = Path("/proc/self/status")
    if status.exists():
        return int(re.search(r"VmHWM:\s*(\d+) kB", status.read_text()).group(1)) / 1024
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024


def point(family: str, size: int) -> None:
    case = FAMILIES[family](size)
    times = []
    for _ in range(3):
        begun = time.process_time()
        diagram = determinants(*case)
        _, under = count(diagram)
        times.append(time.process_time() - begun)
    memory = peak_memory()
    digits = f"{under:.3e}" if under < 10**300 else f"{len(str(under))} digits"
    print(
        f"    {family:18} {size:5}   {digits:>12}   {diagram.size:9,} states"
        f"   {1e3 * statistics.median(times):9.1f} ms   {memory:6.0f} MB"
    )


def main() -> None:
    parser = argparse.ArgumentParser(description="The two-graph engine beside other ways to the same.")
    parser.add_argument("--quick", action="store_true", help="leave out what takes more than some seconds")
    parser.add_argument("--point", nargs=2, metavar=("FAMILY", "SIZE"), help=argparse.SUPPRESS)
    options = parser.parse_args()
    if options.point:
        point(options.point[0], int(options.point[1]))
        return
    elimination(options.quick)
    spanning_trees(options.quick)
    text_floor()
    many_sets()
    growth(options.quick)


if __name__ == "__main__":
    main()
