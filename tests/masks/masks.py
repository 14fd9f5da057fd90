"""Masks from lines of a sheet, for the tests."""

from __future__ import annotations

from symcirc.complaints import Source
from symcirc.masks.mask import Mask, read_mask
from symcirc.sheet import read_sheet

CIRCUIT = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"


def sheet_text(*limits: str) -> str:
    """Return a sheet with limits of its ask H; the first stands on line 3."""
    return CIRCUIT + "".join(f"limit H: {limit}\n" for limit in limits)


def mask(*limits: str) -> Mask:
    """Return limits as a mask."""
    return read_mask(read_sheet(Source("m.stage", sheet_text(*limits))), "H")
