"""The checker fires: a drawing that is spoilt in any one place is found not to be the circuit."""

from __future__ import annotations

import re

import pytest

from symcirc.complaints import InternalFault
from symcirc.drawing import draw
from symcirc.drawing.compose import compose
from symcirc.drawing.layout import Problem
from symcirc.drawing.marks import misread_marks
from symcirc.drawing.proof import prove
from symcirc.drawing.reading import read_back, read_picture
from symcirc.drawing.schematic import build_schematic
from symcirc.drawing.spread import spread
from symcirc.drawing.svg import svg_text
from tests.drawing.samples import KINDS, SALLEN_KEY, sheet_of

WIRE, DOT = r'<path class="wire" d="[^"]*"/>\n', r'<circle class="joint"[^>]*/>\n'


@pytest.fixture(scope="module")
def drawn():
    """The SVG of a stage, what must be on it, and how its nets are called."""
    sheet = sheet_of(SALLEN_KEY)
    schematic = build_schematic(sheet)
    return draw(sheet).svg, schematic.bodies, schematic.node_labels


@pytest.fixture(scope="module")
def kinds():
    """The same of a circuit with every kind of part, quickly placed."""
    schematic = build_schematic(sheet_of(KINDS))
    drawing = compose(spread(Problem(schematic)), "iec60617")
    return svg_text(drawing), schematic.bodies, schematic.node_labels


def fires(svg, drawn):
    with pytest.raises(InternalFault, match="the drawing is not the circuit") as fault:
        prove(svg, *drawn[1:])
    return str(fault.value)


def test_the_drawing_as_written_is_the_circuit(drawn):
    assert prove(*drawn).crossings == 0


@pytest.mark.parametrize("pattern", [WIRE, DOT])
def test_a_wire_or_a_dot_that_is_missing_is_noticed_wherever_it_was(drawn, pattern):
    places = list(re.finditer(pattern, drawn[0]))
    assert len(places) > 3
    for place in places:
        fires(drawn[0][: place.start()] + drawn[0][place.end() :], drawn)


def test_a_wire_that_ends_ten_pixels_short_is_noticed(drawn):
    for place in re.finditer(r'(class="wire" d="M)([\d.]+) ([\d.]+)', drawn[0]):
        moved = f"{place[1]}{float(place[2]) + 3:g} {float(place[3]) + 3:g}"
        fires(drawn[0][: place.start()] + moved + drawn[0][place.end() :], drawn)


def test_a_part_in_the_place_of_another_is_noticed(drawn):
    swapped = drawn[0].replace('data-name="R1"', 'data-name="R0"').replace('data-name="R3"', 'data-name="R1"')
    fires(swapped.replace('data-name="R0"', 'data-name="R3"'), drawn)


def test_a_part_of_another_kind_is_noticed(drawn):
    assert "parts drawn" in fires(
        drawn[0].replace('data-kind="C" data-name="C1"', 'data-kind="R" data-name="C1"'), drawn
    )


def test_the_name_of_a_node_beside_another_node_is_noticed(drawn):
    names = re.findall(r'class="node"[^>]*>(\w+)</text>', drawn[0])
    assert len(names) > 1
    spoilt = (
        drawn[0]
        .replace(f">{names[0]}</text>", ">?</text>")
        .replace(f">{names[1]}</text>", f">{names[0]}</text>")
    )
    spoilt = spoilt.replace(">?</text>", f">{names[1]}</text>")
    assert "stands beside another node" in fires(spoilt, drawn)


def test_a_wire_through_a_part_is_noticed(drawn):
    x, y = (
        float(word) for word in re.search(r'data-name="R1">\n.*?d="M([\d.]+) ([\d.]+)', drawn[0]).groups()
    )
    wire = f'<path class="wire" d="M{x + 30} {y - 20} L{x + 30} {y + 20}"/>\n'
    assert "a wire runs through R1" in fires(drawn[0].replace("</desc>\n", "</desc>\n" + wire), drawn)


def test_a_dot_on_a_crossing_is_noticed():
    """Two lines that cross between four open terminals, without a dot and with it."""
    leads = [("a", 0, 50), ("b", 100, 50), ("c", 50, 0), ("d", 50, 100)]
    svg = '<svg xmlns="http://www.w3.org/2000/svg"><path class="wire" d="M0 50 L100 50"/>'
    svg += '<path class="wire" d="M50 0 L50 100"/>{}'
    for name, x, y in leads:
        dx, dy = (x > 50) - (x < 50), (y > 50) - (y < 50)
        svg += (
            f'<g class="symbol" data-kind="input" data-name="{name}"><path class="lead" data-terminal="at" '
        )
        svg += f'd="M{x} {y} L{x + 2 * dx} {y + 2 * dy}"/><circle cx="{x + 5 * dx}" cy="{y + 5 * dy}" r="3"/></g>'
    svg += "</svg>"
    crossing = read_back(read_picture(svg.format("")))
    assert crossing.crossings == 1
    assert crossing.ambiguous == ()
    assert {frozenset(name for name, _ in net) for net in crossing.nets} == {frozenset("ab"), frozenset("cd")}
    dotted = read_back(read_picture(svg.format('<circle class="joint" cx="50" cy="50" r="2"/>')))
    assert any("a dot on a crossing" in words for words in dotted.ambiguous)


SIGNS = {
    "U1": "minus",
    "E1": "senses",
    "G1": "drives",
    "F1": "senses",
    "H1": "drives",
    "T1": "secondary",
    "K1": "x",
}


@pytest.mark.parametrize(("name", "role"), SIGNS.items())
def test_exchanged_terminals_of_a_device_are_told_by_its_marks(kinds, name, role):
    """Two leads are renamed in the SVG and the wires stay, so that marks and nets both say it."""
    svg, bodies, labels = kinds
    pair = {"U1": ("minus", "plus"), "K1": ("x", "y")}.get(name, (f"{role} p", f"{role} m"))
    group = re.search(rf'<g class="symbol" data-kind="\w+" data-name="{name}">.*?</g>', svg, re.DOTALL)[0]
    words = [f'data-terminal="{role}"' for role in pair]
    spoilt = group.replace(words[0], "?").replace(words[1], words[0]).replace("?", words[1])
    signs = {sign.name: sign for sign in read_picture(svg.replace(group, spoilt)).signs}
    assert list(misread_marks(signs[name]))
    with pytest.raises(InternalFault):
        prove(svg.replace(group, spoilt), bodies, labels)
