"""``derive --steps`` on the command line."""

from __future__ import annotations

from tests.calling import EXAMPLES, call


def test_steps_in_text_are_a_working_that_the_check_accepts(capsys, tmp_path) -> None:
    for sheet in sorted(EXAMPLES.glob("*.stage")):
        working = tmp_path / f"{sheet.stem}.work"
        derived = call(capsys, "derive", sheet, "--steps")
        assert derived.status == 0
        working.write_text(derived.out, encoding="utf-8")
        checked = call(capsys, "check", sheet, working)
        assert checked.status == 0, checked.out


def test_steps_in_latex_are_a_working_that_the_check_accepts(capsys, tmp_path) -> None:
    for sheet in sorted(EXAMPLES.glob("*.stage")):
        working = tmp_path / f"{sheet.stem}.tex"
        working.write_text(call(capsys, "derive", sheet, "--steps", "--latex").out, encoding="utf-8")
        checked = call(capsys, "check", sheet, working)
        assert checked.status == 0, checked.out


def test_steps_in_json_have_kind_words_and_equation(capsys) -> None:
    steps = call(capsys, "derive", EXAMPLES / "hive_antialias.stage", "--steps", "--json").json["ask"]["H"][
        "steps"
    ]
    assert steps[0] == {
        "kind": "amplifier",
        "words": "U1 holds V_m at 0 and takes no current there.",
        "text": "V_m = 0",
        "latex": "V_{m} = 0",
    }
    assert [step["kind"] for step in steps[-2:]] == ["ratio", "standard form"]


def test_steps_in_latex_are_sentences_and_displays(capsys) -> None:
    lines = call(capsys, "derive", EXAMPLES / "hive_antialias.stage", "--steps", "--latex").out.splitlines()
    assert lines[:3] == [
        "% H = V_out/V_in",
        "U1 holds $V_{m}$ at 0 and takes no current there.",
        r"\[ V_{m} = 0 \]",
    ]


def test_steps_of_one_ask_alone(capsys) -> None:
    out = call(capsys, "derive", EXAMPLES / "hive_charge.stage", "--steps", "--ask", "Zin").out
    assert "under Zin" in out
    assert "under Zt" not in out


def test_a_derivation_that_is_too_long_is_refused_with_status_2(capsys, tmp_path) -> None:
    chain = "".join(f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd\n" for k in range(14))
    sheet = tmp_path / "ladder.stage"
    sheet.write_text(f"{chain}ask H = V_n14/V_n0\n", encoding="utf-8")
    called = call(capsys, "derive", sheet, "--steps")
    assert called.status == 2
    assert "too long to be read" in called.err
