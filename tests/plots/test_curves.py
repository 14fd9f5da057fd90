"""What is shown of a sheet, and over which range."""

from __future__ import annotations

import numpy as np
import pytest

from symcirc.complaints import Complaint
from symcirc.derivation import BigAnswer, derive, pose, pose_real
from symcirc.plots.curves import curves_of
from symcirc.transfer.evaluate import evaluate
from tests.plots.sheets import ALL_PASS, LOW_PASS, REAL_BAND_PASS, curves, example, sheet_of


def names(found):
    return [trace.name for trace in found.traces]


def test_a_sheet_with_numbers_and_no_target_shows_the_stage():
    found = curves(LOW_PASS)
    assert names(found) == ["stage"]
    assert found.traces[0].label == "stage, the sheet's values"
    at_corner = np.interp(1000 / (2 * np.pi), found.frequencies, found.traces[0].gain_db)
    assert at_corner == pytest.approx(-10 * np.log10(2), abs=1e-3)


@pytest.mark.parametrize(
    "name", ["hive_antialias", "hive_mask", "hive_rumble", "hive_hum_notch", "hive_cascade", "hive_queen"]
)
def test_the_values_that_match_finds_give_the_targets_curves_sign_and_free_gain_included(name):
    target, stage = example(name).traces
    finite = target.gain_db > -100
    assert stage.gain_db[finite] == pytest.approx(target.gain_db[finite], abs=1e-6)
    assert stage.phase_deg[finite] == pytest.approx(target.phase_deg[finite], abs=1e-4)
    assert stage.step == pytest.approx(target.step, abs=1e-7 * np.abs(target.step).max())


def test_fixed_values_are_shown_beside_the_target():
    found = curves(LOW_PASS + "target H: lowpass butterworth, order 1, edge 200 Hz\n")
    target, stage = found.traces
    assert stage.label == "stage, the sheet's values"
    assert float(-target.poles[0].real) == pytest.approx(2 * np.pi * 200)
    assert float(-stage.poles[0].real) == pytest.approx(1000)


def test_real_amplifiers_are_those_of_derive_real():
    found = curves(REAL_BAND_PASS)
    assert names(found) == ["target", "stage", "real"]
    sheet = sheet_of(REAL_BAND_PASS)
    w0, q, gain, c = 2 * np.pi * 12e3, 8, 2, 2.2e-9
    # equal capacitors, from the textbook's band-pass with multiple feedback (from memory)
    r3, r1 = 2 * q / (w0 * c), q / (gain * w0 * c)
    r2 = q / ((2 * q**2 - gain) * w0 * c)
    values = {"R1": r1, "R2": r2, "R3": r3, "C1": c, "C2": c, "U1_gain": 1e5, "U1_gbw": 1e6}
    function = derive(pose_real(sheet)).answer("H").function
    expected = evaluate(function, values, 2j * np.pi * found.frequencies)
    assert found.traces[2].gain_db == pytest.approx(20 * np.log10(np.abs(expected)), abs=1e-6)
    assert np.exp(1j * np.radians(found.traces[2].phase_deg)) == pytest.approx(expected / np.abs(expected))
    assert found.traces[0].phase_deg[0] == pytest.approx(found.traces[2].phase_deg[0], abs=2)


def test_a_target_that_cannot_be_met_is_shown_alone_and_said_to_be():
    text = "in -- R1 -- out -- C1 -- gnd\nfix C1 = 10 nF\nask H = V_out/V_in\n"
    found = curves(text + "target H: lowpass butterworth, order 2, edge 1 kHz\n")
    assert names(found) == ["target"]
    assert not found.is_met
    assert "the target is shown alone" in str(found.remarks[-1])


def test_a_target_is_shown_alone_where_a_chosen_part_has_no_value():
    text = "in -- R1 -- out -- C1 -- gnd\nchoose C1\nask H = V_out/V_in\n"
    found = curves(text + "target H: lowpass butterworth, order 1, edge 1 kHz\n")
    assert names(found) == ["target"]
    assert found.is_met
    assert "the target is shown alone: R1 depend" in str(found.remarks[-1])


def test_the_range_goes_a_decade_beyond_poles_and_limits_to_round_numbers():
    assert example("hive_antialias").frequencies[[0, -1]].tolist() == [100.0, 20e3]
    assert example("hive_mask").frequencies[[0, -1]].tolist() == [100.0, 100e3]
    found = example("hive_mask")
    assert np.all(np.diff(found.frequencies) > 0)
    assert {1500.0, 9000.0} <= set(found.frequencies.round(6))


def test_a_loop_gain_is_followed_below_1_and_shown_by_gain_and_phase():
    found = example("hive_charge", "T")
    assert names(found) == ["stage"]
    assert found.traces[0].gain_db[-1] < -10
    assert found.traces[0].gain_db[0] == pytest.approx(110, abs=0.1)
    assert found.shown() == ("magnitude", "phase")


