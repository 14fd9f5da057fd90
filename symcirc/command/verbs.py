"""What each verb does: read, compute, write."""

from __future__ import annotations

import sys
from argparse import Namespace
from collections.abc import Callable, Iterable
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

from symcirc.command.main import STOPPED
from symcirc.command.progress import ProgressLine
from symcirc.complaints import Complaint, Place, Remark, Source, nearest
from symcirc.sheet import Sheet, decode, read_sheet

if TYPE_CHECKING:
    from symcirc.derivation import Derivation, Posed
    from symcirc.design import Design
    from symcirc.values.find import Found

#: Up to so many products an answer is written out for people, unless they say otherwise.
MOST_FOR_PEOPLE = 400


def read_file(path: str, what: str = "stage sheet", suffix: str = ".stage") -> Source:
    """Return the text of a file, or of standard input for ``-``; raises Complaint where it cannot be read."""
    if path == "-":
        return decode(sys.stdin.buffer.read(), "standard input")
    try:
        data = Path(path).read_bytes()
    except OSError as error:
        nowhere = Place(1, 1, 2, Source(path, ""))
        folder = Path(path).parent
        sheets = [str(p) for p in folder.glob(f"*{suffix}")] if folder.is_dir() else []
        reason = (error.strerror or "it cannot be read").lower()
        mend = nearest(path, sheets) or f"give the path of a {what}, or - for standard input"
        raise Complaint(nowhere, f"the file cannot be read: {reason}", mend) from None
    return decode(data, path)


def derive(words: Namespace, progress: ProgressLine) -> int:
    """Print the transfer functions of a sheet."""
    from symcirc.derivation import pose, pose_real

    sheet = read_sheet(read_file(words.sheet))
    wanted = _wanted(sheet, words.ask)
    if words.shift:
        _shift(words, sheet, wanted, progress)
        return 0
    posed = (pose_real if words.real else pose)(sheet)
    if words.terms or words.largest:
        _unexpanded(words, posed, wanted, progress)
    else:
        _expanded(words, posed, wanted, progress)
    return 0


def _shift(words: Namespace, sheet: Sheet, wanted: set[str] | None, progress: ProgressLine) -> None:
    from symcirc.derivation import MOST_PRODUCTS, pose, pose_real
    from symcirc.derivation import derive as derive_posed
    from symcirc.report.shift import shift_json, shift_text

    most = words.most or MOST_PRODUCTS
    ideal, real = (derive_posed(posed, wanted, most, progress) for posed in (pose(sheet), pose_real(sheet)))
    if words.json:
        _print_json(shift_json(ideal, real), progress)
    else:
        _print_text(shift_text(ideal, real), ideal.remarks, progress)


def _unexpanded(words: Namespace, posed: Posed, wanted: set[str] | None, progress: ProgressLine) -> None:
    from symcirc.report import products

    if words.terms and words.json:
        _print_json(products.terms_json(posed, wanted), progress)
    elif words.json:
        _print_json(products.largest_json(posed, wanted, words.largest), progress)
    elif words.terms:
        _print_text(products.terms_text(posed, wanted), posed.sheet.remarks, progress)
    else:
        _print_text(products.largest_text(posed, wanted, words.largest), posed.sheet.remarks, progress)


def _expanded(words: Namespace, posed: Posed, wanted: set[str] | None, progress: ProgressLine) -> None:
    from symcirc.derivation import MOST_PRODUCTS
    from symcirc.derivation import derive as derive_posed

    for_people = words.steps or not (words.json or words.values)
    most = words.most or (MOST_FOR_PEOPLE if for_people else MOST_PRODUCTS)
    derivation = derive_posed(posed, wanted, most, progress)
    if words.steps:
        _steps(words, posed, derivation, progress)
        return
    if words.json:
        from symcirc.report.derive_json import derive_json, equations_json, values_json

        write = values_json if words.values else equations_json if words.equations else derive_json
        _print_json(write(derivation), progress)
        return
    from symcirc.report import derive_text as written

    if words.equations:
        lines = written.equations_latex(derivation) if words.latex else written.equations_text(derivation)
    elif words.values:
        lines = written.values_text(derivation)
    else:
        lines = written.derive_latex(derivation) if words.latex else written.derive_text(derivation)
    _print_text(lines, derivation.remarks, progress)


def _steps(words: Namespace, posed: Posed, derivation: Derivation, progress: ProgressLine) -> None:
    from symcirc.report import steps

    if words.json:
        _print_json(steps.derivation_steps_json(posed, derivation), progress)
        return
    write = steps.derivation_steps_latex if words.latex else steps.derivation_steps_text
    _print_text(write(posed, derivation), derivation.remarks, progress)


