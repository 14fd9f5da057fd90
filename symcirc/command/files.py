"""Files that are written whole or not at all, and over an existing one only when told so."""

from __future__ import annotations

import os
import tempfile
from pathlib import Path

from symcirc.complaints import Complaint, Place, Source

#: What others may do with a file that was written: read it.
MODE = 0o644


def refuse_existing(path: Path) -> None:
    """Raise Complaint for a file that is there already."""
    if os.path.lexists(path):  # a link that leads nowhere takes the name, too
        raise refuse_file(path, "is there already", "give another name, or write over it: --replace")


def refuse_file(path: Path, fault: str, mend: str) -> Complaint:
    """Return the complaint about a file that cannot be written."""
    return Complaint(Place(1, 1, 2, Source(str(path), "")), f"the file {fault}", mend)


def write_whole(path: Path, data: bytes, *, replace: bool) -> None:
    """Write a file whole or not at all, over an existing one only with ``replace``.

    The data goes to a file beside it first, which then takes the name in one step.

    Raises Complaint where the file is there already, and where it cannot be written.
    """
    if not replace:
        refuse_existing(path)
    try:
        handle, name = tempfile.mkstemp(prefix=f".{path.name[:40]}.", dir=path.parent)
    except OSError as error:
        raise _unwritten(path, error) from None
    beside = Path(name)
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(data)
        beside.chmod(MODE)
        if replace:
            beside.replace(path)
        else:
            os.link(beside, path)  # fails where the name was taken meanwhile, in one step
    except FileExistsError:
        refuse_existing(path)
    except OSError as error:
        raise _unwritten(path, error) from None
    finally:
        beside.unlink(missing_ok=True)


def _unwritten(path: Path, error: OSError) -> Complaint:
    reason = (error.strerror or "it cannot be written").lower()
    return refuse_file(path, f"cannot be written: {reason}", "give a path in a folder of your own")
