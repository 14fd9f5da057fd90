"""Odd masks: the right order, or a complaint that says which limit cannot be met. The masks are our own."""

from __future__ import annotations

import json
import math
from itertools import pairwise

import pytest
import sympy
from scipy import signal

from symcirc.complaints import Complaint, Source
from symcirc.goal import build_goal
from symcirc.masks.mask import kind_of
from symcirc.masks.order import exact_curve, select
from symcirc.responses import FAMILIES
from symcirc.sheet import read_sheet
from tests.calling import EXAMPLES, call, run

from .masks import CIRCUIT, mask, sheet_text


def orders(*limits: str) -> dict[str, int]:
    return {row.candidate.family + row.candidate.words: row.order for row in select(mask(*limits)).rows}


def complaint(*limits: str) -> Complaint:
    with pytest.raises(Complaint) as refusal:
        select(mask(*limits))
    assert refusal.value.mend
    return refusal.value


def test_a_narrow_band_pass_takes_a_few_poles_of_high_q() -> None:
    # 1 % wide, stopped 4 % away on either side: the prototype's ratio is 8, so Butterworth takes
    # log(9999/0.2589)/(2 log 8) = 2.54.
    selection = select(
        mask(
            "loss >= 40 dB below 960 Hz",
            "loss <= 1 dB from 995 Hz to 1005 Hz",
            "loss >= 40 dB above 1.0417 kHz",
        )
    )
    by_family = {row.candidate.family: row for row in selection.rows}
    assert selection.kind == "bandpass"
    assert by_family["butterworth"].order == 3
    assert by_family["butterworth"].highest_q > 50


def test_of_two_stop_bands_of_different_depth_the_one_that_is_harder_decides() -> None:
    # Butterworth with 1 dB to 1 kHz: 20 dB at 3 kHz takes 2.71, 60 dB at 20 kHz takes 2.53 and 60 dB at 5 kHz 4.71.
    passing = "loss <= 1 dB below 1 kHz"
    near, far = "loss >= 20 dB above 3 kHz", "loss >= 60 dB above 20 kHz"
    assert orders(passing, near)["butterworth"] == 3
    assert orders(passing, far)["butterworth"] == 3
    assert orders(passing, near, far)["butterworth"] == 3
    assert orders(passing, near, "loss >= 60 dB above 5 kHz")["butterworth"] == 5


def test_no_other_centre_and_bandwidth_meets_a_lopsided_band_pass_with_fewer_poles() -> None:
    passing = ((1.0, 900, 1200), (3.0, 800, 1150))
    limits = ["loss >= 60 dB below 300 Hz", "loss >= 25 dB above 1.7 kHz"]
    limits += [f"loss <= {loss} dB from {low} Hz to {high} Hz" for loss, low, high in passing]
    row = next(row for row in select(mask(*limits)).rows if row.candidate.family == "butterworth")
    assert row.placing.spot.centre != pytest.approx(2 * math.pi * math.sqrt(800 * 1150), rel=1e-3)
    assert row.placing.spot.centre != pytest.approx(2 * math.pi * math.sqrt(900 * 1200), rel=1e-3)
    for one_less in range(1, row.order):
        curve = exact_curve(FAMILIES["butterworth"].build(one_less))
        for k in range(1000):
            centre = 700 + k
            width = max(
                abs(f * f - centre**2) / f / curve.first_above(loss)
                for loss, *edges in passing
                for f in edges
            )
            lower, upper = (abs(f * f - centre**2) / (f * width) for f in (300, 1700))
            assert curve.loss(lower) < 60 or curve.loss(upper) < 25


def test_a_mask_beyond_order_20_is_refused_at_the_limit_with_the_loss_that_can_be_had() -> None:
    found = complaint("loss <= 1 dB below 900 Hz", "loss >= 90 dB above 901 Hz")
    assert found.place.line == 4
    assert "this limit cannot be met: with loss <= 1 dB below 900 Hz (line 3)" in found.cause
    assert "the best reaches 34.5 dB" in found.cause


@pytest.mark.parametrize(
    ("limits", "line", "words"),
    [
        (
            ("loss <= 1 dB below 2 kHz", "loss >= 40 dB above 1.5 kHz"),
            4,
            "contradicts the one on line 3: from 1.5 kHz to 2 kHz the loss would be at most 1 dB and at least 40 dB",
        ),
        (
            ("loss <= 1 dB below 2 kHz", "loss >= 40 dB above 2 kHz"),
            4,
            "contradicts the one on line 3: at 2 kHz",
        ),
        (("loss <= 1 dB below 2 kHz", "loss <= 3 dB below 4 kHz"), 3, "nothing must be stopped"),
        (("loss >= 40 dB above 2 kHz",), 3, "nothing must pass"),
        (("loss <= 0 dB below 2 kHz", "loss >= 40 dB above 9 kHz"), 3, "no response keeps this loss"),
        (("loss <= 1 dB below 2 kHz", "loss >= 0 dB above 9 kHz"), 4, "this loss is no limit"),
        (
            ("loss <= 3 dB below 2 kHz", "loss >= 2 dB above 9 kHz"),
            4,
            "no more than every pass band may have",
        ),
        (
            (
                "loss <= 1 dB below 1 kHz",
                "loss >= 20 dB from 2 kHz to 3 kHz",
                "loss <= 1 dB from 5 kHz to 6 kHz",
                "loss >= 20 dB above 9 kHz",
            ),
            6,
            "alternate more often",
        ),
    ],
)
def test_a_mask_that_is_none_is_refused_where_it_goes_wrong(
    limits: tuple[str, ...], line: int, words: str
) -> None:
    found = complaint(*limits)
    assert found.place.line == line
    assert words in found.cause


