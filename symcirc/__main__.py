"""``python -m symcirc`` is the same as ``stagewright``."""

import sys

from symcirc.command import main

sys.exit(main())
