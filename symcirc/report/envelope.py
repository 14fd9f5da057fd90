"""The JSON object that all verbs about asks print: the stage's title, an entry for each ask, the warnings."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from symcirc.complaints import Remark


def envelope(title: str, asks: Mapping[str, Any], remarks: Iterable[Remark]) -> dict[str, Any]:
    """Return the design's object around the entries of the asks."""
    return {"stage": title, "ask": dict(asks), "warnings": [remark.as_json() for remark in remarks]}
