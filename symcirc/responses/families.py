"""The table of families, and a prototype's edge put at another loss.

A new family is one entry in this table: a function that builds its prototype, and one that moves its edge.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from types import MappingProxyType

import sympy
from sympy import Rational

from symcirc.responses.critical import critical
from symcirc.responses.elliptic import elliptic, moved_elliptic, rough_elliptic
from symcirc.responses.exact import KEPT_DIGITS, ResponseError, digits
from symcirc.responses.gaussian import gaussian, rough_gaussian
from symcirc.responses.inverse_chebyshev import inverse_chebyshev, moved_inverse_chebyshev
from symcirc.responses.legendre import legendre, rough_legendre
from symcirc.responses.linear_phase import linear_phase, rough_linear_phase
from symcirc.responses.prototype import (
    SHORT_ORDER,
    Prototype,
    bessel,
    butterworth,
    chebyshev,
    check_loss,
    rescaled,
)
from symcirc.responses.rough import (
    Rough,
    rough_bessel,
    rough_butterworth,
    rough_chebyshev,
    rough_critical,
    rough_inverse_chebyshev,
)

_FILTERS = ("lowpass", "highpass", "bandpass", "bandstop")


@dataclass(frozen=True)
class Family:
    """A family of responses.

    ``build`` makes a prototype from the order and then, in the order of ``needs``, the family's own numbers
    (``ripple`` in dB or, for linear phase, in degrees; ``stop`` in dB); ``rough`` does so in doubles, with its
    edge anywhere. ``kinds`` are what it can be transformed to. ``edge`` says in words where its edge is.
    ``moved`` makes, of a prototype of the family, the one whose loss at 1 rad/s is so many dB, relative to
    the nominal gain.
    """

    name: str
    needs: tuple[str, ...]
    kinds: tuple[str, ...]
    edge: str
    build: Callable[..., Prototype]
    rough: Callable[..., Rough]
    moved: Callable[[Prototype, sympy.Expr], Prototype]


def edge_at(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    """Return the prototype with its edge, 1 rad/s, moved to where the loss is ``loss_db``.

    Args:
        prototype: of a family in :data:`FAMILIES`.
        loss_db: relative to the nominal gain; an exact number above 0 and at most 100, at least the ripple.

    As exact as the prototype is, but that Chebyshev's sections are rounded to 70 digits too beyond order 6.

    Raises:
        ResponseError: the loss is out of range, or inside the ripple, where the pass band has it many times.

    >>> edge_at(butterworth(2), sympy.Integer(10)).denominator
    (1/3, sqrt(6)/3, 1)
    """
    check_loss(loss_db, "the loss at the edge")
    return replace(FAMILIES[prototype.family].moved(prototype, loss_db), edge_loss_db=loss_db)


def _growth(loss_db: sympy.Expr) -> sympy.Expr:
    """Return 10^(loss/10) - 1: what a loss adds to 1/|H|²."""
    return 10 ** (Rational(1, 10) * loss_db) - 1


def _moved_butterworth(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    """Solve 1 + ω^2n = 10^(loss/10)."""
    n = prototype.order
    return rescaled(butterworth(n), _growth(loss_db) ** Rational(-1, 2 * n))


def _moved_chebyshev(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    """Solve 1 + ε² T_n(ω)² = 10^(loss/10) by T_n(ω) = cosh(n acosh ω), which is in radicals."""
    n, ripple_db = prototype.order, prototype.ripple_db
    beyond = loss_db - ripple_db
    if beyond != 0 and digits(beyond, 20) < 0:
        raise ResponseError(
            f"a loss of {loss_db} dB at the edge is less than the ripple of {ripple_db} dB",
            "give a loss at the edge that is at least the ripple",
        )
    ratio = sympy.sqrt(_growth(loss_db) / _growth(ripple_db))
    root = (ratio + sympy.sqrt(ratio**2 - 1)) ** Rational(1, n)
    factor = 2 / (root + 1 / root)
    return rescaled(chebyshev(n, ripple_db), factor if n <= SHORT_ORDER else digits(factor, KEPT_DIGITS))


def _moved_bessel(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    return bessel(prototype.order, loss_db)


def _moved_gaussian(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    return gaussian(prototype.order, loss_db)


def _moved_legendre(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    return legendre(prototype.order, loss_db)


def _moved_linear_phase(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    return linear_phase(prototype.order, prototype.ripple_deg, loss_db)


def _moved_critical(prototype: Prototype, loss_db: sympy.Expr) -> Prototype:
    return critical(prototype.order, loss_db)


_HALF, _RIPPLE = "half power (-3.01 dB)", "the end of the ripple"
_BOTH = ("ripple", "stop")
_FAMILIES = (
    Family("butterworth", (), _FILTERS, _HALF, butterworth, rough_butterworth, _moved_butterworth),
    Family("chebyshev", ("ripple",), _FILTERS, _RIPPLE, chebyshev, rough_chebyshev, _moved_chebyshev),
    Family(
        "inverse chebyshev",
        ("stop",),
        _FILTERS,
        "the beginning of the stop band",
        inverse_chebyshev,
        rough_inverse_chebyshev,
        moved_inverse_chebyshev,
    ),
    Family("elliptic", _BOTH, _FILTERS, _RIPPLE, elliptic, rough_elliptic, moved_elliptic),
    Family("bessel", (), (*_FILTERS, "allpass"), _HALF, bessel, rough_bessel, _moved_bessel),
    Family("gaussian", (), _FILTERS, _HALF, gaussian, rough_gaussian, _moved_gaussian),
    Family("legendre", (), _FILTERS, _HALF, legendre, rough_legendre, _moved_legendre),
    Family(
        "linear phase", ("ripple",), _FILTERS, _HALF, linear_phase, rough_linear_phase, _moved_linear_phase
    ),
    Family("critical", (), _FILTERS, _HALF, critical, rough_critical, _moved_critical),
)

#: The families by the name that a target gives them.
FAMILIES: Mapping[str, Family] = MappingProxyType({family.name: family for family in _FAMILIES})
