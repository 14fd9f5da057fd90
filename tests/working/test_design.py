"""Each sentence of the design's "Workings", one test or more."""

from __future__ import annotations

import pytest

from symcirc.complaints import Complaint, Source
from symcirc.derivation import pose_real
from symcirc.working import check_posed
from tests.working.calling import LOW_PASS, RC, TWO_DRIVES, WITH_VALUES, checked, one, sheet_of, verdicts

EXAMPLE = """let Vi = V_in, Va = V_a, Vo = V_out
(Vi - Va)/R1 = Va*s*C1 + (Va - Vo)/R2 + Va/R3        # KCL at a; node m is at 0 V
Va/R3 = -Vo s C2                                     # a space may stand for *
Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)
"""


def test_the_example_of_the_design_holds_and_its_last_line_follows() -> None:
    result = checked(LOW_PASS, EXAMPLE)
    assert [line.verdict for line in result.lines] == ["defines"] * 3 + ["holds"] * 3
    assert [line.follows for line in result.lines] == [None] * 3 + [False, False, True]
    assert result.missing == ()
    assert result.exit_status == 0


def test_the_json_is_the_designs() -> None:
    result = checked(RC, "V_out = V_in/(1 + s R1 C1)")
    assert result.as_json() == {
        "lines": [
            {
                "line": 1,
                "text": "V_out = V_in/(1 + s R1 C1)",
                "verdict": "holds",
                "follows": False,
                "note": None,
                "suggestions": [],
            }
        ],
        "missing": [],
    }


def test_line_numbers_count_the_files_lines_and_a_chain_gives_one_entry_an_equality() -> None:
    result = checked(RC, "# by hand\n\nH = 1/(1 + s R1 C1) = 1/(1 + s C1 R1) = 2\n")
    assert [(line.line, line.text, line.verdict) for line in result.lines] == [
        (3, "H = 1/(1 + s R1 C1)", "holds"),
        (3, "1/(1 + s R1 C1) = 1/(1 + s C1 R1)", "holds"),
        (3, "1/(1 + s C1 R1) = 2", "fails"),
    ]


# names ---------------------------------------------------------------------------------------------------------


def test_a_let_may_say_otherwise_of_a_voltage() -> None:
    assert verdicts(RC, "let V_out = V_in\nV_out = V_in") == ["defines", "holds"]


def test_every_asks_name_is_known() -> None:
    assert (
        verdicts(TWO_DRIVES, "Ha = R2/(R1 + R2 + s C1 R1 R2)\nHb = R1/(R1 + R2 + s C1 R1 R2)")
        == ["holds"] * 2
    )


@pytest.mark.parametrize(
    "line",
    [
        "w0 = 1/sqrt(R2 R3 C1 C2)",
        "f0 = 1/(2 pi sqrt(R2 R3 C1 C2))",
        "Q = sqrt(C1/C2)/(sqrt(R3/R2) + sqrt(R2/R3) + sqrt(R2 R3)/R1)",
        "let w0 = 1/sqrt(R2 R3 C1 C2)",
    ],
)
def test_w0_f0_and_q_are_the_circuits(line: str) -> None:
    assert one(LOW_PASS, line).verdict == "holds"


@pytest.mark.parametrize(
    "line", ["w0 = 1/sqrt(R1 R3 C1 C2)", "let Q = 1", "w0 = -1/sqrt(R2 R3 C1 C2)", "w0 = 2 f0"]
)
def test_a_let_of_w0_or_q_is_judged_as_an_equation(line: str) -> None:
    assert one(LOW_PASS, line).verdict == "fails"


def test_w0_is_a_free_name_where_the_order_is_not_2() -> None:
    assert verdicts(RC, "w0 = 1/(R1 C1)\nH = 1/(1 + s/w0)") == ["defines", "holds"]


@pytest.mark.parametrize(
    "line", ["s = j w", "omega = w", "s = 2 pi j f", "H = 1/(1 + j omega R1 C1)", "j^2 = -1"]
)
def test_w_omega_f_and_j_are_known(line: str) -> None:
    assert one(RC, line).verdict == "holds"


def test_a_parameter_or_a_let_named_f_comes_first_and_a_node_does_not() -> None:
    sheet = "in -- R1 -- f -- C1 -- gnd\nask H = V_f/V_in\n"
    assert one(sheet, "s = 2 pi j f").verdict == "holds"
    assert one(sheet, "let f = R1\nH = 1/(1 + s f C1)").verdict == "holds"
    named = "in -- R1 -- out -- C1 -- gnd\nfix R1 = f*1 \nchoose f\nask H = V_out/V_in\n"
    assert one(named, "H = 1/(1 + s f C1)").verdict == "holds"


