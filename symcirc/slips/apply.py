"""Puts edits into a tree; what they leave alone stays the same object, so that it can be written as it was."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from symcirc.sheet.expression import Expression, children, with_children


@dataclass
class Edited:
    """A side with edits in it; ``originals`` gives for every node that was rebuilt the one that was written."""

    tree: Expression
    originals: dict[int, Expression] = field(default_factory=dict)


def edited(tree: Expression, replacements: Mapping[int, Expression]) -> Edited:
    """Return a tree with nodes, named by their ``id``, replaced; inside a replacement the others are replaced too."""
    result = Edited(tree)
    result.tree = _edited(tree, dict(replacements), result.originals)
    return result


def _edited(
    node: Expression, replacements: dict[int, Expression], originals: dict[int, Expression]
) -> Expression:
    if id(node) in replacements:
        inner = {key: value for key, value in replacements.items() if key != id(node)}
        return _edited(replacements[id(node)], inner, originals) if inner else replacements[id(node)]
    below = children(node)
    changed = [_edited(child, replacements, originals) for child in below]
    if all(new is old for new, old in zip(changed, below, strict=True)):
        return node
    rebuilt = with_children(node, changed)
    originals[id(rebuilt)] = node
    return rebuilt
