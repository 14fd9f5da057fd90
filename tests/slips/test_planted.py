"""Slips planted at random: each is judged false, no true line is, and what is suggested holds."""

from __future__ import annotations

import random

import pytest

from tests.slips.truths import Truth, workings

TRUTHS = [Truth(sheet, working) for sheet, working in workings(7, 0)]


@pytest.mark.parametrize("seed", range(4))
def test_a_planted_slip_is_false_alone_and_its_mends_hold(seed: int) -> None:
    rng = random.Random(seed)
    done = 0
    while done < 6:
        truth = rng.choice(TRUTHS)
        plant = truth.plant(rng)
        if plant is None:
            continue
        result = truth.mended(plant)
        line = next(one for one in result.lines if one.line == plant.line.line)
        if line.verdict not in ("fails", "carried"):
            continue  # true all the same, or no equation any more
        done += 1
        others = [one.verdict for one in result.lines if one.line != line.line]
        assert not {"fails", "carried"} & set(others), plant
        for suggestion in line.suggestions:
            again = Truth.mended(truth, type(plant)(plant.line, plant.kind, suggestion))
            assert {one.verdict for one in again.lines} <= {"holds", "defines"}, (plant, suggestion)


def test_most_planted_slips_are_found() -> None:
    rng = random.Random(11)
    ranks = []
    while len(ranks) < 40:
        truth = rng.choice(TRUTHS)
        plant = truth.plant(rng)
        line = None
        if plant is not None:
            lines = truth.mended(plant).lines
            line = next(one for one in lines if one.line == plant.line.line)
        if plant is None or line is None or line.verdict not in ("fails", "carried"):
            continue
        ranks.append([truth.says_the_same(plant.line, s) for s in line.suggestions[:3]])
    assert sum(any(same) for same in ranks) >= 0.95 * len(ranks)
    assert sum(same[:1] == [True] for same in ranks) >= 0.85 * len(ranks)
