"""The note as a document: what is in it and in which order, and every displayed equation judged."""

from __future__ import annotations

import hashlib
import re
from functools import cache

import mpmath
import pytest
import sympy

from symcirc.complaints import Complaint, InternalFault, Source
from symcirc.derivation import Derivation as Derived
from symcirc.derivation import derive, pose, pose_real
from symcirc.design import design
from symcirc.match.problem import Equation as DesignEquation
from symcirc.note.build import SECTIONS, build_note, sections_of
from symcirc.note.closing import CAUTION
from symcirc.note.formulas import equation_statement, expression_form
from symcirc.note.judged import judge
from symcirc.note.material import gather
from symcirc.note.model import (
    Document,
    Equation,
    Figure,
    Heading,
    Items,
    Listing,
    Mathematics,
    Paragraph,
    Reference,
    Remark,
    Table,
)
from symcirc.progress import silent
from symcirc.sheet import read_sheet
from symcirc.transfer.form import Negative, Symbol
from symcirc.transfer.text import text
from symcirc.working.check import check_posed
from tests.calling import EXAMPLES
from tests.note.values import DIGITS, by_anchor, equations, has_decimals, value

NAMES = sorted(path.stem for path in EXAMPLES.glob("*.stage"))
#: What the check of workings judges as it stands, by the first word of the equation's anchor.
JUDGED = ("step", "ratio", "standard", "product")
SECOND_ORDER = ("w0", "f0", "Q")
IN_NUMBERS = ("design", "condition", "target", "shift")


def sheet_text(name: str) -> str:
    return (EXAMPLES / f"{name}.stage").read_text(encoding="utf-8")


@cache
def note(name: str) -> Document:
    path = EXAMPLES / f"{name}.stage"
    return build_note(read_sheet(Source(str(path), sheet_text(name))), "2026-12-01")


def of(sheet: str, *only: str) -> Document:
    return build_note(read_sheet(Source("a.stage", sheet)), "2026-12-01", only)


def headings(document: Document) -> list[str]:
    return [block.text for block in document.blocks if isinstance(block, Heading) and block.level == 1]


def words(document: Document) -> str:
    """Return all sentences of a note."""
    found = []
    for block in document.blocks:
        groups = ()
        if isinstance(block, Paragraph | Remark):
            groups = (block.pieces,)
        elif isinstance(block, Items):
            groups = block.items
        for pieces in groups:
            found.append("".join(text(p.form) if isinstance(p, Mathematics) else str(p) for p in pieces))
    return "\n".join(found)


def parts(equation: Equation) -> tuple[str, str]:
    kind, _, rest = equation.anchor.partition("-")
    return kind, rest


def working_line(equation: Equation) -> str:
    return f"{text(equation.left)} = {text(equation.right)}".replace("**", "^").replace("ω0", "w0")


def ask_of(rest: str, asks: list[str]) -> str:
    return next(
        ask for ask in sorted(asks, key=len, reverse=True) if rest == ask or rest.startswith(f"{ask}-")
    )


# every displayed equation ---------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", NAMES)
def test_every_equation_of_every_example_is_of_a_kind_that_is_judged_below(name) -> None:
    document = note(name)
    assert equations(document)
    assert {parts(e)[0] for e in equations(document)} <= {*JUDGED, *SECOND_ORDER, *IN_NUMBERS}
    assert [e.number for e in equations(document)] == list(range(1, len(equations(document)) + 1))


@pytest.mark.parametrize("name", NAMES)
def test_steps_and_functions_hold_before_the_check_of_workings(name) -> None:
    """Those of a cascade's stages, too, are judged in the whole circuit."""
    posed = pose(read_sheet(Source("a.stage", sheet_text(name))))
    asks = [ask.name for ask in posed.sheet.asks]
    lines: list[str] = []
    count = 0
    for equation in equations(note(name)):
        kind, rest = parts(equation)
        if kind in JUDGED:
            lines += [f"under {ask_of(rest, asks)}", working_line(equation)]
            count += 1
    checked = check_posed(posed, Source("note.work", "\n".join(lines)))
    assert [(line.text, line.verdict) for line in checked.lines if line.verdict != "holds"] == []
    assert len(checked.lines) == count > 4