def test_s_behind_a_quantity_is_the_quantity_and_any_other_bracket_is_a_product() -> None:
    assert one(RC, "let Vo = V_out\nVo(s)/V_in(s) = H(s)").verdict == "holds"
    assert one(RC, "D(s) = 1 + s R1 C1\nH(s) D(s) = 1").verdict == "holds"
    assert one(RC, "R1(s) C1 = R1 s C1").verdict == "holds"
    assert one(RC, "V_out(1 + s R1 C1) = V_in").verdict == "holds"
    assert one(RC, "sqrt(s) = s^2/sqrt(s)^3").verdict == "holds"


def test_numbers_are_plain_and_two_side_by_side_are_an_error() -> None:
    assert "two numbers stand side by side" in str(one(RC, "1 2 = 3").note)
    assert one(RC, "C1 = 4k7").verdict == "unread"
    assert one(RC, "R1/R1 = 8e3/8000").verdict == "holds"


def test_a_new_name_alone_on_one_side_defines_and_keeps_its_meaning() -> None:
    working = "D = 1 + s*C2*R2\nD = 1 + s C2 R2\n1 + s C2 R2 = E\nE = D\nE = 2 D"
    assert verdicts(LOW_PASS, working) == ["defines", "holds", "defines", "holds", "fails"]


def test_a_let_of_a_name_that_is_taken_is_judged_as_an_equation() -> None:
    assert verdicts(RC, "D = R1\nlet D = R1\nlet D = 2 R1\nlet R1 = D\nlet s = j w") == [
        "defines",
        "holds",
        "fails",
        "holds",
        "holds",
    ]


def test_a_name_defined_in_a_line_is_known_in_the_rest_of_it() -> None:
    assert verdicts(RC, "let a = R1, b = a\nc = R1 = b = c") == [
        "defines",
        "defines",
        "defines",
        "holds",
        "holds",
    ]


def test_a_new_name_not_alone_is_unread_with_the_nearest_name() -> None:
    line = one(RC, "V_outt/V_in = 1/(1 + s R1 C1)")
    assert line.verdict == "unread"
    assert "did you mean V_out" in str(line.note)


# products ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "line",
    [
        "V_in = V_out + sC1R1V_out",
        "V_in - V_out = sC1 R1 V_out",
        "V_in = V_out(1 + 2sC1R1/2)",
        "H = 1/(1 + jwR1C1)",
        "H = 1/(1 + 2pif j R1C1)",
    ],
)
def test_names_may_be_run_together(line: str) -> None:
    assert one(RC, line).verdict == "holds"


def test_a_space_binds_as_a_star_left_to_right() -> None:
    assert one(RC, "1/R1 C1 = C1/R1").verdict == "holds"
    assert one(RC, "1/R1 C1 = 1/(R1 C1)").verdict == "fails"
    assert one(RC, "H = 1/(1 + s/1/R1C1)").verdict == "fails"


def test_a_word_is_looked_up_whole_before_it_is_split() -> None:
    sheet = "in -- R1 -- out -- RC1 -- gnd\nout -- C1 -- gnd\nask H = V_out/V_in\n"
    assert one(sheet, "V_out/RC1 + s C1 V_out = (V_in - V_out)/R1").verdict == "holds"


def test_a_word_with_two_splits_is_unread() -> None:
    sheet = "in -- RC -- out -- R -- gnd\nout -- C -- gnd\nout -- CC -- gnd\nask H = V_out/V_in\n"
    line = one(sheet, "RCC = 1")
    assert line.verdict == "unread"
    assert "can be read as" in str(line.note)


@pytest.mark.parametrize("line", ["R1 || R3 = R1 R3/(R1 + R3)", "(R1 // R3) = 1/(1/R1 + 1/R3)"])
def test_parallel_parts_are_written_as_the_trade_does(line: str) -> None:
    assert one(LOW_PASS, line).verdict == "holds"


def test_parallel_binds_weaker_than_a_product_and_stronger_than_a_sum() -> None:
    assert one(LOW_PASS, "R2 + R1 || 1/(s C1) = R2 + R1/(1 + s R1 C1)").verdict == "holds"
    assert one(LOW_PASS, "R1 || R2 || R3 = 1/(1/R1 + 1/R2 + 1/R3)").verdict == "holds"


# drives --------------------------------------------------------------------------------------------------------


def test_the_other_asks_voltage_drives_are_live_and_independent() -> None:
    assert one(TWO_DRIVES, "V_out = Ha V_a + Hb V_b").verdict == "holds"
    assert one(TWO_DRIVES, "V_out = Ha V_a").verdict == "fails"
    assert one(TWO_DRIVES, "V_b = 0").verdict == "fails"
    assert one(TWO_DRIVES, "(V_a - V_out)/R1 + (V_b - V_out)/R2 = s C1 V_out").verdict == "holds"


