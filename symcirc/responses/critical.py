r"""Critical damping: all poles in one place of the real axis, so that the step response never overshoots."""

from __future__ import annotations

from math import comb

import sympy
from sympy import Integer, Rational

from symcirc.responses.prototype import HALF_POWER_DB, Prototype, check_loss, check_order


def critical(order: int, edge_loss_db: sympy.Expr = HALF_POWER_DB) -> Prototype:
    r"""Return the prototype of coincident real poles, with a loss of ``edge_loss_db`` (half power) at 1 rad/s.

    Args:
        order: 1 to 20.
        edge_loss_db: an exact number, above 0 and at most 100.

    The poles are at :math:`-a` with :math:`(1 + 1/a^2)^n = 10^{loss/10}`: exact for every order.

    Raises:
        ResponseError: the order or the loss is out of range.

    >>> critical(2).denominator
    (1/(-1 + sqrt(2)), 2/sqrt(-1 + sqrt(2)), 1)
    """
    check_order(order)
    check_loss(edge_loss_db, "the loss at the edge")
    square = 1 / (10 ** (Rational(1, 10 * order) * edge_loss_db) - 1)
    pole, one = sympy.sqrt(square), Integer(1)
    sections = (((pole, one),) if order % 2 else ()) + ((square, 2 * pole, one),) * (order // 2)
    denominator = tuple(comb(order, k) * pole ** (order - k) for k in range(order + 1))
    return Prototype("critical", order, sections, denominator[:1], denominator, edge_loss_db)
