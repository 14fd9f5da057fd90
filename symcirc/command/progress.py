"""Progress of long work: one line on a terminal, rewritten in place, after the first second."""

from __future__ import annotations

import sys
import time


class ProgressLine:
    """Shows lines on standard error while it is a terminal; the rest of the program only calls it."""

    def __init__(self) -> None:
        self._begun = self._shown_at = time.monotonic()
        self._shown = False

    def __call__(self, line: str) -> None:
        """Show a line, at most five times a second and not within the first second."""
        now = time.monotonic()
        if now - self._begun < 1 or now - self._shown_at < 0.2 or not sys.stderr.isatty():
            return
        self._shown, self._shown_at = True, now
        sys.stderr.write(f"\r\x1b[K{line[:100]} ... (Ctrl-C stops)")
        sys.stderr.flush()

    def clear(self) -> None:
        """Take the line away again."""
        if self._shown:
            sys.stderr.write("\r\x1b[K")
            sys.stderr.flush()
            self._shown = False
