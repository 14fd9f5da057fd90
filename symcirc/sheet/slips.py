"""The slips that people make in a stage sheet, as a table: what it looks like, what is said, what mends it.

A pattern is searched in the line, in which ``¦`` marks the place where the parser was surprised. Its group
``at`` is what the complaint points at, else the word at the mark. Causes and mends may hold the pattern's
groups and ``kind``, the statement's first word; of the words in ``offer`` the one nearest to ``at`` goes
before the mend. The first row that fits is taken.
"""

from __future__ import annotations

from dataclasses import dataclass

MARK = "¦"
WORD = r"[A-Za-z][A-Za-z0-9_]*"
NUMBER = r"[0-9][0-9A-Za-z_.]*"
#: A value code, and what stands behind a number as a unit.
CODE = r"[0-9]+[RFKkMGTmunpµμ][0-9]*"
UNIT = r"[A-Za-zµμΩΩ°%][A-Za-z0-9_µμΩΩ]*"


@dataclass(frozen=True)
class Slip:
    """One row; ``kinds`` are the first words of the statements it is about, all where it is empty."""

    kinds: str
    pattern: str
    cause: str
    mend: str
    offer: tuple[str, ...] = ()


#: Signs that are not the language's.
SIGNS = (
    Slip("", r'¦(?P<at>"[^"]*)$', "this string does not end on its line", 'close it with a second "'),
    Slip("", "¦(?P<at>[“”„«»‟‘’])", "`{at}` is a typographic quote", 'write a plain "'),
    Slip("", "¦(?P<at>[–—−‐‑―]+)", "`{at}` is a typographic dash", "write -- in a wire, and - for minus"),
    Slip("", "¦(?P<at>[×·∙⋅•∗])", "`{at}` is not a sign of the language", "write a product with *"),
    Slip("", "¦(?P<at>÷)", "`{at}` is not a sign of the language", "write a quotient with /"),
    Slip("", "¦(?P<at>[²³¹⁰-⁹]+)", "`{at}` is not a sign of the language", "write a power with ^, as in s^2"),
    Slip("", "¦(?P<at>√)", "`{at}` is not a sign of the language", "write a root as sqrt(...)"),
    Slip("", "¦(?P<at>[≤≥])", "`{at}` is not a sign of the language", "write <= or >="),
    Slip(
        "",
        "¦(?P<at>;)",
        "`;` is not a sign of the language",
        "write one statement a line, and use commas in lists",
    ),
    Slip("", r"¦(?P<at>[\[\]{}])", "only round brackets are used", "write ( and )"),
    Slip(
        "",
        rf"\b(?P<at>(?P<use>{WORD})¦\.(?P<inner>{WORD}))",
        "a name holds no point",
        "write a name inside a block with _, as in {use}_{inner}",
    ),
)

WIRES = (
    Slip(
        "chain",
        "^[ \t]*¦(?P<at>--)",
        "a line that begins with `--` continues the chain above it, and no chain stands above this line",
        "begin the line with a node",
    ),
    Slip(
        "chain", "¦$", "the chain ends on `--`", "write a node behind it, or leave the `--` to the next line"
    ),
    Slip(
        "chain",
        "--[ \t]*¦(?P<at>--)",
        "nothing stands before this `--`",
        "write a part or a node between two `--`",
    ),
    Slip("chain", "--¦(?P<at>-+)", "a link is two signs `--`", "write two"),
    Slip(
        "chain",
        rf"--[ \t]*¦(?P<at>{NUMBER})",
        "`{at}` is not a name, and a wire holds the names of nodes and parts",
        "begin a name with a letter, and give a value in a line such as: fix R1 = 4k7",
    ),
    Slip(
        "chain line",
        rf"(?P<before>{WORD})[ \t]*¦(?P<at>-+>|=+>|~+|-(?!-))[ \t]*(?P<next>\w*)",
        "`{at}` joins nothing, as the words of a wire are joined by two signs `--`",
        "write {before} -- {next}",
    ),
    Slip(
        "chain",
        r"¦(?P<at>(?:opamp|vcvs|vccs|cccs|ccvs|transformer|conveyor)\b)",
        "a part with more than two terminals has a line of its own",
        "write it as: U1 opamp: plus node, minus node, drives node",
    ),
    Slip(
        "chain",
        rf"(?P<before>{WORD})[ \t]*¦(?P<at>{WORD})",
        "the `--` between `{before}` and `{at}` is missing",
        "write {before} -- {at}",
    ),
    Slip("chain", "¦(?P<at>,)", "a wire holds no comma", "write each wire on a line of its own"),
    Slip("chain", "¦(?P<at>=)", "a wire holds no values", "write the value in a line such as: fix R1 = 4k7"),
)

