"""Random circuits: their laws hold, sums of their laws follow, and every verdict on a changed line is the oracle's."""

from __future__ import annotations

import random

from hypothesis import Phase, assume, given, settings
from hypothesis import strategies as st

from tests.working.calling import checked
from tests.working.random_lines import Case, changed, draw_case, is_true

SEEDS = st.integers(min_value=0, max_value=100_000)
SETTINGS = settings(max_examples=15, deadline=None, derandomize=True, phases=[Phase.generate])


def usable(seed: int) -> tuple[Case, random.Random]:
    rng = random.Random(seed)
    case = draw_case(rng)
    assume(case is not None and len(case.laws) > 1)
    assert case is not None
    return case, rng


@SETTINGS
@given(SEEDS)
def test_laws_hold_sums_of_them_follow_and_the_derived_function_holds(seed: int) -> None:
    case, _ = usable(seed)
    lines = [f"under {case.ask.name}", *case.laws, *case.sums, case.answer]
    result = checked(case.text, "\n".join(lines))
    assert [line.verdict for line in result.lines] == ["holds"] * len(result.lines), result.lines
    after_the_laws = result.lines[len(case.laws) : -1]
    assert all(line.follows for line in after_the_laws), after_the_laws


@SETTINGS
@given(SEEDS)
def test_a_changed_line_is_judged_as_the_oracle_judges_it(seed: int) -> None:
    case, rng = usable(seed)
    lines = [changed(rng, rng.choice([*case.laws, *case.sums, case.answer]), case.sheet) for _ in range(6)]
    result = checked(case.text, "\n".join([f"under {case.ask.name}", *lines]))
    for line in result.lines:
        if line.equation is not None:
            assert (line.verdict == "holds") == (is_true(line, case.sheet, case.ask) is True), line


def test_most_changes_are_slips_and_are_found() -> None:
    """The test above is not empty, although in random circuits many voltages are zero or equal."""
    judged = false = 0
    for seed in range(25):
        rng = random.Random(seed)
        case = draw_case(rng)
        if case is None or not case.laws:
            continue
        lines = [changed(rng, law, case.sheet) for law in case.laws]
        for line in checked(case.text, "\n".join([f"under {case.ask.name}", *lines])).lines:
            judged += line.equation is not None
            false += line.verdict in ("fails", "carried")
    assert judged > 30
    assert false > 0.5 * judged
