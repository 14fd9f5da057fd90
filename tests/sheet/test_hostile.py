"""Hostile text is refused within a second of the processor, and large honest text is read in time."""

from __future__ import annotations

import time

import pytest

from symcirc.complaints import Complaint, Source
from symcirc.sheet import decode, read_sheet
from symcirc.sheet.bounds import LARGEST_FILE, LONGEST_NAME, MOST_IRRATIONAL, MOST_WORDS
from tests.sheet.reading import BASE, read

MILLION = 999_900


def ties(count: int, last: str) -> str:
    return f"{BASE}fix a0 = {last}" + "".join(f", a{i + 1} = a{i}" for i in range(count))


def blocks(count: int) -> str:
    """Return blocks of which each uses the one before it twice: 2 to the count parts."""
    inner = "block b0 (p, q)\np -- R1 -- q\nend\n"
    outer = "".join(
        f"block b{i + 1} (p, q)\nuse b{i} as A (p, m)\nuse b{i} as B (m, q)\nend\n" for i in range(count)
    )
    return f"{inner}{outer}use b{count} as T (in, out)\nask H = V_out/V_in"


HOSTILE = {
    "brackets": "(" * MILLION,
    "brackets-in-a-value": BASE + "fix a = " + "(" * MILLION,
    "closed-brackets": BASE + "fix a = " + "(" * 450_000 + "1" + ")" * 450_000,
    "minus-signs": "-" * MILLION,
    "minus-signs-in-a-value": BASE + "fix a = " + "-" * MILLION + "1",
    "ones": BASE + "fix a = 1" + "+1" * 450_000,
    "quotients": BASE + "fix a = 1" + "/3" * 450_000,
    "powers": BASE + "fix a = 2" + "^2" * 450_000,
    "chain": "a--b--" * 160_000,
    "parts": "a--R1--" * 140_000 + "b",
    "lines-of-links": "a" + "\n--R1" * 190_000,
    "newlines": "\n" * MILLION,
    "newlines-then-a-link": BASE + "\n" * MILLION + "-- R2 -- q",
    "carriage-returns": "\r" * MILLION,
    "blanks": " " * MILLION,
    "comments": "#\n" * 499_000,
    "digits": BASE + "fix a = " + "1" * MILLION,
    "digits-of-an-exponent": BASE + "fix a = 1e" + "9" * MILLION,
    "one-name": "a" * MILLION,
    "one-name-in-a-value": BASE + "fix a = " + "b" * MILLION,
    "one-unit": BASE + "fix a = 1 " + "k" * MILLION,
    "one-node": BASE + "ask G = V_" + "q" * MILLION + "/V_in",
    "quotes": '"' * MILLION,
    "open-string": 'note "' + "a " * 490_000,
    "zeros": "\0" * MILLION,
    "commas": "fix " + "," * MILLION,
    "a-line-of-words": "a " * 490_000,
    "sum-to-a-power": BASE
    + "fix a = ("
    + "+".join(f"R{i}" for i in range(1, 900))
    + ")^64\n"
    + "".join(f"out -- R{i} -- gnd\n" for i in range(2, 900)),
    "tower-of-powers": BASE + "fix a = ((9^64)^64)^64",
    "tower-of-powers-of-pi": BASE + "fix a = (((1 + pi)^64)^64 + sqrt(2))^64",
    "tower-of-names": BASE + "fix a = ((R1^64)^64)^64",
    "ties": ties(58_000, "1"),
    "doubling-ties": BASE + "fix a0 = R1" + "".join(f", a{i + 1} = a{i}*a{i}" for i in range(5_000)),
    "squaring-numbers": BASE + "fix a0 = 9" + "".join(f", a{i + 1} = a{i}*a{i}" for i in range(5_000)),
    "loop-of-ties": ties(3_000, "a2999"),
    "uses-of-uses": blocks(500),
    "blocks-in-blocks": "".join(f"block b{i} (p)\nuse b{i + 1} as S (p)\nend\n" for i in range(1_500))
    + "block b1500 (p)\np -- R1 -- gnd\nend\nuse b0 as S (in)\nask H = V_in/I_in",
    "a-long-name-of-a-use": f"block b (p)\np -- R1 -- gnd\nend\nuse b as {'x' * 900_000} (in)\n{BASE}",
    "roots": BASE + "fix " + ", ".join(f"a{i} = sqrt({i + 2})" for i in range(40_000)),
    "unlike-fractions": BASE + "fix a = 1" + "".join(f"+1/{10**28 + i}" for i in range(200)),
    "decibels": BASE + "fix " + ", ".join(f"a{i} = {i} dB" for i in range(40_000)),
    "a-huge-decibel": BASE + "fix a = 1e30 dB",
    "products-under-the-line": "in -- Z1 -- gnd\nask H = V_in/I_in\nfix Z1 = "
    + "+".join(f"1/(s*C{i}+R{i})" for i in range(2, 1_500)),
}


