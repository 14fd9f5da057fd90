"""The table of bad sheets: what is wrong with each, where, and the words that its complaint must hold.

Every slip here is our own invention or common practice of the trade (no source); what is refused is the list
of the project's design. ``BASE`` is a good sheet; most rows put one bad line before it.
"""

from __future__ import annotations

from dataclasses import dataclass

BASE = """
in -- R1 -- out -- C1 -- gnd
ask H = V_out/V_in
"""
AMPLIFIER = """
in -- R1 -- m -- C1 -- out
U1 opamp: plus gnd, minus m, drives out
ask H = V_out/V_in
"""


@dataclass(frozen=True)
class Row:
    """A bad sheet, the place its complaint must point at, and words of its cause and of its mend."""

    name: str
    text: str
    line: int
    column: int
    cause: str
    mend: str


def row(name: str, bad: str, column: int, cause: str, mend: str, *, base: str = BASE) -> Row:
    """Return the row of a sheet whose first line is bad."""
    return Row(name, bad + base, 1, column, cause, mend)


WIRES = (
    row("links missing", "in R1 out", 4, "`--` between `in` and `R1` is missing", "in -- R1"),
    row("second link missing", "in -- R2 out", 10, "`--` between `R2` and `out` is missing", "R2 -- out"),
    row("first link missing", "in R2 -- out", 4, "`--` between `in` and `R2` is missing", "in -- R2"),
    row("single sign", "in - R2 - out", 4, "`-` joins nothing", "in --"),
    row("arrow", "in -> R2 -> out", 4, "`->` joins nothing", "in --"),
    row("typographic dash", "in — R2 — out", 4, "typographic dash", "write --"),
    row("three signs", "in --- R2 -- out", 6, "a link is two signs", "write two"),
    row("two links", "in -- -- R2 -- out", 7, "nothing stands before", "a part or a node"),
    row("chain ends on a link", "in -- R2 --\n", 12, "the chain ends on `--`", "write a node"),
    row("chain ends on a part", "in -- R2", 7, "ends on the part `R2`", "add `-- node`"),
    row("chain begins on a part", "R2 -- a -- R3 -- gnd", 1, "begins on `R2`", "node -- R2"),
    row("no node between parts", "in -- R2 -- R3 -- out", 13, "`R3` stands where a node", "R2 -- a -- R3"),
    row("no part between nodes", "in -- a -- R2 -- out", 7, "no part stands between `in`", "in -- R1 -- a"),
    row("lower-case part", "in -- r2 -- out", 7, "`r2` stands where a part stands", "did you mean R2?"),
    row("amplifier in a wire", "in -- U1 -- out", 7, "first letter is none of", "U1 opamp"),
    row("amplifier line in a wire", "in -- U1 opamp: plus in", 10, "line of its own", "U1 opamp"),
    row("value in a wire", "in -- 4k7 -- out", 7, "`4k7` is not a name", "fix R1 = 4k7"),
    row("setting in a wire", "in -- R2 = 4k7 -- out", 10, "holds no values", "fix R1 = 4k7"),
    row("comma in a wire", "in -- R2 -- gnd, out -- R3 -- gnd", 16, "no comma", "line of its own"),
    row("continuation of nothing", "-- R2 -- out", 1, "no chain stands above", "begin the line with a node"),
    row("part stands twice", "in -- R1 -- a -- R1 -- gnd", 18, "`R1` stands twice: it is on", "another name"),
    row("both ends on one node", "a -- R2 -- a", 6, "both ends of `R2` are on node", "two different nodes"),
    Row("part and node share a name", "C1 -- R2 -- gnd" + BASE, 2, 20, "`C1` is a part and", "another name"),
    row("accent in a name", "entrée -- R2 -- out", 1, "`entrée` holds a letter", "ASCII"),
    row("node begins with a digit", "in -- R2 -- 2nd", 13, "`2nd` is not a", "begin a name with a letter"),
    row("point in a name", "S1.a -- R2 -- gnd", 1, "a name holds no point", "S1_a"),
    row("word alone", "foo", 1, "`foo` alone is no statement", "node -- part -- node"),
    row("sign at the start", "* -- R2 -- gnd", 1, "`*` was not expected", "node -- part -- node"),
    Row("tabs before the place", "\tin\t--\tR2\tout" + BASE, 1, 11, "`--` between `R2` and", "R2 -- out"),
    Row("continuation slip", "in -- R2\n\n  # more\n -- a out" + BASE, 4, 7, "`--` between `a` and", "a --"),
)

