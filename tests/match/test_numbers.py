"""Solutions found in numbers: ladders at the edge of what is possible, and stages of four poles.

Element values, all from memory: L. Weinberg, "Network Analysis and Synthesis" (1962), and G. L. Matthaei, L. Young and
E. M. T. Jones, "Microwave Filters, Impedance-Matching Networks, and Coupling Structures" (1964), tables 4.05.
"""

import math
from decimal import Decimal

import pytest
import sympy

from symcirc.complaints import Source
from symcirc.derivation import derive, pose
from symcirc.match.common_roots import common_roots
from symcirc.match.quotient import NotFound, algebra, monomial_key
from symcirc.report.match_json import match_json
from symcirc.report.match_text import match_text
from symcirc.sheet import read_sheet
from tests.match.sheets import designed

EDGE = 2000 * math.pi
BUTTERWORTH = {
    2: [1.4142, 1.4142],
    3: [1.0, 2.0, 1.0],
    4: [0.7654, 1.8478, 1.8478, 0.7654],
    5: [0.6180, 1.6180, 2.0, 1.6180, 0.6180],
}
HALF_DECIBEL = {3: [1.5963, 1.0967, 1.5963], 5: [1.7058, 1.2296, 2.5408, 1.2296, 1.7058]}
ONE_DECIBEL = {3: [2.0236, 0.9941, 2.0236], 5: [2.1349, 1.0911, 3.0009, 1.0911, 2.1349]}
TABLES = [
    *(("butterworth", order, values) for order, values in BUTTERWORTH.items()),
    *(("chebyshev, ripple 0.5 dB", order, values) for order, values in HALF_DECIBEL.items()),
    *(("chebyshev, ripple 1 dB", order, values) for order, values in ONE_DECIBEL.items()),
]


def ladder(family, order, fixes):
    """A ladder that begins with a capacitor across, as sheet."""
    lines, node = ["in -- R1 -- n0"], 0
    for k in range(1, order + 1):
        if k % 2:
            lines.append(f"n{node} -- C{k} -- gnd")
        else:
            lines.append(f"n{node} -- L{k} -- n{node + 1}")
            node += 1
    lines += [f"n{node} -- R2 -- gnd", fixes, f"ask H = V_n{node}/V_in"]
    return "\n".join([*lines, f"target H: lowpass {family}, order {order}, edge 1 kHz\n"])


def normalized(values, order):
    scales = {"C": 1000 * EDGE, "L": EDGE / 1000}
    names = [f"{'C' if k % 2 else 'L'}{k}" for k in range(1, order + 1)]
    return [values[name] * scales[name[0]] for name in names]


@pytest.mark.parametrize(("family", "order", "printed"), TABLES)
def test_ladders_between_equal_resistors_have_the_printed_elements(family, order, printed):
    """There the solutions of the ladder meet: it transfers all power that the source can give."""
    found = designed(ladder(family, order, "fix R1 = 1 kohm, R2 = R1"))
    (solution,) = found.solutions
    assert normalized(solution.values, order) == pytest.approx(printed, abs=6e-5)


def test_text_and_json_give_the_numbers_and_tell_how_they_were_found():
    found = designed(ladder("butterworth", 5, "fix R1 = 1 kohm, R2 = R1"))
    lines = list(match_text(found))
    assert "  C3 = 1e-6/pi" in lines  # g3 = 2 exactly
    assert "  found in numbers, as one of 16 complex solutions, all of which were found" in lines
    (solution,) = match_json(found)["solutions"]
    assert [entry["part"] for entry in solution["equations"]] == ["C1", "C3", "C5", "L2", "L4"]


def test_a_load_a_little_off_parts_the_solutions_or_leaves_none():
    """Chebyshev of even order has a mismatch of 1.9841 at 0.5 dB (Matthaei, Young, Jones): none for equal resistors."""
    off = ladder("butterworth", 4, "fix R1 = 1 kohm, R2 = 999.9999 ohm")
    assert len(designed(off).solutions) > 1
    equal = designed(ladder("chebyshev, ripple 0.5 dB", 4, "fix R1 = 1 kohm, R2 = R1"))
    assert equal.refusal.kind in ("negative", "sign", "gain")


