"""Step lists put before the check of workings."""

from __future__ import annotations

from symcirc.complaints import Source
from symcirc.derivation import Derivation, Posed, derive, pose
from symcirc.sheet import read_sheet
from symcirc.steps import Steps, steps_of
from symcirc.steps.model import STATED
from symcirc.steps.text import equation_text, steps_text
from symcirc.transfer.form import Form, Negative, polynomial_in_s, quotient
from symcirc.transfer.standard import monic_forms
from symcirc.transfer.text import text
from symcirc.working.check import check_posed


def derived(sheet: str) -> tuple[Posed, Derivation]:
    """Return a sheet made ready and its answers."""
    posed = pose(read_sheet(Source("a.stage", sheet)))
    return posed, derive(posed)


def step_lists(sheet: str) -> list[Steps]:
    """Return the steps of every answer of a sheet."""
    posed, derivation = derived(sheet)
    return [steps_of(posed, answer) for answer in derivation.answers]


def judge(posed: Posed, derivation: Derivation) -> int:
    """Assert that every line of every answer's steps holds, and follows unless it states a fact of the circuit.

    The last line must be the answer's own standard form. Return how many lines were judged.
    """
    judged = 0
    for answer in derivation.answers:
        steps = steps_of(posed, answer)
        working = "\n".join(steps_text(steps))
        lines = check_posed(posed, Source("steps.work", working)).lines
        assert [line.text for line in lines] == [equation_text(step) for step in steps.steps]
        for line, step in zip(lines, steps.steps, strict=True):
            assert line.verdict == "holds", (line, working)
            assert line.follows or step.kind in STATED, (line, working)
        assert lines[-1].text == f"{answer.ask.name} = {_monic(answer)}"
        judged += len(lines)
    return judged


def _monic(answer) -> str:
    forms = monic_forms(answer.function)
    above, below = (polynomial_in_s(list(side)) for side in (forms.numerator, forms.denominator))
    form: Form = quotient([above.operand if isinstance(above, Negative) else above], [below])
    return text(Negative(form) if isinstance(above, Negative) else form).replace("**", "^")
