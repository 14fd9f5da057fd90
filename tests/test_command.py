import os
import subprocess
import sys
import time

import pytest

import symcirc.derivation
from symcirc.command import main
from tests.calling import EXAMPLES, ROOT, call, run

LOW_PASS = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"


@pytest.fixture
def sheet(tmp_path):
    def write(text, name="s.stage"):
        path = tmp_path / name
        path.write_text(text, encoding="utf-8")
        return path

    return write


def test_derive_json_has_the_fixed_shape(capsys, sheet):
    called = call(capsys, "derive", sheet('stage "first"\n' + LOW_PASS), "--json")
    assert called.status == 0
    assert called.json == {
        "stage": "first",
        "ask": {
            "H": {
                "numerator": ["1"],
                "denominator": ["1", "R1*C1"],
                "monic": {"numerator": ["1/(R1*C1)"], "denominator": ["1/(R1*C1)", "1"]},
                "order": 1,
            }
        },
        "warnings": [],
    }


def test_a_power_without_a_coefficient_is_the_text_0(capsys, sheet):
    text = "in -- C1 -- out -- R1 -- gnd\nask H = V_out/V_in\n"
    called = call(capsys, "derive", sheet(text), "--json")
    assert called.json["ask"]["H"]["numerator"] == ["0", "R1*C1"]


def test_values_are_the_coefficients_for_the_fixed_numbers(capsys, sheet):
    text = LOW_PASS + "fix R1 = 4.7 kohm, C1 = 100 nF\n"
    called = call(capsys, "derive", sheet(text), "--json", "--values")
    assert called.json["ask"] == {"H": {"numerator": [1.0], "denominator": [1.0, 0.00047]}}


def test_values_with_a_number_missing_are_refused_by_the_missing_name(capsys, sheet):
    called = call(capsys, "derive", sheet(LOW_PASS + "fix R1 = 1k\n"), "--json", "--values")
    assert called.status == 2
    assert "C1" in called.json["error"]["message"]
    assert called.json["error"]["help"]


def test_a_refused_sheet_gives_the_error_object_and_the_words(capsys, sheet):
    path = sheet("in -- R1 -- out\nask H = V_uot/V_in\n")
    called = call(capsys, "derive", path, "--json")
    error = called.json["error"]
    assert called.status == 2
    assert (error["file"], error["line"], error["column"]) == (str(path), 2, 9)
    assert "did you mean out?" in error["help"]
    assert "^^^^^" in called.err


def test_only_the_named_ask_is_derived(capsys):
    called = call(capsys, "derive", EXAMPLES / "hive_charge.stage", "--ask", "Zin", "--json")
    assert list(called.json["ask"]) == ["Zin"]


def test_an_ask_that_is_not_there_is_refused(capsys):
    called = call(capsys, "derive", EXAMPLES / "hive_charge.stage", "--ask", "Zon")
    assert called.status == 2
    assert "did you mean Zin?" in called.err


def test_real_counts_gain_and_gbw(capsys):
    ideal = call(capsys, "derive", EXAMPLES / "hive_charge.stage", "--ask", "Zt", "--json").json
    real = call(capsys, "derive", EXAMPLES / "hive_charge.stage", "--ask", "Zt", "--json", "--real").json
    assert ideal["ask"]["Zt"]["order"] == 1
    assert real["ask"]["Zt"]["order"] == 2
    assert "U1_gbw" in real["ask"]["Zt"]["denominator"][1]


def test_equations_are_printed_with_every_node_and_law(capsys, sheet):
    called = call(capsys, "derive", sheet(LOW_PASS), "--equations")
    assert "(V_out - V_in)/R1 + s*C1*V_out = 0" in called.out
    assert "V_in = drive" in called.out


def test_latex_is_an_aligned_display(capsys, sheet):
    called = call(capsys, "derive", sheet(LOW_PASS), "--latex")
    assert called.out.startswith("% H = V_out/V_in\n\\begin{align*}")
    assert r"\frac{1}{s R_{1} C_{1} + 1}" in called.out


def test_warnings_go_to_standard_error_and_into_json(capsys, sheet):
    path = sheet(LOW_PASS + "in -- R2 -- gnd\n")
    called = call(capsys, "derive", path, "--json")
    assert called.status == 0
    assert called.json["warnings"][0]["message"] == "part `R2` has no influence on what is asked (H)"
    assert "warning: part `R2`" in call(capsys, "derive", path).err


def test_a_file_that_is_not_there_is_a_complaint(capsys, tmp_path):
    called = call(capsys, "derive", tmp_path / "nothing.stage")
    assert called.status == 2
    assert "no such file" in called.err
    assert "Traceback" not in called.err


def test_a_dash_reads_standard_input():
    called = run("derive", "-", "--json", stdin=LOW_PASS)
    assert called.status == 0
    assert called.json["ask"]["H"]["denominator"] == ["1", "R1*C1"]


def test_text_that_is_not_utf8_is_refused_at_its_place():
    called = run("derive", "-", "--json", stdin=b"# caf\xe9\n" + LOW_PASS.encode())
    assert called.status == 2
    assert (called.json["error"]["line"], called.json["error"]["column"]) == (1, 6)


