"""Values: numbers, units, value codes, ties, what is chosen and what is solved for."""

from __future__ import annotations

from fractions import Fraction

import pytest
import sympy

from symcirc.sheet.expression import names
from tests.sheet.reading import BASE, complaint, read


def number(text: str, name: str = "k") -> sympy.Expr:
    """Return what ``fix NAME = text`` sets the name to."""
    circuit = BASE + "out -- L1 -- gnd\nout -- Z1 -- gnd\nout -- Y1 -- gnd"
    fixed = read(circuit, f"fix {name} = {text}").fixes[name].number
    assert fixed is not None
    return fixed


def rows(name: str, table: str) -> list[tuple[str, str, str]]:
    """Return (name, value as written, number) for every ``value = number`` of a table."""
    pairs = [entry.split("=") for entry in table.split(",")]
    return [(name, text.strip(), value.strip()) for text, value in pairs]


# IEC 60062, the examples of its tables for resistance and capacitance, and codes of four characters (from
# memory). The codes that begin with their letter (R10, p33) are left out: here a value begins with a digit.
STANDARD = [
    *rows("R1", "1R0 = 1, 10R = 10, 100R = 100, 1K0 = 1e3, 10K = 10e3, 100K = 100e3, 1M0 = 1e6, 10M = 10e6"),
    *rows("R1", "100M = 100e6, 1G0 = 1e9, 10G = 10e9, 100G = 100e9, 1T0 = 1e12, 10T = 10e12, 3R32 = 3.32"),
    *rows("R1", "59R04 = 59.04, 590R4 = 590.4, 5K904 = 5904, 59K04 = 59040"),
    *rows("C1", "1p0 = 1e-12, 1p5 = 1.5e-12, 3p32 = 3.32e-12, 10p = 10e-12, 100p = 100e-12, 1n0 = 1e-9"),
    *rows("C1", "3n32 = 3.32e-9, 33n2 = 33.2e-9, 100n = 100e-9, 1µ0 = 1e-6, 3µ32 = 3.32e-6, 33µ2 = 33.2e-6"),
    *rows("C1", "100µ = 100e-6, 1m0 = 1e-3, 10m = 10e-3, 332m = 332e-3"),
]
# The examples of the project's design, and others of the same forms.
OURS = [
    *rows(
        "R1", "4k7 = 4700, 4K7 = 4700, 0R47 = 0.47, 100R = 100, 1.5k = 1500, 4.7 kohm = 4700, 4.7 kΩ = 4700"
    ),
    *rows("R1", "4.7kohm = 4700, 1 Mohm = 1e6, 1 mohm = 1e-3, 1 Tohm = 1e12, +10 ohm = 10, 1 = 1"),
    *rows(
        "C1", "2n2 = 2.2e-9, 10n = 10e-9, 4F7 = 4.7, 2u2 = 2.2e-6, 100 nF = 1e-7, 2e-9 = 2e-9, 10 fF = 1e-14"
    ),
    *rows("L1", "10m = 0.01, 10 mH = 0.01, 3.3 uH = 3.3e-6"),
    *rows("Y1", "2 mS = 2e-3, 2m = 2e-3"),
    *rows("Z1", "50 ohm = 50, 50R = 50"),
    *rows(
        "k", "62 Hz = 62, 200 rad/s = 200, 2 krad/s = 2000, 8e3 = 8000, 1E3 = 1000, 2 ms = 2e-3, 2 GHz = 2e9"
    ),
    *rows("k", ".5 = 0.5, 2. = 2, 5 % = 0.05, 5% = 0.05, -3 Hz = -3, 0 = 0, 0 F = 0, 4k7 = 4700, - -2 s = 2"),
]


@pytest.mark.parametrize(("name", "text", "value"), STANDARD + OURS)
def test_a_value_is_exact(name: str, text: str, value: str) -> None:
    fixed = number(text, name)
    assert fixed.is_Rational
    assert Fraction(int(fixed.p), int(fixed.q)) == Fraction(value)


