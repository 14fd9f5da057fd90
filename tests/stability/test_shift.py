"""First-order shifts of omega0 and Q against published formulas and against the exact real function."""

from __future__ import annotations

import random
from fractions import Fraction

import mpmath
import pytest
import sympy

from symcirc.complaints import Complaint
from symcirc.derivation import Derivation, derive, pose, pose_real
from symcirc.sheet.model import Sheet
from symcirc.stability.numbers import values_in
from symcirc.stability.shift import FirstOrder, first_order_shifts
from tests.stability.modes import amplifiers, ordinary_values, read
from tests.stability.stages import STAGES

SALLEN_KEY = """
    in -- R1 -- a -- R2 -- p -- C2 -- gnd
    a -- C1 -- out
    U1 opamp: plus p, minus out, drives out
    fix R2 = R1, C1 = 4*Q^2*C2
    choose Q, U1_gain, U1_gbw
    ask H = V_out / V_in"""
BAND_PASS = """
    in -- R1 -- a -- C2 -- m -- R3 -- out
    a -- C1 -- out
    U1 opamp: plus gnd, minus m, drives out
    fix C2 = C1, R3 = 4*Q^2*R1
    choose Q, U1_gain, U1_gbw
    ask H = V_out / V_in"""
TOW_THOMAS = """
    in -- R1 -- m1 -- R2 -- bp
    m1 -- C1 -- bp
    bp -- R3 -- m2 -- C2 -- lp
    lp -- R4 -- m3 -- R5 -- inv
    inv -- R6 -- m1
    U1 opamp: plus gnd, minus m1, drives bp
    U2 opamp: plus gnd, minus m2, drives lp
    U3 opamp: plus gnd, minus m3, drives inv
    fix R1 = Q*R6, R2 = Q*R6, R3 = R6, R5 = R4, C2 = C1
    choose Q, U1_gbw, U2_gbw, U3_gbw
    ask B = V_bp / V_in"""
Q, C1, C2, R1, R6 = sympy.symbols("Q C1 C2 R1 R6")
GBW, GAIN = sympy.symbols("U1_gbw U1_gain")


def both(text: str, name: str) -> tuple[Derivation, Derivation]:
    sheet = read(text)
    return derive(pose(sheet), [name]), derive(pose_real(sheet), [name])


def shifts(text: str, name: str = "H") -> dict[str, FirstOrder]:
    return {shift.parameter: shift for shift in first_order_shifts(*both(text, name), name)}


def same(one: sympy.Expr | None, other: sympy.Expr) -> bool:
    return one is not None and sympy.simplify(one - other) == 0


# published, from memory ------------------------------------------------------------------------------------------


def test_low_pass_of_sallen_and_key_loses_frequency_and_gains_q_by_q_omega0_over_omega_t() -> None:
    # Budak and Petrela (1972); Schaumann and Van Valkenburg, "Design of Analog Filters" (2001): for equal resistors
    # and unity gain omega0 changes by -Q omega0/omega_t and Q by as much upwards.
    shift = shifts(SALLEN_KEY)["U1_gbw"]
    omega0 = 1 / (2 * Q * R1 * C2)
    assert same(shift.omega0, -Q * omega0 / (2 * sympy.pi * GBW))
    assert same(shift.q, Q * omega0 / (2 * sympy.pi * GBW))


def test_band_pass_with_multiple_feedback_loses_frequency_by_q_omega0_over_omega_t() -> None:
    # Budak and Petrela (1972), for equal capacitors.
    shift = shifts(BAND_PASS)["U1_gbw"]
    omega0 = 1 / (2 * Q * R1 * C1)
    assert same(shift.omega0, -Q * omega0 / (2 * sympy.pi * GBW))
    assert same(shift.q, Q * omega0 / (2 * sympy.pi * GBW))


def test_band_pass_with_multiple_feedback_needs_a_gain_far_above_two_q_squared() -> None:
    # Huelsman, "Active and Passive Analog Filter Design" (1993), of a finite gain: Q/(1 + 2 Q^2/A) for large Q.
    shift = shifts(BAND_PASS)["U1_gain"]
    assert shift.omega0 == 0
    assert same(shift.q, -2 * Q**2 / GAIN)


def test_tow_thomas_gains_q_by_four_q_omega0_over_omega_t() -> None:
    # Thomas, "The biquad: part I" (1971), and Sedra and Smith: Q/(1 - 4 Q omega0/omega_t) for equal amplifiers
    # and large Q.
    found = shifts(TOW_THOMAS, "B")
    equal = sum((s.q.subs(p, GBW) for p, s in found.items() if s.q is not None), start=sympy.S.Zero)
    omega0 = 1 / (R6 * C1)
    assert sympy.limit(equal / (Q * omega0 / (2 * sympy.pi * GBW)), Q, sympy.oo) == 4


# the exact function ----------------------------------------------------------------------------------------------

#: Stages of several kinds with an ask of order 2, one of them with a hidden mode (the twin T), one with pi in a tie.
SECOND_ORDER = {
    "Sallen-Key low-pass": SALLEN_KEY,
    "band-pass": BAND_PASS,
    "Tow-Thomas": TOW_THOMAS,
    **{
        name: STAGES[name]
        for name in (
            "multiple-feedback low-pass",
            "Sallen-Key high-pass",
            "Wien band-pass",
            "state variable (Kerwin, Huelsman and Newcomb)",
            "Akerberg-Mossberg",
            "band-pass with simulated inductance",
        )
    },
    "twin-T notch, matched": STAGES["twin-T notch, bootstrapped"]
    + "\nfix R2 = R1, R3 = R1/2, C2 = C1, C3 = 2*C1",
    "with pi in a tie": """
        in -- R1 -- a -- R2 -- p -- C2 -- gnd
        a -- C1 -- out
        U1 opamp: plus p, minus out, drives out
        fix R2 = 2*R1, C1 = pi*C2
        ask H = V_out / V_in""",
}


