"""How curves look, and what stands above the panels of a picture: title, what is asked, legend.

The target is a broad pale line, the stage a thin dark one upon it, the stage with real amplifiers dashed: they can be
told apart in grey, and by the colour-blind (colours after Okabe and Ito, "Color universal design" (2008), from
memory). What the limits exclude is hatched.
"""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from symcirc.plots.curves import Curves, Trace

#: Heights of a line of the title, of one of the text below it, of a row of the legend and of the room around them, and
#: the room that a letter of the title and one of the text takes at most on average.
_TITLE, _TEXT, _ROW, _AROUND, _LETTERS = 0.22, 0.17, 0.2, 0.2, (0.105, 0.072)

#: Each trace, by its name.
_STYLES: dict[str, dict[str, Any]] = {
    "target": {"color": "#56B4E9", "linewidth": 4.5, "solid_capstyle": "butt", "zorder": 3},
    "stage": {"color": "#000000", "linewidth": 1.3, "zorder": 5},
    "real": {"color": "#D55E00", "linewidth": 1.7, "linestyle": (0, (5, 2)), "zorder": 6},
}
#: A target that is shown alone.
_ALONE: dict[str, Any] = {**_STYLES["target"], "color": "#0072B2", "linewidth": 2.0}
#: An area that a limit excludes.
EXCLUDED: dict[str, Any] = {
    "facecolor": "#E4E4E4",
    "edgecolor": "#8A8A8A",
    "hatch": "////",
    "linewidth": 0.0,
}


def style_of(curves: Curves, trace: Trace) -> dict[str, Any]:
    """Return how a trace is drawn."""
    return _ALONE if trace.name == "target" and len(curves.traces) == 1 else _STYLES[trace.name]


@dataclass(frozen=True)
class Head:
    """What stands above the panels: the title's lines, those of the text, and the legend in rows of ``across``."""

    title: list[str]
    text: list[str]
    legend: list[Any]
    across: int

    @property
    def height(self) -> float:
        """The height in inches."""
        rows = -(-len(self.legend) // self.across)
        return _AROUND + _TITLE * len(self.title) + _TEXT * len(self.text) + _ROW * rows


def head_of(curves: Curves, panels: Sequence[str], width: float, across: int) -> Head:
    """Return the head of a picture so many inches wide, a legend of more than three in rows of ``across``."""
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    title = textwrap.wrap(curves.title, int(width / _LETTERS[0]))
    text = [curves.ask, *([f"target {curves.target}"] if curves.target else [])]
    lines = [line for words in text for line in textwrap.wrap(words, int(width / _LETTERS[1]))]
    legend: list[Any] = [Line2D([], [], label=t.label, **style_of(curves, t)) for t in curves.traces]
    if curves.forbidden and {"magnitude", "passband"} & set(panels):
        legend.append(Patch(label="excluded by the limits", **EXCLUDED))
    return Head(title, lines, legend, across if len(legend) > 3 else len(legend))


def write_head(figure: Any, head: Head) -> None:
    """Write a head at the top of a figure."""
    wide, high = figure.get_size_inches()
    at = _AROUND / 2
    for lines, height, look in (
        (head.title, _TITLE, {"size": 11, "weight": "bold"}),
        (head.text, _TEXT, {"size": 8.5}),
    ):
        for line in lines:
            figure.text(0.12 / wide, 1 - at / high, line, va="top", parse_math=False, **look)
            at += height
    figure.legend(
        handles=head.legend,
        loc="upper left",
        bbox_to_anchor=(0.08 / wide, 1 - (at + 0.01) / high),
        ncols=head.across,
        frameon=False,
        handlelength=2.6,
        columnspacing=1.6,
        fontsize=8.5,
        borderpad=0.0,
        borderaxespad=0.2,
    )
