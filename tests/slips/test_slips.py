"""The search for slips: what is said of a false line, and the mend in its author's own notation."""

from __future__ import annotations

import pytest

from symcirc.complaints import Source
from symcirc.derivation import pose
from symcirc.slips import check_and_mend
from symcirc.working import Checked, Line
from tests.slips.slips import NAMES, ONE, TWO, Slip
from tests.working.calling import LOW_PASS, WITH_VALUES, sheet_of


def mended(working: str, sheet: str = LOW_PASS, file: str = "a.work") -> Checked:
    return check_and_mend(pose(sheet_of(sheet)), Source(file, working))


def last(line: str, sheet: str = LOW_PASS) -> Line:
    return mended(NAMES + line, sheet).lines[-1]


@pytest.mark.parametrize("slip", ONE, ids=lambda slip: slip.line)
def test_the_mend_of_one_slip_comes_first(slip: Slip) -> None:
    line = last(slip.line)
    assert line.verdict == "fails"
    assert line.suggestions[0] == slip.mend
    assert line.note is not None
    assert slip.sentence in line.note


@pytest.mark.parametrize("slip", TWO, ids=lambda slip: slip.line)
def test_the_mend_of_two_slips_comes_first(slip: Slip) -> None:
    line = last(slip.line)
    assert line.suggestions[0] == slip.mend
    assert line.note is not None
    assert slip.sentence in line.note


@pytest.mark.parametrize("slip", [*ONE, *TWO], ids=lambda slip: slip.line)
def test_every_suggestion_holds_when_it_is_put_in(slip: Slip) -> None:
    suggestions = last(slip.line).suggestions
    assert 1 <= len(suggestions) <= 3
    assert {last(suggestion).verdict for suggestion in suggestions} == {"holds"}


@pytest.mark.parametrize(
    "line",
    [
        "Vo = R1 C1 + 17 Vi^2",
        "Va = Vi Vo/(R1 + s C2)^5 - 3",
        "s C1 Va = sqrt(7) Vi + w0 Vo/f0 - R2 Va^2/R3",
        "Va/0 = Vo",
    ],
)
def test_nothing_is_suggested_rather_than_something_wild(line: str) -> None:
    assert last(line).suggestions == ()


def test_the_slip_is_marked_where_it_stands() -> None:
    line = last("(Vi - Va)/R1 = s C1 Va + (Va + Vo)/R2 + Va/R3")
    assert line.slip is not None
    assert (line.slip.place.line, line.slip.place.column, line.slip.place.end) == (2, 32, 34)


def test_a_chain_is_mended_whole() -> None:
    line = last("Va = -s C2 R3 Vo = -s C2 R2 Vo")
    assert (line.text, line.suggestions[0]) == ("-s C2 R3 Vo = -s C2 R2 Vo", "Va = -s C2 R3 Vo = -s C2 R3 Vo")


def test_products_and_parallel_parts_are_written_as_the_line_has_them() -> None:
    assert last("Va = -C2*R3*Vo").suggestions[0] == "Va = -s*C2*R3*Vo"
    assert last("R1*R2/(R1 + R2) = R1 // R3").suggestions[0] == "R1*R2/(R1 + R2) = R1 // R2"


def test_names_that_are_run_together_are_taken_apart_where_one_is_changed() -> None:
    assert last("Va = -sC2R2Vo").suggestions[0] == "Va = -sC2 R3 Vo"


def test_a_rounded_number_is_mended_to_its_digits() -> None:
    line = last("f0 = 1/(2 pi sqrt(R2 R3 C1 C2)) = 2400", WITH_VALUES)
    assert line.verdict == "fails"
    assert line.suggestions[0] == "f0 = 1/(2 pi sqrt(R2 R3 C1 C2)) = 3337"


def test_later_lines_carry_a_slip_and_with_the_mends_every_line_holds() -> None:
    checked = mended(
        NAMES + "(Vi - Va)/R1 = s C1 Va + (Va + Vo)/R2 + Va/R3\n"
        "Va = -s C2 R3 Vo\nVi/R1 = Va (1/R1 + 1/R2 + 1/R3 + s C1) + Vo/R2\n"
    )
    assert [line.verdict for line in checked.lines[3:]] == ["fails", "holds", "carried"]
    assert checked.lines[5].suggestions[0] == "Vi/R1 = Va (1/R1 + 1/R2 + 1/R3 + s C1) - Vo/R2"
    assert checked.still_false == ()


def test_a_line_without_a_mend_is_still_false_afterwards() -> None:
    assert mended(NAMES + "Va = s C2 R3 Vo\nVo = R1 C1 + 17 Vi^2").still_false == (3,)


def test_a_slip_under_another_ask_is_found_under_its_drives() -> None:
    sheet = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\nask Zout = V_out/I_out with V_in = 0\n"
    line = mended("under Zout\nI_out = V_out/R1 - V_out s C1", sheet).lines[-1]
    assert line.suggestions[0] == "I_out = V_out/R1 + V_out s C1"


