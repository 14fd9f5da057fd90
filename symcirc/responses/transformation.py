"""From a prototype to the response that is wanted: low-pass, high-pass, band-pass, band-stop, all-pass.

Everything is done on lists of coefficients, with the binomials written out, so that symbols for the
frequencies stay as they are and forty poles take no longer than a moment. Frequencies are in rad/s and may be
exact numbers or expressions in positive symbols, such as ``2*pi*f0``.

Source of the transformations, from memory: A. I. Zverev, "Handbook of Filter Synthesis" (1967), chapter 4.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import comb

import sympy

from symcirc.responses.exact import Coefficients, ResponseError, over, scaled
from symcirc.responses.prototype import Prototype


@dataclass(frozen=True)
class Response:
    """A transfer function: polynomials in s (rad/s), ascending powers, the denominator monic.

    The numerator is as long as its degree needs, and scaled so that the nominal gain is 1: the magnitude at 0
    (low-pass, all-pass), at infinity (high-pass), at the centre (band-pass), at both ends (band-stop); where
    an even order has ripple, the maximum of the pass band instead. ``kind`` is lowpass, highpass, bandpass,
    bandstop or allpass.
    """

    numerator: Coefficients
    denominator: Coefficients
    kind: str

    @property
    def order(self) -> int:
        """The number of poles; a band-pass or band-stop has two for each of its prototype's."""
        return len(self.denominator) - 1


def lowpass(prototype: Prototype, edge: sympy.Expr) -> Response:
    """Return the low-pass with its edge at ``edge`` rad/s: s becomes s/edge.

    Raises:
        ResponseError: the edge is known not to be positive.

    >>> from symcirc.responses.prototype import butterworth
    >>> f = sympy.Symbol("f", positive=True)
    >>> lowpass(butterworth(2), 2 * sympy.pi * f).denominator
    (4*pi**2*f**2, 2*sqrt(2)*pi*f, 1)
    """
    check_positive(edge, "the edge")
    n = prototype.order
    return Response(scaled(prototype.numerator, n, edge), scaled(prototype.denominator, n, edge), "lowpass")


def highpass(prototype: Prototype, edge: sympy.Expr) -> Response:
    """Return the high-pass with its edge at ``edge`` rad/s: s becomes edge/s.

    Raises:
        ResponseError: the edge is known not to be positive.

    >>> from symcirc.responses.prototype import butterworth
    >>> highpass(butterworth(2), sympy.Integer(5))
    Response(numerator=(0, 0, 1), denominator=(25, 5*sqrt(2), 1), kind='highpass')
    """
    check_positive(edge, "the edge")
    numerator, denominator = _inverted(prototype)
    n = prototype.order
    return Response(scaled(numerator, n, edge), scaled(denominator, n, edge), "highpass")


def bandpass(prototype: Prototype, centre: sympy.Expr, bandwidth: sympy.Expr) -> Response:
    """Return the band-pass about a geometric centre, both in rad/s: s becomes (s² + centre²)/(bandwidth s).

    The two edges lie ``bandwidth`` apart, and their product is the square of the centre.

    Raises:
        ResponseError: the centre or the bandwidth is known not to be positive.

    >>> from symcirc.responses.prototype import butterworth
    >>> w, b = sympy.symbols("w b", positive=True)
    >>> bandpass(butterworth(1), w, b)
    Response(numerator=(0, b), denominator=(w**2, b, 1), kind='bandpass')
    """
    check_positive(centre, "the centre")
    check_positive(bandwidth, "the bandwidth")
    return Response(
        _trimmed(_on_band(_padded(prototype), centre, bandwidth)),
        _on_band(prototype.denominator, centre, bandwidth),
        "bandpass",
    )


def bandstop(prototype: Prototype, centre: sympy.Expr, bandwidth: sympy.Expr) -> Response:
    """Return the band-stop about a geometric centre, both in rad/s: s becomes bandwidth s/(s² + centre²).

    The two edges lie ``bandwidth`` apart, and their product is the square of the centre.

    Raises:
        ResponseError: the centre or the bandwidth is known not to be positive.

    >>> from symcirc.responses.prototype import butterworth
    >>> w, b = sympy.symbols("w b", positive=True)
    >>> bandstop(butterworth(1), w, b)
    Response(numerator=(w**2, 0, 1), denominator=(w**2, b, 1), kind='bandstop')
    """
    check_positive(centre, "the centre")
    check_positive(bandwidth, "the bandwidth")
    numerator, denominator = _inverted(prototype)
    return Response(
        _on_band(numerator, centre, bandwidth), _on_band(denominator, centre, bandwidth), "bandstop"
    )


def allpass(prototype: Prototype, edge: sympy.Expr) -> Response:
    """Return the all-pass D(-s)/D(s) with the denominator D of the low-pass with its edge at ``edge`` rad/s.

    Its gain is 1 at zero, its magnitude 1 everywhere, its phase twice that of the low-pass: with a Bessel
    prototype it is the maximally flat delay equaliser, with twice the delay of the Bessel low-pass whose half
    power is at the edge.

    Raises:
        ResponseError: the edge is known not to be positive.

    >>> from symcirc.responses.prototype import bessel
    >>> allpass(bessel(1), sympy.Integer(7))
    Response(numerator=(7, -1), denominator=(7, 1), kind='allpass')
    """
    denominator = lowpass(prototype, edge).denominator
    return Response(tuple((-1) ** k * c for k, c in enumerate(denominator)), denominator, "allpass")


def check_positive(quantity: sympy.Expr, what: str) -> None:
    """Refuse a quantity that is known to be no positive finite number; a free symbol is let through."""
    if quantity.is_positive is False or quantity.is_finite is False:
        raise ResponseError(
            f"{what} must be positive, and it is {quantity}", f"give a positive value as {what}"
        )


def _padded(prototype: Prototype) -> Coefficients:
    """Return the numerator with zeros up to the order."""
    missing = prototype.order + 1 - len(prototype.numerator)
    return prototype.numerator + (sympy.S.Zero,) * missing


def _trimmed(coefficients: Sequence[sympy.Expr]) -> Coefficients:
    """Return the coefficients without zeros behind the last that is not."""
    last = max((k for k, c in enumerate(coefficients) if c != 0), default=0)
    return tuple(coefficients[: last + 1])


def _inverted(prototype: Prototype) -> tuple[Coefficients, Coefficients]:
    """Return numerator and monic denominator with 1/s for s."""
    first = prototype.denominator[0]
    numerator = tuple(over(c, first) for c in reversed(_padded(prototype)))
    return numerator, tuple(over(c, first) for c in reversed(prototype.denominator))


def _on_band(coefficients: Sequence[sympy.Expr], centre: sympy.Expr, bandwidth: sympy.Expr) -> Coefficients:
    """Return Σ c_k (s² + centre²)^k (bandwidth s)^(n-k), with the binomials written out."""
    n = len(coefficients) - 1
    terms: list[list[sympy.Expr]] = [[] for _ in range(2 * n + 1)]
    for k, c in enumerate(coefficients):
        if c == 0:
            continue
        for j in range(k + 1):
            term = c * bandwidth ** (n - k) * (comb(k, j) * centre ** (2 * (k - j)))
            terms[2 * j + n - k].append(term)
    return tuple(sympy.Add(*parts) for parts in terms)
