"""The program's own hand before its own check: every line of every step list holds, and follows where it should."""

from __future__ import annotations

import random

import pytest

from symcirc.complaints import Complaint, Source
from symcirc.derivation import Answer, derive, pose, pose_real
from symcirc.report.steps import derivation_steps_latex
from symcirc.sheet import read_sheet
from symcirc.steps import steps_of
from symcirc.steps.model import STATED
from symcirc.steps.text import equation_text, steps_latex, steps_text
from symcirc.transfer.latex import latex_name
from symcirc.working.check import check_posed
from tests.calling import EXAMPLES
from tests.published.stages import STAGES
from tests.random_circuits import random_sheet
from tests.steps.judging import derived, judge, step_lists

EXAMPLE_SHEETS = sorted(EXAMPLES.glob("*.stage"))
#: Random sheets, and the most parts of those that are taken.
RANDOM_SHEETS, MOST_PARTS = 40, 8
#: The output's impedance has a drive of its own.
ANOTHER_DRIVE = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\nask Zout = V_out/I_out with V_in = 0\n"


@pytest.mark.parametrize("path", EXAMPLE_SHEETS, ids=lambda path: path.stem)
def test_every_line_of_an_example_holds_and_follows(path) -> None:
    assert judge(*derived(path.read_text(encoding="utf-8"))) >= 4


@pytest.mark.parametrize("stage", STAGES, ids=lambda stage: stage.id)
def test_every_line_of_a_published_stage_holds_and_follows(stage) -> None:
    assert judge(*derived(stage.sheet)) >= 2


@pytest.mark.parametrize("path", EXAMPLE_SHEETS, ids=lambda path: path.stem)
def test_every_line_holds_with_real_amplifiers(path) -> None:
    posed = pose_real(read_sheet(Source("a.stage", path.read_text(encoding="utf-8"))))
    assert judge(posed, derive(posed)) >= 4


def test_every_line_of_random_sheets_of_every_kind_of_part_holds_and_follows() -> None:
    taken = lines = seed = 0
    kinds: set[str] = set()
    while taken < RANDOM_SHEETS:
        seed += 1
        try:
            posed = pose(read_sheet(Source("a.stage", random_sheet(random.Random(seed)))))
            if len(posed.circuit.parts) + len(posed.circuit.devices) > MOST_PARTS:
                continue
            derivation = derive(posed)
        except Complaint:
            continue
        lines += judge(posed, derivation)
        kinds |= {device.kind for device in posed.circuit.devices}
        taken += 1
    assert lines > 3 * RANDOM_SHEETS
    assert len(kinds) > 3


# each kind of device, so that no draw can leave one out ---------------------------------------------------------

DEVICES = {
    "vcvs": "in -- R1 -- a -- C1 -- gnd\nE1 vcvs: senses a, drives out, gain k\nout -- R2 -- a\nchoose k",
    "vccs": "in -- R1 -- a -- C1 -- gnd\nG1 vccs: senses a, drives out\nout -- R2 -- a\nout -- C2 -- gnd",
    "cccs": "in -- R1 -- a\nF1 cccs: senses a b, drives out\nb -- C1 -- gnd\nout -- R2 -- b\nout -- R3 -- gnd",
    "ccvs": "in -- R1 -- a\nH1 ccvs: senses a b, drives out\nb -- C1 -- gnd\nout -- R2 -- b",
    "transformer": "in -- R1 -- a\nT1 transformer: primary a, secondary out\nout -- C1 -- gnd\na -- L1 -- gnd",
    "conveyor": "in -- R1 -- x\nK1 conveyor: x x, y y, z out, sign -\nout -- R2 -- y -- R3 -- gnd\nout -- C1 -- gnd",
}


@pytest.mark.parametrize("kind", DEVICES)
@pytest.mark.parametrize(
    "ask", ["V_out/V_in", "V_in/I_in", "V_out/I_out with V_in = 0", "(V_out - V_in)/V_in"]
)
def test_every_line_holds_for_each_kind_of_device_and_ask(kind, ask) -> None:
    assert judge(*derived(f"{DEVICES[kind]}\nask H = {ask}")) >= 2


@pytest.mark.parametrize(
    "sheet",
    [
        "in -- R1 -- a -- R2 -- gnd\na -- C1 -- gnd\nask H = I_R1/V_in",
        "in -- R1 -- a -- R2 -- b -- R3 -- gnd\nin -- C1 -- b\nask H = V_a/(V_in - V_b)",
        "in -- R1 -- a -- R2 -- b -- R3 -- gnd\nask K = V_b/V_a driven at in",
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask Y = I_U1/V_in",
        "in -- R1 -- m -- R2 -- out\nU1 opamp: plus gnd, minus m, drives out\nask Z = V_m/V_in",
        "in -- R1 -- a -- R2 -- gnd\na -- R3 -- b -- C1 -- gnd\nask A = V_a/(V_in - V_b)\nask B = V_a/I_in",
        "in -- R1 -- a -- R2 -- b -- R3 -- gnd\na -- R4 -- c -- R5 -- gnd\nb -- R6 -- c\n"
        "ask A = I_b/V_in with V_b = 0\nask B = V_a/(V_c - V_b)",
        "in -- R3 -- a -- R4 -- out -- C4 -- gnd\nin -- R1 -- gnd\nask H = V_in/I_in\nask K = V_a/(V_in - V_out)",
    ],
)
def test_currents_differences_and_sources_between_nodes_have_lines_that_hold(sheet) -> None:
    assert judge(*derived(sheet)) >= 2