def test_a_pass_band_down_to_0_and_one_up_to_infinity_make_low_pass_high_pass_and_band_stop() -> None:
    assert kind_of(mask("loss <= 1 dB below 2 kHz", "loss >= 40 dB above 9 kHz")) == "lowpass"
    assert kind_of(mask("loss <= 1 dB above 9 kHz", "loss >= 40 dB below 2 kHz")) == "highpass"
    notch = ("loss <= 1 dB below 40 Hz", "loss >= 30 dB from 49 Hz to 51 Hz", "loss <= 1 dB above 62 Hz")
    assert kind_of(mask(*notch)) == "bandstop"


def test_a_stop_band_with_an_end_and_a_tolerated_slope_between_are_no_trouble() -> None:
    # A second, looser pass limit reaches further than the first; the stop band ends.
    limits = (
        "loss <= 1 dB below 2 kHz",
        "loss <= 6 dB from 2 kHz to 3 kHz",
        "loss >= 40 dB from 9 kHz to 90 kHz",
    )
    found = orders(*limits)
    # Butterworth: from 6 dB (2.98 above 1) at 3 kHz to 40 dB at 9 kHz takes log(9999/2.981)/(2 log 3) = 3.70.
    assert found["butterworth"] == 4
    assert found["elliptic, ripple 1 dB, stop 40 dB"] == 3


def test_a_limit_beyond_200_db_leaves_out_the_families_that_cannot_have_it() -> None:
    selection = select(mask("loss <= 1 dB below 1 kHz", "loss >= 210 dB above 100 kHz"))
    assert {f.candidate.family for f in selection.failures if "at most 200 dB" in f.reason} == {
        "inverse chebyshev",
        "elliptic",
    }
    assert {row.candidate.family: row.order for row in selection.rows}["butterworth"] == 6


def test_a_steep_mask_of_120_db_is_met_by_the_order_that_the_reference_library_finds() -> None:
    limits = ("loss <= 0.01 dB below 10 kHz", "loss >= 120 dB above 10.5 kHz")
    order, _ = signal.ellipord(2 * math.pi * 1e4, 2 * math.pi * 1.05e4, 0.01, 120, analog=True)
    assert orders(*limits) == {"elliptic, ripple 0.01 dB, stop 120 dB": order}


def test_every_row_meets_its_mask_and_one_order_less_does_not() -> None:
    wanted = mask("loss <= 0.5 dB below 3 kHz", "loss >= 50 dB above 11 kHz")
    for row in select(wanted).rows:
        assert row.pass_loss_db <= 0.5 + 1e-6
        assert row.stop_loss_db >= 50 - 1e-6
        for order in range(1, row.order):
            curve = exact_curve(FAMILIES[row.candidate.family].build(order, *row.candidate.numbers))
            assert 11 / curve.last_below(50.0) < 3 / curve.first_above(0.5)


def test_more_poles_can_need_a_wider_gap_and_the_least_order_is_found_all_the_same() -> None:
    # Legendre's even and odd orders take turns: a gap is wide enough for an order, and too narrow for the next.
    gaps = []
    for order in range(1, 21):
        curve = exact_curve(FAMILIES["legendre"].build(order))
        gaps.append(curve.last_below(20.0) / curve.first_above(0.1))
    place = next(k for k, (a, b) in enumerate(pairwise(gaps)) if b > a)
    limits = ("loss <= 0.1 dB below 1 kHz", f"loss >= 20 dB above {gaps[place] * 1.0001!r} kHz")
    assert orders(*limits)["legendre"] == place + 1


def test_meet_limits_takes_the_least_order_at_the_edge_that_is_given() -> None:
    text = sheet_text("loss <= 1 dB below 1.5 kHz", "loss >= 40 dB above 9 kHz")
    for edge, order in (("1.9 kHz", 3), ("2.4 kHz", 4)):  # 1 + (9/2.4)^2n is 1e4 at n = 3.48
        sheet = read_sheet(
            Source("m.stage", text + f"target H: lowpass butterworth, meet limits, edge {edge}\n")
        )
        goal = build_goal(sheet, sheet.targets[0])
        assert (goal.order, len(goal.denominator) - 1) == (order, order)


def test_meet_limits_at_an_edge_that_no_order_suits_is_refused_at_the_limit() -> None:
    text = sheet_text("loss <= 1 dB below 1.5 kHz", "loss >= 40 dB above 9 kHz")
    sheet = read_sheet(Source("m.stage", text + "target H: lowpass butterworth, meet limits, edge 1.2 kHz\n"))
    with pytest.raises(Complaint, match="no order up to 20 of this target meets the limits") as refusal:
        build_goal(sheet, sheet.targets[0])
    assert "order 2 comes nearest, and has a loss of 35 dB here" in refusal.value.cause
    assert refusal.value.place.line == 4


