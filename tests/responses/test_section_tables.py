"""Pole pairs as the tables of active-filter handbooks print them, f0 and Q a section, all from memory.

A. B. Williams and F. J. Taylor, "Electronic Filter Design Handbook", and D. Johnson and J. Hilburn, "Rapid Practical
Designs of Active Filters" (1975), print such tables; each value here is remembered and must agree to the digits given.
Left out are the rows of which one digit was remembered otherwise (1 dB of orders 4 and 7, Bessel from order 5 on).
Frequencies are in units of the edge: the ripple edge (Chebyshev) or the one of 3 dB. A real pole has no Q.
"""

from __future__ import annotations

import mpmath
import pytest
import sympy

from symcirc.responses import bessel, butterworth, chebyshev
from symcirc.responses.prototype import Prototype

HALF_DB, ONE_DB = sympy.Rational(1, 2), sympy.Integer(1)
#: Family and order: pairs as (f0, Q), a real pole as (f0, None).
SECTIONS = {
    ("butterworth", 2): [("1.0000", "0.7071")],
    ("butterworth", 3): [("1.0000", "1.0000"), ("1.0000", None)],
    ("butterworth", 4): [("1.0000", "0.5412"), ("1.0000", "1.3066")],
    ("butterworth", 5): [("1.0000", "0.6180"), ("1.0000", "1.6180"), ("1.0000", None)],
    ("butterworth", 6): [("1.0000", "0.5176"), ("1.0000", "0.7071"), ("1.0000", "1.9319")],
    ("butterworth", 7): [("1.0000", "0.5550"), ("1.0000", "0.8019"), ("1.0000", "2.2470"), ("1.0000", None)],
    ("butterworth", 8): [
        ("1.0000", "0.5098"),
        ("1.0000", "0.6013"),
        ("1.0000", "0.9000"),
        ("1.0000", "2.5629"),
    ],
    ("chebyshev 0.5 dB", 2): [("1.2313", "0.8637")],
    ("chebyshev 0.5 dB", 3): [("1.0689", "1.7062"), ("0.6265", None)],
    ("chebyshev 0.5 dB", 4): [("0.5970", "0.7051"), ("1.0313", "2.9406")],
    ("chebyshev 0.5 dB", 5): [("0.6905", "1.1778"), ("1.0177", "4.5450"), ("0.3623", None)],
    ("chebyshev 0.5 dB", 6): [("0.3962", "0.6836"), ("0.7681", "1.8104"), ("1.0114", "6.5128")],
    ("chebyshev 0.5 dB", 7): [
        ("0.5039", "1.0916"),
        ("0.8227", "2.5755"),
        ("1.0080", "8.8418"),
        ("0.2562", None),
    ],
    ("chebyshev 0.5 dB", 8): [
        ("0.2967", "0.6766"),
        ("0.5989", "1.6107"),
        ("0.8610", "3.4657"),
        ("1.0059", "11.5308"),
    ],
    ("chebyshev 1 dB", 2): [("1.0500", "0.9565")],
    ("chebyshev 1 dB", 3): [("0.9971", "2.0177"), ("0.4942", None)],
    ("chebyshev 1 dB", 5): [("0.6552", "1.3988"), ("0.9941", "5.5564"), ("0.2895", None)],
    ("chebyshev 1 dB", 6): [("0.3531", "0.7609"), ("0.7468", "2.1980"), ("0.9954", "8.0037")],
    ("chebyshev 1 dB", 8): [
        ("0.2651", "0.7530"),
        ("0.5838", "1.9565"),
        ("0.8506", "4.2661"),
        ("0.9971", "14.2405"),
    ],
    ("bessel", 2): [("1.2720", "0.5773")],
    ("bessel", 3): [("1.4476", "0.6910"), ("1.3227", None)],
    ("bessel", 4): [("1.4302", "0.5219"), ("1.6034", "0.8055")],
}


def built(family: str, order: int) -> Prototype:
    if family == "butterworth":
        return butterworth(order)
    return bessel(order) if family == "bessel" else chebyshev(order, HALF_DB if "0.5" in family else ONE_DB)


@pytest.mark.parametrize(("family", "order"), SECTIONS)
def test_sections_agree_with_the_handbooks_tables(family: str, order: int) -> None:
    coefficients = [mpmath.mpf(sympy.N(c, 40)) for c in built(family, order).denominator]
    poles = mpmath.polyroots(coefficients[::-1], maxsteps=200, extraprec=200)
    found = []
    for pole in poles:
        if abs(mpmath.im(pole)) < 1e-20:
            found.append((abs(pole), None))
        elif mpmath.im(pole) > 0:
            found.append((abs(pole), abs(pole) / (-2 * mpmath.re(pole))))
    found.sort(key=lambda one: (one[1] is None, one[1] or 0))
    printed = SECTIONS[family, order]
    assert len(found) == len(printed)
    for (f0, q), (printed_f0, printed_q) in zip(found, printed, strict=True):
        assert abs(f0 - mpmath.mpf(printed_f0)) <= mpmath.mpf("0.000051"), (f0, q)
        assert (q is None) == (printed_q is None)
        if q is not None and printed_q is not None:
            assert abs(q - mpmath.mpf(printed_q)) <= mpmath.mpf("0.000051"), (f0, q)