@pytest.mark.parametrize("name", NAMES)
def test_natural_frequencies_and_qualities_are_those_of_the_displayed_denominators(name) -> None:
    """In numbers: ω0² = a0/a2 and Q = ω0 a2/a1 of the displayed standard form, found from it by differences."""
    shown = by_anchor(note(name))
    with mpmath.workdps(DIGITS):
        for anchor, equation in shown.items():
            kind, rest = parts(equation)
            if kind not in SECOND_ORDER:
                continue
            known = _random_values(name)
            constant, linear, order = _denominator(shown[f"standard-{rest}"], known)
            omega = constant ** (mpmath.mpf(1) / order)
            expected = {
                "w0": omega,
                "f0": omega / (2 * mpmath.pi),
                "Q": omega / linear if linear else mpmath.inf,
            }
            assert mpmath.almosteq(value(equation.right, known), expected[kind], 1e-40), anchor


@pytest.mark.parametrize("name", ["hive_antialias", "hive_hum_notch", "hive_queen", "hive_preamp"])
def test_natural_frequencies_and_qualities_hold_before_the_check_of_workings(name) -> None:
    posed = pose(read_sheet(Source("a.stage", sheet_text(name))))
    first = posed.sheet.asks[0].name
    shown = by_anchor(note(name))
    lines = [working_line(shown[f"{kind}-{first}"]) for kind in SECOND_ORDER]
    assert [line.verdict for line in check_posed(posed, Source("a.work", "\n".join(lines))).lines] == [
        "holds"
    ] * 3


def _random_values(name: str) -> dict[str, object]:
    symbols = read_sheet(Source("a.stage", sheet_text(name))).symbols
    return {symbol: mpmath.mpf(3) + mpmath.mpf(k * k + 1) / 7 for k, symbol in enumerate(symbols)}


def _denominator(standard: Equation, known) -> tuple[object, object, int]:
    """Return a0, a1 and the order of a displayed monic denominator, from its values at a few s."""
    form = standard.right.operand if isinstance(standard.right, Negative) else standard.right
    at = [value(form.below, {**known, "s": mpmath.mpf(s)}) for s in (0, 1, 2)]
    second = at[2] - 2 * at[1] + at[0]
    order = 2 if mpmath.almosteq(second, 2, 1e-40) else 1
    return at[0], at[1] - at[0] - (1 if order == 2 else 0), order


# design equations in numbers ------------------------------------------------------------------------------------


def _targets() -> list[tuple[str, str]]:
    found = []
    for name in NAMES:
        found += [(name, target.ask) for target in read_sheet(Source("a.stage", sheet_text(name))).targets]
    return found


@pytest.mark.parametrize(("name", "ask"), _targets())
def test_the_displayed_equations_give_parts_with_which_the_displayed_function_is_the_target(
    name, ask
) -> None:
    """Each solution is computed from the printed equations in their order, with 50 digits, and put into the printed
    function. Equations with exact numbers agree to 40 digits, those with printed decimals (17 digits) to 13."""
    shown, sheet = by_anchor(note(name)), read_sheet(Source("a.stage", sheet_text(name)))
    found = design(sheet, ask)
    with mpmath.workdps(DIGITS):
        for prefixes, functions in _solutions(found, shown, ask):
            used = [e for p in prefixes for a, e in shown.items() if a.startswith(f"design-{ask}-{p}-")]
            assert used
            known = {n: mpmath.mpf(number.p) / number.q for n, number in sheet.numbers.items()}
            solution = found.solutions[int(prefixes[0]) - 1 if found.cascade is None else 0]
            for equation in used:
                _compute(equation, known, solution.values | solution.branch.values)
            _tie(sheet, known)
            exact = not any(has_decimals(e.left) or has_decimals(e.right) for e in used)
            tolerance = mpmath.mpf(10) ** (-40 if exact else -13)
            ratios = [_function(functions, known, s) / _goal(found.goal, s) for s in _points(found.goal)]
            gain = {"exact": 1, "magnitude": mpmath.sign(ratios[0].real), "free": ratios[0]}[found.goal.gain]
            assert all(abs(ratio / gain - 1) < tolerance for ratio in ratios), (prefixes, exact)
            for prefix in prefixes:
                for anchor, condition in shown.items():
                    if anchor.startswith(f"condition-{ask}-{prefix}-"):
                        left, right = value(condition.left, known), value(condition.right, known)
                        assert {">": left > right, ">=": left >= right, "<": left < right, "<=": left <= right,
                                "=": mpmath.almosteq(left, right)}[condition.relation], anchor  # fmt: skip