#: Lists of names and settings.
LISTS = (
    Slip("line", rf"^[ \t]*¦(?P<at>{NUMBER})", "`{at}` is not a name", "begin a name with a letter"),
    Slip(
        "fix ask",
        "(?:fix|ask|,)[ \t]*¦(?P<at>=)",
        "the name before this `=` is missing",
        "write the name that gets the value",
    ),
    Slip(
        "fix choose solve use block device target",
        ",[ \t]*¦$",
        "nothing stands behind the last comma",
        "remove it, or go on behind it",
    ),
    Slip(
        "fix",
        rf"[0-9],[ \t]*¦(?P<at>{NUMBER})",
        "a name stands behind a comma, and `{at}` is a number",
        "write a decimal point as a point, and a comma between settings only",
    ),
    Slip(
        "fix choose solve",
        "{kind}[ \t]*¦$",
        "nothing stands behind `{kind}`",
        "name what it is about",
    ),
    Slip(
        "fix choose solve use block",
        rf"(?:\b(?:fix|choose|solve|use|block|as)\b|[,(])[ \t]*¦(?P<at>{NUMBER})",
        "`{at}` is not a name",
        "begin a name with a letter",
    ),
    Slip(
        "choose solve",
        rf"{WORD}[ \t]*¦(?P<at>=)",
        "`{kind}` takes names only",
        "give a value in a line of its own, such as: fix C1 = 22 nF",
    ),
    Slip(
        "choose solve",
        rf"(?P<before>{WORD})[ \t]+¦(?P<at>{WORD})",
        "a comma is missing before `{at}`",
        "write {before}, {at}",
    ),
    Slip(
        "fix",
        rf"(?:fix|,)[ \t]*(?P<name>{WORD})[ \t]*¦(?P<at>:=|:|is\b|to\b)",
        "`{at}` gives no value",
        "give a value with =, as in fix {name} = 4k7",
    ),
    Slip(
        "fix",
        rf"(?:fix[ \t]+|,[ \t]*)(?P<at>{WORD})[ \t]*¦(?:$|,)",
        "`{at}` gets no value",
        "give each name its own, as in fix {at} = 4k7",
    ),
    Slip(
        "fix",
        rf"(?:fix|,)[ \t]*(?P<name>{WORD})[ \t]+¦(?P<at>[^\s=]+)",
        "the `=` between `{name}` and `{at}` is missing",
        "write {name} = {at}",
    ),
    Slip(
        "fix",
        rf"(?P<name>{WORD})[ \t]*=[ \t]*¦$",
        "the value of `{name}` is missing",
        "write it behind the =",
    ),
    Slip("fix", "=[ \t]*¦(?P<at>=)", "a value is given with one `=`", "remove the other"),
    Slip(
        "fix",
        rf"=.*[^,\s][ \t]+(?P<at>{WORD})[ \t]*¦=",
        "a comma is missing before `{at}`",
        "put a comma between two settings: fix R1 = 1k, {at} = ...",
    ),
    Slip(
        "fix",
        rf"=.*[^,\s][ \t]+¦(?P<at>{WORD})[ \t]*=",
        "a comma is missing before `{at}`",
        "put a comma between two settings: fix R1 = 1k, {at} = ...",
    ),
)

#: Values and expressions, wherever they stand.
VALUES = (
    Slip(
        "",
        "(?P<at>[-+*/^])[ \t]*¦$",
        "nothing stands behind `{at}`",
        "write what belongs there, or remove it",
    ),
    Slip(
        "", r"[-+*/^(][ \t]*¦(?P<at>[*/^]+)", "nothing stands before this `{at}`", "write what belongs there"
    ),
    Slip("", r"\([ \t]*¦(?P<at>\))", "nothing stands in these brackets", "write what belongs there"),
    Slip("", "sqrt[ \t]*¦", "a root has brackets", "write sqrt(2)"),
    Slip(
        "",
        r"(?:\^|\*\*)[ \t]*[-+]*[\w.]+[ \t]*¦(?P<at>\^|\*\*)",
        "a power of a power needs brackets",
        "write (a^2)^3, or the one exponent that is meant",
    ),
    Slip(
        "",
        rf"(?P<code>{CODE})[ \t]*¦(?P<at>[-+*/^])",
        "`{code}` is a value code, and a value code stands alone",
        "write plain numbers in arithmetic, in SI base units, as in 4700 + 2200",
    ),
    Slip(
        "",
        rf"(?P<code>{CODE})[ \t]+¦(?P<at>{UNIT})",
        "`{code}` is a value code, and a value code takes no unit",
        "write the code alone, or a number with its unit such as 4.7 kohm",
    ),
    Slip(
        "",
        r"[0-9.][ \t]*(?P<prefix>[fpnuµμmkMGT])[ \t]+¦(?P<at>(?:ohm|F|H|S|Hz|s|Ω|Ω)(?!\w))",
        "a blank stands between the prefix and its unit",
        "write them as one word, {prefix}{at}",
    ),
    Slip("", r"(?P<at>rad)[ \t]*¦/", "`rad` alone is not a unit", "write rad/s without blanks"),
    Slip(
        "",
        rf"[0-9.][ \t]*(?P<unit>(?:{UNIT})(?<![0-9]))[ \t]*¦(?P<at>[-+*/^])",
        "a number with a unit stands alone",
        "write plain numbers in arithmetic, in SI base units, as in 2e-9 + 1e-9",
    ),
    Slip(
        "",
        rf"(?P<before>{WORD}|[0-9.]+|\))[ \t]*(?P<at>{WORD})[ \t]*¦[-+*/^)]",
        "a sign is missing before `{at}`",
        "write a product with *, as in {before}*{at}",
    ),
    Slip(
        "fix target",
        rf"=.*(?<![\w.])(?P<before>{WORD}|[0-9.]+|\))[ \t]*¦(?P<at>{WORD})",
        "a sign is missing before `{at}`",
        "write a product with *, as in {before}*{at}",
    ),
    Slip(
        "",
        rf"(?P<before>{WORD}|[0-9.]+|\))[ \t]*¦(?P<at>\()",
        "a sign is missing before the bracket",
        "write a product with *, as in {before}*(...)",
    ),
    Slip(
        "",
        r"(?P<before>[0-9.]+)[ \t]+¦(?P<at>[0-9.]+)",
        "two numbers stand side by side",
        "write one number without blanks, or a sign or a comma between two",
    ),
    Slip("", r"¦(?P<at>\))", "no bracket is open here", "remove it, or open one before"),
)
