"""The published stages as data: one list, from which tests of every module draw."""

from __future__ import annotations

from tests.published.passive_and_active_devices import PASSIVE_AND_ACTIVE_DEVICES
from tests.published.several_amplifiers import SEVERAL_AMPLIFIERS
from tests.published.single_amplifier import SINGLE_AMPLIFIER
from tests.published.stage import Stage

STAGES: list[Stage] = [*SINGLE_AMPLIFIER, *SEVERAL_AMPLIFIERS, *PASSIVE_AND_ACTIVE_DEVICES]