def test_under_switches_to_an_asks_own_drives_and_its_with() -> None:
    assert verdicts(TWO_DRIVES, "under Ha\nV_out = Ha V_a\nV_b = 0") == ["holds", "holds"]
    working = "under Zout\nV_a = 0\nV_b = 0\nI_out = V_out/R1 + V_out/R2 + s C1 V_out\nZout = V_out/I_out"
    assert verdicts(TWO_DRIVES, working) == ["holds"] * 4
    assert verdicts(TWO_DRIVES, "under Zb\nV_a = 0\nI_b = (V_b - V_out)/R2") == ["holds"] * 2


def test_under_an_unknown_ask_is_unread() -> None:
    line = one(RC, "under Zout")
    assert line.verdict == "unread"
    assert "asks for H" in str(line.note)


def test_a_definition_means_the_same_quantity_under_other_drives() -> None:
    assert verdicts(TWO_DRIVES, "let Vo = V_out\nunder Zout\nZout = Vo/I_out") == ["defines", "holds"]


def test_a_current_that_nothing_delivers_is_unread() -> None:
    line = one(LOW_PASS, "I_a = 0")
    assert line.verdict == "unread"
    assert "nothing delivers a current into node `a`" in str(line.note)


def test_currents_are_the_sheets() -> None:
    working = "I_R1 = (V_in - V_out)/R1\nI_C1 = s C1 V_out\nI_R1 = I_C1\nI_in = I_R1"
    assert verdicts(RC, working) == ["holds"] * 4


# does it follow ------------------------------------------------------------------------------------------------


def test_a_false_line_that_follows_from_a_false_one_is_carried() -> None:
    working = "(V_in - V_out)/R1 = -s C1 V_out\nV_out (1 - s R1 C1) = V_in\nH = 1/(1 - s R1 C1)"
    result = checked(RC, working)
    assert [(line.verdict, line.follows) for line in result.lines] == [
        ("fails", False),
        ("carried", True),
        ("carried", True),
    ]
    assert result.exit_status == 1


def test_what_contradicts_the_lines_above_is_set_aside_and_nothing_follows_from_it() -> None:
    working = "H = 1/(1 + s R1 C1)\nH = 1/(1 - s R1 C1)\nH = 7\nV_out = 3 V_in\nH = 1/(1 + s C1 R1)"
    result = checked(RC, working)
    assert [(line.verdict, line.follows) for line in result.lines] == [
        ("holds", False),
        ("fails", False),
        ("fails", False),
        ("fails", False),
        ("holds", True),
    ]


def test_a_true_line_may_not_follow_and_the_circuit_is_not_asked_for_that() -> None:
    result = checked(
        LOW_PASS, "V_m = 0\nI_R3 = I_C2\nH (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1) = -R2/R1"
    )
    assert [(line.verdict, line.follows) for line in result.lines] == [("holds", False)] * 3


def test_an_identity_of_the_parts_follows_from_nothing() -> None:
    assert one(LOW_PASS, "R1 || R2 = R2 R1/(R2 + R1)").follows is True


def test_what_is_not_linear_is_neither() -> None:
    assert one(LOW_PASS, "w0 = 1/sqrt(R2 R3 C1 C2)").follows is None
    assert one(RC, "V_out^2 = V_in V_out/(1 + s R1 C1)").follows is False  # V_out on both sides goes out
    assert one(RC, "V_out^2 = V_in^2/(1 + s R1 C1)^2").follows is None


# what it is true of --------------------------------------------------------------------------------------------


def test_a_line_that_needs_the_numbers_holds_for_the_given_values() -> None:
    line = one(WITH_VALUES, "H = -1/(s^2 C1 C2 R2 R3 + s C2 (2 R3 + R1) + 1)")
    assert (line.verdict, line.note) == ("holds", "for the given values")
    assert one(WITH_VALUES, "C1 = 10 C2").note == "for the given values"
    assert one(LOW_PASS, "C1 = 10 C2").verdict == "fails"


def test_a_fix_that_is_an_expression_counts_in_symbols_and_is_named() -> None:
    line = one(LOW_PASS + "fix C1 = 4*C2\n", "V_out/V_a = -1/(s R3 C1/4)")
    assert (line.verdict, line.note) == ("holds", "thanks to the tie C1 = 4*C2")
    assert one(LOW_PASS + "fix C1 = 4*C2\n", "V_out/V_a = -1/(s R3 C2)").note is None


def test_with_real_amplifiers_the_same_line_may_fail() -> None:
    sheet = sheet_of(
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out, gain 1e5\nask H = V_out/V_in"
    )
    lines = Source("a.work", "H = -R2/R1\nV_out = -U1_gain V_m\nH = -U1_gain R2/(R1 (1 + U1_gain) + R2)")
    assert [line.verdict for line in check_posed(pose_real(sheet), lines).lines] == [
        "fails",
        "holds",
        "holds",
    ]


