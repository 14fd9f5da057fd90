"""The text of a sheet: statements and lines, comments, blanks, encodings."""

from __future__ import annotations

import pytest

from symcirc.complaints import Complaint
from symcirc.sheet import Sheet, decode, read_sheet
from tests.sheet.reading import BASE, complaint, read, wires

WHOLE = """\
stage "Hive microphone, anti-alias low-pass"

# the circuit: walk each wire, node -- part -- node -- part -- node
in -- R1 -- a -- R3 -- m -- C2 -- out
a  -- C1 -- gnd
a  -- R2 -- out
U1 opamp: plus gnd, minus m, drives out

fix    C1 = 22 nF, C2 = 2n2
ask    H = V_out / V_in
target H: lowpass butterworth, order 2, edge 1.2 kHz, gain 1
"""


def shape(sheet: Sheet) -> tuple[object, ...]:
    return (
        wires(sheet),
        [fix.number for fix in sheet.fixes.values()],
        [ask.name for ask in sheet.asks],
        sheet.title,
    )


def test_the_sheet_of_the_design_is_read_whole() -> None:
    sheet = read(WHOLE)
    assert sheet.title == "Hive microphone, anti-alias low-pass"
    assert wires(sheet) == {
        "R1": ("in", "a"),
        "R3": ("a", "m"),
        "C2": ("m", "out"),
        "C1": ("a", "gnd"),
        "R2": ("a", "out"),
    }
    assert sheet.devices[0].terminals == {"plus": ("gnd",), "minus": ("m",), "drives": ("out",)}
    assert {name: float(fix.number) for name, fix in sheet.fixes.items() if fix.number is not None} == {
        "C1": 22e-9,
        "C2": 2.2e-9,
    }
    assert (sheet.targets[0].kind, sheet.targets[0].family) == ("lowpass", "butterworth")
    assert sheet.remarks == ()


def test_the_order_of_statements_is_free() -> None:
    turned = "\n".join(reversed(WHOLE.splitlines()))
    assert sorted(wires(read(turned))) == sorted(wires(read(WHOLE)))
    assert read(turned).title == read(WHOLE).title


def test_line_ends_tabs_and_a_byte_order_mark_change_nothing() -> None:
    plain = shape(read(WHOLE))
    assert shape(read(WHOLE.replace("\n", "\r\n"))) == plain
    assert (
        shape(read(WHOLE.replace(" ", "\t").replace("Hive\tmicrophone,\tanti-alias\tlow-pass", plain[3])))
        == plain
    )
    assert shape(read_sheet(decode(b"\xef\xbb\xbf" + WHOLE.encode(), "a.stage"))) == plain
    assert shape(read(WHOLE.rstrip("\n"))) == plain


def test_a_comment_ends_its_line_and_stands_in_no_string() -> None:
    sheet = read('stage "gain # 3"  # not "this"', 'note "a # b"', "# fix R1 = 0", BASE, "#", "   # end")
    assert (sheet.title, sheet.notes) == ("gain # 3", ("a # b",))


def test_without_a_stage_line_the_files_name_serves() -> None:
    assert read(BASE, file="filters/anti-alias.stage").title == "anti-alias"
    assert read('stage ""', BASE, file="low.stage").title == "low"


def test_notes_are_kept_in_order() -> None:
    assert read('note "one"', BASE, 'note "two"').notes == ("one", "two")


@pytest.mark.parametrize("text", ["", "\n\n", "   \t\n", "# only a comment", "\ufeff"])
def test_an_empty_file_asks_nothing(text: str) -> None:
    with pytest.raises(Complaint, match="nothing is asked"):
        read_sheet(decode(text.encode(), "a.stage"))


def test_bytes_that_are_not_utf8_are_refused_at_their_place() -> None:
    for before, line, column in ((b"", 1, 1), (b"# \xc3\xa9\nR = ", 2, 5), (b"\xef\xbb\xbfab\n\nc", 3, 2)):
        with pytest.raises(Complaint) as raised:
            decode(before + b"\xff\n", "a.stage")
        assert (raised.value.place.line, raised.value.place.column) == (line, column)
        assert "UTF-8" in raised.value.cause
        assert str(raised.value)


def test_the_first_complaint_in_the_file_is_shown() -> None:
    first = complaint(
        "ask G = V_nowhere/V_in", "fix R1 = 2 F", "parts Q: E12", 'stage "a"', 'stage "b"', BASE
    )
    assert first.place.line == 1
    assert complaint("fix R1 = 2 F", "ask G = V_nowhere/V_in", BASE).place.line == 1
    assert complaint("target H: lowpass", "limit H: loss <= 1 below 2", BASE).place.line == 1
    assert complaint("limit H: loss <= 1 below 2", "target H: lowpass", BASE).place.line == 1


def test_every_record_keeps_its_place() -> None:
    sheet = read(WHOLE)
    assert sheet.parts[1].place.excerpt().split("\n")[1].index("^") == 25
    lines = {
        "part": sheet.parts[0].place.line,
        "device": sheet.devices[0].place.line,
        "fix": sheet.fixes["C2"].place.line,
        "ask": sheet.asks[0].place.line,
        "target": sheet.targets[0].place.line,
        "node": sheet.node_places["out"].line,
    }
    assert lines == {"part": 4, "device": 7, "fix": 9, "ask": 10, "target": 11, "node": 4}
