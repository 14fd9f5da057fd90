"""Short ways to read a sheet in tests."""

from __future__ import annotations

import pytest

from symcirc.complaints import Complaint, Source
from symcirc.sheet import Sheet, read_sheet

#: A circuit and an ask, for tests of other lines.
BASE = "in -- R1 -- out -- C1 -- gnd\nask H = V_out/V_in\n"


def read(*lines: str, file: str = "test.stage") -> Sheet:
    """Read the lines as one sheet."""
    return read_sheet(Source(file, "\n".join(lines)))


def complaint(*lines: str) -> Complaint:
    """Return the complaint that the lines get."""
    with pytest.raises(Complaint) as raised:
        read(*lines)
    return raised.value


def wires(sheet: Sheet) -> dict[str, tuple[str, str]]:
    """Return the two nodes of every part."""
    return {part.name: (part.first, part.second) for part in sheet.parts}