DEVICES = (
    row("colon missing", "U2 opamp plus a, minus b, drives c", 10, "the `:` behind `opamp` is", "U2 opamp:"),
    row("kind missing", "U2: opamp plus a", 1, "`U2:` begins no statement", "U2 opamp:"),
    row("unknown kind", "U2 opamps: plus a, minus b, drives c", 4, "`opamps` is not", "did you mean opamp?"),
    row("terminals missing", "U2 opamp:", 10, "terminals of this part are missing", "plus node"),
    row("terminal missing", "U2 opamp: plus a, drives out", 1, "opamp `U2` lacks minus", "add: minus node"),
    row("unknown terminal", "U2 opamp: plus a, inv b, drives out", 19, "`inv` is neither a", "minus"),
    row(
        "nearly a terminal",
        "U2 opamp: plus a, minux b, drives out",
        19,
        "`minux` is neither",
        "did you mean minus?",
    ),
    row(
        "terminal of another kind",
        "U2 opamp: plus a, senses b, drives out",
        19,
        "an opamp has",
        "plus, minus",
    ),
    row("terminal twice", "U2 opamp: plus a, plus b, drives out", 19, "`plus` is given twice", "remove one"),
    row("comma between terminals", "U2 opamp: plus a minus b, drives c", 18, "a comma is missing", "put a"),
    row("two nodes for one", "U2 opamp: plus a b, minus c, drives d", 18, "takes one node", "leave out `b`"),
    row("equals in a device", "U2 opamp: plus=a, minus b, drives c", 15, "no `=` stands behind", "plus and"),
    row("node of a terminal missing", "U2 opamp: plus, minus b, drives c", 11, "the node of `plus`", "plus"),
    row("value missing", "U2 opamp: plus a, minus b, drives c, gain", 38, "the value of `gain` is", "gain"),
    row(
        "comma between values",
        "U2 opamp: plus a, minus b, drives c, gain 10 gbw 1M",
        46,
        "comma is missing",
        "comma",
    ),
    row("last comma", "U2 opamp: plus a, minus b, drives c,", 37, "nothing stands behind the", "remove it"),
    row(
        "name like a resistor", "R9 opamp: plus a, minus b, drives c", 1, "`R9` begins like", "another letter"
    ),
    row("sign missing", "K1 conveyor: x a, y b, z c", 1, "lacks its sign", "sign +"),
    row("sign as a number", "K1 conveyor: x a, y b, z c, sign 1", 34, "a sign is + or -", "sign +"),
    row("sign of an opamp", "U2 opamp: plus a, minus b, drives c, sign +", 38, "an opamp has", "remove it"),
    row("pair on one node", "E1 vcvs: senses a a, drives b", 10, "both nodes of `senses`", "two different"),
    row(
        "zero ratio",
        "T1 transformer: primary a b, secondary c d, ratio 0",
        51,
        "cannot be zero",
        "another value",
    ),
    row("unit of a gain", "U2 opamp: plus a, minus b, drives c, gain 10 kHz", 43, "the unit Hz", "20 dB"),
    row("undeclared name of a gain", "E1 vcvs: senses a, drives b, gain k", 35, "`k` is not", "choose k"),
    row("device name kept", "s opamp: plus a, minus b, drives c", 1, "`s` is kept for the", "another name"),
)

