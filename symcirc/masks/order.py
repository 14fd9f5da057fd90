"""The least order of every family that meets a mask, what it costs, and which one to take."""

from __future__ import annotations

from dataclasses import dataclass, replace

import sympy

from symcirc.complaints import Complaint, listed
from symcirc.complaints import nearest as nearest_word
from symcirc.masks.curve import Curve, build_curve
from symcirc.masks.mask import Mask, kind_of
from symcirc.masks.placed import placed
from symcirc.masks.placing import Placing, place
from symcirc.masks.timing import delay_variation, highest_q, settling_time
from symcirc.responses import FAMILIES, LARGEST_ORDER, Prototype, ResponseError, digits
from symcirc.sheet.model import Sheet

#: The errors in degrees for which linear phase is tabulated.
_PHASE_RIPPLES = (sympy.Rational(1, 20), sympy.Rational(1, 2))


@dataclass(frozen=True)
class Candidate:
    """A family with its own numbers, as its words in a target: ``ripple``, in dB or deg, and ``stop``."""

    family: str
    numbers: tuple[sympy.Expr, ...]

    @property
    def words(self) -> str:
        """The family's own words of a target, each behind a comma."""
        needs = FAMILIES[self.family].needs
        unit = "deg" if self.family == "linear phase" else "dB"
        pairs = zip(needs, self.numbers, strict=True)
        return "".join(f", {need} {float(n):.6g} {unit if need == 'ripple' else 'dB'}" for need, n in pairs)


@dataclass(frozen=True)
class Row:
    """The least order of a family that meets the mask; losses in dB, times in seconds.

    ``pass_loss_db`` is the greatest loss in a pass band, ``stop_loss_db`` the least in a stop band.
    """

    candidate: Candidate
    prototype: Prototype
    placing: Placing
    pass_loss_db: float
    stop_loss_db: float
    highest_q: float
    delay_variation: float
    settling: float

    @property
    def order(self) -> int:
        """The prototype's order."""
        return self.prototype.order


@dataclass(frozen=True)
class Failure:
    """A family that does not meet the mask up to the highest order, and why."""

    candidate: Candidate
    reason: str


@dataclass(frozen=True)
class Selection:
    """All families against a mask: those that meet it, those that do not, and which to take."""

    mask: Mask
    kind: str
    rows: tuple[Row, ...]
    failures: tuple[Failure, ...]
    recommended: Row
    reason: str


def select(mask: Mask) -> Selection:
    """Return the least order of every family that meets a mask, and a recommendation.

    Raises Complaint for a mask of no kind, and where no family meets it up to the highest order.
    """
    kind = kind_of(mask)
    rows, failures = [], []
    closest: tuple[Placing, Curve] | None = None
    for candidate in candidates(mask):
        try:
            found = _least(mask, kind, candidate)
        except ResponseError as error:
            failures.append(Failure(candidate, error.cause))
            continue
        if isinstance(found, Row):
            rows.append(found)
            continue
        failures.append(Failure(candidate, f"no order up to {LARGEST_ORDER} meets the mask"))
        if closest is None or found[0].room > closest[0].room:
            closest = found
    if not rows:
        assert closest is not None
        raise _refuse(mask, *closest)
    recommended, reason = _recommend(rows)
    return Selection(mask, kind, tuple(rows), tuple(failures), recommended, reason)


def pick_ask(sheet: Sheet, ask: str | None) -> str:
    """Return the named ask, or the only one with limits; raises Complaint where there is none or a choice."""
    limited = list(dict.fromkeys(limit.ask for limit in sheet.limits))
    wanted = ask or (limited[0] if limited else sheet.asks[0].name)
    if ask is None and len(limited) > 1:
        second = next(limit for limit in sheet.limits if limit.ask == limited[1])
        raise Complaint(
            second.place, f"more than one ask has limits ({', '.join(limited)})", "say which: --ask NAME"
        )
    if wanted not in limited:
        asked = next((a for a in sheet.asks if a.name == wanted), sheet.asks[0])
        raise Complaint(
            asked.place,
            f"`{wanted}` has no limits to meet",
            nearest_word(wanted, limited)
            or f"add a line such as: limit {asked.name}: loss >= 40 dB above 9 kHz",
        )
    return wanted


def candidates(mask: Mask) -> list[Candidate]:
    """Return every family, its ripple the least that a pass band allows, its stop loss the greatest wanted."""
    ripple = min((band.loss_db for band in mask.passing), key=float)
    stop = max((band.loss_db for band in mask.stopping), key=float)
    own = {"ripple": ripple, "stop": stop}
    result = []
    for family in FAMILIES.values():
        if family.name == "linear phase":
            result += [Candidate(family.name, (error,)) for error in _PHASE_RIPPLES]
        else:
            result.append(Candidate(family.name, tuple(own[need] for need in family.needs)))
    return result


