"""The least order of one family whose response, its frequencies given, meets a mask."""

from __future__ import annotations

from collections.abc import Callable

from symcirc.complaints import Complaint
from symcirc.masks.curve import SLACK_DB, Curve
from symcirc.masks.mask import Band, Mask
from symcirc.masks.order import exact_curve
from symcirc.masks.placing import Spot
from symcirc.responses import LARGEST_ORDER, Prototype


def least_order(mask: Mask, spot: Spot, build: Callable[[int], Prototype]) -> int:
    """Return the least order whose prototype, put at its spot, meets every limit of a mask.

    Args:
        mask: the limits.
        spot: the kind with its edge, or its centre and bandwidth, in rad/s.
        build: makes the prototype of an order, with its edge at 1 rad/s.

    Raises Complaint, at the limit that is missed by most where the nearest order is taken, if there is no such order.
    """
    nearest: tuple[float, int, Band, float] | None = None
    for order in range(1, LARGEST_ORDER + 1):
        curve = exact_curve(build(order))
        missed = [(_missed(band, spot, curve), band) for band in mask.bands]
        most, band = max(missed, key=lambda pair: pair[0])
        if most <= SLACK_DB:
            return order
        if nearest is None or most < nearest[0]:
            nearest = most, order, band, _worst(band, spot, curve)
    assert nearest is not None
    _, order, band, loss = nearest
    raise Complaint(
        band.place,
        f"no order up to {LARGEST_ORDER} of this target meets the limits; order {order} comes nearest, and has a loss "
        f"of {loss:.4g} dB here",
        "move the edge, take another family (stagewright order compares them), or change the limit",
    )


def _worst(band: Band, spot: Spot, curve: Curve) -> float:
    """Return the loss in dB that is the worst in a band: the greatest where it must be small, else the least."""
    stretch = spot.mapped(band.low, band.high)
    return curve.most(*stretch) if band.passes else curve.least(*stretch)


def _missed(band: Band, spot: Spot, curve: Curve) -> float:
    """Return by how many dB a limit is missed; negative where it is met with something to spare."""
    worst = _worst(band, spot, curve)
    return worst - band.decibels if band.passes else band.decibels - worst
