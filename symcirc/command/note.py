"""The verb ``note``: the design note as LaTeX with its figures beside it, as HTML, or as PDF."""

from __future__ import annotations

import re
import sys
from argparse import Namespace
from datetime import date
from pathlib import Path

from symcirc.command.files import refuse_existing, refuse_file, write_whole
from symcirc.command.progress import ProgressLine
from symcirc.complaints import Complaint, Place, Source
from symcirc.note.model import Document
from symcirc.sheet.model import Sheet

_KINDS = (".tex", ".html", ".pdf")


def write_note(words: Namespace, sheet: Sheet, progress: ProgressLine) -> int:
    """Write a sheet's note into the file that the words name; figures of LaTeX into files beside it.

    Raises Complaint for a name of another kind, a file that is there, a date or a section that is none.
    """
    from symcirc.note.build import build_note, sections_of

    path = Path(words.output)
    if path.suffix.lower() not in _KINDS:
        mend = "let its name end in .tex, .html or .pdf"
        raise refuse_file(path, "is of no kind that a note is written in", mend)
    if words.fragment and path.suffix.lower() != ".tex":
        mend = "let its name end in .tex, or leave --fragment out"
        raise refuse_file(path, "cannot hold LaTeX equations alone", mend)
    only, dated = sections_of(words.only or ""), _date(words.date)
    if not words.replace:
        refuse_existing(path)
    document = build_note(sheet, dated, only, progress)
    progress("writing the note")
    files = _files(path, document, words.fragment)
    _write_all(files, replace=words.replace)
    progress.clear()
    for remark in sheet.remarks:
        print(remark, file=sys.stderr)
    return 0


def _date(given: str | None) -> str:
    """Return a date as ISO 8601 has it, today's where none is given."""
    if given is None:
        return date.today().isoformat()
    try:
        if re.fullmatch(r"\d{4}-\d{2}-\d{2}", given) is None:
            raise ValueError(given)
        return date.fromisoformat(given).isoformat()
    except ValueError:
        place = Place(1, 1, max(2, len(given) + 1), Source("--date", given))
        raise Complaint(place, f"`{given}` is no date", "write it as in 2026-01-31") from None


def _files(path: Path, document: Document, only_equations: bool) -> dict[Path, bytes]:
    """Return what is to be written, the note itself last."""
    match path.suffix.lower():
        case ".html":
            from symcirc.note.html import html

            return {path: html(document).encode()}
        case ".pdf":
            from symcirc.note.pdf import pdf

            return {path: pdf(document)}
    from symcirc.note.latex import fragment, latex

    if only_equations:
        return {path: fragment(document).encode()}
    from symcirc.note.figures import figure_pdf, figures_of

    stem = re.sub(r"[^A-Za-z0-9_-]", "-", path.stem)
    figures = figures_of(document)
    names = {figure.name: f"{stem}-{figure.name}.pdf" for figure in figures}
    files = {path.with_name(names[figure.name]): figure_pdf(figure) for figure in figures}
    return {**files, path: latex(document, names).encode()}


def _write_all(files: dict[Path, bytes], replace: bool) -> None:
    """Write all files or none: what is new is taken back where a later one cannot be written."""
    written: list[Path] = []
    if not replace:
        for path in files:
            refuse_existing(path)
    try:
        for path, data in files.items():
            is_new = not path.exists()
            write_whole(path, data, replace=replace)
            written += [path] if is_new else []
    except Complaint:
        for path in written:
            path.unlink(missing_ok=True)
        raise
