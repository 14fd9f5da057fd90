"""The note as LaTeX: what is written, how wide equations are broken, and the files; a real TeX under the marker tex."""

from __future__ import annotations

import itertools
import re
import subprocess
from collections.abc import Iterator
from dataclasses import replace
from functools import cache
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symcirc.complaints import Source
from symcirc.derivation import pose
from symcirc.note.build import build_note
from symcirc.note.figures import figure_pdf, figures_of
from symcirc.note.latex import fragment, label_of, latex
from symcirc.note.model import Block, Derivation, Document, Equation, Figure, Paragraph
from symcirc.note.tex_mathematics import ROOM, display, width
from symcirc.note.tex_text import tex, tex_line
from symcirc.sheet import read_sheet
from symcirc.transfer.form import Divided, Integer, Negative, Power, Product, Root, Sum, Symbol
from symcirc.transfer.latex import latex as formula
from symcirc.working.check import check_posed
from tests.calling import EXAMPLES, call
from tests.note.sample import ODD_TEXTS, SAMPLE, WIDE
from tests.published.stages import STAGES

NAMES = sorted(path.stem for path in EXAMPLES.glob("*.stage"))
ENGINES = ("pdflatex", "lualatex")
SMALL = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"
#: What a log must not hold.
FAULTS = re.compile(r"Warning|Overfull|Underfull|Missing character|^!", re.MULTILINE)


@cache
def note(name: str) -> Document:
    path = EXAMPLES / f"{name}.stage"
    return build_note(read_sheet(Source(path.name, path.read_text(encoding="utf-8"))), "2026-12-01")


# text -----------------------------------------------------------------------------------------------------------

#: What LaTeX shows for what is written: the shown letter for every command that ``tex`` may write.
SHOWN = {
    r"\textbackslash{}": "\\", r"\{": "{", r"\}": "}", r"\#": "#", r"\$": "$", r"\%": "%", r"\&": "&", r"\_": "_",
    r"\textasciicircum{}": "^", r"\textasciitilde{}": "~", r"\textless{}": "<", r"\textgreater{}": ">",
    r"\textbar{}": "|", r"\textquotedbl{}": '"', r"\textquotesingle{}": "'", r"\textasciigrave{}": "`",
    r"\mbox{-}": "-", r"\mbox{,}": ",", "{[}": "[", "{]}": "]", "{*}": "*", r"\hspace{0pt}": "", "~": " ", r"\ ": " ",
}  # fmt: skip
_COMMANDS = re.compile("|".join(map(re.escape, sorted(SHOWN, key=len, reverse=True))))


def read_back(written: str) -> str:
    """Return what LaTeX shows for text in ASCII; a special sign that means something to it is an error."""
    rest = _COMMANDS.sub("", written)
    assert not re.search(r"[\\{}#$%&_^~]", rest), rest
    return _COMMANDS.sub(lambda found: SHOWN[found.group()], written)


@given(st.text(st.characters(min_codepoint=32, max_codepoint=126), max_size=60))
def test_any_text_in_ascii_is_read_back_as_it_was(text) -> None:
    assert read_back(tex(text)) == re.sub(r" +", " ", text)
    assert read_back(tex_line(text)) == text


@given(st.text(max_size=40))
def test_no_text_leaves_a_brace_open_or_a_special_sign_bare(text) -> None:
    for written in (tex(text), tex_line(text)):
        bare = re.sub(r"\\[{}#$%&_ ]", "", written)
        depth = 0
        for sign in bare:
            depth += {"{": 1, "}": -1}.get(sign, 0)
            assert depth >= 0
        assert depth == 0
        assert not re.search(r"[#$%&]", bare)
        assert not any(ord(sign) < 32 for sign in written.replace(" ", ""))


def test_other_scripts_are_written_with_their_code_points_beside_them() -> None:
    assert tex("電 R1") == r"\notescript{cjk}{電}{[U+96FB]} R1"
    assert r"\notescript{arabic}" in tex(ODD_TEXTS["Arabic"])
    assert r"\notescript{hebrew}" in tex(ODD_TEXTS["Hebrew"])
    assert tex("Ω, µ, é") == r"\ensuremath{\Omega}, \ensuremath{\mu}, é"


def test_words_from_right_to_left_stand_in_one_run() -> None:
    first, second, third = ODD_TEXTS["Hebrew"].split(",")[0].split(" ")
    assert rf"\notescript{{hebrew}}{{{first} {second} {third}}}" in tex(ODD_TEXTS["Hebrew"])


def test_signs_that_melt_into_one_are_kept_apart() -> None:
    assert tex("low-pass -- a,,b") == r"low-pass \mbox{-}\mbox{-} a\mbox{,}\mbox{,}b"


