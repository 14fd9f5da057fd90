"""Published stages as transfer functions, written down as their handbooks print them (all from memory)."""

from collections.abc import Sequence

from sympy import QQ
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.function import TransferFunction


def _stage(
    ring: PolyRing, numerator: Sequence[PolyElement | int], denominator: Sequence[PolyElement | int]
) -> TransferFunction:
    return TransferFunction(ring, tuple(map(ring, numerator)), tuple(map(ring, denominator)))


def _ring(names: str) -> tuple[PolyRing, tuple[PolyElement, ...]]:
    ring = PolyRing(names.split(), QQ)
    return ring, ring.gens


def first_order_low_pass() -> TransferFunction:
    ring, (r1, c1) = _ring("R1 C1")
    return _stage(ring, [1], [1, r1 * c1])


def first_order_high_pass_with_gain() -> TransferFunction:
    """A high-pass RC before an amplifier with the gain 1 + R3/R2."""
    ring, (r1, r2, r3, c1) = _ring("R1 R2 R3 C1")
    return _stage(ring, [0, (r2 + r3) * r1 * c1], [r2, r2 * r1 * c1])


def positive_feedback_low_pass() -> TransferFunction:
    """R. P. Sallen and E. L. Key, "A practical method of designing RC active filters" (1955): gain k."""
    ring, (r1, r2, c1, c2, k) = _ring("R1 R2 C1 C2 k")
    return _stage(ring, [k], [1, c2 * (r1 + r2) + r1 * c1 * (1 - k), r1 * r2 * c1 * c2])


def unity_gain_low_pass() -> TransferFunction:
    """The same with k = 1, R. P. Sallen and E. L. Key (1955)."""
    ring, (r1, r2, c1, c2) = _ring("R1 R2 C1 C2")
    return _stage(ring, [1], [1, c2 * (r1 + r2), r1 * r2 * c1 * c2])


def equal_parts_low_pass() -> TransferFunction:
    """The same with R1 = R2 = R and C1 = C2 = C, R. P. Sallen and E. L. Key (1955)."""
    ring, (r, c, k) = _ring("R C k")
    return _stage(ring, [k], [1, r * c * (3 - k), r**2 * c**2])


def positive_feedback_high_pass() -> TransferFunction:
    """R. P. Sallen and E. L. Key (1955): C1 and C2 in series, R1 back to their node, R2 to ground, gain k."""
    ring, (r1, r2, c1, c2, k) = _ring("R1 R2 C1 C2 k")
    d1 = r1 * (c1 + c2) + r2 * c2 * (1 - k)
    return _stage(ring, [0, 0, k * r1 * r2 * c1 * c2], [1, d1, r1 * r2 * c1 * c2])


def positive_feedback_band_pass() -> TransferFunction:
    """R. P. Sallen and E. L. Key (1955): R1 in, C1 to ground, C2 on, R2 to ground, R3 back, gain k."""
    ring, (r1, r2, r3, c1, c2, k) = _ring("R1 R2 R3 C1 C2 k")
    d1 = r2 * r3 * c2 + r1 * r3 * c1 + r1 * r3 * c2 + (1 - k) * r1 * r2 * c2
    return _stage(ring, [0, k * r2 * r3 * c2], [r1 + r3, d1, r1 * r2 * r3 * c1 * c2])


def multiple_feedback_low_pass() -> TransferFunction:
    """L. P. Huelsman and P. E. Allen, "Introduction to the Theory and Design of Active Filters" (1980)."""
    ring, (r1, r2, r3, c1, c2) = _ring("R1 R2 R3 C1 C2")
    d1 = c2 * (r1 * r2 + r1 * r3 + r2 * r3)
    return _stage(ring, [-r2], [r1, d1, r1 * r2 * r3 * c1 * c2])


def multiple_feedback_band_pass() -> TransferFunction:
    """L. P. Huelsman and P. E. Allen (1980): R1 in, R2 to ground, R3 back."""
    ring, (r1, r2, r3, c1, c2) = _ring("R1 R2 R3 C1 C2")
    return _stage(ring, [0, -r2 * r3 * c1], [r1 + r2, r1 * r2 * (c1 + c2), r1 * r2 * r3 * c1 * c2])


def multiple_feedback_high_pass() -> TransferFunction:
    """L. P. Huelsman and P. E. Allen (1980): C1 in, C2 back, C3 on, R1 to ground, R2 back."""
    ring, (r1, r2, c1, c2, c3) = _ring("R1 R2 C1 C2 C3")
    return _stage(ring, [0, 0, -r1 * r2 * c1 * c3], [1, r1 * (c1 + c2 + c3), r1 * r2 * c2 * c3])


def two_integrator_low_pass() -> TransferFunction:
    """J. Tow (1968) and L. C. Thomas, "The biquad" (1971): R1 damps, R2 closes the loop, R4 in."""
    ring, (r1, r2, r3, r4, c1, c2) = _ring("R1 R2 R3 R4 C1 C2")
    return _stage(ring, [-r1 * r2], [r1 * r4, r2 * r3 * r4 * c2, r1 * r2 * r3 * r4 * c1 * c2])


def two_integrator_band_pass() -> TransferFunction:
    """The band-pass output of the same biquad (Tow 1968, Thomas 1971)."""
    ring, (r1, r2, r3, r4, c1, c2) = _ring("R1 R2 R3 R4 C1 C2")
    d1 = r2 * r3 * r4 * c2
    return _stage(ring, [0, -r1 * r2 * r3 * c2], [r1 * r4, d1, r1 * r2 * r3 * r4 * c1 * c2])


