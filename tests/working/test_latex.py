"""The display mathematics of LaTeX files."""

from __future__ import annotations

import re

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symcirc.complaints import Source
from symcirc.sheet import read_sheet
from symcirc.transfer.latex import latex_name
from symcirc.working.latex import read_latex
from tests.calling import EXAMPLES
from tests.published.stages import STAGES
from tests.working.calling import LOW_PASS, RC, TWO_DRIVES, checked

PAPER = r"""\documentclass{article}
\begin{document}
The currents at node $a$ give % not display: $x = y$
\begin{align}
  \frac{V_{in} - V_a}{R_1} &= s C_1 V_a + \frac{V_a - V_{out}}{R_{2}} + \dfrac{V_a}{R_3}, \label{eq:a} \\
  \frac{V_{a}}{R_3} &= -s C_{2} V_\mathrm{out} .
\end{align}
so that
\[ \frac{V_{out}}{V_{in}} = -\frac{R_2}{R_1} \cdot
   \frac{1}{s^2 C_1 C_2 R_2 R_3 + s C_2 \left( R_2 + R_3 + \frac{R_2 R_3}{R_1} \right) + 1} \]
\begin{equation*}
  \omega_0 = \frac1{\sqrt{R_2R_3C_1C_2}} % 2 pi f_0
\end{equation*}
$$ R_1 \parallel R_2 = \frac{R_1R_2}{R_1+R_2} $$
\begin{gather}
  H = \frac{V_{out}}{V_{in}} \\
  \int H = 1
\end{gather}
\end{document}
"""


def test_a_paper_is_read_and_judged() -> None:
    result = checked(LOW_PASS, PAPER, "a.tex")
    assert [(line.line, line.verdict, line.follows) for line in result.lines] == [
        (5, "holds", False),
        (6, "holds", False),
        (9, "holds", True),
        (12, "holds", None),
        (14, "holds", True),
        (16, "holds", True),
        (17, "unread", None),
    ]


def test_what_is_not_read_is_named_with_its_place() -> None:
    complaint = checked(LOW_PASS, PAPER, "a.tex").lines[-1].complaint
    assert complaint is not None
    assert (complaint.place.line, complaint.place.column) == (17, 3)
    assert r"`\int`" in complaint.cause


def test_every_name_of_a_row_keeps_its_place_in_the_file() -> None:
    line = checked(RC, "text\n\\[ V_{out} = \\frac{V_{in}}{1 + s R_1 C_{1}} \\]", "a.tex").lines[0]
    assert line.verdict == "holds"
    assert line.equation is not None
    assert (line.equation.left.place.line, line.equation.left.place.column) == (2, 4)


@pytest.mark.parametrize(
    ("latex", "plain"),
    [
        (r"\tfrac12 sC_1", "(1 /2 ) s C1"),
        (r"x^{2} + y^3", "x^(2) + y^3 "),
        (r"a \times b \, c", "a * b c"),
        (r"I_{R_1} = I_{R1}", "I_R1 = I_R1"),
        (r"j\omega C", "j omega C"),
        (r"\omega_{0} = 2\pi f_0", "w0 = 2 pi f0"),
        (r"\left[ a \right]", "( a )"),
        (r"\mathrm{j}\omega\mathrm{C}_1\mathrm{V}_{out}", "j omega C1 V_out"),
        (r"R_1\mathrm{beta}s", "R1 beta s"),
        (r"2\mathrm{ beta }2", "2 beta 2"),
        (r"V_{\text{S1},R_1}", "V_S1_R1"),
        (r"V_{\mathrm{my\_node}}", "V_my_node"),
    ],
)
def test_each_construction_has_its_plain_text(latex: str, plain: str) -> None:
    (row,) = read_latex(Source("a.tex", f"\\[{latex}\\]"))
    assert row.text.split() == plain.split()


@pytest.mark.parametrize(
    "latex",
    [
        r"a = \mathcal{L}",
        r"a = \frac{1}",
        r"a = \frac{1}{2",
        r"a = b_",
        r"a = {b",
        r"x' = 2",
        r"a = \begin{cases} 1",
        r"V_{out} = 5\,\mathrm{s}",
        r"V_{out} = \mathrm{beta}_{1}",
        r"V_{out} = \mathrm{a b}",
        r"V_{out} = \mathrm{a-b}",
        r"V_{out} = \mathrm{1a}",
        r"V_{out} = \mathrm a",
        r"V_{out} = \mathrm{a",
        r"V_{out} = \mathrm{}",
        r"V_{out} = \text{gain}",
        r"V_{out} = R_{1,2}",
        r"V_{out} = R_{S1,}",
        r"V_{out} = I_{R_{a,1}}",
        r"\text{under H} = 1",
        r"\text{under } = H",
        r"\text{under } s H",
        r"\text{under",
        r"\text{under H K}",
        r"\text{under } \text{H}",
        r"\text{under K}",
    ],
)
def test_anything_else_is_unread_and_never_guessed(latex: str) -> None:
    result = checked(RC, f"$$ {latex} $$", "a.tex")
    assert [line.verdict for line in result.lines] == ["unread"]
    assert result.exit_status == 2


def test_a_row_that_begins_with_an_equals_sign_goes_on_from_the_row_above() -> None:
    tex = "\\begin{align*}\nH &= \\frac{V_{out}}{V_{in}} \\\\\n &= \\frac{1}{1 + s R_1 C_1} \\\\ &= 2\n\\end{align*}"
    result = checked(RC, tex, "a.tex")
    assert [(line.line, line.verdict) for line in result.lines] == [(2, "holds"), (3, "holds"), (3, "fails")]


