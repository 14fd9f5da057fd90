"""Hand derivations from books hold line by line; with one slip planted the slip's line is judged false."""

from __future__ import annotations

import pytest

from tests.published.stages import STAGES
from tests.working.books import DERIVATIONS, Derivation
from tests.working.calling import checked

SHEETS = {stage.id: stage.sheet for stage in STAGES}

#: A stage, a line of its derivation as printed, and the line with a slip that people make.
SLIPS = [
    # a sign
    ("sallen-key-low-pass-unity", "(Va - Vo)/R2 + s C1 (Va - Vo)", "(Va + Vo)/R2 + s C1 (Va - Vo)"),
    # a factor lost
    (
        "sallen-key-low-pass-unity",
        "Vi = Vo (1 + s C2 (R1 + R2) + s^2 R1 R2 C1 C2)",
        "Vi = Vo (1 + s C2 (R1 + R2) + s^2 R1 R2)",
    ),
    # s lost
    ("sallen-key-low-pass-with-gain", "(V_a - V_p)/R2 = V_p s C2", "(V_a - V_p)/R2 = V_p C2"),
    # a name exchanged for another
    ("sallen-key-low-pass-with-gain", "K = 1 + R4/R3\n", "K = 1 + R3/R4\n"),
    # a term lost in a current law
    ("multiple-feedback-low-pass", "V_a (G1 + G2 + G3 + s C1)", "V_a (G1 + G2 + s C1)"),
    # a parallel pair for a series one
    ("three-zero-compensator", "Zi = R1 || (R3 + 1/(s C3))", "Zi = R1 || R3 + 1/(s C3)"),
    # a bracket
    ("howland-current-source", "V_out = V_p (1 + R4/R3)", "V_out = V_p + R4/R3"),
    # the reciprocal
    ("negative-impedance-converter", "V_out = V_in (1 + R2/Z1)", "V_out = V_in (1 + Z1/R2)"),
    # an exponent
    ("twin-t-with-bootstrapped-foot", "H = (s^2 + 1/(R1 C1)^2)", "H = (s^2 + 1/(R1 C1))"),
    # plus for minus node
    ("general-impedance-converter", "(V_c - V_d)/Z4 = V_d/Z5", "(V_c - V_b)/Z4 = V_a/Z5"),
    # a root lost
    ("tow-thomas-biquad", "w0 = sqrt(R6/(R5 R2 R3 C1 C2))", "w0 = R6/(R5 R2 R3 C1 C2)"),
    # a factor lost
    (
        "instrumentation-amplifier",
        "V_f - V_e = (1 + 2 R2/R1)(V_b - V_a)",
        "V_f - V_e = (1 + R2/R1)(V_b - V_a)",
    ),
    # the sign of a current
    ("multiple-feedback-band-pass", "s C2 V_a = -V_out/R3", "s C2 V_a = V_out/R3"),
    # one input for the other
    (
        "difference-amplifier",
        "V_out = (1 + R2/R1) V_p - (R2/R1) V_a",
        "V_out = (1 + R2/R1) V_a - (R2/R1) V_p",
    ),
]


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=lambda d: d.stage)
def test_a_printed_derivation_holds(derivation: Derivation) -> None:
    result = checked(SHEETS[derivation.stage], derivation.lines)
    assert {line.verdict for line in result.lines} <= {"holds", "defines"}, result.lines
    assert result.missing == ()
    assert result.exit_status == 0
    assert all("units" not in (line.note or "") for line in result.lines)


def test_the_derivations_end_in_a_line_that_follows_or_is_a_root() -> None:
    for derivation in DERIVATIONS:
        last = checked(SHEETS[derivation.stage], derivation.lines).lines[-1]
        assert last.follows is not False, derivation.stage


@pytest.mark.parametrize(("stage", "printed", "slip"), SLIPS, ids=[slip.strip() for _, _, slip in SLIPS])
def test_a_planted_slip_is_judged_false_and_it_is_the_first(stage: str, printed: str, slip: str) -> None:
    derivation = next(d for d in DERIVATIONS if d.stage == stage)
    assert derivation.lines.count(printed) == 1
    place = derivation.lines[: derivation.lines.index(printed)].count("\n") + 1
    result = checked(SHEETS[stage], derivation.lines.replace(printed, slip))
    bad = [line for line in result.lines if line.verdict in ("fails", "carried")]
    assert bad, "no line is judged false"
    assert bad[0].verdict == "fails"
    defines = next(line for line in result.lines if line.line == place).verdict == "defines"
    assert bad[0].line == place or (defines and bad[0].line > place)
    assert result.exit_status == 1
