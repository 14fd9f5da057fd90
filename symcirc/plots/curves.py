"""The response of one ask as numbers: what a picture draws and a table lists."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import inf, log10, pi

import numpy as np

from symcirc.complaints import Complaint, Place, Remark
from symcirc.masks.mask import Mask, read_mask
from symcirc.plots.functions import Functions, functions_of
from symcirc.plots.rational import (
    Complexes,
    Floats,
    Rational,
    continuous_phase,
    decibels,
    group_delay,
)
from symcirc.plots.spans import frequencies_for, step_end
from symcirc.plots.step import step_response
from symcirc.progress import Progress, silent
from symcirc.report.quantities import ask_text
from symcirc.sheet.model import Ask, Sheet, Voltage

#: What can be shown, in the order in which it is.
WHAT = ("magnitude", "passband", "phase", "delay", "step", "poles")
#: Points of a step response.
STEPS = 601


@dataclass(frozen=True)
class Trace:
    """One function's curves; ``name`` is target, stage or real.

    ``gain_db``, ``phase_deg`` and ``delay_s`` are over the frequencies, ``step`` is over the times, or None where
    the function grows without bound with frequency. ``poles`` and ``zeros`` are in rad/s.
    """

    name: str
    label: str
    gain_db: Floats
    phase_deg: Floats
    delay_s: Floats
    step: Floats | None
    poles: Complexes
    zeros: Complexes


@dataclass(frozen=True)
class Forbidden:
    """An area that a limit excludes, frequencies in Hz (0 and infinity allowed).

    Where the limit passes, gains below ``level_db`` are excluded, else those above it.
    """

    passes: bool
    level_db: float
    low: float
    high: float
    words: str


@dataclass(frozen=True)
class Curves:
    """The curves of one ask. ``unit`` is that of the ratio: "" (then gains are in dB), "ohm" or "S".

    ``reference_db`` is the nominal gain, to which the limits are relative.
    """

    title: str
    ask: str
    target: str
    unit: str
    frequencies: Floats
    times: Floats
    traces: tuple[Trace, ...]
    forbidden: tuple[Forbidden, ...]
    reference_db: float
    remarks: tuple[Remark, ...]
    is_met: bool
    is_loop: bool
    place: Place

    def shown(self, asked: Sequence[str] = ()) -> tuple[str, ...]:
        """Return what is to be shown, words of ``WHAT``: what is asked, or else what is usual.

        Usual are magnitude, phase (in its place the pass band, where a limit is set to that), delay and, where there
        is one, step; of a loop gain magnitude and phase. Raises Complaint where a step response is asked of a ratio
        that has none.
        """
        has_step = any(trace.step is not None for trace in self.traces)
        if "step" in asked and not has_step:
            raise Complaint(
                self.place,
                "this ratio has no step response: it grows without bound with frequency",
                "leave step out of --what",
            )
        second = "passband" if any(area.passes for area in self.forbidden) else "phase"
        usual = ("magnitude", second, "delay", *(("step",) if has_step else ()))
        if self.is_loop:
            usual = ("magnitude", "phase")
        return tuple(word for word in WHAT if word in (asked or usual))


def curves_of(sheet: Sheet, ask: str | None = None, progress: Progress = silent) -> Curves:
    """Return the curves of a sheet's ask: of its target, of the stage, and of the stage with real amplifiers.

    Args:
        sheet: with numbers for the stage's parts, or a target from which they follow.
        ask: which; None for the only one that has a target, else limits, else that there is.
        progress: is told what goes on.

    Raises Complaint as :func:`symcirc.plots.functions.functions_of` does, and for limits that are none.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> text = "in -- R1 -- out -- C1 -- gnd\\nfix R1 = 1 kohm, C1 = 1 uF\\nask H = V_out/V_in"
    >>> curves = curves_of(read_sheet(Source("a.stage", text)))
    >>> (trace,) = curves.traces
    >>> trace.name, round(float(trace.poles[0].real), 3), round(float(trace.step[-1]), 2)
    ('stage', -1000.0, 1.0)
    """
    found = functions_of(sheet, ask, progress)
    mask = read_mask(sheet, found.ask.name)
    ratios = [shown.ratio for shown in found.shown]
    frequencies = frequencies_for(ratios, _edges(mask), found.ask.loop is not None)
    proper = [ratio for ratio in ratios if ratio.is_proper]
    end = step_end(proper) if proper else 1.0
    phases = _phases(ratios, 2 * pi * frequencies)
    traces = tuple(
        Trace(
            shown.name,
            shown.label,
            decibels(shown.ratio, 2 * pi * frequencies),
            phase,
            group_delay(shown.ratio, 2 * pi * frequencies),
            step_response(shown.ratio, end, STEPS) if shown.ratio.is_proper else None,
            shown.ratio.poles,
            shown.ratio.zeros,
        )
        for shown, phase in zip(found.shown, phases, strict=True)
    )
    reference = _reference(found, mask, frequencies)
    return Curves(
        sheet.title,
        ask_text(found.ask),
        found.target,
        _unit(found.ask),
        frequencies,
        np.linspace(0.0, end, STEPS),
        traces,
        _forbidden(mask, reference),
        reference,
        found.remarks,
        found.is_met,
        found.ask.loop is not None,
        found.ask.place,
    )


def _edges(mask: Mask) -> list[float]:
    """Return the limits' frequencies in Hz."""
    edges = {w / (2 * pi) for band in mask.bands for w in (band.low, band.high)}
    return sorted(edge for edge in edges if 0 < edge < inf)