def test_a_tie_of_the_sheet_counts() -> None:
    line = last("Vo/Vi = -(R2/R1)/(s^2 C1^2 R2 R3 + s C1 (R2 + R3 + R2 R3/R1))", LOW_PASS + "fix C2 = C1\n")
    assert line.suggestions[0].endswith("+ 1)")


LATEX = [
    (
        r"\frac{V_{in} - V_a}{R_1} &= s C_1 V_a + \frac{V_a + V_{out}}{R_{2}} + \dfrac{V_a}{R_3}, \label{eq:a} \\",
        r"\frac{V_{in} - V_a}{R_1} &= s C_1 V_a + \frac{V_a - V_{out}}{R_{2}} + \dfrac{V_a}{R_3}",
    ),
    (r"\frac{V_{a}}{R_3} = s C_{2} V_\mathrm{out} . % sign", r"\frac{V_{a}}{R_3} = -s C_{2} V_\mathrm{out}"),
    (r"\omega_0 = \frac1{\sqrt{R_2R_1C_1C_2}}", r"\omega_0 = \frac1{\sqrt{R_2 R_{3}C_1C_2}}"),
    (r"V_a = -\frac{V_{out}}{s C_2} R_3", r"V_a = -V_{out} s C_2 R_3"),
    (
        r"R_1 \parallel R_2 = \frac{R_1+R_2}{R_1R_2}",
        r"R_1 \parallel R_2 = \frac{R_1 R_2}{R_1+R_2}",
    ),
    (
        r"Q = \frac{\sqrt{R_2 R_3 C_1 C_2}}{C_2 R_2 + R_3 + \frac{R_2 R_3}{R_1}}",
        r"Q = \frac{\sqrt{R_2 R_3 C_1 C_2}}{C_2 \left( R_2 + R_3 + \frac{R_2 R_3}{R_1} \right)}",
    ),
    (
        r"\frac{V_{out}}{V_{in}} = -\frac{R_2}{R_1} \cdot \frac{1}{s^2 C_1 C_2 R_2 R_3"
        "\n"
        r"  + s C_2 \left( R_2 + \frac{R_2 R_3}{R_1} \right) + 1}",
        r"\frac{V_{out}}{V_{in}} = -\frac{R_2}{R_1} \cdot \frac{1}{s^2 C_1 C_2 R_2 R_3 "
        r"+ s C_2 \left( R_2 + \frac{R_2 R_3}{R_1} + R_{3} \right) + 1}",
    ),
]


@pytest.mark.parametrize(("row", "mend"), LATEX, ids=[mend for _, mend in LATEX])
def test_a_row_of_latex_is_mended_in_latex(row: str, mend: str) -> None:
    line = mended("\\begin{align}\n" + row + "\n\\end{align}\n", file="a.tex").lines[-1]
    assert line.suggestions[0] == mend
    again = mended(rf"\[ {mend} \]", file="a.tex").lines[-1]
    assert again.verdict == "holds"


def test_another_ask_that_cannot_be_solved_is_no_hindrance() -> None:
    sheet = "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in\n"
    sheet += "ask Z = V_in/I_in with V_m = 0\n"
    assert mended("V_in/R1 = V_out/R2", sheet).lines[-1].suggestions[0] == "V_in/R1 = -V_out/R2"


def test_a_line_nested_as_deep_as_a_line_may_be_is_judged_and_not_searched() -> None:
    nested = "s"
    for _ in range(97):
        nested = f"(1-2/-{nested}/3)"
    line = mended(f"V_out = V_in*{nested}").lines[0]
    assert (line.verdict, line.suggestions) == ("fails", ())


@pytest.mark.parametrize(
    ("line", "mend"),
    [
        ("1/(2 pi R3 C2) = 16000", "1/(2 pi R3 C2) = 15392"),
        ("C1/C2 = 11", "C1/C2 = 10"),
        ("R1 = 5000", "R1 = 10000"),
    ],
)
def test_a_value_that_was_worked_out_is_mended_by_the_value(line: str, mend: str) -> None:
    assert last(line, WITH_VALUES).suggestions == (mend,)


@pytest.mark.parametrize("line", ["R1 = 5", "1 = 2", "C1/C2 = 7"])
def test_a_statement_about_parts_alone_gets_no_mend_that_says_nothing(line: str) -> None:
    assert last(line).suggestions == ()


def test_parts_in_series_where_they_are_parallel_are_written_out_where_the_line_has_the_sign_already() -> (
    None
):
    assert last("R1 || R3 = R1 + R3").suggestions[0] == "R1 || R3 = R1 R3/(R1 + R3)"


def test_a_minus_sign_is_never_written_twice() -> None:
    assert not any("--" in mend.replace(" ", "") for mend in last("Va = -C2 R3 Vo/R2").suggestions)
