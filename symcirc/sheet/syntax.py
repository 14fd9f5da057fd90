"""What is said where the text is not the sheet's language: from the parser's surprise to cause and mend."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass

from lark.exceptions import UnexpectedCharacters, UnexpectedInput, UnexpectedToken

from symcirc.complaints import Complaint, Place, Source, choices, listed, nearest
from symcirc.sheet import targets
from symcirc.sheet.devices import KINDS
from symcirc.sheet.slips import LISTS, MARK, SIGNS, VALUES, WIRES, WORD, Slip
from symcirc.sheet.slips_asked import ASKS, LIMITS, REST, TARGETS
from symcirc.sheet.slips_circuit import BLOCKS, DEVICES

#: How each statement is written, by its first word.
FORMS = {
    "stage": 'stage "title"',
    "block": "block NAME (port, ...), its lines, and end",
    "end": "end",
    "use": "use BLOCK as NAME (node, ...)",
    "fix": "fix NAME = value, NAME = value",
    "choose": "choose NAME, NAME",
    "solve": "solve NAME, NAME",
    "ask": "ask H = V_out/V_in",
    "target": "target H: lowpass butterworth, order 2, edge 1 kHz",
    "limit": "limit H: loss <= 1 dB from 62 Hz to 2 kHz",
    "parts": "parts R: E96 1 %, from 1 kohm to 1 Mohm",
    "note": 'note "a sentence"',
    "device": "U1 opamp: plus node, minus node, drives node",
    "chain": "node -- part -- node",
}
#: First words of statements.
STATEMENTS = [word for word in FORMS if word not in ("device", "chain")]
SLIPS = (*SIGNS, *WIRES, *DEVICES, *BLOCKS, *LISTS, *ASKS, *TARGETS, *LIMITS, *REST, *VALUES)
#: The terminals of the grammar in words; those that are not here are words of the language themselves.
TERMINALS = {
    "NAME": "a name",
    "NUMBER": "a number",
    "CODE": "a value code",
    "UNIT": "a unit",
    "LINK": "`--`",
    "COMMA": "`,`",
    "COLON": "`:`",
    "EQUALS": "`=`",
    "OPEN": "`(`",
    "CLOSE": "`)`",
    "PLUS": "`+`",
    "MINUS": "`-`",
    "TIMES": "`*`",
    "OVER": "`/`",
    "POWER": "`^`",
    "SQRT": "`sqrt`",
    "STRING": 'a "string"',
    "QUANTITY": "V_node or I_part",
    "LINE_END": "the end of the line",
    "SERIES": "a series (E3 to E192)",
    "FILE": "the path of a file",
    "COMPARISON": "`<=` or `>=`",
    "TERMINAL": "a terminal",
    "PARAMETER": "a value's word",
    "REQUIREMENT": "a word of a target",
}
_NOT_IN_BLOCKS = ("stage", "block", "choose", "solve", "ask", "target", "limit", "parts", "note")
_HIDDEN = {"NODE_WORD", "$END"}
_BLOCK_WORD = re.compile(r"[ \t]*(block|end)\b(?![ \t]*--)")
#: So much of a line on either side of the place is looked at.
_WINDOW = 300


@dataclass(frozen=True)
class Surprise:
    """What the parser did not expect, and where.

    ``found`` is the word or sign at the place, empty at a line's end; ``before`` and ``after`` are the line
    on either side of the place, without its comment; ``kind`` is the statement's first word, or chain,
    device, or line where it cannot be told.
    """

    place: Place
    found: str
    before: str
    after: str
    kind: str
    accepted: frozenset[str]

    def at(self, start: int, end: int) -> Place:
        """Return the place of columns of the line, counted from 0."""
        return Place(self.place.line, start + 1, max(start + 1, end) + 1, self.place.source)


def explain(error: UnexpectedInput, source: Source) -> Complaint:
    """Return the complaint for what the parser did not expect, at its place."""
    surprise = _surprise(error, source)
    for explanation in (_about_blocks, _about_first_word, _about_slip, _about_letters, _about_brackets):
        complaint = explanation(surprise)
        if complaint is not None:
            return complaint
    return _plain(surprise)


def _surprise(error: UnexpectedInput, source: Source) -> Surprise:
    line, column = _where(error, source)
    code = _without_comment(source.line(line))
    column = min(column, len(code))
    before, after = code[:column], code[column:]
    word = re.match(rf'"[^"]*"?|{WORD}|[0-9.]+\w*|--|[<>:=]=|\*\*|[^ \t\r]', after)
    found = word.group() if word else ""
    place = Place(line, column + 1, column + 1 + max(1, len(found)), source)
    if isinstance(error, UnexpectedToken):
        accepted: Iterable[str] = error.accepts or error.expected
    else:
        accepted = error.allowed if isinstance(error, UnexpectedCharacters) else ()
    return Surprise(place, found, before, after, _kind(code), frozenset(accepted))


def _where(error: UnexpectedInput, source: Source) -> tuple[int, int]:
    """Return the line, counted from 1, and the column, counted from 0, of what was not expected."""
    if isinstance(error, UnexpectedToken):
        token = error.token
        if token.type == "LINK":  # it may have begun on a line above
            line = (token.line or 1) + token.count("\n")
            return line, source.line(line).find("--") if "\n" in token else (token.column or 1) - 1
        if token.type != "$END":
            return token.line or 1, (token.column or 1) - 1
        code = [number for number, line in enumerate(source.lines, 1) if _without_comment(line)]
        last = code[-1] if code else 1
        return last, len(source.line(last))
    return error.line, error.column - 1


def _without_comment(line: str) -> str:
    """Return a line without the comment and the blanks at its end."""
    for piece in re.finditer(r'"[^"]*"|(#)', line):
        if piece.group(1):
            return line[: piece.start()].rstrip(" \t\r")
    return line.rstrip(" \t\r")


def _kind(code: str) -> str:
    first = re.match(rf"\s*(?:--|({WORD})(\s*--)?)", code)
    if first is None:
        return "line"
    word = first.group(1)
    if word is None or first.group(2):
        return "chain"
    if word in STATEMENTS:
        return str(word)
    return "device" if re.match(rf"\s*{WORD}\s+{WORD}\s*:", code) else "line"


# explanations: each returns a complaint for what it knows, or None ------------------------------------------


def _about_slip(s: Surprise) -> Complaint | None:
    start = max(0, len(s.before) - _WINDOW)
    window = s.before[start:].replace(MARK, "?") + MARK + s.after[:_WINDOW].replace(MARK, "?")
    for slip in SLIPS:
        if slip.kinds and s.kind not in slip.kinds.split():
            continue
        match = re.search(slip.pattern.replace("{kind}", s.kind), window)
        if match is not None:
            return _slip(s, slip, match, start)
    return None


def _slip(s: Surprise, slip: Slip, match: re.Match[str], start: int) -> Complaint:
    groups = {name: text.replace(MARK, "") for name, text in match.groupdict(default="").items()}
    words = {"kind": s.kind, "form": FORMS.get(s.kind, ""), **groups}
    place, mark = s.place, len(s.before) - start
    if match.groupdict().get("at"):
        first, end = (i + start - (i > mark) for i in match.span("at"))
        place = s.at(first, end)
    mend = nearest(words.get("at", ""), slip.offer) or slip.mend.format(**words)
    return Complaint(place, slip.cause.format(**words), mend)


def _about_letters(s: Surprise) -> Complaint | None:
    """A letter that names do not have, or a character that nobody sees."""
    if not s.found or (s.found.isascii() and s.found.isprintable()):
        return None
    if s.found[0].isalpha():
        start = len(s.before) - len(re.findall(r"\w*$", s.before)[0])
        word = s.before[start:] + re.findall(r"^\w*", s.after)[0]
        return Complaint(
            s.at(start, start + len(word)),
            f"`{word}` holds a letter that names do not have",
            "use ASCII letters, digits and _ in names",
        )
    if s.found[0].isprintable():
        return None
    return Complaint(
        s.place,
        f"an invisible character, U+{ord(s.found[0]):04X}, stands here",
        "remove it, or write a plain blank",
    )


def _about_brackets(s: Surprise) -> Complaint | None:
    opened: list[int] = []
    for piece in re.finditer(r'"[^"]*"|[()]', s.before):
        if piece.group() == "(":
            opened.append(piece.start())
        elif piece.group() == ")" and opened:
            opened.pop()
    if opened and "CLOSE" in s.accepted and s.found in ("", ",", ":", "="):
        return Complaint(
            s.at(opened[-1], opened[-1] + 1), "this bracket is not closed", "close it with ) on the same line"
        )
    return None


def _about_blocks(s: Surprise) -> Complaint | None:
    """A block without its end, an end without its block, and what cannot stand in a block."""
    source, here = s.place.source, s.place.line
    block, ahead = None, ""
    for number, line in enumerate(source.lines, 1):
        first = _BLOCK_WORD.match(line)
        if first and number < here:
            block = number if first.group(1) == "block" else None
        elif first and number > here:
            ahead = first.group(1)
            break
    start = len(s.before) - len(s.before.lstrip())
    word = s.at(start, start + len(s.kind))
    if block is None:
        if s.kind != "end":
            return None
        return Complaint(
            word,
            "this `end` has no `block` above it",
            "remove it, or begin the block: block NAME (port, ...)",
        )
    at_end = "END" in s.accepted and not s.found and here == len(source.lines)
    if s.kind not in _NOT_IN_BLOCKS and not at_end:
        return None
    if s.kind != "block" and ahead == "end":
        return Complaint(
            word,
            f"`{s.kind}` cannot stand in a block, which holds wires, parts, uses and fixes",
            f"move it out of the block that begins on line {block}",
        )
    start = source.line(block).index("block")
    return Complaint(
        Place(block, start + 1, start + 6, source), "this block has no `end`", "write end below its last line"
    )


def _about_first_word(s: Surprise) -> Complaint | None:
    """A statement that begins with no word of the language, or with one that is nearly right."""
    if s.kind not in ("line", "device"):
        return None
    start = len(s.before) - len(s.before.lstrip())
    words = re.findall(rf"{WORD}|\S", s.before + s.after)
    if not words or not re.fullmatch(WORD, words[0]):
        return None
    first = s.at(start, start + len(words[0]))
    if s.kind == "device":
        return _about_kind(s, words, first)
    hint = nearest(words[0], STATEMENTS)
    if hint and s.found != "--":
        return Complaint(first, f"`{words[0]}` begins no statement", hint)
    if s.found == "=":
        asked = re.match(r"=\s*(?:\(?[VI]_|loop)", s.after)
        form = f"ask {words[0]} = V_out/V_in" if asked else f"fix {words[0]} = 4k7"
        return Complaint(
            first, f"`{words[0]} =` begins no statement", f"write the statement's word first, as in {form}"
        )
    if s.found == ":":
        return _about_colon(words, first)
    if len(words) > 1 and words[1] in KINDS:
        return Complaint(
            s.place,
            f"the `:` behind `{words[1]}` is missing",
            f"write {words[0]} {words[1]}: and its terminals",
        )
    if len(words) > 1 and re.fullmatch(WORD, words[1]):
        second = s.before.index(words[1], start + len(words[0])) if words[1] in s.before else len(s.before)
        return Complaint(
            s.at(second, second + len(words[1])),
            f"the `--` between `{words[0]}` and `{words[1]}` is missing",
            f"write a wire as {words[0]} -- {words[1]} -- ...",
        )
    if len(words) == 1:
        return Complaint(
            first,
            f"`{words[0]}` alone is no statement",
            f"write a wire as {FORMS['chain']}, or begin with {listed(STATEMENTS, 'or')}",
        )
    return None


def _about_kind(s: Surprise, words: list[str], first: Place) -> Complaint | None:
    hint = nearest(words[0], STATEMENTS)
    if words[1] in KINDS:
        return None
    if hint and not nearest(words[1], KINDS):
        return Complaint(first, f"`{words[0]}` begins no statement", hint)
    start = (s.before + s.after).index(words[1], first.column - 1 + len(words[0]))
    return Complaint(
        s.at(start, start + len(words[1])),
        f"`{words[1]}` is not a kind of part",
        nearest(words[1], KINDS) or choices(KINDS),
    )


def _about_colon(words: list[str], first: Place) -> Complaint:
    name, behind = words[0], words[2] if len(words) > 2 else ""
    if behind in KINDS:
        form = f"{name} {behind}: plus node, ..."
    elif behind in targets.KINDS:
        form = f"target {name}: {behind} ..."
    elif behind == "loss":
        form = f"limit {name}: loss ..."
    elif re.fullmatch(r"E[0-9]+", behind):
        form = f"parts {name}: {behind}"
    else:
        form = FORMS["device"]
    return Complaint(first, f"`{name}:` begins no statement", f"write it as {form}")


def _plain(s: Surprise) -> Complaint:
    """Return the complaint that names what was found and what can stand here."""
    wanted = [TERMINALS.get(t, f"`{t.lower()}`") for t in sorted(s.accepted - _HIDDEN)]
    seen = f"`{s.found}` was not expected here" if s.found else "the line ends too early"
    cause = f"{seen}, where {listed(wanted, 'or')} can stand" if 0 < len(wanted) < 9 else seen
    return Complaint(s.place, cause, f"write {FORMS.get(s.kind, FORMS['chain'])}")
