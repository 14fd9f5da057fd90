"""Random stage sheets of every kind of part, tie and ask, and a long run that compares three solves of each.

``python -m tests.random_circuits --count 100000 --seed 1`` makes that many sheets, prints progress and totals, and
ends with status 1 where the ways disagree anywhere. ``--show 7`` prints the sheet of one seed.
"""

from __future__ import annotations

import argparse
import random
import sys
import time
from collections import Counter
from dataclasses import dataclass, field

NODES = ["in", "out", "a", "b", "c", "d", "m", "p", "x", "lp", "n1", "n10", "plus", "ask", "V2"]
DEVICE_WEIGHTS = {"opamp": 6, "vcvs": 1, "vccs": 2, "cccs": 1, "ccvs": 1, "transformer": 1, "conveyor": 2}
DEVICE_NAMES = {
    "opamp": "U",
    "vcvs": "E",
    "vccs": "G",
    "cccs": "F",
    "ccvs": "H",
    "transformer": "T",
    "conveyor": "K",
}
PARAMETERS = {"vcvs": "gain", "vccs": "gm", "cccs": "gain", "ccvs": "rm", "transformer": "ratio"}


@dataclass
class Draft:
    """A sheet while it is being drawn up; ``wires`` are (node, part, node)."""

    rng: random.Random
    nodes: list[str] = field(default_factory=list)
    wires: list[tuple[str, str, str]] = field(default_factory=list)
    devices: list[str] = field(default_factory=list)
    device_names: list[str] = field(default_factory=list)
    outputs: set[str] = field(default_factory=set)
    lines: list[str] = field(default_factory=list)
    more_parts: list[str] = field(default_factory=list)
    free_parameters: list[str] = field(default_factory=list)
    counts: Counter[str] = field(default_factory=Counter)
    seen: set[str] = field(default_factory=set)

    def node(self, *others: str) -> str:
        """Return a random node, ``gnd`` included, that is none of the others."""
        return self.rng.choice([n for n in [*self.nodes, "gnd", "gnd"] if n not in others])

    def new_name(self, letter: str) -> str:
        self.counts[letter] += 1
        return f"{letter}{self.counts[letter]}"

    def add_part(self, first: str, second: str, letters: str = "RRRRCCCCLZY") -> str:
        name = self.new_name(self.rng.choice(letters))
        ends = (first, second) if self.rng.random() < 0.5 else (second, first)
        self.wires.append((ends[0], name, ends[1]))
        self.seen |= set(ends)
        return name

    def parts(self) -> list[str]:
        return [name for _, name, _ in self.wires]


def random_sheet(rng: random.Random) -> str:
    """Return the text of a random sheet with 2 to 14 parts, or a few more where feedback or a loose end wants one.

    Two in three are drawn up with care (every node joined, amplifiers with a part from output to minus), so that
    most can be solved; the rest put anything anywhere.
    """
    draft = Draft(rng, rng.sample(NODES, rng.choice([1, 2, 3, 4, 4, 5, 5, 6, 7])))
    budget = rng.randint(2, 14)
    careful = rng.random() < 0.67
    if careful:
        _join_every_node(draft)
    if rng.random() < 0.15 and len(draft.nodes) > 3:
        budget -= _add_block(draft)
    while len(draft.wires) + len(draft.devices) < budget:
        if rng.random() < (0.25 if len(draft.devices) < 4 else 0.0):
            _add_device(draft, careful)
        else:
            first = draft.node()
            draft.add_part(first, draft.node(first))
    if careful:
        _join_hanging_nodes(draft)
    settings = _settings(draft)
    lines = [*_wire_lines(draft), *draft.devices, *draft.lines, *settings, *_asks(draft)]
    if rng.random() < 0.2:
        rng.shuffle(lines)  # the order of the statements is free
    return "\n".join(lines) + "\n"


# the circuit ---------------------------------------------------------------------------------------------------


def _join_every_node(draft: Draft) -> None:
    for k, node in enumerate(draft.nodes):
        draft.add_part(node, draft.rng.choice([*draft.nodes[:k], "gnd"]), "RRRRCCCL")


def _join_hanging_nodes(draft: Draft) -> None:
    words = (
        " ".join([*draft.devices, *draft.lines]).replace(",", " ").replace("(", " ").replace(")", " ").split()
    )
    for node in draft.nodes:
        if sum(w.count(node) for w in draft.wires) + words.count(node) == 1 and len(draft.nodes) > 1:
            draft.add_part(node, draft.node(node), "RC")


