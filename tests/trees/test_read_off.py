"""What is read off the diagram, each reading against another way to the same."""

from __future__ import annotations

import ast
import operator
import random
from collections import Counter
from fractions import Fraction

import numpy as np
import pytest

from symcirc.circuit.model import VoltageDrive
from symcirc.trees.answer import determinants, ratio
from symcirc.trees.batch import responses
from symcirc.trees.collect import collected
from symcirc.trees.derivative import derivatives
from symcirc.trees.diagram import Diagram
from symcirc.trees.evaluate import evaluate, polynomials, response
from symcirc.trees.expand import expanded, symbols, written
from symcirc.trees.largest import largest
from symcirc.trees.named import named_coefficients, named_polynomials
from tests.benchmarks.families import discrete_amplifier, finite_gain_chain, grid, ladder, low_pass_chain
from tests.trees.samples import circuit, part, random_case, setup, voltage
from tests.trees.samples import symbols as all_symbols


def cases(first: int, number: int) -> list[tuple[int, Diagram, dict[str, Fraction]]]:
    """Random circuits with random rational values, those without any product left out."""
    found = []
    for seed in range(first, first + number):
        made, asked = random_case(seed, 10)
        rng = random.Random(seed)
        values = {name: Fraction(rng.randint(-20, 20) or 7, rng.randint(1, 9)) for name in all_symbols(made)}
        diagram = collected(determinants(made, asked))
        if diagram.roots[1]:
            found.append((seed, diagram, values))
    return found


def value_of(diagram: Diagram, exponents: tuple[int, ...], values: dict[str, Fraction]) -> Fraction:
    product = Fraction(1)
    for name, exponent in zip(symbols(diagram), exponents, strict=True):
        product *= values[name] ** exponent
    return product


def test_exact_polynomials_are_the_expanded_ones_at_the_numbers():
    for seed, diagram, values in cases(4_000_000, 200):
        for root, found in zip(diagram.roots, polynomials(diagram, values), strict=True):
            sums = [
                sum(
                    coefficient * value_of(diagram, exponents, values)
                    for exponents, coefficient in power.items()
                )
                for power in expanded(diagram, root)
            ]
            while sums and not sums[-1]:
                sums.pop()
            assert found == sums, seed


def test_a_value_at_one_s_is_that_of_the_polynomials():
    s = Fraction(-3, 7)
    for seed, diagram, values in cases(4_100_000, 100):
        expected = tuple(sum(c * s**k for k, c in enumerate(side)) for side in polynomials(diagram, values))
        assert evaluate(diagram, values, s) == expected, seed


def test_derivatives_are_central_differences():
    """Exact, as no symbol has a power above 2."""
    s = Fraction(5, 3)
    for seed, diagram, values in cases(4_200_000, 60):
        for name, found in derivatives(diagram, values, s).items():
            above, below = (evaluate(diagram, {**values, name: values[name] + step}, s) for step in (1, -1))
            assert found == tuple((one - other) / 2 for one, other in zip(above, below, strict=True)), seed


def test_largest_products_are_those_of_the_sorted_expansion():
    for seed, diagram, values in cases(4_300_000, 120):
        for root in diagram.roots:
            found = largest(diagram, root, values, 4)
            everything = expanded(diagram, root)
            assert len(found) == len(everything)
            for products, power in zip(found, everything, strict=True):
                sizes = sorted(
                    (abs(c * value_of(diagram, e, values)) for e, c in power.items()), reverse=True
                )
                assert [abs(product.value) for product in products] == sizes[:4], seed
                for product in products:
                    factors = dict(product.factors)
                    exponents = tuple(factors.get(name, 0) for name in symbols(diagram))
                    assert power[exponents] == product.coefficient
                    assert product.value == product.coefficient * value_of(diagram, exponents, values)


def test_all_largest_products_of_a_coefficient_sum_to_it():
    made, asked = low_pass_chain(2)
    diagram = collected(determinants(made, asked))
    values = {name: Fraction(place + 1, 3) for place, name in enumerate(all_symbols(made))}
    found = largest(diagram, diagram.roots[1], values, 10**6)
    assert [sum(product.value for product in power) for power in found] == polynomials(diagram, values)[1]


def arithmetic(text: str, values: dict[str, Fraction]) -> Fraction:
    """Work out plain arithmetic."""
    operators = {ast.Add: operator.add, ast.Sub: operator.sub, ast.Mult: operator.mul, ast.Pow: operator.pow}

    def value(node: ast.expr) -> Fraction | int:
        if isinstance(node, ast.BinOp):
            return operators[type(node.op)](value(node.left), value(node.right))
        if isinstance(node, ast.UnaryOp):
            return -value(node.operand)
        return values[node.id] if isinstance(node, ast.Name) else node.value

    return Fraction(value(ast.parse(text, mode="eval").body))


def worked_out(named, values: dict[str, Fraction]) -> tuple[list[Fraction], list[Fraction]]:
    known = dict(values)
    for name, text in named.definitions:
        known[name] = arithmetic(text, known)
    return [arithmetic(text, known) for text in named.over], [arithmetic(text, known) for text in named.under]


def trimmed(coefficients: list[Fraction]) -> list[Fraction]:
    while coefficients and not coefficients[-1]:
        coefficients.pop()
    return coefficients