def test_a_sum_may_go_on_in_the_next_row() -> None:
    tex = "\\begin{align}\nV_{in} &= V_{out} \\\\\n & + s R_1 C_1 V_{out}\n\\end{align}"
    assert [line.verdict for line in checked(RC, tex, "a.tex").lines] == ["holds"]


# names as the program writes them ---------------------------------------------------------------------------------

ODD_NAMES = """
    V1 I2 V_S1_x V_S1_S2_out I_S1_R1 I_S1_S1_2_C3 V_my_node R1a Rf Zin Ya Lx S1_R1 S1_Rf S1_2_R1 S1_S2_C3 S1_U1_gbw
    U1_gain U1_gm gain ratio beta r_min R_1 a_ a__b V_ V__a I_a_ S1_V1 S1_k S1_k1 k k1 s w f w0 f0 Q omega j pi
    under let sqrt
"""


def sheet_names(text: str) -> set[str]:
    """Return all names that an answer about a sheet can hold."""
    sheet = read_sheet(Source("a.stage", text))
    branches = [part.name for part in sheet.parts] + [device.name for device in sheet.devices]
    voltages = {f"V_{node}" for node in sheet.node_places}
    currents = {f"I_{name}" for name in (*branches, *sheet.node_places)}
    return {*sheet.symbols, *(ask.name for ask in sheet.asks), *voltages, *currents}


def read_back(mathematics: str) -> str:
    """Return the plain text of a display of one row, all of which must be read."""
    (row,) = read_latex(Source("a.tex", rf"\[ {mathematics} \]"))
    assert row.trouble is None, row.trouble
    assert row.spans is not None
    assert len(row.spans) == len(row.text)
    return row.text


def check_read_back(name: str) -> None:
    written = latex_name(name)
    assert read_back(written).strip() == name, written
    fraction = read_back(rf"\frac{{2 {written}}}{{R_{{1}} {written}}}")
    assert re.findall(r"\w+", fraction) == ["2", name, "R1", name]


@pytest.mark.parametrize("name", ODD_NAMES.split())
def test_an_odd_name_is_read_back_as_it_was(name: str) -> None:
    check_read_back(name)


def test_every_name_of_the_examples_and_published_stages_is_read_back_as_it_was() -> None:
    texts = [path.read_text(encoding="utf-8") for path in EXAMPLES.glob("*.stage")] + [
        s.sheet for s in STAGES
    ]
    names = set().union(*map(sheet_names, texts))
    assert {"U1_gain", "S1_R1"} & names
    for name in names:
        check_read_back(name)


@settings(max_examples=300, deadline=None, derandomize=True)
@given(st.from_regex(r"[A-Za-z][A-Za-z0-9_]{0,9}", fullmatch=True))
def test_any_name_that_a_sheet_can_have_is_read_back_as_it_was(name: str) -> None:
    if not re.match("[VI]_[0-9]", name):  # nodes begin with a letter
        check_read_back(name)


def test_a_written_name_keeps_its_whole_place_in_the_file() -> None:
    (row,) = read_latex(
        Source("a.tex", r"\[ 2\mathrm{gain}_{\mathrm{U1}} R_{\mathrm{S1},1} + \mathrm{r\_min} \]")
    )
    for name, latex in [("U1_gain", r"\mathrm{gain}_{\mathrm{U1}}"), ("r_min", r"\mathrm{r\_min}")]:
        start = row.text.index(name)
        first, last = row.stretch(start, start + len(name))
        assert row.source.text[first:last] == latex


# under an ask -----------------------------------------------------------------------------------------------------

UNDER = [
    r"\text{under Zout}",
    r"\text{under } Zout",
    r"\text{under } Z_{\mathrm{out}}",
    r"\text{ under} ~ Z_{out}",
    r"\mathrm{under Zout}",
    r"\mathrm{under~Zout}",
    r"& \text{under\ Zout}.",
]


@pytest.mark.parametrize("row", UNDER)
def test_a_row_says_under_which_ask_the_rows_after_it_stand(row: str) -> None:
    dead = r"V_{a} &= 0"
    tex = f"\\begin{{align}}\n{dead} \\\\\n{row} \\\\\n{dead}\n\\end{{align}}\n\\[ V_a = 0 \\]"
    assert [line.verdict for line in checked(TWO_DRIVES, tex, "a.tex").lines] == ["fails", "holds", "holds"]


def test_a_comment_says_nothing_about_the_ask() -> None:
    tex = "% under Zout\n\\[ % under Zout\nV_a = 0 \\]"
    assert [line.verdict for line in checked(TWO_DRIVES, tex, "a.tex").lines] == ["fails"]


def test_an_unknown_ask_is_named_with_its_place() -> None:
    (line,) = checked(TWO_DRIVES, r"\[ \text{under Zin} \]", "a.tex").lines
    assert line.verdict == "unread"
    assert line.complaint is not None
    assert (line.complaint.place.column, line.complaint.place.end) == (16, 19)


def test_a_parameter_called_under_is_a_name() -> None:
    assert read_back(r"\mathrm{under} R_{1} = k") == "under R1 = k"


def test_split_and_sized_brackets_are_read() -> None:
    text = r"""\begin{equation*}\begin{split}
  V_{out} &= \frac{V_{in}}{1 + s R_1 C_1} \\
          &= V_{in} \bigl( 1 + s R_1 C_1 \bigr)^{-1}
\end{split}\end{equation*}"""
    assert [line.verdict for line in checked(RC, text, "a.tex").lines] == ["holds", "holds"]
