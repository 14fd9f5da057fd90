"""Numerator and denominator against the full tableau of equations.

Outside references: numpy.linalg (LAPACK) and sympy.polys.matrices.
"""

from __future__ import annotations

import itertools
from collections import Counter

import pytest
import sympy
from sympy import QQ

from symcirc.circuit.model import CurrentDrive, VoltageDrive
from symcirc.sheet.model import GROUND
from symcirc.trees.answer import ratio
from tests.trees.comparison import verdict
from tests.trees.reference import Tableau
from tests.trees.samples import (
    DEVICE_KINDS,
    ROLES,
    circuit,
    device,
    node_current,
    part,
    part_current,
    random_case,
    setup,
    symbols,
    voltage,
)


def test_random_circuits_of_all_kinds_agree_with_the_numeric_solve():
    verdicts = Counter(verdict(*random_case(seed), seed) for seed in range(1_000_000, 1_003_000))
    assert not [word for word in verdicts if word.startswith("WRONG")]
    assert verdicts["agrees"] > 800
    assert verdicts["no solution"] > 500


@pytest.mark.parametrize(
    "kinds", [("conveyor", "transformer"), ("opamp", "amplifier"), ("cccs", "ccvs", "vcvs")]
)
def test_random_circuits_of_few_kinds_agree_with_the_numeric_solve(kinds):
    verdicts = Counter(verdict(*random_case(seed, 12, kinds), seed) for seed in range(1_100_000, 1_100_700))
    assert not [word for word in verdicts if word.startswith("WRONG")]
    assert verdicts["agrees"] > 150


def _orientations(kind: str):
    nodes = (GROUND, "a", "b")
    sizes = ROLES[kind]
    for chosen in itertools.product(nodes, repeat=sum(sizes.values())):
        left = list(chosen)
        yield {role: tuple(left.pop(0) for _ in range(size)) for role, size in sizes.items()}


@pytest.mark.parametrize("kind", DEVICE_KINDS)
def test_every_orientation_of_every_device_agrees_with_the_numeric_solve(kind):
    verdicts: Counter[str] = Counter()
    parts = [part("R1", "in", "a"), part("C2", "b", "a"), part("L3", GROUND, "b"), part("Y4", "a", GROUND)]
    drive = VoltageDrive("in", GROUND)
    for number, terminals in enumerate(_orientations(kind)):
        for sign in (1, -1) if kind == "conveyor" else (1,):
            made = circuit(parts, [device("U1", kind, sign, **terminals)])
            for over in (
                voltage("b"),
                voltage("a", "b"),
                part_current("U1"),
                part_current("C2"),
                node_current("in"),
            ):
                verdicts[verdict(made, setup(drive, over, voltage("in")), number)] += 1
    assert not [word for word in verdicts if word.startswith("WRONG")]
    assert verdicts["agrees"] > 20
    assert verdicts["unclear"] == 0


@pytest.mark.parametrize("over", [voltage("a"), part_current("R1"), part_current("C2"), part_current("L3")])
@pytest.mark.parametrize(
    ("drive", "under"),
    [
        (VoltageDrive("in", GROUND), voltage("in")),
        (VoltageDrive("in", "b"), voltage("in", "b")),
        (VoltageDrive("in", "b"), node_current("b")),
        (VoltageDrive("in", GROUND), node_current("in")),
        (CurrentDrive("in"), node_current("in")),
        (CurrentDrive("in"), voltage("in")),
        (CurrentDrive("in"), part_current("Z5")),
    ],
)
@pytest.mark.parametrize("shorts", [(), (("b", GROUND),), (("a", "b"),)])
def test_every_drive_with_every_ask_agrees_with_the_numeric_solve(drive, under, over, shorts):
    parts = [
        part("R1", "in", "a"),
        part("C2", "b", "a"),
        part("L3", GROUND, "b"),
        part("Y4", "a", GROUND),
        part("Z5", "in", "b"),
    ]
    assert verdict(circuit(parts), setup(drive, over, under, shorts), 1) in (
        "agrees",
        "agrees (zero)",
        "no solution",
    )


def test_polynomials_are_those_of_elimination_over_rational_functions():
    compared = 0
    for seed in range(2_000_000, 2_000_400):
        made, asked = random_case(seed, 6)
        names = symbols(made)
        field = QQ.frac_field(*sympy.symbols([*names, "s"]))
        *values, s = field.gens
        given = dict(zip(names, values, strict=True))
        solved = Tableau(made, asked, given, s).solved_in(field, (asked.over, asked.under))
        if solved is None:
            continue
        over, under = solved
        found = ratio(made, asked)
        numerator, denominator = (
            sum(
                (
                    coefficient * s**power * _monomial(found.symbols, exponents, given, field.one)
                    for power, each in enumerate(polynomial)
                    for exponents, coefficient in each.items()
                ),
                field.zero,
            )
            for polynomial in (found.numerator, found.denominator)
        )
        assert bool(denominator) == bool(under), seed
        if under:
            assert numerator * under == over * denominator, seed
            compared += 1
    assert compared > 100


def _monomial(names, exponents, values, one):
    product = one
    for name, exponent in zip(names, exponents, strict=True):
        product *= values[name] ** exponent
    return product
