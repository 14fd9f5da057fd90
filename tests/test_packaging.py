"""The wheel carries the grammars: installed in a fresh environment outside the checkout, it derives an example."""

import json
import subprocess
import sys
import venv
from pathlib import Path

ROOT = Path(__file__).parent.parent


def run(*words: str | Path, cwd: Path) -> str:
    return subprocess.run(
        [str(w) for w in words], cwd=cwd, check=True, capture_output=True, text=True, timeout=300
    ).stdout


def test_the_wheel_installed_outside_the_checkout_derives_an_example(tmp_path):
    build = ("-m", "build", "--wheel", "--no-isolation", "--outdir", tmp_path / "dist", ROOT)
    run(sys.executable, *build, cwd=tmp_path)
    (wheel,) = (tmp_path / "dist").glob("stagewright-*.whl")
    venv.create(tmp_path / "fresh", with_pip=True)
    python = tmp_path / "fresh" / "bin" / "python"
    run(python, "-m", "pip", "install", "--quiet", "--disable-pip-version-check", wheel, cwd=tmp_path)
    command = tmp_path / "fresh" / "bin" / "stagewright"
    output = run(command, "derive", ROOT / "examples" / "hive_antialias.stage", "--json", cwd=tmp_path)
    assert json.loads(output)["ask"]["H"]["order"] == 2
    where = run(python, "-c", "import symcirc; print(symcirc.__file__)", cwd=tmp_path)
    assert str(ROOT) not in where
    assert not {"build", "dist"} & {path.name for path in ROOT.iterdir()}