# what a reader finds --------------------------------------------------------------------------------------------


def test_the_anti_alias_stage_reads_as_an_engineer_writes_it() -> None:
    (steps,) = step_lists((EXAMPLES / "hive_antialias.stage").read_text(encoding="utf-8"))
    assert list(steps_text(steps))[:10] == [
        "# U1 holds V_m at 0 and takes no current there.",
        "V_m = 0",
        "# The currents at a add up to zero.",
        "(V_a - V_in)/R1 + V_a/R3 + s*C1*V_a + (V_a - V_out)/R2 = 0",
        "# The currents at m add up to zero.",
        "V_a/R3 + s*C2*V_out = 0",
        "# From the currents at m, which have the fewest terms: V_a.",
        "V_a = -s*R3*C2*V_out",
        "# With V_a put into the currents at a: the ratio.",
        "V_out/V_in = -R2/(s^2*R1*R2*R3*C1*C2 + s*C2*(R1*R2 + R1*R3 + R2*R3) + R1)",
    ]


def test_a_stage_of_two_poles_takes_less_than_a_page() -> None:
    counted = 0
    for stage in STAGES:
        posed, derivation = derived(stage.sheet)
        for answer in derivation.answers:
            if isinstance(answer, Answer) and answer.function.order == 2:
                assert len(list(steps_text(steps_of(posed, answer)))) < 50, stage.id
                counted += 1
    assert counted > 20


def test_laws_that_the_answer_does_not_need_are_not_written() -> None:
    sheet = "in -- R1 -- m -- R2 -- out -- R3 -- gnd\nin -- R4 -- x -- C1 -- gnd\n"
    sheet += "U1 opamp: plus gnd, minus m, drives out\nask H = V_out/V_in"
    (steps,) = step_lists(sheet)
    assert [step.words for step in steps.steps if step.kind == "law"] == ["The currents at m add up to zero."]


def test_a_tied_name_stands_in_the_laws_and_no_more_once_its_tie_is_said() -> None:
    sheet = (
        "in -- R1 -- a -- R2 -- out -- C2 -- gnd\na -- C1 -- gnd\nfix R2 = R1, C2 = C1\nask H = V_out/V_in"
    )
    (steps,) = step_lists(sheet)
    kinds = [step.kind for step in steps.steps]
    assert [equation_text(s) for s in steps.steps if s.kind == "tie"] == ["R2 = R1", "C2 = C1"]
    for step in steps.steps[kinds.index("eliminated") :]:
        assert "R2" not in equation_text(step)
        assert "C2" not in equation_text(step)


LATEX_SHEETS = [(path.stem, path.read_text(encoding="utf-8")) for path in EXAMPLE_SHEETS]
LATEX_SHEETS += [(stage.id, stage.sheet) for stage in STAGES]


@pytest.mark.parametrize(
    "sheet", [sheet for _, sheet in LATEX_SHEETS], ids=[name for name, _ in LATEX_SHEETS]
)
def test_every_display_of_every_ask_in_latex_is_read_back_holds_and_follows(sheet) -> None:
    posed, derivation = derived(sheet)
    steps = [step for answer in derivation.answers for step in steps_of(posed, answer).steps]
    document = "\n".join(derivation_steps_latex(posed, derivation))
    lines = check_posed(posed, Source("steps.tex", document)).lines
    assert len(lines) == len(steps)
    for line, step in zip(lines, steps, strict=True):
        assert line.verdict == "holds", line
        assert line.follows or step.kind in STATED, line


def test_a_display_names_the_ask_only_where_a_sheet_has_several() -> None:
    charge = step_lists((EXAMPLES / "hive_charge.stage").read_text(encoding="utf-8"))
    assert next(steps_latex(charge[1])) == rf"\[ \text{{under }} {latex_name(charge[1].ask)} \]"
    (alone,) = step_lists((EXAMPLES / "hive_antialias.stage").read_text(encoding="utf-8"))
    assert not any(r"\text" in line for line in steps_latex(alone))


def test_lines_in_latex_do_not_hold_under_another_ask() -> None:
    posed, derivation = derived(ANOTHER_DRIVE)
    document = "\n".join(derivation_steps_latex(posed, derivation))
    assert {line.verdict for line in check_posed(posed, Source("a.tex", document)).lines} == {"holds"}
    astray = document.replace(r"\text{under } Z_{\mathrm{out}}", r"\text{under } H")
    assert "fails" in {line.verdict for line in check_posed(posed, Source("a.tex", astray)).lines}


def test_a_derivation_with_too_long_lines_is_refused_with_its_size() -> None:
    chain = "".join(f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd\n" for k in range(14))
    posed = pose(read_sheet(Source("a.stage", f"{chain}ask H = V_n14/V_n0")))
    (answer,) = derive(posed, most=100).answers
    with pytest.raises(Complaint, match="products, too long to be read"):
        steps_of(posed, answer)
