"""Every bad sheet and every bad circuit, through the whole command: exit status 2, its place, its words, at once."""

import time

import pytest

from tests.bad_circuits import CIRCUITS
from tests.bad_sheets import SHEET_ROWS
from tests.calling import call


@pytest.fixture
def derived(capsys, tmp_path):
    def run(row):
        path = tmp_path / "bad.stage"
        path.write_bytes(row.text.encode("utf-8"))
        begun = time.process_time()
        called = call(capsys, "derive", path, "--json")
        return called, time.process_time() - begun

    return run


@pytest.mark.parametrize("row", CIRCUITS, ids=[row.name.replace(" ", "-") for row in CIRCUITS])
def test_a_bad_circuit_gets_its_complaint_at_its_place(row, derived):
    called, _ = derived(row)
    assert called.status == 2
    error = called.json["error"]
    assert (error["line"], error["column"]) == (row.line, row.column), called.err
    assert row.cause in error["message"]
    assert row.mend in error["help"]


@pytest.mark.parametrize("row", SHEET_ROWS + CIRCUITS, ids=lambda row: row.name.replace(" ", "-"))
def test_the_command_refuses_with_status_2_an_error_object_and_words_within_a_second(row, derived):
    called, seconds = derived(row)
    assert called.status == 2
    assert set(called.json) == {"error"}
    assert set(called.json["error"]) == {"file", "line", "column", "message", "help"}
    assert all(called.json["error"].values())
    assert called.json["error"]["message"] in called.err
    assert "Traceback" not in called.err
    assert seconds < 1
