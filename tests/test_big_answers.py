"""Answers that are not expanded: named sub-expressions, numbers of products, largest products."""

from fractions import Fraction

import pytest
import sympy

import symcirc.derivation
from symcirc.complaints import Source
from symcirc.derivation import CHEAP_NODES, CHEAP_PRODUCTS, derive, pose
from symcirc.sheet import read_sheet
from symcirc.sheet.exact import exact_number
from symcirc.sheet.parse import parse_sheet
from tests.calling import call


def ladder(sections):
    lines = [f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd" for k in range(sections)]
    return "\n".join([*lines, f"ask H = V_n{sections}/V_n0", ""])


@pytest.fixture
def derived(capsys, tmp_path):
    def run(text, *options):
        path = tmp_path / "s.stage"
        path.write_text(text, encoding="utf-8")
        return call(capsys, "derive", path, *options)

    return run


def value(expression, known):
    (line,) = parse_sheet(Source("x.stage", f"fix x = {expression}"))
    return exact_number(line.settings[0].value.expression, known)


def test_the_products_of_a_ten_section_ladder_are_counted_without_expanding(derived):
    # 10,946 is the 21st Fibonacci number: the spanning trees of a ladder (Morgan-Voyce, from memory).
    assert derived(ladder(10), "--terms", "--json").json["ask"]["H"]["terms"] == {
        "numerator": 1,
        "denominator": 10946,
    }
    assert "10,946 products" in derived(ladder(10), "--terms").out


def test_a_long_ladder_is_counted_exactly(derived):
    before, here = 1, 1
    for _ in range(2 * 150 - 1):
        before, here = here, before + here
    called = derived(ladder(150), "--terms", "--json")
    assert called.json["ask"]["H"]["terms"]["denominator"] == here


def test_named_sub_expressions_give_the_expanded_coefficients(derived):
    text = ladder(4)
    named = derived(text, "--json", "--most", "20").json["ask"]["H"]
    plain = derived(text, "--json").json["ask"]["H"]
    known = {f"R{k}": sympy.Rational(3 * k + 2, 7) for k in range(4)}
    known |= {f"C{k}": sympy.Rational(5, 2 * k + 3) for k in range(4)}
    names = dict(known)
    for name, expression in named["definitions"]:
        names[name] = value(expression, names)
    for side in ("numerator", "denominator"):
        expected = [value(c, known) for c in plain[side]]
        assert [value(c, names) for c in named[side]] == expected
        monic = [value(c, known) for c in plain["monic"][side]]
        assert [value(c, names) for c in named["monic"][side]] == monic
    assert named["order"] == 4


def test_every_named_sub_expression_is_used(derived):
    named = derived(ladder(12), "--json", "--most", "20").json["ask"]["H"]
    later = " ".join([*(e for _, e in named["definitions"]), *named["numerator"], *named["denominator"]])
    words = set(later.replace("*", " ").replace("(", " ").replace(")", " ").split())
    assert all(name in words for name, _ in named["definitions"])


def test_ties_are_the_first_named_expressions_of_a_big_answer(derived):
    text = ladder(5) + "fix R1 = 2*R0, R2 = R1 + R0\n"
    named = derived(text, "--json", "--most", "20").json["ask"]["H"]
    assert named["definitions"][:2] == [["R1", "2*R0"], ["R2", "R0 + R1"]]


def value_in_s(answer, side, known, s):
    names = {**known, "s": s}
    for name, expression in answer["definitions"]:
        names[name] = value(expression, names)
    return value(answer[side], names)


@pytest.mark.parametrize(
    ("text", "options"),
    [
        ("in -- Z1 -- n0\n" + ladder(3).replace("V_n0", "V_in") + "fix Z1 = R9 + 1/(s*C9)\n", []),
        (
            ladder(3) + "U1 opamp: plus n3, minus m, drives m, gbw G, gain A\nm -- R9 -- gnd\nchoose G, A\n"
            "ask K = V_m/V_n0\n",
            ["--real", "--ask", "K"],
        ),
        (
            ladder(3)
            + "U1 opamp: plus n3, minus m, drives o, gbw G\nm -- R8 -- o -- R9 -- n0\nm -- C9 -- gnd\n"
            "choose G\nask T = loop(U1) with V_n0 = 0\n",
            ["--ask", "T"],
        ),
    ],
    ids=["general impedance", "real amplifier", "loop gain"],
)
def test_an_answer_whose_ties_hold_s_is_named_with_s_inside(derived, text, options):
    named = derived(text, "--json", "--most", "1", *options).json["ask"]
    plain = derived(text, "--json", *options).json["ask"]
    ((name, answer),) = named.items()
    known = {str(k): sympy.Rational(3 * i + 2, 7) for i, k in enumerate(["R0", "R1", "R2", "C0", "C1", "C2"])}
    known |= {k: sympy.Rational(2 * i + 3, 5) for i, k in enumerate(["R8", "R9", "C9", "G", "A"])}
    s = sympy.Rational(5, 3)
    over, under = (value_in_s(answer, f"{side}_in_s", known, s) for side in ("numerator", "denominator"))
    sides = (
        sum(value(c, known) * s**k for k, c in enumerate(plain[name][side]))
        for side in ("numerator", "denominator")
    )
    expected = next(sides) / next(sides)
    assert abs(sympy.N(over / under / expected - 1, 30)) < 1e-25


def test_people_get_the_names_and_scripts_the_expanded_answer(derived):
    text = ladder(8)
    assert "by way of these names" in derived(text).out
    assert "definitions" not in derived(text, "--json").json["ask"]["H"]


def test_the_largest_products_and_their_shares_are_those_of_the_expanded_coefficients(derived):
    fixes = "fix " + ", ".join(f"R{k} = {k + 1}, C{k} = {2 * k + 1}" for k in range(4)) + "\n"
    found = derived(ladder(4) + fixes, "--largest", "3", "--json").json["ask"]["H"]["largest"]["denominator"]
    plain = derived(ladder(4), "--json").json["ask"]["H"]["denominator"]
    known = {f"R{k}": sympy.Integer(k + 1) for k in range(4)} | {
        f"C{k}": sympy.Integer(2 * k + 1) for k in range(4)
    }
    for power, coefficient in enumerate(found):
        expanded = sympy.Poly(
            value(plain[power], {n: sympy.Symbol(n) for n in known}), *map(sympy.Symbol, known)
        )
        values = {str(s): known[str(s)] for s in expanded.gens}
        products = [
            c * sympy.prod(values[str(g)] ** e for g, e in zip(expanded.gens, m, strict=True))
            for m, c in expanded.terms()
        ]
        products.sort(reverse=True)
        assert coefficient["value"] == float(sum(products))
        assert [p["value"] for p in coefficient["products"]] == [float(p) for p in products[:3]]
        assert coefficient["explained"] == pytest.approx(
            float(Fraction(int(sum(products[:3])), int(sum(products))))
        )


def test_the_largest_products_need_numbers(derived):
    called = derived(ladder(2), "--largest", "2")
    assert called.status == 2
    assert "R0" in called.err


def test_the_largest_products_are_shown_with_their_share(derived):
    text = "in -- R1 -- out -- R2 -- gnd\nfix R1 = 1k, R2 = 3k\nask H = V_out/V_in\n"
    called = derived(text, "--largest", "1")
    assert "75.00%   R2" in called.out


def test_numbers_of_an_answer_that_is_not_expanded_are_refused_with_a_mend(derived):
    fixes = "fix " + ", ".join(f"R{k} = 1k, C{k} = 1n" for k in range(4)) + "\n"
    called = derived(ladder(4) + fixes, "--values", "--most", "20")
    assert called.status == 2
    assert "--most" in called.err


def test_a_match_of_a_big_answer_is_refused(capsys, tmp_path, monkeypatch):
    monkeypatch.setattr("symcirc.design.MOST_PRODUCTS", 20)
    path = tmp_path / "s.stage"
    path.write_text(ladder(4) + "target H: lowpass butterworth, order 4, edge 1 kHz\n", encoding="utf-8")
    called = call(capsys, "match", path)
    assert called.status == 2
    assert "too big" in called.err


def test_elimination_is_a_second_way_where_it_is_cheap_and_only_there():
    def answer(sections):
        sheet = read_sheet(Source("s.stage", ladder(sections)))
        return derive(pose(sheet)).answer("H")

    assert answer(8).eliminated  # 1,597 products
    assert not answer(9).eliminated  # 4,181 products
    assert 1597 + 1 <= CHEAP_PRODUCTS < 4181
    assert CHEAP_NODES == 24


def test_a_big_answer_that_the_numeric_solve_contradicts_is_a_fault(derived, monkeypatch):
    response = symcirc.derivation.response
    monkeypatch.setattr(symcirc.derivation, "response", lambda *a: response(*a) * (1 + 1e-6))
    called = derived(ladder(6), "--most", "20")
    assert called.status == 70
    assert called.out == ""


def test_a_structural_determinant_that_is_zero_as_algebra_is_refused(derived):
    # A conveyor of sign -, y grounded, a resistor from x to z: two trees whose products cancel.
    text = "x -- R1 -- z\nK1 conveyor: x x, y gnd, z z, sign -\nask Z = V_z/I_z\n"
    called = derived(text, "--json")
    assert called.status == 2
    assert derived(text, "--terms", "--json").status == 2


def test_a_circuit_too_dense_for_an_exact_answer_is_refused_and_not_waited_for(derived, monkeypatch):
    monkeypatch.setattr(symcirc.derivation, "MOST_STATES", 30)
    called = derived(ladder(12), "--terms")
    assert called.status == 2
    assert "too densely connected" in called.err
