"""What the command shows of real amplifiers: shifts, loop margins, exchanged inputs."""

import math

import pytest

from tests.calling import EXAMPLES, call

# The band-pass with multiple feedback; dw0/w0 = -Q w0/w_t and dQ/Q = +Q w0/w_t to first order where both
# capacitors are equal (Budak and Petrela, IEEE Trans. CT-19, 1972; from memory).
BAND_PASS = """
in -- R1 -- a -- C2 -- m -- R3 -- out
a -- C1 -- out
U1 opamp: plus gnd, minus m, drives out, gbw 1 MHz
fix C1 = 10 nF, C2 = 10 nF, R1 = 1k6, R3 = 160k
ask H = V_out/V_in
"""


@pytest.fixture
def derive(capsys, tmp_path):
    def run(text, *options):
        path = tmp_path / "s.stage"
        path.write_text(text, encoding="utf-8")
        return call(capsys, "derive", path, *options)

    return run


def test_the_first_order_shift_is_that_of_the_handbooks(derive):
    called = derive(BAND_PASS, "--shift", "--json")
    (shift,) = called.json["ask"]["H"]["shift"]["first_order"]
    assert (shift["amplifier"], shift["parameter"]) == ("U1", "U1_gbw")
    assert shift["omega0"] == "-1/(4*pi*U1_gbw*R1*C1)"
    q, omega0 = math.sqrt(160 / 1.6) / 2, 1 / math.sqrt(1.6e3 * 160e3) / 10e-9
    assert 1 / (4 * math.pi * 1e6 * 1.6e3 * 10e-9) == pytest.approx(
        q * omega0 / (2 * math.pi * 1e6), rel=1e-12
    )


def test_first_order_and_exact_shift_stand_side_by_side_in_numbers(derive):
    poles = derive(BAND_PASS, "--shift", "--json").json["ask"]["H"]["shift"]["poles"]
    for pole in poles:
        first, exact = complex(*pole["first_order"]), complex(*pole["exact"])
        assert first != exact
        assert abs(first - exact) < 0.05 * abs(exact)
    text = derive(BAND_PASS, "--shift").out
    assert "dw0/w0 by U1_gbw: -1/(4*pi*U1_gbw*R1*C1)" in text
    assert "first order        exact" in text


def test_the_shift_of_a_sheet_with_ideal_amplifiers_only_is_refused(derive):
    called = derive(BAND_PASS.replace(", gbw 1 MHz", ""), "--shift")
    assert called.status == 2
    assert "gbw 1 MHz" in called.err


def test_the_shift_in_symbols_needs_no_numbers(derive):
    called = derive(BAND_PASS.replace("fix C1 = 10 nF, C2 = 10 nF,", "fix"), "--shift")
    assert called.status == 0
    assert "with every value fixed" in called.out


def test_a_third_order_stage_shows_the_shift_of_each_pole(derive):
    text = """
in -- R1 -- a -- R2 -- b -- R3 -- p -- C3 -- gnd
a -- C1 -- gnd
b -- C2 -- out
U1 opamp: plus p, minus out, drives out, gbw 1 MHz
fix R1 = 10k, R2 = 10k, R3 = 10k, C1 = 10n, C2 = 33n, C3 = 1n
ask H = V_out/V_in
"""
    called = derive(text, "--shift")
    assert "pole at f =" in called.out
    assert "dQ/Q" in called.out
    assert called.out.count("one more pole") == 1


def test_a_loop_gain_shows_where_it_is_one_and_its_margins(derive):
    called = derive((EXAMPLES / "hive_charge.stage").read_text(encoding="utf-8"), "--ask", "T")
    assert "unity gain    at 1 MHz, phase margin 90 deg" in called.out
    assert "closed loop   stable" in called.out


def test_a_loop_with_two_more_poles_shows_its_gain_margin(derive):
    text = """
in -- R1 -- m -- R2 -- x -- R3 -- out
m -- C1 -- gnd
x -- C2 -- gnd
U1 opamp: plus gnd, minus m, drives out, gbw 1 MHz
fix R1 = 10k, R2 = 10k, R3 = 10k, C1 = 1n, C2 = 1n
ask T = loop(U1) with V_in = 0
"""
    called = derive(text)
    assert "gain margin" in called.out
    assert "closed loop   unstable" in called.out


@pytest.mark.parametrize("path", sorted(EXAMPLES.glob("*.stage")), ids=lambda p: p.stem)
def test_exchanged_inputs_are_asked_about_and_inputs_as_they_are_are_not(path, derive):
    text = path.read_text(encoding="utf-8")
    as_it_is = derive(text, "--json").json["warnings"]
    assert not any("exchanged" in warning["message"] for warning in as_it_is)
    if "U1 opamp" in text and "block" not in text:
        line = next(line for line in text.splitlines() if line.startswith("U1 opamp"))
        turned = line.replace("plus", "PLUS").replace("minus", "plus").replace("PLUS", "minus")
        warned = derive(text.replace(line, turned), "--json").json["warnings"]
        assert any("are plus and minus of `U1` exchanged?" in warning["message"] for warning in warned)
