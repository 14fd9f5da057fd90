"""Where a prototype must be put in frequency so that a mask is met, exactly: a matter of straight lines.

A band edge at w of a mask meets the prototype at the frequency that the transformation gives. With u = centre² and
the bandwidth B of a band-pass that is |w² - u|/(w B); so the loss at most A up to the prototype's frequency P(A)
asks B >= |w² - u|/(w P), and the loss at least A from its frequency S(A) on asks B <= |w² - u|/(w S). Both are straight
lines in u, the first from below and the second from above. A band-stop has the two exchanged, and a low-pass or
high-pass has one number to place and no u. The mask is met where the lowest roof is above the highest floor, and best
where their ratio is the largest, which is at a corner of one of them; the number is then put in the middle of the two.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations
from math import inf, sqrt

from symcirc.masks.curve import Curve
from symcirc.masks.mask import Band, Mask

#: So much of a floor may stand above a roof: a mask that is met exactly is met.
_TOUCHING = 1e-7
#: A loss that is never passed counts as passed at this frequency.
_FARTHEST = 1e300


@dataclass(frozen=True)
class Spot:
    """A kind with its frequencies in rad/s: ``size`` is the edge or the bandwidth, ``centre`` None without one."""

    kind: str
    size: float
    centre: float | None

    def mapped(self, low: float, high: float) -> tuple[float, float]:
        """Return the stretch of the prototype's frequencies that a band from ``low`` to ``high`` comes to."""
        if self.kind == "lowpass":
            return low / self.size, high / self.size
        if self.kind == "highpass":
            return _over(self.size, high), _over(self.size, low)
        assert self.centre is not None
        ends = [self._detuning(low), self._detuning(high)]
        near = 0.0 if low <= self.centre <= high else min(ends)
        far = max(ends)
        return (near, far) if self.kind == "bandpass" else (_over(1.0, far), _over(1.0, near))

    def _detuning(self, omega: float) -> float:
        assert self.centre is not None
        if omega in (0.0, inf):
            return inf
        return abs(omega**2 - self.centre**2) / (omega * self.size)


@dataclass(frozen=True)
class Placing:
    """The spot of a prototype in a mask.

    ``room`` is how many times the greatest size that meets the mask is the least: 1 and more, or it is not met.
    ``floor`` and ``roof`` are the bands that set the two.
    """

    spot: Spot
    room: float
    floor: Band
    roof: Band

    @property
    def is_met(self) -> bool:
        """Tell whether the mask is met so."""
        return self.room >= 1 - _TOUCHING


def _over(number: float, divisor: float) -> float:
    return inf if divisor == 0 else number / divisor


@dataclass(frozen=True)
class _Line:
    """``start`` + ``slope`` u: a bound on the size by one edge of a band."""

    start: float
    slope: float
    band: Band

    def at(self, u: float) -> float:
        return self.start + self.slope * u


def place(mask: Mask, kind: str, curve: Curve) -> Placing:
    """Return where a prototype meets the mask with the most room, or comes nearest to it."""
    bounds = _single_bounds if kind in ("lowpass", "highpass") else _band_bounds
    floors, roofs = bounds(mask, kind, curve)
    best: tuple[float, float, _Line, _Line] | None = None
    for u in _corners(floors, roofs):
        floor = max(floors, key=lambda line: line.at(u))
        roof = min(roofs, key=lambda line: line.at(u))
        room = roof.at(u) / floor.at(u) if 0 < floor.at(u) < inf and roof.at(u) > 0 else 0.0
        if best is None or room > best[0]:
            best = (room, u, floor, roof)
    assert best is not None
    room, u, floor, roof = best
    centre = None if kind in ("lowpass", "highpass") else sqrt(u)
    size = sqrt(floor.at(u) * roof.at(u)) if room else 0.0
    return Placing(Spot(kind, size, centre), room, floor.band, roof.band)


def _single_bounds(mask: Mask, kind: str, curve: Curve) -> tuple[list[_Line], list[_Line]]:
    """Return the floors and roofs of the edge."""
    passing = [(band, min(curve.first_above(band.decibels), _FARTHEST)) for band in mask.passing]
    stopping = [(band, curve.last_below(band.decibels)) for band in mask.stopping]
    if kind == "lowpass":
        return (
            [_Line(_over(band.high, reach), 0.0, band) for band, reach in passing],
            [_Line(_over(band.low, reach), 0.0, band) for band, reach in stopping],
        )
    return (
        [_Line(band.high * reach, 0.0, band) for band, reach in stopping],
        [_Line(band.low * reach, 0.0, band) for band, reach in passing],
    )


def _band_bounds(mask: Mask, kind: str, curve: Curve) -> tuple[list[_Line], list[_Line]]:
    """Return the floors and roofs of the bandwidth, as lines in the square of the centre."""
    inner, outer = (mask.passing, mask.stopping) if kind == "bandpass" else (mask.stopping, mask.passing)
    middle = min(band.low for band in inner)
    floors, roofs = [], []
    for band in inner:
        factor = _reach(band, kind, curve)
        for w in (band.low, band.high):
            floors += [_Line(-w * factor, factor / w, band), _Line(w * factor, -factor / w, band)]
    for band in outer:
        factor = _reach(band, kind, curve)
        w = band.high if band.low < middle else band.low
        sign = 1 if band.low < middle else -1
        roofs.append(_Line(-sign * w * factor, sign * factor / w, band))
    return floors, roofs


def _reach(band: Band, kind: str, curve: Curve) -> float:
    """Return what |w² - u|/w is multiplied by for the bandwidth: the prototype's frequency, or one over it."""
    if band.passes:
        frequency = min(curve.first_above(band.decibels), _FARTHEST)
    else:
        frequency = curve.last_below(band.decibels)
    if kind == "bandstop":
        return frequency
    return 1 / frequency if frequency > 0 else _FARTHEST


def _corners(floors: list[_Line], roofs: list[_Line]) -> list[float]:
    """Return the squares of the centre at which two floors or two roofs meet."""
    found = []
    for lines in (floors, roofs):
        for one, other in combinations(lines, 2):
            if one.slope != other.slope:
                u = (other.start - one.start) / (one.slope - other.slope)
                if 0 < u < inf:
                    found.append(u)
    return found or [1.0]
