"""A bound on work, and the chance to stop it."""

from __future__ import annotations

from collections.abc import Callable

from symcirc.match.problem import Refusal, Refused

#: Products of terms after which a match is given up; a few seconds.
DEFAULT_BOUND = 3_000_000


class Work:
    """Counts products of terms; called between the steps of the algebra."""

    def __init__(self, bound: int = DEFAULT_BOUND, should_stop: Callable[[], bool] = lambda: False) -> None:
        self._left = bound
        self._should_stop = should_stop

    def spend(self, products: int) -> None:
        """Count work that is about to be done.

        Raises Refused, kind "given up", where it is beyond the bound or ``should_stop`` says so.
        """
        self._left -= products
        if self._left < 0 or self._should_stop():
            raise Refused(
                Refusal(
                    "given up",
                    "the design equations of this stage grew too large to be solved",
                    "choose other parts, tie equal parts together, or match a cascade stage by stage",
                )
            )