def test_named_sub_expressions_work_out_to_the_polynomials():
    s = Fraction(2, 5)
    for seed, diagram, values in cases(4_400_000, 150):
        over, under = worked_out(named_coefficients(diagram, "x{}".format), values)
        assert (trimmed(over), trimmed(under)) == polynomials(diagram, values), seed
        over, under = worked_out(named_polynomials(diagram, "x{}".format), {**values, "s": s})
        assert (sum(over), sum(under)) == evaluate(diagram, values, s), seed


@pytest.mark.parametrize("family", [ladder(12), low_pass_chain(4), finite_gain_chain(3), grid(4)])
def test_every_name_is_used_more_than_once(family):
    diagram = collected(determinants(*family))
    for found in (named_coefficients(diagram, "x{}".format), named_polynomials(diagram, "x{}".format)):
        assert found.definitions
        texts = [text for _, text in found.definitions] + list(found.over) + list(found.under)
        uses = Counter(
            node.id for text in texts for node in ast.walk(ast.parse(text)) if isinstance(node, ast.Name)
        )
        assert all(uses[name] > 1 for name, _ in found.definitions)


def test_named_polynomials_grow_with_the_diagram_only():
    sizes = []
    for sections in (100, 200):
        diagram = collected(determinants(*ladder(sections)))
        found = named_polynomials(diagram, "x{}".format)
        sizes.append(sum(len(text) for _, text in found.definitions))
    assert sizes[1] < 2.2 * sizes[0]


def test_text_holds_the_products_of_the_expanded_polynomials():
    for seed, diagram, values in cases(4_500_000, 150):
        for root in diagram.roots:
            texts = written(diagram, root)
            sums = [
                sum(
                    coefficient * value_of(diagram, exponents, values)
                    for exponents, coefficient in power.items()
                )
                for power in expanded(diagram, root)
            ]
            assert [arithmetic(text, values) for text in texts] == sums, seed
            assert [len(text.replace(" - ", " + ").split(" + ")) for text in texts] == [
                len(power) or 1 for power in expanded(diagram, root)
            ]


def test_many_sets_at_once_are_the_sets_one_by_one():
    generator = np.random.default_rng(1)
    for seed, diagram, values in cases(4_600_000, 40):
        sets = {name: generator.uniform(0.5, 2, 7) for name in values}
        found = responses(diagram, sets, 0.3 + 1.1j)
        each = [response(diagram, {name: row[k] for name, row in sets.items()}, 0.3 + 1.1j) for k in range(7)]
        assert np.allclose(found, each, rtol=1e-9), seed


def test_a_set_may_hold_one_value_for_all():
    made, asked = low_pass_chain(3)
    diagram = collected(determinants(made, asked))
    values = dict.fromkeys(all_symbols(made), 1.5)
    many = responses(diagram, {**values, "R1_1": np.full(20_000, 1.5)}, 2j)
    assert many.shape == (20_000,)
    assert np.allclose(many, response(diagram, values, 2j))
    with pytest.raises(ValueError, match="broadcast"):
        responses(diagram, {**values, "R1_1": np.ones(3), "R1_2": np.ones(4)}, 2j)


def test_a_long_ladder_neither_overflows_nor_vanishes():
    """Against the closed form of a uniform ladder by Chebyshev polynomials (from memory: Mowery 1957)."""
    sections, s = 600, 1j
    values = {f"{kind}{k}": 1e3 if kind == "R" else 1e-6 for kind in "RC" for k in range(1, sections + 1)}
    found = response(determinants(*ladder(sections)), values, s * 1e-3)
    # V_out/V_in = cosh(g/2) / cosh((n + 1/2) g) with cosh g = 1 + sRC/2
    g = np.arccosh(1 + s * 1e-3 * 1e-3 / 2)
    expected = np.cosh(g / 2) / np.cosh((sections + 0.5) * g)
    assert abs(found / expected - 1) < 1e-9


def test_a_value_that_is_missing_is_an_error():
    diagram = determinants(*ladder(2))
    for reading in (evaluate, response, derivatives, responses):
        with pytest.raises(KeyError):
            reading(diagram, {"R1": 1.0}, 1j)
    with pytest.raises(KeyError):
        polynomials(diagram, {"R1": 1})


def test_a_discrete_amplifier_is_read_in_every_way():
    made, asked = discrete_amplifier()
    rng = random.Random(1)
    diagram = collected(determinants(made, asked))
    values = {name: Fraction(rng.randint(1, 99), rng.randint(1, 9)) for name in all_symbols(made)}
    over, under = polynomials(diagram, values)
    s = Fraction(1, 3)
    assert evaluate(diagram, values, s) == (
        sum(c * s**k for k, c in enumerate(over)),
        sum(c * s**k for k, c in enumerate(under)),
    )
    found = largest(diagram, diagram.roots[1], values, 5)
    assert [len(products) for products in found] == [5] * len(under)
    expected = complex(
        sum(c * 1j**k for k, c in enumerate(over)) / sum(c * 1j**k for k, c in enumerate(under))
    )
    assert abs(response(diagram, values, 1j) / expected - 1) < 1e-9


def test_islands_leave_both_polynomials_zero():
    made = circuit([part("R1", "in", "a"), part("R2", "b", "c"), part("R3", "b", "c")])
    answer = ratio(made, setup(VoltageDrive("in", "gnd"), voltage("a"), voltage("in")))
    assert (answer.numerator, answer.denominator) == ([], [])
