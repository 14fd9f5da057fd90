"""Responses as exact transfer functions: prototypes, frequency transformations and second-order shapes.

This layer knows nothing of sheets: it takes exact numbers and expressions. What it refuses it refuses with a
:class:`ResponseError`, to which the caller gives a place.
"""

from symcirc.responses.biquad import SECOND_ORDER_KINDS, second_order
from symcirc.responses.critical import critical
from symcirc.responses.elliptic import elliptic
from symcirc.responses.exact import Coefficients, ResponseError, digits
from symcirc.responses.families import FAMILIES, Family, edge_at
from symcirc.responses.gaussian import gaussian
from symcirc.responses.inverse_chebyshev import inverse_chebyshev
from symcirc.responses.legendre import legendre, legendre_square
from symcirc.responses.linear_phase import linear_phase
from symcirc.responses.prototype import (
    HALF_POWER_DB,
    LARGEST_ORDER,
    Prototype,
    bessel,
    butterworth,
    chebyshev,
)
from symcirc.responses.rough import Rough
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
    "Rough",
    "allpass",
    "bandpass",
    "bandstop",
    "bessel",
    "butterworth",
    "chebyshev",
    "critical",
    "digits",
    "edge_at",
    "elliptic",
    "gaussian",
    "highpass",
    "inverse_chebyshev",
    "legendre",
    "legendre_square",
    "linear_phase",
    "lowpass",
    "second_order",
]
