"""stagewright: symbolic derivation of op-amp stages, from one text file, the stage sheet."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:  # both are imported when they are needed, so that `import symcirc` is short
    from symcirc.derivation import Derivation
    from symcirc.working.records import Checked

__version__ = "0.1.0"
__all__ = ["__version__", "check", "derive"]


def derive(sheet: str) -> Derivation:
    """Derive the transfer functions of everything that a stage sheet asks, its amplifiers ideal.

    ``sheet`` is the sheet's text. Returns plain records: ``answer(NAME).function`` has the coefficients of
    numerator and denominator in ascending powers of s, ``remarks`` what is odd but solvable. Raises
    :class:`symcirc.complaints.Complaint` for what cannot be read or solved, with its place.

    >>> derivation = derive("in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in")
    >>> function = derivation.answer("H").function
    >>> function.numerator, function.denominator
    ((1,), (1, R1*C1))
    """
    from symcirc.complaints import Source
    from symcirc.derivation import derive as derive_posed
    from symcirc.derivation import pose
    from symcirc.sheet import read_sheet

    return derive_posed(pose(read_sheet(Source("sheet", sheet))))


def check(sheet: str, working: str) -> Checked:
    """Check a working, a person's hand algebra, against a stage sheet, its amplifiers ideal.

    ``sheet`` and ``working`` are texts; a working is read as LaTeX where it holds a display environment. Returns
    plain records: ``lines`` with a verdict each, and for a false one its slip and whole mended lines; ``missing``.
    Raises :class:`symcirc.complaints.Complaint` for a sheet that cannot be solved or a working without any line.

    >>> sheet = "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"
    >>> checked = check(sheet, "(V_in - V_out)/R1 = s C1 V_out\\nV_out/V_in = 1/(1 - s R1 C1)")
    >>> [(line.verdict, line.suggestions) for line in checked.lines]
    [('holds', ()), ('fails', ('V_out/V_in = 1/(1 + s R1 C1)',))]
    """
    from symcirc.complaints import Source
    from symcirc.derivation import pose
    from symcirc.sheet import read_sheet
    from symcirc.slips import check_and_mend
    from symcirc.working.latex import is_latex

    name = "working.tex" if is_latex(working) else "working"
    return check_and_mend(pose(read_sheet(Source("sheet", sheet))), Source(name, working))
