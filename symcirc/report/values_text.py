"""Ranked sets of preferred values, for people."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.complaints import listed
from symcirc.report.lines import counted
from symcirc.report.match_text import target_text
from symcirc.report.quantities import ask_text
from symcirc.transfer.engineering import engineering
from symcirc.transfer.ties import natural_key
from symcirc.values.choices import Choice
from symcirc.values.find import ChosenSet, Found
from symcirc.values.poles import PolePair
from symcirc.values.writing import UNITS, quantity_written

#: The signs for how two pieces are joined.
_JOINED = {"series": " + ", "parallel": " || "}


def values_text(found: Found) -> Iterator[str]:
    """Yield the lines of a search: target, what was searched, the sets in their order, the best one in full."""
    yield found.plan.sheet.title
    yield ""
    yield ask_text(found.plan.design.ask)
    yield f"target {target_text(found.plan.design)}"
    yield from (f"  {bought}" for bought in _bought(found))
    yield from _searched(found)
    if not found.sets:
        yield ""
        yield "no set was found: there are too few pieces in stock"
        return
    yield ""
    yield from _table(found)
    yield ""
    yield from _best(found, found.sets[0])


def _bought(found: Found) -> Iterator[str]:
    sheet = found.plan.sheet
    for buyable in sheet.buyables:
        place = buyable.place
        yield place.source.line(place.line).split("#")[0].strip()
    held = [f"{name} = {engineering(value, '', 7)}" for name, value in _held(found).items()]
    if held:
        yield f"set to its exact value, as it is not bought: {', '.join(held)}"


def _held(found: Found) -> dict[str, float]:
    return dict(found.sets[0].held) if found.sets else {}


def _searched(found: Found) -> Iterator[str]:
    if not found.complete:
        yield f"STOPPED: the best of {found.searched:,} sets, of {found.size:,}; a better one may be among the rest"
    else:
        yield f"searched: every one of {counted(found.size, 'set')}"
    moved = sorted((*found.plan.following, *found.plan.moved), key=natural_key)
    if found.plan.chosen:
        real = f", {found.centres:,} exact sets real and positive"
        yield f"  {listed(found.plan.chosen)}: every value of the range ({found.combinations:,} in all{real})"
    if moved:
        reach = counted(found.reach, "value")
        yield f"  {listed(moved)}: within {reach} of the exact one, to both sides (--window N for others)"
    bands = " and ".join(f"{_hertz(low)} to {_hertz(high)}" for low, high in found.band.intervals)
    yield f"band: {bands}, where the target's loss is at most 3.01 dB"
    yield f"departure: the worst at {len(found.band.points):,} frequencies of the band"
    yield from _certainty(found)


def _certainty(found: Found) -> Iterator[str]:
    """Say what the sets that the search left out depart by, at least: the proof that none of them ranks higher."""
    if found.left_out is None or not found.sets:
        return
    certain = sum(chosen.departure <= found.left_out for chosen in found.sets)
    least = f"every other set that was searched departs by at least {found.left_out:.3g} dB"
    if certain == len(found.sets):
        yield f"  {least}, so none of them ranks among these"
    else:
        yield f"  {least}, so the ranking is certain for {counted(certain, 'place')} only"


def _hertz(w: float) -> str:
    return "infinity" if w == float("inf") else engineering(w / 6.283185307179586, "Hz", 4)


def choice_text(choice: Choice, kind: str) -> str:
    """Return what is to be bought for a part."""
    return _JOINED.get(choice.joined, "").join(
        quantity_written(piece, UNITS[kind]) for piece in choice.pieces
    )


def _table(found: Found) -> Iterator[str]:
    names = list(found.sets[0].preferred)
    spreads = list(found.sets[0].spread)
    heads = ["", "departure", *names, *_pole_heads(found.poles), *(f"spread {kind}" for kind in spreads)]
    heads += ["total C"] if found.sets[0].capacitance else []
    rows = [heads]
    kinds = {part.name: part.kind for part in found.plan.sheet.parts}
    for rank, chosen in enumerate(found.sets, 1):
        row = [str(rank), f"{chosen.departure:.4f} dB"]
        row += [choice_text(chosen.preferred[name], kinds[name]) for name in names]
        row += pole_cells(chosen)
        row += [f"{chosen.spread[kind]:.3g}" for kind in spreads]
        row += [engineering(chosen.capacitance, "F", 4)] if chosen.capacitance else []
        rows.append(row)
    widths = [max(len(row[k]) for row in rows) for k in range(len(heads))]
    for row in rows:
        yield "  ".join(cell.rjust(width) for cell, width in zip(row, widths, strict=True)).rstrip()


def _pole_heads(poles: tuple[PolePair, ...]) -> list[str]:
    numbers = [str(k) if len(poles) > 1 else "" for k in range(1, len(poles) + 1)]
    return [
        head
        for number, pole in zip(numbers, poles, strict=True)
        for head in ([f"f0{number}", f"Q{number}"] if pole.q is not None else [f"f0{number}"])
    ]


def pole_cells(chosen: ChosenSet) -> list[str]:
    """Return the shifts of f0 and Q of each pole pair in percent."""
    cells = []
    for shift in chosen.shifts:
        cells.append(f"{100 * shift.f0_shift:+.2f} %")
        if shift.q_shift is not None:
            cells.append(f"{100 * shift.q_shift:+.2f} %")
    return cells


def _best(found: Found, best: ChosenSet) -> Iterator[str]:
    yield "the first set"
    kinds = {part.name: part.kind for part in found.plan.sheet.parts}
    rows = []
    for name, choice in best.preferred.items():
        exact = best.exact[name]
        off = (
            f"{100 * (float(choice.value) / exact - 1):+.2f} % from {engineering(exact, UNITS[kinds[name]])}"
        )
        rows.append((name, choice_text(choice, kinds[name]), "chosen" if name in found.plan.chosen else off))
    for name in found.plan.sheet.ties:
        if name in best.values and kinds[name] in UNITS:
            rows.append((name, engineering(best.values[name], UNITS[kinds[name]]), "tied as the sheet says"))
    widths = [max(len(row[k]) for row in rows) for k in range(2)]
    for name, bought, off in rows:
        yield f"  {name:{widths[0]}} = {bought:{widths[1]}}  {off}"
    for pole, shift in zip(found.poles, best.shifts, strict=False):
        q = "" if shift.pair.q is None or pole.q is None else f", Q {shift.pair.q:.4g} for {pole.q:.4g}"
        yield f"  f0 {engineering(shift.pair.f0, 'Hz')} for {engineering(pole.f0, 'Hz')}{q}"