def test_a_long_word_may_be_broken_and_a_number_keeps_its_unit() -> None:
    assert r"\hspace{0pt}" in tex(ODD_TEXTS["long word"])
    assert tex("9.9 kΩ at 5 % of 3 parts") == r"9.9~k\ensuremath{\Omega} at 5~\% of 3 parts"


def test_a_comment_of_a_fragment_cannot_be_left() -> None:
    blocks = (
        replace(SAMPLE.blocks[0], text="a\n\\input{b}\u2028c\r\\d"),
        Equation("e", 1, Symbol("k"), "=", Symbol("n")),
    )
    lines = fragment(replace(SAMPLE, blocks=blocks)).splitlines()
    assert lines[2].startswith("% a")
    assert sum(line.startswith("%") for line in lines) == 2


# equations ------------------------------------------------------------------------------------------------------


def rows(lines: list[str]) -> list[str]:
    return [line for line in lines if line.startswith("  ") and not line.startswith(r"  \label")]


def test_what_fits_stays_on_one_line_and_what_does_not_is_broken_at_its_signs() -> None:
    assert len(rows(display(Symbol("H"), "=", Symbol("k"), "a"))) == 1
    broken = rows(display(Symbol("H"), "=", WIDE, "a"))
    assert len(broken) > 3
    assert all(re.match(r"  &\\quad [+-] ", row) for row in broken[1:])
    assert [row.endswith(r"\notag\\") for row in broken] == [True] * (len(broken) - 1) + [False]


def test_broken_lines_hold_every_term_once_and_in_order() -> None:
    joined = " ".join(
        re.sub(r"&\\quad |\\notag\\\\|&", "", row).strip()
        for row in rows(display(Symbol("H"), "=", WIDE, "a"))
    )
    assert joined.replace(" ", "") == f"H={formula(WIDE)}".replace(" ", "")


def test_a_fraction_that_is_too_wide_gets_names_that_are_explained_below() -> None:
    plain = Sum(tuple(Symbol(f"R{n}") for n in range(1, 40)))
    lines = rows(display(Symbol("H"), "=", Negative(Divided(plain, Sum((*plain.terms, Symbol("k"))))), "a"))
    assert lines[0].startswith(r"  H &= -\frac{\mathcal{A}}{\mathcal{B}}")
    assert [line[2:22] for line in lines if "text" in line] == [
        r"\text{with }\mathcal",
        r"\text{with }\mathcal",
    ]


@pytest.mark.parametrize(
    "form",
    [
        Root(WIDE),
        Power(WIDE, 3),
        Product((Symbol("k"), WIDE, Sum((Symbol("n"), Negative(WIDE))))),
        Divided(Product((Symbol("k"), WIDE)), Symbol("R1")),
        Negative(WIDE),
        Sum((Symbol("k"), Product((WIDE, WIDE)), Negative(Root(WIDE)))),
        Product(tuple(Symbol(f"R{n}") for n in range(60))),
        Product(tuple(Integer(10**12) for _ in range(12))),
    ],
)
def test_every_shape_that_is_too_wide_is_broken_with_balanced_braces(form) -> None:
    for left, right in ((Symbol("H"), form), (form, Integer(0)), (form, form)):
        lines = display(left, "=", right, "a")
        assert len(rows(lines)) > 1
        for row in rows(lines):
            assert row.count("{") == row.count("}")
            assert row.count(r"\left") == row.count(r"\right")
        whole = "".join(lines)
        assert whole.count(r"\bigl(") == whole.count(r"\bigr)")


def test_no_equation_of_the_examples_is_put_on_one_line_beyond_the_room() -> None:
    broken = 0
    for name in NAMES:
        for block in note(name).blocks:
            if isinstance(block, Equation) and width(block.left) + width(block.right) + 2 > ROOM:
                assert len(rows(display(block.left, block.relation, block.right, "a"))) > 1
                broken += 1
    assert broken


@pytest.mark.parametrize("name", ["hive_antialias", "hive_queen", "hive_hum_notch"])
def test_a_fragment_of_the_derivation_is_read_by_the_check_and_holds(name) -> None:
    sheet = read_sheet(Source("a.stage", (EXAMPLES / f"{name}.stage").read_text(encoding="utf-8")))
    written = fragment(build_note(sheet, "2026-12-01", ["derivation"]))
    lines = check_posed(pose(sheet), Source("a.tex", written)).lines
    assert len(lines) > 4
    assert {line.verdict for line in lines} == {"holds"}


# the whole document ---------------------------------------------------------------------------------------------


