"""The response of a solution as live cells: every stage at every frequency, the whole, and the target."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from symcirc.workbook.cells import Area, Formula, Page, Worksheet, reference

#: Steps of the frequency axis.
STEPS = 400


@dataclass(frozen=True)
class Polynomials:
    """A ratio of polynomials in s: the cells of its coefficients, ascending, and their numbers where all are known."""

    name: str
    above: tuple[str, ...]
    below: tuple[str, ...]
    values: tuple[tuple[float, ...], tuple[float, ...]] | None


@dataclass(frozen=True)
class Curves:
    """Where the curves of a solution stand."""

    frequency: Area
    magnitude: Area
    phase: Area
    target: Area


def response_page(
    name: str,
    ends: tuple[str, str],
    numbers: tuple[float, float] | None,
    stages: Sequence[Polynomials],
    target: Polynomials,
    factor: tuple[str, float | None],
) -> tuple[Worksheet, Curves]:
    """Return the response's worksheet.

    Args:
        name: the worksheet's.
        ends: the cells of the first and the last frequency, in Hz.
        numbers: the same as numbers, None where they are not known.
        stages: what is multiplied to the whole.
        target: what it must be, up to its sign.
        factor: the cell of the gain by which the target is to be multiplied, and its number.
    """
    page = Page(name)
    heads = ["frequency, Hz", "angular, rad/s"]
    for ratio in (*stages, target):
        words = ["over, real", "over, imaginary", "under, real", "under, imaginary", "dB", "deg"]
        heads += [f"{ratio.name}: {word}" for word in words]
    page.line(
        *heads,
        "whole, dB",
        "whole, deg as computed",
        "whole, deg",
        "target, dB",
        "departure, dB",
        style="head",
    )
    frequencies = None
    if numbers is not None:
        frequencies = numbers[0] * (numbers[1] / numbers[0]) ** (np.arange(STEPS + 1) / STEPS)
    angular = None if frequencies is None else 2 * np.pi * frequencies
    numeric = [_evaluated(ratio, frequencies) for ratio in (*stages, target)]
    whole = _whole(numeric, factor[1], len(stages))
    for k in range(STEPS + 1):
        step = f"{ends[0]}*({ends[1]}/{ends[0]})^({k}/{STEPS})"
        page.put(0, Formula(step, _at(frequencies, k)), "number")
        page.put(1, Formula(f"2*PI()*{reference(page.row, 0)}", _at(angular, k)), "number")
        for j, ratio in enumerate((*stages, target)):
            _put_ratio(page, 2 + 6 * j, ratio, numeric[j], k)
        _put_whole(page, len(stages), factor[0], whole, k)
        page.row += 1
    first, last = 8 + 6 * len(stages), page.row - 1
    areas = [Area(name, column, 1, last) for column in (0, first, first + 2, first + 3)]
    return page.finished(widths=(14, 14)), Curves(*areas)


Numeric = tuple[NDArray[np.float64], ...]


def _evaluated(ratio: Polynomials, frequencies: NDArray[np.float64] | None) -> Numeric | None:
    """Return real and imaginary parts over and under, the magnitude in dB and the phase in degrees."""
    if ratio.values is None or frequencies is None:
        return None
    s = 2j * np.pi * frequencies
    above, below = (np.polynomial.polynomial.polyval(s, row) for row in ratio.values)
    quotient = above / below
    return (
        above.real,
        above.imag,
        below.real,
        below.imag,
        20 * np.log10(np.abs(quotient)),
        np.degrees(np.angle(quotient)),
    )


def _whole(numeric: Sequence[Numeric | None], factor: float | None, count: int) -> Numeric | None:
    if factor is None or any(n is None for n in numeric):
        return None
    known = [n for n in numeric if n is not None]
    magnitude = sum((n[4] for n in known[:count]), np.zeros(STEPS + 1))
    raw = sum((n[5] for n in known[:count]), np.zeros(STEPS + 1))
    steps = np.mod(np.diff(raw) + 180, 360) - 180
    phase = np.mod(raw[0] + 180, 360) - 180 + np.concatenate([[0.0], np.cumsum(steps)])
    target = known[count][4] + 20 * math.log10(factor)
    return magnitude, raw, phase, target, magnitude - target


def _at(column: NDArray[np.float64] | None, k: int) -> float | None:
    return None if column is None else float(column[k])


def _put_ratio(page: Page, start: int, ratio: Polynomials, numeric: Numeric | None, k: int) -> None:
    omega = reference(page.row, 1)
    real = [reference(page.row, start + j) for j in range(4)]
    texts = [part for row in (ratio.above, ratio.below) for part in (_even(row, omega), _odd(row, omega))]
    above, below, cross = f"{real[0]}^2+{real[1]}^2", f"{real[2]}^2+{real[3]}^2", _products(real)
    texts += [f"10*LOG10(({above})/({below}))", f"DEGREES(ATAN2({cross[0]},{cross[1]}))"]
    for j, text in enumerate(texts):
        page.put(start + j, Formula(text, None if numeric is None else float(numeric[j][k])))


def _products(real: Sequence[str]) -> tuple[str, str]:
    """Return the real and the imaginary part of the numerator times the conjugate denominator."""
    a, b, c, d = real
    return f"{a}*{c}+{b}*{d}", f"{b}*{c}-{a}*{d}"


def _even(row: Sequence[str], omega: str) -> str:
    return _in_square(row[0::2], omega) or "0"


def _odd(row: Sequence[str], omega: str) -> str:
    inner = _in_square(row[1::2], omega)
    return f"{omega}*({inner})" if inner else "0"


def _in_square(coefficients: Sequence[str], omega: str) -> str:
    """Return a polynomial in -omega^2, from the highest power down."""
    text = ""
    for coefficient in reversed(coefficients):
        text = f"{coefficient}-{omega}^2*({text})" if text else coefficient
    return text


def _put_whole(page: Page, count: int, factor: str, whole: Numeric | None, k: int) -> None:
    row, start = page.row, 8 + 6 * count
    magnitudes, phases = (
        "+".join(reference(row, 2 + 6 * j + which) for j in range(count)) for which in (4, 5)
    )
    raw = reference(row, start + 1)
    turned = f"MOD({raw}+180,360)-180"
    if k:
        turned = f"{reference(row - 1, start + 2)}+MOD({raw}-{reference(row - 1, start + 1)}+180,360)-180"
    target = f"{reference(row, 2 + 6 * count + 4)}+20*LOG10({factor})"
    departure = f"{reference(row, start)}-{reference(row, start + 3)}"
    for j, text in enumerate((magnitudes, phases, turned, target, departure)):
        page.put(start + j, Formula(text, None if whole is None else float(whole[j][k])), "number")
