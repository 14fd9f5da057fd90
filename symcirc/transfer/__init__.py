"""The transfer function: its making, its standard form, how it is written and evaluated."""