@pytest.fixture(autouse=True)
def _warm() -> None:
    read(BASE)


@pytest.mark.parametrize("text", HOSTILE.values(), ids=HOSTILE.keys())
def test_hostile_text_is_refused_within_a_second(text: str) -> None:
    assert len(text) <= LARGEST_FILE
    start = time.process_time()
    with pytest.raises(Complaint) as raised:
        read_sheet(Source("hostile.stage", text))
    message = str(raised.value)
    assert time.process_time() - start < 1
    assert len(message) < 2_000


def test_a_text_of_more_than_a_million_characters_is_refused_at_once() -> None:
    read_sheet(Source("large.stage", BASE + "#" * (LARGEST_FILE - len(BASE))))
    for data in (
        b"#" * (LARGEST_FILE + 1),
        "é".encode() * (LARGEST_FILE + 1),
        b"\xff" * (4 * LARGEST_FILE + 1),
    ):
        with pytest.raises(Complaint, match="1,000,000 characters"):
            read_sheet(decode(data, "large.stage"))


@pytest.mark.parametrize(
    ("good", "bad"),
    [
        ("fix a = " + "(" * 100 + "1" + ")" * 100, "fix a = " + "(" * 101 + "1" + ")" * 101),
        ("fix a = " + "sqrt(" * 100 + "2" + ")" * 100, "fix a = " + "sqrt(" * 101 + "2" + ")" * 101),
        ("fix a = 1^64*1^-64", "fix a = 1^65"),
        ("fix a = 1^(-64)", "fix a = 1^-65"),
        (f"choose {'n' * LONGEST_NAME}", f"choose {'n' * (LONGEST_NAME + 1)}"),
        (
            "fix a = 1" + "*pi/pi" * (MOST_IRRATIONAL // 2),
            "fix a = 1" + "*pi/pi" * (MOST_IRRATIONAL // 2 + 1),
        ),
        ("choose R1" + ", a" * 0, "choose " + "a, " * (MOST_WORDS // 2)),
        ('note "' + "(" * 200 + '"', 'fix a = "' + "(" * 200),
        ("# " + "((" * 200, "fix a = " + "((" * 200),
        ("target H: lowpass bessel, order 20, edge 1", "target H: lowpass bessel, order 21, edge 1"),
    ],
)
def test_the_bounds_themselves_are_accepted(good: str, bad: str) -> None:
    read(BASE, good)
    with pytest.raises(Complaint):
        read(BASE, bad)


def test_brackets_count_in_each_line() -> None:
    read(BASE, "choose k", *(f"fix a{i} = {'(' * 60}k{')' * 60}" for i in range(5)))


def test_a_ladder_of_two_thousand_sections_is_read_in_time() -> None:
    ladder = "\n".join(f"n{i} -- R{i} -- n{i + 1} -- C{i} -- gnd" for i in range(2_000))
    start = time.process_time()
    sheet = read(ladder, "ask H = V_n2000/V_n0")
    assert time.process_time() - start < 2
    assert len(sheet.parts) == 4_000


def test_the_time_grows_with_the_length_of_a_text_and_not_with_its_square() -> None:
    def seconds(count: int) -> float:
        names = ", ".join(f"n{i}" for i in range(count))
        asks = "\n".join(
            f"ask H{i} = V_out/V_in\nlimit H{i}: loss <= 1 dB below 5" for i in range(count // 20)
        )
        text = f"{ties(count, 'R1')}\nchoose {names}\n{asks}"
        start = time.process_time()
        read_sheet(Source("long.stage", text))
        return time.process_time() - start

    seconds(500)
    assert min(seconds(4_000) for _ in range(3)) < 3.5 * min(seconds(2_000) for _ in range(3))
