"""One call of the program, from its words to its exit status."""

from __future__ import annotations

import os
import sys
from argparse import Namespace
from collections.abc import Sequence

from symcirc.command.progress import ProgressLine
from symcirc.command.words import read_words

DONE, MEND, FAULT, STOPPED = 0, 2, 70, 130


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one call of ``stagewright`` and return its exit status: 0, 1, 2, 70, or 130 after Ctrl-C."""
    words = read_words(arguments)
    progress = ProgressLine()
    try:
        status = _run(words, progress)
        sys.stdout.flush()
        return status
    except KeyboardInterrupt:
        progress.clear()
        print("stopped; nothing was written", file=sys.stderr)
        return STOPPED
    except BrokenPipeError:  # the reader of our output has gone, as `| head` does
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return DONE
    except Exception as error:  # the last line of defence: a user never sees a traceback
        progress.clear()
        if os.environ.get("STAGEWRIGHT_TRACEBACK"):
            raise
        print(
            f"stagewright: a fault of the program itself: {type(error).__name__}: {error}\n"
            "mend: please report it with the sheet; STAGEWRIGHT_TRACEBACK=1 shows where it happened",
            file=sys.stderr,
        )
        return FAULT
    finally:
        progress.clear()


def _run(words: Namespace, progress: ProgressLine) -> int:
    """Run the verb; a complaint goes to standard error in words and, where asked for, to output as JSON."""
    from symcirc.complaints import Complaint

    try:
        from symcirc.command.verbs import VERBS

        return VERBS[words.verb](words, progress)
    except Complaint as complaint:
        progress.clear()
        if words.json:
            import json

            print(json.dumps({"error": complaint.as_json()}))
        print(complaint, file=sys.stderr)
        return MEND