BLOCKS = (
    Row(
        "block without end",
        "\nblock low (p, q)\n p -- R1 -- q\nask H = V_p/V_q\n",
        2,
        1,
        "this block has",
        "write end",
    ),
    Row(
        "block before the end of another",
        "block a (p)\np -- R1 -- gnd\nblock b (p)\np -- C1 -- gnd\nend\n",
        1,
        1,
        "has no `end`",
        "write end",
    ),
    Row("block open at the end", "block a (p)\np -- R1 -- gnd", 1, 1, "has no `end`", "write end"),
    row("end without block", "end", 1, "no `block` above it", "remove it"),
    Row(
        "ask in a block",
        "block a (p)\np -- R1 -- gnd\nask H = V_p/V_p\nend\n",
        3,
        1,
        "`ask` cannot stand",
        "line 1",
    ),
    row("ports missing", "block a\np -- R2 -- gnd\nend", 8, "the ports of block `a` are", "block a (a, b)"),
    row("comma between ports", "block a (p q)\nend", 12, "a comma is missing before `q`", "p, q"),
    row("port gnd", "block a (p, gnd)\nend", 13, "gnd is everywhere the same node", "leave it out"),
    row("port twice", "block a (p, p)\nend", 13, "port `p` is there already", "another name"),
    Row("block twice", "block a (p)\nend\nblock a (p)\nend" + BASE, 3, 7, "`a` is there", "another name"),
    row("as missing", "use low (in, a)", 9, "a name of its own", "use low as S1"),
    row("nodes of a use missing", "use low as S1", 14, "the nodes of `S1` are", "use low as S1 (a, b)"),
    row(
        "unknown block",
        "use lov as S1 (in, out)",
        5,
        "there is no",
        "did you mean low?",
        base="\nblock low (p, q)\np -- R1 -- q\nend\nask H = V_out/V_in",
    ),
    row(
        "too many nodes",
        "use low as S1 (in, out, a)",
        25,
        "has 2 ports,",
        "(p, q)",
        base="\nblock low (p, q)\np -- R1 -- q\nend\nask H = V_out/V_in",
    ),
    Row(
        "block uses itself",
        "block a (p)\nuse b as S (p)\nend\nblock b (p)\nuse a as S (p)\nend" + BASE,
        5,
        5,
        "block `a` uses",
        "other blocks",
    ),
    Row(
        "use twice",
        "block a (p)\np -- R1 -- gnd\nend\nuse a as S (in)\nuse a as S (out)\nask H = V_in/V_out",
        5,
        10,
        "`S` stands twice",
        "another name",
    ),
    Row(
        "part of a use clashes",
        "block a (p)\np -- R2 -- gnd\nend\nuse a as R1 (in)\nin -- R1_R2 -- gnd\nask H = V_in/V_in",
        5,
        7,
        "`R1_R2` stands twice",
        "another name",
    ),
    Row(
        "nodes of uses clash",
        "block a (p)\np -- R1 -- b_c -- R2 -- gnd\nend\nblock d (p)\np -- R3 -- c -- R4 -- gnd\nend\n"
        "use a as S (in)\nuse d as S_b (in)\nask H = V_in/V_in",
        5,
        12,
        "have one name,",
        "another name",
    ),
    Row(
        "port named from outside",
        "block a (p)\np -- R1 -- gnd\nend\nuse a as S (in)\nS_p -- C1 -- gnd\nask H = V_in/V_in",
        5,
        1,
        "would be a",
        "write in",
    ),
    Row("slip in an unused block", "block a (p)\np -- q -- gnd\nend" + BASE, 2, 6, "no part stands", "p --"),
)