def exact_curve(prototype: Prototype) -> Curve:
    """Return the curve of an exact prototype, its edge at 1 rad/s."""
    poles = []
    for section in prototype.sections:
        numbers = [float(digits(c, 25)) for c in section]
        if len(numbers) == 2:
            poles.append(complex(-numbers[0]))
        else:
            half = -numbers[1] / 2
            root = complex(half * half - numbers[0]) ** 0.5
            poles += [half + root, half - root]
    zeros = tuple(float(digits(square, 25)) ** 0.5 for square in prototype.zeros)
    at_zero = 0.0 if prototype.order % 2 else float(prototype.ripple_db or 0)
    return build_curve(tuple(poles), zeros, at_zero)


def _least(mask: Mask, kind: str, candidate: Candidate) -> Row | tuple[Placing, Curve]:
    """Return the row of the least order, or how near any order comes.

    Every order is tried in doubles, as more poles do not always need a narrower gap between the bands (Legendre's
    even and odd orders, Bessel's high ones); what is found is made exactly and looked at again.
    """
    family = FAMILIES[candidate.family]
    family.build(1, *candidate.numbers)  # refuses numbers that the family cannot have
    numbers = [float(n) for n in candidate.numbers]
    nearest: tuple[Placing, Curve] | None = None
    for order in range(1, LARGEST_ORDER + 1):
        rough = family.rough(order, *numbers)
        curve = build_curve(rough.poles, rough.zeros, rough.loss_at_zero_db)
        placing = place(mask, kind, curve)
        if placing.is_met:
            prototype = family.build(order, *candidate.numbers)
            curve = exact_curve(prototype)
            placing = place(mask, kind, curve)
            if placing.is_met:
                return _row(mask, candidate, prototype, curve, placing)
        if nearest is None or placing.room > nearest[0].room:
            nearest = placing, curve
    assert nearest is not None
    return nearest


def _row(mask: Mask, candidate: Candidate, prototype: Prototype, curve: Curve, placing: Placing) -> Row:
    response = placed(curve, placing.spot)
    return Row(
        candidate,
        prototype,
        placing,
        max(curve.most(*placing.spot.mapped(band.low, band.high)) for band in mask.passing),
        min(curve.least(*placing.spot.mapped(band.low, band.high)) for band in mask.stopping),
        highest_q(response.poles),
        delay_variation(response.poles, [(band.low, band.high) for band in mask.passing]),
        settling_time(response),
    )


def _refuse(mask: Mask, placing: Placing, curve: Curve) -> Complaint:
    """Say which limit cannot be met, and how far the best of all families comes when the others are."""
    floor, roof = placing.floor, placing.roof
    passing, stopping = (floor, roof) if floor.passes else (roof, floor)
    reached = ""
    if placing.room:  # the size at which the pass band is just met
        half = placing.room**0.5
        size = placing.spot.size
        met = replace(placing.spot, size=size / half if floor.passes else size * half)
        loss = curve.least(*met.mapped(stopping.low, stopping.high))
        reached = f"; the best reaches {loss:.3g} dB"
    return Complaint(
        stopping.place,
        f"this limit cannot be met: with {passing.words} (line {passing.place.line}) no family up to order "
        f"{LARGEST_ORDER} has {stopping.words}{reached}",
        "widen the gap between the two bands, or ask for less loss",
    )


def _recommend(rows: list[Row]) -> tuple[Row, str]:
    """Return the row to take: the least order without zeros, unless zeros save two poles, and of these the least Q."""
    plain = [row for row in rows if not row.prototype.zeros]
    least = min(row.order for row in rows)
    if plain and min(row.order for row in plain) - least < 2:
        order, those, what = min(row.order for row in plain), plain, "without zeros in the stop band"
    else:
        order, those, what = least, rows, "of all"
    equal = [row for row in those if row.order == order]
    best = min(equal, key=lambda row: row.highest_q)
    name = best.candidate.family
    reason = f"{name}: order {order} is the least {what}"
    if len(equal) > 1:
        others = listed(dict.fromkeys(row.candidate.family for row in equal if row is not best))
        reason += f", and its highest Q of {best.highest_q:.3g} is below that of {others}"
    elif what == "of all" and plain:
        reason += f", {min(row.order for row in plain) - order} below the best without zeros"
    elif least < order:
        reason += f"; zeros would save only {order - least} pole"
    return best, reason
