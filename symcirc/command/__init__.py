"""The command line: reads words, calls the verb, and turns what goes wrong into words and an exit status.

Nothing heavy is imported here, so that help and mistakes in the call come at once.
"""

from symcirc.command.main import main

__all__ = ["main"]
