r"""A note as LaTeX source, for pdfLaTeX, LuaLaTeX and XeLaTeX, with packages that every TeX Live has.

Numbers of equations, figures and tables are those of the document. Figures are files beside the source.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping

from symcirc.note.figures import natural_width
from symcirc.note.model import (
    Block,
    Derivation,
    Document,
    Equation,
    Figure,
    Heading,
    Items,
    Listing,
    Mathematics,
    Paragraph,
    Pieces,
    Reference,
    Remark,
    Table,
)
from symcirc.note.tex_mathematics import display, width
from symcirc.note.tex_table import table_lines
from symcirc.note.tex_text import BREAK, LONGEST_WORD, bookmark, bound, scripts, tex, tex_line, text_width
from symcirc.transfer.latex import latex as formula

#: The text's width in points, and the widest formula inside a sentence, in em.
TEXT_POINTS, INLINE_EM = 455.0, 24.0
#: The largest part of the page that a figure is high.
_HIGH = 0.42

_PREAMBLE = r"""\documentclass[11pt,a4paper]{article}
\usepackage[margin=25mm]{geometry}
\usepackage{iftex}
\ifPDFTeX
  \usepackage[T1]{fontenc}
  \usepackage[utf8]{inputenc}
  \usepackage{lmodern}
\else
  \usepackage{fontspec}
