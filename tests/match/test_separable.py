"""Where a circuit falls into stages: by its graph alone, and what must keep it whole.

Each case is settled by textbook reasoning: an ideal source's voltage does not depend on its load, and a part or an
input that reaches back past it makes one stage of two (any textbook of circuit theory).
"""

import math

import pytest

from symcirc.cascade.stages import cascade_stages
from symcirc.circuit import build_circuit, build_setup
from symcirc.circuit.separable import separable_pieces
from symcirc.derivation import derive, pose
from symcirc.progress import silent
from symcirc.transfer.evaluate import evaluate
from tests.match.sheets import sheet_of
from tests.published.stages import STAGES

LOW_PASS = "in -- R1 -- a -- C1 -- gnd\n"
FOLLOWER = "U1 opamp: plus a, minus b, drives b\n"
SECOND = "b -- R2 -- out -- C2 -- gnd\n"
ASK = "ask H = V_out/V_in\n"


def pieces(text):
    sheet = sheet_of(text)
    circuit = build_circuit(sheet)
    found = separable_pieces(circuit, build_setup(circuit, sheet.asks, sheet.asks[0]))
    return [(piece.first, piece.last, " ".join(sorted(piece.names))) for piece in found]


def test_a_follower_parts_two_sections():
    assert pieces(LOW_PASS + FOLLOWER + SECOND + ASK) == [(None, "b", "C1 R1 U1"), ("b", "out", "C2 R2")]


@pytest.mark.parametrize(
    "source", ["vcvs: senses a, drives b, gain 2", "ccvs: senses a gnd, drives b, rm 1 kohm"]
)
def test_a_controlled_voltage_source_to_ground_parts_them_too(source):
    assert len(pieces(LOW_PASS + f"E1 {source}\n" + SECOND + ASK)) == 2


def test_without_a_source_between_them_two_sections_are_one():
    assert len(pieces("in -- R1 -- a -- C1 -- gnd\na -- R2 -- out -- C2 -- gnd\n" + ASK)) == 1


@pytest.mark.parametrize(
    "link",
    [
        "out -- R9 -- a\n",  # feedback over both
        "in -- R9 -- out\n",  # a path past the first
        "a -- C9 -- x\nx -- R9 -- out\n",  # the same from inside
        "G1 vccs: senses out, drives gnd a, gm 1m\n",  # feedback by a controlled source
    ],
)
def test_another_connection_from_later_to_earlier_keeps_it_whole(link):
    assert len(pieces(LOW_PASS + FOLLOWER + SECOND + link + ASK)) == 1


def test_a_load_on_the_source_and_parts_beside_the_path_part_nothing():
    load = "b -- R9 -- gnd\nb -- R8 -- side -- C8 -- gnd\n"
    assert pieces(LOW_PASS + FOLLOWER + SECOND + load + ASK) == [
        (None, "b", "C1 C8 R1 R8 R9 U1"),
        ("b", "out", "C2 R2"),
    ]


def test_a_floating_source_parts_nothing():
    text = LOW_PASS + "E1 vcvs: senses a, drives b x, gain 1\nx -- R9 -- gnd\n" + SECOND + ASK
    assert len(pieces(text)) == 1


def test_two_integrator_loops_are_whole_for_every_output():
    """Tow (1968), Thomas (1971): feedback from the last amplifier to the first."""
    loops = [stage for stage in STAGES if "integrator" in stage.id or "state" in stage.id]
    assert loops
    for stage in loops:
        posed = pose(sheet_of(stage.sheet))
        for ask in posed.sheet.asks:
            assert cascade_stages(posed, ask.name, silent) == ()


def test_a_current_drive_is_kept_by_the_first_stage():
    text = "in -- R1 -- a\nin -- C1 -- a\nU1 opamp: plus gnd, minus in, drives a\n"
    assert pieces(text + "a -- R2 -- out -- C2 -- gnd\nask Z = V_out/I_in\n")[0] == (None, "a", "C1 R1 U1")


def test_a_source_that_is_shorted_parts_nothing():
    assert len(pieces(LOW_PASS + FOLLOWER + SECOND + "ask H = V_out/V_in with V_b = 0\n")) == 1


def test_an_output_that_no_source_feeds_is_no_stage_of_its_own():
    text = LOW_PASS + FOLLOWER + "b -- R2 -- gnd\nx -- R3 -- gnd\n"
    assert len(pieces(text + "ask H = V_x/V_in\n")) == 1


def test_a_ratio_of_two_outputs_is_one_piece():
    assert len(pieces(LOW_PASS + FOLLOWER + SECOND + "ask K = V_out/V_b driven at in\n")) == 1


def test_the_stages_multiply_to_the_whole_function():
    """The whole derived at once against the product of its stages, at values of no special kind."""
    third = "out2 -- R4 -- c -- C4 -- gnd\nU3 opamp: plus c, minus out, drives out\n"
    second = (
        "b -- R2 -- d -- R3 -- e -- C3 -- gnd\nd -- C2 -- out2\nU2 opamp: plus e, minus out2, drives out2\n"
    )
    posed = pose(sheet_of(LOW_PASS + FOLLOWER + second + third + ASK))
    stages = cascade_stages(posed, "H", silent)
    assert [stage.order for stage in stages] == [1, 2, 1]
    values = {"R1": 1.1, "R2": 0.7, "R3": 1.3, "R4": 2.2, "C1": 0.9, "C2": 1.7, "C3": 0.4, "C4": 0.6}
    whole = derive(posed).answer("H").function
    for s in (0.3 + 0.8j, -0.2 + 2j, 5j):
        product = math.prod((complex(evaluate(st.answer.function, values, s)) for st in stages), start=1 + 0j)
        assert product == pytest.approx(complex(evaluate(whole, values, s)), rel=1e-12)
