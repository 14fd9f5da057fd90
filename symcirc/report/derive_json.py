"""A derivation as the design's JSON object."""

from __future__ import annotations

from typing import Any

from symcirc.derivation import Answer, BigAnswer, Derivation
from symcirc.nodal import build_system
from symcirc.nodal.text import equation_text
from symcirc.report.big import sequence_of
from symcirc.report.envelope import envelope
from symcirc.report.numbers import expanded_answers, numbers_for
from symcirc.transfer.evaluate import coefficients
from symcirc.transfer.standard import coefficient_forms, monic_forms, texts


def derive_json(derivation: Derivation) -> dict[str, Any]:
    """Return the transfer functions as strings, ascending powers of s."""
    return _object(derivation, {a.ask.name: _answer(derivation, a) for a in derivation.answers})


def values_json(derivation: Derivation) -> dict[str, Any]:
    """Return the coefficients for the fixed numbers; raises Complaint where one of them is missing."""
    return _object(derivation, {a.ask.name: _values(derivation, a) for a in expanded_answers(derivation)})


def equations_json(derivation: Derivation) -> dict[str, Any]:
    """Return the nodal equations that every answer is solved from, as strings."""
    asks = {}
    for answer in derivation.answers:
        system = build_system(derivation.circuit, answer.setup)
        asks[answer.ask.name] = {"equations": [equation_text(equation) for equation in system.equations]}
    return _object(derivation, asks)


def _object(derivation: Derivation, asks: dict[str, Any]) -> dict[str, Any]:
    return envelope(derivation.sheet.title, asks, derivation.remarks)


def _answer(derivation: Derivation, answer: Answer | BigAnswer) -> dict[str, Any]:
    return _big(derivation, answer) if isinstance(answer, BigAnswer) else _symbols(answer)


def _big(derivation: Derivation, answer: BigAnswer) -> dict[str, Any]:
    """A big answer: the coefficients in terms of ``definitions``, each in terms of those before it."""
    sequence = sequence_of(derivation, answer)
    definitions = [list(definition) for definition in sequence.definitions]
    if sequence.in_s:
        over, under = sequence.numerator[0], sequence.denominator[0]
        return {"definitions": definitions, "numerator_in_s": over, "denominator_in_s": under}
    highest = sequence.denominator[-1]
    return {
        "definitions": definitions,
        "numerator": list(sequence.numerator),
        "denominator": list(sequence.denominator),
        "monic": {
            "numerator": [c if c == "0" else f"({c})/({highest})" for c in sequence.numerator],
            "denominator": [*(f"({c})/({highest})" for c in sequence.denominator[:-1]), "1"],
        },
        "order": len(sequence.denominator) - 1,
    }


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
