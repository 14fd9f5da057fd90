"""A derivation as the design's JSON object."""

from __future__ import annotations

from typing import Any

from symcirc.derivation import Answer, Derivation
from symcirc.nodal.text import equation_text
from symcirc.report.numbers import numbers_for
from symcirc.transfer.evaluate import coefficients
from symcirc.transfer.standard import coefficient_forms, monic_forms, texts


def derive_json(derivation: Derivation) -> dict[str, Any]:
    """Return the transfer functions as strings, ascending powers of s."""
    return _object(derivation, {a.ask.name: _symbols(a) for a in derivation.answers})


def values_json(derivation: Derivation) -> dict[str, Any]:
    """Return the coefficients for the fixed numbers; raises Complaint where one of them is missing."""
    return _object(derivation, {a.ask.name: _values(derivation, a) for a in derivation.answers})


def equations_json(derivation: Derivation) -> dict[str, Any]:
    """Return the nodal equations that every answer is solved from, as strings."""
    asks = {
        a.ask.name: {"equations": [equation_text(e) for e in a.system.equations]} for a in derivation.answers
    }
    return _object(derivation, asks)


def _object(derivation: Derivation, asks: dict[str, Any]) -> dict[str, Any]:
    warnings = [remark.as_json() for remark in derivation.remarks]
    return {"stage": derivation.sheet.title, "ask": asks, "warnings": warnings}


def _symbols(answer: Answer) -> dict[str, Any]:
    function = answer.function
    plain, monic = coefficient_forms(function), monic_forms(function)
    return {
        "numerator": texts(plain.numerator),
        "denominator": texts(plain.denominator),
        "monic": {"numerator": texts(monic.numerator), "denominator": texts(monic.denominator)},
        "order": function.order,
    }


def _values(derivation: Derivation, answer: Answer) -> dict[str, Any]:
    numerator, denominator = coefficients(answer.function, numbers_for(derivation.sheet, answer))
    return {"numerator": list(numerator) or [0.0], "denominator": list(denominator)}
