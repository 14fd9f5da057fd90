"""Ranked sets of preferred values as one JSON object, and as rows of a table."""

from __future__ import annotations

import csv
import io
from math import isinf
from typing import Any

from symcirc.values.choices import Choice
from symcirc.values.find import ChosenSet, Found

_TURN = 6.283185307179586


def values_json(found: Found) -> dict[str, Any]:
    """Return what was searched and the sets, best first; values in ohm, farad and henry, shifts as ratios.

    An infinite end of the band is null.
    """
    return {
        "stage": found.plan.sheet.title,
        "ask": found.plan.design.ask.name,
        "complete": found.complete,
        "searched": found.searched,
        "size": found.size,
        "window": found.reach,
        "exact_sets": found.centres,
        "combinations": found.combinations,
        "band": [[low / _TURN, None if isinf(high) else high / _TURN] for low, high in found.band.intervals],
        "left_out": found.left_out,
        "poles": [{"f0": pole.f0, "q": pole.q} for pole in found.poles],
        "sets": [_set(chosen) for chosen in found.sets],
        "warnings": [remark.as_json() for remark in found.plan.design.remarks],
    }


def _set(chosen: ChosenSet) -> dict[str, Any]:
    return {
        "departure": chosen.departure,
        "preferred": {name: _choice(choice) for name, choice in chosen.preferred.items()},
        "exact": dict(chosen.exact),
        "held": dict(chosen.held),
        "values": dict(chosen.values),
        "poles": [
            {"f0": s.pair.f0, "q": s.pair.q, "f0_shift": s.f0_shift, "q_shift": s.q_shift}
            for s in chosen.shifts
        ],
        "spread": dict(chosen.spread),
        "capacitance": chosen.capacitance,
    }


def _choice(choice: Choice) -> dict[str, Any]:
    return {
        "value": float(choice.value),
        "pieces": [float(piece) for piece in choice.pieces],
        "joined": choice.joined or None,
    }


def values_csv(found: Found) -> str:
    """Return the sets as CSV, one a row: plain numbers in SI base units, shifts as ratios, pieces joined by a sign.

    A column tells whether the search went through.
    """
    table = io.StringIO()
    writer = csv.writer(table, lineterminator="\n")
    names = list(found.sets[0].preferred) if found.sets else []
    numbers = range(1, len(found.poles) + 1)
    poles = [f"{word}_{k}" for k in numbers for word in ("f0_hz", "f0_shift", "q", "q_shift")]
    spreads = list(found.sets[0].spread) if found.sets else []
    pieces, spread_heads = [f"{name}_pieces" for name in names], [f"spread_{kind}" for kind in spreads]
    heads = ["rank", "departure_db", *names, *pieces, *poles, *spread_heads]
    writer.writerow([*heads, "capacitance_farad", "search_complete"])
    for rank, chosen in enumerate(found.sets, 1):
        choices = chosen.preferred.values()
        cells = [(s.pair.f0, s.f0_shift, s.pair.q, s.q_shift) for s in chosen.shifts]
        writer.writerow(
            [rank, chosen.departure, *(float(c.value) for c in choices), *(_pieces(c) for c in choices)]
            + ["" if cell is None else cell for shift in cells for cell in shift]
            + [
                *(chosen.spread[kind] for kind in spreads),
                chosen.capacitance,
                "yes" if found.complete else "no",
            ]
        )
    return table.getvalue()


def _pieces(choice: Choice) -> str:
    sign = {"series": " + ", "parallel": " || "}.get(choice.joined, "")
    return sign.join(f"{float(piece):g}" for piece in choice.pieces)
