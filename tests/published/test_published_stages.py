"""Every published stage gives its published function, exactly: both are cross-multiplied and subtracted."""

from __future__ import annotations

from functools import cache

import pytest
import sympy

from symcirc.complaints import Source
from symcirc.derivation import Answer, Derivation, derive, pose
from symcirc.sheet import read_sheet
from symcirc.transfer.function import TransferFunction
from tests.published.stage import Stage, s
from tests.published.stages import STAGES

WITH_RESONANCE = [stage for stage in STAGES if stage.omega0 is not None]
WITH_Q = [stage for stage in STAGES if stage.q is not None]
WITH_DESIGN = [stage for stage in STAGES if stage.designed is not None]


@cache
def derived(sheet: str) -> Derivation:
    return derive(pose(read_sheet(Source("published.stage", sheet))))


def first(stage: Stage) -> TransferFunction:
    answer = derived(stage.sheet).answers[0]
    assert isinstance(answer, Answer)
    return answer.function


def polynomial(coefficients: tuple[sympy.polys.rings.PolyElement, ...]) -> sympy.Expr:
    return sum((c.as_expr() * s**power for power, c in enumerate(coefficients)), start=sympy.S.Zero)


def assert_equal(function: TransferFunction, published: sympy.Expr) -> None:
    above, below = sympy.fraction(sympy.together(published))
    difference = polynomial(function.numerator) * below - polynomial(function.denominator) * above
    assert sympy.expand(difference) == 0
    assert sympy.expand(above) != 0


def by_id(stage: Stage) -> str:
    return stage.id


@pytest.mark.parametrize("stage", STAGES, ids=by_id)
def test_the_derived_functions_are_the_published_ones(stage: Stage) -> None:
    answers = derived(stage.sheet).answers
    assert [answer.ask.name for answer in answers] == list(stage.ratios)
    for answer in answers:
        assert isinstance(answer, Answer)
        assert_equal(answer.function, stage.ratios[answer.ask.name])


@pytest.mark.parametrize("stage", STAGES, ids=by_id)
def test_a_published_function_with_a_slip_is_noticed(stage: Stage) -> None:
    name, published = next(iter(stage.ratios.items()))
    with pytest.raises(AssertionError):
        assert_equal(derived(stage.sheet).answer(name).function, published * 2)


@pytest.mark.parametrize("stage", WITH_RESONANCE, ids=by_id)
def test_the_resonance_is_the_published_one(stage: Stage) -> None:
    low, _, high = (c.as_expr() for c in first(stage).denominator)
    assert stage.omega0 is not None
    assert sympy.simplify(stage.omega0**2 * high - low) == 0


@pytest.mark.parametrize("stage", WITH_Q, ids=by_id)
def test_q_is_the_published_one(stage: Stage) -> None:
    low, middle, high = (c.as_expr() for c in first(stage).denominator)
    assert stage.q is not None
    assert sympy.simplify(_positive(stage.q**2 * middle**2 - low * high)) == 0


def _positive(expression: sympy.Expr) -> sympy.Expr:
    """Part values are positive: only so may sqrt(a/b) be taken as sqrt(a)/sqrt(b)."""
    return expression.subs({name: sympy.Symbol(name.name, positive=True) for name in expression.free_symbols})


@pytest.mark.parametrize("stage", WITH_DESIGN, ids=by_id)
def test_the_published_design_formulas_give_the_response_they_promise(stage: Stage) -> None:
    function = first(stage)
    put_in = polynomial(function.numerator) / polynomial(function.denominator)
    found = put_in.subs(stage.design, simultaneous=True)
    assert sympy.simplify(found - stage.designed) == 0


def test_there_are_stages_enough_and_each_has_its_own_name_and_source() -> None:
    assert len(STAGES) >= 30
    assert len({stage.id for stage in STAGES}) == len(STAGES)
    assert all(stage.source and stage.ratios for stage in STAGES)