def match(words: Namespace, progress: ProgressLine) -> int:
    """Print the design equations of a sheet's target; status 1 where it cannot be met."""
    from symcirc.design import design

    path = _workbook_path(words)
    sheet = read_sheet(read_file(words.sheet))
    found = design(sheet, words.ask, progress)
    status = 0 if found.solutions else 1
    if path is not None:
        _write_workbook(path, found, words, progress)
    if words.json:
        from symcirc.report.match_json import match_json

        _print_json(match_json(found), progress)
        return status
    from symcirc.report.match_text import match_latex, match_text

    _print_text(match_latex(found) if words.latex else match_text(found), found.remarks, progress)
    return status


def _workbook_path(words: Namespace) -> Path | None:
    """Return where a match's workbook goes; raises Complaint for a name of another kind and a file that is there."""
    from symcirc.command.files import refuse_existing, refuse_file

    if not words.workbook:
        return None
    path = Path(words.workbook)
    if path.suffix.lower() != ".xlsx":
        raise refuse_file(path, "is of no kind that a workbook is written in", "let its name end in .xlsx")
    if not words.replace:
        refuse_existing(path)
    return path


def _write_workbook(path: Path, found: Design, words: Namespace, progress: ProgressLine) -> None:
    """Write a match's workbook, where there is a solution."""
    from symcirc.command.files import write_whole
    from symcirc.workbook.build import MOST_SOLUTIONS, worksheets
    from symcirc.workbook.write import workbook_bytes

    if not found.solutions:
        progress.clear()
        print(f"there is no solution, so {path} was not written", file=sys.stderr)
        return
    write_whole(path, workbook_bytes(worksheets(found, progress)), replace=words.replace)
    if len(found.solutions) > MOST_SOLUTIONS:
        progress.clear()
        of = f"{MOST_SOLUTIONS} of {len(found.solutions)}"
        print(f"{path} holds the first {of} solutions", file=sys.stderr)


def order(words: Namespace, progress: ProgressLine) -> int:
    """Print the least order of every family that meets a sheet's limits."""
    from symcirc.masks.mask import read_mask
    from symcirc.masks.order import pick_ask, select

    sheet = read_sheet(read_file(words.sheet))
    progress("comparing the families")
    selection = select(read_mask(sheet, pick_ask(sheet, words.ask)))
    if words.json:
        from symcirc.report.order_json import order_json

        _print_json(order_json(sheet.title, selection, sheet.remarks), progress)
        return 0
    from symcirc.report.order_text import order_text

    _print_text(order_text(sheet.title, selection), sheet.remarks, progress)
    return 0


def values(words: Namespace, progress: ProgressLine) -> int:
    """Print ranked sets of preferred values, and write the sheet with one of them; status 130 after Ctrl-C."""
    from symcirc.command.files import refuse_existing
    from symcirc.report.values_json import values_csv, values_json
    from symcirc.report.values_text import values_text
    from symcirc.values.find import Options, find_values

    sheet = read_sheet(read_file(words.sheet))
    if words.write and not words.replace:
        refuse_existing(Path(words.write))
    options = Options(max(words.best, words.take), words.window, words.together)
    found = find_values(sheet, words.ask, options, progress)
    if words.write and found.complete and found.sets:
        _write_values(words, found)
    shown = replace(found, sets=found.sets[: words.best])
    if words.json:
        _print_json(values_json(shown), progress)
    elif words.csv:
        _print_text(values_csv(shown).splitlines(), found.plan.design.remarks, progress)
    else:
        _print_text(values_text(shown), found.plan.design.remarks, progress)
    if not found.complete:
        unwritten = f", {words.write} was not written" if words.write else ""
        print(f"stopped; the sets are the best so far{unwritten}", file=sys.stderr)
        return STOPPED
    return 0 if found.sets else 1


def _write_values(words: Namespace, found: Found) -> None:
    from symcirc.command.files import write_whole
    from symcirc.values.writing import sheet_with

    if words.take > len(found.sets):
        place, count = found.plan.design.goal.target.place, len(found.sets)
        raise Complaint(place, f"set {words.take} is asked for, and there are {count}", "take a lower number")
    text = sheet_with(found.plan.sheet, found.sets[words.take - 1])
    write_whole(Path(words.write), text.encode(), replace=words.replace)


def check(words: Namespace, progress: ProgressLine) -> int:
    """Judge a working against a sheet; status 1 where a line fails, is carried or unread."""
    from symcirc.derivation import pose, pose_real
    from symcirc.slips import check_and_mend

    posed = (pose_real if words.real else pose)(read_sheet(read_file(words.sheet)))
    progress("checking")
    checked = check_and_mend(posed, read_file(words.working, "working", ".work"))
    if words.json:
        _print_json(checked.as_json(), progress)
        return checked.exit_status
    from symcirc.report.check_latex import check_latex
    from symcirc.report.check_text import check_text

    lines = check_latex(checked) if words.latex else check_text(checked)
    _print_text(lines, posed.sheet.remarks, progress)
    return checked.exit_status


