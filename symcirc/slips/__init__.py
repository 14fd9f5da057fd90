"""The search for slips: what a person may have meant by a false line."""

from symcirc.slips.check import check_and_mend

__all__ = ["check_and_mend"]