def _add_device(draft: Draft, careful: bool) -> None:
    kind = draft.rng.choices(list(DEVICE_WEIGHTS), list(DEVICE_WEIGHTS.values()))[0]
    if kind == "opamp":
        _add_amplifier_with_feedback(draft) if careful else _add_amplifier(draft)
    elif kind == "conveyor":
        x, y, z = (draft.node() for _ in "xyz")
        _keep_device(draft, kind, [f"x {x}", f"y {y}", f"z {z}", f"sign {draft.rng.choice('+-')}"])
    else:
        _add_pair_of_branches(draft, kind, {draft.nodes[0]} | draft.outputs if careful else set())


def _add_pair_of_branches(draft: Draft, kind: str, held: set[str]) -> None:
    """Add a controlled source or a transformer; a branch that sets a voltage keeps off the nodes that are held."""
    given, taken = ("primary", "secondary") if kind == "transformer" else ("senses", "drives")
    items = [f"{given} {_pair(draft, held if kind in ('cccs', 'ccvs') else set())}"]
    items.append(f"{taken} {_pair(draft, held if kind in ('vcvs', 'ccvs') else set())}")
    inline = draft.rng.random() < 0.5
    if inline:
        items.append(f"{PARAMETERS[kind]} {_parameter_value(draft)}")
    draft.rng.shuffle(items)
    name = _keep_device(draft, kind, items)
    if not inline:
        draft.free_parameters.append(f"{name}_{PARAMETERS[kind]}")


def _keep_device(draft: Draft, kind: str, items: list[str]) -> str:
    """Write a device's line, note which nodes it stands on, and return its name."""
    name = draft.new_name(DEVICE_NAMES[kind])
    draft.devices.append(f"{name} {kind}: {', '.join(items)}")
    draft.device_names.append(name)
    for item in items:
        draft.seen |= set(item.split()[1:]) & set(draft.nodes)
    return name


def _add_amplifier(draft: Draft) -> None:
    plus = draft.node()
    items = [f"plus {plus}", f"minus {draft.node(plus)}", f"drives {_output(draft)}"]
    _keep_device(draft, "opamp", [*items, *_gain_of_amplifier(draft.rng)])


def _output(draft: Draft) -> str:
    free = [n for n in draft.nodes[1:] if n not in draft.outputs]
    node = draft.rng.choice(free) if free and draft.rng.random() < 0.9 else draft.node()
    draft.outputs.add(node)
    return node


def _gain_of_amplifier(rng: random.Random) -> list[str]:
    return rng.choice([[], [], [], ["gain 100 dB"], ["gain 1e5"], ["gbw 1 MHz"], ["gain 1e5", "gbw 1 MHz"]])


def _add_amplifier_with_feedback(draft: Draft) -> None:
    rng = draft.rng
    output = _output(draft)
    inner = [n for n in draft.nodes if n not in draft.outputs and n != draft.nodes[0]]
    minus = rng.choice(inner) if inner else output
    if minus == "gnd" or output == "gnd":
        return
    if minus != output and rng.random() < 0.8:
        draft.add_part(output, minus, "RRCCZY")
    choices = [n for n in ["gnd", "gnd", *draft.nodes] if n != minus]
    items = [f"plus {rng.choice(choices)}", f"minus {minus}", f"drives {output}"]
    _keep_device(draft, "opamp", [*items, *_gain_of_amplifier(rng)])


def _pair(draft: Draft, held: set[str]) -> str:
    """Return two nodes; those whose voltage is set already are avoided as long as there are others."""
    if len(set(draft.nodes) - held) < 2:
        held = set()
    first = draft.node(*held)
    second = draft.node(first, *held)
    if second == "gnd" and draft.rng.random() < 0.5:
        return first  # the second node, left out, is gnd
    return f"{first} {second}"


def _parameter_value(draft: Draft) -> str:
    return draft.rng.choice(["3", "-2", "1", "0.5", "k", "2*k", "k^2", "1/(k + 1)"])


