"""The slips in asks, targets, limits and the rest; see :mod:`symcirc.sheet.slips`."""

from __future__ import annotations

from symcirc.sheet.slips import NUMBER, WORD, Slip
from symcirc.sheet.targets import FAMILIES, KINDS

REQUIREMENTS = ("order", "edge", "edges", "centre", "bandwidth", "ripple", "stop", "gain", "f0", "q", "meet")
_REQUIREMENT = rf"\b(?:{'|'.join(REQUIREMENTS)})\b"
_FAMILY = rf"\b(?:{'|'.join(sorted({family.split()[0] for family in FAMILIES}))})\b"
_KIND = rf"\b(?:{'|'.join(KINDS)})\b"
_QUANTITY = r"[VI]_[A-Za-z]\w*"
#: What the trade calls the words of a target otherwise.
_OTHERWISE = {
    "edge": "cutoff|cut|corner|fc|f_c|frequency|passband",
    "q": "Q|quality",
    "f0": "F0|f_0|fo|w0|omega0",
    "centre": "center|middle|mid",
    "bandwidth": "bw|BW|width",
    "stop": "attenuation|stopband|rejection",
    "order": "n|N|poles|degree",
    "meet limits": "limits|mask",
    "gain": "g|G|k|K",
}

ASKS = (
    Slip("ask", "ask[ \t]*¦$", "nothing is asked here", "write ask H = V_out/V_in"),
    Slip("ask", rf"ask[ \t]*¦?(?P<at>\(|{_QUANTITY})", "this ask has no name", "write ask H = and the ratio"),
    Slip(
        "ask",
        rf"ask[ \t]+(?P<name>{WORD})[ \t]*¦(?P<at>:=?)",
        "`{at}` does not belong here",
        "write ask {name} = and the ratio",
    ),
    Slip(
        "ask",
        rf"ask[ \t]+(?P<name>{WORD})[ \t]*¦",
        "the `=` behind `{name}` is missing",
        "write ask {name} = V_out/V_in",
    ),
    Slip("ask", "=[ \t]*¦(?P<at>=)", "an ask has one `=`", "remove the other"),
    Slip("ask", "loop[ \t]*¦", "the amplifier of a loop gain stands in brackets", "write loop(U1)"),
    Slip("ask", "driven[ \t]*¦", "the word `at` is missing behind `driven`", "write driven at and the node"),
    Slip("ask", "driven[ \t]+at[ \t]*¦", "the node that is driven is missing", "write driven at in"),
    Slip(
        "ask",
        rf"with[ \t]+.*{_QUANTITY}[ \t]*¦",
        "a condition says that a drive is 0",
        "write with V_in = 0 or with I_in = 0",
    ),
    Slip(
        "ask",
        r"with\b.*=[ \t]*¦(?P<at>\S*)",
        "a drive can only be set to 0",
        "write with V_in = 0 or with I_in = 0",
    ),
    Slip(
        "ask", "with[ \t]*¦", "the condition behind `with` is missing", "write with V_in = 0 or with I_in = 0"
    ),
    Slip(
        "ask",
        r"with\b.*,[ \t]*¦",
        "the condition behind the comma is missing",
        "write one, or remove the comma",
    ),
    Slip(
        "ask",
        "[=/(-][ \t]*¦(?P<at>[0-9.]+)",
        "an ask is a ratio of voltages and currents, without factors",
        "write the ratio alone, such as V_out/V_in",
    ),
    Slip(
        "ask",
        "[=/][ \t]*¦(?P<at>[-+])",
        "a quantity of an ask has no sign",
        "write the ratio alone, such as V_out/V_in",
    ),
    Slip(
        "ask",
        r"[=/(-][ \t]*¦(?P<at>(?P<letter>[VI])\(?(?P<node>[A-Za-z]\w*)\)?)",
        "`{at}` is not a voltage or a current",
        "write {letter}_{node}",
    ),
    Slip(
        "ask",
        r"[=/(-][ \t]*¦(?P<at>v_?\(?(?P<node>[A-Za-z]\w*)\)?)",
        "`{at}` is not a voltage or a current",
        "write V_{node}",
    ),
    Slip(
        "ask",
        r"[=/(-][ \t]*¦(?P<at>i_(?P<node>[A-Za-z]\w*))",
        "`{at}` is not a voltage or a current",
        "write I_{node}",
    ),
    Slip(
        "ask",
        rf"[=/(-][ \t]*¦(?P<at>{WORD})",
        "`{at}` is not a voltage or a current",
        "write V_{at} for the voltage of a node, or I_{at} for a current",
    ),
    Slip("ask", r"/[ \t]*¦$", "nothing stands under the line", "write the drive there, as in V_out/V_in"),
    Slip("ask", r"=[ \t]*¦$", "the ratio is missing", "write it behind the =, as in V_out/V_in"),
    Slip(
        "ask",
        rf"=[ \t]*\(?{_QUANTITY}[^/]*¦$",
        "nothing stands under the line",
        "write the drive there, as in V_out/V_in",
    ),
    Slip("ask", rf"{_QUANTITY}[ \t]*¦(?P<at>-)", "a difference stands in brackets", "write (V_a - V_b)/V_in"),
    Slip(
        "ask",
        r"¦(?P<at>[-+*/^])",
        "an ask is one ratio of two quantities",
        "write it as V_out/V_in, or (V_a - V_b)/V_in",
    ),
    Slip(
        "ask",
        rf"¦(?P<at>,)[ \t]*{WORD}[ \t]*=[ \t]*[VIl(]",
        "one ask stands on a line",
        "begin a new line with ask",
    ),
    Slip("ask", r"¦(?P<at>,)", "no comma stands here", "write conditions behind with, as in with V_in = 0"),
    Slip(
        "ask",
        rf"¦(?P<at>{WORD})",
        "`{at}` was not expected behind the ratio",
        "go on with `with V_in = 0` or `driven at in`",
        ("with", "driven"),
    ),
)

