"""Targets, limits and parts to buy."""

from __future__ import annotations

import pytest

from symcirc.sheet.expression import Number
from symcirc.sheet.model import Target, Value
from symcirc.sheet.targets import FAMILIES, KINDS
from tests.sheet.reading import BASE, complaint, read

NEEDS = {"ripple": "ripple 0.5 dB", "stop": "stop 40 dB"}


def target(text: str, *more: str) -> Target:
    return read(BASE, f"target H{text}", *more).targets[0]


def numbers(words: dict[str, Value]) -> dict[str, tuple[float, str | None]]:
    return {
        word: (float(value.expression.value), value.unit)
        for word, value in words.items()
        if isinstance(value.expression, Number)
    }


@pytest.mark.parametrize("family", FAMILIES)
@pytest.mark.parametrize("kind", [k for k in KINDS if k != "allpass"])
def test_every_family_has_every_kind(family: str, kind: str) -> None:
    place = "centre 1 kHz, bandwidth 200 Hz" if kind.startswith("band") else "edge 1 kHz"
    needs = [NEEDS[word] for word in FAMILIES[family]]
    if family == "linear phase":
        needs = ["ripple 0.5 deg"]
    read_target = target(f": {kind} {family}, order 3, {place}" + "".join(f", {need}" for need in needs))
    assert (read_target.kind, read_target.family) == (kind, family)
    assert set(read_target.words) == {"order", *FAMILIES[family]} | set(place.split()[::3]) & {
        "edge",
        "centre",
        "bandwidth",
    }


def test_the_words_of_a_target_keep_their_values_and_units() -> None:
    words = target(": lowpass chebyshev, ripple 0.5 dB, order 3, edge 1.2 kHz at 1 dB, gain 6 dB").words
    assert numbers(dict(words)) == {
        "ripple": (0.5, "dB"),
        "order": (3, None),
        "edge": (1200, "Hz"),
        "edge loss": (1, "dB"),
        "gain": (6, "dB"),
    }
    words = target(": bandpass bessel, order 2, edges 900 Hz 1k1").words
    assert numbers(dict(words)) == {"order": (2, None), "lower edge": (900, "Hz"), "upper edge": (1100, None)}
    words = target(": lowpass, order 2, f0 200 rad/s, q 1/sqrt(2)").words
    assert numbers(dict(words)) == {"order": (2, None), "f0": (200, "rad/s")}


def test_the_values_behind_words_may_be_expressions_and_names() -> None:
    words = target(": lowpass, order 1 + 1, f0 2*f1, q q1, gain (1 + k)/2", "choose f1, q1, k").words
    assert numbers(dict(words)) == {"order": (2, None)}
    assert numbers(dict(target(": lowpass bessel, order n, edge 1 kHz", "fix n = 3").words))["order"] == (
        3,
        None,
    )
    assert numbers(dict(target(": lowpass bessel, order m, edge 1", "fix n = 3, m = 2*n").words))[
        "order"
    ] == (6, None)


def test_a_target_may_be_an_expression_in_s() -> None:
    explicit = target(" = -1/(1 + s/w0)^2", "choose w0")
    assert (explicit.kind, explicit.family, explicit.words) == (None, None, {})
    assert explicit.expression is not None


def test_meet_limits_stands_instead_of_an_order() -> None:
    limit = "limit H: loss >= 20 dB above 5 kHz"
    met = target(": lowpass bessel, edge 1 kHz, meet limits", limit)
    assert met.meet_limits
    assert "order" not in met.words
    assert (
        "both are here"
        in complaint(BASE, limit, "target H: lowpass bessel, order 2, edge 1, meet limits").cause
    )
    assert (
        "given twice"
        in complaint(BASE, limit, "target H: lowpass bessel, meet limits, edge 1, meet limits").cause
    )
    assert "none is named" in complaint(BASE, limit, "target H: lowpass, meet limits, f0 1, q 1").cause
    assert "no limits to meet" in complaint(BASE, "target H: lowpass bessel, edge 1 kHz, meet limits").cause


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (": lowpass bessel, order 0, edge 1 kHz", "whole number"),
        (": lowpass bessel, order 20.5, edge 1 kHz", "whole number"),
        (": lowpass bessel, order n, edge 1 kHz", "whole number"),
        (": lowpass bessel, order 21, edge 1 kHz", "above 20"),
        (": lowpass bessel, order 2 Hz, edge 1 kHz", "does not fit"),
        (": lowpass bessel, order 2R, edge 1 kHz", "does not fit"),
        (": lowpass bessel, order 2, edge 0 Hz", "greater than zero"),
        (": lowpass bessel, order 2, edge -1 kHz", "greater than zero"),
        (": lowpass bessel, order 2, edge 1 kHz at -1 dB", "greater than zero"),
        (": lowpass bessel, order 2, edge 1 kHz at 1", "a unit is missing"),
        (": lowpass bessel, order 2, edge 1 kHz, edge 2 kHz", "given twice"),
        (": lowpass bessel, order 2, edge n - n", "greater than zero"),
        (": lowpass bessel, order 2, edge 1/(n - n)", "divides by zero"),
        (": lowpass bessel, order 2, edge 1 kHz, gain 0", "greater than zero"),
        (": lowpass bessel, order 2, centre 1 kHz, bandwidth 1 Hz", "does not belong"),
        (": bandpass bessel, order 2, centre 1 kHz", "lacks bandwidth"),
        (": bandpass bessel, order 2", "lacks centre and bandwidth"),
        (": bandpass bessel, order 2, centre 1, bandwidth 1, edges 1 2", "a band is given twice"),
        (": bandpass bessel, order 2, edges 2 kHz 1000 Hz", "ends before it begins"),
        (": bandpass bessel, order 2, edges 1 Hz 6 rad/s", "ends before it begins"),
        (": bandpass bessel, order 2, edge 1 kHz", "does not belong"),
        (": lowpass linear phase, order 2, edge 1 kHz, ripple 1 dB", "is in deg"),
        (": lowpass chebyshev, order 2, edge 1 kHz, ripple 1 deg", "is in dB"),
        (": lowpass elliptic, order 2, edge 1 kHz, ripple 1 dB", "lacks stop"),
        (": lowpass linear, order 2, edge 1 kHz", "not a family"),
        (": lowpass chebyshev inverse, order 2, edge 1 kHz", "not a family"),
        (": allpass butterworth, order 2, edge 1 kHz", "no butterworth all-pass"),
        (": lowpass, order 1, f0 1 kHz, q 1", "describe order 2"),
        (": lowpass, f0 1 kHz, q 1", "lacks order"),
        (": lowpass, order 2", "lacks q and f0"),
        (" = 0", "this target is zero"),
        (" = s - s", "this target is zero"),
        (" = sqrt(s)", "square root of names"),
        (" = unknown", "not declared"),
        (" = (1 + s)^60*(1 + s)^60*(1 + s)^60*(1 + s)^60", "too large"),
    ],
)
def test_a_target_that_does_not_fit_together_is_refused(text: str, words: str) -> None:
    assert words in complaint(BASE, f"target H{text}", "choose n").cause


