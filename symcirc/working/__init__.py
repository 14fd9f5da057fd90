"""The check of hand algebra: a working read line by line, every line judged against the circuit."""

from symcirc.working.check import check, check_posed
from symcirc.working.records import Checked, Equation, Line

__all__ = ["Checked", "Equation", "Line", "check", "check_posed"]
