"""stagewright: symbolic derivation of op-amp stages, from one text file, the stage sheet."""

__version__ = "0.1.0"
