"""False lines as hands write them, what is to be said of each, and the mend that must come first.

All are about the low-pass with multiple feedback of ``tests/working/calling.py``; the names Vi, Va and Vo are given.
"""

from __future__ import annotations

from typing import NamedTuple

NAMES = "let Vi = V_in, Va = V_a, Vo = V_out\n"


class Slip(NamedTuple):
    """A false line, the mend that comes first, and what its sentence holds."""

    line: str
    mend: str
    sentence: str


ONE = [
    Slip(
        "(Vi - Va)/R1 = s C1 Va + (Va + Vo)/R2 + Va/R3",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "the sign of the current through R2 at node a is wrong",
    ),
    Slip(
        "(Vi - Va)/R1 = s C1 Va - (Va - Vo)/R2 + Va/R3",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "the sign of the current through R2 at node a is wrong",
    ),
    Slip(
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "the current through R3 is missing at node a",
    ),
    Slip(
        "(Vi - Va)/R1 = (Va - Vo)/R2 + Va/R3",
        "(Vi - Va)/R1 = (Va - Vo)/R2 + Va/R3 + s C1 Va",
        "the current through C1 is missing at node a",
    ),
    Slip(
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3 + s C2 Vo",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "the current through C2 does not belong at node a",
    ),
    Slip(
        "(Vi - Va)/R2 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "`R2` stands where `R1` belongs",
    ),
    Slip(
        "(Vi - Va)/R1 = s C1 Vo + (Va - Vo)/R2 + Va/R3",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "`Vo` stands where `Va` belongs",
    ),
    Slip("Va/R3 = s C2 Vo", "Va/R3 = -s C2 Vo", "the sign of the current through C2 at node m is wrong"),
    Slip("Va = -C2 R3 Vo", "Va = -s C2 R3 Vo", "the factor `s` is missing"),
    Slip("Va = -s^2 C2 R3 Vo", "Va = -s C2 R3 Vo", "the exponent of `s^2` is wrong"),
    Slip("Va = -s s C2 R3 Vo", "Va = -s C2 R3 Vo", "the factor `s` is one too many"),
    Slip("Va = -s C2 Vo/R3", "Va = -s C2 Vo R3", "`R3` stands on the wrong side of the fraction line"),
    Slip("Va = -Vo/(s C2 R3)", "Va = -Vo s C2 R3", "`s C2 R3` stands on the wrong side of the fraction line"),
    Slip(
        "Vi/R1 = Va (1/R1 + 1/R2 + R3 + s C1) - Vo/R2",
        "Vi/R1 = Va (1/R1 + 1/R2 + 1/R3 + s C1) - Vo/R2",
        "`R3` is upside down",
    ),
    Slip(
        "Vi/R1 = Va (1/R1 + 1/R2 + 1/R3 + s C1 - Vo/R2)",
        "Vi/R1 = Va (1/R1 + 1/R2 + 1/R3 + s C1) - Vo/R2",
        "holds too much",
    ),
    Slip(
        "Vi/R1 = Va (1/R1 + 1/R2) + 1/R3 + s C1 - Vo/R2",
        "Vi/R1 = Va (1/R1 + 1/R2 + 1/R3 + s C1) - Vo/R2",
        "the bracket closes too early",
    ),
    Slip(
        "Vi = Va + R1 s C1 Va + R1 (1/R2 + 1/R3) Va - R1/R2",
        "Vi = Va + R1 s C1 Va + R1 (1/R2 + 1/R3) Va - R1 Vo/R2",
        "the factor `Vo` is missing",
    ),
    Slip(
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "the factor `R3` is missing",
    ),
    Slip(
        "Vo/Vi = -(R2/R1) / (s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "Vo/Vi = -(R2/R1) / (s C2 (R2 + R3 + R2 R3/R1) + 1 + s^2 C1 C2 R2 R3)",
        "the term `s^2 C1 C2 R2 R3` is missing",
    ),
    Slip(
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1))",
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "the term `1` is missing",
    ),
    Slip(
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R2 R3/R1) + 1)",
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R2 R3/R1 + R3) + 1)",
        "the term `R3` is missing",
    ),
    Slip(
        "Vo/Vi = -(R1/R2) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "Vo/Vi = -R2/R1 / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "is upside down",
    ),
    Slip(
        "Vo/Vi = -R2/R1 / s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1",
        "Vo/Vi = -R2/R1/(s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "a bracket is missing",
    ),
    Slip("Vo = -Va/s C2 R3", "Vo = -Va/(s C2 R3)", "a bracket is missing: `s C2 R3` belongs together"),
    Slip("w0 = 1/sqrt(R1 R3 C1 C2)", "w0 = 1/sqrt(R2 R3 C1 C2)", "`R1` stands where `R2` belongs"),
    Slip("w0 = 1/(R2 R3 C1 C2)", "w0 = 1/sqrt(R2 R3 C1 C2)", "a square root is missing"),
    Slip("w0 = 1/sqrt(R2 C1 C2)", "w0 = 1/sqrt(R2 C1 C2 R3)", "the factor `R3` is missing"),
    Slip(
        "f0 = sqrt(R2 R3 C1 C2)/(2 pi)",
        "f0 = 1/(2 pi sqrt(R2 R3 C1 C2))",
        "stands on the wrong side of the fraction line",
    ),
    Slip(
        "f0 = 1/(pi sqrt(R2 R3 C1 C2))",
        "f0 = 1/(2 pi sqrt(R2 R3 C1 C2))",
        "the factor `2` is missing below the line",
    ),
    Slip(
        "Q = sqrt(R2 R3 C1 C2)/(C2 (R2 + R3 + R2 || R3/R1))",
        "Q = sqrt(R2 R3 C1 C2)/(C2 (R2 + R3 + R2 (R3/R1)))",
        "is written as parallel, and a product belongs here",
    ),
    Slip(
        "f0 = 1/(2 sqrt(R2 R3 C1 C2))",
        "f0 = 1/(2 sqrt(R2 R3 C1 C2) pi)",
        "the factor `pi` is missing below the line",
    ),
    Slip("R1 || R2 = (R1 + R2)/(R1 R2)", "R1 || R2 = R1 R2/(R1 + R2)", "is upside down"),
]
TWO = [
    Slip(
        "(Vi - Va)/R1 = s C1 Va + (Va + Vo)/R2 + Va/R1",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "the sign of the current through R2 at node a is wrong, and `R1` stands where `R3` belongs",
    ),
    Slip(
        "(Vi - Va)/R1 = C1 Va + (Va - Vo)/R2",
        "(Vi - Va)/R1 = s C1 Va + (Va - Vo)/R2 + Va/R3",
        "the factor `s` is missing, and the current through R3 is missing at node a",
    ),
    Slip(
        "Vo/Vi = (R2/R1) / (s^2 C1 C2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R3 R2 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "the factor `R2` is missing",
    ),
    Slip(
        "Vo/Vi = -(R2/R1) / (s C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1))",
        "Vo/Vi = -(R2/R1) / (s^2 C1 C2 R2 R3 + s C2 (R2 + R3 + R2 R3/R1) + 1)",
        "the factor `s` is missing, and the term `1` is missing",
    ),
]