def _solutions(found, shown, ask):
    """Yield for every solution the middle of its equations' anchors, and the displayed functions to be multiplied."""
    if found.cascade is None:
        for number in range(1, len(found.solutions) + 1):
            yield [str(number)], [shown[f"ratio-{ask}"]]
        return
    stages = found.cascade.stages
    functions = [shown[f"ratio-{ask}-{match.stage.number}"] for match in stages]
    yield [f"{match.stage.number}-1" for match in stages], functions


def _compute(equation: Equation, known, near) -> None:
    if equation.root_of is not None:
        part = equation.root_of
        polynomial = equation.left
        root = mpmath.findroot(lambda x: value(polynomial, {**known, part: x}), mpmath.mpf(near[part]))
        assert abs(root / near[part] - 1) < 1e-9
        known[part] = root
        return
    form, degree = equation.left, 1
    if not isinstance(form, Symbol):
        form, degree = form.base, form.exponent
    known[form.name] = mpmath.root(value(equation.right, known), degree)
    assert abs(known[form.name] / near[form.name] - 1) < 1e-9


def _tie(sheet, known) -> None:
    from symcirc.sheet.exact import exact_number
    from symcirc.sheet.fixes import tie_order

    for name in tie_order(sheet.ties):
        symbols = {n: sympy.Symbol(n) for n in known}
        tied = exact_number(sheet.ties[name], symbols)
        known[name] = sympy.lambdify(list(tied.free_symbols), tied, "mpmath")(
            *(known[str(x)] for x in tied.free_symbols)
        )


def _function(functions, known, s):
    return mpmath.fprod(value(equation.right, {**known, "s": s}) for equation in functions)


def _goal(goal, s):
    over, under = (
        mpmath.fsum(mpmath.mpmathify(sympy.N(c, DIGITS)) * s**k for k, c in enumerate(side))
        for side in (goal.numerator, goal.denominator)
    )
    return over / under


def _points(goal):
    size = abs(mpmath.mpmathify(sympy.N(goal.denominator[0], DIGITS))) ** (
        mpmath.mpf(1) / (len(goal.denominator) - 1)
    )
    return [size * mpmath.mpc(x, y) for x, y in ((0.1, 0.4), (0.3, 0.9), (0.05, 2.3), (1.7, 0.2))]


def test_design_equations_with_a_root_make_the_function_the_displayed_target() -> None:
    """Ties may hold no root of names: the root is a parameter q, and C2 what makes it one."""
    shown = by_anchor(note("hive_antialias"))
    for number in "12":
        ties = [working_line(e) for a, e in shown.items() if a.startswith(f"design-H-{number}-")]
        assert sum("sqrt(C1*(C1 - 4*C2))" in tie for tie in ties) == 1
        tied = "\n".join(f"fix {tie}" for tie in ties).replace("sqrt(C1*(C1 - 4*C2))", "q")
        sheet = sheet_text("hive_antialias").replace("fix    C1 = 22 nF, C2 = 2n2", "choose C1, q")
        posed = pose(read_sheet(Source("a.stage", f"{sheet}\nfix C2 = (C1^2 - q^2)/(4*C1)\n{tied}\n")))
        line = f"H = -({text(shown['target-H'].right)})".replace("**", "^")
        (judged,) = check_posed(posed, Source("a.work", line)).lines
        assert judged.verdict == "holds"


@pytest.mark.parametrize("name", ["hive_queen"])
def test_design_equations_put_into_the_sheet_make_its_function_the_displayed_target(name) -> None:
    """Before the check of workings: the parts tied by the printed equations, the printed target as a line."""
    shown = by_anchor(note(name))
    target = shown["target-H"]
    solutions = sorted({a.split("-")[2] for a in shown if a.startswith("design-H-")})
    for number in solutions:
        ties = "\n".join(
            f"fix {text(e.left)} = {text(e.right)}".replace("**", "^")
            for a, e in shown.items()
            if a.startswith(f"design-H-{number}-")
        )
        posed = pose(read_sheet(Source("a.stage", f"{sheet_text(name)}\n{ties}\n")))
        line = f"H = -({text(target.right)})".replace("**", "^")
        (judged,) = check_posed(posed, Source("a.work", line)).lines
        assert judged.verdict == "holds", (ties, judged)
        (turned,) = check_posed(posed, Source("a.work", line.replace("-(", "(", 1))).lines
        assert turned.verdict == "fails"


