"""The README's sessions show what the program really prints, and its commands are whole."""

import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

from tests.calling import ROOT

README = (ROOT / "README.md").read_text(encoding="utf-8")
SESSIONS = re.findall(r"^```console\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)


def steps(session):
    """Split a session into (command, output shown)."""
    pieces = re.split(r"^\$ (.*)\n", session, flags=re.MULTILINE)
    return list(zip(pieces[1::2], pieces[2::2], strict=True))


@pytest.mark.parametrize("session", SESSIONS, ids=range(len(SESSIONS)))
def test_a_session_shown_is_what_the_program_prints(session, tmp_path):
    (tmp_path / "examples").symlink_to(ROOT / "examples")
    path = f"{Path(sys.executable).parent}:{os.environ['PATH']}"
    for command, shown in steps(session):
        done = subprocess.run(
            ["sh", "-c", command],
            cwd=tmp_path,
            env={**os.environ, "PATH": path},
            capture_output=True,
            text=True,
            check=False,
        )
        assert done.stdout + done.stderr == shown, command


def test_the_readme_shows_at_least_a_derivation_a_match_and_a_mistake():
    commands = [command for session in SESSIONS for command, _ in steps(session)]
    assert any("derive examples/" in c for c in commands)
    assert any("match examples/" in c for c in commands)
    assert any("derive -" in c for c in commands)


def test_one_sh_block_holds_two_commands_that_need_no_earlier_line():
    (block,) = re.findall(r"^```sh\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)
    first, second = block.splitlines()
    for line in (first, second):
        assert line.startswith("python3 -m venv .venv && .venv/bin/pip install")
    assert "stagewright match examples/" in first
    assert second.endswith("-m pytest")
