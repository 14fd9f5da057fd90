"""Newton's polygon against roots found numerically at a small parameter."""

from __future__ import annotations

import random

import mpmath
import pytest

from symcirc.stability.runaway import Runaway, runaway_roots


def test_zero_without_the_parameter_has_no_verdict() -> None:
    assert runaway_roots({(0, 1): 1}) is None


def test_bounded_roots_do_not_count() -> None:
    assert runaway_roots({(1, 0): 1, (0, 0): -1}) == Runaway(0, 0)
    assert runaway_roots({(3, 0): 1, (0, 0): -1, (1, 1): 5}) == Runaway(0, 0)


def test_roots_along_the_imaginary_axis_do_not_count() -> None:
    assert runaway_roots({(0, 0): 1, (1, 1): 1}) == Runaway(0, 0)  # 1 + s^2 eps
    assert runaway_roots({(0, 0): 1, (1, 1): -1}) == Runaway(1, 0)


def test_every_edge_of_the_polygon_counts() -> None:
    # (1 - s eps)(1 - s^2 eps) and higher terms: one root as 1/eps, one as 1/sqrt(eps), both to the right.
    assert runaway_roots({(0, 0): 1, (0, 1): -1, (1, 1): -1, (1, 2): 1}) == Runaway(2, 0)


def test_coefficients_of_any_size_are_taken() -> None:
    assert runaway_roots({(0, 0): 10**400, (0, 1): -(10**700)}) == Runaway(1, 0)
    assert runaway_roots({(0, 0): 1, (0, 1): 10**300, (0, 2): 1}) == Runaway(0, 0)


@pytest.mark.parametrize("seed", range(40))
def test_the_count_is_that_of_the_roots_at_a_small_parameter(seed: int) -> None:
    rng = random.Random(seed)
    levels = rng.randrange(2, 4)
    polynomial = {
        (i, j): rng.choice([-3, -2, -1, 1, 2, 3]) for j in range(levels) for i in range(rng.randrange(1, 4))
    }
    found = runaway_roots(polynomial)
    assert found is not None
    with mpmath.workdps(80):
        eps = mpmath.mpf(10) ** -36
        dense = [mpmath.mpf(0)] * (max(i + j for i, j in polynomial) + 1)
        for (i, j), c in polynomial.items():
            dense[i + j] += c * eps**j
        while dense and not dense[-1]:
            dense.pop()
        while not dense[0]:
            dense.pop(0)
        roots = mpmath.polyroots(dense[::-1], maxsteps=2000, extraprec=1500) if len(dense) > 1 else []
    right = [root for root in roots if abs(root) > 1e6 and root.real > 1e-4 * abs(root)]
    assert found.real + found.complex == len(right)
    assert found.real == sum(1 for root in right if abs(root.imag) < 1e-4 * abs(root))
