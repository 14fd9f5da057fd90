"""Steps as a working that the check reads, in plain text, and as LaTeX."""

from __future__ import annotations

import re
from collections.abc import Iterator

from symcirc.steps.model import Step, Steps
from symcirc.transfer.latex import latex, latex_name
from symcirc.transfer.text import text


def equation_text(step: Step) -> str:
    """Return a step's equation in the language of a working.

    >>> from symcirc.transfer.form import Power, Symbol
    >>> equation_text(Step("ratio", "The ratio.", Symbol("k"), Power(Symbol("n"), 2)))
    'k = n^2'
    """
    return f"{text(step.left)} = {text(step.right)}".replace("**", "^")


def equation_latex(step: Step) -> str:
    r"""Return a step's equation in LaTeX's mathematics.

    >>> from symcirc.transfer.form import Divided, Symbol
    >>> equation_latex(Step("law", "", Divided(Symbol("V_a"), Symbol("R1")), Symbol("I_in")))
    '\\frac{V_{a}}{R_{1}} = I_{in}'
    """
    return f"{latex(step.left)} = {latex(step.right)}"


def steps_text(steps: Steps) -> Iterator[str]:
    """Yield the lines of a working: each step's words as a comment, then its equation."""
    if steps.under:
        yield f"under {steps.ask}"
    for step in steps.steps:
        yield f"# {step.words}"
        yield equation_text(step)


def steps_latex(steps: Steps) -> Iterator[str]:
    """Yield each step's words as a sentence and its equation as a display; first, a display of the ask's name.

    The name is there where the lines have to say under which ask's drives they stand.
    """
    if steps.under:
        yield rf"\[ \text{{under }} {latex_name(steps.ask)} \]"
    for step in steps.steps:
        yield _sentence(step.words)
        yield rf"\[ {equation_latex(step)} \]"


def _sentence(words: str) -> str:
    """Return words in LaTeX, the names of voltages, currents and parameters in them as mathematics."""
    return re.sub(
        r"[A-Za-z][A-Za-z0-9]*(?:_[A-Za-z0-9]+)+", lambda name: f"${latex_name(name.group())}$", words
    )
