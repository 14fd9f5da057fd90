"""The derivation of every answer, step by step: as a working in plain text, as LaTeX and as JSON."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from symcirc.derivation import Derivation, Posed
from symcirc.report.envelope import envelope
from symcirc.report.quantities import ask_text
from symcirc.steps import steps_of
from symcirc.steps.text import equation_latex, equation_text, steps_latex, steps_text


def derivation_steps_text(posed: Posed, derivation: Derivation) -> Iterator[str]:
    """Yield the steps of all answers: a working, in which what is no equation is a comment."""
    yield f"# {derivation.sheet.title}"
    for answer in derivation.answers:
        yield ""
        yield f"# {ask_text(answer.ask)}"
        yield from steps_text(steps_of(posed, answer))


def derivation_steps_latex(posed: Posed, derivation: Derivation) -> Iterator[str]:
    """Yield the steps of all answers in LaTeX: sentences and displays."""
    for answer in derivation.answers:
        yield f"% {ask_text(answer.ask)}"
        yield from steps_latex(steps_of(posed, answer))


def derivation_steps_json(posed: Posed, derivation: Derivation) -> dict[str, Any]:
    """Return the steps of all answers: for each its kind, its words, and its equation in text and LaTeX."""
    asks = {
        answer.ask.name: {
            "steps": [
                {
                    "kind": step.kind,
                    "words": step.words,
                    "text": equation_text(step),
                    "latex": equation_latex(step),
                }
                for step in steps_of(posed, answer).steps
            ]
        }
        for answer in derivation.answers
    }
    return envelope(derivation.sheet.title, asks, derivation.remarks)
