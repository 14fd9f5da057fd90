"""Parts with more than two terminals."""

from __future__ import annotations

import pytest

from tests.sheet.reading import BASE, complaint, read


@pytest.mark.parametrize(
    ("line", "terminals", "parameters"),
    [
        (
            "U1 opamp: plus gnd, minus in, drives out",
            {"plus": ("gnd",), "minus": ("in",), "drives": ("out",)},
            [],
        ),
        (
            "E1 vcvs: senses in out, drives a, gain 10",
            {"senses": ("in", "out"), "drives": ("a", "gnd")},
            ["gain"],
        ),
        ("E1 vcvs: drives a b, senses in", {"senses": ("in", "gnd"), "drives": ("a", "b")}, ["gain"]),
        (
            "G1 vccs: senses in, drives out gnd, gm 2 mS",
            {"senses": ("in", "gnd"), "drives": ("out", "gnd")},
            ["gm"],
        ),
        (
            "F1 cccs: senses in out, drives a, gain 5",
            {"senses": ("in", "out"), "drives": ("a", "gnd")},
            ["gain"],
        ),
        (
            "H1 ccvs: senses in out, drives a, rm 1 kohm",
            {"senses": ("in", "out"), "drives": ("a", "gnd")},
            ["rm"],
        ),
        (
            "T1 transformer: primary in out, secondary a, ratio 2",
            {"primary": ("in", "out"), "secondary": ("a", "gnd")},
            ["ratio"],
        ),
        ("K1 conveyor: x in, y out, z a, sign +", {"x": ("in",), "y": ("out",), "z": ("a",)}, []),
    ],
)
def test_each_kind_has_its_terminals_and_parameters(
    line: str, terminals: dict[str, tuple[str, ...]], parameters: list[str]
) -> None:
    sheet = read(line, BASE)
    (device,) = sheet.devices
    assert device.terminals == terminals
    assert device.parameters == {word: f"{device.name}_{word}" for word in parameters}
    assert {name for name in sheet.symbols if name.startswith(device.name)} == set(device.parameters.values())


def test_the_dimensions_of_parameters_are_those_of_the_trade() -> None:
    sheet = read(
        "U1 opamp: plus gnd, minus in, drives out, gain 1e5, gbw 1 MHz",
        "G1 vccs: senses in, drives out",
        "H1 ccvs: senses in out, drives a",
        "T1 transformer: primary in out, secondary a",
        BASE,
    )
    assert {name: s.dimension for name, s in sheet.symbols.items() if s.role == "parameter"} == {
        "U1_gain": "ratio",
        "U1_gbw": "Hz",
        "G1_gm": "S",
        "H1_rm": "ohm",
        "T1_ratio": "ratio",
    }


@pytest.mark.parametrize(("sign", "number"), [("+", 1), ("-", -1)])
def test_a_conveyor_has_a_sign(sign: str, number: int) -> None:
    assert read(f"K1 conveyor: sign {sign}, x in, y out, z a", BASE).devices[0].sign == number


@pytest.mark.parametrize("letter", "RCLZY")
def test_the_first_letter_of_a_device_is_free_but_not_a_two_terminal_parts(letter: str) -> None:
    assert "more terminals" in complaint(f"{letter}1 opamp: plus gnd, minus in, drives out", BASE).cause
    assert read("amp opamp: plus gnd, minus in, drives out", BASE).devices[0].name == "amp"


@pytest.mark.parametrize(
    ("inline", "number"),
    [
        ("gain 1e5", "100000"),
        ("gain 100 dB", "100000"),
        ("gain 2*pi", "2*pi"),
        ("gbw 1 MHz", "1000000"),
        ("gbw 1M", "1000000"),
        ("gbw 4*pi rad/s", ""),
        ("gbw 6 rad/s", "3/pi"),
        ("gain -3 dB", "10**(17/20)/10"),
    ],
)
def test_an_inline_value_is_the_same_as_a_fix(inline: str, number: str) -> None:
    word, value = inline.split(" ", 1)
    line = "U1 opamp: plus gnd, minus in, drives out"
    if not number:
        assert "behind an expression" in complaint(f"{line}, {inline}", BASE).cause
        return
    within = read(f"{line}, {inline}", BASE)
    apart = read(line, BASE, f"fix U1_{word} = {value}")
    assert str(within.fixes[f"U1_{word}"].number) == str(apart.fixes[f"U1_{word}"].number) == number
    assert within.devices[0].parameters == apart.devices[0].parameters == {word: f"U1_{word}"}
    assert "fixed twice" in complaint(f"{line}, {inline}", BASE, f"fix U1_{word} = {value}").cause


def test_a_name_in_an_inline_value_must_be_declared() -> None:
    line = "E1 vcvs: senses in, drives a, gain 2*k"
    assert "`k` is not declared" in complaint(line, BASE).cause
    sheet = read(line, BASE, "choose k")
    assert sheet.fixes["E1_gain"].number is None
    assert sheet.symbols["k"].role == "free"


def test_an_amplifier_that_is_given_nothing_is_ideal_and_one_that_is_chosen_a_gain_has_it() -> None:
    line = "U1 opamp: plus gnd, minus in, drives out"
    assert read(line, BASE).devices[0].parameters == {}
    assert read(line, BASE, "choose U1_gbw").devices[0].parameters == {"gbw": "U1_gbw"}
    assert "`U1_gain` is not declared" in complaint(line, BASE, "fix k = U1_gain").cause


def test_a_gain_may_depend_on_s_and_a_bandwidth_may_not() -> None:
    line = "U1 opamp: plus gnd, minus in, drives out"
    assert read(f"{line}, gain 1e5/(1 + s/w1)", BASE, "fix w1 = 10 rad/s").fixes["U1_gain"].number is None
    assert "`s` cannot stand here" in complaint(f"{line}, gbw s", BASE).cause


@pytest.mark.parametrize(
    "value",
    ["U1_gain = 0", "U1_gbw = 0", "U1_gbw = -1 MHz", "T1_ratio = 0", "U1_gain = k - k", "U1_gbw = -R1*1e3"],
)
def test_values_that_make_no_part_are_refused(value: str) -> None:
    refused = complaint(
        "U1 opamp: plus gnd, minus in, drives out",
        "T1 transformer: primary in out, secondary a",
        "choose k",
        BASE,
        f"fix {value}",
    )
    assert "cannot be" in refused.cause


def test_negative_gains_and_turns_are_accepted() -> None:
    read(
        "E1 vcvs: senses in, drives a, gain -2", "T1 transformer: primary in out, secondary a, ratio -1", BASE
    )
    read("E1 vcvs: senses in, drives a, gain 0", "G1 vccs: senses in, drives a, gm -2 mS", BASE)