VALUES = (
    row("prefix apart", "fix R1 = 2 k", 12, "`k` alone is not a unit", "write 2k"),
    row("prefix apart with a point", "fix R1 = 4.7 k", 14, "`k` alone is not a unit", "4.7 kohm"),
    row("capital kilo", "fix R1 = 4.7 Kohm", 14, "`Kohm` is not a unit", "did you mean kohm?"),
    row("unit in capitals", "fix C1 = 22 NF", 13, "`NF` is not a unit", "nF"),
    row("unit written out", "fix C1 = 22 nfarad", 13, "`nfarad` is not a unit", "write the unit as nF"),
    row("volts", "fix R1 = 5 V", 12, "`V` is not a unit", "use ohm, F, H"),
    row("unit of another kind", "fix R1 = 22 nF", 10, "the unit F does not fit, as `R1` is in", "4.7 kohm"),
    row("code of another kind", "fix C1 = 47R", 10, "the letter R in a value code means ohm", "22 nF"),
    row("code with a unit", "fix R1 = 4k7 ohm", 14, "a value code takes no unit", "4.7 kohm"),
    row("code glued to a unit", "fix R1 = 4k7ohm", 11, "neither a value code nor", "4k7"),
    row("blank in a unit", "fix C1 = 22 n F", 15, "between the prefix and its unit", "nF"),
    row("decimal comma", "fix C1 = 4,7 nF", 12, "a name stands behind a comma", "a point"),
    row("blank in a number", "fix R1 = 10 000", 13, "two numbers stand side by side", "without blanks"),
    row("value missing", "fix R1 =", 9, "the value of `R1` is missing", "behind the ="),
    row("no value", "fix R1", 5, "`R1` gets no value", "fix R1 = 4k7"),
    row("equals missing", "fix R1 4k7", 8, "the `=` between `R1` and `4k7`", "R1 = 4k7"),
    row("colon for equals", "fix R1: 4k7", 7, "`:` gives no value", "fix R1 = 4k7"),
    row("two equals", "fix R1 == 4k7", 9, "one `=`", "remove"),
    row("comma between settings", "fix R1 = 4k7 C1 = 2n2", 14, "a comma is missing before `C1`", "comma"),
    row("comma behind a number", "fix R1 = 4700 C1 = 2n2", 15, "a comma is missing before `C1`", "comma"),
    row("word fix missing", "R1 = 4k7", 1, "`R1 =` begins no statement", "fix R1 = 4k7"),
    row("fixed twice", "fix R1 = 4k7, R1 = 2k2", 15, "`R1` is fixed twice", "remove one"),
    row("zero", "fix R1 = 0", 10, "`R1` cannot be zero", "greater than zero"),
    row("negative", "fix C1 = -2 nF", 10, "`C1` cannot be negative", "greater than zero"),
    row("negative tie", "fix R1 = -R2*2\nin -- R2 -- gnd", 10, "`R1` cannot be negative", "greater than"),
    row("too large", "fix R1 = 1e31", 10, "out of range", "1e-30 and 1e30"),
    row("too large with its prefix", "fix R1 = 1e29 kohm", 10, "out of range", "1e-30 and 1e30"),
    row("too small when divided", "fix k = 1e-20/1e20", 9, "out of range", "1e-30 and 1e30"),
    row("too many digits", "fix R1 = 1." + "0" * 250, 12, "more than 200 characters", "shorten"),
    row("division by zero", "fix k = 1/(2 - 2)", 11, "divides by zero", "not zero"),
    row("division by zero in names", "fix k = a/(a - a)\nchoose a", 11, "divides by zero", "not zero"),
    row("division by a fixed zero", "fix a = 1, k = 1/(a - 1)", 18, "divides by zero", "not zero"),
    row("root of a negative", "fix k = sqrt(-2)", 9, "square root of a negative", "change the sign"),
    row("root of a name", "fix R1 = sqrt(C1)", 10, "a square root of names", "name the root"),
    row("root without brackets", "fix k = sqrt 2", 14, "a root has brackets", "sqrt(2)"),
    row("broken exponent", "fix R1 = R2^0.5", 13, "an exponent must be a whole number", "sqrt(x)"),
    row("exponent too large", "fix k = 2^65", 11, "exponents larger than 64", "from -64 to 64"),
    row("tower of powers", "fix k = 2^3^2", 12, "a power of a power needs brackets", "(a^2)^3"),
    row("product without sign", "fix R1 = 2 R2\nin -- R2 -- gnd", 12, "`R2` is not a unit", "2*R2"),
    row("product of names without sign", "fix R1 = R2 R3", 13, "`R3` follows the name `R2`", "R2*R3"),
    row("product with a bracket", "fix R1 = 2(R2 + R3)", 11, "a sign is missing before the", "2*(...)"),
    row("unit behind arithmetic", "fix R1 = 2*3 kohm", 14, "behind an expression", "SI base units"),
    row("arithmetic with units", "fix C1 = 2 nF + 3 nF", 15, "a number with a unit stands", "2e-9 + 1e-9"),
    row("arithmetic with codes", "fix R1 = 4k7 + 2k2", 14, "a value code stands alone", "4700"),
    row("sign at the end", "fix R1 = R2 +", 13, "nothing stands behind `+`", "remove"),
    row("two signs", "fix R1 = R2*/R3", 13, "nothing stands before this `/`", "what belongs there"),
    row("bracket open", "fix R1 = 2*(R2 + R3", 12, "this bracket is not closed", "close it"),
    row("bracket too many", "fix R1 = R2 + R3)", 17, "no bracket is open here", "remove"),
    row("square brackets", "fix R1 = 2*[R2 + R3]", 12, "only round brackets", "( and )"),
    row("times sign", "fix R1 = 2×R2", 11, "`×` is not a sign", "with *"),
    row("superscript", "fix k = 2²", 10, "`²` is not a sign", "with ^"),
    row("brackets too deep", "fix k = " + "(" * 101 + "1" + ")" * 101, 109, "more than 100 deep", "names of"),
    row("name not declared", "fix R1 = R12\nin -- R2 -- gnd", 10, "`R12` is not", "did you mean R1 or R2?"),
    row("s in a resistor", "fix R1 = s*2", 10, "`s` cannot stand here", "Z, Y"),
    row("s by way of another", "fix R1 = Z1, Z1 = s*L1\nin -- Z1 -- gnd", 10, "would depend on s", "Z, Y"),
    row("loop of fixes", "fix R1 = 2*R2, R2 = R1/2\nin -- R2 -- gnd", 21, "in a loop: R1", "set one of them"),
    row("voltage in a fix", "fix R1 = V_out", 10, "`V_out` is a voltage", "parts and parameters"),
    row("reserved name", "fix pi = 3", 5, "`pi` is kept", "another name"),
    row("voltage as a name", "choose V_x", 8, "`V_x` is kept for a voltage", "another name"),
    row("amplifier as a value", "fix U1 = 10", 5, "`U1` is an opamp, not a value", "U1_gain", base=AMPLIFIER),
    row("names without comma", "choose C1 R1", 11, "a comma is missing before `R1`", "C1, R1"),
    row("choose with a value", "choose C1 = 2n2", 11, "`choose` takes names only", "fix C1"),
    row("chosen twice", "choose C1, C1", 12, "stands behind `choose` already", "name it once"),
    Row("chosen and solved", "choose k\nsolve k" + BASE, 2, 7, "stands behind `choose` already", "keep one"),
    Row("solved though fixed", "fix k = 2\nsolve k" + BASE, 2, 7, "`k` is fixed on line 1, so", "remove one"),
    Row(
        "chosen though tied",
        "choose R1\nfix R1 = 2*R2\nin -- R2 -- gnd" + BASE,
        1,
        8,
        "is tied on",
        "remove one",
    ),
    row("nothing chosen", "choose", 7, "nothing stands behind `choose`", "name"),
)

