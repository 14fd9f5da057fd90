"""What is asked."""

from __future__ import annotations

import pytest

from symcirc.sheet.model import Ask, NodeCurrent, PartCurrent, Voltage
from tests.sheet.reading import complaint, read

CIRCUIT = """
in -- R1 -- a -- C1 -- b
a -- R2 -- lp -- R3 -- bp
U1 opamp: plus gnd, minus b, drives lp, gain 1e5
U2 opamp: plus gnd, minus a, drives bp
"""


def ask(text: str) -> Ask:
    return read(CIRCUIT, f"ask {text}").asks[0]


def quantity(text: str) -> object:
    """Return what a quantity over the line is, without its place."""
    over = ask(f"H = {text}/V_in").over
    match over:
        case Voltage(plus=plus, minus=minus):
            return ("voltage", plus, minus)
        case PartCurrent(part=part):
            return ("part", part)
        case NodeCurrent(node=node):
            return ("node", node)
    return None


@pytest.mark.parametrize(
    ("text", "meaning"),
    [
        ("V_a", ("voltage", "a", "gnd")),
        ("(V_a)", ("voltage", "a", "gnd")),
        ("(V_a - V_b)", ("voltage", "a", "b")),
        ("( V_a-V_b )", ("voltage", "a", "b")),
        ("I_R1", ("part", "R1")),
        ("(I_R1)", ("part", "R1")),
        ("I_U1", ("part", "U1")),
        ("I_in", ("node", "in")),
    ],
)
def test_a_quantity_is_a_voltage_a_difference_or_a_current(text: str, meaning: object) -> None:
    assert quantity(text) == meaning


def test_every_form_of_an_ask_is_read() -> None:
    sheet = read(
        CIRCUIT,
        "ask H = V_lp/V_in",
        "ask D = (V_a - V_b) / V_in",
        "ask Zin = V_in/I_in",
        "ask Zout = V_lp/I_lp with V_in = 0",
        "ask Zt = V_lp/I_a with V_in = 0, I_b = 0.0",
        "ask Zu = V_lp/I_a with V_in = 0, with I_b = 0",
        "ask K = V_lp/V_bp driven at in",
        "ask L = V_lp/V_bp driven at in with V_b = 0",
        "ask M = V_lp/V_bp with V_b = 0 driven at in",
        "ask Y = I_R1/V_in",
        "ask F = V_lp/(V_a - V_b)",
        "ask T = loop(U1) with V_in = 0",
    )
    assert [a.name for a in sheet.asks] == ["H", "D", "Zin", "Zout", "Zt", "Zu", "K", "L", "M", "Y", "F", "T"]
    assert [(d.quantity, d.node) for d in sheet.ask("Zt").dead] == [("V", "in"), ("I", "b")]
    assert [(d.quantity, d.node) for d in sheet.ask("Zu").dead] == [("V", "in"), ("I", "b")]
    assert [sheet.ask(name).driven_at for name in "HKLM"] == [None, "in", "in", "in"]
    assert [d.node for d in sheet.ask("L").dead] == [d.node for d in sheet.ask("M").dead] == ["b"]
    loop = sheet.ask("T")
    assert (loop.over, loop.under, loop.loop) == (None, None, "U1")
    assert [d.node for d in loop.dead] == ["in"]


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("H = V_out/V_in", "there is no node `out`"),
        ("H = V_lp/I_out", "there is no part or node `out`"),
        ("H = V_lp/V_gnd", "`gnd` is the reference node"),
        ("H = V_gnd/V_in", "`gnd` is the reference node"),
        ("H = V_lp/I_gnd", "`gnd` is the reference node"),
        ("H = V_lp/V_in with V_gnd = 0", "`gnd` is the reference node"),
        ("H = V_lp/V_bp driven at gnd", "`gnd` is the reference node"),
        ("H = V_R1/V_in", "`R1` is a part"),
        ("H = V_lp/I_R1", "cannot be the drive"),
        ("H = V_lp/V_in with V_q = 0", "there is no node `q`"),
        ("H = V_lp/V_in with V_a = 1", "only be set to 0"),
        ("H = V_lp/V_bp driven at R1", "`R1` is a part"),
        ("H = (V_a - V_a)/V_in", "this difference is zero"),
        ("H = (V_a - I_b)/V_in", "a difference is of two voltages"),
        ("T = loop(U2) with V_in = 0", "needs its gain or its gbw"),
        ("T = loop(U3) with V_in = 0", "there is no opamp `U3`"),
        ("T = loop(U1)", "what stands at the input"),
        ("T = loop(U1) driven at in with V_in = 0", "driven at the amplifier's output"),
        ("R1 = V_lp/V_in", "is a part or a parameter already"),
        ("U1 = V_lp/V_in", "is a part or a parameter already"),
        ("U1_gain = V_lp/V_in", "is a part or a parameter already"),
    ],
)
def test_an_ask_that_means_nothing_is_refused(text: str, words: str) -> None:
    assert words in complaint(CIRCUIT, f"ask {text}").cause


def test_one_name_asked_twice_is_refused() -> None:
    assert "asked twice" in complaint(CIRCUIT, "ask H = V_lp/V_in", "ask H = V_lp/V_in").cause


def test_a_name_may_be_a_part_and_a_node_of_different_kinds_of_current() -> None:
    sheet = read("in -- R1 -- a -- R2 -- gnd", "ask H = I_R1/I_in", "ask G = V_a/I_a")
    assert isinstance(sheet.ask("H").over, PartCurrent)
    assert isinstance(sheet.ask("G").under, NodeCurrent)


def test_a_loop_gain_accepts_an_amplifier_with_a_chosen_gain() -> None:
    assert read(CIRCUIT, "choose U2_gbw", "ask T = loop(U2) with I_in = 0").ask("T").loop == "U2"
