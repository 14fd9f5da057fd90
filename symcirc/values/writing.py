"""The user's sheet with a chosen set put in: comments and layout kept."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal, localcontext
from fractions import Fraction

from symcirc.complaints import Complaint, InternalFault, Place, Source
from symcirc.sheet import Sheet, read_sheet
from symcirc.sheet import statements as st
from symcirc.sheet.expression import Name
from symcirc.sheet.parse import parse_sheet
from symcirc.transfer.engineering import PREFIXES
from symcirc.values.choices import Choice
from symcirc.values.find import ChosenSet

UNITS = {"R": "ohm", "C": "F", "L": "H"}
#: The words for how two pieces are joined, in comments.
_JOINED = {"series": "in series with", "parallel": "in parallel with"}
_HEAD = "# preferred values, worst departure {departure:.3g} dB"


def quantity_written(value: Fraction, unit: str) -> str:
    """Return an exact value as the sheet's language reads it back.

    >>> quantity_written(Fraction(11300), "ohm"), quantity_written(Fraction(22, 10**10), "F")
    ('11.3 kohm', '2.2 nF')
    """
    with localcontext(prec=60):
        number = Decimal(value.numerator) / Decimal(value.denominator)
        power = number.adjusted() // 3 * 3
        if power not in PREFIXES:
            return f"{_scientific(number)} {unit}"
        return f"{number.scaleb(-power).normalize():f} {PREFIXES[power]}{unit}"


def setting_written(name: str, kind: str, choice: Choice) -> tuple[str, str]:
    """Return ``NAME = value`` for a `fix`, exact, and a comment on what it is made of where that is two pieces.

    >>> setting_written("R1", "R", Choice(Fraction(5260), (Fraction(560), Fraction(4700)), "series"))
    ('R1 = 5.26 kohm', '560 ohm in series with 4.7 kohm')
    """
    unit = UNITS[kind]
    pieces = [quantity_written(piece, unit) for piece in choice.pieces]
    if len(pieces) == 1:
        return f"{name} = {pieces[0]}", ""
    comment = f" {_JOINED[choice.joined]} ".join(pieces)
    if choice.value == sum(choice.pieces):
        return f"{name} = {quantity_written(choice.value, unit)}", comment
    inverses = " + ".join(f"1/{_plain(piece)}" for piece in choice.pieces)
    return f"{name} = 1/({inverses})", comment


def _plain(value: Fraction) -> str:
    """Return a value in SI base units, exact."""
    with localcontext(prec=60):
        number = (Decimal(value.numerator) / Decimal(value.denominator)).normalize()
        return f"{number:f}" if -1 <= number.adjusted() < 7 else _scientific(number)


def _scientific(number: Decimal) -> str:
    return f"{number.normalize():e}".replace("e+", "e")


def sheet_with(sheet: Sheet, chosen: ChosenSet) -> str:
    """Return the text of a sheet with a set put in.

    Parts that the sheet sets to a number get their new value in place. All others, and what is held at its exact
    number, are set in a `fix` block at the end; names in it are taken out of `solve` lines. Everything else stays.

    Raises InternalFault where the new text does not say the set.
    """
    settings, comments = _settings(sheet, chosen)
    lines = sheet.source.text.split("\n")
    edits = [*_new_numbers(sheet, settings), *_unsolved(sheet, chosen.held)]
    for edit in sorted(edits, key=lambda edit: edit.place, reverse=True):
        number = edit.place.line - 1
        line = lines[number]
        lines[number] = line[: edit.place.column - 1] + edit.text + line[edit.place.end - 1 :]
    end = "\r\n" if any(line.endswith("\r") for line in lines) else "\n"
    text = "\n".join(lines)
    text += "" if not text or text.endswith("\n") else end
    fixed = [name for name in settings if name not in sheet.numbers]
    block = [_HEAD.format(departure=chosen.departure)]
    block += [f"fix {settings[name]}{f'  # {comments[name]}' if comments[name] else ''}" for name in fixed]
    text += end.join(["", *block, ""])
    _check(sheet, text, chosen)
    return text


def _settings(sheet: Sheet, chosen: ChosenSet) -> tuple[dict[str, str], dict[str, str]]:
    kinds = {part.name: part.kind for part in sheet.parts}
    settings, comments = {}, {}
    for name, choice in chosen.preferred.items():
        settings[name], comments[name] = setting_written(name, kinds[name], choice)
    for name, value in chosen.held.items():
        settings[name], comments[name] = f"{name} = {value!r}", "exact"
    return settings, comments


@dataclass(frozen=True)
class _Edit:
    """What stands in a place instead of what stood there."""

    place: Place
    text: str


def _new_numbers(sheet: Sheet, settings: Mapping[str, str]) -> Iterator[_Edit]:
    """Yield for each part that the sheet sets to a number its whole setting anew."""
    for name, text in settings.items():
        if name not in sheet.numbers:
            continue
        start = sheet.fixes[name].place
        line = start.source.line(start.line)
        behind = line[start.column - 1 :]
        length = min((behind.find(sign) for sign in ",#" if sign in behind), default=len(behind))
        length = len(behind[:length].rstrip())
        yield _Edit(Place(start.line, start.column, start.column + length, start.source), text)


def _unsolved(sheet: Sheet, held: Mapping[str, float]) -> Iterator[_Edit]:
    """Yield for each `solve` line that names what is now fixed the names that are left, or a comment of it."""
    for statement in parse_sheet(sheet.source):
        if not isinstance(statement, st.SolveLine):
            continue
        left = [name.text for name in statement.names if name.text not in held]
        if len(left) == len(statement.names):
            continue
        yield _solve_edit(sheet.source, statement.names, left)


def _solve_edit(source: Source, declared: tuple[Name, ...], left: list[str]) -> _Edit:
    first, last = declared[0].place, declared[-1].place
    if left:
        return _Edit(Place(first.line, first.column, last.end, source), ", ".join(left))
    start = source.line(first.line).index("solve") + 1
    return _Edit(Place(first.line, start, start, source), "# found below: ")


def _check(sheet: Sheet, text: str, chosen: ChosenSet) -> None:
    """The new text must be a sheet with the set's values."""
    try:
        numbers = read_sheet(Source(sheet.source.file, text)).numbers
    except Complaint as complaint:
        raise InternalFault(f"the sheet with the values put in is refused: {complaint}") from None
    for name, choice in chosen.preferred.items():
        if numbers.get(name) != choice.value:
            raise InternalFault(f"the sheet with the values put in has another {name}")
