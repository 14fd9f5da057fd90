"""Calling the program as a user does, in this process or in one of its own."""

from __future__ import annotations

import json
import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from symcirc.command import main

ROOT = Path(__file__).parent.parent
EXAMPLES = ROOT / "examples"


@dataclass(frozen=True)
class Called:
    status: int
    out: str
    err: str

    @property
    def json(self) -> dict[str, Any]:
        return json.loads(self.out)


def call(capsys, *words: object) -> Called:
    """Call ``main`` in this process."""
    try:
        status = main([str(word) for word in words])
    except SystemExit as leaving:
        status = int(leaving.code or 0)
    captured = capsys.readouterr()
    return Called(status, captured.out, captured.err)


def run(*words: object, stdin: str | bytes = "", cwd: Path = ROOT) -> Called:
    """Run ``python -m symcirc`` in a process of its own."""
    data = stdin.encode() if isinstance(stdin, str) else stdin
    command = [sys.executable, "-m", "symcirc", *(str(word) for word in words)]
    done = subprocess.run(command, input=data, capture_output=True, cwd=cwd, timeout=120, check=False)
    return Called(done.returncode, done.stdout.decode(), done.stderr.decode())
