"""Where an axis has its marks, and what is written there: engineering units, real minus signs."""

from __future__ import annotations

from math import ceil, floor, log10

from symcirc.transfer.engineering import PREFIXES, engineering

#: At most so many marks on an axis.
_MOST = 8
#: How the sheet's units are written in a picture.
SIGNS = {"ohm": "Ω", "S": "S", "Hz": "Hz", "s": "s", "rad/s": "rad/s", "": ""}


def with_minus(text: str) -> str:
    """Return a number with a minus sign for its hyphen."""
    return text.replace("-", "−")


def frequency_label(hertz: float) -> str:
    """Return a frequency as it stands at an axis.

    >>> frequency_label(1000.0), frequency_label(0.05)
    ('1 kHz', '50 mHz')
    """
    return engineering(hertz, "Hz", 3)


def frequency_marks(low: float, high: float) -> tuple[list[float], list[float]]:
    """Return the frequencies that are labelled, and those that only have a mark.

    Over two decades and less 1, 2 and 5 are labelled, over less than one round numbers at equal steps, over more the
    decades, and over very many each second or third.

    >>> frequency_marks(20.0, 500.0)[0]
    [20.0, 50.0, 100.0, 200.0, 500.0]
    """
    if high / low < 6:
        return even_marks(low, high), []
    decades = range(floor(log10(low) - 1e-9), ceil(log10(high) + 1e-9) + 1)
    every = max(1, ceil(log10(high / low) / _MOST))
    digits = (1, 2, 5) if log10(high / low) <= 2.3 else (1,)
    inside = [
        (m, d, m * 10.0**d)
        for d in decades
        for m in range(1, 10)
        if low * 0.999999 <= m * 10.0**d <= high * 1.000001
    ]
    labelled = [f for m, d, f in inside if m in digits and d % every == 0]
    others = [f for _, _, f in inside if f not in labelled] if every == 1 else []
    return labelled, others


def even_marks(low: float, high: float, steps: tuple[float, ...] = (1.0, 2.0, 5.0)) -> list[float]:
    """Return round numbers from ``low`` to ``high``, at most eight; ``steps`` are the step's first digits.

    >>> even_marks(-0.3, 1.2), even_marks(-270.0, 0.0, (1.5, 3.0, 4.5, 9.0))
    ([-0.2, 0.0, 0.2, 0.4, 0.6, 0.8, 1.0, 1.2], [-270.0, -225.0, -180.0, -135.0, -90.0, -45.0, 0.0])
    """
    least = (high - low) / (_MOST - 0.5)
    power = 10.0 ** floor(log10(least))
    step = min(m * p for m in steps for p in (power / 10, power, 10 * power) if m * p >= least)
    return [
        round(k * step, 12 - floor(log10(step))) + 0.0
        for k in range(ceil(low / step - 1e-9), floor(high / step + 1e-9) + 1)
    ]


def prefixed(largest: float, unit: str) -> tuple[float, str]:
    """Return by what to divide an axis's numbers, and the unit that they then have.

    >>> prefixed(0.0012, "s"), prefixed(7540.0, "rad/s")
    ((0.001, 'ms'), (1000.0, 'krad/s'))
    """
    sign = SIGNS[unit]
    if largest <= 0 or not unit:
        return 1.0, sign
    exponent = max(-12, min(12, floor(log10(largest) + 1e-9) // 3 * 3))
    return 10.0**exponent, PREFIXES[exponent].replace("u", "µ") + sign


def level_label(level_db: float, unit: str) -> str:
    """Return what stands at a mark of the gain's axis: dB, or for a ratio with a unit its size.

    >>> level_label(-40.0, ""), level_label(60.0, "ohm")
    ('−40', '1 kΩ')
    """
    if not unit:
        return with_minus(f"{level_db:g}")
    return engineering(10 ** (level_db / 20), SIGNS[unit], 3).replace("u", "µ")
