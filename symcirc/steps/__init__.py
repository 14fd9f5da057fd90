"""A derivation line by line, as a careful person writes it."""

from symcirc.steps.derive import steps_of
from symcirc.steps.model import Step, Steps

__all__ = ["Step", "Steps", "steps_of"]
