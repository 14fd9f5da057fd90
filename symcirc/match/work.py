"""A bound on work, and the chance to stop it."""

from __future__ import annotations

from collections.abc import Callable

from symcirc.match.problem import Refusal, Refused

#: Products of terms after which a match is given up; some ten seconds.
DEFAULT_BOUND = 3_000_000
#: Products of terms that one step may take; a way that needs more is left.
STEP_BOUND = 100_000


class StepTooLarge(Exception):
    """A step of the algebra would take too long; another way may be shorter."""


class Work:
    """Counts products of terms; called between the steps of the algebra."""

    def __init__(self, bound: int = DEFAULT_BOUND, should_stop: Callable[[], bool] = lambda: False) -> None:
        self._bound = bound
        self._left = bound
        self._should_stop = should_stop

    def again(self, most: int) -> Work:
        """Return a count from the start, with the same bound but at most another."""
        return Work(min(self._bound, most), self._should_stop)

    def spend(self, products: int) -> None:
        """Count work that is about to be done.

        Raises StepTooLarge where it is too much for one step, and Refused, kind "given up", where all together
        is beyond the bound or ``should_stop`` says so.
        """
        if products > STEP_BOUND:
            raise StepTooLarge
        self.count(products)

    def count(self, products: int) -> None:
        """Count work of any size; raises Refused as :meth:`spend` does."""
        self._left -= products
        if self._left < 0 or self._should_stop():
            raise Refused(given_up())


def given_up() -> Refusal:
    """Return the refusal of a match that takes too long.

    >>> given_up().kind
    'given up'
    """
    return Refusal(
        "given up",
        "the design equations of this stage grew too large to be solved",
        "choose other parts, tie equal parts together, or match a cascade stage by stage",
    )
