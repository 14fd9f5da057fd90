"""Text made harmless in LaTeX, for pdfLaTeX, LuaLaTeX and XeLaTeX alike.

Letters of Latin alphabets stay as they are, Greek ones and signs become mathematics, and every other script is
written twice, as it is and by its code points: the engines with Unicode fonts take the first where the machine has a
font for it, pdfLaTeX the second.
"""

from __future__ import annotations

import re
import unicodedata
from itertools import groupby

#: A word longer than this may be broken anywhere, after so many letters each.
LONGEST_WORD, STRETCH = 20, 5
#: Where a line may end inside a word.
BREAK = r"\hspace{0pt}"
_HEBREW = r"[\u0590-\u05ff\ufb1d-\ufb4f]"
_ARABIC = r"[\u0600-\u077f\u08a0-\u08ff\ufb50-\ufdff\ufe70-\ufefe]"
#: Words of one script from right to left, which are set in that order as a whole.
_PHRASE = re.compile(rf"({_HEBREW}+(?: +{_HEBREW}+)*|{_ARABIC}+(?: +{_ARABIC}+)*)")
_UNIT = re.compile(r"(?<=\d) (?=(?:[pnµumkMG]?(?:Ω|ohm|Hz|F|H|S|V|A|s|rad/s)|dB|%|deg)(?![A-Za-z]))")
_SPECIAL = {
    "\\": r"\textbackslash{}",
    "{": r"\{",
    "}": r"\}",
    "#": r"\#",
    "$": r"\$",
    "%": r"\%",
    "&": r"\&",
    "_": r"\_",
    "^": r"\textasciicircum{}",
    "~": r"\textasciitilde{}",
    "<": r"\textless{}",
    ">": r"\textgreater{}",
    "|": r"\textbar{}",
    '"': r"\textquotedbl{}",
    "'": r"\textquotesingle{}",
    "`": r"\textasciigrave{}",
    "[": "{[}",
    "]": "{]}",
    "*": "{*}",
}
_GREEK = {
    name: unicodedata.lookup(f"GREEK SMALL LETTER {name.upper()}")
    for name in [
        "alpha",
        "beta",
        "gamma",
        "delta",
        "epsilon",
        "zeta",
        "eta",
        "theta",
        "iota",
        "kappa",
        "mu",
        "nu",
        "xi",
        "pi",
        "rho",
        "sigma",
        "tau",
        "upsilon",
        "phi",
        "chi",
        "psi",
        "omega",
    ]
    if name != "lambda"
}
_CAPITALS = ["Gamma", "Delta", "Theta", "Xi", "Pi", "Sigma", "Upsilon", "Phi", "Psi", "Omega"]
_SIGNS = {letter: rf"\ensuremath{{\{name}}}" for name, letter in _GREEK.items()}
_SIGNS |= {
    unicodedata.lookup(f"GREEK CAPITAL LETTER {n.upper()}"): rf"\ensuremath{{\{n}}}" for n in _CAPITALS
}
_SIGNS |= {
    "λ": r"\ensuremath{\lambda}",
    "Λ": r"\ensuremath{\Lambda}",
    "ο": "o",
    "ς": r"\ensuremath{\varsigma}",
    "Ω": r"\ensuremath{\Omega}",
    "µ": r"\ensuremath{\mu}",
    "≤": r"\ensuremath{\le}",
    "≥": r"\ensuremath{\ge}",
    "±": r"\ensuremath{\pm}",
    "×": r"\ensuremath{\times}",
    "÷": r"\ensuremath{\div}",
    "−": r"\ensuremath{-}",
    "√": r"\ensuremath{\surd}",
    "∞": r"\ensuremath{\infty}",
    "≈": r"\ensuremath{\approx}",
    "·": r"\ensuremath{\cdot}",
    "°": r"\ensuremath{^{\circ}}",
    "²": r"\ensuremath{^{2}}",
    "³": r"\ensuremath{^{3}}",
    "¹": r"\ensuremath{^{1}}",
    "→": r"\ensuremath{\rightarrow}",
    "–": r"\textendash{}",
    "—": r"\textemdash{}",
    "‘": r"\textquoteleft{}",
    "’": r"\textquoteright{}",
    "“": r"\textquotedblleft{}",
    "”": r"\textquotedblright{}",
    "„": r"\quotedblbase{}",
    "«": r"\guillemotleft{}",
    "»": r"\guillemotright{}",
    "…": r"\ldots{}",
    "\u00a0": "~",
    "½": r"\ensuremath{\tfrac{1}{2}}",
}
_SIGNS |= {"Α": "A", "Β": "B", "Ε": "E", "Ζ": "Z", "Η": "H", "Ι": "I", "Κ": "K", "Μ": "M", "Ν": "N", "Ο": "O"}
_SIGNS |= {"Ρ": "P", "Τ": "T", "Χ": "X"}
#: Letters of Latin alphabets that the T1 encoding holds.
_LATIN = "ÀÁÂÃÄÅÆÇÈÉÊËÌÍÎÏÐÑÒÓÔÕÖØÙÚÛÜÝÞßàáâãäåæçèéêëìíîïðñòóôõöøùúûüýþÿ"
_LATIN += "ĂăĄąĆćČčĎďĐđĘęĚěĞğĹĺĽľŁłŃńŇňŐőŒœŔŕŘřŚśŞşŠšŢţŤťŮůŰűŸŹźŻżŽž§¡¿£"


