"""Curves as columns of numbers, for CSV and JSON."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator, Sequence
from itertools import zip_longest
from math import isfinite
from typing import Any

from symcirc.plots.curves import Curves, Trace

#: What of the pictures is a curve over frequency: the pass band is the magnitude seen from near.
_OVER_FREQUENCY = ("magnitude", "passband", "phase", "delay")


def columns_of(curves: Curves, what: Sequence[str]) -> dict[str, list[float]]:
    """Return the curves as columns by name: frequencies and what is over them, times and steps, poles and zeros.

    A name begins with the trace's (target, stage or real) and ends with the unit: dB, or for a ratio with a unit dB
    relative to 1 ohm or 1 S, deg, s, rad/s. The groups have lengths of their own.
    """
    return {name: [float(x) for x in column] for name, column in _columns(curves, what)}


def curves_csv(curves: Curves, what: Sequence[str]) -> str:
    """Return the columns as CSV, shorter ones filled up with nothing."""
    columns = columns_of(curves, what)
    table = io.StringIO()
    writer = csv.writer(table, lineterminator="\n")
    writer.writerow(columns)
    writer.writerows(zip_longest(*columns.values(), fillvalue=""))
    return table.getvalue()


def curves_json(curves: Curves, what: Sequence[str]) -> dict[str, Any]:
    """Return the columns as a JSON object with the limits; what is infinite or not a number is null."""
    return {
        "stage": curves.title,
        "ask": curves.ask,
        "nominal_db": curves.reference_db,
        "columns": {
            name: [x if isfinite(x) else None for x in column]
            for name, column in columns_of(curves, what).items()
        },
        "limits": [
            {
                "excluded": "below" if area.passes else "above",
                "gain_db": area.level_db,
                "from_hz": area.low,
                "to_hz": area.high if isfinite(area.high) else None,
            }
            for area in curves.forbidden
        ],
        "warnings": [remark.as_json() for remark in curves.remarks],
    }


def _columns(curves: Curves, what: Sequence[str]) -> Iterator[tuple[str, Any]]:
    traces = curves.traces
    if set(_OVER_FREQUENCY) & set(what):
        yield "frequency_hz", curves.frequencies
    if {"magnitude", "passband"} & set(what):
        unit = f"db_{curves.unit}" if curves.unit else "db"
        yield from ((f"{trace.name}_gain_{unit.lower()}", trace.gain_db) for trace in traces)
    if "phase" in what:
        yield from ((f"{trace.name}_phase_deg", trace.phase_deg) for trace in traces)
    if "delay" in what:
        yield from ((f"{trace.name}_delay_s", trace.delay_s) for trace in traces)
    if "step" in what:
        yield "time_s", curves.times
        yield from ((f"{trace.name}_step", trace.step) for trace in traces if trace.step is not None)
    if "poles" in what:
        for trace in traces:
            yield from _roots(trace)


def _roots(trace: Trace) -> Iterator[tuple[str, Any]]:
    for word, roots in (("pole", trace.poles), ("zero", trace.zeros)):
        yield f"{trace.name}_{word}_real_rad_per_s", roots.real
        yield f"{trace.name}_{word}_imaginary_rad_per_s", roots.imag