def test_no_claim_is_made_about_all_values_of_a_symbol_where_some_have_solutions():
    found = designed(ladder("butterworth", 4, "fix R2 = R1\nchoose R1"))
    assert found.refusal.kind == "given up"
    assert "fix a number for R1" in found.refusal.mend


def single(coefficients):
    """The real roots of a polynomial in one unknown, ascending coefficients as text."""
    images = [int(Decimal(c) * 10**40) * pow(10**40, -1, 2**61 - 1) % (2**61 - 1) for c in coefficients]
    equation = {
        monomial_key((k,)): (image, Decimal(c))
        for k, (image, c) in enumerate(zip(images, coefficients, strict=True))
        if image
    }
    return common_roots(algebra([equation], lambda products: None), True)


def test_a_double_root_is_told_from_two_that_nearly_meet_and_from_none():
    double = single(["1", "-2", "1"])
    assert (double.distinct, [float(x) for (x,) in double.real]) == (1, [1.0])
    assert len(single([f"0.{'9' * 30}", "-2", "1"]).real) == 2
    assert len(single([f"1.{'0' * 29}1", "-2", "1"]).real) == 0


def test_infinitely_many_roots_and_too_many_are_not_taken_for_some():
    one = (1, Decimal(1))
    curve = {monomial_key((1, 1)): one, monomial_key((0, 0)): one}
    with pytest.raises(NotFound):
        algebra([curve], lambda products: None)
    many = {monomial_key((41,)): one, monomial_key((0,)): one}
    with pytest.raises(NotFound):
        algebra([many], lambda products: None)


ONE_AMPLIFIER = """
in -- R1 -- a -- R2 -- b -- R3 -- c -- R4 -- p -- C4 -- gnd
a -- C1 -- gnd
b -- C2 -- out
c -- C3 -- gnd
U1 opamp: plus p, minus out, drives out
fix C1 = 22n, C2 = 100n, C3 = 10n, C4 = 1n
"""
MULTIPLE_LOOPS = """
in -- R1 -- a -- R3 -- m -- C2 -- b
a -- C1 -- gnd
a -- R2 -- out
U1 opamp: plus gnd, minus m, drives b
b -- R4 -- c -- R5 -- p -- C4 -- gnd
c -- C3 -- out
U2 opamp: plus p, minus out, drives out
fix R1 = 10 kohm, C1 = 22n, C2 = 4n7, C3 = 22n, C4 = 10n
"""
ASK = "ask H = V_out/V_in\n"


def forward(circuit, values):
    """The response of a circuit with all parts given, as the text of an explicit target; 25 digits."""
    fixes = "".join(f"fix {name} = {value}\n" for name, value in values.items())
    derivation = derive(pose(read_sheet(Source("s.stage", circuit + fixes + ASK))))
    function = derivation.answers[0].function
    numbers = {s: derivation.sheet.numbers[str(s)] for s in function.ring.symbols}

    def side(coefficients):
        exact = [c.as_expr().subs(numbers) if c else 0 for c in coefficients]
        return " + ".join(f"({sympy.Float(c, 25)})*s^{k}" for k, c in enumerate(exact) if c)

    return f"({side(function.numerator)})/({side(function.denominator)})"


@pytest.mark.parametrize(
    ("circuit", "values"),
    [
        (ONE_AMPLIFIER, {"R1": 4700, "R2": 10000, "R3": 2200, "R4": 33000}),
        (
            MULTIPLE_LOOPS.replace("R1 = 10 kohm, ", ""),
            {"R1": 10000, "R2": 12000, "R3": 8200, "R4": 5600, "R5": 15000},
        ),
    ],
)
def test_four_poles_about_one_and_two_amplifiers_give_back_the_parts_that_made_the_target(circuit, values):
    target = f"target H = {forward(circuit, values)}\n"
    found = designed(circuit + ASK + target)
    assert any(
        all(solution.values[name] == pytest.approx(value, rel=1e-6) for name, value in values.items())
        for solution in found.solutions
    )


def test_numbers_without_a_solution_are_refused_with_one_that_would_do():
    text = MULTIPLE_LOOPS + ASK + "target H: lowpass butterworth, order 4, edge 1 kHz\n"
    refusal = designed(text).refusal
    assert refusal.kind == "negative"
    assert refusal.mend == "C3 = 110 nF would do, the rest as given"
    assert designed(text.replace("C3 = 22n", "C3 = 110n")).solutions
