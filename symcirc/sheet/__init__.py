"""The stage sheet: text to plain records, each with its place. Knows no circuit theory."""

from symcirc.sheet.model import Sheet
from symcirc.sheet.read import decode, read_sheet

__all__ = ["Sheet", "decode", "read_sheet"]
