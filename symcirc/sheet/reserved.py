"""The names that formulas keep for themselves."""

from __future__ import annotations

from symcirc.complaints import Complaint, Place

#: Names that mean something in every formula.
RESERVED = {"s": "the complex frequency", "pi": "the number pi", "sqrt": "the square root"}


def check_name(name: str, place: Place) -> None:
    """Raise Complaint for a name that formulas keep for themselves.

    >>> from symcirc.complaints import Source
    >>> try:
    ...     check_name("V_out", Place(1, 8, 13, Source("a.stage", "choose V_out")))
    ... except Complaint as complaint:
    ...     print(complaint.cause)
    `V_out` is kept for a voltage
    """
    meaning = RESERVED.get(name) or {"V_": "a voltage", "I_": "a current"}.get(name[:2])
    if meaning:
        raise Complaint(place, f"`{name}` is kept for {meaning}", "choose another name")