@pytest.mark.parametrize(("name", "ask"), _targets())
def test_a_displayed_target_is_the_goal(name, ask) -> None:
    shown = by_anchor(note(name)).get(f"target-{ask}")
    goal = design(read_sheet(Source("a.stage", sheet_text(name))), ask).goal
    if shown is None:
        assert len(goal.denominator) > 3
        return
    with mpmath.workdps(DIGITS):
        for s in _points(goal):
            assert mpmath.almosteq(value(shown.right, {"s": s}), _goal(goal, s), 1e-40)


def test_what_the_stages_of_a_cascade_take_is_the_target_together() -> None:
    shown = by_anchor(note("hive_cascade"))
    goal = design(read_sheet(Source("a.stage", sheet_text("hive_cascade")))).goal
    with mpmath.workdps(DIGITS):
        products = [
            mpmath.fprod(value(shown[f"target-H-{k}"].right, {"s": s}) for k in (1, 2, 3)) / _goal(goal, s)
            for s in _points(goal)
        ]
    assert all(abs(product / products[0] - 1) < 1e-13 for product in products)


REAL = """in -- R1 -- a -- R3 -- m -- C2 -- out
a -- C1 -- gnd
a -- R2 -- out
U1 opamp: plus gnd, minus m, drives out, gain A, gbw F
fix R1 = 10k, R2 = 10k, R3 = 37k, C1 = 22 nF, C2 = 2.2 nF, A = {gain}, F = {gbw}
ask H = V_out/V_in
"""


def test_displayed_first_order_shifts_are_the_slopes_of_the_exact_ones() -> None:
    """ω0 and Q of the pair of poles nearest the ideal one, computed anew with amplifiers a million times too good."""
    sheet = REAL.format(gain="1e5", gbw="1 MHz")
    shown = {a: e for a, e in by_anchor(of(sheet, "amplifiers")).items() if a.startswith("shift")}
    assert len(shown) == 4
    with mpmath.workdps(DIGITS):
        for anchor, equation in shown.items():
            gain, gbw = (1e12, 1e30) if anchor.endswith("gain") else (1e30, 1e14)
            numbers = read_sheet(Source("a.stage", sheet)).numbers
            known = {n: mpmath.mpf(x.p) / x.q for n, x in numbers.items()} | {
                "A": mpmath.mpf(gain),
                "F": mpmath.mpf(gbw),
            }
            known |= {"U1_gain": known["A"], "U1_gbw": known["F"]}
            predicted = value(equation.right, known)
            ideal, real = (
                _pair(
                    derive(p(read_sheet(Source("a.stage", REAL.format(gain=gain, gbw=f"{gbw:g} Hz"))))), known
                )
                for p in (pose, pose_real)
            )
            k = 0 if "w0" in anchor else 1
            assert abs((real[k] / ideal[k] - 1) / predicted - 1) < 1e-3, anchor


def _pair(derived: Derived, known) -> tuple[object, object]:
    """Return ω0 and Q of the slowest pair of poles."""
    function = derived.answer("H").function
    names = [str(x) for x in function.ring.symbols]
    numbers = [mpmath.pi if n == "pi" else known[n] for n in names]

    def coefficient(polynomial):
        return mpmath.fsum(
            (mpmath.mpf(int(c.numerator)) / int(c.denominator))
            * mpmath.fprod(n**e for n, e in zip(numbers, m, strict=True))
            for m, c in polynomial.terms()
        )

    coefficients = [coefficient(c) for c in reversed(function.denominator)]
    one, other = sorted(mpmath.polyroots(coefficients, maxsteps=500, extraprec=500), key=abs)[:2]
    omega = mpmath.sqrt((one * other).real)
    return omega, omega / -(one + other).real


