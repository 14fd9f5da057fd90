"""The slips in lines of parts with more than two terminals, and in blocks; see :mod:`symcirc.sheet.slips`."""

from __future__ import annotations

from symcirc.sheet.slips import NUMBER, WORD, Slip

ROLES = ("plus", "minus", "drives", "senses", "primary", "secondary", "x", "y", "z")
PARAMETERS = ("gain", "gbw", "gm", "rm", "ratio", "sign")
_ROLE = rf"\b(?:{'|'.join(ROLES)})\b"
_PARAMETER = rf"\b(?:{'|'.join(PARAMETERS)})\b"

DEVICES = (
    Slip(
        "device",
        ":[ \t]*¦$",
        "the terminals of this part are missing",
        "write them, as in U1 opamp: plus node, minus node, drives node",
    ),
    Slip(
        "device",
        rf"(?P<word>{_ROLE}|{_PARAMETER})[ \t]*¦(?P<at>[=:])",
        "no `{at}` stands behind `{word}`",
        "write {word} and what belongs to it, with a blank between",
    ),
    Slip("device", "sign[ \t]*¦", "a sign is + or -", "write sign + or sign -"),
    Slip(
        "device",
        rf"[\w.)%][ \t]+(?P<at>{_ROLE}|{_PARAMETER})[ \t]*¦\S",
        "a comma is missing before `{at}`",
        "put a comma between two terminals or values",
    ),
    Slip(
        "device",
        rf"(?P<at>{_ROLE})[ \t]*¦(?:$|,)",
        "the node of `{at}` is missing",
        "write {at} and the node that it is joined to",
    ),
    Slip(
        "device",
        rf"(?P<at>{_PARAMETER})[ \t]*¦(?:$|,)",
        "the value of `{at}` is missing",
        "write {at} and its value",
    ),
    Slip(
        "device",
        rf"{_ROLE}[ \t]*¦(?P<at>{NUMBER})",
        "`{at}` is not a name, and a terminal is joined to a node",
        "begin the node's name with a letter",
    ),
    Slip(
        "device",
        rf"[^,:\s][ \t]*¦(?P<at>{_ROLE}|{_PARAMETER})",
        "a comma is missing before `{at}`",
        "put a comma between two terminals or values",
    ),
    Slip(
        "device",
        rf"(?P<role>{_ROLE})[ \t]+{WORD}[ \t]+{WORD}[ \t]*¦(?P<at>{WORD})",
        "`{role}` takes two nodes at most",
        "put a comma before the next word, or leave `{at}` out",
    ),
    Slip(
        "device",
        rf"[,:][ \t]*¦(?P<at>{WORD})",
        "`{at}` is neither a terminal nor a value of a part",
        f"use {', '.join(ROLES)}, {', '.join(PARAMETERS[:-1])} or sign",
        ROLES + PARAMETERS,
    ),
)

BLOCKS = (
    Slip("block", "block[ \t]*¦(?:$|[(])", "this block has no name", "write block NAME (port, ...)"),
    Slip(
        "block",
        rf"block[ \t]+(?P<name>{WORD})[ \t]*¦(?:$|[^(])",
        "the ports of block `{name}` are missing",
        "write them in brackets, as in block {name} (a, b)",
    ),
    Slip("block", r"\)[ \t]*¦(?P<at>\S+)", "nothing stands behind a block's ports", "begin its lines below"),
    Slip("use", "use[ \t]*¦$", "this line names no block", "write use BLOCK as S1 (node, ...)"),
    Slip(
        "use",
        rf"use[ \t]+(?P<block>{WORD})[ \t]*¦",
        "a block's use has a name of its own, and it is missing here",
        "write use {block} as S1 (node, ...)",
    ),
    Slip(
        "use",
        "as[ \t]*¦",
        "the name of this use is missing",
        "write it behind as, as in use BLOCK as S1 (node, ...)",
    ),
    Slip(
        "use",
        rf"use[ \t]+(?P<block>{WORD})[ \t]+as[ \t]+(?P<name>{WORD})[ \t]*¦(?:$|[^(])",
        "the nodes of `{name}` are missing",
        "write them in brackets, as in use {block} as {name} (a, b)",
    ),
    Slip("use block", r"\([ \t]*¦\)", "nothing stands in these brackets", "write one node for each port"),
    Slip(
        "use block",
        rf"(?P<before>{WORD})[ \t]+¦(?P<at>{WORD})",
        "a comma is missing before `{at}`",
        "write {before}, {at}",
    ),
)
