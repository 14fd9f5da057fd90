"""Second-order shapes by ω0 and Q, which are what a second-order target gives."""

from __future__ import annotations

import sympy

from symcirc.responses.exact import ResponseError
from symcirc.responses.transformation import Response, check_positive

SECOND_ORDER_KINDS = ("lowpass", "highpass", "bandpass", "bandstop", "allpass")


def second_order(kind: str, w0: sympy.Expr, q: sympy.Expr) -> Response:
    """Return the second-order response of a kind, with a nominal gain of 1.

    Args:
        kind: lowpass, highpass, bandpass, bandstop (a notch with its zeros at ω0) or allpass.
        w0: ω0 in rad/s, an exact number or an expression.
        q: the quality factor Q, likewise.

    The nominal gain is the magnitude at 0, at infinity, at ω0, at both ends, and everywhere, in that order; a
    low-pass or high-pass with a Q above 0.71 peaks above it. The all-pass has the gain +1 at 0.

    Raises:
        ResponseError: the kind is unknown, or ω0 or Q is known not to be positive.

    >>> w, q = sympy.symbols("w Q", positive=True)
    >>> second_order("bandpass", w, q)
    Response(numerator=(0, w/Q), denominator=(w**2, w/Q, 1), kind='bandpass')
    """
    check_positive(w0, "the frequency f0")
    check_positive(q, "Q")
    zero, one = sympy.S.Zero, sympy.S.One
    square, middle = w0**2, w0 / q
    numerators = {
        "lowpass": (square,),
        "highpass": (zero, zero, one),
        "bandpass": (zero, middle),
        "bandstop": (square, zero, one),
        "allpass": (square, -middle, one),
    }
    if kind not in numerators:
        raise ResponseError(f"there is no second-order {kind}", "write " + " or ".join(SECOND_ORDER_KINDS))
    return Response(numerators[kind], (square, middle, one), kind)