def test_a_division_by_what_is_zero_fails_and_says_so() -> None:
    line = one(LOW_PASS, "V_out/V_m = 3")
    assert line.verdict == "fails"
    assert line.note == "it divides by what is zero in this circuit"


# missing -------------------------------------------------------------------------------------------------------


def test_missing_names_the_node_whose_current_law_no_line_uses() -> None:
    kcl_a = "(V_in - V_a)/R1 = V_a s C1 + (V_a - V_out)/R2 + V_a/R3"
    answer = "V_out/V_in = -(R2/R1)/(s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)"
    assert checked(LOW_PASS, f"{kcl_a}\n{answer}").missing == ("m",)
    assert checked(LOW_PASS, answer).missing == ("a", "m")
    assert checked(LOW_PASS, f"{kcl_a}\nV_a/R3 = -V_out s C2\n{answer}").missing == ()


def test_a_failed_try_at_a_nodes_law_is_not_missing() -> None:
    slip = "(V_in - V_a)/R1 = V_a s C1 + (V_a + V_out)/R2 + V_a/R3\nV_a/R3 = -V_out s C2"
    result = checked(LOW_PASS, slip)
    assert [line.verdict for line in result.lines] == ["fails", "holds"]
    assert result.missing == ()


def test_a_stage_whose_answer_is_one_nodes_law_misses_nothing() -> None:
    sheet = "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in"
    assert checked(sheet, "V_in/R1 = -V_out/R2").missing == ()


def test_a_working_about_parts_alone_misses_nothing() -> None:
    assert checked(LOW_PASS, "D = R1 + R2\nR1 || R2 = R1 R2/D").missing == ()


# nothing readable ----------------------------------------------------------------------------------------------


def test_exit_status_2_where_nothing_could_be_read() -> None:
    assert checked(RC, "what is this").exit_status == 2
    with pytest.raises(Complaint, match="no equation"):
        checked(RC, "# nothing\n\n")


def test_one_bad_line_is_unread_and_the_rest_go_on() -> None:
    result = checked(RC, "V_out = (\nI_R1 = I_C1\n= 3\nH = 1/(1 + s R1 C1)")
    assert [line.verdict for line in result.lines] == ["unread", "holds", "unread", "holds"]
    assert result.exit_status == 1


# every kind of sheet -------------------------------------------------------------------------------------------


def test_parts_and_nodes_of_blocks_have_their_flat_names() -> None:
    sheet = "block cell (p, q)\n p -- R1 -- x -- R2 -- q\n x -- C1 -- gnd\nend\nuse cell as S1 (in, out)\n"
    sheet += "out -- R3 -- gnd\nask H = V_out/V_in\n"
    kcl = "(V_in - V_S1_x)/S1_R1 = (V_S1_x - V_out)/S1_R2 + s S1_C1 V_S1_x"
    result = checked(sheet, kcl)
    assert result.lines[0].verdict == "holds"
    assert result.missing == ("out",)
    assert checked(sheet, f"{kcl}\nV_out = 3 V_S1_x").missing == ("out",)


def test_a_loop_gain_is_judged_under_its_own_drive() -> None:
    # the loop gain of a follower behind a divider is -A times what returns, by the design's definition of loop(U1)
    sheet = "gnd -- R1 -- m -- R2 -- out\nU1 opamp: plus in, minus m, drives out, gain 1e5\n"
    sheet += "in -- R3 -- gnd\nask T = loop(U1) with V_in = 0\n"
    assert verdicts(sheet, "V_m = V_out R1/(R1 + R2)\nV_in = 0\nT = U1_gain R1/(R1 + R2)") == ["holds"] * 3


def test_sources_transformers_and_conveyors_may_stand_in_the_circuit() -> None:
    sheet = "in -- R1 -- x\nK1 conveyor: x x, y gnd, z b, sign +\nb -- R2 -- gnd\nb -- R3 -- c\n"
    sheet += "T1 transformer: primary c, secondary d, ratio 2\nd -- R4 -- gnd\n"
    sheet += "E1 vcvs: senses b, drives out, gain 3\nout -- R5 -- gnd\nask H = V_out/V_in\n"
    lines = "V_x = 0\nI_K1 = V_in/R1\nV_b/R2 + (V_b - V_c)/R3 = -I_K1\nV_c = T1_ratio V_d\nV_out = 3 V_b\n"
    lines += "H = -3 (R2 || (R3 + 4 R4))/R1"
    found = checked(sheet, lines)
    assert [line.verdict for line in found.lines] == ["holds"] * 6
    assert [line.note for line in found.lines][3:] == [None, "for the given values", "for the given values"]