ASKED = (
    Row("nothing asked", "in -- R1 -- gnd\n", 1, 1, "nothing is asked", "ask H = V_out/V_in"),
    Row("empty file", "", 1, 1, "nothing is asked", "ask H = V_out/V_in"),
    row("ask without a name", "ask V_out/V_in", 5, "this ask has no name", "ask H ="),
    row("word ask missing", "G = V_out/V_in", 1, "`G =` begins no statement", "ask G = V_out/V_in"),
    row("ask with a colon", "ask G: V_out/V_in", 6, "`:` does not belong here", "ask G ="),
    row("voltage without its line", "ask G = Vout/V_in", 9, "`Vout` is not a voltage", "write V_out"),
    row("voltage in brackets", "ask G = V(out)/V(in)", 9, "`V(out)` is not a voltage", "write V_out"),
    row("nothing under the line", "ask G = V_out", 14, "nothing stands under the line", "V_out/V_in"),
    row("difference without brackets", "ask G = V_out - V_a/V_in", 15, "a difference stands in", "(V_a -"),
    row("factor in an ask", "ask G = 2*V_out/V_in", 9, "without factors", "V_out/V_in"),
    row("unknown node", "ask G = V_oot/V_in", 9, "there is no node `oot`", "did you mean out?"),
    row("capital node", "ask G = V_Out/V_in", 9, "there is no node `Out`", "did you mean out?"),
    row("unknown part", "ask G = I_R2/V_in", 9, "there is no part or node `R2`", "did you mean R1?"),
    row("voltage of a part", "ask G = V_R1/V_in", 9, "`R1` is a part, and a node is meant", "its nodes"),
    row("drive is gnd", "ask G = V_out/V_gnd", 15, "`gnd` is the reference node", "another node"),
    row("part current as a drive", "ask G = V_out/I_R1", 15, "cannot be the drive", "driven at NODE"),
    row("difference of currents", "ask G = (I_R1 - I_C1)/V_in", 10, "a difference is of two", "(V_a - V_b)"),
    row("difference of nothing", "ask G = (V_out - V_out)/V_in", 9, "this difference is", "two different"),
    Row("asked twice", "ask H = V_out/V_in" + BASE, 3, 5, "`H` is asked twice: it is on", "another name"),
    row("ask named like a part", "ask R1 = V_out/V_in", 5, "`R1` is a part or a parameter", "another name"),
    row("two asks on a line", "ask G = V_out/V_in, F = V_in/V_out", 19, "one ask stands on a", "new line"),
    row("condition without zero", "ask G = V_out/I_out with V_in", 30, "a condition says that", "with V_in"),
    row("condition with a value", "ask G = V_out/I_out with V_in = 5", 26, "can only be set", "with V_in ="),
    row("condition on a part", "ask G = V_out/I_out with I_R1 = 0", 26, "`R1` is a part", "its nodes"),
    row("driven without at", "ask G = V_out/V_in driven in", 27, "the word `at` is missing", "driven at"),
    row("driven at a voltage", "ask G = V_out/V_in driven at V_in", 30, "there is no", "did you mean in?"),
    row("loop of a resistor", "ask T = loop(R1) with V_in = 0", 14, "there is no", "U1", base=AMPLIFIER),
    row(
        "loop of an ideal amplifier",
        "ask T = loop(U1) with V_in = 0",
        14,
        "needs its gain",
        "gain 100",
        base=AMPLIFIER,
    ),
    row(
        "loop without its source",
        "ask T = loop(U1)\nfix U1_gain = 1e5",
        14,
        "what stands at",
        "with V_in",
        base=AMPLIFIER,
    ),
)

