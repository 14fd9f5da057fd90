"""The marks in a symbol read back: which terminal its plus, its minus, its arrow, its dot or its letter says it is.

Like :mod:`symcirc.drawing.reading` it looks at the written lines only.
"""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.drawing.reading import Point, Sign

#: The letters beside the terminals of a conveyor.
LETTERS = {"x", "y", "z"}


def misread_marks(sign: Sign) -> Iterator[str]:
    """Yield what the marks of a symbol say against its terminals."""
    for says, role in _claims(sign):
        if says != role:
            yield f"the mark of {sign.name} that belongs to {role} is nearest to {says}"


def _claims(sign: Sign) -> Iterator[tuple[str, str]]:
    """Yield for every mark the terminal that it is nearest to, and the terminal that it must be nearest to."""
    match sign.kind:
        case "opamp":
            yield from _plus_and_minus(sign, "plus", "minus")
        case "vcvs" | "vccs" | "cccs" | "ccvs":
            yield from _source(sign)
        case "transformer":
            for dot, side in zip(_tips(sign), ("primary", "secondary"), strict=True):
                yield _nearest(sign, dot, [f"{side} p", f"{side} m"]), f"{side} p"
        case "conveyor":
            for at, letter in sign.letters:
                if letter in LETTERS:
                    yield _nearest(sign, at, list(sign.leads)), letter
        case "voltage":
            yield _nearest(sign, _pluses(sign)[0], list(sign.leads)), "plus"
        case "current":
            yield _nearest(sign, _tips(sign)[0], list(sign.leads)), "plus"


def _source(sign: Sign) -> Iterator[tuple[str, str]]:
    """Yield what the marks of a controlled source claim: what it senses first, then what it drives."""
    senses, drives = (["senses p", "senses m"], ["drives p", "drives m"])
    if sign.kind[0] == "v":
        yield from _plus_and_minus(sign, "senses p", "senses m")
    else:
        yield _nearest(sign, _tips(sign)[0], senses), "senses m"
    if sign.kind.endswith("vs"):
        yield _nearest(sign, _pluses(sign)[-1], drives), "drives p"
    else:
        yield _nearest(sign, _tips(sign)[-1], drives), "drives m"


def _plus_and_minus(sign: Sign, plus: str, minus: str) -> Iterator[tuple[str, str]]:
    roles = [plus, minus]
    pluses = _pluses(sign)
    minuses = [at for at in _strokes(sign, level=True) if at not in pluses]
    yield _nearest(sign, pluses[0], roles), plus
    yield _nearest(sign, min(minuses, key=lambda at: _distance(at, sign, roles)), roles), minus


def _pluses(sign: Sign) -> list[Point]:
    """Return where a level and an upright stroke of one length cross in their middles."""
    upright = _strokes(sign, level=False)
    return [at for at in _strokes(sign, level=True) if at in upright]


def _strokes(sign: Sign, level: bool) -> list[Point]:
    """Return the middles of the short straight lines of a symbol."""
    found = []
    for line, _ in sign.lines:
        if len(line) == 2:
            (a, b), (c, d) = line
            short = abs(a - c) + abs(b - d) < 9
            if short and (b == d if level else a == c):
                found.append((round((a + c) / 2, 1), round((b + d) / 2, 1)))
    return found


def _tips(sign: Sign) -> list[Point]:
    """Return the middles of filled shapes: the heads of arrows, the dots of a transformer."""
    middles = []
    for line, filled in sign.lines:
        if filled:
            middles.append((sum(x for x, _ in line) / len(line), sum(y for _, y in line) / len(line)))
    return middles


def _nearest(sign: Sign, at: Point, roles: list[str]) -> str:
    return min(roles, key=lambda role: _distance(at, sign, [role]))


def _distance(at: Point, sign: Sign, roles: list[str]) -> float:
    ends = [sign.leads[role][1] for role in roles]
    return min((x - at[0]) ** 2 + (y - at[1]) ** 2 for x, y in ends)