def test_meet_limits_wants_numbers_and_a_response_with_loss() -> None:
    text = sheet_text("loss <= 1 dB below 1.5 kHz", "loss >= 40 dB above 9 kHz") + "choose f1\n"
    for target, words in (
        ("lowpass bessel, meet limits, edge f1", "needs numbers, and f1 has none"),
        ("allpass bessel, meet limits, edge 1 kHz", "an all-pass has no loss"),
    ):
        sheet = read_sheet(Source("m.stage", text + f"target H: {target}\n"))
        with pytest.raises(Complaint, match=words):
            build_goal(sheet, sheet.targets[0])


MASKS = (
    ("loss <= 1 dB below 2 kHz", "loss >= 40 dB above 9 kHz"),
    ("loss <= 1 dB above 2 kHz", "loss >= 30 dB below 900 Hz"),
    ("loss <= 1 dB from 900 Hz to 1.1 kHz", "loss >= 40 dB below 600 Hz", "loss >= 30 dB above 1.9 kHz"),
    ("loss <= 1 dB below 40 Hz", "loss >= 30 dB from 49 Hz to 51 Hz", "loss <= 1 dB above 62 Hz"),
)


@pytest.mark.parametrize("limits", MASKS)
def test_the_printed_target_of_every_family_meets_the_limits_with_its_order(limits, capsys, tmp_path) -> None:
    path = tmp_path / "m.stage"
    path.write_text(sheet_text(*limits), encoding="utf-8")
    answer = call(capsys, "order", path, "--json").json
    met = [family for family in answer["families"] if family["order"] is not None]
    assert len(met) >= 4
    for family in met:
        line = family["target"].replace(f"order {family['order']}", "meet limits")
        sheet = read_sheet(Source("m.stage", sheet_text(*limits) + line + "\n"))
        assert build_goal(sheet, sheet.targets[0]).order == family["order"]


def test_order_prints_one_table_and_what_to_take(capsys) -> None:
    called = call(capsys, "order", EXAMPLES / "hive_mask.stage")
    assert (called.status, called.err) == (0, "")
    lines = called.out.splitlines()
    head = next(k for k, line in enumerate(lines) if line.startswith("family"))
    assert lines[head + 1].split()[:4] == ["butterworth", "3", "0.9187", "dB"]
    assert "take butterworth: order 3 is the least without zeros in the stop band" in called.out
    assert lines[-1] == "  target H: lowpass butterworth, order 3, edge 1.9087 kHz"


def test_match_says_with_which_order_the_limits_are_met(capsys) -> None:
    called = call(capsys, "match", EXAMPLES / "hive_mask.stage")
    assert called.status == 0
    assert "the limits are met with order 3" in called.out


def test_an_ask_without_limits_and_a_choice_of_asks_are_refused(capsys, tmp_path) -> None:
    path = tmp_path / "m.stage"
    path.write_text(CIRCUIT, encoding="utf-8")
    none = call(capsys, "order", path, "--json")
    assert none.status == 2
    assert "`H` has no limits to meet" in none.json["error"]["message"]
    two = CIRCUIT + "ask G = I_R1/V_in\nlimit H: loss <= 1 dB below 1 Hz\nlimit G: loss <= 1 dB below 1 Hz\n"
    path.write_text(two, encoding="utf-8")
    assert call(capsys, "order", path, "--json").json["error"]["help"] == "say which: --ask NAME"
    unknown = call(capsys, "order", path, "--ask", "Hh", "--json").json["error"]
    assert "did you mean" in unknown["help"]


def test_limits_take_the_numbers_of_the_sheet_and_refuse_names_without_one(capsys, tmp_path) -> None:
    path = tmp_path / "m.stage"
    limits = "limit H: loss <= 1 dB below f1\nlimit H: loss >= 40 dB above 9 kHz\n"
    path.write_text(CIRCUIT + "fix f1 = 2 kHz\n" + limits, encoding="utf-8")
    answer = call(capsys, "order", path, "--json").json
    assert answer["recommended"]["order"] == 3
    path.write_text(CIRCUIT + "choose f1\n" + limits, encoding="utf-8")
    assert call(capsys, "order", path, "--json").json["error"]["help"] == "fix f1 = value"


def test_the_whole_command_needs_neither_scipy_nor_matplotlib() -> None:
    called = run("order", EXAMPLES / "hive_mask.stage", "--json")
    assert called.status == 0
    assert json.loads(called.out)["kind"] == "lowpass"


def test_a_ripple_that_is_exactly_the_limit_meets_it() -> None:
    curve = exact_curve(FAMILIES["chebyshev"].build(7, sympy.Integer(1)))
    assert curve.first_above(1.0) == pytest.approx(1, rel=1e-9)
    assert curve.most(0.0, 1.0) == pytest.approx(1, abs=1e-9)