def test_limits_are_areas_relative_to_the_nominal_gain():
    found = curves(
        LOW_PASS
        + "target H: lowpass butterworth, order 1, edge 200 Hz, gain 10\n"
        + "limit H: loss <= 1 dB below 50 Hz\nlimit H: loss >= 20 dB above 5 kHz\n"
    )
    passing, stopping = found.forbidden
    assert (passing.passes, passing.level_db, passing.low) == (True, pytest.approx(19), 0)
    assert passing.high == pytest.approx(50)
    assert (stopping.passes, stopping.level_db, stopping.high) == (False, pytest.approx(0), np.inf)


def test_without_a_target_limits_are_relative_to_the_largest_gain_in_the_pass_band():
    found = example("hive_charge", "Zt")
    assert found.unit == "ohm"
    assert found.reference_db == pytest.approx(160, abs=0.1)
    limited = curves(LOW_PASS + "limit H: loss <= 1 dB from 100 Hz to 150 Hz\n")
    at_100 = -10 * np.log10(1 + (0.2 * np.pi) ** 2)
    assert limited.forbidden[0].level_db == pytest.approx(at_100 - 1, abs=1e-9)


def test_the_pass_band_takes_the_phases_place_where_it_has_a_limit():
    assert example("hive_mask").shown() == ("magnitude", "passband", "delay", "step")
    assert example("hive_antialias").shown() == ("magnitude", "phase", "delay", "step")
    assert example("hive_antialias").shown(["poles", "phase"]) == ("phase", "poles")


def test_an_all_pass_turns_from_0_to_minus_180_degrees():
    (trace,) = curves(ALL_PASS).traces
    assert np.max(np.abs(trace.gain_db)) < 1e-9
    assert trace.phase_deg[[0, -1]] == pytest.approx([0, -180], abs=12)
    assert trace.step[0] == pytest.approx(-1)


def test_a_high_pass_ends_at_0_degrees_and_an_inverting_low_pass_begins_at_180():
    assert example("hive_rumble").traces[0].phase_deg[[0, -1]] == pytest.approx([270, 0], abs=3)
    assert example("hive_antialias").traces[0].phase_deg[[0, -1]] == pytest.approx([180, 0], abs=8)


def test_a_ratio_that_grows_with_frequency_has_no_step_response():
    found = curves("in -- R1 -- a -- L1 -- gnd\nfix R1 = 1 kohm, L1 = 1 mH\nask Zin = V_in/I_in\n")
    assert "step" not in found.shown()
    with pytest.raises(Complaint, match="no step response"):
        found.shown(["step"])


def test_a_cascade_too_big_to_be_expanded_is_shown_all_the_same():
    stages = "".join(
        f"n{k} -- R{k}a -- a{k} -- R{k}b -- p{k} -- C{k}a -- gnd\na{k} -- C{k}b -- n{k + 1}\n"
        f"U{k} opamp: plus p{k}, minus n{k + 1}, drives n{k + 1}\n"
        f"fix R{k}a = 10 kohm, R{k}b = 10 kohm, C{k}a = 1 nF, C{k}b = {k + 1} nF\n"
        for k in range(8)
    )
    sheet = sheet_of(stages + "ask H = V_n8/V_n0\n")
    assert isinstance(derive(pose(sheet)).answers[0], BigAnswer)
    found = curves_of(sheet)
    (trace,) = found.traces
    assert len(trace.poles) == 16
    at = int(np.argmin(np.abs(found.frequencies - 1e4)))
    s = 1j * 2 * np.pi * found.frequencies[at]
    expected = np.prod([1 / (1 + 2e4 * 1e-9 * s + 1e8 * 1e-18 * (k + 1) * s**2) for k in range(8)])
    assert trace.gain_db[at] == pytest.approx(20 * np.log10(np.abs(expected)), abs=1e-6)


@pytest.mark.parametrize(
    ("text", "cause"),
    [
        (
            "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n",
            "a plot needs numbers, and `H` holds R1 and C1 without one",
        ),
        (LOW_PASS + "ask Z = V_in/I_in\n", "there is more than one ratio to plot"),
        (
            "in -- R1 -- out -- C1 -- gnd\nchoose f\nask H = V_out/V_in\n"
            "target H: lowpass butterworth, order 1, edge f\n",
            "a plot needs numbers, and f in the target has none",
        ),
    ],
)
def test_what_has_no_curve_is_refused(text, cause):
    with pytest.raises(Complaint) as complaint:
        curves(text)
    assert cause in complaint.value.cause


def test_an_ask_that_is_not_there_is_refused_with_the_nearest():
    with pytest.raises(Complaint) as complaint:
        curves(LOW_PASS, "h")
    assert "did you mean H?" in complaint.value.mend
