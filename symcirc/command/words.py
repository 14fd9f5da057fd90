"""The words of the command line: verbs, options, and the help with one worked example a verb."""

from __future__ import annotations

import argparse
from collections.abc import Sequence
from typing import NoReturn

from symcirc import __version__

OVERVIEW = """\
From a stage sheet (one text file: a circuit and what is asked of it) to its transfer function,
its standard form, and the design equations for a target.

  stagewright derive stage.stage             the transfer function of everything that is asked
  stagewright match  stage.stage             the design equations and part values for the target
  stagewright check  stage.stage hand.work   whether hand algebra is true of the circuit, line by line

`stagewright VERB --help` shows each verb with an example. SHEET may be - for standard input.
Exit status: 0 done, 1 the target cannot be met or a line is false, 2 something to mend, 70 a fault of the program.
"""
DERIVE = """\
Derive the transfer function of everything that the sheet asks, exactly, in its parts.
Every answer is checked against a numeric solve of the circuit before it is printed.

example: a first-order low-pass, from standard input
  printf 'in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in\\n' | stagewright derive -
"""
MATCH = """\
Solve for the parts that make the stage meet the sheet's target: design equations in the order in
which a person computes them, the conditions inside which they have a real answer, and the values.

example: R1 of a first-order low-pass
  printf 'in -- R1 -- out -- C1 -- gnd\\nfix C1 = 10 nF\\nask H = V_out/V_in\\n' > lp.stage
  echo 'target H: lowpass butterworth, order 1, edge 1 kHz' >> lp.stage
  stagewright match lp.stage
"""
CHECK = """\
Judge a working, a person's hand algebra, line by line: is it true of the circuit, and does it
follow from the lines above? `let Vo = V_out` gives a name; a space may stand for a product; a .tex
file's display equations are read as well.

example: a working with a false line
  printf 'in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in\\n' > lp.stage
  printf '(V_in - V_out)/R1 = s C1 V_out\\nV_out/V_in = 1/(1 - s R1 C1)\\n' > lp.work
  stagewright check lp.stage lp.work || true
"""


class Words(argparse.ArgumentParser):
    """An argument parser whose complaints are two lines: what is wrong, and what would mend it."""

    def error(self, message: str) -> NoReturn:
        """Say what is wrong with the call and leave with status 2."""
        self.exit(2, f"stagewright: {message}\nmend: see `{self.prog} --help`\n")


def read_words(arguments: Sequence[str] | None) -> argparse.Namespace:
    """Return the verb, the sheet and the options of a call."""
    parser = Words(
        prog="stagewright", description=OVERVIEW, formatter_class=argparse.RawDescriptionHelpFormatter
    )
    parser.add_argument("--version", action="version", version=f"stagewright {__version__}")
    verbs = parser.add_subparsers(dest="verb", required=True, metavar="VERB")
    derive = _verb(verbs, "derive", "the transfer function of everything that is asked", DERIVE)
    derive.add_argument("--ask", metavar="NAME", help="only this ask")
    form = derive.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--latex", action="store_true", help="print LaTeX")
    what = derive.add_mutually_exclusive_group()
    what.add_argument("--equations", action="store_true", help="print the nodal equations that are solved")
    what.add_argument("--steps", action="store_true", help="print the derivation line by line")
    what.add_argument("--values", action="store_true", help="print coefficients for the fixed numbers")
    what.add_argument("--terms", action="store_true", help="count the products, without expanding any")
    what.add_argument(
        "--largest", type=_count, metavar="K", help="the K largest products of every coefficient"
    )
    what.add_argument("--shift", action="store_true", help="what the amplifiers' gain and gbw change")
    derive.add_argument("--most", type=_count, metavar="N", help="expand an answer of up to N products")
    derive.add_argument("--real", action="store_true", help="count the amplifiers' gain and gbw")
    match = _verb(verbs, "match", "the design equations and part values for the target", MATCH)
    match.add_argument("--ask", metavar="NAME", help="the target of this ask")
    form = match.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--latex", action="store_true", help="print LaTeX")
    check = _verb(verbs, "check", "whether hand algebra is true of the circuit", CHECK)
    check.add_argument("working", metavar="WORKING", help="the working, or - for standard input")
    form = check.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--latex", action="store_true", help="print LaTeX")
    check.add_argument("--real", action="store_true", help="count the amplifiers' gain and gbw")
    return parser.parse_args(arguments)


def _count(text: str) -> int:
    if not text.isascii() or not text.isdigit() or not 0 < int(text[:12]) < 10**10:
        raise argparse.ArgumentTypeError(f"{text!r} is not a whole number from 1")
    return int(text)


def _verb(verbs: argparse._SubParsersAction[Words], name: str, summary: str, description: str) -> Words:
    verb = verbs.add_parser(
        name, help=summary, description=description, formatter_class=argparse.RawDescriptionHelpFormatter
    )
    verb.add_argument("sheet", metavar="SHEET", help="the stage sheet, or - for standard input")
    return verb
