"""The equations of a note put before the check of workings: none is printed that it does not judge to hold."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

from symcirc.complaints import InternalFault, Source
from symcirc.derivation import Answer, BigAnswer, Posed
from symcirc.note.algebra import own_posed, stages_of
from symcirc.note.material import Material
from symcirc.note.model import Block, Derivation, Equation
from symcirc.transfer.standard import monic_forms, texts
from symcirc.transfer.text import text
from symcirc.working.check import check_posed

#: The first words of the anchors of what is a statement about the circuit.
OF_THE_CIRCUIT = ("step", "ratio", "standard", "product", "w0", "f0", "Q")


@dataclass(frozen=True)
class Judged:
    """How many equations were judged to hold."""

    lines: int


def equations_of(blocks: Iterable[Block]) -> list[Equation]:
    """Return the displayed equations of blocks, those of derivations too, in their order."""
    found: list[Equation] = []
    for block in blocks:
        if isinstance(block, Equation):
            found.append(block)
        elif isinstance(block, Derivation):
            found += [step.equation for step in block.steps]
    return found


def judge(material: Material, blocks: Sequence[Block]) -> Judged:
    """Have the check judge every equation that says something of the circuit.

    Raises InternalFault where one does not hold.
    """
    judged = 0
    groups = _groups(material)
    waiting: dict[str, list[str]] = {}
    for equation in equations_of(blocks):
        kind, _, rest = equation.anchor.partition("-")
        if kind in OF_THE_CIRCUIT:
            name = next(name for name in groups if rest == name or rest.startswith(f"{name}-"))
            waiting.setdefault(name, []).append(working_line(equation))
    for name, lines in waiting.items():
        _require(groups[name], lines)
        judged += len(lines)
    return Judged(judged)


@dataclass(frozen=True)
class _Group:
    """What lines are judged under, and the answer that they are about."""

    posed: Posed
    answer: Answer | BigAnswer


def working_line(equation: Equation) -> str:
    """Return an equation in the language of a working."""
    said = f"{text(equation.left)} {equation.relation} {text(equation.right)}"
    return said.replace("**", "^").replace("ω0", "w0")


def _groups(material: Material) -> Mapping[str, _Group]:
    """Return what the lines of each ask, or of each stage of a cascade, are judged under; the longest names first."""
    found = {}
    for answer in material.derivation.answers:
        name = answer.ask.name
        for stage in stages_of(material, name):
            found[f"{name}-{stage.number}"] = _Group(own_posed(stage), stage.answer)
        found[name] = _Group(_first(material.posed, name), answer)
    return found


def _first(posed: Posed, ask: str) -> Posed:
    """Return what was posed with this ask as the first: its drives count then, and w0, f0 and Q are its own."""
    asks = sorted(posed.sheet.asks, key=lambda other: other.name != ask)
    return replace(posed, sheet=replace(posed.sheet, asks=tuple(asks)))


def _require(group: _Group, lines: Sequence[str]) -> None:
    working = [f"under {group.answer.ask.name}", *lines, *_of_one_pole(group.answer, lines)]
    verdicts = {"holds", "defines"} if len(working) > len(lines) + 1 else {"holds"}
    for line in check_posed(group.posed, Source("note.work", "\n".join(working))).lines:
        if line.verdict not in verdicts:
            raise InternalFault(f"an equation of the note is judged as {line.verdict}: {line.text}")


def _of_one_pole(answer: Answer | BigAnswer, lines: Sequence[str]) -> Iterator[str]:
    """Yield the function by way of its pole's frequency: to a working that only defines one, as it knows none."""
    if not isinstance(answer, Answer) or answer.function.order != 1:
        return
    over = " + ".join(
        f"({coefficient})*s^{k}"
        for k, coefficient in enumerate(texts(monic_forms(answer.function).numerator))
    )
    for name, omega in (("w0", "w0"), ("f0", "2*pi*f0")):
        if any(line.startswith(f"{name} =") for line in lines):
            yield f"{answer.ask.name} = ({over})/(s + {omega})".replace("**", "^")
