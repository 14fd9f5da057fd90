"""Responses as exact transfer functions: prototypes, frequency transformations and second-order shapes.

This layer knows nothing of sheets: it takes exact numbers and expressions. What it refuses it refuses with a
:class:`ResponseError`, to which the caller gives a place.
"""

from symcirc.responses.biquad import SECOND_ORDER_KINDS, second_order
from symcirc.responses.exact import Coefficients, ResponseError, digits
from symcirc.responses.families import FAMILIES, Family, edge_at
from symcirc.responses.prototype import (
    HALF_POWER_DB,
    LARGEST_ORDER,
    Prototype,
    bessel,
    butterworth,
    chebyshev,
)
from symcirc.responses.transformation import Response, allpass, bandpass, bandstop, highpass, lowpass

__all__ = [
    "FAMILIES",
    "HALF_POWER_DB",
    "LARGEST_ORDER",
    "SECOND_ORDER_KINDS",
    "Coefficients",
    "Family",
    "Prototype",
    "Response",
    "ResponseError",
    "allpass",
    "bandpass",
    "bandstop",
    "bessel",
    "butterworth",
    "chebyshev",
    "digits",
    "edge_at",
    "highpass",
    "lowpass",
    "second_order",
]