def test_an_allpass_target_is_bessel_or_of_order_two() -> None:
    assert target(": allpass bessel, order 3, edge 1 kHz").family == "bessel"
    assert target(": allpass, order 2, f0 1 kHz, q 1").kind == "allpass"


def test_a_target_needs_its_ask_and_stands_alone() -> None:
    assert "nothing called `G` is asked" in complaint(BASE, "target G = 1/s").cause
    assert "two targets" in complaint(BASE, "target H = 1/s", "target H: lowpass").cause


def test_limits_keep_their_sense_and_their_band() -> None:
    sheet = read(
        BASE,
        "limit H: loss <= 1 dB from 62 Hz to 2 kHz",
        "limit H: loss >= 20 dB below 19 Hz",
        "limit H: loss >= 40 dB above 2*f1",
        "choose f1",
    )
    assert [(m.ask, m.sense, m.low is None, m.high is None) for m in sheet.limits] == [
        ("H", "<=", False, False),
        ("H", ">=", True, False),
        ("H", ">=", False, True),
    ]
    assert isinstance(sheet.limits[0].low, Value)
    assert sheet.limits[0].low.unit == "Hz"


@pytest.mark.parametrize(
    ("line", "words"),
    [
        ("limit H: loss <= 1 from 1 Hz to 2 Hz", "a unit is missing"),
        ("limit H: loss <= 1 Hz from 1 Hz to 2 Hz", "does not fit"),
        ("limit H: loss <= 1 dB from 2 Hz to 1 Hz", "ends before it begins"),
        ("limit H: loss <= 1 dB from 1 Hz to 1 Hz", "ends before it begins"),
        ("limit H: loss <= 1 dB below 0 Hz", "greater than zero"),
        ("limit H: loss <= 1 dB above 1 kohm", "does not fit"),
        ("limit H: loss <= 1 dB above w", "not declared"),
        ("limit G: loss <= 1 dB above 1 Hz", "nothing called `G`"),
        ("parts R: E7", "not a series"),
        ("parts R: E12 1 dB", "does not fit"),
        ("parts R: E12 -1 %", "between 0 % and 100 %"),
        ("parts R: E12 100 %", "between 0 % and 100 %"),
        ("parts Z: E12", "not a kind of part"),
        ("parts r: E12", "not a kind of part"),
        ("parts C: E12, from 1 nF to 1 pF", "ends before it begins"),
        ("parts C: E12, from 1R to 10R", "the code letter R does not fit"),
        ("parts C: E12, from 0 F to 1 nF", "greater than zero"),
        ("parts C: E12, from k to 1 nF", "in numbers"),
        ("parts R: E12\nparts R: E24", "given twice"),
    ],
)
def test_limits_and_parts_that_make_no_sense_are_refused(line: str, words: str) -> None:
    assert words in complaint(BASE, "choose k", line).cause


def test_what_can_be_bought_is_kept_by_kind() -> None:
    sheet = read(
        BASE,
        "parts R: E96 1 %, from 1 kohm to 1 Mohm",
        "parts C: E12 5 %",
        "parts L: E6, from low to 2*low",
        "fix low = 1e-3",
    )
    assert [(b.kind, b.series, b.tolerance is None, b.low is None) for b in sheet.buyables] == [
        ("R", "E96", False, False),
        ("C", "E12", False, True),
        ("L", "E6", True, False),
    ]