def test_real_amplifiers_that_cannot_be_expanded_leave_the_rest_of_the_note(monkeypatch) -> None:
    monkeypatch.setattr("symcirc.note.amplifiers.expanded_answers", _refuse)
    document = of(REAL.format(gain="1e5", gbw="1 MHz"))
    assert "The real amplifiers are not counted: too big." in words(document)
    assert "Transfer function" in headings(document)


def _refuse(derivation) -> None:
    raise Complaint(derivation.answers[0].ask.place, "too big", "make it smaller")


@pytest.mark.parametrize("only", [("transfer",), ("derivation",), ()])
def test_equations_are_judged_whatever_sections_are_chosen(monkeypatch, only) -> None:
    judged = []
    monkeypatch.setattr("symcirc.note.judged._require", lambda group, lines: judged.extend(lines))
    document = of(sheet_text("hive_antialias"), *only)
    of_the_circuit = [e for e in equations(document) if parts(e)[0] in (*JUDGED, *SECOND_ORDER)]
    assert judged == [working_line(equation) for equation in of_the_circuit]
    assert judged


def test_an_equation_that_does_not_hold_stops_the_note() -> None:
    sheet = read_sheet(Source("a.stage", sheet_text("hive_antialias")))
    material = gather(sheet, False, silent)
    good = by_anchor(note("hive_antialias"))["ratio-H"]
    assert judge(material, [good]).lines == 1
    with pytest.raises(InternalFault, match="judged as fails"):
        judge(material, [Equation(good.anchor, 1, good.left, "=", Negative(good.right))])


# contents -------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", NAMES)
def test_sections_come_in_the_order_in_which_a_reviewer_reads(name) -> None:
    document = note(name)
    titles = headings(document)
    assert titles == [title for title in SECTIONS.values() if title in titles]
    assert titles[0] == "Summary"
    assert titles[-2:] == ["The sheet", "Caution"]


@pytest.mark.parametrize("name", NAMES)
def test_title_file_digest_sheet_and_caution_are_there(name) -> None:
    document = note(name)
    assert document.date == "2026-12-01"
    assert document.file.endswith(f"{name}.stage")
    assert document.digest == hashlib.sha256((EXAMPLES / f"{name}.stage").read_bytes()).hexdigest()
    listing = next(block for block in document.blocks if isinstance(block, Listing))
    assert listing.text == sheet_text(name)
    assert document.blocks[-1] == Remark("caution", (CAUTION,))
    assert document.title == read_sheet(Source("a.stage", sheet_text(name))).title


@pytest.mark.parametrize("name", NAMES)
def test_the_summary_has_three_lines_and_every_reference_has_its_place(name) -> None:
    document = note(name)
    summary = next(block for block in document.blocks if isinstance(block, Items))
    assert [str(item[0]).split(":")[0] for item in summary.items] == ["What", "How well", "What to watch"]
    anchors = {b.anchor for b in document.blocks if isinstance(b, Table | Figure)} | set(by_anchor(document))
    pieces = [p for b in document.blocks if isinstance(b, Items) for item in b.items for p in item]
    pieces += [p for b in document.blocks if isinstance(b, Paragraph) for p in b.pieces]
    references = {piece.anchor for piece in pieces if isinstance(piece, Reference)}
    assert references
    assert references <= anchors


def test_only_chooses_sections_and_no_reference_is_left_hanging() -> None:
    document = of(sheet_text("hive_antialias"), "design", "assumptions")
    assert headings(document) == ["Assumptions", "Design equations"]
    pieces = [p for b in document.blocks if isinstance(b, Paragraph) for p in b.pieces]
    assert not any(isinstance(piece, Reference) for piece in pieces)


def test_a_section_with_nothing_to_say_is_left_out() -> None:
    document = of("in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n")
    assert headings(document) == ["Summary", "Circuit", "Assumptions", "Derivation", "Transfer function", "Checks",
                                  "The sheet", "Caution"]  # fmt: skip


def test_the_same_sheet_gives_the_same_note() -> None:
    assert of(sheet_text("hive_rumble")) == of(sheet_text("hive_rumble"))


def test_notes_of_the_sheet_are_items() -> None:
    document = of(
        'in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\nnote "One & <two>."\nnote "3 %"\n', "notes"
    )
    assert document.blocks[1] == Items((("One & <two>.",), ("3 %",)))


