"""What a drawing is like: the same every time, self-contained, with a title, and recognised at a glance."""

from __future__ import annotations

import re
import subprocess
import sys
from xml.etree import ElementTree

import pytest

from symcirc.complaints import Complaint
from symcirc.drawing import draw, draw_svg
from symcirc.drawing.compose import compose
from symcirc.drawing.cost import Judge
from symcirc.drawing.flow import device_order
from symcirc.drawing.layout import Problem
from symcirc.drawing.proof import prove
from symcirc.drawing.schematic import build_schematic
from symcirc.drawing.spread import spread
from symcirc.drawing.svg import svg_text
from tests.calling import EXAMPLES, ROOT
from tests.drawing.samples import EVERYTHING, KINDS, NINETEEN, SALLEN_KEY, sheet_of
from tests.published.stages import STAGES


def lead(svg, name, role):
    """Return where a lead begins."""
    found = re.search(rf'data-name="{name}">.*?data-terminal="{role}" d="M([\d.]+) ([\d.]+)', svg, re.DOTALL)
    return float(found[1]), float(found[2])


def test_a_drawing_is_the_same_in_every_process():
    script = (
        "from tests.drawing.samples import SALLEN_KEY, sheet_of; from symcirc.drawing import draw_svg; "
        "print(draw_svg(sheet_of(SALLEN_KEY)))"
    )
    texts = {
        subprocess.run(
            [sys.executable, "-c", script],
            cwd=ROOT,
            env={"PYTHONHASHSEED": seed},
            capture_output=True,
            check=True,
        ).stdout
        for seed in ("1", "2")
    }
    assert len(texts) == 1


def test_the_svg_is_self_contained_in_the_colour_of_the_text_and_described():
    svg = draw_svg(sheet_of('stage "A <b> & \\u202e c"\n' + SALLEN_KEY))
    root = ElementTree.fromstring(svg)
    assert root.get("role") == "img"
    assert root[0].tag.endswith("title")
    assert root[0].text.startswith("A <b> & ")
    assert "R1 = 4.7 kΩ joins in and a" in root[1].text
    assert "U1, opamp, joins minus f, plus p, drives out" in root[1].text
    assert not re.search(r"href|url\(|<script|<style|#[0-9a-f]{3}", svg)
    assert set(re.findall(r'(?:stroke|fill)="([^"]*)"', svg)) == {"none", "currentColor"}


def test_the_drive_is_at_the_left_and_the_output_at_the_right():
    for stage in STAGES[:3]:
        svg = draw_svg(sheet_of(stage.sheet))
        xs = [float(x) for x in re.findall(r"[ML]([\d.]+) [\d.]+", svg)]
        assert lead(svg, "V_in", "plus")[0] < min(xs) + 40
        assert lead(svg, "out", "at")[0] > max(xs) - 40


def test_a_sallen_key_stage_has_its_series_resistors_in_line_towards_plus_and_its_feedback_above():
    svg = draw_svg(sheet_of(SALLEN_KEY))
    xs = [lead(svg, "R1", "first")[0], lead(svg, "R1", "second")[0], lead(svg, "R2", "first")[0]]
    assert [*xs, lead(svg, "U1", "plus")[0]] == sorted([*xs, lead(svg, "U1", "plus")[0]])
    assert lead(svg, "R2", "first")[1] == lead(svg, "U1", "plus")[1]
    assert lead(svg, "C1", "first")[1] < lead(svg, "U1", "drives")[1]


def test_a_state_variable_loop_is_a_row_of_amplifiers():
    stage = next(stage for stage in STAGES if stage.id == "state-variable-filter")
    svg = draw_svg(sheet_of(stage.sheet))
    places = [lead(svg, name, "drives") for name in ("U1", "U2", "U3")]
    assert [x for x, _ in places] == sorted(x for x, _ in places)
    assert len({y for _, y in places}) == 1


def test_the_devices_of_loops_are_ordered_from_the_drive():
    for name in ("tow-thomas-biquad", "state-variable-filter", "bainter-notch"):
        bodies = build_schematic(sheet_of(next(s.sheet for s in STAGES if s.id == name))).bodies
        assert [bodies[number].name for number in device_order(bodies)] == ["U1", "U2", "U3"]


def test_blocks_are_framed_and_named():
    svg = draw_svg(sheet_of((EXAMPLES / "hive_preamp.stage").read_text(encoding="utf-8")))
    frames = re.findall(r'<g class="frame">.*?</g>', svg)
    assert [re.search(r">(\w+)</text>", frame)[1] for frame in frames] == ["S1", "S2"]
    assert all("stroke-dasharray" in frame for frame in frames)


def test_the_zigzag_is_drawn_where_it_is_asked_for():
    box, zigzag = (draw_svg(sheet_of(SALLEN_KEY), symbols) for symbols in ("iec60617", "ieee315"))
    body = r'data-name="R1">\n.*\n.*\n<path d="([^"]*)"'
    assert re.search(body, box)[1].endswith("Z")
    assert re.search(body, zigzag)[1].count("L") == 7


@pytest.mark.parametrize("text", [KINDS, EVERYTHING, NINETEEN, *(stage.sheet for stage in STAGES[::5])])
def test_the_last_resort_is_always_the_circuit(text):
    schematic = build_schematic(sheet_of(text))
    layout = spread(Problem(schematic))
    assert Judge(layout).is_sound()
    prove(svg_text(compose(layout, "iec60617")), schematic.bodies, schematic.node_labels)


def test_the_costs_that_the_search_keeps_are_those_of_the_placement_it_ends_with():
    from symcirc.drawing.search import Annealing
    from symcirc.drawing.start import start

    search = Annealing(start(Problem(build_schematic(sheet_of(NINETEEN)))), 5)
    for _ in range(1500):
        search.attempt(*search.moves.propose(), 3.0)
    kept = search.total
    search.layout.forget(range(search.bodies))
    search._measure()
    assert search.total == pytest.approx(kept)


def test_nineteen_parts_are_drawn():
    assert draw(sheet_of(NINETEEN)).crossings <= 1


def test_too_many_parts_are_refused():
    ladder = "".join(f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd\n" for k in range(61))
    with pytest.raises(Complaint, match="122 parts, and a drawing holds 120"):
        draw(sheet_of(ladder + "ask H = V_n61/V_n0"))
