"""The conditions under which a candidate is real and positive."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from sympy.polys.rings import PolyElement

from symcirc.match.candidates import Candidate
from symcirc.match.claims import Claim, simplified
from symcirc.match.elimination import substituted
from symcirc.match.forms import Form, discriminant
from symcirc.match.quadratics import Quadratic
from symcirc.match.quantities import Quantities, by_powers, common_monomial, divided_by_monomial, holds
from symcirc.match.system import Quotient
from symcirc.match.work import StepTooLarge, Work

#: Claims with more terms are stated in parts found before instead of in chosen quantities only.
MOST_TERMS = 250


@dataclass(frozen=True)
class Region:
    """Where a candidate is real and positive: the claims that hold there.

    ``open`` are unknowns from quadratic steps that, beyond the claims, have to be positive.
    """

    claims: tuple[Claim, ...]
    open: tuple[int, ...]


def region_of(
    candidate: Candidate, positives: Iterable[Quotient], quantities: Quantities, work: Work
) -> Region | None:
    """Return where a candidate is real and positive; None where it never is.

    Args:
        candidate: its steps are looked at as far as its choices go.
        positives: what must be positive beyond the parts.
        quantities: the ring.
        work: counts the products of terms.
    """
    collected = _Collected(quantities, work)
    for form, choice in zip(candidate.forms, candidate.choices, strict=False):
        collected.add(form, choice)
    if len(candidate.choices) == len(candidate.forms):
        for quotient in positives:
            collected.require([quotient.above, quotient.below])
    claims = simplified(collected.claims, quantities)
    return None if claims is None else Region(tuple(claims), tuple(collected.open))


class _Collected:
    """The claims of the steps so far, and the steps, by which later claims come to chosen quantities."""

    def __init__(self, quantities: Quantities, work: Work) -> None:
        self.quantities = quantities
        self.work = work
        self.forms: list[Form] = []
        self.roots: dict[int, Quadratic] = {}
        self.claims: list[Claim] = []
        self.open: list[int] = []

    def add(self, form: Form, choice: int) -> None:
        """Add the claims of a step."""
        needs_sign = form.unknown not in self.quantities.signless
        if form.degree == 1 and needs_sign:
            self.require([-form.coefficients[0], form.coefficients[1]])
        if form.degree == 2:
            self._add_quadratic(Quadratic(form, choice), needs_sign)
        self.forms.append(form)

    def _add_quadratic(self, root: Quadratic, needs_sign: bool) -> None:
        if root.side and root.form.coefficients[1]:
            self.claims.append(self._in_chosen(Claim((discriminant(root.form),), strict=False)))
        if needs_sign:
            found = root.root_claims(self._known(), self.quantities)
            self.claims += [self._in_chosen(claim) for claim in found or ()]
            self.open += [root.form.unknown] if found is None else []
        self.roots[root.form.unknown] = root

    def _known(self) -> list[Claim]:
        met = simplified(self.claims, self.quantities) or []
        return [claim for claim in met if len(claim.factors) == 1]

    def require(self, factors: Sequence[PolyElement]) -> None:
        """Add the claims that hold just where a product is positive."""
        factors = [f for f in factors if self.quantities.sign(f) != 1]
        if not factors:
            return
        reduced = self._in_chosen(Claim(tuple(factors)))
        held = [k for k in self.roots if any(holds(f, k) for f in reduced.factors)]
        found: list[Claim] | None = None
        if len(held) == 1:
            found = self._by_root(self.roots[held[0]], reduced.factors)
        if found is None:
            self.claims.append(Claim(tuple(factors)) if held else reduced)
        else:
            self.claims += [self._in_chosen(claim) for claim in found]

    def _by_root(self, root: Quadratic, factors: Sequence[PolyElement]) -> list[Claim] | None:
        try:
            return root.positivity(factors, self._known(), self.quantities, self.work)
        except StepTooLarge:
            return None

    def _in_chosen(self, claim: Claim) -> Claim:
        """Return an equal claim with parts from linear steps put in; the claim itself where that is long."""
        factors = list(claim.factors)
        for form in reversed(self.forms):
            if form.degree == 1 and form.power == 1:
                try:
                    factors = [g for f in factors for g in self._put_in(f, form)]
                except StepTooLarge:
                    return claim
        return Claim(tuple(factors), claim.strict) if sum(map(len, factors)) <= MOST_TERMS else claim

    def _put_in(self, polynomial: PolyElement, form: Form) -> list[PolyElement]:
        """Return factors of the same sign as a polynomial, a part taken from its linear equation."""
        powers = by_powers(polynomial, form.unknown)
        degree = len(powers) - 1
        rest, below = form.coefficients
        if not degree or len(polynomial) > MOST_TERMS:
            return [polynomial]
        total = substituted(powers, -rest, below, self.work)
        total = self._without_monomial(self.quantities.reduced(total))
        return [total] if degree % 2 == 0 else [total, below]

    def _without_monomial(self, polynomial: PolyElement) -> PolyElement:
        if not polynomial:
            return polynomial
        common = common_monomial(polynomial)
        signless = self.quantities.signless
        positive = tuple(0 if k in signless else e for k, e in enumerate(common))
        return divided_by_monomial(polynomial, positive).primitive()[1]