def with_parameters(text: str) -> str:
    missing = [
        f"{name}_{word}"
        for name in amplifiers(read(text))
        for word in ("gain", "gbw")
        if f"{name}_{word}" not in text
    ]
    return text + ("\nchoose " + ", ".join(missing) if missing else "")


def random_numbers(sheet: Sheet, rng: random.Random) -> dict[str, sympy.Rational]:
    """Return parts near 1, and gains and bandwidths of about 1e14 that all differ."""
    values = {name: sympy.Rational(str(round(v, 3))) for name, v in ordinary_values(sheet, rng).items()}
    large = (name for name in values if name.endswith(("_gain", "_gbw")))
    return values | {name: sympy.Integer(10) ** 14 * rng.randrange(10, 40) for name in large}


def omega0_and_q(poles: list[mpmath.mpc]) -> tuple[mpmath.mpf, mpmath.mpf]:
    product, total = (poles[0] * poles[1]).real, (poles[0] + poles[1]).real
    return mpmath.sqrt(product), -mpmath.sqrt(product) / total


def smallest_roots(coefficients: tuple[Fraction, ...]) -> list[mpmath.mpc]:
    falling = [mpmath.mpf(c.numerator) / c.denominator for c in reversed(coefficients)]
    scaled = [
        c / falling[-1] for c in falling[::-1]
    ]  # the roots of the reciprocal: the large ones are the ones wanted
    found = sorted(mpmath.polyroots(scaled, maxsteps=500, extraprec=600), key=abs)
    return [1 / root for root in found[-2:]]


@pytest.mark.parametrize("text", SECOND_ORDER.values(), ids=SECOND_ORDER)
def test_the_exact_function_departs_as_the_first_order_says(text: str) -> None:
    # Gains of 1e14: the second order stands 14 digits lower. Roots by mpmath with 60 digits.
    sheet = read(with_parameters(text))
    name = sheet.asks[0].name
    ideal, real = derive(pose(sheet), [name]), derive(pose_real(sheet), [name])
    numbers = random_numbers(sheet, random.Random(text))
    found = first_order_shifts(ideal, real, name)
    with mpmath.workdps(60):
        before = omega0_and_q(smallest_roots(values_in(ideal.answer(name).function.denominator, numbers)))
        after = omega0_and_q(smallest_roots(values_in(real.answer(name).function.denominator, numbers)))
        for k, what in enumerate(("omega0", "q")):
            said = sum((getattr(shift, what) for shift in found), start=sympy.S.Zero).evalf(40, subs=numbers)
            true = after[k] / before[k] - 1
            assert abs(true - mpmath.mpf(str(said))) < 1e-9 * abs(true), what


def test_no_damping_has_no_shift_of_q() -> None:
    found = shifts(
        """
        in -- R1 -- m1 -- C1 -- bp
        bp -- R3 -- m2 -- C2 -- lp
        lp -- R4 -- m3 -- R5 -- inv
        inv -- R6 -- m1
        U1 opamp: plus gnd, minus m1, drives bp, gbw 1 MHz
        U2 opamp: plus gnd, minus m2, drives lp
        U3 opamp: plus gnd, minus m3, drives inv
        ask H = V_bp / V_in"""
    )
    assert [shift.q for shift in found.values()] == [None]
    assert found["U1_gbw"].omega0 != 0


def test_an_amplifier_of_which_the_ask_does_not_depend_is_left_out() -> None:
    found = shifts(SALLEN_KEY + "\nx -- R9 -- gnd\nin -- R8 -- x\nx -- R7 -- gnd", "H")
    assert set(found) == {"U1_gain", "U1_gbw"}
    behind = SALLEN_KEY + "\nU2 opamp: plus out, minus y, drives y, gbw 1 MHz\ny -- R9 -- gnd"
    assert set(shifts(behind)) == {"U1_gain", "U1_gbw"}


REFUSED = {
    "order 1": "in -- R1 -- m -- R2 -- out\nm -- C1 -- out\nU1 opamp: plus gnd, minus m, drives out, gbw 1 MHz",
    "pole at 0": """in -- R1 -- m -- C1 -- x -- R3 -- out
        x -- C2 -- out
        U1 opamp: plus gnd, minus m, drives out, gbw 1 MHz""",
    "no amplifier has a gain or a gbw": SALLEN_KEY.replace(", U1_gain, U1_gbw", "").replace(
        "ask H = V_out / V_in", ""
    ),
    "depends on s": SALLEN_KEY.replace("drives out", "drives out, gain 1e5/(1 + s/100)")
    .replace(", U1_gain, U1_gbw", "")
    .replace("ask H = V_out / V_in", ""),
}


@pytest.mark.parametrize("said", REFUSED)
def test_what_has_no_first_order_in_symbols_is_refused(said: str) -> None:
    with pytest.raises(Complaint, match=said):
        shifts(REFUSED[said] + "\nask H = V_out / V_in")


def test_a_loop_gain_is_refused() -> None:
    with pytest.raises(Complaint, match="is a loop gain"):
        shifts(SALLEN_KEY + "\nask T = loop(U1) with V_in = 0", "T")
