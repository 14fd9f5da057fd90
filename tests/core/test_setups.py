"""What an ask applies: its drive live, the others dead, conditions on top; and contradictions refused."""

from __future__ import annotations

import pytest

from symcirc.circuit.model import CurrentDrive, LoopDrive, VoltageDrive
from symcirc.complaints import Complaint
from symcirc.sheet.model import Voltage
from tests.core.functions import posed

CIRCUIT = "in -- R1 -- a -- R2 -- b -- R3 -- out -- R4 -- gnd\na -- R5 -- gnd\nb -- R6 -- gnd\n"

SHORTS = [
    ("ask H = V_out/V_in", ()),
    ("ask H = V_out/V_in with V_a = 0", (("a", "gnd"),)),
    ("ask H = V_out/V_in with V_b = 0, V_a = 0", (("a", "gnd"), ("b", "gnd"))),
    ("ask H = V_out/V_in with I_a = 0", ()),
    ("ask H = V_out/I_out\nask A = V_a/V_in", (("in", "gnd"),)),
    ("ask H = V_out/I_out with I_in = 0\nask A = V_a/V_in", ()),
    ("ask H = V_out/I_out with V_in = 0\nask A = V_a/V_in", (("in", "gnd"),)),
    ("ask H = V_out/I_out\nask A = V_a/I_in", ()),
    ("ask H = V_out/V_in\nask A = V_a/V_in\nask B = V_b/V_in", ()),
    ("ask H = V_out/V_in\nask Zin = V_in/I_in", ()),
    ("ask H = V_in/I_in\nask A = V_a/V_in", ()),
    ("ask H = V_out/V_in\nask A = V_in/(V_a - V_b)", (("a", "b"),)),
    ("ask H = V_out/V_in\nask A = V_in/(V_a - V_b)\nask B = V_in/(V_b - V_a)", (("a", "b"),)),
    ("ask H = V_in/(V_a - V_b)\nask A = V_in/(V_b - V_a)", ()),
    ("ask H = V_out/V_in with I_a = 0\nask A = V_in/(V_a - V_b)", ()),
    ("ask H = V_out/V_in with I_b = 0\nask A = V_in/(V_a - V_b)", ()),
    ("ask H = V_out/V_in\nask K = V_b/V_a driven at out", (("out", "gnd"),)),
    ("ask H = V_b/V_a driven at out\nask K = V_a/V_in", (("in", "gnd"),)),
]


@pytest.mark.parametrize(("asks", "shorts"), SHORTS)
def test_other_asks_voltage_drives_are_shorts_and_conditions_are_heeded(
    asks: str, shorts: tuple[tuple[str, str], ...]
) -> None:
    assert posed(CIRCUIT + asks, "H")[1].shorts == shorts


def test_what_stands_under_the_line_is_the_drive() -> None:
    assert posed(CIRCUIT + "ask H = V_out/V_in", "H")[1].drive == VoltageDrive("in", "gnd")
    assert posed(CIRCUIT + "ask H = V_out/(V_a - V_b)", "H")[1].drive == VoltageDrive("a", "b")
    assert posed(CIRCUIT + "ask H = V_out/I_in", "H")[1].drive == CurrentDrive("in")
    assert posed(CIRCUIT + "ask H = V_out/V_b driven at in", "H")[1].drive == VoltageDrive("in", "gnd")
    assert posed(CIRCUIT + "ask H = I_R1/I_R2 driven at in", "H")[1].drive == VoltageDrive("in", "gnd")


def test_a_loop_gain_is_driven_at_the_amplifiers_output() -> None:
    text = "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out, gain 1e5\n"
    setup = posed(text + "ask T = loop(U1) with V_in = 0\nask H = V_out/V_in", "T")[1]
    assert setup.drive == LoopDrive("U1", "out")
    assert setup.shorts == (("in", "gnd"),)
    assert isinstance(setup.over, Voltage)
    assert isinstance(setup.under, Voltage)
    assert (setup.over.plus, setup.over.minus, setup.under.plus) == ("gnd", "m", "out")
    assert posed(text + "ask T = loop(U1) with V_in = 0\nask H = V_m/V_in", "H")[1].shorts == ()


CONTRADICTIONS = [
    ("ask H = V_out/V_in with V_in = 0", (4, 25), "node `in` is driven by this ask, so it cannot be dead"),
    ("ask H = V_out/V_in with I_in = 0", (4, 25), "node `in` is driven by this ask"),
    ("ask H = V_out/I_out with V_out = 0", (4, 26), "node `out` is driven by this ask"),
    ("ask H = V_b/V_a driven at out with V_out = 0", (4, 36), "node `out` is driven by this ask"),
    ("ask H = V_out/V_in with V_a = 0, I_a = 0", (4, 25), "node `a` cannot be both shorted and open"),
]


@pytest.mark.parametrize(("ask", "place", "words"), CONTRADICTIONS)
def test_a_condition_that_contradicts_its_ask_is_refused(
    ask: str, place: tuple[int, int], words: str
) -> None:
    with pytest.raises(Complaint) as caught:
        posed(CIRCUIT + ask, "H")
    assert words in caught.value.cause
    assert (caught.value.place.line, caught.value.place.column) == place
