"""Ranges of a chosen part against solving again and again at many values: a count of solutions is a count."""

import math
from dataclasses import replace

import pytest
import sympy

from symcirc.derivation import derive, pose
from symcirc.match.problem import Solutions
from symcirc.match.ranges import ranges
from symcirc.match.solve import solve
from symcirc.report.match_json import match_json
from symcirc.report.match_text import match_text
from tests.match import stages
from tests.match.sheets import designed, sheet_of
from tests.match.targets import UNITS, butterworth, problem, target

NANO = sympy.Rational(1, 10**9)
#: Factors on a part's number, none of them near a border of the cases below.
FACTORS = [sympy.Rational(k, 100) for k in (11, 52, 100, 190, 640)]


def has_solution(posed, name, factor):
    other = replace(posed, known={**posed.known, name: posed.known[name] * factor})
    return isinstance(solve(other), Solutions)


def three_poles(c1, c2, c3):
    known = {"C1": c1 * NANO, "C2": c2 * NANO, "C3": c3 * NANO}
    posed = problem(stages.three_pole_low_pass(), butterworth("low-pass", 3), "R1 R2 R3", known=known)
    return replace(posed, units={f"{kind}{n}": unit for kind, unit in UNITS.items() for n in (1, 2, 3)})


@pytest.mark.parametrize("capacitors", [(22, 68, sympy.Rational(11, 5)), (22, 10, sympy.Rational(11, 5))])
def test_inside_a_range_there_is_a_solution_and_outside_there_is_none(capacitors):
    posed = three_poles(*capacitors)
    found = ranges(posed)
    assert [r.part for r in found] == ["C1", "C2", "C3"]
    for one in found:
        number = float(posed.known[one.part])
        for factor in FACTORS:
            inside = any(low < number * float(factor) < high for low, high in one.intervals)
            assert has_solution(posed, one.part, factor) == inside, (one, factor)


def test_a_border_is_met_to_nine_digits_from_either_side():
    posed = three_poles(22, 68, sympy.Rational(11, 5))
    borders = {r.part: b for r in ranges(posed) for i in r.intervals for b in i if 0 < b < math.inf}
    assert set(borders) == {"C1", "C2", "C3"}
    for name, border in borders.items():
        factor = sympy.Rational(border) / posed.known[name]
        step = sympy.Rational(1, 10**9)
        sides = [has_solution(posed, name, factor * (1 + sign * step)) for sign in (1, -1)]
        assert sorted(sides) == [False, True]


def test_ranges_scale_with_the_impedance_of_the_stage():
    """Ten times all capacitors is a tenth of all resistors: ranges scale alike (impedance scaling, any textbook)."""
    small, large = ranges(three_poles(22, 68, 2)), ranges(three_poles(220, 680, 20))
    for one, other in zip(small, large, strict=True):
        scaled = [(10 * low, 10 * high) for low, high in one.intervals]
        for ours, theirs in zip(scaled, other.intervals, strict=True):
            assert ours == pytest.approx(theirs, rel=1e-12)


def test_stages_of_two_poles_have_formulas_and_no_ranges():
    known = {"C1": 22 * NANO, "C2": 10 * NANO}
    posed = problem(stages.unity_gain_low_pass(), butterworth("low-pass", 2), "R1 R2", known=known)
    assert ranges(replace(posed, units={"C1": "F", "C2": "F", "R1": "ohm", "R2": "ohm"})) == ()


THREE_POLE_SHEET = """
in -- R1 -- a -- R2 -- b -- R3 -- p -- C3 -- gnd
a -- C1 -- gnd
b -- C2 -- out
U1 opamp: plus p, minus out, drives out
ask H = V_out/V_in
"""


def test_text_and_json_tell_the_range_and_the_preferred_values_in_it():
    text = (
        THREE_POLE_SHEET
        + "fix C1 = 22n, C2 = 68n, C3 = 2n2\ntarget H: lowpass butterworth, order 3, edge 1.2 kHz\n"
    )
    found = designed(text)
    lines = list(match_text(found))
    assert "  C3 up to 4.6365 nF (E12: up to 3.9 nF)" in lines
    entries = {entry["part"]: entry["intervals"] for entry in match_json(found)["ranges"]}
    assert entries["C3"] == [[0.0, pytest.approx(4.636459e-9, rel=1e-6)]]
    assert entries["C1"][0][1] is None


def test_the_series_that_the_sheet_names_is_the_one_that_is_told():
    text = THREE_POLE_SHEET + "fix C1 = 22n, C2 = 68n, C3 = 2n2\nparts C: E3 10 %\n"
    lines = "\n".join(match_text(designed(text + "target H: lowpass butterworth, order 3, edge 1.2 kHz\n")))
    assert "C3 up to 4.6365 nF (E3: up to 2.2 nF)" in lines


def test_numbers_that_allow_no_solution_are_told_with_the_ranges_that_would():
    text = THREE_POLE_SHEET + "fix C1 = 22n, C2 = 10n, C3 = 2n2\n"
    found = designed(text + "target H: lowpass chebyshev, order 3, ripple 0.5 dB, edge 1.2 kHz\n")
    assert found.solutions == ()
    lines = "\n".join(match_text(found))
    assert "with the rest as given it would be real and positive for" in lines
    (value,) = {r.intervals[-1][1] for r in found.ranges if r.part == "C3"}
    met = designed(
        THREE_POLE_SHEET
        + f"fix C1 = 22n, C2 = 10n, C3 = {0.99 * value}\n"
        + "target H: lowpass chebyshev, order 3, ripple 0.5 dB, edge 1.2 kHz\n"
    )
    assert met.solutions


def test_a_four_pole_ladder_has_ranges_for_its_terminations():
    """Source, L1, C1, L2, C2 and load: equations of degree 8, the other parts at their numbers."""
    text = """
in -- R1 -- a -- L1 -- b -- L2 -- out -- C2 -- gnd
b -- C1 -- gnd
out -- R2 -- gnd
ask H = V_out/V_in
"""
    function = derive(pose(sheet_of(text))).answer("H").function
    below = (1, sympy.Rational(26, 10), sympy.Rational(344, 100), sympy.Rational(26, 10), 1)
    known = {"R1": sympy.Rational(1, 2), "R2": 1}
    posed = problem(function, target("low-pass", below), "L1 L2 C1 C2", gain="free", known=known)
    posed = replace(posed, units={"R1": "ohm", "R2": "ohm"})
    found = {r.part: r.intervals for r in ranges(posed)}
    assert set(found) == {"R1", "R2"}
    ((low, high),) = found["R1"]
    assert low == 0
    assert found["R2"] == (
        (pytest.approx(0.5 / high, rel=1e-12), math.inf),
    )  # only R1/R2 matters: impedance scaling
    for factor, expected in ((sympy.Rational(9, 10), True), (sympy.Rational(11, 10), False)):
        assert has_solution(posed, "R1", factor * sympy.Rational(high) / known["R1"]) == expected