TARGETS = (
    Slip(
        "target",
        f",[ \t]*¦(?P<at>{NUMBER})",
        "no word says what `{at}` is",
        "write the word before its value, as in order 2 or edge 1 kHz",
    ),
    Slip("target limit parts", "{kind}[ \t]*¦$", "nothing stands behind `{kind}`", "write {form}"),
    Slip(
        "target",
        rf"target[ \t]+(?P<at>{_KIND})[ \t]*¦",
        "this target does not name an ask",
        "write target H: and what H must become",
    ),
    Slip(
        "target limit",
        rf"{{kind}}[ \t]+(?P<name>{WORD})[ \t]*¦",
        "the `:` behind `{name}` is missing",
        "write {kind} {name}: and what it must be",
    ),
    Slip(
        "target",
        ":[ \t]*¦(?P<at>\\S*)",
        "a kind of response was expected here",
        f"write one of {', '.join(KINDS)}",
    ),
    Slip(
        "target",
        rf"{_KIND},[ \t]*¦(?P<at>{_FAMILY})",
        "no comma stands between the kind and its family",
        "write lowpass {at}",
    ),
    Slip(
        "target",
        rf"(?P<word>{_REQUIREMENT})[ \t]*¦(?P<at>[=:])",
        "no `{at}` stands behind `{word}`",
        "write {word} and its value, with a blank between",
    ),
    Slip(
        "target",
        rf"[^,:\s][ \t]+(?P<at>{_REQUIREMENT})[ \t]*¦\S",
        "a comma is missing before `{at}`",
        "put a comma between two words with their values",
    ),
    Slip(
        "target",
        r"edges[ \t]+[^,]*¦(?P<at>,)",
        "no comma stands between two edges",
        "write edges 900 Hz 1.1 kHz",
    ),
    Slip("target", "edges[ \t]+[^,]*¦", "`edges` takes two plain values", "write edges 900 Hz 1.1 kHz"),
    Slip("target", "meet[ \t]*¦", "the word `limits` is missing behind `meet`", "write meet limits"),
    Slip(
        "target",
        rf"(?P<at>{_REQUIREMENT})[ \t]*¦(?:$|,)",
        "the value of `{at}` is missing",
        "write {at} and its value",
    ),
    *(
        Slip(
            "target",
            rf",[ \t]*¦(?P<at>(?:{wrong})\b)",
            "`{at}` is not a word of a target",
            f"did you mean {right}?",
        )
        for right, wrong in _OTHERWISE.items()
    ),
    Slip(
        "target",
        rf"[,][ \t]*¦(?P<at>{WORD})",
        "`{at}` is not a word of a target",
        f"use one of {', '.join(REQUIREMENTS[:-1])} or meet limits",
        REQUIREMENTS,
    ),
    Slip(
        "target",
        rf"[^,:\s][ \t]*¦(?P<at>{_REQUIREMENT})",
        "a comma is missing before `{at}`",
        "put a comma between two words with their values",
    ),
)

