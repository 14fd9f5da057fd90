"""Branches written down: equations, conditions, values."""

from __future__ import annotations

from collections.abc import Hashable, Iterable
from dataclasses import replace

import sympy
from sympy.polys.rings import PolyElement

from symcirc.match.branches import Region, region_of
from symcirc.match.candidates import Candidate
from symcirc.match.claims import Claim, factors_of
from symcirc.match.elimination import put_in
from symcirc.match.explicit import quadratic_formula, ratio_formula, root_record
from symcirc.match.forms import Form, discriminant
from symcirc.match.inequalities import condition
from symcirc.match.problem import Branch, Condition, Equation, Root
from symcirc.match.quadratics import Quadratic
from symcirc.match.quantities import holds_any, is_met, known_value
from symcirc.match.system import System
from symcirc.match.work import StepTooLarge, Work


class Writer:
    """Writes the branches of one chain down; what two branches have in common is worked out once.

    ``fixed`` are relations that hold for the numbers given, not for all: they become equalities.
    """

    def __init__(self, system: System, fixed: Iterable[PolyElement], work: Work) -> None:
        self.fixed = tuple(fixed)
        self.system = system
        self.quantities = system.quantities
        self.work = work
        self._regions: dict[Hashable, Region | None] = {}
        self._equations: dict[Hashable, Equation] = {}
        self._conditions: dict[Claim, Condition] = {}

    def region(self, candidate: Candidate) -> Region | None:
        """Return where a candidate is real and positive; None where it never is."""
        sides = tuple(c for f, c in zip(candidate.forms, candidate.choices, strict=False) if f.degree == 2)
        key = (sides, len(candidate.choices))
        if key not in self._regions:
            positives = self.system.positives.values()
            self._regions[key] = region_of(candidate, positives, self.quantities, self.work)
        return self._regions[key]

    def branch(self, candidate: Candidate, region: Region) -> Branch:
        """Return a candidate that is real and positive as a branch."""
        equations = tuple(
            self._equation(form, choice)
            for form, choice in zip(candidate.forms, candidate.choices, strict=True)
        )
        formulas = {e.part: e.formula for e in equations}
        conditions = [*self._equalities(candidate), *self._double_roots(candidate)]
        conditions += [self._condition(claim) for claim in region.claims]
        for k in region.open:
            formula = formulas[self.quantities.name(k)]
            assert not isinstance(formula, Root), "only the roots of quadratic steps are left open"
            conditions.append(Condition(formula, ">", sympy.S.Zero))
        values = {self.quantities.name(k): candidate.values[k] for k in self.quantities.unknowns}
        floats = {name: None if value is None else float(value) for name, value in values.items()}
        return Branch(equations, tuple(conditions), floats)

    def _equation(self, form: Form, choice: int) -> Equation:
        key = (form, choice if form.degree == 2 else 0)
        if key not in self._equations:
            self._equations[key] = self._written(form, choice)
        equation = self._equations[key]
        if isinstance(equation.formula, Root):
            return replace(equation, formula=replace(equation.formula, index=choice))
        return equation

    def _written(self, form: Form, choice: int) -> Equation:
        name = self.quantities.name(form.unknown)
        if form.degree == 1:
            return Equation(name, ratio_formula(form, self.quantities), 1)
        if form.degree == 2:
            return Equation(name, quadratic_formula(Quadratic(form, choice), self.quantities), 2)
        return Equation(name, root_record(form, choice, self.quantities), form.degree)

    def _condition(self, claim: Claim) -> Condition:
        if claim not in self._conditions:
            self._conditions[claim] = condition(claim, self.quantities)
        return self._conditions[claim]

    def _equalities(self, candidate: Candidate) -> list[Condition]:
        """Return the relations among chosen quantities that their numbers meet."""
        met = [
            factor
            for relation in self.fixed
            for factor, _ in factors_of(self._in_chosen(relation, candidate))
        ]
        return [
            condition(Claim((factor,)), self.quantities, "=")
            for factor in met
            if known_value(factor, candidate.values) == 0 and not holds_any(factor, self.quantities.unknowns)
        ]

    def _in_chosen(self, relation: PolyElement, candidate: Candidate) -> PolyElement:
        """Return a relation with the parts from linear equations put in, as far as that stays short."""
        try:
            for form in reversed(candidate.forms):
                if form.degree == 1 and form.power == 1:
                    equation = form.step.equation
                    relation = put_in(relation, form.unknown, equation, self.quantities, self.work)
        except StepTooLarge:
            pass
        return relation

    def _double_roots(self, candidate: Candidate) -> list[Condition]:
        """Return the equalities by which the two roots of a quadratic step are one."""
        found = []
        for form, choice in zip(candidate.forms, candidate.choices, strict=True):
            if form.degree == 2 and not choice:
                square = self.quantities.reduced(discriminant(form))
                if square:
                    zero = next(f for f, _ in factors_of(square) if is_met(f, candidate.values))
                    found.append(condition(Claim((zero,)), self.quantities, "="))
        return found