def state_variable(output: str) -> TransferFunction:
    """W. J. Kerwin, L. P. Huelsman, R. W. Newcomb, "State-variable synthesis ..." (1967).

    R1 from the input, R2 from the low-pass, R3 from the high-pass to the summing amplifier's minus, R4 from the
    band-pass and R5 from ground to its plus; R6, C1 and R7, C2 integrate.
    """
    ring, (r1, r2, r3, r4, r5, r6, r7, c1, c2) = _ring("R1 R2 R3 R4 R5 R6 R7 C1 C2")
    d2 = r1 * r2 * (r4 + r5) * r6 * r7 * c1 * c2
    d1 = (r1 * r2 + r1 * r3 + r2 * r3) * r5 * r7 * c2
    denominator = [r1 * r3 * (r4 + r5), d1, d2]
    front = r2 * r3 * (r4 + r5)
    numerators = {
        "low": [-front],
        "band": [0, front * r7 * c2],
        "high": [0, 0, -front * r6 * r7 * c1 * c2],
    }
    return _stage(ring, numerators[output], denominator)


def twin_t_notch() -> TransferFunction:
    """The twin-T with R, R, R/2, C, C, 2C and the feedback k to its foot (from memory of handbooks)."""
    ring, (r, c, k) = _ring("R C k")
    return _stage(ring, [1, 0, r**2 * c**2], [1, 4 * r * c * (1 - k), r**2 * c**2])


def bridged_notch() -> TransferFunction:
    """T. Deliyannis, "High-Q factor circuit with reduced sensitivity" (1968), fed at both inputs.

    R1 in, C1 back and C2 on from their node, R2 back, the share b of the input at the plus input. It is a notch
    or an all-pass as b is chosen.
    """
    ring, (r1, r2, c1, c2, b) = _ring("R1 R2 C1 C2 b")
    d1, d2 = r1 * (c1 + c2), r1 * r2 * c1 * c2
    return _stage(ring, [b, b * d1 - (1 - b) * r2 * c2, b * d2], [1, d1, d2])


def divided_notch() -> TransferFunction:
    """The same with the divider R3 (from the input), R4 (to ground) for b (Deliyannis 1968)."""
    ring, (r1, r2, r3, r4, c1, c2) = _ring("R1 R2 R3 R4 C1 C2")
    d1, d2 = r1 * (c1 + c2), r1 * r2 * c1 * c2
    numerator = [r4, r4 * d1 - r3 * r2 * c2, r4 * d2]
    return _stage(ring, numerator, [r3 + r4, (r3 + r4) * d1, (r3 + r4) * d2])


def first_order_all_pass() -> TransferFunction:
    """The phase shifter with one amplifier: R3 in, R4 back, R1 and C1 to the plus input (handbooks)."""
    ring, (r1, r3, r4, c1) = _ring("R1 R3 R4 C1")
    return _stage(ring, [r3, -r4 * r1 * c1], [r3, r3 * r1 * c1])


def three_pole_low_pass() -> TransferFunction:
    """P. R. Geffe, "How to build high-quality filters out of low-quality parts" (1976): one unity-gain amplifier.

    R1, C1 to ground, R2, C2 back from the output, R3, C3 to ground.
    """
    ring, (r1, r2, r3, c1, c2, c3) = _ring("R1 R2 R3 C1 C2 C3")
    d1 = c1 * r1 + c3 * (r1 + r2 + r3)
    d2 = c1 * c3 * r1 * (r2 + r3) + c2 * c3 * r3 * (r1 + r2)
    return _stage(ring, [1], [1, d1, d2, r1 * r2 * r3 * c1 * c2 * c3])


def three_pole_high_pass() -> TransferFunction:
    """The same with resistors and capacitors exchanged: s becomes 1/s (Geffe 1976)."""
    ring, (r1, r2, r3, c1, c2, c3) = _ring("R1 R2 R3 C1 C2 C3")
    # In the low-pass R becomes 1/C and C becomes 1/R; all is multiplied by the product of the parts.
    d1 = r2 * c2 * c3 * r3 + r1 * r2 * (c2 * c3 + c1 * c3 + c1 * c2)
    d2 = r2 * (c3 + c2) + r1 * (c2 + c1)
    every = r1 * r2 * r3 * c1 * c2 * c3
    return _stage(ring, [0, 0, 0, every], [1, d2, d1, every])


def series_resonance() -> TransferFunction:
    """The voltage at C of R, L and C in series (any textbook)."""
    ring, (r1, l1, c1) = _ring("R1 L1 C1")
    return _stage(ring, [1], [1, r1 * c1, l1 * c1])


def ladder_low_pass() -> TransferFunction:
    """Two RC sections in a row without an amplifier (any textbook): its poles are real."""
    ring, (r1, r2, c1, c2) = _ring("R1 R2 C1 C2")
    return _stage(ring, [1], [1, r1 * c1 + (r1 + r2) * c2, r1 * r2 * c1 * c2])


def doubly_terminated_ladder() -> TransferFunction:
    """Source R1, L1 in series, C1 across the load R2 (any textbook)."""
    ring, (r1, r2, l1, c1) = _ring("R1 R2 L1 C1")
    return _stage(ring, [r2], [r1 + r2, l1 + r1 * r2 * c1, l1 * r2 * c1])
