"""The walk of a wire: node, part, node. What is said where it is out of step."""

from __future__ import annotations

import re
from collections.abc import Iterable

from symcirc.complaints import Complaint, Remark
from symcirc.sheet.expression import Name

PART_KINDS = "RCLZY"
_DESIGNATOR = re.compile(r"[RCLZY][0-9]+")


def check_chain(words: tuple[Name, ...]) -> None:
    """Raise Complaint unless the words of a chain are node, part, node, ... and end on a node."""
    for position in range(1, len(words), 2):
        if words[position].text[0] not in PART_KINDS:
            raise _no_part(words, position)
    if len(words) % 2 == 0:
        raise _no_last_node(words)


def odd_node(words: tuple[Name, ...]) -> Iterable[Remark]:
    """Return a remark for each node that has a name like R2: a node may have been forgotten before it."""
    for before, node in zip(words[1::2], words[2::2], strict=False):
        if _DESIGNATOR.fullmatch(node.text):
            yield Remark(
                node.place,
                f"`{node.text}` stands where a node stands: is a node missing behind `{before.text}`?",
            )


def _no_part(words: tuple[Name, ...], position: int) -> Complaint:
    """Return the complaint about a word that stands where a part stands and cannot be one."""
    word, before = words[position], words[position - 1]
    swapped = word.text[:1].upper() + word.text[1:]
    if _DESIGNATOR.fullmatch(swapped):
        return Complaint(
            word.place,
            f"`{word.text}` stands where a part stands, and a part's first letter is a capital",
            f"did you mean {swapped}?",
        )
    if position == 1 and _DESIGNATOR.fullmatch(before.text):
        return Complaint(
            before.place,
            f"the chain begins on `{before.text}`, and a chain begins and ends on a node",
            f"write the node before it: node -- {before.text} -- {word.text}",
        )
    if position > 1 and _DESIGNATOR.fullmatch(before.text):
        return _no_node(words[position - 2], before)
    if re.fullmatch(r"[A-Z][0-9]+", word.text):
        return Complaint(
            word.place,
            f"`{word.text}` stands where a part stands, and its first letter is none of R, C, L, Z, Y",
            "name a two-terminal part R1, C1, L1, Z1 or Y1, and join others as U1 opamp: plus node, ...",
        )
    return Complaint(
        word.place,
        f"no part stands between `{before.text}` and `{word.text}`, as a part begins with R, C, L, Z or Y",
        f"put the part between two nodes: {before.text} -- R1 -- {word.text}",
    )


def _no_node(part: Name, word: Name) -> Complaint:
    return Complaint(
        word.place,
        f"`{word.text}` stands where a node stands, right after the part `{part.text}`",
        f"put a node between two parts: {part.text} -- a -- {word.text}",
    )


def _no_last_node(words: tuple[Name, ...]) -> Complaint:
    for before, node in zip(words[1::2], words[2::2], strict=False):
        if _DESIGNATOR.fullmatch(node.text):
            return _no_node(before, node)
    return Complaint(
        words[-1].place,
        f"the chain ends on the part `{words[-1].text}`",
        "a chain ends on a node: add `-- node`, or continue it on the next line with `--`",
    )
