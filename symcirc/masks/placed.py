"""A prototype put in its place, in doubles: poles and real sections of the low-, high-, band-pass or band-stop."""

from __future__ import annotations

from cmath import sqrt as complex_root
from math import inf, sqrt

from symcirc.masks.curve import Curve
from symcirc.masks.placing import Spot
from symcirc.masks.timing import Factors


def placed(curve: Curve, spot: Spot) -> Factors:
    """Return the poles and sections of a prototype at its place; the nominal gain is 1.

    >>> from symcirc.masks.curve import build_curve
    >>> first = build_curve((-1 + 0j,), (), 0.0)
    >>> placed(first, Spot("highpass", 5.0, None)).sections
    (((0.0, 1.0), (5.0, 1.0)),)
    """
    poles = _poles(curve.poles, spot)
    under = _paired(poles)
    over = _numerators(_zeros(curve, spot), [len(section) - 1 for section in under])
    return Factors(_with_gain(over, under, curve, spot), tuple(poles))


def _poles(poles: tuple[complex, ...], spot: Spot) -> list[complex]:
    size, centre = spot.size, spot.centre
    if spot.kind == "lowpass":
        return [p * size for p in poles]
    if spot.kind == "highpass":
        return [size / p for p in poles]
    assert centre is not None
    middles = [p * size / 2 if spot.kind == "bandpass" else size / (2 * p) for p in poles]
    roots = [(m, complex_root(m * m - centre**2)) for m in middles]
    return [m + sign * root for m, root in roots for sign in (1, -1)]


def _zeros(curve: Curve, spot: Spot) -> list[float]:
    """Return the frequencies of the finite zeros' pairs, and 0 once for every zero at zero."""
    size, centre = spot.size, spot.centre
    rest = len(curve.poles) - 2 * len(curve.zeros)
    if spot.kind == "lowpass":
        return [z * size for z in curve.zeros]
    if spot.kind == "highpass":
        return [*(size / z for z in curve.zeros), *[0.0] * rest]
    assert centre is not None
    halves = [z * size / 2 if spot.kind == "bandpass" else size / (2 * z) for z in curve.zeros]
    pairs = [sqrt(h * h + centre**2) + sign * h for h in halves for sign in (1, -1)]
    return [*pairs, *([0.0] * rest if spot.kind == "bandpass" else [centre] * rest)]


def _paired(poles: list[complex]) -> list[tuple[float, ...]]:
    """Return monic denominators: of every pair above the real axis, and of the real poles two by two."""
    real = sorted(p.real for p in poles if abs(p.imag) <= 1e-9 * abs(p))
    upper = sorted((p for p in poles if p.imag > 1e-9 * abs(p)), key=abs)
    sections: list[tuple[float, ...]] = [
        (a * b, -a - b, 1.0) for a, b in zip(real[::2], real[1::2], strict=False)
    ]
    if len(real) % 2:
        sections.append((-real[-1], 1.0))
    return [*sections, *((abs(p) ** 2, -2 * p.real, 1.0) for p in upper)]


def _numerators(zeros: list[float], degrees: list[int]) -> list[tuple[float, ...]]:
    """Return a numerator for every section, of at most its degree: pairs first, then zeros at zero, as many as fit."""
    pairs = sorted(z for z in zeros if z > 0)
    single = len(zeros) - len(pairs)
    result: list[tuple[float, ...]] = []
    for degree in reversed(degrees):
        if degree == 2 and pairs:
            result.append((pairs.pop() ** 2, 0.0, 1.0))
        else:
            taken = min(degree, single)
            single -= taken
            result.append((*[0.0] * taken, 1.0))
    return result[::-1]


def _with_gain(
    over: list[tuple[float, ...]], under: list[tuple[float, ...]], curve: Curve, spot: Spot
) -> tuple[tuple[tuple[float, ...], tuple[float, ...]], ...]:
    """Return the sections, the gain of each 1 where the whole has its nominal gain, but for the first."""
    gain: float = 10 ** (-curve.loss_at_zero_db / 20)
    reference = {"lowpass": 0.0, "bandstop": 0.0, "highpass": inf}.get(spot.kind, spot.centre)
    result = []
    for a, b in zip(over, under, strict=True):
        size = _size(b, reference or 0.0) / _size(a, reference or 0.0) * gain
        result.append((tuple(size * c for c in a), b))
        gain = 1.0
    return tuple(result)


def _size(polynomial: tuple[float, ...], omega: float) -> float:
    """Return the magnitude of a polynomial at jω; its leading coefficient at infinity."""
    if omega == inf:
        return polynomial[-1]
    return abs(sum(c * (1j * omega) ** k for k, c in enumerate(polynomial)))
