"""What to say where the text is not the sheet's language: from the parser's surprise to a cause and a mend."""

from __future__ import annotations

import re

from lark import Token
from lark.exceptions import UnexpectedCharacters, UnexpectedInput, UnexpectedToken

from symcirc.complaints import Complaint, Place, Source, listed, nearest

#: How each statement is written, by its first word.
FORMS = {
    "stage": 'stage "title"',
    "block": "block NAME (port, ...), its lines, then `end`",
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
}
CHAIN_FORM = "node -- part -- node"
DEVICE_FORM = "U1 opamp: plus node, minus node, drives node"
#: The terminals that people see, in words.
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
    "STRING": 'a "string"',
    "QUANTITY": "V_node or I_part",
    "LINE_END": "the end of the line",
    "SERIES": "a series (E3 to E192)",
    "COMPARISON": "<= or >=",
    "TERMINAL": "plus, minus, drives, senses, primary, secondary, x, y, z",
    "PARAMETER": "gain, gbw, gm, rm, ratio",
    "REQUIREMENT": "order, edge, centre, bandwidth, ripple, stop, gain, f0, q",
}
_HIDDEN = {"SQRT", "NODE_WORD", "$END"}


def explain(error: UnexpectedInput, source: Source) -> Complaint:
    """Return the complaint for what the parser did not expect, at its place."""
    place, found = _place_and_text(error, source)
    line = source.line(place.line)
    accepted = set(error.accepts or ()) if isinstance(error, UnexpectedToken) else set(error.allowed or ())
    if isinstance(error, UnexpectedToken) and not accepted:
        accepted = set(error.expected)
    first = re.match(r"\s*([A-Za-z][A-Za-z0-9_]*|--)?", line)
    word = (first.group(1) if first else None) or ""
    mend = f"write: {_form(word, line)}"
    return _special(place, found, line, word, accepted, mend) or Complaint(
        place, _cause(found, accepted), _mend(found, accepted, mend)
    )


def _place_and_text(error: UnexpectedInput, source: Source) -> tuple[Place, str]:
    if isinstance(error, UnexpectedToken):
        token = error.token
        if token.type == "$END" or not token.line:
            line = max(1, source.text.count("\n") + 1)
            width = len(source.line(line)) + 1
            return Place(line, width, width + 1, source), ""
        text = str(token)
        if token.type == "LINE_END":
            end = len(source.line(token.line)) + 1
            return Place(token.line, min(token.column, end), min(token.column, end) + 1, source), ""
        if token.type == "LINK":  # a link may have begun on a line above
            breaks = text.count("\n")
            line = token.line + breaks
            column = source.line(line).find("--") + 1 if breaks else token.column + len(text) - 2
            return Place(line, column, column + 2, source), "--"
        return Place(token.line, token.column, token.column + len(text), source), text
    line_text = source.line(error.line)
    match = re.match(r"[A-Za-z0-9_.]+|.", line_text[error.column - 1 :])
    text = match.group() if match else ""
    return Place(error.line, error.column, error.column + max(1, len(text)), source), text


def _form(word: str, line: str) -> str:
    if word in FORMS:
        return FORMS[word]
    if re.match(r"\s*[A-Za-z]\w*\s+[A-Za-z]\w*\s*:", line):
        return DEVICE_FORM
    return CHAIN_FORM


def _special(
    place: Place, found: str, line: str, word: str, accepted: set[str], mend: str
) -> Complaint | None:
    """Return the complaint for slips that are known well enough to be named, or None."""
    before = line[: place.column - 1]
    if found.startswith('"') or (found == '"' and "STRING" not in accepted):
        return Complaint(place, 'a string ends with `"` on the same line', mend)
    if found == "--" and not before.strip():
        return Complaint(
            place,
            "a line that begins with `--` continues the chain above it, and no chain stands above this line",
            "begin the line with a node",
        )
    if re.search(r"\d\s*,\s*$", before) and found[:1].isdigit():
        return Complaint(
            place,
            "a name must stand after the comma",
            "write a decimal point as `.`, and separate settings by commas",
        )
    if found and not found.isascii() and found[0].isalpha():
        return Complaint(
            place, f"`{found}` is not in the alphabet of names", "names are ASCII letters, digits and _"
        )
    if not before.strip() and word and word not in FORMS and "STAGE" in accepted | {"STAGE"}:
        hint = nearest(word, FORMS)
        if hint:
            return Complaint(place, f"`{word}` begins no statement", hint)
    return _unknown_statement(place, found, before, line, word)


def _unknown_statement(place: Place, found: str, before: str, line: str, word: str) -> Complaint | None:
    begins_device = re.match(r"\s*[A-Za-z]\w*\s+[A-Za-z]\w*\s*:", line)
    if word and word not in FORMS and "--" not in before and not begins_device:
        hint = nearest(word, FORMS)
        return Complaint(
            Place(place.line, line.find(word) + 1, line.find(word) + 1 + len(word), place.source),
            f"`{word}` begins no statement, and no `--` follows it as after a node",
            hint or f"write a wire as {CHAIN_FORM}, or begin with {listed(FORMS, 'or')}",
        )
    if word == "end" and found == "end":
        return Complaint(
            place,
            "`end` without a `block` above it",
            "remove it, or begin the block with `block NAME (port)`",
        )
    return None


def _cause(found: str, accepted: set[str]) -> str:
    wanted = _wanted(accepted)
    seen = f"`{found}` was not expected here" if found else "the line ends too early"
    return f"{seen}; {wanted} can stand here" if wanted else seen


def _wanted(accepted: set[str]) -> str:
    words = [TERMINALS.get(t, f"`{t.lower()}`") for t in sorted(accepted - _HIDDEN)]
    return listed(words, "or") if len(words) <= 8 else ""


def _mend(found: str, accepted: set[str], mend: str) -> str:
    known: list[str] = []
    for terminal in ("TERMINAL", "PARAMETER", "REQUIREMENT"):
        if terminal in accepted:
            known += TERMINALS[terminal].split(", ")
    known += [t.lower() for t in accepted if t not in TERMINALS and t.isalpha()]
    hint = nearest(found, known) if found else ""
    return f"{hint} {mend}" if hint else mend


__all__ = ["FORMS", "Token", "UnexpectedCharacters", "explain"]