\fi
\usepackage{amsmath,graphicx,array,booktabs,longtable}
\usepackage[hidelinks]{hyperref}
\setlength{\parindent}{0pt}
\setlength{\parskip}{0.6\baselineskip plus 2pt}
\setlength{\emergencystretch}{4em}
\allowdisplaybreaks[2]
\raggedbottom"""

#: Fonts that have a script's letters, the best first, with what fontspec is to be told.
_FONTS: dict[str, tuple[str, tuple[str, ...]]] = {
    "cjk": ("", ("Noto Serif CJK SC", "Noto Sans CJK SC", "Source Han Serif SC", "FandolSong", "WenQuanYi Zen Hei",
                 "Droid Sans Fallback")),
    "arabic": ("Script=Arabic", ("Noto Naskh Arabic", "Amiri", "Noto Sans Arabic", "DejaVu Sans")),
    "hebrew": ("Script=Hebrew", ("Noto Serif Hebrew", "Noto Sans Hebrew", "DejaVu Sans", "FreeSerif")),
    "other": ("", ("DejaVu Serif", "DejaVu Sans", "Noto Serif", "FreeSerif")),
}  # fmt: skip
#: Few of these fonts have more than one face.
_ONE_FACE = "BoldFont=*,ItalicFont=*,BoldItalicFont=*,"
_RIGHT_TO_LEFT = ("arabic", "hebrew")


def latex(document: Document, pictures: Mapping[str, str] | None = None) -> str:
    r"""Return the whole document as LaTeX source.

    Args:
        document: the note.
        pictures: for each figure's name the file that \includegraphics names; NAME.pdf where it is not there.
    """
    files = dict(pictures or {})
    lines = [_PREAMBLE, *_scripts(document), *_information(document), r"\begin{document}", *_head(document)]
    writer = _Writer(document, files)
    for block in document.blocks:
        lines += ["", *writer.block(block)]
    lines += ["", r"\end{document}", ""]
    return "\n".join(lines)


def fragment(document: Document) -> str:
    """Return the equations alone, each with its heading and what leads to it as comments."""
    lines = ["% The equations of a design note, for a document with \\usepackage{amsmath}."]
    heading: list[str] = []
    for block in document.blocks:
        match block:
            case Heading():
                heading = ["", f"% {_comment(block.text)}"]
            case Equation():
                lines += [*heading, *_equation(block)]
                heading = []
            case Derivation():
                lines += heading
                heading = []
                for step in block.steps:
                    lines += [f"% {_comment(_plain(step.words))}", *_equation(step.equation)]
    return "\n".join([*lines, ""])


def _comment(text: str) -> str:
    """Return text on one line in ASCII: a comment cannot be left, whatever it holds."""
    return " ".join(text.split()).encode("ascii", "replace").decode()


def _plain(pieces: Pieces) -> str:
    return "".join(
        piece if isinstance(piece, str) else formula(piece.form) if isinstance(piece, Mathematics) else ""
        for piece in pieces
    )


def _equation(equation: Equation) -> list[str]:
    lines = display(equation.left, equation.relation, equation.right, label_of(equation.anchor))
    if equation.root_of is not None:
        lines.insert(0, f"% {equation.root_of} is a root of this polynomial")
    return lines


def label_of(anchor: str) -> str:
    r"""Return an anchor as a label.

    >>> label_of("ratio-H")
    'note:ratio-H'
    """
    return "note:" + "".join(
        c if c.isascii() and (c.isalnum() or c in "-_") else f"u{ord(c):x}" for c in anchor
    )


def _scripts(document: Document) -> Iterator[str]:
    r"""Yield what chooses fonts for the scripts of the text, where there are any: the macro \notescript."""
    used = sorted(scripts(_all_text(document)))
    if not used:
        return
    yield "% letters beyond Latin: \\notescript{script}{as they are}{their code points, where no font has them}"
    yield r"\DeclareRobustCommand{\notescript}[3]{\csname note#1\endcsname{#2}{#3}}"
    for script in used:
        yield rf"\expandafter\newcommand\csname note{script}\endcsname[2]{{\texttt{{#2}}}}"
    known = [script for script in used if script in _FONTS]
    if not known:
        return
    yield r"\ifPDFTeX\else"
    for script in known:
        options, fonts = _FONTS[script]
        yield f"  {_choice(script, options, fonts)}"
    yield r"\fi"


def _choice(script: str, options: str, fonts: tuple[str, ...]) -> str:
    shown = rf"\csname note@{script}\endcsname #1"
    if script in _RIGHT_TO_LEFT:
        shown = rf"\ifLuaTeX\textdir TRT \else\TeXXeTstate=1 \beginR\fi {shown}\ifLuaTeX\else\endR\fi"
    choice = ""
    for font in reversed(fonts):
        taken = (
            rf"\expandafter\newfontfamily\csname note@{script}\endcsname{{{font}}}[{_ONE_FACE}{options}]"
            rf"\expandafter\renewcommand\csname note{script}\endcsname[2]{{{{{shown}}}}}"
        )
        choice = rf"\IfFontExistsTF{{{font}}}{{{taken}}}{{{choice}}}"
    return choice


def _all_text(document: Document) -> str:
    texts = [document.title, document.file, document.date]
    for block in document.blocks:
        match block:
            case Heading() | Listing():
                texts.append(block.text)
            case Paragraph() | Remark():
                texts.append(_words(block.pieces))
            case Items():
                texts += map(_words, block.items)
            case Derivation():
                texts += [_words(step.words) for step in block.steps]
            case Table():
                texts += [
                    block.caption,
                    *map(_words, block.header),
                    *(_words(cell) for row in block.rows for cell in row),
                ]
            case Figure():
                texts.append(block.caption)
    return "\n".join(texts)


def _words(pieces: Pieces) -> str:
    return "".join(piece for piece in pieces if isinstance(piece, str))


def _information(document: Document) -> Iterator[str]:
    title = bookmark(document.title)
    if title:
        yield rf"\hypersetup{{pdftitle={{{title}}}}}"


def _head(document: Document) -> Iterator[str]:
    yield rf"{{\LARGE\bfseries\raggedright {tex(document.title)}\par}}"
    yield rf"\medskip {{\raggedright {tex(document.date)}\par}}"
    yield rf"{{\raggedright Sheet: {tex(document.file)}\par}}"
    yield rf"{{\raggedright SHA-256 of its text: \texttt{{\footnotesize {tex(document.digest)}}}\par}}"


class _Writer:
    """Writes blocks, one by one."""

    def __init__(self, document: Document, files: Mapping[str, str]) -> None:
        self.kinds = _kinds(document)
        self.files = files
        self.headings = 0

    def block(self, block: Block) -> Iterator[str]:
        match block:
            case Heading():
                self.headings += 1
                yield _heading(block, self.headings)
            case Paragraph():
                yield _even(self.pieces(block.pieces))
            case Items():
                yield r"\begin{itemize}\setlength{\itemsep}{0pt}\setlength{\parskip}{2pt}"
                yield from (rf"  \item {{}}{_even(self.pieces(item))}" for item in block.items)
                yield r"\end{itemize}"
            case Equation():
                yield from self._numbered(block)
            case Derivation():
                for step in block.steps:
                    yield _even(self.pieces(step.words))
                    yield from self._numbered(step.equation)
            case Table():
                header = [self.pieces(cell) for cell in block.header]
                rows = [[self.pieces(cell) for cell in row] for row in block.rows]
                measured = [[_measure(cell) for cell in row] for row in (block.header, *block.rows)]
                yield from table_lines(block, label_of(block.anchor), header, rows, measured)
            case Figure():
                yield from self._figure(block)
            case Remark():
                yield from self._remark(block)
            case Listing():
                yield from _listing(block)

    def pieces(self, pieces: Pieces) -> str:
        """Return a sentence."""
        return "".join(self._piece(piece) for piece in pieces)

    def _piece(self, piece: str | Mathematics | Reference) -> str:
        if isinstance(piece, str):
            return tex(piece)
        if isinstance(piece, Mathematics):
            written = f"${formula(piece.form)}$"
            return (
                written if width(piece.form) <= INLINE_EM else rf"\resizebox{{\linewidth}}{{!}}{{{written}}}"
            )
        label = label_of(piece.anchor)
        word = self.kinds.get(piece.anchor, "")
        return rf"\eqref{{{label}}}" if word == "" else rf"{word}~\ref{{{label}}}"

    def _numbered(self, equation: Equation) -> Iterator[str]:
        yield rf"\setcounter{{equation}}{{{equation.number - 1}}}"
        yield from _equation(equation)

    def _figure(self, figure: Figure) -> Iterator[str]:
        natural = natural_width(figure)
        wide = r"width=\linewidth," if natural is None or natural > TEXT_POINTS else f"width={natural:.1f}bp,"
        file = self.files.get(figure.name, f"{figure.name}.pdf")
        yield r"\begin{figure}[htbp]"
        yield r"  \centering"
        yield rf"  \includegraphics[{wide}height={_HIGH}\textheight,keepaspectratio]{{{file}}}"
        yield rf"  \setcounter{{figure}}{{{figure.number - 1}}}"
        yield rf"  \caption{{{tex(figure.caption)}}}"
        yield rf"  \label{{{label_of(figure.anchor)}}}"
        yield r"\end{figure}"

    def _remark(self, remark: Remark) -> Iterator[str]:
        word = {"warning": "Warning.", "caution": "Caution."}[remark.kind]
        yield r"\begin{quote}"
        yield rf"\textbf{{{word}}} {_even(self.pieces(remark.pieces))}"
        yield r"\end{quote}"


def _even(sentence: str) -> str:
    """Return a paragraph; one with a word that may be broken anywhere is not stretched to the margin."""
    return rf"{{\raggedright {sentence}\par}}" if BREAK in sentence else sentence


def _heading(heading: Heading, number: int) -> str:
    command = r"\section*" if heading.level == 1 else r"\subsection*"
    mark = bookmark(heading.text) or "section"
    level = 1 if heading.level == 1 else 2
    return rf"{command}{{{tex(heading.text)}}}\pdfbookmark[{level}]{{{mark}}}{{note.{number}}}"


def _measure(pieces: Pieces) -> tuple[float, float]:
    """Return how wide a cell is on one line, and how wide at least, in em."""
    natural = least = 0.0
    for piece in pieces:
        if isinstance(piece, str):
            natural += text_width(piece)
            words = re.split(r"[ \n\t]+", bound(piece))
            least = max([least, *(text_width(word[:LONGEST_WORD]) for word in words)])
        else:
            wide = width(piece.form) if isinstance(piece, Mathematics) else 4.0
            natural, least = natural + wide, max(least, wide)
    return natural, least


def _listing(listing: Listing) -> Iterator[str]:
    yield r"\begingroup\footnotesize\ttfamily\raggedright\setlength{\parskip}{0pt}"
    for line in listing.text.removesuffix("\n").split("\n"):
        written = tex_line(line.rstrip("\r"))
        yield rf"\hangindent=2em\hangafter=1 {written or chr(92) + 'strut'}\par"
    yield r"\endgroup"


def _kinds(document: Document) -> dict[str, str]:
    """Return for each anchor the word before its number; none for an equation."""
    found = {}
    for block in document.blocks:
        if isinstance(block, Figure | Table):
            found[block.anchor] = "Figure" if isinstance(block, Figure) else "Table"
    return found