def _add_block(draft: Draft) -> int:
    """Add a block and one or two uses of it; return how many parts they bring."""
    rng = draft.rng
    ports = ["p1", "q1", "r1"][: rng.randint(2, 3)]
    inner = [*ports, "mid", "gnd"]
    wires = []
    for k in range(rng.randint(2, 3)):
        first = rng.choice(inner)
        kind = rng.choice("RRCL")
        wires.append((first, f"{kind}{k + 1}", rng.choice([n for n in inner if n != first])))
    lines = [f"{a} -- {part} -- {b}" for a, part, b in wires]
    devices = []
    if rng.random() < 0.4:
        a, b = rng.sample([*ports, "mid"], 2)
        devices.append("X1")
        lines.append(
            rng.choice([f"X1 vccs: senses {a} gnd, drives {b}", f"X1 opamp: plus gnd, minus {a}, drives {b}"])
        )
    resistors = [part for _, part, _ in wires if part[0] == "R"]
    if len(resistors) > 1 and rng.random() < 0.5:
        lines.append(f"fix {resistors[1]} = {rng.choice(['2', 'k', 'sqrt(3)'])}*{resistors[0]}")
    draft.lines.append("\n  ".join([f"block cell ({', '.join(ports)})", *lines]) + "\nend")
    uses = rng.randint(1, 2)
    for use in [f"S{k + 1}" for k in range(uses)]:
        joined = rng.sample(draft.nodes, len(ports))
        draft.lines.append(f"use cell as {use} ({', '.join(joined)})")
        draft.seen |= set(joined)
        draft.more_parts += [f"{use}_{part}" for _, part, _ in wires]
        draft.device_names += [f"{use}_{name}" for name in devices]
        if any("mid" in line for line in lines):
            draft.seen.add(f"{use}_mid")
    return uses * len(wires)


def _wire_lines(draft: Draft) -> list[str]:
    """Write the wires as chains: a wire that goes on where the last one ended often continues its chain."""
    lines: list[str] = []
    end = None
    for first, part, second in draft.wires:
        if first == end and draft.rng.random() < 0.7:
            lines[-1] += (
                f" -- {part}\n    -- {second}" if draft.rng.random() < 0.2 else f" -- {part} -- {second}"
            )
        else:
            lines.append(f"{first} -- {part} -- {second}")
        end = second
    return lines


# settings ------------------------------------------------------------------------------------------------------


def _settings(draft: Draft) -> list[str]:
    """Return fixes and choices: numbers, ties of every shape, and what general impedances are made of."""
    rng = draft.rng
    fixes = []
    free = draft.parts()
    rng.shuffle(free)
    while free:
        name = free.pop()
        if name[0] in "ZY":
            if rng.random() < 0.7:
                fixes.append((name, _immittance(draft, name)))
        elif rng.random() < 0.25:
            peers = [n for n in free if n[0] == name[0]]
            value = _tie(draft, peers) if peers and rng.random() < 0.8 else _number(rng, name[0])
            fixes.append((name, value))
    for parameter in draft.free_parameters:
        if rng.random() < 0.4:
            fixes.append((parameter, rng.choice(["k/(1 + s*tau)", "w1/s", "2*k", "3", "-k", "k*pi"])))
    lines = [f"fix {name} = {value}" for name, value in fixes]
    if len(lines) > 1 and rng.random() < 0.3:
        lines = ["fix " + ", ".join(f"{name} = {value}" for name, value in fixes)]
    text = "\n".join([*lines, *draft.devices, *draft.lines])
    chosen = [name for name in ("k", "tau", "w1") if _stands_in(name, text)]
    if chosen:
        lines.append(f"{rng.choice(['choose', 'solve'])} {', '.join(chosen)}")
    return lines


def _stands_in(name: str, text: str) -> bool:
    words = "".join(c if c.isalnum() or c == "_" else " " for c in text).split()
    return name in words


def _tie(draft: Draft, peers: list[str]) -> str:
    a, b = draft.rng.choice(peers), draft.rng.choice(peers)
    return draft.rng.choice(
        [
            a,
            a,
            f"2*{a}",
            f"{a}/3",
            f"k*{a}",
            f"(k + 1)*{a}",
            f"{a}/(k - 1)",
            f"sqrt(2)*{a}",
            f"{a}*(1 + sqrt(3))/2",
            f"pi*{a}",
            f"{a}*{b}/({a} + {b})",
            f"{a} + {b}",
            f"{a}^2/{b}",
        ]
    )


def _number(rng: random.Random, kind: str) -> str:
    return rng.choice({"R": ["4k7", "10 kohm", "0R47"], "C": ["22 nF", "2n2", "1e-9"], "L": ["10 mH"]}[kind])


def _immittance(draft: Draft, name: str) -> str:
    rng = draft.rng
    number = draft.counts["inside"] = draft.counts["inside"] + 1
    r, c, inductor = f"R{90 + number}", f"C{90 + number}", f"L{90 + number}"
    impedances = [
        f"{r} + 1/(s*{c})",
        f"s*{inductor}",
        f"{r}/(1 + s*{r}*{c})",
        f"{r} + s*{inductor}",
        f"2*{r}",
    ]
    admittances = [f"s*{c} + 1/{r}", f"s*{c}", f"1/({r} + 1/(s*{c}))", f"s^2*{c}*tau", f"sqrt(2)*s*{c}"]
    return rng.choice(impedances if name[0] == "Z" else admittances)


# asks ----------------------------------------------------------------------------------------------------------