def test_a_fault_of_the_program_is_said_so_without_a_traceback(capsys, sheet, monkeypatch):
    def broken(*arguments):
        raise ZeroDivisionError("planted")

    monkeypatch.setattr(symcirc.derivation, "build_system", broken)
    called = call(capsys, "derive", sheet(LOW_PASS))
    assert called.status == 70
    assert "a fault of the program itself" in called.err
    assert "report" in called.err
    assert "Traceback" not in called.err
    assert called.out == ""


def test_a_derivation_that_the_numeric_solve_contradicts_prints_no_result(capsys, sheet, monkeypatch):
    expanded = symcirc.derivation.expanded

    def corrupted(*arguments):
        polynomial = expanded(*arguments)
        return [
            {exponents: 2 * number for exponents, number in c.items()} for c in polynomial[:1]
        ] + polynomial[1:]

    monkeypatch.setattr(symcirc.derivation, "expanded", corrupted)
    called = call(capsys, "derive", sheet(LOW_PASS), "--json")
    assert called.status == 70
    assert "the numeric solve of the circuit gives" in called.err
    assert called.out == ""


def test_a_derivation_that_elimination_contradicts_prints_no_result(capsys, sheet, monkeypatch):
    solve = symcirc.derivation.solve

    def corrupted(*arguments):
        ratio = solve(*arguments)
        return type(ratio)(ratio.symbols, ratio.numerator, (ratio.denominator[0], {(1, 1): 2}))

    monkeypatch.setattr(symcirc.derivation, "solve", corrupted)
    called = call(capsys, "derive", sheet(LOW_PASS), "--json")
    assert called.status == 70
    assert "elimination and the two-graph engine give different functions" in called.err
    assert called.out == ""


def test_ctrl_c_stops_with_a_word_and_nothing_printed(capsys, sheet, monkeypatch):
    def interrupted(*arguments):
        raise KeyboardInterrupt

    monkeypatch.setattr(symcirc.derivation, "solve", interrupted)
    called = call(capsys, "derive", sheet(LOW_PASS))
    assert (called.status, called.out) == (130, "")
    assert "stopped" in called.err


def test_a_call_without_a_verb_is_answered_with_a_mend(capsys):
    called = call(capsys)
    assert called.status == 2
    assert "mend:" in called.err


@pytest.mark.parametrize("verb", ["derive", "match", "check"])
def test_the_help_of_every_verb_holds_an_example_that_runs(verb, capsys, tmp_path):
    called = call(capsys, verb, "--help")
    assert called.status == 0
    lines = called.out.split("example:")[1].splitlines()[1:]
    script = "\n".join(line.strip() for line in lines[: lines.index("")])
    path = f"{os.path.dirname(sys.executable)}:{os.environ['PATH']}"
    done = subprocess.run(
        ["sh", "-ec", script],
        cwd=tmp_path,
        env={**os.environ, "PATH": path},
        capture_output=True,
        text=True,
        check=True,
    )
    assert "C1" in done.stdout


def test_version_is_the_packages(capsys):
    assert call(capsys, "--version").out.strip() == f"stagewright {symcirc.__version__}"


def test_help_imports_nothing_heavy():
    code = (
        "import sys\nfrom symcirc.command import main\n"
        "try:\n    main(['--help'])\nexcept SystemExit:\n    pass\n"
        "print([m for m in ('sympy', 'numpy', 'networkx', 'lark', 'scipy') if m in sys.modules])"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, cwd=ROOT, check=True)
    assert done.stdout.splitlines()[-1] == "[]"


def test_deriving_imports_no_scipy():
    code = (
        "import sys\nfrom symcirc.command import main\n"
        f"main(['derive', {str(EXAMPLES / 'hive_antialias.stage')!r}])\nprint('scipy' in sys.modules)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, cwd=ROOT, check=True)
    assert done.stdout.splitlines()[-1] == "False"


def test_output_to_a_pipe_holds_no_escape_codes():
    called = run("derive", EXAMPLES / "hive_charge.stage")
    assert "\x1b" not in called.out + called.err


def test_a_reader_that_goes_away_is_no_fault():
    command = f"{sys.executable} -m symcirc derive {EXAMPLES / 'hive_preamp.stage'} | head -1"
    done = subprocess.run(
        ["bash", "-o", "pipefail", "-c", command], capture_output=True, text=True, cwd=ROOT, check=False
    )
    assert done.returncode == 0
    assert "fault" not in done.stderr


def test_progress_is_shown_on_a_terminal_only_and_cleared(monkeypatch, capsys):
    from symcirc.command.progress import ProgressLine

    line = ProgressLine()
    times = iter([10.0 + time.monotonic() + k for k in range(9)])
    monkeypatch.setattr("symcirc.command.progress.time.monotonic", lambda: next(times))
    line("one")
    assert capsys.readouterr().err == ""
    monkeypatch.setattr("sys.stderr.isatty", lambda: True, raising=False)
    line("two")
    line.clear()
    shown = capsys.readouterr().err
    assert "two" in shown
    assert shown.endswith("\r\x1b[K")


def test_main_is_what_the_command_calls(capsys):
    with pytest.raises(SystemExit) as leaving:
        main(["--version"])
    assert leaving.value.code == 0
