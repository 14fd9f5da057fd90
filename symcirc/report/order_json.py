"""A selection of orders as a JSON object."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

from symcirc.complaints import Remark
from symcirc.masks.order import Failure, Row, Selection
from symcirc.report.order_facts import target_line


def order_json(title: str, selection: Selection, remarks: Iterable[Remark]) -> dict[str, Any]:
    """Return the mask's kind, an entry for each family, and the recommendation.

    Losses are in dB and times in seconds; a family that does not meet the mask has no order, and a reason.
    """
    return {
        "stage": title,
        "ask": selection.mask.ask,
        "kind": selection.kind,
        "families": [
            *(_row(selection, row) for row in selection.rows),
            *(_failure(failure) for failure in selection.failures),
        ],
        "recommended": {
            "family": selection.recommended.candidate.family,
            "order": selection.recommended.order,
            "reason": selection.reason,
            "target": target_line(selection, selection.recommended),
        },
        "warnings": [remark.as_json() for remark in remarks],
    }


def _row(selection: Selection, row: Row) -> dict[str, Any]:
    return {
        "family": row.candidate.family + row.candidate.words,
        "order": row.order,
        "pass_loss_db": row.pass_loss_db,
        "stop_loss_db": row.stop_loss_db,
        "highest_q": row.highest_q,
        "delay_variation": row.delay_variation,
        "settling_time": row.settling,
        "target": target_line(selection, row),
        "reason": None,
    }


def _failure(failure: Failure) -> dict[str, Any]:
    return {
        "family": failure.candidate.family + failure.candidate.words,
        "order": None,
        "reason": failure.reason,
    }
