"""The search against a loop of its own over the same values, with textbook formulas in plain Python numbers."""

from __future__ import annotations

import itertools
from collections import Counter
from math import inf, log10, pi, sqrt

import numpy as np
import pytest
from scipy import signal

from symcirc.values.band import band, response
from symcirc.values.departure import LevelDeparture
from symcirc.values.find import Options, find_values
from symcirc.values.search import BLOCK
from symcirc.values.series import decade
from tests.values.stages import ALL_PASS, LOW_PASS, all_pass_by_hand, low_pass_by_hand, sheet

EDGE = 2 * pi * 1200
#: Frequencies of the comparison: the pass band, dense enough for the worst departure to four digits.
GRID = [0.0, *np.geomspace(EDGE / 1000, EDGE, 400)]


def butterworth(s):
    p = s / EDGE
    return 1 / (p * p + sqrt(2) * p + 1)


def departure(values):
    levels = [20 * log10(abs(low_pass_by_hand(values, 1j * w) / butterworth(1j * w))) for w in GRID]
    return max(map(abs, levels))


def around(series, exact, reach):
    """Return the values of a series around an exact one, from the nearest by ratio on."""
    ladder = [float(m) * 10.0**p for p in range(-12, 9) for m in decade(series)]
    nearest = min(range(len(ladder)), key=lambda k: abs(log10(ladder[k] / exact)))
    return ladder[nearest - reach : nearest + reach + 1]


def exact_resistors(c1, c2):
    """Return both sets of resistors for unity gain, R1 = R2, from the two coefficients of the denominator."""
    a, b = 1 / EDGE**2, sqrt(2) / EDGE  # a = C1 C2 R2 R3, b = C2 (R2 + 2 R3)
    root = b * b - 8 * a * c2 / c1
    if root < 0:
        return []
    return [(r2, r2, a / (c1 * c2 * r2)) for r2 in ((b + sign * sqrt(root)) / (2 * c2) for sign in (1, -1))]


def by_hand(capacitors, series, reach):
    """Return all sets with their departures, best first."""
    found = {}
    for c1, c2 in capacitors:
        for exact in exact_resistors(c1, c2):
            for r in itertools.product(*(around(series, value, reach) for value in exact)):
                values = {"R1": r[0], "R2": r[1], "R3": r[2], "C1": c1, "C2": c2}
                found[tuple(f"{v:.6g}" for v in values.values())] = values
    return sorted(((departure(values), values) for values in found.values()), key=lambda entry: entry[0])


def preferred(chosen):
    return {name: float(choice.value) for name, choice in chosen.preferred.items()}


def test_with_capacitors_fixed_the_ranking_is_that_of_a_loop_by_hand():
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E24"
    found = find_values(sheet(text), None, Options(best=12, reach=2))
    expected = by_hand([(22e-9, 2.2e-9)], "E24", 2)
    assert found.complete
    assert found.searched == found.size == 2 * 5**3
    for chosen, (worst, values) in zip(found.sets, expected, strict=False):
        assert chosen.departure == pytest.approx(worst, rel=1e-3)
        assert departure({**values, **preferred(chosen)}) == pytest.approx(worst, rel=1e-6)


def test_chosen_capacitors_take_every_value_and_the_resistors_follow():
    text = LOW_PASS + "choose C1, C2\nparts R: E12\nparts C: E3, from 1 nF to 47 nF"
    found = find_values(sheet(text), None, Options(best=5, reach=1))
    ladder = [1e-9, 2.2e-9, 4.7e-9, 10e-9, 22e-9, 47e-9]
    pairs = list(itertools.product(ladder, repeat=2))
    assert found.combinations == 36
    assert found.centres == sum(len(exact_resistors(*pair)) for pair in pairs)
    expected = by_hand(pairs, "E12", 1)
    assert [c.departure for c in found.sets] == pytest.approx([worst for worst, _ in expected[:5]], rel=1e-3)
    best = preferred(found.sets[0])
    assert found.sets[0].exact["C1"] == best["C1"]
    r1, _, r3 = min(
        exact_resistors(best["C1"], best["C2"]), key=lambda exact: abs(log10(exact[0] / best["R1"]))
    )
    assert (found.sets[0].exact["R1"], found.sets[0].exact["R3"]) == pytest.approx((r1, r3), rel=1e-9)


