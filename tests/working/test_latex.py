"""The display mathematics of LaTeX files."""

from __future__ import annotations

import pytest

from symcirc.complaints import Source
from symcirc.working.latex import read_latex
from tests.working.calling import LOW_PASS, RC, checked

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
