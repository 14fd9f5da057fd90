"""Curves as a picture: panels with axes as engineers expect them, below a head with the legend."""

from __future__ import annotations

import hashlib
import re
import warnings
from collections.abc import Callable, Sequence
from dataclasses import replace
from html import escape
from io import BytesIO
from math import log10
from typing import Any

import numpy as np

from symcirc.plots import ticks
from symcirc.plots.curves import WHAT, Curves, Forbidden, Trace
from symcirc.plots.head import EXCLUDED, head_of, style_of, write_head
from symcirc.plots.rational import Complexes, Floats

#: Width and height of a panel with what is written around it, and the width of one that stands alone, in inches.
_WIDE, _HIGH, _ALONE_WIDE = 5.2, 2.9, 7.0
#: What is written around a panel: at its left, right, bottom and top, and how far out its axis is named.
_LEFT, _RIGHT, _BOTTOM, _TOP, _NAME = 0.8, 0.32, 0.55, 0.22, 0.62
_DOTS = 160
#: Gains so far below the largest are not shown, unless a limit is there: then so far below the lowest limit.
_DEEPEST, _BELOW_LIMIT = 90.0, 25.0
#: What is shown of a pass band without a limit, in dB; with one, so many times the loss that it allows.
_PASS_DEPTH, _PASS_LOSSES = 4.0, 3.0
#: The delay's axis holds what the functions do where their gain is within this of the largest, in dB.
_HEARD = 20.0


def svg_of(curves: Curves, what: Sequence[str]) -> str:
    """Return the picture as SVG, the same text at every call, its letters as outlines.

    It begins with ``<svg``, has a title and a description for those who hear it, and its ids are its own, so that
    several can stand in one HTML file. ``what`` holds words of ``WHAT``.
    """
    text = _drawn(curves, what, "svg").decode()
    body = text[text.index("<svg") :]
    own = "p" + hashlib.sha256(body.encode()).hexdigest()[:8] + "-"
    body = re.sub(r'(\bid="|url\(#|href="#)', rf"\g<1>{own}", body)
    head, rest = body.split(">", 1)
    title = f'<title id="{own}title">{escape(curves.title)}</title>'
    description = f'<desc id="{own}description">{escape(description_of(curves, what))}</desc>'
    names = f'role="img" aria-labelledby="{own}title {own}description"'
    return f"{head} {names}>\n {title}\n {description}{rest}"


def picture(curves: Curves, what: Sequence[str], kind: str) -> bytes:
    """Return the picture as ``svg``, ``png`` or ``pdf``."""
    return svg_of(curves, what).encode() if kind == "svg" else _drawn(curves, what, kind)


def description_of(curves: Curves, what: Sequence[str]) -> str:
    """Return in words what the picture shows."""
    low, high = (ticks.frequency_label(float(f)) for f in curves.frequencies[[0, -1]])
    sentences = [f"{curves.ask}: {', '.join(what)}, from {low} to {high}."]
    if curves.target:
        sentences.append(f"Target {curves.target}.")
    sentences.append(f"Curves: {'; '.join(trace.label for trace in curves.traces)}.")
    sentences += [f"Limit: {area.words}." for area in curves.forbidden]
    return " ".join(sentences)