TARGETS = (
    row(
        "colon of a target", "target H lowpass bessel, order 2, edge 1 kHz", 10, "the `:` behind", "target H:"
    ),
    row(
        "target without an ask", "target lowpass bessel, order 2, edge 1 kHz", 8, "does not name", "target H:"
    ),
    row(
        "target of an unknown ask",
        "target G: lowpass bessel, order 2, edge 1 kHz",
        8,
        "nothing called `G`",
        "use H",
    ),
    Row("two targets", "target H = 1/s\ntarget H = 2/s" + BASE, 2, 8, "`H` has two targets", "second name"),
    row(
        "unknown kind of response",
        "target H: lowpas bessel, order 2, edge 1 kHz",
        11,
        "`lowpas` is not",
        "did you mean lowpass?",
    ),
    row("kind in two words", "target H: low pass bessel, order 2, edge 1 kHz", 11, "`low` is not", "lowpass"),
    row(
        "family without a kind",
        "target H: bessel, order 2, edge 1 kHz",
        11,
        "`bessel` is not",
        "lowpass bessel",
    ),
    row(
        "unknown family",
        "target H: lowpass butterwort, order 2, edge 1 kHz",
        19,
        "`butterwort` is not",
        "did you mean butterworth?",
    ),
    row(
        "comma before the family",
        "target H: lowpass, butterworth, order 2, edge 1 kHz",
        20,
        "no comma stands",
        "lowpass butterworth",
    ),
    row("comma between words", "target H: lowpass bessel, order 2 edge 1 kHz", 35, "a comma is", "comma"),
    row(
        "equals in a target",
        "target H: lowpass bessel, order=2, edge 1 kHz",
        32,
        "no `=` stands",
        "order and",
    ),
    row("order missing", "target H: lowpass bessel, edge 1 kHz", 11, "lacks order", "add: order 2"),
    row(
        "ripple missing", "target H: lowpass chebyshev, order 2, edge 1 kHz", 11, "lacks ripple", "ripple 0.5"
    ),
    row("broken order", "target H: lowpass bessel, order 2.5, edge 1 kHz", 33, "an order is a", "order 2"),
    row(
        "order too large", "target H: lowpass bessel, order 21, edge 1 kHz", 33, "orders above 20", "cascades"
    ),
    row(
        "other word for the edge",
        "target H: lowpass bessel, order 2, cutoff 1 kHz",
        36,
        "`cutoff` is not",
        "did you mean edge?",
    ),
    row("unit of an edge", "target H: lowpass bessel, order 2, edge 1 kohm", 41, "the unit ohm", "edge 1"),
    row(
        "unit of a ripple missing",
        "target H: lowpass chebyshev, order 2, edge 1 kHz, ripple 0.5",
        58,
        "a unit is",
        "ripple 0.5",
    ),
    row(
        "word of another family",
        "target H: lowpass bessel, order 2, edge 1 kHz, ripple 1 dB",
        48,
        "`ripple` does not",
        "order, edge",
    ),
    row(
        "edge without a family",
        "target H: lowpass, order 2, edge 1 kHz",
        29,
        "none is named",
        "lowpass butterworth",
    ),
    row(
        "edges with a comma",
        "target H: bandpass bessel, order 2, edges 900 Hz, 1.1 kHz",
        49,
        "no comma stands",
        "edges 900",
    ),
    row(
        "edges exchanged",
        "target H: bandpass bessel, order 2, edges 2 kHz 1 kHz",
        49,
        "ends before it begins",
        "the lower value first",
    ),
    row(
        "at of another word",
        "target H: lowpass bessel, order 2 at 1 dB, edge 1 kHz",
        38,
        "`at` belongs to",
        "edge 1",
    ),
    row(
        "negative gain",
        "target H: lowpass bessel, order 2, edge 1 kHz, gain -2",
        53,
        "must be greater",
        "magnitude",
    ),
    row("q of zero", "target H: lowpass, order 2, f0 1 kHz, q 0", 41, "`q` must be greater than", "q 0.8"),
    row("order of f0 and q", "target H: lowpass, order 3, f0 1 kHz, q 1", 26, "f0 and q describe", "order 2"),
    row(
        "no limits to meet",
        "target H: lowpass bessel, meet limits, edge 1 kHz",
        27,
        "has no limits",
        "limit H:",
    ),
    row("s behind a word", "target H: lowpass, order 2, f0 s, q 1", 32, "`s` cannot stand here", "target"),
    row("target not declared", "target H = 1/(1 + s/w0)", 21, "`w0` is not declared", "choose w0"),
    row("target with a voltage", "target H = V_out/V_in", 12, "`V_out` is a voltage", "parts and parameters"),
    row("strict comparison", "limit H: loss < 1 dB below 2 kHz", 15, "`<` is no comparison", "<="),
    row("limit of the gain", "limit H: gain >= 1 dB below 2 kHz", 10, "a limit is about the loss", "loss"),
    row("unit of a loss", "limit H: loss <= 1 below 2 kHz", 18, "a unit is missing", "loss <= 1 dB"),
    row("range missing", "limit H: loss <= 1 dB", 22, "the range of this limit is missing", "from 62 Hz"),
    row("range exchanged", "limit H: loss <= 1 dB from 2 kHz to 62 Hz", 37, "ends before it", "lower value"),
    row("other word for below", "limit H: loss <= 1 dB under 2 kHz", 23, "`under` says no range", "below"),
    row("to missing", "limit H: loss <= 1 dB from 62 Hz 2 kHz", 34, "the word `to` is", "from LOW to HIGH"),
    row("colon of parts", "parts R E96", 9, "the `:` behind `R` is missing", "parts R: E96"),
    row("unknown series", "parts R: E97 1 %", 10, "E97 is not a series of IEC 60063", "E96"),
    row("parts of amplifiers", "parts U: E96", 7, "`U` is not a kind of part to buy", "parts R:"),
    row("unit of a range", "parts C: E12, from 1 kohm to 2 kohm", 20, "does not fit parts C", "22 nF"),
    row("tolerance without its sign", "parts R: E96 1, from 1k to 1M", 14, "a unit is missing", "1 %"),
    row("note without quotes", "note check the layout", 6, "the text stands in", 'note "check the layout"'),
    row("string not closed", 'note "check', 6, "does not end on its line", "close it"),
    row("typographic quotes", "note “check”", 6, "typographic quote", "plain"),
    Row("two stage lines", 'stage "a"\nstage "b"' + BASE, 2, 1, "line 1 has it already", "remove one"),
    row("misspelt statement", "fxi R1 = 4k7", 1, "`fxi` begins no statement", "did you mean fix?"),
    row("capital statement", "Fix R1 = 4k7", 1, "`Fix` begins no statement", "did you mean fix?"),
    row(
        "misspelt target",
        "tarket H: lowpass bessel, order 2, edge 1 kHz",
        1,
        "`tarket` begins no",
        "did you mean target?",
    ),
    row("semicolon", "fix R1 = 4k7; fix C1 = 2n2", 13, "`;` is not a sign", "one statement a line"),
    row("invisible character", "fix R1 =\u00a04k7", 9, "U+00A0", "plain blank"),
    row("control character", "fix R1 = 4k7\x00", 13, "U+0000", "remove it"),
)

#: Sheets that are grammatical, and whose circuit cannot be used.
STRUCTURE_ROWS: tuple[Row, ...] = ()

SHEET_ROWS = (*WIRES, *DEVICES, *BLOCKS, *VALUES, *ASKED, *TARGETS)