def _asks(draft: Draft) -> list[str]:
    rng = draft.rng
    nodes = sorted(n for n in draft.seen if n != "gnd")
    first = draft.nodes[0] if draft.nodes[0] in nodes else nodes[0]
    drive = first if rng.random() < 0.8 else rng.choice(nodes)
    lines = []
    for name in ["H", "Zx", "Aux"][: rng.randint(1, 3)]:
        lines.append(f"ask {name} = {_ratio(draft, nodes, drive)}")
    return lines


def _ratio(draft: Draft, nodes: list[str], drive: str) -> str:
    rng = draft.rng
    kind = rng.choices(
        ["voltage", "impedance", "output", "current in", "current of node", "driven", "between", "loop"],
        [8, 2, 2, 2, 1, 2, 1, 1],
    )[0]
    over = _over(draft, nodes)
    dead = _conditions(rng, nodes, drive)
    if kind == "voltage":
        return f"{over}/V_{drive}{dead}"
    if kind == "impedance":
        return f"V_{drive}/I_{drive}{dead}"
    if kind == "output":
        node = rng.choice(nodes)
        return f"V_{node}/I_{node}" + (f" with V_{drive} = 0" if node != drive else "")
    if kind == "current in":
        return f"{over}/I_{rng.choice(nodes)}{dead}"
    if kind == "current of node":
        node = rng.choice(nodes)
        return f"I_{node}/V_{drive}" + (f" with V_{node} = 0" if node != drive else "")
    if kind == "between" and len(nodes) > 1:
        a, b = rng.sample(nodes, 2)
        return f"{over}/(V_{a} - V_{b})"
    amplifiers = [line.split()[0] for line in draft.devices if ", gain 1" in line and "opamp" in line]
    if kind == "loop" and amplifiers:
        return f"loop({rng.choice(amplifiers)}) with V_{drive} = 0"
    return f"{over}/{_over(draft, nodes)} driven at {drive}{dead}"


def _over(draft: Draft, nodes: list[str]) -> str:
    rng = draft.rng
    currents = [*draft.parts(), *draft.more_parts, *draft.device_names]
    choice = rng.random()
    if choice < 0.3 and currents:
        return f"I_{rng.choice(currents)}"
    if choice < 0.45 and len(nodes) > 1:
        a, b = rng.sample(nodes, 2)
        return f"(V_{a} - V_{b})"
    return f"V_{rng.choice(nodes)}"


def _conditions(rng: random.Random, nodes: list[str], drive: str) -> str:
    others = [n for n in nodes if n != drive]
    if not others or rng.random() < 0.8:
        return ""
    chosen = rng.sample(others, min(len(others), rng.randint(1, 2)))
    return " with " + ", ".join(f"{rng.choice('VVI')}_{node} = 0" for node in chosen)


# the long run --------------------------------------------------------------------------------------------------


def run(count: int, seed: int) -> Counter[str]:
    """Compare ``count`` random sheets from ``seed`` on; print progress, each disagreement, and return totals."""
    from tests.core.three_ways import compare_sheet

    totals: Counter[str] = Counter()
    start = shown = time.monotonic()
    for number in range(seed, seed + count):
        rng = random.Random(number)
        text = random_sheet(rng)
        totals["sheets"] += 1
        try:
            totals.update(compare_sheet(text, rng))
        except Exception as fault:  # a crash as well is reported with its sheet, and counts
            totals["WRONG"] += 1
            print(f"seed {number}: {type(fault).__name__}: {fault}\n{text}", flush=True)
        if time.monotonic() - shown > 30:
            shown = time.monotonic()
            agree = sum(number for name, number in totals.items() if "agree" in name)
            done, wrong = totals["sheets"], totals["WRONG"]
            print(
                f"{done} of {count} sheets in {shown - start:.0f} s: {agree} answers agree, {wrong} wrong",
                flush=True,
            )
    return totals


def main() -> int:
    """Read the command line, run, print the totals."""
    parser = argparse.ArgumentParser(prog="python -m tests.random_circuits", description=__doc__)
    parser.add_argument("--count", type=int, default=1000, help="how many sheets")
    parser.add_argument("--seed", type=int, default=1, help="the first sheet's seed")
    parser.add_argument("--show", type=int, help="print the sheet of this seed and stop")
    options = parser.parse_args()
    if options.show is not None:
        print(random_sheet(random.Random(options.show)), end="")
        return 0
    totals = run(options.count, options.seed)
    for name, number in sorted(totals.items()):
        print(f"{number:9}  {name}")
    print("none wrong" if not totals["WRONG"] else f"{totals['WRONG']} WRONG")
    return 1 if totals["WRONG"] else 0


if __name__ == "__main__":
    sys.exit(main())