def draw(words: Namespace, progress: ProgressLine) -> int:
    """Write a drawing of a sheet's circuit."""
    from symcirc.command.files import refuse_existing, refuse_file, write_whole
    from symcirc.drawing import draw as draw_sheet
    from symcirc.drawing.picture import picture

    path = Path(words.output)
    kind = path.suffix[1:].lower()
    if kind not in ("svg", "png", "pdf"):
        raise refuse_file(path, "is of no kind that can be drawn", "let its name end in .svg, .png or .pdf")
    if not words.replace:
        refuse_existing(path)
    sheet = read_sheet(read_file(words.sheet))
    progress("drawing")
    drawn = draw_sheet(sheet, words.symbols)
    data = drawn.svg.encode() if kind == "svg" else picture(drawn.drawing, kind)
    write_whole(path, data, replace=words.replace)
    progress.clear()
    for remark in sheet.remarks:
        print(remark, file=sys.stderr)
    return 0


def plot(words: Namespace, progress: ProgressLine) -> int:
    """Write a picture of a response, or its curves as numbers; status 1 where the target cannot be met."""
    from symcirc.command.files import refuse_existing, write_whole
    from symcirc.plots.curves import curves_of
    from symcirc.plots.picture import picture
    from symcirc.plots.table import curves_csv, curves_json

    path = _plot_path(words)
    if path and not words.replace:
        refuse_existing(path)
    asked = _plot_what(words)
    sheet = read_sheet(read_file(words.sheet))
    curves = curves_of(sheet, words.ask, progress)
    what = curves.shown(asked)
    status = 0 if curves.is_met else 1
    if words.json:
        _print_json(curves_json(curves, what), progress)
        return status
    if path is None:
        _print_text(curves_csv(curves, what).splitlines(), curves.remarks, progress)
        return status
    progress("plotting")
    data = curves_csv(curves, what).encode() if words.csv else picture(curves, what, path.suffix[1:].lower())
    write_whole(path, data, replace=words.replace)
    progress.clear()
    for remark in curves.remarks:
        print(remark, file=sys.stderr)
    return status


def _plot_path(words: Namespace) -> Path | None:
    """Return where to write, None for standard output; raises Complaint for a name of another kind."""
    from symcirc.command.files import refuse_file

    if words.output is None:
        return None
    path = Path(words.output)
    kinds = (".csv",) if words.csv else (".svg", ".png", ".pdf")
    if path.suffix.lower() not in kinds:
        mend = (
            "let its name end in .csv"
            if words.csv
            else "let its name end in .svg, .png or .pdf, or add --csv"
        )
        raise refuse_file(path, "is of no kind that can be plotted", mend)
    return path


def _plot_what(words: Namespace) -> tuple[str, ...]:
    """Return what is to be shown, empty where nothing was said; raises Complaint for a word of no meaning."""
    from symcirc.plots.curves import WHAT

    asked = [word.strip() for given in words.what or () for word in given.split(",")]
    for word in asked:
        if word not in WHAT:
            mend = nearest(word, WHAT) or f"use {', '.join(WHAT)}"
            raise Complaint(Place(1, 1, 2, Source("--what", word)), f"`{word}` cannot be plotted", mend)
    return tuple(asked)


def note(words: Namespace, progress: ProgressLine) -> int:
    """Write the design note of a sheet."""
    from symcirc.command.note import write_note

    return write_note(words, read_sheet(read_file(words.sheet)), progress)


def _wanted(sheet: Sheet, ask: str | None) -> set[str] | None:
    if ask is None:
        return None
    known = [a.name for a in sheet.asks]
    if ask not in known:
        raise Complaint(
            sheet.asks[0].place,
            f"nothing called `{ask}` is asked",
            nearest(ask, known) or f"the asks are: {', '.join(known)}",
        )
    return {ask}


def _print_json(answer: dict[str, Any], progress: ProgressLine) -> None:
    import json

    text = json.dumps(answer, ensure_ascii=False, indent=2)
    progress.clear()
    print(text)


def _print_text(lines: Iterable[str], remarks: Iterable[Remark], progress: ProgressLine) -> None:
    """Print the whole answer at once, when nothing can go wrong any more, and the remarks on standard error."""
    text = "\n".join(lines)
    progress.clear()
    print(text, flush=True)
    for remark in remarks:
        print(remark, file=sys.stderr)


VERBS: dict[str, Callable[[Namespace, ProgressLine], int]] = {
    "derive": derive,
    "match": match,
    "order": order,
    "check": check,
    "values": values,
    "draw": draw,
    "plot": plot,
    "note": note,
}