def tex(text: str) -> str:
    r"""Return text that LaTeX shows as it stands; runs of blanks become one.

    >>> tex("5 % of R_1")
    '5~\\% of R\\_1'
    """
    phrases = _PHRASE.split(
        bound(text)
    )  # at the odd places the phrases, at the even ones what is between them
    return "".join(_foreign(_script(p[0]), p) if k % 2 else _words(p) for k, p in enumerate(phrases) if p)


def _words(text: str) -> str:
    words = re.split(r"(\s+)", text)
    return "".join(_blank(word) if word.isspace() else _word(word) for word in words if word)


def bound(text: str) -> str:
    r"""Return text in which no line ends between a number and its unit.

    >>> bound("9.9 kΩ")
    '9.9\xa0kΩ'
    """
    return _UNIT.sub("\u00a0", text)


def text_width(text: str) -> float:
    """Return how wide a text is on one line in em, rather too much than too little.

    >>> text_width("il") < text_width("MM")
    True
    """
    return sum(1.0 if ord(c) > 0x2000 else 0.8 if c.isupper() or c in "&%@mwΩ" else 0.53 for c in text)


def _blank(blank: str) -> str:
    return "~" if blank == "\u00a0" else " "


def tex_line(text: str) -> str:
    r"""Return a line of a listing: every blank is kept.

    >>> tex_line("  a b")
    '\\ \\ a\\ b'
    """
    words = re.split(r"(\s)", text.expandtabs(4))
    return "".join(r"\ " if word.isspace() else _word(word) for word in words if word)


def bookmark(text: str) -> str:
    """Return what of a text can stand in a PDF's list of contents without any encoding.

    >>> bookmark("5 % of ω")
    '5 of'
    """
    return re.sub(r"\s+", " ", re.sub(r"[^A-Za-z0-9 .:()/-]", "", text)).strip()


def scripts(text: str) -> set[str]:
    """Return the scripts in a text that need a font of their own.

    >>> scripts("a β"), scripts("電")
    (set(), {'cjk'})
    """
    return {script for script in map(_script, text) if script}


def _word(word: str) -> str:
    breaks = len(word) > LONGEST_WORD
    pieces = []
    count = 0
    for script, run in groupby(word, _script):
        letters = list(run)
        if script:
            pieces.append(_foreign(script, "".join(letters)))
            count = 0
            continue
        for k, letter in enumerate(letters):
            count += 1
            pieces.append(_letter(letter, letters[max(k - 1, 0) : k] + letters[k + 1 : k + 2]))
            if breaks and count % STRETCH == 0:
                pieces.append(BREAK)
    return "".join(pieces)


def _letter(letter: str, beside: list[str]) -> str:
    """Return a letter; those that would melt into one with what is ``beside`` them are kept apart."""
    if letter in "-," and letter in beside:
        return rf"\mbox{{{letter}}}"
    return _SPECIAL.get(letter) or _SIGNS.get(letter) or _accented(letter) or letter


def _accented(letter: str) -> str:
    r"""Return a Greek letter with an acute accent as mathematics, nothing for any other.

    >>> _accented("ί"), _accented("e")
    ('\\ensuremath{\\acute{\\iota}}', '')
    """
    base, *marks = list(unicodedata.normalize("NFD", letter))
    if marks != ["\u0301"] or not 0x0370 <= ord(base) < 0x0400 or base not in _SIGNS:
        return ""
    return rf"\ensuremath{{\acute{{{_SIGNS[base].removeprefix(chr(92) + 'ensuremath{').removesuffix('}')}}}}}"


def _foreign(script: str, run: str) -> str:
    r"""Return a run of letters in another script, which may be broken between its letters where it has no words."""
    shown = (
        "" if script == "code" else BREAK.join(run) if script == "cjk" else run
    )  # some TeX cannot even read
    codes = BREAK.join(" " if letter == " " else f"[U+{ord(letter):04X}]" for letter in run)
    return rf"\notescript{{{script}}}{{{shown}}}{{{codes}}}"


def _script(letter: str) -> str:
    """Return the script of a letter: empty for what every engine has."""
    code = ord(letter)
    if code < 0x20 or 0x7F <= code < 0xA0 or 0xD800 <= code < 0xE000:
        return "code"
    if code < 0x7F or letter in _SIGNS or letter in _LATIN or _accented(letter):
        return ""
    if re.match(_HEBREW, letter):
        return "hebrew"
    if re.match(_ARABIC, letter):
        return "arabic"
    if (
        0x2E80 <= code < 0xA4D0
        or 0xAC00 <= code < 0xD7B0
        or 0xF900 <= code < 0xFB00
        or 0xFF00 <= code < 0xFFF0
    ):
        return "cjk"
    if 0x20000 <= code < 0x32000:
        return "cjk"
    return "code" if unicodedata.category(letter) in ("Cc", "Cf", "Cn", "Co", "Cs") else "other"