def test_together_moves_what_is_fixed_around_its_number():
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E12\nparts C: E6"
    found = find_values(sheet(text), None, Options(best=1, reach=1, together=True))
    assert found.size == 2 * 3**5
    sets = []
    for exact in exact_resistors(22e-9, 2.2e-9):
        windows = [around("E12", value, 1) for value in exact]
        windows += [around("E6", 22e-9, 1), around("E6", 2.2e-9, 1)]
        for values in itertools.product(*windows):
            sets.append(departure(dict(zip(("R1", "R2", "R3", "C1", "C2"), values, strict=True))))
    assert found.sets[0].departure == pytest.approx(min(sets), rel=1e-3)
    assert found.sets[0].exact["C1"] == pytest.approx(22e-9)


def test_blocks_that_split_an_axis_leave_no_set_out():
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E96"
    found = find_values(sheet(text), None, Options(best=3, reach=10))
    assert found.size == 2 * 21**3 > BLOCK
    assert found.searched == found.size
    c1, c2 = 22e-9, 2.2e-9
    axes = [np.array(around("E96", value, 10)) for value in exact_resistors(c1, c2)[0]]
    r1, r2, r3 = np.meshgrid(*axes, indexing="ij")
    worst = np.zeros(r1.shape)
    for w in GRID[::4]:
        values = {"R1": r1, "R2": r2, "R3": r3, "C1": c1, "C2": c2}
        level = np.abs(low_pass_by_hand(values, 1j * w) / butterworth(1j * w))
        worst = np.maximum(worst, np.abs(20 * np.log10(level)))
    assert found.sets[0].departure <= worst.min() * 1.002


def test_no_more_sets_than_were_kept_depart_by_less_than_what_is_said_of_the_rest():
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E48"
    found = find_values(sheet(text), None, Options(best=10, reach=4))
    everything = by_hand([(22e-9, 2.2e-9)], "E48", 4)
    assert len(everything) == found.size == 2 * 9**3
    assert found.left_out is not None
    below = [worst for worst, _ in everything if worst < found.left_out * 0.999]
    assert len(found.sets) < len(below) <= 500
    assert found.sets[-1].departure < found.left_out
    assert [c.departure for c in found.sets] == pytest.approx(below[:10], rel=1e-3)


def test_a_score_at_few_frequencies_is_never_above_that_at_all():
    generator = np.random.default_rng(7)
    b, a = signal.butter(4, 1.0, analog=True)
    target = response(list(b[::-1]), list(a[::-1]))
    compared = band(target, 1.0)
    assert set(compared.search_points) <= set(compared.points)
    moved = [c * generator.uniform(0.9, 1.1, 50) for c in a[::-1]]
    powers = ([0], [0, 1, 2, 3, 4])
    for free in (False, True):
        few, many = (
            LevelDeparture(target, points, powers, free)
            for points in (compared.search_points, compared.points)
        )
        over = [generator.uniform(0.9, 1.1, 50)]
        assert np.all(few.score(over, moved, (50,)) <= many.score(over, moved, (50,)) * (1 + 1e-12))


def test_a_free_gain_is_no_departure():
    text = (
        LOW_PASS.replace(", gain 1", "") + "choose R1\nfix C1 = 22 nF, C2 = 2n2\nparts R: E12, from 1k to 10k"
    )
    found = find_values(sheet(text), None, Options(best=1, reach=1))
    values = {**preferred(found.sets[0]), "C1": 22e-9, "C2": 2.2e-9}
    levels = [20 * log10(abs(low_pass_by_hand(values, 1j * w) / butterworth(1j * w))) for w in GRID]
    assert found.sets[0].departure == pytest.approx((max(levels) - min(levels)) / 2, rel=1e-3)