@pytest.mark.parametrize("ohm", ["ohm", "\N{OHM SIGN}", "\N{GREEK CAPITAL LETTER OMEGA}"])
@pytest.mark.parametrize("blank", ["", " ", "\t"])
def test_the_ohm_has_three_spellings(ohm: str, blank: str) -> None:
    assert number(f"4.7{blank}k{ohm}", "R1") == 4700
    assert number(f"47{blank}{ohm}", "R1") == 47


@pytest.mark.parametrize("micro", ["u", "\N{MICRO SIGN}", "\N{GREEK SMALL LETTER MU}"])
def test_micro_has_three_spellings(micro: str) -> None:
    assert number(f"4.7 {micro}F", "C1") == number(f"4{micro}7", "C1") == number(f"4.7{micro}", "C1")
    assert number(f"4.7 {micro}F", "C1") == sympy.Rational(47, 10**7)


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("1/19.414", sympy.Rational(1000, 19414)),
        ("2^10 - 2**3", 1016),
        ("-2^2", -4),
        ("2^-3", sympy.Rational(1, 8)),
        ("2*-3", -6),
        ("1 - 2 - 3", -4),
        ("12/3/2", 2),
        ("12/3*2", 8),
        ("2--3", 5),
        ("(1 + 2)*3", 9),
        ("((2))^(-(2))", sympy.Rational(1, 4)),
        ("sqrt(8)", 2 * sympy.sqrt(2)),
        ("sqrt(4)/pi", 2 / sympy.pi),
        ("100 dB", 100000),
        ("-20 dB", sympy.Rational(1, 10)),
        ("3 dB", 10 ** sympy.Rational(3, 20)),
        ("0^0", 1),
        ("2^64/2^63", 2),
    ],
)
def test_arithmetic_without_names_is_a_number(text: str, value: sympy.Expr) -> None:
    assert number(text) == value


@pytest.mark.parametrize(
    ("line", "words"),
    [
        ("R1 = 2 k", "glued"),
        ("R1 = 2 K", "glued"),
        ("C1 = 2 n", "glued"),
        ("C1 = 2 µ", "glued"),
        ("R1 = 47 R", "glued"),
        ("R1 = .5k", "`.5k` is not a value code"),
        ("R1 = 1e3k", "`1e3k` is not a value code"),
        ("R1 = 2 kHz", "does not fit"),
        ("C1 = 2 ohm", "does not fit"),
        ("L1 = 2 F", "does not fit"),
        ("Y1 = 2 ohm", "does not fit"),
        ("Z1 = 2 S", "does not fit"),
        ("R1 = 3 dB", "does not fit"),
        ("C1 = 4R7", "means ohm"),
        ("R1 = 4F7", "means F"),
        ("k = 2 deg", "does not fit"),
        ("k = 601 dB", "out of range"),
        ("k = -1e29 dB", "out of range"),
        ("k = 2 Kohm", "not a unit"),
        ("k = 2 mV", "not a unit"),
        ("k = 4k7k", "neither a value code"),
        ("k = -4k7", "`4k7` is a value code"),
        ("k = 2*4k7", "`4k7` is a value code"),
        ("k = R1 + 1 - 2n2", "`2n2` is a value code"),
    ],
)
def test_what_is_no_value_of_the_name_is_refused(line: str, words: str) -> None:
    assert words in complaint(BASE, "out -- L1 -- gnd -- Y1 -- out -- Z1 -- gnd", f"fix {line}").cause


@pytest.mark.parametrize(
    "text", ["1e30", "1e-30", "-1e30", "1e29*10", "600 dB", "1000000000000000000000000000000"]
)
def test_the_bounds_of_numbers_themselves_are_accepted(text: str) -> None:
    assert number(text) != 0


@pytest.mark.parametrize(
    "text", ["1.0001e30", "9.99e-31", "1e31", "1e999999999", "-1e31", "1e29*11", "1e28 GHz", "pi*1e30"]
)
def test_numbers_beyond_the_bounds_are_refused(text: str) -> None:
    assert "out of range" in complaint(BASE, f"fix k = {text}").cause


