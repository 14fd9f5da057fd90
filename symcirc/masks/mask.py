"""A sheet's limits as a mask: bands in rad/s with their losses, and which of the four kinds they make."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import groupby
from math import inf, pi

import sympy

from symcirc.complaints import Complaint, Place
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import names
from symcirc.sheet.model import Limit, Sheet, Value

#: The kinds by the bands from low to high: p where the loss is at most, s where it is at least so much.
_KINDS = {"ps": "lowpass", "sp": "highpass", "sps": "bandpass", "psp": "bandstop"}


@dataclass(frozen=True)
class Band:
    """One limit: the loss is at most, or at least, so many dB from ``low`` to ``high`` (rad/s, from 0 to infinity)."""

    passes: bool
    loss_db: sympy.Expr
    low: float
    high: float
    place: Place

    @property
    def decibels(self) -> float:
        """The loss in doubles."""
        return float(self.loss_db)

    @property
    def words(self) -> str:
        """The limit as the sheet has it, without the names of the statement and of the ask."""
        line = self.place.source.line(self.place.line).split("#")[0]
        return line.split(":", 1)[-1].strip()


@dataclass(frozen=True)
class Mask:
    """The limits of one ask."""

    ask: str
    bands: tuple[Band, ...]

    @property
    def passing(self) -> tuple[Band, ...]:
        """The bands whose loss is at most so much."""
        return tuple(band for band in self.bands if band.passes)

    @property
    def stopping(self) -> tuple[Band, ...]:
        """The bands whose loss is at least so much."""
        return tuple(band for band in self.bands if not band.passes)


def read_mask(sheet: Sheet, ask: str) -> Mask:
    """Return the limits of an ask as a mask.

    Raises Complaint for a limit without a number, a loss that is none, and two limits that contradict each other.
    """
    bands = tuple(_band(limit, sheet.numbers) for limit in sheet.limits if limit.ask == ask)
    for place, band in enumerate(bands):
        for other in bands[:place]:
            _refuse_contradiction(band, other)
    return Mask(ask, bands)


def kind_of(mask: Mask) -> str:
    """Return lowpass, highpass, bandpass or bandstop, as the bands lie.

    Raises Complaint where nothing must pass, nothing must be stopped, or the bands alternate more often.
    """
    first = mask.bands[0].place
    if not mask.stopping:
        raise Complaint(
            first,
            "nothing must be stopped, so no filter is needed",
            f"add a line such as: limit {mask.ask}: loss >= 40 dB above 9 kHz",
        )
    if not mask.passing:
        raise Complaint(
            first,
            "nothing must pass, so there is no pass band to place",
            f"add a line such as: limit {mask.ask}: loss <= 1 dB below 2 kHz",
        )
    least = min(mask.stopping, key=lambda band: band.decibels)
    if least.decibels <= min(band.decibels for band in mask.passing):
        raise Complaint(
            least.place,
            "the loss that the stop band must have is no more than every pass band may have",
            "give the stop band a larger loss",
        )
    rising = sorted(mask.bands, key=lambda band: (band.low, band.high))
    runs = [list(run) for _, run in groupby(rising, key=lambda band: band.passes)]
    letters = "".join("p" if run[0].passes else "s" for run in runs)
    if letters not in _KINDS:
        raise Complaint(
            runs[3][0].place,
            "pass and stop bands alternate more often than a low-, high-, band-pass or band-stop can",
            "split the mask into two asks in cascade",
        )
    return _KINDS[letters]


def _band(limit: Limit, known: dict[str, sympy.Expr]) -> Band:
    loss = _number(limit.loss_db, known)
    passes = limit.sense == "<="
    if not loss.is_positive:
        if passes:
            mend = "allow a little: loss <= 0.1 dB"
            raise Complaint(limit.loss_db.place, "no response keeps this loss over a whole band", mend)
        raise Complaint(
            limit.loss_db.place, "this loss is no limit", "give a loss above 0 dB, as in loss >= 20 dB"
        )
    low = 0.0 if limit.low is None else _frequency(limit.low, known)
    high = inf if limit.high is None else _frequency(limit.high, known)
    return Band(passes, loss, low, high, limit.place)


def _frequency(value: Value, known: dict[str, sympy.Expr]) -> float:
    number = float(_number(value, known))
    return number if value.unit == "rad/s" else 2 * pi * number


def _number(value: Value, known: dict[str, sympy.Expr]) -> sympy.Expr:
    for name in names(value.expression):
        if name.text != "pi" and name.text not in known:
            raise Complaint(
                value.place, f"a limit is in numbers, and `{name.text}` has none", f"fix {name.text} = value"
            )
    return exact_number(value.expression, known)


def _refuse_contradiction(band: Band, other: Band) -> None:
    """Raise Complaint where two bands share a frequency at which the loss must be small and large."""
    low, high = max(band.low, other.low), min(band.high, other.high)
    if band.passes == other.passes or low > high:
        return
    passing, stopping = (band, other) if band.passes else (other, band)
    if stopping.decibels <= passing.decibels:
        return
    shared = f"at {_hertz(low)}" if low == high else f"from {_hertz(low)} to {_hertz(high)}"
    raise Complaint(
        band.place,
        f"this limit contradicts the one on line {other.place.line}: {shared} the loss would be at most "
        f"{passing.decibels:g} dB and at least {stopping.decibels:g} dB",
        "leave a gap between the pass band and the stop band",
    )


def _hertz(omega: float) -> str:
    from symcirc.transfer.engineering import engineering

    return "the end" if omega == inf else engineering(omega / (2 * pi), "Hz", 4)