def test_preferred_values_stand_beside_the_exact_ones() -> None:
    document = note("hive_queen")
    table = next(b for b in document.blocks if isinstance(b, Table) and b.anchor == "values-H")
    rows = {text(row[0][0].form): [str(cell[0]) for cell in row[1:]] for row in table.rows}
    exact, preferred, off = rows["R1"]
    assert exact == "36.172 kΩ"
    kilohm = sum(float(x) for x in re.findall(r"([0-9.]+) kΩ", preferred))
    assert f"{100 * (kilohm / 36.1716 - 1):+.2f} %" == off
    assert "with preferred values" in words(document)


def test_a_mask_is_said_to_be_met_with_what_it_leaves_to_spare() -> None:
    document = note("hive_rumble")
    assert "every limit of H is met" in words(document)
    table = next(b for b in document.blocks if isinstance(b, Table) and b.anchor == "limits-H")
    assert [str(row[0][0]) for row in table.rows] == [
        "loss at least 20 dB below 19 Hz",
        "loss at most 1 dB from 90 Hz to 2 kHz",
    ]
    assert all(float(str(row[3][0]).split()[0]) > 0 for row in table.rows)


def test_a_mask_that_is_missed_is_said_to_be() -> None:
    sheet = "in -- R1 -- out -- C1 -- gnd\nfix R1 = 1k, C1 = 1 uF\nask H = V_out/V_in\n"
    sheet += "limit H: loss >= 40 dB above 1 kHz\nlimit H: loss <= 1 dB below 20 Hz\n"
    assert "1 of 2 limits of H missed, by up to 23.9 dB" in words(of(sheet, "summary"))


def test_a_target_that_cannot_be_met_says_why_and_what_would_help() -> None:
    sheet = sheet_text("hive_antialias").replace("C2 = 2n2", "C2 = 10n")
    document = of(sheet)
    (warning,) = [
        b for b in document.blocks if isinstance(b, Remark) and "No part values" in str(b.pieces[0])
    ]
    assert "C1" in str(warning.pieces)
    assert "cannot meet its target" in words(document)


def test_a_target_that_cannot_be_matched_leaves_the_rest_of_the_note() -> None:
    sheet = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\ntarget H: lowpass butterworth, order 1, edge 1 kHz\n"
    document = of(sheet)
    assert "There are no design equations" in words(document)
    assert "Transfer function" in headings(document)


def test_an_answer_too_big_to_be_expanded_leaves_the_rest_of_the_note() -> None:
    chain = "".join(f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd\n" for k in range(12))
    document = of(f"{chain}ask H = V_n12/V_n0\n", "derivation", "transfer", "checks")
    assert "not written out" in words(document)
    assert headings(document) == ["Derivation", "Transfer function", "Checks"]


def test_odd_text_of_a_sheet_stays_as_it_is() -> None:
    odd = r"\ % <script> # $ & Ω 電 مرشح"
    document = of(
        f'stage "{odd}"\nin -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\nnote "{odd}"\n', "notes", "sheet"
    )
    assert document.title == odd
    assert document.blocks[1] == Items(((odd,),))


def test_a_section_that_is_none_is_refused_with_the_nearest_one() -> None:
    with pytest.raises(Complaint, match="`sumary` is no section") as refused:
        sections_of("design,sumary")
    assert "summary" in refused.value.mend


# formulas -------------------------------------------------------------------------------------------------------


def test_a_formula_with_a_cube_root_is_given_as_a_power_of_its_part() -> None:
    c1, c2 = sympy.symbols("C1 C2", positive=True)
    said = equation_statement(DesignEquation("R1", 2 * sympy.cbrt(c1 + c2) / sympy.pi, 1))
    assert (text(said.left), text(said.right)) == ("R1**3", "8*(C1 + C2)/pi**3")
    with pytest.raises(ValueError, match="root of degree 3"):
        expression_form(sympy.cbrt(c1) + c2)


def test_a_fourth_root_is_a_root_of_a_root() -> None:
    c1 = sympy.Symbol("C1", positive=True)
    assert text(expression_form(sympy.root(c1, 4) ** 3)) == "sqrt(sqrt(C1**3))"