def _drawn(curves: Curves, what: Sequence[str], kind: str) -> bytes:
    import matplotlib as mpl
    from matplotlib.figure import Figure

    own: dict[Any, Any] = {
        "svg.hashsalt": "stagewright",
        "svg.fonttype": "path",
        "font.family": "DejaVu Sans",
        "font.size": 9,
        "axes.linewidth": 0.7,
        "hatch.linewidth": 0.6,
        "path.simplify": True,
    }
    panels = [word for word in WHAT if word in what]
    columns = 1 if len(panels) <= 3 else 2
    rows = -(-len(panels) // columns)
    width = _ALONE_WIDE if columns == 1 else 2 * _WIDE
    head = head_of(curves, panels, width, 2 if columns == 1 else 4)
    size = (width, head.height + rows * _HIGH)
    with mpl.rc_context(own), warnings.catch_warnings():
        # a title in letters that the font lacks shows boxes; that is no news to the caller
        warnings.filterwarnings("ignore", message=r"Glyph .* missing", category=UserWarning)
        figure = Figure(figsize=size, facecolor="white")
        for place, word in enumerate(panels):
            row, column = divmod(place, columns)
            axes = _panel(
                figure, size, column * size[0] / columns, (rows - 1 - row) * _HIGH, size[0] / columns
            )
            _PANELS[word](axes, curves)
        write_head(figure, head)
        made = BytesIO()
        figure.savefig(made, format=kind, dpi=_DOTS, metadata=_undated(kind, curves.title))
    return made.getvalue()


def _panel(figure: Any, size: tuple[float, float], left: float, bottom: float, width: float) -> Any:
    """Return axes with room around them in a cell of the figure, all in inches."""
    inner = (width - _LEFT - _RIGHT, _HIGH - _BOTTOM - _TOP)
    place = ((left + _LEFT) / size[0], (bottom + _BOTTOM) / size[1], inner[0] / size[0], inner[1] / size[1])
    axes = figure.add_axes(place)
    axes.yaxis.set_label_coords(-_NAME / inner[0], 0.5)
    return axes


def _undated(kind: str, title: str) -> dict[str, Any]:
    if kind == "svg":
        return {"Date": None, "Creator": None, "Format": None, "Type": None}
    return {"Software": None} if kind == "png" else {"CreationDate": None, "Title": title}


# panels -----------------------------------------------------------------------------------------------------


def _magnitude(axes: Any, curves: Curves) -> None:
    low, high = _gain_span(curves)
    _plot(axes, curves, lambda trace: trace.gain_db)
    for number, area in enumerate(curves.forbidden, 1):
        _exclude(axes, area, curves.frequencies, (low, high), f"magnitude_excluded_{number}")
    _levels(axes, low, high, curves.unit)
    axes.set_ylabel("gain (dB)" if not curves.unit else f"magnitude ({ticks.SIGNS[curves.unit]})")
    _over_frequency(axes, curves)


def _gain_span(curves: Curves) -> tuple[float, float]:
    """Return the gains in dB at the ends of the axis: round numbers with all limits between them."""
    gains = np.concatenate([trace.gain_db[np.isfinite(trace.gain_db)] for trace in curves.traces])
    levels = [area.level_db for area in curves.forbidden]
    largest = max([float(np.max(gains)), *levels])
    deepest = min(levels) - _BELOW_LIMIT if levels else largest - _DEEPEST
    if curves.is_loop:
        deepest = min(deepest, -_HEARD)
    least = max(float(np.min(gains)), deepest)
    high = 10 * np.ceil((largest + 3) / 10)
    return float(min(10 * np.floor(least / 10 + 1e-6), high - 20)), float(high)


def _passband(axes: Any, curves: Curves) -> None:
    """Draw the gain near its nominal value, which is 0 dB here."""
    _plot(axes, curves, lambda trace: trace.gain_db - curves.reference_db)
    gains = np.concatenate([trace.gain_db[np.isfinite(trace.gain_db)] for trace in curves.traces])
    losses = [curves.reference_db - area.level_db for area in curves.forbidden if area.passes]
    depth = _PASS_LOSSES * max(losses) if losses else _PASS_DEPTH
    above = min(max(0.0, float(np.max(gains)) - curves.reference_db), 2 * depth)
    low, high = -depth, above + 0.2 * depth
    for number, area in enumerate(curves.forbidden, 1):
        level = area.level_db - curves.reference_db
        if level > low:
            shifted = replace(area, level_db=level)
            _exclude(axes, shifted, curves.frequencies, (low, high), f"passband_excluded_{number}")
    _even(axes, low, high)
    axes.set_ylabel("gain against nominal (dB)")
    _over_frequency(axes, curves, _passing_span(curves, low))


def _passing_span(curves: Curves, lowest: float) -> tuple[float, float]:
    """Return from where to where, in Hz, a trace is less than so many dB under nominal, and a little more."""
    f = curves.frequencies
    inside = np.any([trace.gain_db - curves.reference_db > lowest for trace in curves.traces], axis=0)
    ends = [f[0], f[-1]] if not inside.any() else [f[inside][0], f[inside][-1]]
    ends += [end for area in curves.forbidden if area.passes for end in (area.low, area.high)]
    margin = (max(ends[:2]) / min(ends[:2])) ** 0.1
    low, high = (float(np.clip(end, f[0], f[-1])) for end in (min(ends) / margin, max(ends) * margin))
    return low, high


def _exclude(axes: Any, area: Forbidden, frequencies: Floats, span: tuple[float, float], name: str) -> None:
    """Draw the area that a limit excludes, with a line at its border; ``span`` are the ends of the gain's axis."""
    low, high = span
    left = max(area.low, float(frequencies[0]))
    right = min(area.high, float(frequencies[-1]))
    bottom, top = (low, area.level_db) if area.passes else (area.level_db, high)
    axes.fill_between([left, right], bottom, top, zorder=2, gid=name, **EXCLUDED)
    axes.plot([left, right], [area.level_db] * 2, color="#444444", linewidth=1.0, zorder=4)
    ends = [end for end in (area.low, area.high) if frequencies[0] < end < frequencies[-1]]
    for end in ends:
        axes.plot([end, end], [bottom, top], color="#444444", linewidth=1.0, zorder=4)


def _levels(axes: Any, low: float, high: float, unit: str) -> None:
    steps = (1.0, 2.0) if not unit else (2.0,)
    marks = ticks.even_marks(low, high, steps)
    axes.set_ylim(low, high)
    axes.set_yticks(marks, [ticks.level_label(mark, unit) for mark in marks])
    if unit:
        between = [
            20.0 * (k + log10(m)) for k in range(int(low // 20), int(high // 20) + 1) for m in range(2, 10)
        ]
        axes.set_yticks([mark for mark in between if low < mark < high], minor=True)


def _phase(axes: Any, curves: Curves) -> None:
    _plot(axes, curves, lambda trace: trace.phase_deg)
    phases = np.concatenate([trace.phase_deg[np.isfinite(trace.phase_deg)] for trace in curves.traces])
    low, high = 45 * np.floor(np.min(phases) / 45 + 0.02), 45 * np.ceil(np.max(phases) / 45 - 0.02)
    if high - low < 90:
        low, high = low - 45, high + 45
    marks = ticks.even_marks(low, high, (1.5, 3.0, 4.5, 9.0, 18.0))
    margin = 0.04 * (high - low)
    axes.set_ylim(low - margin, high + margin)
    axes.set_yticks(marks, [ticks.with_minus(f"{mark:g}°") for mark in marks])
    axes.set_ylabel("phase")
    _over_frequency(axes, curves)


def _delay(axes: Any, curves: Curves) -> None:
    low, high = _delay_span(curves.traces)
    scale, unit = ticks.prefixed(max(abs(low), abs(high)), "s")
    _plot(axes, curves, lambda trace: trace.delay_s / scale)
    _even(axes, low / scale, high / scale)
    axes.set_ylabel(f"group delay ({unit})")
    _over_frequency(axes, curves)


def _delay_span(traces: Sequence[Trace]) -> tuple[float, float]:
    """Return the delays at the ends of the axis: what the functions do where they let something through."""
    heard = []
    for trace in traces:
        gains = np.where(np.isfinite(trace.gain_db), trace.gain_db, -np.inf)
        heard.append(trace.delay_s[(gains > np.max(gains) - _HEARD) & np.isfinite(trace.delay_s)])
    delays = np.concatenate(heard)
    low, high = min(0.0, float(np.min(delays))), max(0.0, float(np.max(delays)))
    margin = 0.08 * (high - low or 1e-12)
    return low - (margin if low < 0 else 0.0), high + margin


def _step(axes: Any, curves: Curves) -> None:
    scale, unit = ticks.prefixed(float(curves.times[-1]), "s")
    shown = [(trace, trace.step) for trace in curves.traces if trace.step is not None]
    largest = max((float(np.max(np.abs(step))) for _, step in shown), default=1.0)
    divide, sign = ticks.prefixed(largest, curves.unit)
    for trace, step in shown:
        axes.plot(curves.times / scale, step / divide, **style_of(curves, trace))
    values = np.concatenate([step / divide for _, step in shown])
    low, high = min(0.0, float(np.min(values))), max(0.0, float(np.max(values)))
    margin = 0.06 * (high - low or 1.0)
    _even(axes, low - margin, high + margin)
    axes.axhline(0.0, color="#777777", linewidth=0.7, zorder=1)
    marks = ticks.even_marks(0.0, float(curves.times[-1]) / scale)
    axes.set_xticks(marks, [f"{mark:g}" for mark in marks])
    axes.set_xlim(0.0, float(curves.times[-1]) / scale)
    axes.set_xlabel(f"time ({unit})")
    axes.set_ylabel("response to a unit step" + (f" ({sign})" if sign else ""))
    _grid(axes)


def _poles(axes: Any, curves: Curves) -> None:
    """Draw poles as crosses and zeros as circles; those of real amplifiers far out are only counted."""
    near = [t for t in curves.traces if t.name != "real"]
    within = 1.25 * max(
        (float(np.max(np.abs(r))) for t in near for r in (t.poles, t.zeros) if len(r)), default=1.0
    )
    scale, unit = ticks.prefixed(within / 1.25, "rad/s")
    outside = 0
    for trace in curves.traces:
        look = {**style_of(curves, trace), "linestyle": "none", "linewidth": 0.0}
        broad = trace.name == "target" and len(curves.traces) > 1
        for roots, marker in ((trace.poles, "x"), (trace.zeros, "o")):
            inside = roots[np.abs(roots) <= within]
            outside += len(roots) - len(inside)
            if not len(inside):
                continue
            axes.plot(
                inside.real / scale,
                inside.imag / scale,
                marker=marker,
                markersize=11 if broad else 7,
                markeredgewidth=3.5 if broad else 1.4,
                markerfacecolor="none",
                **look,
            )
    limit = within / scale
    _plane(axes, curves.traces, limit, within)
    axes.set_xlabel(f"real part ({unit})")
    axes.set_ylabel(f"imaginary part ({unit})")
    words = "× pole   ○ zero" + (f"   {outside} farther out" if outside else "")
    axes.set_title(words, size=8.5, loc="right", pad=4)


def _plane(axes: Any, traces: Sequence[Trace], limit: float, within: float) -> None:
    """Set the ends of both axes, equal in scale, the right half narrower where nothing lies there."""
    roots: Complexes = np.concatenate([r for t in traces for r in (t.poles, t.zeros)])
    axes.axhline(0.0, color="#777777", linewidth=0.7, zorder=1)
    axes.axvline(0.0, color="#777777", linewidth=0.7, zorder=1)
    box = axes.get_position()
    wide = box.width * axes.figure.get_figwidth() / (box.height * axes.figure.get_figheight())
    left = 0.5 if np.any(roots[np.abs(roots) <= within].real > 0) else 0.7
    across = (-left * wide * 2 * limit, (1 - left) * wide * 2 * limit)
    axes.set_xlim(across)
    axes.set_ylim(-limit, limit)
    marks = ticks.even_marks(-limit, limit)
    axes.set_yticks(marks, [ticks.with_minus(f"{mark:g}") for mark in marks])
    beside = ticks.even_marks(*across)
    axes.set_xticks(beside, [ticks.with_minus(f"{mark:g}") for mark in beside])
    _grid(axes)


# axes -------------------------------------------------------------------------------------------------------


def _plot(axes: Any, curves: Curves, values: Callable[[Trace], Floats]) -> None:
    for trace in curves.traces:
        axes.plot(curves.frequencies, values(trace), **style_of(curves, trace))


def _even(axes: Any, low: float, high: float) -> None:
    axes.set_ylim(low, high)
    marks = ticks.even_marks(low, high)
    axes.set_yticks(marks, [ticks.with_minus(f"{mark:g}") for mark in marks])


def _over_frequency(axes: Any, curves: Curves, span: tuple[float, float] | None = None) -> None:
    from matplotlib.ticker import NullFormatter

    low, high = span or (float(curves.frequencies[0]), float(curves.frequencies[-1]))
    labelled, others = ticks.frequency_marks(low, high)
    axes.set_xscale("log")
    axes.set_xlim(low, high)
    axes.set_xticks(labelled, [ticks.frequency_label(f) for f in labelled])
    axes.set_xticks(others, minor=True)
    axes.xaxis.set_minor_formatter(NullFormatter())
    axes.set_xlabel("frequency")
    _grid(axes)
    axes.grid(visible=True, which="minor", axis="x", color="#EEEEEE", linewidth=0.5, zorder=0)


def _grid(axes: Any) -> None:
    axes.set_axisbelow(True)
    axes.grid(visible=True, which="major", color="#D0D0D0", linewidth=0.6, zorder=0)


_PANELS: dict[str, Callable[[Any, Curves], None]] = {
    "magnitude": _magnitude,
    "passband": _passband,
    "phase": _phase,
    "delay": _delay,
    "step": _step,
    "poles": _poles,
}
