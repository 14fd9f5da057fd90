"""Exchanged amplifier inputs: the ideal transfer function cannot show them, the stage's natural modes can.

With every ideal amplifier as A = w_t/s the natural modes are the roots of the circuit's determinant. As w_t grows
without bound some of them tend to those of the ideal stage and the others run to infinity: to the left where the
feedback is negative on balance, to the right where it is positive. Exchanging the inputs of one amplifier turns the
sign of its own w_t. The test is that of A. Antoniou for impedance converters of two amplifiers, "Realisation of
gyrators using operational amplifiers, and their use in RC-active-network synthesis", Proc. IEE 116 (1969), from
memory: with the wrong pairing of the inputs they are unstable though ideally the same.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from itertools import combinations, product

from symcirc.circuit.model import Circuit, CurrentDrive, LoopDrive, Setup, VoltageDrive
from symcirc.complaints import Remark, listed
from symcirc.sheet.model import GROUND, NodeCurrent, Sheet, Voltage
from symcirc.stability.determinant import Block, amplifiers, known_quotients, loops, with_numbers
from symcirc.stability.runaway import Runaway, runaway_roots
from symcirc.stability.samples import part_values

#: Sets of part values that are tried where the sheet leaves some open: the verdict must be the same for all.
SAMPLES = 8
#: Loops of more equations than this are no stage, and are not judged.
LARGEST_LOOP = 64
#: Sets of exchanged amplifiers that are thought of in one loop, the small ones first.
MOST_SETS = 40

Names = frozenset[str]
#: For the amplifiers of a loop: the sets of them whose exchange mends it.
Suspicions = dict[Names, set[Names]]


def exchanged_inputs(sheet: Sheet, circuit: Circuit, setups: Sequence[Setup]) -> list[Remark]:
    """Return a remark for every loop of amplifiers with positive feedback that exchanged inputs explain.

    It is judged at the sheet's numbers or, where it leaves some open, at several sets of ordinary values (general
    impedances as resistors) which must agree. An impedance is judged with its node open and with its node shorted,
    which must agree as well: a negative-impedance converter is stable in one of the two only, either way round. A
    loop gain is judged with the loop closed. Loops of more than 64 equations are passed over.

    Args:
        sheet: for its numbers and ties.
        circuit: the sheet's; every amplifier counts as w_t/s, whatever its own gain.
        setups: the asks', as ``build_setup`` gives them.

    >>> from symcirc.circuit import build_circuit, build_setup
    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> text = "in -- R1 -- m -- R2 -- out\\nU1 opamp: plus m, minus gnd, drives out\\nask H = V_out/V_in"
    >>> sheet = read_sheet(Source("a.stage", text))
    >>> circuit = build_circuit(sheet)
    >>> found = exchanged_inputs(sheet, circuit, [build_setup(circuit, sheet.asks, sheet.asks[0])])
    >>> [remark.message.partition(": ")[2] for remark in found]
    ['are plus and minus of `U1` exchanged?']
    """
    if not amplifiers(circuit):
        return []
    judged = {(setup.drive, setup.shorts, _impedance_node(setup)): setup for setup in setups}
    remarks = [
        _remark(circuit, block, mends)
        for setup in judged.values()
        for block, mends in _suspicions(sheet, circuit, setup).items()
    ]
    return list(dict.fromkeys(remarks))


def _suspicions(sheet: Sheet, circuit: Circuit, setup: Setup) -> Suspicions:
    """Return what all the drives agree on that an ask can stand for; one without an ideal solution has no say."""
    found = [_under_one_drive(sheet, circuit, one) for one in _drives(setup)]
    agreed: Suspicions | None = None
    for one in found:
        if one is not None:
            agreed = one if agreed is None else _common(agreed, one)
    return agreed or {}


def _drives(setup: Setup) -> list[Setup]:
    """Return an ask's drive, and the other kind of drive at the same node where an impedance is asked."""
    drive, node = setup.drive, _impedance_node(setup)
    if isinstance(drive, LoopDrive):  # a current source at its output leaves the loop closed
        return [replace(setup, drive=CurrentDrive(drive.node))]
    if node is None:
        return [setup]
    other = CurrentDrive(node) if isinstance(drive, VoltageDrive) else VoltageDrive(node, GROUND)
    return [setup, replace(setup, drive=other)]


