"""Random arithmetic and random sheets, each with what it must be read as."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from hypothesis import strategies as st


@dataclass(frozen=True)
class Arithmetic:
    """A text, its value by Python's fractions, and how tightly it binds: 1 sum, 2 product, 3 sign, 4 atom."""

    text: str
    value: Fraction
    level: int

    def at(self, level: int) -> str:
        """Return the text for a place that binds as tightly as ``level``."""
        return self.text if self.level >= level else f"({self.text})"


NUMBERS = st.builds(
    lambda whole, tenths: Arithmetic(f"{whole}.{tenths}", Fraction(f"{whole}.{tenths}"), 4),
    st.integers(0, 30),
    st.integers(0, 9),
) | st.integers(0, 30).map(lambda n: Arithmetic(str(n), Fraction(n), 4))


def _sum(a: Arithmetic, b: Arithmetic) -> Arithmetic:
    return Arithmetic(f"{a.at(1)} + {b.at(2)}", a.value + b.value, 1)


def _difference(a: Arithmetic, b: Arithmetic) -> Arithmetic:
    return Arithmetic(f"{a.at(1)}-{b.at(2)}", a.value - b.value, 1)


def _product(a: Arithmetic, b: Arithmetic) -> Arithmetic:
    return Arithmetic(f"{a.at(2)}*{b.at(3)}", a.value * b.value, 2)


def _quotient(a: Arithmetic, b: Arithmetic) -> Arithmetic:
    if b.value == 0:
        return a
    return Arithmetic(f"{a.at(2)} / {b.at(3)}", a.value / b.value, 2)


def _power(a: Arithmetic, exponent: int) -> Arithmetic:
    if a.value == 0:
        return a
    return Arithmetic(f"{a.at(4)}{'^' if exponent % 2 else '**'}{exponent}", a.value**exponent, 3)


def _negative(a: Arithmetic) -> Arithmetic:
    return Arithmetic(f"-{a.at(3)}", -a.value, 3)


ARITHMETIC = st.recursive(
    NUMBERS,
    lambda inner: (
        st.builds(_sum, inner, inner)
        | st.builds(_difference, inner, inner)
        | st.builds(_product, inner, inner)
        | st.builds(_quotient, inner, inner)
        | st.builds(_power, inner, st.integers(-3, 3))
        | st.builds(_negative, inner)
    ),
    max_leaves=12,
)

NODES = ("in", "out", "a", "b", "fix", "end", "gnd")
WRITTEN = {
    "R": [
        ("4k7", Fraction(4700)),
        ("10 kohm", Fraction(10000)),
        ("2e3", Fraction(2000)),
        ("100R", Fraction(100)),
    ],
    "C": [("22 nF", Fraction(22, 10**9)), ("2n2", Fraction(22, 10**10)), ("1/4", Fraction(1, 4))],
    "L": [("10 mH", Fraction(1, 100)), ("10m", Fraction(1, 100)), ("1.5e-3", Fraction(3, 2000))],
}


@dataclass(frozen=True)
class RandomSheet:
    """The lines of a sheet, its parts with their nodes, its devices, and the numbers of what is fixed."""

    lines: tuple[str, ...]
    parts: dict[str, tuple[str, str]]
    devices: dict[str, str]
    numbers: dict[str, Fraction]

    @property
    def text(self) -> str:
        """The sheet as one text."""
        return "\n".join(self.lines)


@st.composite
def random_sheets(draw: st.DrawFn) -> RandomSheet:
    """Draw a sheet: chains, devices, fixes, asks and a target, in any order, with comments and blanks."""
    lines, parts, numbers, devices = ["ask H = V_out/V_in", "in -- R0 -- out"], {"R0": ("in", "out")}, {}, {}
    for _ in range(draw(st.integers(0, 4))):
        node = draw(st.sampled_from(NODES))
        chain = node
        for _ in range(draw(st.integers(1, 3))):
            following = draw(st.sampled_from([n for n in NODES if n != node]))
            part = f"{draw(st.sampled_from('RCLZY'))}{len(parts)}"
            link = draw(st.sampled_from(["--", " -- ", "\t--\t", "  # go on\n\n -- "]))
            chain += f"{link}{part} -- {following}"
            parts[part] = (node, following)
            node = following
        lines.append(chain)
    for index in range(draw(st.integers(0, 2))):
        kind, rest = draw(st.sampled_from(sorted(DEVICE_LINES.items())))
        name = f"{draw(st.sampled_from('UTEK'))}{index}"
        devices[name] = kind
        lines.append(f"{name} {kind}: {rest}")
    for part in sorted(parts):
        if part[0] in WRITTEN and draw(st.booleans()):
            text, numbers[part] = draw(st.sampled_from(WRITTEN[part[0]]))
            lines.append(draw(st.sampled_from(["fix {} = {}", "  fix {}={}  # set"])).format(part, text))
    if draw(st.booleans()):
        lines.append(draw(st.sampled_from(TARGET_LINES)))
    return RandomSheet(tuple(draw(st.permutations(lines))), parts, devices, numbers)


DEVICE_LINES = {
    "opamp": "plus gnd, minus a, drives out, gain 100 dB",
    "vcvs": "senses in a, drives b, gain 2",
    "vccs": "senses in, drives b gnd",
    "cccs": "senses in a, drives b, gain 1/2",
    "ccvs": "senses in a, drives b out",
    "transformer": "primary in, secondary out, ratio 2",
    "conveyor": "x in, y a, z out, sign -",
}
TARGET_LINES = [
    "target H: lowpass butterworth, order 2, edge 1.2 kHz, gain 1",
    "target H: bandpass chebyshev, order 2, ripple 0.5 dB, edges 900 Hz 1.1 kHz",
    "target H = -1/(1 + s*R0)^2",
    "limit H: loss <= 1 dB from 62 Hz to 2 kHz",
    "parts R: E96 1 %, from 1 kohm to 1 Mohm",
    'note "R0, C0; see # 3"',
]
#: What a slip of the finger puts in.
LETTERS = st.sampled_from(
    [
        *'()+-*/^=:,.;#"\n\t\r abcxyzsRCLUVI_0159<>%é—µΩ\0\ufeff',
        "--",
        "end",
        "block x (p)\n",
        " fix ",
        "ask",
        "sqrt",
        "e9",
    ]
)
#: What random texts are made of.
PIECES = [
    *'RCab1 -=,:()*/^\n#"',
    "--",
    " -- ",
    "fix ",
    "ask ",
    "V_a",
    "end",
    "block ",
    "R1",
    "4k7",
    "target H: ",
    "= ",
]
