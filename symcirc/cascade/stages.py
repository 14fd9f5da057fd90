"""The stages of a cascade as circuits of their own, each derived by itself."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import reduce
from typing import Any

from symcirc.circuit import build_circuit
from symcirc.circuit.model import Setup, VoltageDrive
from symcirc.circuit.separable import Piece, separable_pieces
from symcirc.derivation import MOST_PRODUCTS, Answer, Derivation, Posed, derive
from symcirc.posing import unknowns_in
from symcirc.progress import Progress
from symcirc.sheet.expression import Expression, names
from symcirc.sheet.model import GROUND, Sheet, Voltage
from symcirc.witness.agree import confirm_values, value_of


@dataclass(frozen=True)
class Stage:
    """One stage of a cascade: ``piece`` of the whole circuit, derived as ``answer`` of a sheet of its own."""

    number: int
    piece: Piece
    derivation: Derivation
    answer: Answer

    @property
    def sheet(self) -> Sheet:
        """The stage's own sheet: its parts and what the whole sheet says of them."""
        return self.derivation.sheet

    @property
    def order(self) -> int:
        """The number of its poles."""
        return self.answer.function.order


def cascade_stages(posed: Posed, ask: str, progress: Progress) -> tuple[Stage, ...]:
    """Return the stages of a cascade in the order of the signal; none where the circuit is no cascade.

    It is one where at least two stages have poles. Stages that share something that is to be solved for, by ties
    or a parameter, count as one. The product of the stages is compared with the numeric solve of the whole.

    Raises InternalFault where the two differ.
    """
    setup = posed.setups[ask]
    pieces = separable_pieces(posed.circuit, setup)
    if len(pieces) < 2:
        return ()
    progress("deriving the stages")
    derived = _derived(posed, setup, pieces)
    while derived and (run := _coupled(derived)) is not None:
        first, last = run
        joined = reduce(_joined, pieces[first : last + 1])
        pieces = (*pieces[:first], joined, *pieces[last + 1 :])
        derived = _derived(posed, setup, pieces)
    if sum(stage.order > 0 for stage in derived) < 2:
        return ()
    _confirm(posed, setup, derived)
    return derived


def _joined(one: Piece, other: Piece) -> Piece:
    return Piece(one.first, other.last, one.parts + other.parts, one.devices + other.devices)


def _coupled(stages: Sequence[Stage]) -> tuple[int, int] | None:
    """Return the first and the last of the stages that something to be solved for stands in, if any are."""
    places: dict[str, list[int]] = {}
    for k, stage in enumerate(stages):
        for name in unknowns_in(stage.sheet, stage.answer.function):
            places.setdefault(name, []).append(k)
    return next(((found[0], found[-1]) for found in places.values() if len(found) > 1), None)


def _derived(posed: Posed, setup: Setup, pieces: Sequence[Piece]) -> tuple[Stage, ...]:
    """Return the pieces derived; none where one is too big for that."""
    stages = []
    for number, piece in enumerate(pieces, 1):
        derivation = derive(_posed(posed, setup, piece), most=MOST_PRODUCTS)
        (answer,) = derivation.answers
        if not isinstance(answer, Answer):
            return ()
        stages.append(Stage(number, piece, derivation, answer))
    return tuple(stages)


def _posed(posed: Posed, setup: Setup, piece: Piece) -> Posed:
    """Return a piece made ready: driven at its first node as by the source before it, asked at its last."""
    whole = posed.sheet
    nodes = {node for part in piece.parts for node in (part.first, part.second)} | {piece.last}
    nodes |= {n for device in piece.devices for terminal in device.terminals.values() for n in terminal}
    over = Voltage(piece.last, GROUND, setup.over.place)
    if piece.first is None:
        own = replace(setup, over=over)
        nodes |= set(setup.drive.pair)
    else:
        under = Voltage(piece.first, GROUND, setup.under.place)
        own = replace(setup, drive=VoltageDrive(piece.first, GROUND), over=over, under=under)
        nodes.add(piece.first)
    shorts = tuple(pair for pair in setup.shorts if nodes >= set(pair) - {GROUND})
    ask = replace(whole.ask(setup.ask), over=over, under=own.under)
    ties = _own_ties(posed.ties, piece)
    held = piece.names | {name.text for tie in ties.values() for name in names(tie)}
    sheet = replace(
        whole,
        fixes={n: fix for n, fix in whole.fixes.items() if fix.number is not None or n in ties},
        parts=piece.parts,
        devices=piece.devices,
        node_places={n: p for n, p in whole.node_places.items() if n in nodes},
        symbols={n: s for n, s in whole.symbols.items() if s.role != "part" or n in held},
        asks=(ask,),
        targets=(),
        remarks=(),
    )
    circuit = build_circuit(sheet)
    return Posed(sheet, circuit, circuit, ties, {setup.ask: replace(own, shorts=shorts)})


def _own_ties(ties: Mapping[str, Expression], piece: Piece) -> dict[str, Expression]:
    """Return the ties that a piece depends on, those of its parts and of what these hold."""
    wanted = [*(p.name for p in piece.parts), *(n for d in piece.devices for n in d.parameters.values())]
    found: dict[str, Expression] = {}
    while wanted:
        name = wanted.pop()
        if name in ties and name not in found:
            found[name] = ties[name]
            wanted += [n.text for n in names(ties[name])]
    return found


def _confirm(posed: Posed, setup: Setup, stages: Sequence[Stage]) -> None:
    """Compare the product of the stages with the numeric solve of the whole circuit at random values."""

    def product(known: Mapping[str, Any], s: complex) -> complex:
        return math.prod((value_of(stage.answer.function, known, s) for stage in stages), start=1 + 0j)

    confirm_values(posed.circuit, setup, posed.ties, product)