def _impedance_node(setup: Setup) -> str | None:
    """Return the node whose voltage and delivered current an ask compares, or None where it asks for more."""
    match setup.over, setup.under:
        case (Voltage(plus=node, minus="gnd"), NodeCurrent(node=same)) if node == same:
            return node
        case (NodeCurrent(node=same), Voltage(plus=node, minus="gnd")) if node == same:
            return node
    return None


def _under_one_drive(sheet: Sheet, circuit: Circuit, setup: Setup) -> Suspicions | None:
    """Return what is suspected for every set of values, or None where the circuit has no ideal solution."""
    structure = [loop for loop in loops(circuit, setup) if len(loop.equations) <= LARGEST_LOOP]
    standing: Suspicions | None = None
    for values in part_values(sheet, SAMPLES):
        known = known_quotients(sheet.ties, values)
        found = _suspected([with_numbers(loop, known) for loop in structure], standing)
        if not found:
            return found
        standing = found
    return standing


def _suspected(blocks: Sequence[Block], standing: Suspicions | None) -> Suspicions | None:
    """Return what is suspected for one set of values and, if others came before it, for all of them."""
    found: Suspicions = {}
    for block in blocks:
        names = frozenset(block.laws)
        modes = runaway_roots(block.determinant())
        if modes is None:
            return None
        if modes.any and (standing is None or names in standing):
            mends = _mends(block, modes, _choices(block) if standing is None else standing[names])
            found |= {names: mends} if mends or modes.real else {}
    return found


def _choices(block: Block) -> set[Names]:
    """Return the sets of amplifiers that may be thought to be exchanged."""
    sets: set[Names] = set()
    for size in range(1, len(block.laws) + 1):
        if sets and len(sets) + math.comb(len(block.laws), size) > MOST_SETS:
            break
        sets |= {frozenset(names) for names in combinations(block.laws, size)}
    return sets


def _mends(block: Block, modes: Runaway, among: set[Names]) -> set[Names]:
    """Return the sets whose exchange leaves no runaway mode; if there are none, no mode that does not swing.

    Where only swinging modes run away as it is, and no exchange stops them, the amplifiers are too fast for the
    stage and not exchanged.
    """
    after = {names: runaway_roots(block.determinant(names)) for names in among}
    left = {names: modes for names, modes in after.items() if modes is not None}
    quiet = {names for names, modes in left.items() if not modes.any}
    return quiet or {names for names, remaining in left.items() if modes.real and not remaining.real}


def _common(one: Suspicions, other: Suspicions) -> Suspicions:
    """Return what two verdicts agree on: amplifiers suspected by both, and a way to mend them in both.

    A drive can cut a loop in two, so that the sets of amplifiers need not be the same.
    """
    agreed: Suspicions = {}
    for (block, mends), (other_block, other_mends) in product(one.items(), other.items()):
        shared = block & other_block
        left, right = ({names & shared for names in sets if names & shared} for sets in (mends, other_mends))
        if not (mends and other_mends):  # nothing mends the one: it has no say in how
            agreed |= {shared: left | right} if shared else {}
        elif left & right:
            agreed[shared] = left & right
    return agreed


def _remark(circuit: Circuit, block: Names, mends: set[Names]) -> Remark:
    devices = {device.name: device for device in amplifiers(circuit)}
    least = min(map(len, mends), default=0)
    choices = sorted(sorted(names) for names in mends if len(names) == least)
    suspects = choices or [[name] for name in sorted(block)]
    words = listed((listed(f"`{devices[name].label}`" for name in names) for names in suspects), "or")
    return Remark(
        devices[suspects[0][0]].place,
        "the feedback is positive on balance, and with fast amplifiers a natural mode runs to +infinity: "
        f"are plus and minus of {words} exchanged?",
    )
