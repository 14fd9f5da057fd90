"""What is declared by choose, solve and fix: where it contradicts itself, and what nothing uses."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from symcirc.complaints import Complaint, Remark, nearest
from symcirc.sheet.expression import Expression, Name, names
from symcirc.sheet.model import Fix, Sheet

#: The nearest names are looked for so many unused names; a search takes time.
MOST_HINTS = 20


def check_declarations(chosen: Iterable[Name], solved: Iterable[Name], fixes: Mapping[str, Fix]) -> None:
    """Raise Complaint for a name that is declared twice, solved for though fixed, or chosen though tied."""
    seen: dict[str, str] = {}
    for verb, name in sorted(
        [("choose", name) for name in chosen] + [("solve", name) for name in solved],
        key=lambda declared: declared[1].place,
    ):
        if name.text in seen:
            first = seen[name.text]
            raise Complaint(
                name.place,
                f"`{name.text}` stands behind `{first}` already",
                "name it once" if first == verb else "keep one: a name is either chosen or solved for",
            )
        seen[name.text] = verb
        fix = fixes.get(name.text)
        if fix is not None and (verb == "solve" or fix.number is None):
            how = "tied" if fix.number is None else "fixed"
            barred = "chosen" if verb == "choose" else "solved for"
            raise Complaint(
                name.place,
                f"`{name.text}` is {how} on line {fix.place.line}, so it cannot be {barred}",
                "remove one of the two",
            )


def unused_names(sheet: Sheet) -> list[Remark]:
    """Return a remark for every parameter that nothing uses: most often a name that was mistyped."""
    used = {name.text for expression in _expressions(sheet) for name in names(expression)}
    unused = [s for s in sheet.symbols.values() if s.role == "free" and s.name not in used]
    remarks: list[Remark] = []
    for symbol in unused:
        hint = nearest(symbol.name, sheet.symbols) if len(remarks) < MOST_HINTS else ""
        remarks.append(Remark(symbol.place, f"nothing uses `{symbol.name}`" + (f"; {hint}" if hint else "")))
    return remarks


def _expressions(sheet: Sheet) -> Iterable[Expression]:
    yield from sheet.ties.values()
    for target in sheet.targets:
        yield from (value.expression for value in target.words.values())
        if target.expression is not None:
            yield target.expression
    for limit in sheet.limits:
        yield from (value.expression for value in (limit.loss_db, limit.low, limit.high) if value is not None)
