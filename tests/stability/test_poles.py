"""Shifts of poles with numbers: the first order against the exact, and the exact against the roots by mpmath."""

from __future__ import annotations

from itertools import pairwise

import mpmath
import pytest

from symcirc.complaints import Complaint
from symcirc.derivation import Derivation, derive, pose, pose_real
from symcirc.stability.numbers import values_in
from symcirc.stability.pair import PairShift, pair_shift
from symcirc.stability.poles import PoleShift, PoleShifts, pole_shifts
from symcirc.stability.shift import first_order_shifts
from tests.stability.modes import read

LOW_PASS = """
    in -- R1 -- a -- R2 -- p -- C2 -- gnd
    a -- C1 -- out
    U1 opamp: plus p, minus out, drives out, gain 100 dB, gbw {gbw}
    fix R1 = 10 kohm, R2 = 10 kohm, C1 = 100 nF, C2 = 1 nF
    ask H = V_out / V_in"""
THIRD_ORDER = """
    in -- R1 -- a -- R2 -- b -- R3 -- p -- C3 -- gnd
    a -- C1 -- gnd
    b -- C2 -- out
    U1 opamp: plus p, minus out, drives out, gbw {gbw}
    fix R1 = 1 kohm, R2 = 10 kohm, R3 = 22 kohm, C1 = 47 nF, C2 = 10 nF, C3 = 1 nF
    ask H = V_out / V_in"""


def both(text: str) -> tuple[Derivation, Derivation]:
    sheet = read(text)
    return derive(pose(sheet)), derive(pose_real(sheet))


def found(text: str) -> PoleShifts:
    return pole_shifts(*both(text), "H")


def pair_of(text: str) -> PairShift:
    pair = pair_shift(*found(text).poles)
    assert pair is not None
    return pair


@pytest.mark.parametrize("text", [LOW_PASS, THIRD_ORDER], ids=["order 2", "order 3"])
def test_the_first_order_comes_nearer_as_the_amplifier_gets_faster(text: str) -> None:
    departures = []
    for gbw in ("1 MHz", "10 MHz", "100 MHz"):
        poles = found(text.format(gbw=gbw)).poles
        departures.append(
            [abs(pole.first_order / pole.exact - 1) for pole in poles if pole.first_order is not None]
        )
        assert len(departures[-1]) == len(poles)
    assert max(departures[-1]) < 1e-3
    for slow, fast in pairwise(departures):
        assert all(0.05 < b / a < 0.2 for a, b in zip(slow, fast, strict=True))  # in proportion to 1/gbw


def test_ideal_poles_and_exact_shifts_make_the_roots_of_the_real_denominator() -> None:
    ideal, real = both(THIRD_ORDER.format(gbw="1 MHz"))
    shifts = pole_shifts(ideal, real, "H")
    mine = [pole.ideal + pole.exact for pole in shifts.poles] + list(shifts.others)
    coefficients = values_in(real.answer("H").function.denominator, real.sheet.numbers)
    with mpmath.workdps(50):
        falling = [mpmath.mpf(c.numerator) / c.denominator for c in reversed(coefficients)]
        size = mpmath.mpf(10) ** 4
        scaled = [c / size**k / falling[0] for k, c in enumerate(falling)]
        theirs = [complex(size * root) for root in mpmath.polyroots(scaled, maxsteps=500, extraprec=500)]
    assert len(mine) == len(theirs) == 4
    for root in mine:
        assert min(abs(root - other) for other in theirs) < 1e-12 * abs(root)


def test_numbers_of_a_pair_agree_with_the_symbols() -> None:
    text = LOW_PASS.format(gbw="1 MHz")
    ideal, real = both(text)
    symbols = first_order_shifts(ideal, real, "H")
    numbers = ideal.sheet.numbers
    pair = pair_of(text)
    assert pair.omega0 == pytest.approx(1e4, rel=1e-12)
    assert pair.q == pytest.approx(5, rel=1e-12)
    assert pair.first_order is not None
    omega0 = float(sum(shift.omega0 for shift in symbols).evalf(20, subs=numbers))
    q = float(sum(shift.q for shift in symbols if shift.q is not None).evalf(20, subs=numbers))
    assert pair.first_order.omega0 == pytest.approx(omega0, rel=1e-9)
    assert pair.first_order.q == pytest.approx(q, rel=1e-9)


def test_the_pair_of_a_follower_loses_frequency_as_published() -> None:
    # Budak and Petrela (1972), from memory: -Q omega0/omega_t, here -5 * 1e4 / (2 pi 1e6).
    pair = pair_of(LOW_PASS.format(gbw="1 MHz").replace("gain 100 dB, ", ""))
    assert pair.first_order is not None
    assert pair.exact is not None
    assert pair.first_order.omega0 == pytest.approx(-5e4 / 6.283185307e6, rel=1e-9)
    assert pair.exact.omega0 == pytest.approx(pair.first_order.omega0, rel=0.05)


def test_a_double_pole_has_no_first_order_but_an_exact_shift() -> None:
    text = LOW_PASS.format(gbw="1 MHz").replace("C1 = 100 nF", "C1 = 1 nF")
    poles = found(text).poles
    assert [pole.first_order for pole in poles] == [None, None]
    assert all(abs(pole.exact) > 0 for pole in poles)
    pair = pair_of(text)
    assert pair.first_order is None
    assert pair.exact is not None


def test_a_gain_that_depends_on_s_moves_poles_as_gain_and_bandwidth_do() -> None:
    one = found(LOW_PASS.format(gbw="1 MHz"))
    other = found(LOW_PASS.replace("gain 100 dB, gbw {gbw}", "gain 1e5/(1 + s*1e5/(2*pi*1e6))"))
    for here, there in zip(one.poles, other.poles, strict=True):
        assert here.first_order == pytest.approx(there.first_order, rel=1e-9)
        assert here.exact == pytest.approx(there.exact, rel=1e-9)


def test_a_hidden_mode_does_not_disturb_the_shift() -> None:
    # A matched twin T hides a real pole; the first order must still come near the exact shift.
    shifts = found(
        """
        in -- R1 -- a -- R2 -- t
        in -- C1 -- b -- C2 -- t
        a -- C3 -- foot
        b -- R3 -- foot
        out -- R4 -- q -- R5 -- gnd
        U1 opamp: plus t, minus out, drives out, gbw 10 MHz
        U2 opamp: plus q, minus foot, drives foot, gbw 10 MHz
        fix R1 = 47 kohm, R2 = R1, R3 = R1/2, C1 = 68 nF, C2 = C1, C3 = 2*C1, R4 = 1 kohm, R5 = 9 kohm
        ask H = V_out / V_in"""
    )
    assert len(shifts.poles) == 2
    for pole in shifts.poles:
        assert pole.first_order == pytest.approx(pole.exact, rel=1e-3)


def test_a_missing_number_is_a_key_error_that_names_it() -> None:
    with pytest.raises(KeyError, match="R2"):
        found(LOW_PASS.format(gbw="1 MHz").replace("R2 = 10 kohm, ", ""))


def test_a_stage_of_ideal_amplifiers_is_refused() -> None:
    with pytest.raises(Complaint, match="no amplifier has a gain or a gbw"):
        found(LOW_PASS.replace(", gain 100 dB, gbw {gbw}", ""))


def test_a_pair_without_an_omega0_has_no_shift() -> None:
    assert pair_shift(PoleShift(0j, 0j, 0j), PoleShift(-1 + 0j, 0j, 0j)) is None
    assert pair_shift(PoleShift(1 + 0j, 0j, 0j), PoleShift(-1 + 0j, 0j, 0j)) is None
