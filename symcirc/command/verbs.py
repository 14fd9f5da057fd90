"""What each verb does: read, compute, write."""

from __future__ import annotations

import sys
from argparse import Namespace
from collections.abc import Callable, Iterable
from pathlib import Path
from typing import TYPE_CHECKING, Any

from symcirc.command.progress import ProgressLine
from symcirc.complaints import Complaint, Place, Remark, Source, nearest
from symcirc.sheet import Sheet, decode, read_sheet

if TYPE_CHECKING:
    from symcirc.derivation import Derivation, Posed

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

    sheet = read_sheet(read_file(words.sheet))
    found = design(sheet, words.ask, progress)
    status = 0 if found.solutions else 1
    if words.json:
        from symcirc.report.match_json import match_json

        _print_json(match_json(found), progress)
        return status
    from symcirc.report.match_text import match_latex, match_text

    _print_text(match_latex(found) if words.latex else match_text(found), found.remarks, progress)
    return status


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
    "check": check,
}