def test_an_all_pass_is_ranked_by_its_phasor():
    text = ALL_PASS + "choose R1\nfix C1 = 10 nF\nparts R: E24, from 10k to 20k"
    found = find_values(sheet(text), None, Options(best=3, reach=2))
    tau = 1 / (2 * pi * 1000)
    departures = []
    for chosen in found.sets:
        values = {**preferred(chosen), "C1": 10e-9}
        ratios = [
            all_pass_by_hand(values, s) / all_pass_by_hand(values, 0) * (1 + s * tau) / (1 - s * tau)
            for s in 1j * np.geomspace(10, 1e6, 3000)
        ]
        departures.append(20 * log10(1 + max(abs(ratio - 1) for ratio in ratios)))
    assert [c.departure for c in found.sets] == pytest.approx(departures, rel=2e-3)
    assert departures == sorted(departures)


def test_pairs_come_nearer_than_single_values():
    fixed = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E12, from 1k to 1M"
    single, pairs = (
        find_values(sheet(fixed + words), None, Options(best=1, reach=2)).sets[0] for words in ("", ", pairs")
    )
    assert pairs.departure < single.departure / 20
    for choice in pairs.preferred.values():
        one, *other = choice.pieces
        total = sum(choice.pieces)
        assert choice.value == (total if choice.joined != "parallel" else one * other[0] / total)


def test_a_set_takes_no_more_pieces_than_there_are(tmp_path):
    stock = {"10 kohm": 1, "12 kohm": 2, "22 kohm": 1, "27 kohm": 1, "33 kohm": 2, "39 kohm": 1}
    rows = "".join(f"{value},{count}\n" for value, count in stock.items())
    (tmp_path / "drawer.csv").write_text("value,count\n" + rows, encoding="utf-8")
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: stock drawer.csv"
    found = find_values(sheet(text, tmp_path / "a.stage"), None, Options(best=300, reach=9))
    counts = {float(value.split()[0]) * 1000: count for value, count in stock.items()}
    sets = set()
    for r in itertools.product(counts, repeat=3):
        if all(Counter(r)[value] <= counts[value] for value in r):
            sets.add(r)
    assert {tuple(preferred(c)[name] for name in ("R1", "R2", "R3")) for c in found.sets} == sets
    best = min(
        sets, key=lambda r: departure(dict(zip(("R1", "R2", "R3"), r, strict=True), C1=22e-9, C2=2.2e-9))
    )
    assert tuple(preferred(found.sets[0])[name] for name in ("R1", "R2", "R3")) == best


def test_a_pair_and_a_tied_part_take_pieces_as_well(tmp_path):
    (tmp_path / "drawer.csv").write_text("value,count\n10 kohm,3\n15 kohm,2\n", encoding="utf-8")
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2, R2 = R1\nparts R: stock drawer.csv, pairs"
    found = find_values(sheet(text, tmp_path / "a.stage"), None, Options(best=300, reach=9))
    assert found.sets
    for chosen in found.sets:
        taken = Counter(chosen.preferred["R1"].pieces * 2 + chosen.preferred["R3"].pieces)
        assert taken[10_000] <= 3
        assert taken[15_000] <= 2


def test_shifts_spread_and_capacitance_are_those_of_the_set():
    text = LOW_PASS + "fix C1 = 22 nF, C2 = 2n2\nparts R: E96"
    chosen = find_values(sheet(text), None, Options(best=1)).sets[0]
    v = {**preferred(chosen), "C1": 22e-9, "C2": 2.2e-9}
    w0 = 1 / sqrt(v["C1"] * v["C2"] * v["R2"] * v["R3"])
    q = 1 / (w0 * v["C2"] * (v["R2"] + v["R3"] + v["R2"] * v["R3"] / v["R1"]))
    (shift,) = chosen.shifts
    assert shift.f0_shift == pytest.approx(w0 / EDGE - 1, abs=1e-9)
    assert shift.q_shift == pytest.approx(q * sqrt(2) - 1, abs=1e-9)
    resistors = [v["R1"], v["R2"], v["R3"]]
    assert chosen.spread == pytest.approx({"R": max(resistors) / min(resistors), "C": 10})
    assert chosen.capacitance == pytest.approx(24.2e-9)


