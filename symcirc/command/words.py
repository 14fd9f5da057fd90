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
  stagewright order  stage.stage             the least order of every family for the limits
  stagewright match  stage.stage             the design equations and part values for the target
  stagewright check  stage.stage hand.work   whether hand algebra is true of the circuit, line by line
  stagewright values stage.stage             preferred values for the target, ranked
  stagewright draw   stage.stage -o it.svg   the circuit as a picture, proved to be the circuit
  stagewright plot   stage.stage -o it.svg   the response as a picture, with the target and the limits
  stagewright note   stage.stage -o it.pdf   the design note, which a reviewer can check line by line

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
ORDER = """\
Read the sheet's limits, the mask, and find for every family of responses the least order that meets
it: its worst losses, highest Q, how much its delay varies and how long a step takes to settle.

example: an anti-alias mask
  printf 'in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in\\n' > mask.stage
  echo 'limit H: loss <= 1 dB below 2 kHz' >> mask.stage
  echo 'limit H: loss >= 40 dB above 9 kHz' >> mask.stage
  stagewright order mask.stage
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


VALUES = """\
Search the values that can be bought (`parts` lines) for the sets that meet the sheet's target best.
Chosen parts take every value of their range; for each combination of them the design equations
give the exact values of the others, and everything within a window around these is tried. Ctrl-C
shows the best so far (status 130).

example: E12 for a first-order low-pass, and the sheet with the best set put in
  printf 'in -- R1 -- out -- C1 -- gnd\\nchoose C1\\nask H = V_out/V_in\\n' > lp.stage
  echo 'target H: lowpass butterworth, order 1, edge 1 kHz' >> lp.stage
  printf 'parts R: E12\\nparts C: E6, from 1 nF to 100 nF\\n' >> lp.stage
  stagewright values lp.stage --best 3 --write lp_bought.stage
"""


DRAW = """\
Draw the circuit: the drive at the left, the output at the right, ground down. The finished drawing is
read back, line by line, and compared with the sheet before it is written. FILE ends in .svg, .png or .pdf.

example: a first-order low-pass, from standard input
  printf 'in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in\\n' | stagewright draw - -o lp.svg
"""


PLOT = """\
Plot the response: the target, the stage with the sheet's values or those that match finds, and with
real amplifiers where the sheet gives their gain or gbw; what the limits exclude is hatched. FILE ends
in .svg, .png or .pdf; --csv writes the same curves as numbers.
WHAT holds, with commas between, magnitude, passband (the gain near its nominal value), phase, delay
(group delay), step (response to a unit step), poles (map of poles and zeros).

example: a first-order low-pass
  printf 'in -- R1 -- out -- C1 -- gnd\\nfix R1 = 1 kohm, C1 = 10 nF\\nask H = V_out/V_in\\n' > lp.stage
  stagewright plot lp.stage --what magnitude,phase -o lp.svg
"""


NOTE = """\
Write the design note: circuit, requirement, assumptions, derivation, design equations, values, response,
checks, the sheet. Every displayed equation of the circuit was judged to hold by the program's own check.
FILE ends in .tex (with its figures beside it), .html (one file) or .pdf.