LIMITS = (
    Slip(
        "limit",
        rf":[ \t]*¦(?P<at>{WORD})",
        "a limit is about the loss, and `{at}` is something else",
        "write loss <= 1 dB or loss >= 20 dB, relative to the nominal gain",
    ),
    Slip("limit", ":[ \t]*¦", "the limit itself is missing", "write loss <= 1 dB from 62 Hz to 2 kHz"),
    Slip(
        "limit",
        "loss[ \t]*¦(?P<at><|>|=<|=>|=|:)",
        "`{at}` is no comparison of a limit",
        "write <= for at most, or >= for at least",
    ),
    Slip(
        "limit",
        "loss[ \t]*¦(?P<at>\\S*)",
        "the comparison is missing",
        "write loss <= 1 dB, or loss >= 20 dB",
    ),
    Slip("limit", "[<>]=[ \t]*¦$", "the loss is missing", "write it in dB, as in loss <= 1 dB"),
    Slip(
        "limit",
        r"[0-9B][ \t]*¦(?P<at>under|until|upto|up|over|beyond|between|at|in|for)\b",
        "`{at}` says no range of a limit",
        "write from 62 Hz to 2 kHz, below 19 Hz, or above 5 kHz",
    ),
    Slip(
        "limit",
        "[<>]=[^:]*(?<!from)[0-9B)][ \t]*¦$",
        "the range of this limit is missing",
        "write from 62 Hz to 2 kHz, below 19 Hz, or above 5 kHz",
    ),
    Slip("limit parts", "from[ \t]*¦", "the value behind `from` is missing", "write from LOW to HIGH"),
    Slip("limit parts", r"\bto[ \t]*¦", "the value behind `to` is missing", "write from LOW to HIGH"),
    Slip("limit parts", "from[ \t].*¦", "the word `to` is missing behind `from`", "write from LOW to HIGH"),
    Slip(
        "limit",
        "(?P<word>below|above)[ \t]*¦",
        "the frequency behind `{word}` is missing",
        "write {word} 19 Hz",
    ),
    Slip(
        "limit",
        rf"¦(?P<at>{WORD})",
        "`{at}` says no range of a limit",
        "write from 62 Hz to 2 kHz, below 19 Hz, or above 5 kHz",
        ("from", "below", "above"),
    ),
    Slip("limit", "¦(?P<at>,)", "one limit stands on a line, without commas", "write another limit line"),
)

REST = (
    Slip(
        "parts",
        rf"parts[ \t]+(?P<name>{WORD})[ \t]*¦",
        "the `:` behind `{name}` is missing",
        "write parts {name}: E96",
    ),
    Slip(
        "parts",
        ":[ \t]*¦(?P<at>\\S*)",
        "a series was expected here",
        "write E3, E6, E12, E24, E48, E96 or E192, or stock and a file",
    ),
    Slip("parts", "stock[ \t]*¦", "the file behind `stock` is missing", "write stock drawer.csv"),
    Slip(
        "parts",
        "E[0-9].*¦(?P<at>from)",
        "a comma is missing before `from`",
        "write E96 1 %, from 1 kohm to 1 Mohm",
    ),
    Slip(
        "parts",
        ",[ \t]*¦(?P<at>\\S*)",
        "only a range stands behind the comma, or the word `pairs`",
        "write from 1 kohm to 1 Mohm",
    ),
    Slip(
        "parts", r"E[0-9]+[ \t]*¦(?P<at>\S+)", "a tolerance was expected here", "write it in %, as in E96 1 %"
    ),
    Slip("stage note", "{kind}[ \t]*¦$", "the text is missing", 'write it in quotes, as in {kind} "..."'),
    Slip("stage note", r"{kind}[ \t]+¦(?P<at>\S.*)", "the text stands in quotes", 'write {kind} "{at}"'),
    Slip(
        "stage note",
        r'"[ \t]*¦(?P<at>\S+)',
        "nothing stands behind the string",
        "remove it, or begin a new line",
    ),
)