def test_ctrl_c_gives_the_best_of_what_was_searched():
    text = LOW_PASS + "choose C1, C2\nparts R: E24\nparts C: E6, from 1 nF to 100 nF"
    lines = []

    def stop_at_the_third(line):
        lines.append(line)
        if sum("searched" in line for line in lines) == 3:
            raise KeyboardInterrupt

    found = find_values(sheet(text), None, Options(best=3, reach=3), stop_at_the_third)
    assert not found.complete
    assert 0 < found.searched < found.size
    assert "sets searched, about" in lines[-1]
    whole = find_values(sheet(text), None, Options(best=3, reach=3))
    assert whole.complete
    assert found.sets[0].departure >= whole.sets[0].departure
    assert found.sets[0].departure < inf


def test_a_cascade_is_searched_whole():
    text = """
    in -- R1 -- a -- C1 -- gnd
    U1 opamp: plus a, minus b, drives b
    b -- R2 -- c -- R3 -- d -- C3 -- gnd
    c -- C2 -- out
    U2 opamp: plus d, minus out, drives out
    fix C1 = 10 nF, C2 = 22 nF, C3 = 4n7
    ask H = V_out/V_in
    target H: lowpass butterworth, order 3, edge 1 kHz
    parts R: E24
    """
    found = find_values(sheet(text), None, Options(best=1, reach=2))
    v = preferred(found.sets[0])
    b, a = signal.butter(3, 2 * pi * 1000, analog=True)
    w = np.geomspace(10, 2 * pi * 1000, 800)
    _, target = signal.freqs(b, a, w)
    s = 1j * w
    c1, c2, c3 = 10e-9, 22e-9, 4.7e-9
    stage = 1 / (s * s * v["R2"] * v["R3"] * c2 * c3 + s * c3 * (v["R2"] + v["R3"]) + 1)
    levels = 20 * np.log10(np.abs(stage / (1 + s * v["R1"] * c1) / target))
    assert found.sets[0].departure == pytest.approx((levels.max() - min(levels.min(), 0)) / 2, rel=5e-3)
    assert len(found.sets[0].shifts) == 2


def distance(values, exact):
    return sum(abs(log10(values[name] / exact[name])) for name in ("R1", "R2", "R3"))


def test_a_set_in_reach_of_two_exact_sets_is_told_from_the_nearer_one():
    text = LOW_PASS + "fix C1 = 9 nF, C2 = 2.2 nF\nparts R: E96"
    exacts = [dict(zip(("R1", "R2", "R3"), r, strict=True)) for r in exact_resistors(9e-9, 2.2e-9)]
    assert exacts[0]["R1"] / exacts[1]["R1"] < 1.4
    taken = set()
    for chosen in find_values(sheet(text), None, Options(best=20, reach=20)).sets:
        distances = [distance(preferred(chosen), exact) for exact in exacts]
        nearest = exacts[distances.index(min(distances))]
        assert {name: chosen.exact[name] for name in nearest} == pytest.approx(nearest, rel=1e-6)
        taken.add(exacts.index(nearest))
    assert taken == {0, 1}


def test_only_capacitors_are_searched_where_a_gain_takes_the_rest():
    text = """
    in -- R1 -- a -- C1 -- gnd
    E1 vcvs: senses a, drives out, gain k
    fix R1 = 10 kohm
    choose k
    ask H = V_out/V_in
    target H: lowpass butterworth, order 1, edge 1 kHz
    parts C: E6
    """
    found = find_values(sheet(text + "fix k = 3"), None, Options(best=1, reach=1))
    assert preferred(found.sets[0]) == {"C1": 15e-9}


def test_chosen_parts_alone_are_searched_with_a_parameter_held():
    text = """
    in -- R1 -- a -- R2 -- gnd
    a -- C1 -- gnd
    E1 vcvs: senses a, drives out, gain k
    solve k
    fix R2 = R1
    choose C1
    ask H = V_out/V_in
    target H: lowpass butterworth, order 1, edge 1 kHz, gain 4
    parts C: E3, from 1 nF to 10 nF
    parts R: E12
    """
    found = find_values(sheet(text), None, Options(best=9, reach=1))
    assert {preferred(chosen)["C1"] for chosen in found.sets} <= {1e-9, 2.2e-9, 4.7e-9, 10e-9}
    assert {round(chosen.held["k"], 9) for chosen in found.sets} == {8, -8}  # a family's gain has no sign
