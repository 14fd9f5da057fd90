"""A list of what is in the drawer: a CSV file with a value and a count in each row."""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Iterator
from dataclasses import dataclass, replace
from fractions import Fraction
from pathlib import Path

from symcirc.complaints import Complaint, Place, Source, choices, nearest
from symcirc.sheet import Sheet, decode
from symcirc.sheet.bounds import LARGEST_FILE
from symcirc.sheet.model import Buyable
from symcirc.sheet.quantity import read_code, read_number, read_unit

#: The columns that are read; others are the user's own.
_COLUMNS = ("value", "count")
#: What a unit or a code's letter says about the kind of a part.
_KINDS = {"ohm": "R", "F": "C", "H": "L"}
_LETTER_KINDS = {"R": "R", "F": "C"}
#: No row of a list is as long.
_LONGEST_VALUE = 40
#: A list of more bytes is refused: as many as a sheet of the widest characters has.
_LARGEST = 4 * LARGEST_FILE
_CODE = re.compile(r"[0-9]+(?:[RFkKMGTmunp\u00B5\u03BC][0-9]*|\.[0-9]+[RFkKMGTmunp\u00B5\u03BC])")
_MEASURE = re.compile(r"([0-9]+(?:\.[0-9]+)?(?:[eE][+-]?[0-9]{1,3})?)[ \t]*(\S*)")


@dataclass(frozen=True)
class Stocked:
    """A value of which there are so many pieces: ``kind`` is R, C or L, ``value`` in ohm, farad or henry."""

    kind: str
    value: Fraction
    count: int


def read_stock(source: Source) -> tuple[Stocked, ...]:
    """Return what a list holds, equal values of a kind added up, rows of count 0 left out.

    The first row names the columns: ``value`` (``4k7``, ``22 nF``, ``4.7 kohm``), ``count``, and ``kind`` (R, C or
    L) where the values do not say it; others are passed over.

    Raises Complaint, with the place in the list, for a missing column, a value or a count that is none, and a value
    whose kind is not said.

    >>> read_stock(Source("drawer.csv", "value,count\\n4.7 kohm,12\\n22 nF,3\\n"))
    (Stocked(kind='R', value=Fraction(4700, 1), count=12), Stocked(kind='C', value=Fraction(11, 500000000), count=3))
    """
    found: dict[tuple[str, Fraction], int] = {}
    for row in _rows(source):
        part = _part(row)
        found[part] = found.get(part, 0) + _count(row)
    return tuple(Stocked(kind, value, count) for (kind, value), count in found.items() if count)


@dataclass(frozen=True)
class _Row:
    """A row's fields by their columns, and its place."""

    fields: dict[str, str]
    place: Place

    def field_place(self, text: str) -> Place:
        """Return where a field's text stands in its row."""
        column = self.place.source.line(self.place.line).find(text) + 1
        return replace(self.place, column=max(1, column), end=max(1, column) + max(1, len(text)))


def _rows(source: Source) -> Iterator[_Row]:
    header: list[str] | None = None
    for fields, place in _fields(source):
        if header is None:
            header = [field.strip().lower() for field in fields]
            _check_header(header, place)
            continue
        if len(fields) < len(header):
            raise Complaint(place, "this row has fewer fields than the first", f"give it {', '.join(header)}")
        yield _Row({name: field.strip() for name, field in zip(header, fields, strict=False)}, place)
    if header is None:
        raise Complaint(Place(1, 1, 2, source), "this list is empty", "begin it with the row: value,count")


def _fields(source: Source) -> Iterator[tuple[list[str], Place]]:
    """Yield the fields of each row that is not blank, and its place."""
    reader = csv.reader(io.StringIO(source.text))
    while True:
        line = reader.line_num + 1
        try:
            fields = next(reader, None)
        except csv.Error as error:
            raise Complaint(
                Place(line, 1, 2, source), f"this row cannot be read: {error}", "write plain rows of fields"
            ) from None
        if fields is None:
            return
        if any(field.strip() for field in fields):
            yield fields, Place(line, 1, 1 + max(1, len(source.line(line))), source)


def _check_header(header: list[str], place: Place) -> None:
    for column in _COLUMNS:
        if column not in header:
            raise Complaint(
                place, f"the list has no column `{column}`", "name the columns in the first row: value,count"
            )


def _count(row: _Row) -> int:
    text = row.fields["count"]
    if not text.isascii() or not text.isdigit() or len(text) > 9:
        raise Complaint(row.field_place(text), f"`{text}` is not a count", "write a whole number from 0")
    return int(text)


def _part(row: _Row) -> tuple[str, Fraction]:
    """Return a row's kind, and its value in SI base units."""
    text, named = row.fields["value"], row.fields.get("kind", "")
    place = row.field_place(text)
    value, said = _value(text, place)
    if named and named not in _KINDS.values():
        raise Complaint(row.field_place(named), f"`{named}` is not a kind of part", choices(_KINDS.values()))
    if said and named and said != named:
        raise Complaint(place, f"`{text}` does not fit the kind {named}", "correct the one or the other")
    if not said and not named:
        raise Complaint(
            place,
            f"`{text}` does not say whether it is R, C or L",
            "write its unit, as in 4.7 kohm, or add a column kind",
        )
    return said or named, value


def _value(text: str, place: Place) -> tuple[Fraction, str | None]:
    """Return a value in SI base units, and the kind of part that its unit or its code's letter says."""
    mend = "write a value such as 4.7 kohm, 4k7 or 22 nF"
    measure = _MEASURE.fullmatch(text)
    if len(text) > _LONGEST_VALUE or not (measure or _CODE.fullmatch(text)):
        raise Complaint(place, f"`{text}` is not a value", mend)
    if _CODE.fullmatch(text):
        value, letter = read_code(text, place)
        kind = _LETTER_KINDS.get(letter)
    else:
        assert measure is not None
        number, word = measure.groups()
        factor, unit = read_unit(word, number, place) if word else (Fraction(1), "")
        value = read_number(number, place) * factor
        kind = _KINDS.get(unit)
        if unit and kind is None:
            raise Complaint(place, f"a part has no value in {unit}", mend)
    if value == 0:
        raise Complaint(place, "a part's value is greater than zero", mend)
    return value, kind


def stock_of(sheet: Sheet, buyable: Buyable) -> tuple[Stocked, ...]:
    """Return what the list of a `parts` line holds of its kind; its path counts from the sheet's folder.

    Raises Complaint where the list cannot be read or has nothing of this kind.
    """
    place = buyable.stock_place
    assert buyable.stock is not None
    assert place is not None
    path = Path(sheet.source.file).parent / buyable.stock
    try:
        with path.open("rb") as file:
            data = file.read(_LARGEST + 1)
    except OSError as error:
        reason = (error.strerror or "it cannot be read").lower()
        mend = (
            nearest(buyable.stock, _lists_beside(path))
            or "give the path of a CSV file, from the sheet's folder"
        )
        raise Complaint(place, f"the list {buyable.stock} cannot be read: {reason}", mend) from None
    stock = tuple(item for item in read_stock(decode(data, str(path))) if item.kind == buyable.kind)
    if not stock:
        raise Complaint(
            place,
            f"the list {buyable.stock} has no parts of kind {buyable.kind}",
            "write their values with units, or add a column kind",
        )
    return stock


def _lists_beside(path: Path) -> list[str]:
    return [p.name for p in path.parent.glob("*.csv")] if path.parent.is_dir() else []