example: the note of a first-order low-pass
  printf 'in -- R1 -- out -- C1 -- gnd\\nfix C1 = 10 nF\\nask H = V_out/V_in\\n' > lp.stage
  echo 'target H: lowpass butterworth, order 1, edge 1 kHz' >> lp.stage
  stagewright note lp.stage -o lp_note.html
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
    match.add_argument(
        "--workbook", metavar="FILE", help="write a spreadsheet that recalculates, FILE.xlsx, as well"
    )
    match.add_argument("--replace", action="store_true", help="write over a file that is there")
    form = match.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--latex", action="store_true", help="print LaTeX")
    order = _verb(verbs, "order", "the least order of every family for the mask", ORDER)
    order.add_argument("--ask", metavar="NAME", help="the limits of this ask")
    order.add_argument("--json", action="store_true", help="print one JSON object")
    check = _verb(verbs, "check", "whether hand algebra is true of the circuit", CHECK)
    check.add_argument("working", metavar="WORKING", help="the working, or - for standard input")
    form = check.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--latex", action="store_true", help="print LaTeX")
    check.add_argument("--real", action="store_true", help="count the amplifiers' gain and gbw")
    values = _verb(verbs, "values", "preferred values for the target, ranked", VALUES)
    values.add_argument("--ask", metavar="NAME", help="the target of this ask")
    form = values.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--csv", action="store_true", help="print the sets as CSV")
    values.add_argument("--best", type=_count, metavar="N", default=10, help="print the N best sets (10)")
    values.add_argument(
        "--window",
        type=_count,
        metavar="N",
        help="try N values to both sides of the exact one (5, or what is quick)",
    )
    values.add_argument(
        "--together", action="store_true", help="move parts that are fixed to a number as well"
    )
    values.add_argument("--write", metavar="FILE", help="write the sheet with the best set put in")
    values.add_argument("--take", type=_count, metavar="N", default=1, help="write the N-th best set instead")
    values.add_argument("--replace", action="store_true", help="write over a file that is there")
    draw = _verb(verbs, "draw", "the circuit as a picture", DRAW)
    draw.set_defaults(json=False)
    draw.add_argument(
        "-o", dest="output", metavar="FILE", required=True, help="the picture: .svg, .png or .pdf"
    )
    draw.add_argument(
        "--symbols",
        choices=("iec60617", "ieee315"),
        default="iec60617",
        help="a resistor is a box (iec60617, the default) or a zigzag (ieee315)",
    )
    draw.add_argument("--replace", action="store_true", help="write over a file that is there")
    plot = _verb(verbs, "plot", "the response as a picture or as numbers", PLOT)
    plot.add_argument("--ask", metavar="NAME", help="the curves of this ask")
    plot.add_argument(
        "--what",
        metavar="WHAT",
        action="append",
        help="what is shown (magnitude, phase or passband, delay, step)",
    )
    plot.add_argument(
        "-o", dest="output", metavar="FILE", help="the picture: .svg, .png or .pdf; or with --csv .csv"
    )
    form = plot.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--csv", action="store_true", help="write the curves as CSV")
    plot.add_argument("--replace", action="store_true", help="write over a file that is there")
    _add_note(verbs)
    given = parser.parse_args(arguments)
    if given.verb == "plot" and not (given.output or given.csv or given.json):
        plot.error("where to? -o FILE takes the picture, --csv prints the curves")
    if given.verb == "plot" and given.output and given.json:
        plot.error("--json prints, and -o FILE writes a file: leave one of them out")
    if given.verb == "values" and not given.write and (given.take > 1 or given.replace):
        values.error("--take and --replace say how to write, and --write FILE is missing")
    if given.verb == "match" and given.replace and not given.workbook:
        match.error("--replace says how to write, and --workbook FILE.xlsx is missing")
    return given


def _add_note(verbs: argparse._SubParsersAction[Words]) -> None:
    note = _verb(verbs, "note", "the design note as a document", NOTE)
    note.set_defaults(json=False)
    note.add_argument(
        "-o", dest="output", metavar="FILE", required=True, help="the note: .tex, .html or .pdf"
    )
    note.add_argument(
        "--only",
        metavar="SECTION,...",
        help="only these sections: summary, circuit, requirement, assumptions, derivation, transfer, design, "
        "values, response, amplifiers, checks, notes, sheet, caution",
    )
    note.add_argument(
        "--fragment", action="store_true", help="only the equations, to paste into a document (.tex)"
    )
    note.add_argument("--date", metavar="YYYY-MM-DD", help="the note's date (today)")
    note.add_argument("--replace", action="store_true", help="write over files that are there")


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
