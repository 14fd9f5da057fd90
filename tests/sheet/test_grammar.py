"""The grammars: without conflicts, and true to their own examples."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from lark import Lark
from lark.exceptions import LarkError

from symcirc.complaints import Source
from symcirc.grammar import grammar_folder, parser
from symcirc.sheet.parse import parse_sheet

GRAMMARS = sorted(path.name for path in grammar_folder().glob("*.lark"))


def strict(path: Path) -> Lark:
    """Build a parser in lark's strict mode: a conflict of rules or a collision of terminals is an error."""
    return Lark.open(str(path), parser="lalr", strict=True, maybe_placeholders=True)


def test_the_sheets_grammar_has_no_conflicts_and_no_collisions() -> None:
    strict(grammar_folder() / "sheet.lark")


def test_strict_mode_would_find_a_collision(tmp_path: Path) -> None:
    for name in GRAMMARS:
        (tmp_path / name).write_text((grammar_folder() / name).read_text("utf-8"), "utf-8")
    sheet = tmp_path / "sheet.lark"
    text = sheet.read_text("utf-8")
    clash = text.replace("(NODE_WORD | NAME) (LINK NAME)+", "(NODE_WORD | NAME | CLASH) (LINK NAME)+")
    sheet.write_text(clash + "\nCLASH: /[a-z]+x/\n", "utf-8")
    with pytest.raises(LarkError):
        strict(sheet)


def test_a_parser_is_built_once_a_process() -> None:
    assert parser("sheet") is parser("sheet")


def examples() -> list[str]:
    """Return the examples in the grammar's comments: lines indented by three, without what explains them."""
    text = (grammar_folder() / "sheet.lark").read_text("utf-8")
    blocks = re.findall(r"(?:^//   .*\n)+", text, flags=re.MULTILINE)
    return [
        "\n".join(re.sub(r"(?<=\S) {3,}.*", "", line[5:]) for line in block.splitlines()) for block in blocks
    ]


@pytest.mark.parametrize("text", examples())
def test_every_example_in_the_grammars_comments_is_grammatical(text: str) -> None:
    statements = parse_sheet(Source("grammar", text))
    assert len(statements) >= 1


def test_the_grammar_shows_every_statement() -> None:
    shown = {line.split()[0] for text in examples() for line in text.splitlines() if line.strip()}
    assert shown >= {
        "stage",
        "block",
        "use",
        "fix",
        "choose",
        "solve",
        "ask",
        "target",
        "limit",
        "parts",
        "note",
        "end",
    }
    assert len(examples()) >= 9
