"""What a match says of a cascade: what each stage takes of the target, and why."""

from __future__ import annotations

import math
from typing import Any

import sympy

from symcirc.cascade.factors import Factor
from symcirc.cascade.search import Found, StageMatch, section_words, stage_words
from symcirc.complaints import listed
from symcirc.match.formula import equation_text
from symcirc.report.match_facts import number_json
from symcirc.transfer.engineering import engineering


def stage_line(match: StageMatch) -> str:
    """Return the line that heads a stage: its nodes, its poles and zeros, its gain."""
    section = match.section
    words = [_pole_words(pole, match) for pole in section.poles]
    words += [f"zeros at {_frequency(zero, match)}" for zero in section.zeros if zero.degree == 2]
    words += [f"a zero at {_frequency(zero, match)}" for zero in section.zeros if zero.degree == 1]
    if section.at_zero:
        words.append(f"{section.at_zero} {'zero' if section.at_zero == 1 else 'zeros'} at 0")
    if match.gain is not None:
        words.append(f"gain {_gain_text(match.gain)}" + (" (its share)" if match.shares else ""))
    return f"{stage_words(match.stage)}: {', '.join(words)}"


def _pole_words(pole: Factor, match: StageMatch) -> str:
    if pole.degree == 1:
        return f"a real pole at {_frequency(pole, match)}"
    return f"poles at {_frequency(pole, match)} with Q = {pole.q:.5g}"


def _frequency(factor: Factor, match: StageMatch) -> str:
    """Return a factor's frequency in Hz; times the symbol of the target where that has one."""
    symbols = sorted(str(x) for c in factor.coefficients for x in c.free_symbols)
    hertz = factor.omega / (2 * math.pi)
    return f"{hertz:.5g}*{symbols[0]}".removeprefix("1*") if symbols else engineering(hertz, "Hz")


def _gain_text(gain: sympy.Expr) -> str:
    return equation_text(gain) if gain.free_symbols else f"{float(gain):.6g}"


def choice_sentence(found: Found) -> str:
    """Return why each stage has the poles that it has, and how the gain was shared."""
    with_poles = [match for match in found.stages if match.section.poles]
    taken = listed(f"stage {match.stage.number} takes {section_words(match.section)}" for match in with_poles)
    return f"{taken}: {_order_words(found)}; {_gain_words(found)}"


def _order_words(found: Found) -> str:
    if found.reason is None:
        return "the order of Q, the lowest first, so that no stage in front overloads where a later one peaks"
    place, section, refusal = found.reason
    words = section_words(section)
    return (
        "the first assignment that has real values, counted from the order of Q: there "
        f"stage {found.stages[place].stage.number} would take {words}, but {refusal.cause}"
    )


def _gain_words(found: Found) -> str:
    sharing = [match for match in found.stages if match.shares]
    if not sharing:
        return "each stage has the gain that its parts give"
    numbers = listed(str(match.stage.number) for match in sharing)
    if len(sharing) == 1:
        return f"stage {numbers} has the gain that the others leave to it"
    return f"stages {numbers} share equally what gain the others leave"


def stage_json(match: StageMatch) -> dict[str, Any]:
    """Return one stage as an entry: nodes, poles as (f0 in Hz, Q), its own target with its gain in it."""
    piece = match.stage.piece
    return {
        "from": piece.first,
        "to": piece.last,
        "target": {
            "numerator": [number_json(c) for c in match.goal.numerator],
            "denominator": [number_json(c) for c in match.goal.denominator],
        },
        "q": [pole.q for pole in match.section.poles],
        "gain": None if match.gain is None else number_json(match.gain),
    }