def test_numbers_are_those_of_the_document_and_references_have_labels() -> None:
    written = latex(SAMPLE)
    for block in SAMPLE.blocks:
        if isinstance(block, Equation):
            assert rf"\setcounter{{equation}}{{{block.number - 1}}}" in written
    labels = set(re.findall(r"\\label\{([^}]*)\}", written))
    assert set(re.findall(r"\\(?:eq)?ref\{([^}]*)\}", written)) <= labels
    assert label_of("eq-1") in labels


def test_every_note_says_the_same_at_every_call() -> None:
    assert latex(note("hive_mask")) == latex(note("hive_mask"))
    (figure, *_) = figures_of(note("hive_mask"))
    assert figure_pdf(figure) == figure_pdf(figure)


def test_a_paragraph_that_looks_like_latex_is_text() -> None:
    document = replace(SAMPLE, blocks=(Paragraph((ODD_TEXTS["backslash"],)),))
    assert r"\textbackslash{}input\{c\}" in latex(document)


# the command ----------------------------------------------------------------------------------------------------


@pytest.fixture
def sheet(tmp_path) -> Path:
    path = tmp_path / "lp.stage"
    path.write_text(SMALL)
    return path


def test_the_note_is_written_with_its_figures_beside_it(capsys, tmp_path, sheet) -> None:
    called = call(capsys, "note", sheet, "-o", tmp_path / "a b#1.tex", "--date", "2026-01-31")
    assert (called.status, called.out, called.err) == (0, "", "")
    source = (tmp_path / "a b#1.tex").read_text(encoding="utf-8")
    assert r"\includegraphics[width=" in source
    assert "{a-b-1-circuit.pdf}" in source
    assert "2026-01-31" in source
    assert (tmp_path / "a-b-1-circuit.pdf").read_bytes().startswith(b"%PDF")
    assert sorted(p.name for p in tmp_path.iterdir()) == ["a b#1.tex", "a-b-1-circuit.pdf", "lp.stage"]


def test_no_file_that_is_there_is_written_over_unless_told_so(capsys, tmp_path, sheet) -> None:
    (tmp_path / "n-circuit.pdf").write_text("mine")
    called = call(capsys, "note", sheet, "-o", tmp_path / "n.tex")
    assert called.status == 2
    assert "is there already" in called.err
    assert not (tmp_path / "n.tex").exists()
    assert (tmp_path / "n-circuit.pdf").read_text() == "mine"
    assert call(capsys, "note", sheet, "-o", tmp_path / "n.tex", "--replace").status == 0
    assert (tmp_path / "n-circuit.pdf").read_bytes().startswith(b"%PDF")
    assert call(capsys, "note", sheet, "-o", tmp_path / "n.tex").status == 2


def test_nothing_is_left_where_the_note_cannot_be_written(capsys, tmp_path, sheet) -> None:
    (tmp_path / "n.tex").mkdir()
    called = call(capsys, "note", sheet, "-o", tmp_path / "n.tex", "--replace")
    assert called.status == 2
    assert sorted(p.name for p in tmp_path.iterdir()) == ["lp.stage", "n.tex"]


@pytest.mark.parametrize(
    ("words", "fault"),
    [
        (["-o", "n.docx"], "of no kind that a note is written in"),
        (["-o", "n.html", "--fragment"], "cannot hold LaTeX equations alone"),
        (["-o", "n.tex", "--date", "2026-02-30"], "`2026-02-30` is no date"),
        (["-o", "n.tex", "--date", "20260131"], "`20260131` is no date"),
        (["-o", "n.tex", "--only", "circut"], "did you mean circuit?"),
    ],
)
def test_a_call_that_cannot_be_meant_is_refused_before_anything_is_written(
    capsys, monkeypatch, tmp_path, sheet, words, fault
) -> None:
    monkeypatch.chdir(tmp_path)
    called = call(capsys, "note", sheet, *words)
    assert called.status == 2
    assert fault in called.err
    assert "mend: " in called.err
    assert [p.name for p in tmp_path.iterdir()] == ["lp.stage"]


def test_a_fragment_holds_equations_alone_and_no_figure(capsys, tmp_path, sheet) -> None:
    assert (
        call(capsys, "note", sheet, "-o", tmp_path / "f.tex", "--fragment", "--only", "transfer").status == 0
    )
    assert [p.name for p in sorted(tmp_path.iterdir())] == ["f.tex", "lp.stage"]
    lines = (tmp_path / "f.tex").read_text().splitlines()
    assert all(
        line.startswith(("%", "  ", r"\begin{equation}", r"\end{equation}")) or not line for line in lines
    )