@pytest.mark.parametrize("name", ["R1", "C1", "L1", "Z1", "Y1"])
@pytest.mark.parametrize("text", ["0", "-1", "1 - 1", "k", "-2*k"])
def test_parts_are_greater_than_zero(name: str, text: str) -> None:
    refused = complaint(
        BASE,
        "out -- L1 -- gnd -- Y1 -- out -- Z1 -- gnd",
        f"fix k = {'0' if text == 'k' else '1'}, {name} = {text}",
    )
    assert f"`{name}` cannot be" in refused.cause


# ties -------------------------------------------------------------------------------------------------------


def test_an_expression_in_names_is_a_tie_and_a_number_is_not() -> None:
    sheet = read(
        BASE, "out -- C2 -- gnd", "fix C2 = C1, C1 = 2n2, R1 = (k - 1)*R3", "choose k", "out -- R3 -- gnd"
    )
    assert set(sheet.ties) == {"C2", "R1"}
    assert set(sheet.numbers) == {"C1"}
    assert {name.text for name in names(sheet.ties["R1"])} == {"k", "R3"}


def test_a_general_impedance_or_admittance_brings_in_its_parts() -> None:
    sheet = read(
        "in -- Y3 -- out -- Z1 -- gnd",
        "fix Y3 = s*C3 + 1/R3, Z1 = R + Rload + s*L_1 + Lambda",
        "ask H = V_out/V_in",
    )
    brought = {name: s.dimension for name, s in sheet.symbols.items() if s.role == "free"}
    assert brought == {"C3": "F", "R3": "ohm", "R": "ohm", "Rload": None, "L_1": "H", "Lambda": None}
    assert sheet.remarks == ()


def test_what_is_brought_in_can_be_fixed_chosen_and_has_its_unit() -> None:
    lines = ("in -- Y3 -- out -- R1 -- gnd", "fix Y3 = s*C3 + 1/R3", "ask H = V_out/V_in")
    assert read(*lines, "fix C3 = 10 nF", "choose R3").symbols["C3"].dimension == "F"
    assert "does not fit" in complaint(*lines, "fix C3 = 10 kohm").cause
    assert "cannot be zero" in complaint(*lines, "fix R3 = 0").cause


def test_only_general_parts_bring_in_names() -> None:
    assert "`R3` is not declared" in complaint(BASE, "fix R1 = 2*R3").cause
    assert "`k` is not declared" in complaint("in -- Y3 -- out", "fix Y3 = k*s", "ask H = V_out/V_in").cause


def test_an_undeclared_name_offers_the_nearest() -> None:
    refused = complaint(BASE, "choose gain_1", "fix R1 = gain1*R2", "out -- R2 -- gnd")
    assert (refused.cause, refused.mend) == ("`gain1` is not declared", "did you mean gain_1?")


def test_a_name_may_be_declared_after_it_is_used() -> None:
    assert set(read("fix R1 = k*R2", "choose k", "out -- R2 -- gnd", BASE).ties) == {"R1"}


@pytest.mark.parametrize(
    "line",
    [
        "fix k = 1/(1 - 1)",
        "fix k = 1/(sqrt(2) + sqrt(3) - sqrt(5 + 2*sqrt(6)))",
        "fix k = (pi - pi)^-2",
        "fix k = 0^-1",
        "choose a\nfix k = 1/(a^2 - 1 - (a - 1)*(a + 1))",
        "choose a\nfix k = a/(a*0)",
        "fix a = 3, k = R1/(a - 3)",
        "fix a = sqrt(2), k = R1/(a^2 - 2)",
        "choose a\nfix b = 2*a, k = R1/(b - 2*a)",
        "target H = 1/(s - s)",
        "target H = 1/(s^2*R1*C1 - s*(s*R1*C1))",
    ],
)
def test_what_divides_by_zero_is_refused(line: str) -> None:
    assert "divides by zero" in complaint(BASE, line).cause


def test_a_small_difference_is_no_zero() -> None:
    assert number("1/(sqrt(2)^2*1e20 - 2e20 + 1e-9)") == 10**9
    read(BASE, "fix a = 3, k = R1/(a - 2.999999999999999999999999999)", "fix R1 = 1k")