def _unit(ask: Ask) -> str:
    """Return the unit of a ratio."""
    if ask.over is None or ask.under is None:
        return ""
    return {(True, False): "ohm", (False, True): "S"}.get(
        (isinstance(ask.over, Voltage), isinstance(ask.under, Voltage)), ""
    )


def _phases(ratios: list[Rational], omega: Floats) -> list[Floats]:
    """Return the phases in degrees: the first between -180 and 180 where it passes, the others nearest to it there."""
    gains = decibels(ratios[0], omega)
    where = _passing_index(gains)
    found: list[Floats] = []
    for ratio in ratios:
        phase = continuous_phase(ratio, omega)
        # -179 to 181: an inverting stage begins at 180, whatever rounding does to it
        wanted = float(found[0][where]) if found else 1.0
        found.append(phase - 360 * np.round((phase[where] - wanted) / 360 - 1e-9))
    return found


def _passing_index(gains: Floats) -> int:
    """Return where a function passes: at the low end, else at the high end, else amid its largest gains."""
    largest = float(np.max(gains[np.isfinite(gains)]))
    if gains[0] > largest - 20:
        return 0
    if gains[-1] > largest - 20:
        return len(gains) - 1
    within = np.flatnonzero(gains > largest - 3)
    return int(within[len(within) // 2])


def _reference(found: Functions, mask: Mask, frequencies: Floats) -> float:
    """Return the nominal gain in dB: the target's, else the largest in the pass bands, or of all."""
    if found.nominal is not None:
        return 20 * log10(found.nominal)
    omega = 2 * pi * frequencies
    inside = np.zeros(len(omega), bool)
    for band in mask.passing:
        inside |= (omega >= band.low * (1 - 1e-12)) & (omega <= band.high * (1 + 1e-12))
    gains = decibels(found.shown[0].ratio, omega)
    considered = gains[inside] if inside.any() else gains
    return float(np.max(considered[np.isfinite(considered)]))


def _forbidden(mask: Mask, reference: float) -> tuple[Forbidden, ...]:
    return tuple(
        Forbidden(
            band.passes, reference - band.decibels, band.low / (2 * pi), band.high / (2 * pi), band.words
        )
        for band in mask.bands
    )