@pytest.mark.parametrize("kind", ["html", "pdf"])
def test_the_other_kinds_are_one_file(capsys, tmp_path, sheet, kind) -> None:
    called = call(capsys, "note", sheet, "-o", tmp_path / f"n.{kind}")
    assert called.status == 0, called.err
    assert sorted(p.name for p in tmp_path.iterdir()) == sorted(["lp.stage", f"n.{kind}"])


# a real TeX -----------------------------------------------------------------------------------------------------


def compiled(folder: Path, document: Document, engine: str) -> str:
    """Return the last log of a note that was compiled as often as references need."""
    names = {}
    for figure in figures_of(document):
        names[figure.name] = f"note-{figure.name}.pdf"
        (folder / names[figure.name]).write_bytes(figure_pdf(figure))
    (folder / "note.tex").write_text(latex(document, names), encoding="utf-8")
    for _ in range(3):
        command = [engine, "-interaction=nonstopmode", "-halt-on-error", "note.tex"]
        done = subprocess.run(command, cwd=folder, capture_output=True, timeout=300, check=False)
        assert done.returncode == 0, done.stdout[-2000:].decode(errors="replace")
    return (folder / "note.log").read_text(encoding="utf-8", errors="replace")


def faults(log: str) -> list[str]:
    return [line for line in log.splitlines() if FAULTS.search(line)]


def with_figures(document: Document) -> Document:
    """Return the sample with figures that were drawn from something."""
    drawn = figures_of(note("hive_antialias"))[0].drawn_from
    blocks = tuple(replace(b, drawn_from=drawn) if isinstance(b, Figure) else b for b in document.blocks)
    return replace(document, blocks=blocks)


@pytest.mark.tex
@pytest.mark.parametrize("engine", ENGINES)
def test_the_sample_compiles_without_a_warning_or_an_overfull_box(tmp_path, engine) -> None:
    assert faults(compiled(tmp_path, with_figures(SAMPLE), engine)) == []


@pytest.mark.tex
@pytest.mark.parametrize("name", NAMES)
def test_every_example_compiles_without_a_warning_or_an_overfull_box(tmp_path, name) -> None:
    assert faults(compiled(tmp_path, note(name), "pdflatex")) == []


def anew(block: Block, name: str, count: Iterator[int]) -> Iterator[Block]:
    """Yield the equations of a block with anchors and numbers of their own."""
    found = [block] if isinstance(block, Equation) else []
    if isinstance(block, Derivation):
        found = [step.equation for step in block.steps]
    for equation in found:
        yield replace(equation, anchor=f"{name}-{equation.anchor}", number=next(count))


@pytest.mark.tex
def test_the_equations_of_every_published_stage_fit_on_the_page(tmp_path) -> None:
    blocks: list[Block] = []
    count = itertools.count(1)
    for stage in STAGES:
        sheet = read_sheet(Source("a.stage", stage.sheet))
        for block in build_note(sheet, "2026-12-01", ["derivation", "transfer", "design"]).blocks:
            blocks += anew(block, stage.id, count)
    assert len(blocks) > 500
    assert faults(compiled(tmp_path, replace(SAMPLE, blocks=tuple(blocks)), "pdflatex")) == []


@pytest.mark.tex
def test_an_overfull_box_would_be_seen(tmp_path) -> None:
    wide = Product(tuple(Symbol(f"R{n}") for n in range(60)))
    document = replace(SAMPLE, blocks=(Equation("e", 1, Symbol("H"), "=", wide),))
    source = latex(document).replace(r" \notag\\" + "\n", "").replace("&\\quad", "").replace(r"\times", "")
    (tmp_path / "a.tex").write_text(source, encoding="utf-8")
    subprocess.run(
        ["pdflatex", "-interaction=nonstopmode", "a.tex"], cwd=tmp_path, capture_output=True, check=False
    )
    assert any("Overfull" in line for line in faults((tmp_path / "a.log").read_text(errors="replace")))


@pytest.mark.tex
def test_a_fragment_compiles_in_a_document_with_amsmath_alone(tmp_path) -> None:
    body = fragment(note("hive_preamp"))
    packages = "\\usepackage[a4paper,margin=25mm]{geometry}\n\\usepackage{amsmath}"
    source = f"\\documentclass[11pt]{{article}}\n{packages}\n\\begin{{document}}\n{body}\n\\end{{document}}\n"
    (tmp_path / "a.tex").write_text(source, encoding="utf-8")
    for _ in range(2):
        command = ["pdflatex", "-interaction=nonstopmode", "-halt-on-error", "a.tex"]
        subprocess.run(command, cwd=tmp_path, capture_output=True, check=True)
    assert faults((tmp_path / "a.log").read_text(errors="replace")) == []