@pytest.mark.parametrize("text", ["sqrt(-1)", "sqrt(1 - pi)", "sqrt(2 - sqrt(5))", "R1*sqrt(2 - 3)"])
def test_the_root_of_a_negative_number_is_refused(text: str) -> None:
    assert "square root of a negative" in complaint(BASE, f"fix k = {text}").cause


def test_a_tie_may_hold_the_root_of_a_number() -> None:
    read(BASE, "out -- R2 -- gnd", "fix R1 = R2*sqrt(2), k = R2*sqrt(1 - 1)")
    assert "`R1` cannot be zero" in complaint(BASE, "out -- R2 -- gnd", "fix R1 = R2*sqrt(1 - 1)").cause


def test_a_tie_that_is_negative_for_every_value_is_refused_and_one_that_may_be_positive_is_not() -> None:
    for tie in ("-R2", "-(R2 + 2*R2)", "R2*(1 - 3)", "-1/R2 - 2", "(0 - 2)*k^2*R2"):
        sheet = (BASE, "out -- R2 -- gnd", "fix k = -3", f"fix R1 = {tie}")
        assert "cannot be negative" in complaint(*sheet).cause, tie
    read(BASE, "out -- Z1 -- gnd", "fix Z1 = -R3")  # a negative impedance is a general one
    for tie in ("(k - 1)*R2", "k*R2", "R2 - R3", "k^2*R2"):
        read(BASE, "out -- R2 -- gnd -- R3 -- out", "choose k", f"fix R1 = {tie}")


def test_a_tie_of_numbers_is_held_to_the_bounds() -> None:
    assert "out of range" in complaint(BASE, "fix a = 1e20, b = a*a").cause
    assert "`R1` cannot be zero" in complaint(BASE, "fix a = 2, R1 = a - 2").cause
    assert "`R1` cannot be negative" in complaint(BASE, "fix a = 2, R1 = a - 3").cause


def test_ties_may_not_go_in_a_loop() -> None:
    refused = complaint(BASE, "fix a = b + 1, b = c, c = 2*a")
    assert refused.cause == "these fixes go in a loop: a -> b -> c -> a"
    assert "in a loop: a -> a" in complaint(BASE, "fix a = a + 1").cause
    assert "in a loop: R1 -> R1" in complaint(BASE, "fix R1 = R1").cause


def test_s_stands_only_in_impedances_admittances_gains_and_targets() -> None:
    assert "`s` cannot stand" in complaint(BASE, "fix k = s").cause
    assert (
        "`R1` would depend on s, as `Z1` does"
        in complaint(BASE, "out -- Z1 -- gnd", "fix Z1 = s*R2, R1 = 2*Z1").cause
    )
    read(BASE, "out -- Z1 -- gnd -- Y1 -- out", "fix Z1 = s*R2, Y1 = 2/Z1")


# choose and solve -------------------------------------------------------------------------------------------


def test_choose_and_solve_declare_parameters_and_keep_their_order() -> None:
    sheet = read(BASE, "choose R1, k", "choose q", "solve m", "target H = k*q*m")
    assert (sheet.chosen, sheet.solved) == (("R1", "k", "q"), ("m",))
    assert [name for name, s in sheet.symbols.items() if s.role == "free"] == ["k", "q", "m"]
    assert sheet.remarks == ()


def test_what_contradicts_a_fix_is_refused() -> None:
    read(BASE, "choose C1", "fix C1 = 2n2")
    assert "tied on line" in complaint(BASE, "out -- C2 -- gnd", "choose C1", "fix C1 = C2").cause
    assert "fixed on line" in complaint(BASE, "solve R1", "fix R1 = 2k").cause
    assert "tied on line" in complaint(BASE, "solve k", "fix k = 2*R1").cause
    assert "already" in complaint(BASE, "solve k", "choose k").cause


def test_a_name_that_nothing_uses_is_remarked_with_the_nearest() -> None:
    sheet = read(BASE, "fix R11 = 2k", "choose zeta")
    assert [(r.message, r.place.line) for r in sheet.remarks] == [
        ("nothing uses `R11`; did you mean R1?", 4),
        ("nothing uses `zeta`", 5),
    ]
